package cli

import (
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
	"time"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// rowID reads the lot and part of a row: numbers, or both together in the part's column as written on a bag, 12-07. A missing one is 0.
func rowID(row entry.Row) (inventory.ID, error) {
	var id inventory.ID
	if strings.Contains(row.Part, "-") {
		id, err := inventory.ParseID(row.Part)
		if err == nil && row.Lot != "" && row.Lot != strconv.FormatUint(uint64(id.Lot), 10) {
			err = fmt.Errorf("part %s is not of lot %q", id, row.Lot)
		}
		return id, err
	}
	for _, n := range []struct {
		name, text string
		to         *uint32
	}{{"lot", row.Lot, &id.Lot}, {"part", row.Part, &id.Number}} {
		if n.text == "" {
			continue
		}
		x, err := strconv.ParseUint(n.text, 10, 32)
		if err != nil || x == 0 {
			return id, &entry.Error{
				Of: n.name, Problem: fmt.Sprintf("%q is no number", n.text), Hint: "lots and parts are numbered from 1, as written on the bag: 12-07",
			}
		}
		*n.to = uint32(x)
	}
	if id.Lot == 0 && id.Number != 0 {
		return id, &entry.Error{Of: "lot", Problem: "the part has a number and no lot"}
	}
	return id, nil
}

// place finds where a row belongs and makes the record that is to be kept. A lot is returned where it is to be loaded first. What does not
// fit is a [*entry.CellError].
func (s *screeningRun) place(r judgedRow) (*inventory.Lot, *inventory.Part, error) {
	wrong := func(err error) (*inventory.Lot, *inventory.Part, error) {
		return nil, nil, &entry.CellError{Line: r.row.Line, Err: err}
	}
	id, err := rowID(r.row)
	if err != nil {
		return wrong(err)
	}
	if first, twice := s.rows[id]; twice && id.Number != 0 {
		return wrong(fmt.Errorf("part %s stands in line %d already", id, first))
	}
	for _, given := range s.newLots {
		if id.Lot != 0 && given.ID == id.Lot {
			return wrong(&entry.Error{
				Of: "lot", Problem: fmt.Sprintf("lot %d was given to the rows above that name no lot", id.Lot),
				Hint: "give those rows a lot too, or this one another number",
			})
		}
	}
	part := &inventory.Part{ID: id, Part: r.part, Header: r.row.Header, Place: r.row.Place, Note: r.row.Note, Outcome: r.outcome}
	kind, known, err := s.kindOf(id.Lot, r)
	switch {
	case err != nil:
		return nil, nil, err
	case known && kind != r.row.Book.Kind:
		return wrong(&entry.Error{
			Of: "kind", Problem: fmt.Sprintf("lot %d is of kind %s, this part of kind %s", id.Lot, kind, r.row.Book.Kind),
			Hint: "a lot holds one kind; give the part another lot",
		})
	case !known:
		return s.newLot(id.Lot, r), part, nil
	}
	if id.Number != 0 && !s.again {
		held, err := s.w.Has(id.Lot, id.Number)
		if err != nil {
			return nil, nil, err
		}
		if held {
			return wrong(&entry.Error{Problem: fmt.Sprintf("the workbook holds part %s already", id), Hint: "--again replaces it"})
		}
	}
	return nil, part, nil
}

// kindOf returns the kind of a lot, and whether there is one. Lot 0 is the new lot of the row's kind.
func (s *screeningRun) kindOf(lot uint32, r judgedRow) (screening.Kind, bool, error) {
	if lot == 0 {
		_, made := s.newLots[r.row.Book.Kind]
		return r.row.Book.Kind, made, nil
	}
	if kind, known := s.lots[lot]; known {
		return kind, true, nil
	}
	l, err := s.w.Lot(lot)
	switch {
	case errors.Is(err, inventory.ErrNotFound):
		return "", false, nil
	case err != nil:
		return "", false, err
	}
	s.lots[lot], s.headers[lot] = l.Kind, l.Header
	return l.Kind, true, nil
}

// newLot makes the lot of a row. A numbered lot claims what its first row claims; one without a number gathers whatever has none.
func (s *screeningRun) newLot(id uint32, r judgedRow) *inventory.Lot {
	l := &inventory.Lot{ID: id, Kind: r.row.Book.Kind, Source: r.row.Source, Place: r.row.Place}
	if id == 0 {
		l.Mixed, l.Note = true, "screened from "+s.name
		s.newLots[l.Kind] = l
		return l
	}
	l.Header, l.Claim = r.row.Header, r.part.Claim
	s.lots[id], s.headers[id] = l.Kind, l.Header
	return l
}

// enter gives a part its lot, and lets it take the lot's claim and place where they are the same.
func (s *screeningRun) enter(part *inventory.Part, lot *inventory.Lot, row entry.Row) {
	if part.ID.Lot == 0 {
		part.ID.Lot = s.newLots[row.Book.Kind].ID
	}
	if part.ID.Number != 0 {
		s.rows[part.ID] = row.Line
	}
	if header, ok := s.headers[part.ID.Lot]; ok && header == part.Header {
		part.Header, part.Part.Claim = "", screening.Claim{}
	}
	if lot != nil && lot.Place == part.Place {
		part.Place = ""
	}
}

// judged tells what became of a row; part is nil where it is not kept.
func (s *screeningRun) judged(r judgedRow, part *inventory.Part) error {
	if !s.quiet {
		s.progress.step(s.parts + s.wrong)
	}
	if r.failed() {
		s.wrong++
		return s.printWrong(r.row)
	}
	s.parts++
	s.counts[r.judgement.Verdict]++
	if s.quiet {
		return nil
	}
	id, err := rowID(r.row)
	if part != nil {
		id = part.ID
	} else if err != nil {
		id = inventory.ID{}
	}
	if s.json {
		j := judgeJSON(r.row.Book, r.judgement, s.policy, false)
		j.Lot, j.Part, j.Row = &id.Lot, &id.Number, &r.row.Line
		return s.writeJSON(j)
	}
	name := id.String()
	if id.Lot == 0 {
		name = "line " + strconv.Itoa(r.row.Line)
	}
	return s.printPart(name, r)
}

// printPart prints one line a part: id, verdict, what it claims, and why with what was not tested.
func (s *screeningRun) printPart(name string, r judgedRow) error {
	if !s.env.OutTerminal {
		return s.env.table([][]string{{name, r.said[0], r.said[1], r.said[2]}})
	}
	return s.env.line("%-7s %s: %s: %s", name, r.said[0], r.said[1], r.said[2])
}

// jsonWrong is a row that could not be read.
type jsonWrong struct {
	Schema int     `json:"schema"`
	Row    int     `json:"row"`
	Column *int    `json:"column"`
	Name   *string `json:"name"`
	Error  string  `json:"error"`
	Hint   *string `json:"hint"`
}

// printWrong tells what is wrong with a row: each error on standard error, and as JSON on standard output.
func (s *screeningRun) printWrong(row entry.Row) error {
	for _, e := range row.Errors {
		if s.wrong <= maxShownErrors {
			s.progress.clear()
			s.env.report(&failure{err: fmt.Errorf("%s: %w", s.name, e), hint: hintOf(e)})
		}
		if !s.json {
			continue
		}
		out := jsonWrong{Schema: schema, Row: row.Line, Name: text(e.Name), Error: clean(e.Err.Error()), Hint: text(hintOf(e))}
		if e.Column > 0 {
			out.Column = &e.Column
		}
		if err := s.writeJSON(out); err != nil {
			return err
		}
	}
	return nil
}

// jsonCounts is the last line of a screening.
type jsonCounts struct {
	Schema int            `json:"schema"`
	Counts map[string]int `json:"counts"`
	Parts  int            `json:"parts"`
	Wrong  int            `json:"wrong"`
}

func (s *screeningRun) printCounts() error {
	if s.json {
		out := jsonCounts{Schema: schema, Counts: map[string]int{}, Parts: s.parts, Wrong: s.wrong}
		for _, v := range screening.Verdicts() {
			out.Counts[v.String()] = s.counts[v]
		}
		return s.writeJSON(out)
	}
	return s.env.line("%s", countsText(s.parts, s.wrong, func(v screening.Verdict) int { return s.counts[v] }))
}

// countsText words numbers of parts by verdict: "60 parts: 31 accept, 5 reject; 2 rows wrong".
func countsText(parts, wrong int, of func(screening.Verdict) int) string {
	text := strconv.Itoa(parts) + " parts"
	if parts == 1 {
		text = "1 part"
	}
	sep := ": "
	for _, v := range screening.Verdicts() {
		if n := of(v); n > 0 {
			text += sep + strconv.Itoa(n) + " " + v.String()
			sep = ", "
		}
	}
	switch {
	case wrong == 1:
		text += "; 1 row wrong"
	case wrong > 1:
		text += "; " + strconv.Itoa(wrong) + " rows wrong"
	}
	return text
}

// progressEvery is how often the number of parts done is shown.
const progressEvery = 100 * time.Millisecond

// progress shows on standard error how far a screening has come, where that is a terminal that can move its cursor.
type progress struct {
	env   *Env
	last  time.Time
	shown bool
}

func (p *progress) step(n int) {
	if !p.env.ErrTerminal || p.env.dumb() || n == 0 || n%batchRows != 0 {
		return
	}
	if now := time.Now(); now.Sub(p.last) >= progressEvery {
		p.last, p.shown = now, true
		fmt.Fprintf(p.env.Err, "\r%d parts", n)
	}
}

func (p *progress) clear() {
	if p.shown {
		io.WriteString(p.env.Err, "\r\x1b[K")
		p.shown = false
	}
}

func (p *progress) end() { p.clear() }
