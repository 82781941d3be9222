package screening

import (
	"cmp"
	"math"
	"slices"
	"strings"

	"goodbin/screening/quantity"
)

// explain adds the reasons, the decisive ones first and the notes last, what was not tested, and the next steps.
func (j *judging) explain(r *Judgement, states []criterionState) {
	notes := r.Reasons
	r.Reasons = nil
	for _, s := range r.Stops {
		code := CodeStop
		if s.Verdict == Undecided {
			code = CodeHold
		}
		r.Reasons = append(r.Reasons, Reason{Code: code, Text: s.Reason})
	}
	if r.Verdict == Accept && r.RegradedAs == nil {
		text := "every required reading passes"
		if r.Grade == WithinSpec {
			text += " what is asked of a new part"
		}
		r.Reasons = append(r.Reasons, Reason{Code: CodePasses, Text: text})
	}
	if r.Verdict == Accept && r.RegradedAs != nil {
		r.Reasons = append(r.Reasons, Reason{Code: CodeToleranceProven, Text: r.RegradedAs.Text})
	}
	for _, s := range states {
		j.explainCriterion(r, s)
	}
	if r.Verdict != Accept && r.RegradedAs != nil {
		r.Reasons = append(r.Reasons, Reason{Code: CodeLesserClaim, Text: r.RegradedAs.Text})
	}
	r.Reasons = once(append(append(r.Reasons, notes...), j.seen(r.Part)...))
	j.nextSteps(r, states)
}

// seen lists what was seen and is only kept with the part.
func (j *judging) seen(part Part) []Reason {
	var reasons []Reason
	for _, c := range j.book.Look {
		if fault, _ := part.Seen(c.Name); fault && c.Verdict == NoVerdict {
			reasons = append(reasons, Reason{Code: CodeSeen, Text: cmp.Or(c.Reason, c.Plain()+" seen")})
		}
	}
	return reasons
}

// once drops what was said before: two criteria may wait for one reading.
func once[T comparable](all []T) []T {
	kept := all[:0]
	for _, x := range all {
		if !slices.Contains(kept, x) {
			kept = append(kept, x)
		}
	}
	return kept
}

func (j *judging) explainCriterion(r *Judgement, s criterionState) {
	for _, f := range s.findings {
		switch {
		case f.Outcome == Fail:
			code := CodeFails
			if treatable(s) {
				code = CodeUntreated
			}
			r.Reasons = append(r.Reasons, Reason{Code: code, Text: j.failText(f), Of: f.Limit.On})
		case f.Outcome == Close && s.outcome == Close && s.need == Required:
			r.Reasons = append(r.Reasons, Reason{Code: CodeRepeat, Text: j.name(f.Limit.On, f.Limit.Section) + ": " + f.Why, Of: f.Limit.On})
		case f.Outcome == Pass && f.NearLimit && r.Verdict.Usable() && f.Limit.Grade == r.Grade:
			r.Reasons = append(r.Reasons, Reason{
				Code: CodeNearLimit, Of: f.Limit.On,
				Text: j.name(f.Limit.On, f.Limit.Section) + " passes near its limit, with probability " + percent(f.Probability),
			})
		}
	}
	if s.outcome != Missing || len(s.findings) == 0 || r.Verdict == Reject || r.Verdict == Barred {
		return
	}
	first := s.findings[0]
	if s.need != Required {
		if first.Wants.Of != "" { // the rulebook emptied it to word it itself
			r.NotTested = append(r.NotTested, first.Wants)
		}
		return
	}
	if i := slices.IndexFunc(s.findings, func(f *Finding) bool { return f.Reading != nil }); i >= 0 {
		first = s.findings[i] // why a reading does not count says more than that its alternative was not taken
	}
	r.Reasons = append(r.Reasons, Reason{
		Code: CodeMeasure, Of: first.Limit.On, Text: j.name(first.Limit.On, first.Limit.Section) + ": " + first.Why,
	})
}

// failText says what was read and what was allowed: "ESR reads 2.40 Ω; at most 151 mΩ at 120 Hz".
func (j *judging) failText(f *Finding) string {
	e := f.Evidence()
	if e == nil {
		return j.name(f.Limit.On, f.Limit.Section) + " fails"
	}
	read := "reads "
	if f.Converted != nil {
		read = "comes to "
	}
	switch e.Sense {
	case quantity.AtLeast:
		read += "at least "
	case quantity.AtMost:
		read += "at most "
	}
	return j.name(f.Limit.On, f.Limit.Section) + " " + read + quantity.Format(e.Value, e.Unit, 3) + "; " + Allowed(f.Limit)
}

// Allowed words a limit's bounds and condition: "at most 770 µA at 35 V, after 2 min".
func Allowed(l Limit) string {
	var text string
	low, high := quantity.Bound(l.Low, l.Unit), quantity.Bound(l.High, l.Unit)
	switch {
	case math.IsInf(l.Low, -1) && math.IsInf(l.High, 1):
		text = "any value"
	case math.IsInf(l.Low, -1):
		text = "at most " + high
	case math.IsInf(l.High, 1):
		text = "at least " + low
	default:
		text = low + " to " + high
	}
	if !l.At.IsZero() {
		text += " at " + l.At.String()
	}
	return text
}

func (j *judging) name(of Characteristic, section string) string {
	name := j.book.Definition(of).Label
	if section != "" {
		name += " of section " + section
	}
	return name
}

func percent(p float64) string { return quantity.Format(p, quantity.Ratio, 2) }

// nextSteps words what to do now.
func (j *judging) nextSteps(r *Judgement, states []criterionState) {
	switch r.Verdict {
	case Accept, Regrade:
		r.Next = append(r.Next, Step{Code: CodeStore, Text: "STORE it with its id"})
	case Reject:
		if len(r.Stops) == 0 {
			r.Next = append(r.Next, Step{Code: CodeScrap, Text: "SCRAP it, or mark it so that it is not used"})
		}
	case Undecided:
		r.Next = j.settle(r, states)
	case Treat:
		for _, s := range j.settle(r, states) {
			if s.Code == CodeMeasure {
				s.Text += " first: it can reject in less time than a treatment takes"
				r.Next = append(r.Next, s)
			}
		}
		for _, s := range states {
			if s.outcome == Fail {
				r.Next = append(r.Next, Step{Code: CodeTreatFirst, Text: treatText(treatmentOf(s)), Gap: s.findings[0].Wants})
				break
			}
		}
	}
	for _, s := range r.Stops {
		if s.Do != "" {
			code := CodeKeepApart
			if s.Verdict == Undecided {
				code = CodeHold
			}
			r.Next = append([]Step{{Code: code, Text: s.Do}}, r.Next...)
		}
	}
	r.Next = once(r.Next) // a family told by the claim and seen on the part asks for one thing
}

func treatText(t Treatment) string {
	switch t {
	case Reform:
		return "RE-FORM it at its rated voltage through a resistor, rest it 12 to 48 h, then measure again"
	case Dry:
		return "DRY it, let it cool, then measure again"
	}
	return strings.ToUpper(string(t)) + " it, then measure again"
}

// settle lists what would decide the required criteria that are open, the quickest measurement first.
func (j *judging) settle(r *Judgement, states []criterionState) []Step {
	if r.RegradedAs != nil && r.Verdict == Undecided {
		if findings, ok := j.findingsFor(r.Part, r.RegradedAs.Claim); ok {
			states = criteriaAt(findings, j.lowest())
		}
	}
	var steps []Step
	for _, s := range states {
		if s.need != Required || s.outcome == Pass || s.outcome == Fail {
			continue
		}
		// To state a condition of what was read is quicker than any measurement.
		quickest := slices.MinFunc(s.findings, func(a, b *Finding) int {
			return cmp.Or(cmp.Compare(b.Outcome, a.Outcome), -cmp.Compare(min(a.Unstated, 1), min(b.Unstated, 1)),
				cmp.Compare(j.effort(a), j.effort(b)))
		})
		steps = append(steps, j.settleStep(s, quickest))
	}
	slices.SortStableFunc(steps, func(a, b Step) int {
		return cmp.Compare(j.effortOf(a.Gap.Of), j.effortOf(b.Gap.Of))
	})
	return slices.DeleteFunc(once(steps), func(s Step) bool {
		// Taken at the condition that another criterion asks for, it answers both.
		return s.Code == CodeMeasure && s.Gap.At.IsZero() && slices.ContainsFunc(steps, func(o Step) bool {
			return o.Code == CodeMeasure && o.Gap.Of == s.Gap.Of && o.Gap.Section == s.Gap.Section && !o.Gap.At.IsZero()
		})
	})
}

func (j *judging) settleStep(s criterionState, f *Finding) Step {
	name := j.name(f.Limit.On, f.Limit.Section)
	switch {
	case s.outcome == Missing && f.Unstated != NoVariable:
		return Step{Code: CodeMeasure, Text: "STATE the " + f.Unstated.Label() + " of the reading: " + name, Gap: f.Wants}
	case s.outcome == Missing && f.Reading == nil && j.ask(f.Limit.On) != "":
		text := j.ask(f.Limit.On)
		if f.Limit.Section != "" {
			text += ", section " + f.Limit.Section
		}
		return Step{Code: CodeMeasure, Text: text, Gap: f.Wants}
	case s.outcome == Missing:
		text := "MEASURE " + name
		if !f.Limit.At.IsZero() {
			text += " at " + f.Limit.At.String()
		}
		if f.Reading != nil && f.Why != "" {
			text += " (" + f.Why + ")"
		}
		return Step{Code: CodeMeasure, Text: text, Gap: f.Wants}
	case f.Unconfirmed:
		text := "CONFIRM the figure for " + name + ": " + Allowed(f.Limit) + " is " + f.Limit.Source.Status.String()
		return Step{Code: CodeConfirmFigure, Text: text, Gap: f.Wants}
	}
	text := "REPEAT " + name
	if f.TooCoarse {
		return Step{Code: CodeRepeat, Text: text + " with every digit that the meter shows, on its lowest range", Gap: f.Wants}
	}
	switch more := moreReadings(f.Wants.Repeats); {
	case f.Wants.Accuracy > 0 && more != "":
		text += ": needs ±" + quantity.Format(f.Wants.Accuracy, quantity.Ratio, 2) + ", or " + more
	case f.Wants.Accuracy > 0:
		text += ": needs ±" + quantity.Format(f.Wants.Accuracy, quantity.Ratio, 2)
	case more != "":
		text += ": needs " + more
	}
	return Step{Code: CodeRepeat, Text: text, Gap: f.Wants}
}

func (j *judging) ask(of Characteristic) string {
	if f := j.book.bench(of); f != nil {
		return f.Ask
	}
	f, _ := j.book.ClaimField(of)
	return f.Ask
}

func (j *judging) effort(f *Finding) int64 { return j.effortOf(f.Limit.On) }

func (j *judging) effortOf(of Characteristic) int64 {
	if f := j.book.bench(of); f != nil {
		return int64(f.Effort)
	}
	f, _ := j.book.ClaimField(of)
	return int64(f.Effort)
}
