package tui

import (
	"fmt"
	"strconv"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// stockRows are the parts as the table shows them; rows that are not read yet are blank.
type stockRows struct{ s *stock }

func (r stockRows) count() int { return r.s.total }

func (r stockRows) cells(i int, dst []string) {
	t := r.s.d.t
	k := i - r.s.offset
	if k < 0 || k >= len(r.s.rows) {
		for c := range dst {
			dst[c] = ""
		}
		dst[0] = t.g.more
		return
	}
	row := &r.s.rows[k]
	left := strconv.Itoa(row.Left)
	switch row.Count.Level {
	case inventory.About:
		left = "~" + left
	case inventory.Unknown:
		left = "?"
	}
	verdict := t.verdictWord(row.Verdict)
	if row.Stale {
		verdict += " old"
	}
	what := row.Title
	switch {
	case row.As == "":
	case row.Verdict == screening.Regrade:
		what = row.As + " (marked " + row.Title + ")"
	default:
		what += " (" + row.As + ")"
	}
	what = string(row.Kind) + " " + what // "red" or "12 V" says little by itself
	note := row.Why
	if row.NotTested != "" {
		note = "not tested: " + row.NotTested
	}
	texts := [...]string{row.ID.String(), verdict, what, left, row.Place, note}
	for c := range dst {
		dst[c] = t.clean(texts[c])
	}
}

// stockColumns are the list's columns for a width: what there is room for, in the order in which it matters.
func stockColumns(w int) []column {
	cols := []column{{title: "part", w: 8}, {title: "verdict", w: 15}, {title: "what"}, {title: "there", w: 6, right: true}}
	const fixed = 2 + 8 + 1 + 15 + 1 + 1 + 6
	rest := max(1, w-fixed)
	if rest < 28 {
		cols[2].w = rest
		return cols
	}
	place := min(16, rest/4)
	what := min(54, rest-place-1)
	cols[2].w = what
	cols = append(cols, column{title: "place", w: place})
	rest -= what + place + 1
	if rest >= 20 {
		cols = append(cols, column{title: "note", w: rest - 1})
	}
	return cols
}

func (s *stock) draw(w, h int) ([]string, spot) {
	t := s.d.t
	f := stockFrameFor(w, h)
	top, at := s.drawTop(w)
	lines := append(top, t.faint.paint(strings.Repeat(t.g.rule, w)))
	s.visible = max(1, f.list.h-1)
	list := s.drawList(f.list.w, f.list.h)
	detail := block(s.detailLines(f.detail.w, f.detail.h), f.detail.w, f.detail.h, t.g.more)
	if f.beside {
		lines = append(lines, beside(list, detail, t.faint.paint(" "+t.g.wall+" "))...)
	} else {
		lines = append(lines, list...)
		lines = append(lines, t.faint.paint(strings.Repeat(t.g.rule, w)))
		lines = append(lines, detail...)
	}
	return block(lines, w, h, t.g.more), at
}

// drawTop is the filter with the counts, or the question of an act.
func (s *stock) drawTop(w int) ([]string, spot) {
	t := s.d.t
	if s.act != nil {
		return s.drawAct(w)
	}
	const left = " filter "
	fieldW := max(8, min(30, w-len(left)-24))
	text, cursor := s.in.draw(t, fieldW)
	right := plural(s.total, "part") + " "
	if s.usable {
		right = strconv.Itoa(s.total) + " usable of " + plural(s.counts.All(), "part") + " "
	}
	line := between(left+t.field.paint(text), right, w, t.g.more)
	var counts strings.Builder
	for _, v := range append(screening.Verdicts(), screening.NoVerdict) {
		n := s.counts.Of(v)
		word := v.String()
		if v == screening.NoVerdict {
			word = "not judged"
			if n == 0 {
				continue
			}
		}
		fmt.Fprintf(&counts, " %s %d %s ", t.verdictSign(v), n, word)
	}
	return []string{line, t.faint.paint(fit(counts.String(), w, t.g.more))}, spot{x: len(left) + cursor}
}

func (s *stock) drawAct(w int) ([]string, spot) {
	t := s.d.t
	question, hint := s.act.question()
	left := " " + t.clean(question) + " "
	fieldW := max(8, min(40, w-width(left)-1))
	if width(left)+fieldW >= w {
		left = fit(left, max(0, w-fieldW-1), t.g.more)
	}
	text, cursor := s.act.in.draw(t, fieldW)
	under := t.faint.paint(fit(" "+t.clean(hint), w, t.g.more))
	if s.act.problem != nil {
		under = t.error.paint(fit(" "+t.clean(errorText(s.act.problem)), w, t.g.more))
	}
	return []string{fit(t.strong.paint(left)+t.field.paint(text), w, ""), under}, spot{x: width(left) + cursor}
}

func (s *stock) drawList(w, h int) []string {
	t := s.d.t
	if s.total > 0 || !s.known {
		return s.table.draw(t, stockColumns(w), stockRows{s}, w, h, nil)
	}
	text := "The workbook holds no part yet. F2 goes to the bench: measure one."
	if len(s.in.text) > 0 || s.usable {
		text = "No part matches. Esc shows them all again."
	}
	var lines []string
	for _, l := range wrap(text, w-4) {
		lines = append(lines, "  "+l)
	}
	return block(append([]string{""}, lines...), w, h, t.g.more)
}

// detailLines show the selected part.
func (s *stock) detailLines(w, h int) []string {
	row, ok := s.selected()
	if !ok || s.detail == nil || s.detail.part.ID != row.ID || h < 1 {
		return nil
	}
	t := s.d.t
	o := s.detail
	cardH := h
	if h > 14 {
		cardH = h * 3 / 5
	}
	lines := t.card(o.card(s.d), w, cardH)
	for len(lines) > 0 && strings.TrimSpace(lines[len(lines)-1]) == "" {
		lines = lines[:len(lines)-1]
	}
	return append(append(lines, ""), t.keptLines(o, w)...)
}

// card is the part as a card shows it.
func (o *partOpened) card(d *desk) cardData {
	book, _ := d.kinds.Find(o.judged.Part.Kind)
	return cardData{id: o.part.ID.String(), book: book, allKey: "Enter", part: o.part, own: inventory.Claimed(o.part, o.lot).Claim, judged: o.judged, err: o.err}
}

// keptLines are what the workbook knows beside the verdict: place, count, readings, history.
func (t *theme) keptLines(o *partOpened, w int) []string {
	var lines []string
	add := func(label, text string) {
		if text == "" {
			return
		}
		for i, l := range wrapHang(fit(label, 9, t.g.more), t.clean(text), w, 0, "") {
			if i == 0 {
				l = t.label.paint(l[:9]) + l[9:]
			}
			lines = append(lines, l)
		}
	}
	place := o.part.Place
	if place == "" {
		place = o.lot.Place
	}
	add("place", place)
	count := o.part.Count.String()
	if o.part.Taken > 0 {
		count += ", " + strconv.Itoa(o.part.Taken) + " taken"
	}
	add("count", count)
	add("source", o.lot.Source)
	add("stored", o.lot.Storage)
	add("note", strings.TrimSpace(o.part.Note+" "+o.lot.Note))
	for i, r := range o.part.Part.Readings {
		label := ""
		if i == 0 {
			label = "readings"
		}
		text := strings.ReplaceAll(string(r.Of), "-", " ")
		if r.Section != "" {
			text += " " + r.Section
		}
		text += " " + entry.Value(r)
		if !r.At.IsZero() {
			text += " at " + r.At.String()
		}
		if r.Typed != "" {
			text += `  typed "` + r.Typed + `"`
		}
		add(label, text)
	}
	for i := range o.history {
		e := o.history[len(o.history)-1-i]
		label := ""
		if i == 0 {
			label = "history"
		}
		text := e.At.Format("2006-01-02 15:04") + "  " + e.Action
		if e.Text != "" {
			text += " (" + e.Text + ")"
		}
		add(label, text)
	}
	return lines
}

// showAll lays everything that is known of the selected part over the page.
func (s *stock) showAll() tea.Cmd {
	row, ok := s.selected()
	if !ok || s.detail == nil || s.detail.part.ID != row.ID {
		return nil
	}
	o, t, c := s.detail, s.d.t, s.detail.card(s.d)
	return showPager(&pager{title: "All of " + row.ID.String(), lines: func(w int) []string {
		return append(append(t.keptLines(o, w), ""), t.allOf(c, w)...)
	}})
}
