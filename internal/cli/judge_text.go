package cli

import (
	"math"
	"slices"
	"strings"

	"github.com/mattn/go-runewidth"

	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// formatValue prints a value with its customary digits.
func formatValue(x float64, unit quantity.Unit) string { return quantity.Bound(x, unit) }

// printJudgement prints a judgement for a person: the verdict first, then why, what next, what was not tested, the cautions, and every limit.
func (a *app) printJudgement(book *screening.Rulebook, j screening.Judgement, parsed entry.Parsed, policy screening.Policy) error {
	e := a.env
	meter := policy.Meters[""]
	if err := e.strong(verdictBy(&meter, j)); err != nil {
		return err
	}
	title := book.Label
	if claim := parsed.Claim.String(); claim != "" {
		title += ": " + claim
	}
	if err := e.line("%s", title); err != nil {
		return err
	}
	if err := a.printOfType(book, &j, parsed.Claim); err != nil {
		return err
	}
	if err := a.printWhy(j, book); err != nil {
		return err
	}
	if err := a.printMeter(book, &j, &policy); err != nil {
		return err
	}
	for _, c := range j.Cautions {
		if err := e.printCaution(c); err != nil {
			return err
		}
	}
	if err := a.printFindings(book, j, &policy); err != nil {
		return err
	}
	if len(parsed.Echo) == 0 {
		return nil
	}
	if err := e.line(""); err != nil {
		return err
	}
	if err := e.line("read as"); err != nil {
		return err
	}
	for _, line := range parsed.Echo {
		if err := e.wrapped("  ", line); err != nil {
			return err
		}
	}
	return nil
}

// printOfType prints what the type number brings along: the pinout, and that figures of the user's own table count.
func (a *app) printOfType(book *screening.Rulebook, j *screening.Judgement, own screening.Claim) error {
	if pinout := j.Pinout(own); pinout != "" {
		if err := a.env.wrapped("pinout      ", pinout); err != nil {
			return err
		}
	}
	row, ok := a.types.Lookup(book.Kind, j.Claim.Trait(screening.TraitType))
	if !ok || !row.House {
		return nil
	}
	var ownRatings []string
	for _, r := range j.Claim.Ratings {
		if r.Source.Status == screening.House && r.Source.Document == row.Source.Document {
			ownRatings = append(ownRatings, symbolOf(book, r.Of)+" "+r.String())
		}
	}
	text := "your own row of " + row.Type + " counts"
	if len(ownRatings) > 0 {
		text += ": " + strings.Join(ownRatings, ", ")
	}
	return a.env.wrapped("house       ", text+" ("+row.Source.Document+")")
}

// verdictLine words the verdict with what it is held as: "ACCEPT, serviceable", "REGRADE: as measured, 112 µF".
func verdictLine(j screening.Judgement) string {
	assumed := screening.AssumedMeter()
	return verdictBy(&assumed, j)
}

// verdictBy is the verdict's line for a part that was measured with one meter.
func verdictBy(m *screening.Meter, j screening.Judgement) string {
	text := strings.ToUpper(j.Verdict.String())
	switch {
	case j.RegradedAs != nil && j.Verdict == screening.Regrade:
		text += ": " + j.RegradedAs.Text
	case j.RegradedAs != nil && j.Verdict == screening.Accept:
		text += ": " + j.RegradedAs.Text
	case j.RegradedAs != nil && j.Verdict == screening.Treat:
		text += "; good today: " + j.RegradedAs.Text
	case j.RegradedAs != nil && j.Verdict == screening.Undecided:
		text += "; it may still be: " + j.RegradedAs.Text
	}
	if j.Verdict.Usable() && j.Grade != screening.AnyGrade {
		text += ", " + j.Grade.String()
	}
	if by := meterText(m, &j); by != "" {
		text += " (" + by + ")"
	}
	return text
}

// printWhy prints reasons, next steps and what was not tested.
func (a *app) printWhy(j screening.Judgement, book *screening.Rulebook) error {
	const (
		why    = "why         "
		next   = "next        "
		open   = "not tested  "
		source = "            "
	)
	for i, r := range j.Reasons {
		if err := a.env.wrapped(headed(why, i), r.Text); err != nil {
			return err
		}
	}
	for _, s := range j.Stops {
		if err := a.env.wrapped(source, s.Source.String()); err != nil {
			return err
		}
	}
	for i, s := range j.Next {
		if err := a.env.wrapped(headed(next, i), s.Text); err != nil {
			return err
		}
	}
	for i, text := range notTested(book, j) {
		if err := a.env.wrapped(headed(open, i), text); err != nil {
			return err
		}
	}
	return nil
}

// headed leaves the label away after the first line.
func headed(label string, i int) string {
	if i == 0 {
		return label
	}
	return strings.Repeat(" ", len(label))
}

// notTested words what was wanted and not measured, then what the evidence leaves unproven.
func notTested(book *screening.Rulebook, j screening.Judgement) []string {
	var texts []string
	for _, g := range j.NotTested {
		texts = append(texts, gapText(book, g))
	}
	return append(texts, j.Untested...)
}

func gapText(book *screening.Rulebook, g screening.Gap) string {
	text := book.Definition(g.Of).Label
	if g.Section != "" {
		text += " of section " + g.Section
	}
	if !g.At.IsZero() {
		text += " at " + g.At.String()
	}
	return text
}

func (e *Env) printCaution(c screening.Caution) error {
	label := "notice      "
	if c.Level == screening.Danger {
		label = "DANGER      "
	}
	return e.wrapped(label, c.Text+" ["+c.Source.String()+"]")
}

// printFindings prints the limits with their readings, each followed by its rule and source. Without --all, limits that wait for a reading
// which another one of the same criterion has answered are left out.
func (a *app) printFindings(book *screening.Rulebook, j screening.Judgement, policy *screening.Policy) error {
	var shown []*screening.Finding
	for i := range j.Findings {
		if f := &j.Findings[i]; a.all || f.Outcome != screening.Missing || !answeredElsewhere(j.Findings, f) {
			shown = append(shown, f)
		}
	}
	if len(shown) == 0 {
		return nil
	}
	rows := [][]string{{"", "limit", "reading ± 2u", "margin", "grade", "set"}}
	for _, f := range shown {
		rows = append(rows, findingCells(book, f))
	}
	if err := a.env.line(""); err != nil {
		return err
	}
	lines := a.env.columns(rows)
	stacked := slices.ContainsFunc(lines, func(l string) bool { return runewidth.StringWidth(l) > a.env.width() })
	for i, f := range shown {
		if i == 0 && !stacked {
			if err := a.env.line("%s", lines[0]); err != nil {
				return err
			}
		}
		if err := a.printFinding(lines[i+1], rows[i+1], stacked); err != nil {
			return err
		}
		if err := a.printRule(f); err != nil {
			return err
		}
		if !a.budget {
			continue
		}
		if err := a.printBudget(f, policy); err != nil {
			return err
		}
	}
	if hidden := len(j.Findings) - len(shown); hidden > 0 {
		return a.env.line("%d more limits of criteria that are answered: --all shows them", hidden)
	}
	return nil
}

// answeredElsewhere reports whether a missing finding's criterion is answered by another.
func answeredElsewhere(findings []screening.Finding, f *screening.Finding) bool {
	return slices.ContainsFunc(findings, func(other screening.Finding) bool {
		return other.Outcome != screening.Missing && other.Limit.Criterion == f.Limit.Criterion && other.Limit.Section == f.Limit.Section
	})
}

// ruleIndent is where reading and rule stand under a finding's outcome.
const ruleIndent = "            "

// printFinding prints one row of the table; where the table is too wide for the terminal, as lines of its own.
func (a *app) printFinding(line string, cells []string, stacked bool) error {
	if !stacked {
		return a.env.line("%s", line)
	}
	outcome := cells[0] + strings.Repeat(" ", max(0, len(ruleIndent)-len(cells[0])))
	if err := a.env.wrapped(outcome, cells[1]); err != nil {
		return err
	}
	text := "reads " + cells[2]
	if cells[2] == "-" {
		text = "no reading"
	}
	for i, label := range []string{"margin ", "", "set "} {
		if cell := cells[3+i]; cell != "" {
			text += ", " + label + cell
		}
	}
	return a.env.wrapped(ruleIndent, text)
}

func findingCells(book *screening.Rulebook, f *screening.Finding) []string {
	l := &f.Limit
	outcome := f.Outcome.String()
	switch {
	case f.NearLimit:
		outcome = "pass, near"
	case f.Outcome == screening.Missing && f.Need != screening.Required:
		outcome = "not tested"
	}
	on := book.Definition(l.On).Label
	if l.Section != "" {
		on += " of section " + l.Section
	}
	return []string{outcome, on + " " + screening.Allowed(*l), evidenceText(f), marginText(f.Margin), l.Grade.String(), string(l.Set)}
}

// evidenceText prints what was held against the limit, with its expanded uncertainty.
func evidenceText(f *screening.Finding) string {
	r := f.Evidence()
	switch {
	case f.By == screening.ByRating && f.Outcome == screening.Pass:
		return "as rated"
	case r == nil:
		return "-"
	}
	return entry.Measured(*r)
}

func marginText(margin float64) string {
	switch {
	case math.IsNaN(margin) || math.IsInf(margin, 0):
		return ""
	case margin > 10:
		return "> 1000 %"
	}
	return quantity.Format(margin, quantity.Ratio, 2)
}

// printRule prints a limit's formula, source and what is to be known of it, and why a finding is open.
func (a *app) printRule(f *screening.Finding) error {
	l := &f.Limit
	text := l.Source.String()
	if formula := l.FormulaText(); formula != "" {
		text = formula + "; " + text
	}
	if err := a.env.wrapped(ruleIndent, text); err != nil {
		return err
	}
	if f.Converted != nil {
		if err := a.env.wrapped(ruleIndent, "converted: "+f.Converted.Rule); err != nil {
			return err
		}
	}
	for _, more := range []string{f.Why, l.Note} {
		if more == "" {
			continue
		}
		if err := a.env.wrapped(ruleIndent, more); err != nil {
			return err
		}
	}
	return nil
}
