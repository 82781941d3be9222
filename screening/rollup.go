package screening

import (
	"slices"
)

// criterionState is what became of one criterion of one section at one grade.
type criterionState struct {
	criterion Criterion
	section   string
	need      Need
	outcome   Outcome
	graded    bool       // it has a limit at this grade
	findings  []*Finding // the limits that count at this grade
}

// blocks reports whether the criterion keeps the part from being accepted: a required one that does not pass, a wanted one that fails.
func (c *criterionState) blocks() bool {
	return c.outcome == Fail || c.need == Required && c.outcome != Pass
}

// criteriaAt sums findings up by criterion and section at a grade. A criterion that has no limit at the grade takes those of the grade
// above: what no maker relaxes stays as it is.
func criteriaAt(findings []Finding, grade Grade) []criterionState {
	states := make([]criterionState, 0, 8)
	for i := range findings {
		f := &findings[i]
		s := stateOf(states, f)
		if s == nil {
			states = append(states, criterionState{criterion: f.Limit.Criterion, section: f.Limit.Section, need: f.Need})
			s = &states[len(states)-1]
		}
		s.need = min(s.need, f.Need)
		s.graded = s.graded || f.Limit.Grade == AnyGrade || f.Limit.Grade == grade
	}
	room := make([]*Finding, 0, len(findings))
	for i := range states {
		s, start := &states[i], len(room)
		for k := range findings {
			f := &findings[k]
			if f.Limit.Criterion == s.criterion && f.Limit.Section == s.section &&
				(!s.graded || f.Limit.Grade == AnyGrade || f.Limit.Grade == grade) {
				room = append(room, f)
				s.outcome = worseAlternative(s.outcome, f.Outcome)
			}
		}
		s.findings = room[start:len(room):len(room)]
	}
	return states
}

func stateOf(states []criterionState, f *Finding) *criterionState {
	for i := range states {
		if s := &states[i]; s.criterion == f.Limit.Criterion && s.section == f.Limit.Section {
			return s
		}
	}
	return nil
}

// worseAlternative combines alternatives of one criterion: any failure fails it, else any pass answers it, else it is close, else missing.
func worseAlternative(a, b Outcome) Outcome {
	rank := [...]int{Missing: 0, Close: 1, Pass: 2, Fail: 3}
	if rank[b] > rank[a] {
		return b
	}
	return a
}

// grades lists the grades that the policy allows, best first.
func (j *judging) grades() []Grade {
	if j.policy.Lowest == WithinSpec {
		return []Grade{WithinSpec}
	}
	return []Grade{WithinSpec, Serviceable}
}

// accepted returns the best grade at which nothing blocks. What fails at the lowest grade is accepted at none, also where a better grade's
// limit is too weakly known to fail it.
func (j *judging) accepted(findings []Finding) (Grade, bool) {
	if len(findings) == 0 || slices.ContainsFunc(criteriaAt(findings, j.lowest()), func(c criterionState) bool { return c.outcome == Fail }) {
		return AnyGrade, false
	}
	for _, g := range j.grades() {
		if !slices.ContainsFunc(criteriaAt(findings, g), func(c criterionState) bool { return c.blocks() }) {
			return g, true
		}
	}
	return AnyGrade, false
}

// lowest returns the lowest grade that the policy allows.
func (j *judging) lowest() Grade {
	if j.policy.Lowest == WithinSpec {
		return WithinSpec
	}
	return Serviceable
}

// rollUp turns findings and stops into the verdict, its reasons and next steps.
func (j *judging) rollUp(r *Judgement) {
	states := criteriaAt(r.Findings, j.lowest())
	switch stopped := stopVerdict(r.Stops); stopped {
	case NoVerdict:
		j.decideVerdict(r, states)
	default:
		r.Verdict = stopped
	}
	j.explain(r, states)
}

// stopVerdict is the verdict that stops give: barred before reject before undecided, NoVerdict where there are none.
func stopVerdict(stops []Stop) Verdict {
	for _, v := range [...]Verdict{Barred, Reject, Undecided} {
		if slices.ContainsFunc(stops, func(s Stop) bool { return s.Verdict == v }) {
			return v
		}
	}
	return NoVerdict
}

func (j *judging) decideVerdict(r *Judgement, states []criterionState) {
	if grade, ok := j.accepted(r.Findings); ok {
		r.Verdict, r.Grade = Accept, grade
		return
	}
	var failed []criterionState
	onlyClose, irrecoverable := true, false
	for _, s := range states {
		if s.outcome == Fail {
			failed = append(failed, s)
			irrecoverable = irrecoverable || !treatable(s)
		}
		if s.blocks() && s.outcome != Close {
			onlyClose = false
		}
	}
	lesser := j.lesserClaims(r)
	switch {
	case onlyClose:
		r.Verdict = Undecided
		if proven, grade, ok := j.firstPassing(r, lesser, func(l Lesser) bool { return l.Tolerance && isBlocking(states, l.Answers) }); ok {
			r.Verdict, r.Grade, r.RegradedAs = Accept, grade, proven
		}
	case irrecoverable:
		j.regradeOrReject(r, failed, lesser)
	case len(failed) > 0:
		r.Verdict = Treat
		if today, _, ok := j.firstPassing(r, lesser, func(Lesser) bool { return true }); ok {
			r.RegradedAs = today
		}
	default:
		r.Verdict = Undecided
		if measured, grade, ok := j.firstPassing(r, lesser, func(l Lesser) bool { return l.FromMissing }); ok {
			r.Verdict, r.Grade, r.RegradedAs = Regrade, grade, measured
		}
	}
}

func isBlocking(states []criterionState, c Criterion) bool {
	return slices.ContainsFunc(states, func(s criterionState) bool { return s.criterion == c && s.blocks() })
}

// treatable reports whether a known treatment could undo every failure of a criterion.
func treatable(s criterionState) bool { return treatmentOf(s) != "" }

// treatmentOf returns the treatment that could undo a failed criterion, "" where a failing limit has none.
func treatmentOf(s criterionState) Treatment {
	var with Treatment
	for _, f := range s.findings {
		if f.Outcome != Fail {
			continue
		}
		t := f.Limit.TreatHigh
		if f.Side == Below {
			t = f.Limit.TreatLow
		}
		if t == "" {
			return ""
		}
		with = t
	}
	return with
}

// regradeOrReject tries the lesser claims that answer a failure, in order: the first that passes, else the first left open, else reject.
func (j *judging) regradeOrReject(r *Judgement, failed []criterionState, lesser []Lesser) {
	answers := func(l Lesser) bool {
		return slices.ContainsFunc(failed, func(s criterionState) bool { return s.criterion == l.Answers })
	}
	if as, grade, ok := j.firstPassing(r, lesser, answers); ok {
		r.Verdict, r.Grade, r.RegradedAs = Regrade, grade, as
		return
	}
	r.Verdict = Reject
	for i := range lesser {
		if !answers(lesser[i]) {
			continue
		}
		findings, ok := j.findingsFor(r.Part, lesser[i].Claim)
		if ok && !slices.ContainsFunc(criteriaAt(findings, j.lowest()), func(c criterionState) bool { return c.outcome == Fail }) {
			r.Verdict, r.RegradedAs = Undecided, &lesser[i]
			return
		}
	}
}

func (j *judging) lesserClaims(r *Judgement) []Lesser {
	if j.book.Lesser == nil {
		return nil
	}
	return j.book.Lesser(r.Part, r.Findings)
}

// firstPassing returns the first lesser claim among those wanted that the part meets, and the grade.
func (j *judging) firstPassing(r *Judgement, lesser []Lesser, wanted func(Lesser) bool) (*Lesser, Grade, bool) {
	for i := range lesser {
		if !wanted(lesser[i]) {
			continue
		}
		if findings, ok := j.findingsFor(r.Part, lesser[i].Claim); ok {
			if grade, ok := j.accepted(findings); ok {
				return &lesser[i], grade, true
			}
		}
	}
	return nil, AnyGrade, false
}

// findingsFor judges the part's readings against another claim.
func (j *judging) findingsFor(part Part, claim Claim) ([]Finding, bool) {
	completed, _, err := j.complete(claim)
	if err != nil {
		return nil, false
	}
	part.Claim = completed
	findings, _, err := j.findings(part)
	return findings, err == nil
}
