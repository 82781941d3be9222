package tui

import (
	"cmp"
	"fmt"
	"slices"
	"strconv"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// gridColumn is one reading as a column of the grid; of a part with sections all of them stand in it.
type gridColumn struct {
	of    screening.Characteristic
	title string
}

// holds reports whether a question belongs into the column.
func (c gridColumn) holds(key string) bool { return strings.HasPrefix(key, string(c.of)+"/") }

// findColumns lists the readings that the walk asks of a part of this lot, then those that some part holds beside them.
func (g *grid) findColumns() {
	g.columns, g.usable, g.sectioned = nil, 0, false
	g.askedColumns(g.walkOf(inventory.Part{ID: inventory.ID{Lot: g.lot.ID}}))
	for i := range g.parts {
		g.heldColumns(&g.parts[i])
		if g.parts[i].Outcome.Verdict.Usable() {
			g.usable++
		}
	}
}

// askedColumns adds the readings that a walk asks.
func (g *grid) askedColumns(w *screening.Walk) {
	for _, q := range w.Questions() {
		if q.Ask == screening.AskReading {
			g.addColumn(q.Field.Name, q.Section)
		}
	}
}

// heldColumns adds the readings that a part holds.
func (g *grid) heldColumns(p *inventory.Part) {
	for i := range p.Part.Readings {
		g.addColumn(p.Part.Readings[i].Of, p.Part.Readings[i].Section)
	}
}

func (g *grid) addColumn(of screening.Characteristic, section string) {
	g.sectioned = g.sectioned || section != ""
	if of == screening.RemainingVoltage.Name || slices.ContainsFunc(g.columns, func(c gridColumn) bool { return c.of == of }) {
		return
	}
	g.columns = append(g.columns, gridColumn{of, g.d.t.clean(g.book.Definition(of).Symbol)})
}

// The widths of the grid's columns.
const (
	lookW    = 7
	claimsW  = 16
	cellW    = 9
	cellsW   = 13 // of a reading of several sections
	verdictW = 11
)

func (g *grid) readingWidth() int {
	if g.sectioned {
		return cellsW
	}
	return cellW
}

// fixedWidth is what the grid's columns take beside the readings.
func (g *grid) fixedWidth() int {
	w := 2 + g.idWidth() + 1 + lookW + 1 + verdictW
	if g.lot.Mixed {
		w += claimsW + 1
	}
	return w
}

func (g *grid) idWidth() int { return max(5, width(g.idText())) }

// tableColumns are the grid's columns for a width: id, claim where the lot is mixed, look, the readings, verdict. Readings that do not fit
// are dropped from the right, but never the one in hand.
func (g *grid) tableColumns(w int) (cols []column, shown []gridColumn) {
	cols = []column{{title: "part", w: g.idWidth()}}
	if g.lot.Mixed {
		cols = append(cols, column{title: "claims", w: claimsW})
	}
	cols = append(cols, column{title: "look", w: lookW})
	shown = slices.Clone(g.columns)
	most := max(0, (w-g.fixedWidth())/(g.readingWidth()+1))
	if q, ok := g.question(); ok && len(shown) > most && most > 0 {
		at := slices.IndexFunc(shown, func(c gridColumn) bool { return c.holds(keyOf(q)) })
		if at >= most {
			shown[most-1] = shown[at]
		}
	}
	shown = shown[:min(most, len(shown))]
	for _, c := range shown {
		cols = append(cols, column{title: c.title, w: g.readingWidth(), right: true})
	}
	return append(cols, column{title: "verdict", w: verdictW}), shown
}

// tableWidth is how wide the grid would like to be.
func (g *grid) tableWidth() int { return g.fixedWidth() + (g.readingWidth()+1)*len(g.columns) + 1 }

// gridRows are the parts of the lot as the table shows them; the last one is the part that is not kept yet.
type gridRows struct {
	g     *grid
	shown []gridColumn
}

func (r gridRows) count() int { return len(r.g.parts) + 1 }

func (r gridRows) cells(i int, dst []string) {
	g, t := r.g, r.g.d.t
	p := inventory.Part{ID: inventory.ID{Lot: g.lot.ID}}
	switch {
	case i == g.cur:
		p = g.part
	case i < len(g.parts):
		p = g.parts[i]
	}
	id := p.ID
	if id.Number == 0 {
		id.Number = g.next
	}
	cells := append(dst[:0], id.String())
	if g.lot.Mixed {
		cells = append(cells, t.clean(p.Header))
	}
	hand := ""
	if i == g.cur && g.pin != "" {
		hand = g.pin
	}
	cells = append(cells, inHand(r.look(p), hand == "look"))
	for _, c := range r.shown {
		in := c.holds(hand)
		section := ""
		if in {
			_, section, _ = strings.Cut(hand, "/")
		}
		cells = append(cells, inHand(t.clean(r.value(p, c, section)), in))
	}
	_ = append(cells, r.verdict(i, p))
}

// inHand marks the cell that is being corrected, without colour.
func inHand(text string, yes bool) string {
	if yes {
		return "[" + text + "]"
	}
	return text
}

func (r gridRows) verdict(i int, p inventory.Part) string {
	t := r.g.d.t
	switch {
	case i >= len(r.g.parts):
		return t.g.pending + " next"
	case i == r.g.cur:
		if _, open := r.g.questionOf(p, r.g.walk, ""); open {
			return t.g.pending + " open"
		}
	}
	if p.Outcome.Verdict == screening.NoVerdict {
		return t.g.pending
	}
	return t.verdictWord(p.Outcome.Verdict)
}

// look is what was seen, by the digit keys of the look.
func (r gridRows) look(p inventory.Part) string {
	if len(p.Part.Look) == 0 {
		return ""
	}
	digits := ""
	for i, c := range r.g.book.Look {
		if fault, _ := p.Part.Seen(c.Name); fault {
			digits += strconv.Itoa(i + 1)
		}
	}
	if digits == "" {
		return "ok"
	}
	return "saw " + digits
}

// value is a reading in its cell: of one section where that is in hand, else of all: "8.4+9.1 µF".
func (r gridRows) value(p inventory.Part, c gridColumn, section string) string {
	var sections, values []string
	for _, reading := range slices.Backward(p.Part.Readings) { // the last one counts
		if reading.Of == c.of && (section == "" || reading.Section == section) && !slices.Contains(sections, reading.Section) {
			sections = append(sections, reading.Section)
			values = append(values, shortValue(reading))
		}
	}
	switch {
	case len(values) > 0:
		return joinSections(sections, values)
	case slices.ContainsFunc(p.Skipped, c.holds):
		return "skipped"
	}
	return ""
}

// joinSections puts the readings of several sections into one text; a unit that they share stands once.
func joinSections(sections, values []string) string {
	order := make([]int, len(sections))
	for i := range order {
		order[i] = i
	}
	slices.SortFunc(order, func(a, b int) int { return cmp.Compare(sections[a], sections[b]) })
	var text strings.Builder
	for n, i := range order {
		number, unit, _ := strings.Cut(values[i], " ")
		if n+1 < len(order) {
			_, next, _ := strings.Cut(values[order[n+1]], " ")
			if unit == next {
				text.WriteString(number + "+")
			} else {
				text.WriteString(values[i] + "+")
			}
			continue
		}
		text.WriteString(values[i])
	}
	return text.String()
}

// shortValue prints a reading in a cell: "2.010 mF", "<100 nA", "OL".
func shortValue(r screening.Reading) string {
	if r.Over {
		return "OL"
	}
	text, _, _ := strings.Cut(entry.Value(r), " (mean")
	if bound, ok := strings.CutPrefix(text, "at most "); ok {
		return "<" + bound
	}
	if bound, ok := strings.CutPrefix(text, "at least "); ok {
		return ">" + bound
	}
	return text
}

// draw shows the lot's line, the prompt, the grid, and the findings of the part in hand.
func (g *grid) draw(w, h int) ([]string, spot) {
	t := g.d.t
	most := max(promptHeight, h-7)
	if slices.ContainsFunc(g.cautions(g.question()), func(c screening.Caution) bool { return c.Level == screening.Danger }) {
		most = max(promptHeight, h-1) // nothing matters more at this step
	}
	prompt, at := g.drawPrompt(w, most)
	f := benchFrameFor(w, h, len(prompt), g.tableWidth(), len(g.parts)+1)
	lines := []string{t.label.paint(fit(g.lotLine(w), w, t.g.more))}
	lines = append(lines, block(prompt, w, len(prompt), t.g.more)...)
	at.y++
	lines = append(lines, t.faint.paint(strings.Repeat(t.g.rule, w)))
	cols, shown := g.tableColumns(f.grid.w)
	g.rows.at = g.cur
	rows := g.rows.draw(t, cols, gridRows{g, shown}, f.grid.w, f.grid.h, nil)
	card := block(t.card(g.card(), f.card.w, f.card.h), f.card.w, f.card.h, t.g.more)
	if f.beside {
		lines = append(lines, beside(rows, card, t.faint.paint(" "+t.g.wall+" "))...)
	} else {
		lines = append(lines, rows...)
		lines = append(lines, t.faint.paint(strings.Repeat(t.g.rule, w)))
		lines = append(lines, card...)
	}
	return block(lines, w, h, t.g.more), at
}

// lotLine names the lot, and how far it is.
func (g *grid) lotLine(w int) string {
	t := g.d.t
	claim := g.lot.Claim.String()
	if g.lot.Mixed {
		claim = "a tin of mixed parts"
	}
	left := fmt.Sprintf(" lot %d  %s  %s", g.lot.ID, g.lot.Kind, claim)
	if g.lot.Place != "" {
		left += "  in " + g.lot.Place
	}
	right := plural(len(g.parts), "part") + ", " + strconv.Itoa(g.usable) + " usable "
	if g.ambient != nil {
		right = t.clean(entry.Value(*g.ambient)) + ", " + right
	}
	return between(t.clean(left), right, w, t.g.more)
}

// card is what is shown of the part in hand; while nothing is known of it, of the part whose verdict came last.
func (g *grid) card() cardData {
	if g.fresh() && g.done >= 0 && g.done < len(g.parts) {
		p := g.parts[g.done]
		w := g.walkOf(p)
		j, err := w.Judgement()
		return cardData{
			id: p.ID.String(), book: g.book, allKey: "F6", part: p, own: inventory.Claimed(p, g.lot).Claim, judged: j, err: err, told: toldAtGate(w),
		}
	}
	q, open := g.question()
	j, err := g.walk.Judgement()
	c := cardData{
		id: g.idText(), book: g.book, allKey: "F6", part: g.part, own: inventory.Claimed(g.part, g.lot).Claim, judged: j, err: err,
		told:      toldAtGate(g.walk),
		unclaimed: q.Ask == screening.AskClaim && g.fresh(), atGate: q.Ask == screening.AskGate,
	}
	_, c.open = g.questionOf(g.part, g.walk, "")
	if open && q.Ask == screening.AskReading {
		c.asked = &q
	}
	c.answered, c.questions = g.progress()
	return c
}

// toldAtGate are the codes of the cautions that the gate has spoken, where it is shut: the volts remaining were found low enough since the
// last test under voltage. The gate will speak them again after the next one.
func toldAtGate(w *screening.Walk) []string {
	var codes []string
	for _, q := range w.Questions() {
		if q.Ask == screening.AskGate && q.Answered {
			for _, c := range q.Cautions {
				codes = append(codes, c.Code)
			}
		}
	}
	return codes
}

// untold leaves out the cautions that were told.
func untold(cautions []screening.Caution, told []string) []screening.Caution {
	return slices.DeleteFunc(slices.Clone(cautions), func(c screening.Caution) bool { return slices.Contains(told, c.Code) })
}

func (g *grid) showFindings() tea.Cmd {
	c, t := g.card(), g.d.t
	step, id := g.cautions(g.question()), g.idText()
	return showPager(&pager{title: "All findings of " + c.id, lines: func(w int) []string {
		var lines []string
		if len(step) > 0 {
			lines = append(append(lines, t.strong.paint("Before the next step with "+id)), t.cautionLines(step, "", w)...)
			lines = append(lines, "")
		}
		return append(lines, t.allOf(c, w)...)
	}})
}

// showRecipe opens the ways to measure what is asked.
func (g *grid) showRecipe() tea.Cmd {
	q, open := g.question()
	t := g.d.t
	switch {
	case open && q.Ask == screening.AskLook:
		return showPager(&pager{title: "What to look for", lines: func(w int) []string { return t.lookLines(q.Checks, w) }})
	case !open || q.Ask != screening.AskReading:
		return g.d.messages.say("F5 says how a reading is measured: go to one with Left or Right")
	}
	var recipes []screening.Recipe
	if g.book.Recipes != nil && q.Limit != nil {
		if j, err := g.walk.Judgement(); err == nil {
			recipes = g.book.Recipes(j.Part, *q.Limit)
		}
	}
	return showPager(&pager{title: "How to measure the " + t.clean(q.Field.Label), lines: func(w int) []string {
		var lines []string
		if q.Field.Help != "" {
			lines = append(append(lines, wrap(t.clean(q.Field.Help), w)...), "")
		}
		if q.Limit != nil {
			lines = append(append(lines, wrap(t.clean("Allowed: "+screening.Allowed(*q.Limit)), w)...), "")
		}
		for _, r := range recipes {
			lines = append(lines, t.strong.paint(t.clean(r.Title)))
			for i, l := range r.Lines {
				lines = append(lines, wrapHang(fmt.Sprintf("%2d  ", i+1), t.clean(l), w, 0, "")...)
			}
			lines = append(lines, "")
			for _, l := range wrapHang("    ", t.clean(r.Source.String()), w, 0, "") {
				lines = append(lines, t.faint.paint(l))
			}
			lines = append(lines, "")
		}
		if len(recipes) == 0 {
			lines = append(lines, "There is no further recipe for it.")
		}
		return lines
	}})
}
