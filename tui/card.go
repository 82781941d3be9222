package tui

import (
	"cmp"
	"math"
	"slices"
	"strconv"
	"strings"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// cardData is what is shown of one part: its verdict with the reasons, and each limit with the reading on it.
type cardData struct {
	id        string
	book      *screening.Rulebook
	part      inventory.Part
	own       screening.Claim // what the part itself, or its lot, claims
	judged    screening.Judgement
	err       error
	open      bool                // something is still asked
	asked     *screening.Question // the reading asked now
	allKey    string              // the key that shows everything of the part
	answered  int
	questions int

	told      []string // codes of cautions that were told and seen to
	unclaimed bool     // what it claims is being asked
	atGate    bool     // the volts remaining are being asked
}

// largeFrom is the height of a card from which the verdict is written in large letters.
const largeFrom = 16

// card shows a part in at most h lines of w cells.
func (t *theme) card(c cardData, w, h int) []string {
	if w < 8 || h < 1 {
		return nil
	}
	lines := []string{t.strong.paint(fit(c.id+"  "+t.clean(c.judged.Part.Claim.String()), w, t.g.more))}
	switch {
	case c.unclaimed:
		return append(lines, t.faint.paint(fit("nothing is known of it yet", w, t.g.more)))
	case c.err != nil:
		for _, l := range wrap(t.clean(errorText(c.err)+"; F9 corrects what it claims"), w) {
			lines = append(lines, t.error.paint(l))
		}
		return lines
	case c.open:
		lines = append(lines, t.openLines(c, w)...)
	default:
		lines = append(lines, t.verdictLines(c, w, h)...)
	}
	return append(lines, t.findingLines(c, w, h-len(lines))...)
}

// openLines say how far a part is that is still being measured.
func (t *theme) openLines(c cardData, w int) []string {
	text := strconv.Itoa(c.answered) + " of " + strconv.Itoa(c.questions) + " readings; no verdict yet"
	if c.atGate {
		text = "measuring begins with the volts that remain"
		if c.answered > 0 {
			text = "the verdict waits for the volts that remain"
		}
	}
	var lines []string
	lines = append(lines, t.faint.paint(fit(text, w, t.g.more)))
	for _, r := range c.judged.Reasons {
		if r.Code == screening.CodeFails || r.Code == screening.CodeUntreated || r.Code == screening.CodeStop {
			lines = append(lines, t.error.paint(fit(t.clean(r.Text), w, t.g.more)))
		}
	}
	for _, s := range c.judged.Stops { // what holds the verdict is best seen to before the readings
		if s.Verdict == screening.Undecided && s.Do != "" {
			for _, l := range wrapHang(t.g.marker+" ", t.clean(s.Do), w, 2, t.g.more) {
				lines = append(lines, t.strong.paint(l))
			}
		}
	}
	return lines
}

// verdictLines are the verdict, large and in words, why, what was not tested, and what to do now.
func (t *theme) verdictLines(c cardData, w, h int) []string {
	j := c.judged
	beside := c.id + " " + j.Verdict.String()
	if g := j.Grade.String(); g != "" {
		beside += ", " + g
	}
	if j.RegradedAs != nil {
		beside += ", as " + t.clean(j.RegradedAs.Text)
	}
	large := h >= largeFrom
	lines := t.banner(j.Verdict, beside, w, large)
	steps, reasons := 1, 2
	if large {
		steps, reasons = 2, 3
	} else if j.RegradedAs != nil {
		lines = append(lines, wrapHang("as ", t.clean(j.RegradedAs.Text), w, 2, t.g.more)...)
	}
	for i, r := range weighty(j.Reasons) {
		if i == reasons || j.RegradedAs != nil && !large && r.Text == j.RegradedAs.Text {
			break
		}
		limit := 2 // what decides is said in full, what comments on it in a line
		if i > 0 && !large {
			limit = 1
		}
		lines = append(lines, wrapHang("", t.clean(r.Text), w, limit, t.g.more)...)
	}
	if untested := c.notTested(); untested != "" {
		for _, l := range wrapHang("not tested: ", t.clean(untested), w, reasons, t.g.more) {
			lines = append(lines, t.label.paint(l))
		}
	}
	if pinout := j.Pinout(c.own); pinout != "" {
		lines = append(lines, wrapHang("pinout ", t.clean(pinout), w, 2, t.g.more)...)
	}
	for _, s := range j.Next[:min(len(j.Next), steps)] {
		for _, l := range wrapHang(t.g.marker+" ", t.clean(s.Text), w, 3, t.g.more) {
			lines = append(lines, t.strong.paint(l))
		}
	}
	if j.Assumed && large {
		lines = append(lines, t.faint.paint(fit("no meter named: its accuracy is assumed", w, t.g.more)))
	}
	warnings := t.cautionLines(untold(j.Cautions, c.told), "", w)
	if room := max(2, h/4); len(warnings) > room {
		warnings = append(warnings[:room-1:room-1], t.danger.paint(fit(t.g.more+" the rest of this warning: "+c.allKey, w, t.g.more)))
	}
	lines = append(lines, warnings...)
	return append(lines, "")
}

// weighty puts the reasons that decide before those that only comment.
func weighty(reasons []screening.Reason) []screening.Reason {
	var first, rest []screening.Reason
	for _, r := range reasons {
		switch r.Code {
		case screening.CodeNote, screening.CodeAssumed:
			rest = append(rest, r)
		default:
			first = append(first, r)
		}
	}
	return append(first, rest...)
}

// notTested lists what was wanted and not measured, and what the evidence leaves unproven.
func (c *cardData) notTested() string {
	var gaps []string
	for _, g := range c.judged.NotTested {
		text := c.nameOf(g.Of, g.Section)
		if !g.At.IsZero() {
			text += " at " + g.At.String()
		}
		gaps = append(gaps, text)
	}
	return strings.Join(append(gaps, c.judged.Untested...), "; ")
}

// headlines chooses one finding per criterion and section: what decides it, at the grade reached. A limit of a stricter grade decides
// nothing where the part was taken at a laxer one: beside an accept it would read as a failure.
func headlines(j screening.Judgement, asked *screening.Question) []screening.Finding {
	var heads []screening.Finding
	rank := func(f *screening.Finding) int {
		r := [...]int{screening.Missing: 0, screening.Close: 1, screening.Pass: 2, screening.Fail: 3}[f.Outcome]
		if f.Limit.Grade == j.Grade || f.Limit.Grade == screening.AnyGrade || j.Grade == screening.AnyGrade && f.Limit.Grade == screening.Serviceable {
			r += 4
		}
		return r
	}
	for i := range j.Findings {
		f := &j.Findings[i]
		at := -1
		for k := range heads {
			if heads[k].Limit.Criterion == f.Limit.Criterion && heads[k].Limit.Section == f.Limit.Section {
				at = k
			}
		}
		switch {
		case at < 0:
			heads = append(heads, *f)
		case rank(f) > rank(&heads[at]):
			heads[at] = *f
		}
	}
	slices.SortStableFunc(heads, func(a, b screening.Finding) int { return cmp.Compare(urgency(a), urgency(b)) })
	if asked != nil && asked.Limit != nil {
		for k := range heads {
			if heads[k].Limit.Criterion == asked.Limit.Criterion && heads[k].Limit.Section == asked.Limit.Section {
				chosen := heads[k]
				return append([]screening.Finding{chosen}, append(heads[:k:k], heads[k+1:]...)...)
			}
		}
	}
	return heads
}

// urgency orders findings: what fails or is too near to call comes first.
func urgency(f screening.Finding) int {
	switch f.Outcome {
	case screening.Fail:
		return 0
	case screening.Close:
		return 1
	}
	return 2
}

// findingLines shows the findings in at most h lines: all in full where there is room, else the first one in full and the others in as
// many lines as are left for each.
func (t *theme) findingLines(c cardData, w, h int) []string {
	heads := headlines(c.judged, c.asked)
	if settled(c.judged.Stops) { // what was not measured does not matter any more
		heads = slices.DeleteFunc(heads, func(f screening.Finding) bool { return f.Evidence() == nil })
	}
	if len(heads) == 0 || h <= 0 {
		return nil
	}
	full := make([][]string, len(heads))
	total := -1
	for i := range heads {
		full[i] = t.finding(&c, &heads[i], w)
		total += len(full[i]) + 1
	}
	var lines []string
	for i := range heads {
		others := len(heads) - 1
		switch {
		case total <= h:
			lines = append(append(lines, full[i]...), "")
		case i == 0 && len(full[0])+others <= h:
			lines = append(lines, full[0]...)
		case i > 0 && len(lines)+2*(len(heads)-i) <= h || i == 0 && 2*len(heads) <= h:
			lines = append(lines, full[i][:2]...)
		default:
			lines = append(lines, t.findingLine(&c, &heads[i], w))
		}
	}
	return lines[:min(len(lines), h)]
}

// settled reports whether a stop decides for good; one that only holds the verdict, as in circuit, leaves the readings to be taken.
func settled(stops []screening.Stop) bool {
	return slices.ContainsFunc(stops, func(s screening.Stop) bool { return s.Verdict != screening.Undecided })
}

// finding shows one limit in full: what was read, the scale, the rule with its numbers, the source.
func (t *theme) finding(c *cardData, f *screening.Finding, w int) []string {
	name, read := t.clean(c.nameOf(f.Limit.On, f.Limit.Section)), t.clean(readingText(f))
	if c.ambiguous(f) {
		name += ": " + t.clean(criterionName(f))
	}
	if width(name)+width(read)+width(outcomeText(f))+3 > w {
		name = t.clean(c.findingName(f))
	}
	lines := []string{
		between(t.strong.paint(name)+"  "+read, t.outcomeInk(f.Outcome).paint(outcomeText(f)), w, t.g.more),
	}
	if !math.IsInf(f.Limit.Low, -1) || !math.IsInf(f.Limit.High, 1) {
		lines = append(lines, t.outcomeInk(f.Outcome).paint(t.labelledScale(f.Limit, f.Evidence(), w)))
	}
	rule := screening.Allowed(f.Limit)
	if formula := f.Limit.FormulaText(); formula != "" {
		rule = formula
	}
	lines = append(lines, wrapHang("  ", t.clean(rule), w, 2, t.g.more)...)
	if f.Converted != nil {
		lines = append(lines, wrapHang("  ", t.clean("brought over: "+f.Converted.Rule), w, 2, t.g.more)...)
	}
	if f.Why != "" && f.Why != "not measured" {
		for _, l := range wrapHang("  ", t.clean(f.Why), w, 2, t.g.more) {
			lines = append(lines, t.label.paint(l))
		}
	}
	for _, l := range wrapHang("  ", t.clean(sourceText(f.Limit)), w, 2, t.g.more) {
		lines = append(lines, t.faint.paint(l))
	}
	return lines
}

// sourceText says how good a limit asks a part to be, how well the figure is known, and where it is from: "serviceable, published: Lelon
// RGA". What is cut where there is no room for it is the document, never how well it is known.
func sourceText(l screening.Limit) string {
	where := strings.TrimSuffix(screening.Source{Document: l.Source.Document, Clause: l.Source.Clause}.String(), " ()")
	text := l.Source.Status.String()
	if g := l.Grade.String(); g != "" {
		text = g + ", " + text
	}
	if where == "" {
		return text
	}
	return text + ": " + where
}

// findingLine shows one limit in a line: its name, what was read, a small scale, the outcome.
func (t *theme) findingLine(c *cardData, f *screening.Finding, w int) string {
	const nameW, valueW, outcomeW = 13, 9, 11 // "unconfirmed" is the longest
	name := fit(t.clean(c.shortName(f, nameW, t.g.more)), nameW, t.g.more) + " "
	value := "none"
	if e := f.Evidence(); e != nil {
		value = t.clean(shortValue(*e))
	}
	line := name + fitRight(value, valueW, t.g.more) + " "
	if room := w - nameW - valueW - outcomeW - 3; room >= 8 {
		line += t.scale(f.Limit, f.Evidence(), room) + " "
	}
	return t.outcomeInk(f.Outcome).paint(fit(line+outcomeText(f), w, t.g.more))
}

func readingText(f *screening.Finding) string {
	e := f.Evidence()
	if e == nil {
		if f.By == screening.ByRating && f.Outcome == screening.Pass {
			return "claimed"
		}
		return ""
	}
	return entry.Measured(*e)
}

func outcomeText(f *screening.Finding) string {
	switch {
	case f.Outcome == screening.Pass && f.NearLimit:
		return "near limit"
	case f.Outcome == screening.Missing && f.Need != screening.Required:
		return "optional"
	case f.Unconfirmed:
		return "unconfirmed"
	}
	return f.Outcome.String()
}

// allOf shows everything that is known of a part: the verdict, every reason, every limit.
func (t *theme) allOf(c cardData, w int) []string {
	if c.err != nil {
		return wrap(t.clean(errorText(c.err)), w)
	}
	j := c.judged
	lines := append([]string{t.strong.paint(t.clean(j.Part.Claim.String()))}, t.banner(j.Verdict, c.id+" "+j.Grade.String(), w, false)...)
	add := func(prefix, text string) { lines = append(lines, wrapHang(prefix, t.clean(text), w, 0, "")...) }
	for _, r := range weighty(j.Reasons) {
		add(t.g.bullet+" ", r.Text)
	}
	if untested := c.notTested(); untested != "" {
		add("not tested: ", untested)
	}
	if pinout := j.Pinout(c.own); pinout != "" {
		add("pinout ", pinout)
	}
	for _, s := range j.Next {
		add(t.g.marker+" ", s.Text)
	}
	for _, caution := range j.Cautions {
		add(strings.ToUpper(caution.Level.String())+": ", caution.Text+" ["+caution.Source.String()+"]")
	}
	lines = append(lines, "", t.faint.paint(fit(t.clean("The parentheses on a scale span ±2 standard uncertainties, about 95 %."), w, t.g.more)), "")
	for i := range j.Findings {
		lines = append(append(lines, t.finding(&c, &j.Findings[i], w)...), "")
	}
	return lines
}
