package screening

import (
	"fmt"
	"math"
	"slices"

	"goodbin/screening/quantity"
)

// Judge holds a part's readings against the limits that its claim implies and rolls the findings up into a verdict.
//
// A stop found by eye gives the verdict that its check names. Otherwise the own claim is tried at each grade the policy allows, best first;
// then a wider tolerance where only a tolerance is too close to call; then, where a failure cannot be undone, the lesser claims in order;
// then treatment; what is left is undecided, with what would settle it.
//
// It returns an error where the claim cannot be understood by the rulebook: a contradiction, or a rating out of the tables' range.
func Judge(book *Rulebook, part Part, policy Policy) (Judgement, error) {
	j := judging{book: book, policy: &policy}
	part.Kind = book.Kind
	claim, notes, err := j.complete(part.Claim)
	if err != nil {
		return Judgement{Part: part, Tables: book.Tables}, err
	}
	part.Claim = claim
	part.Readings = j.prepare(part)
	notes = append(notes, j.behaviours(part.Readings)...)
	if book.Derive != nil {
		derived, why := book.Derive(part)
		part.Readings = append(part.Readings, derived...)
		notes = append(notes, why...)
	}
	stops := j.stops(part)
	findings, adjusted, err := j.findings(part)
	if err != nil && stopVerdict(stops) != Barred { // what bars a part needs no number, and no rating that nobody can read any more
		return Judgement{Part: part, Claim: claim, Tables: book.Tables}, err
	}
	result := Judgement{
		Part: part, Claim: claim, Tables: book.Tables, Stops: stops, Findings: findings,
		Reasons: append(notes, adjusted...),
	}
	j.rollUp(&result)
	if book.Untested != nil && result.Verdict != Reject && result.Verdict != Barred {
		result.Untested = book.Untested(part, findings)
	}
	if book.Cautions != nil {
		result.Cautions = book.Cautions(part, AtVerdict)
	}
	for i := range findings {
		if e := findings[i].Evidence(); e != nil && e.Assumed {
			result.Assumed = true
		}
	}
	return result, nil
}

// judging is one run of the judge.
type judging struct {
	book   *Rulebook
	policy *Policy
}

func (j *judging) complete(claim Claim) (Claim, []Reason, error) {
	if j.book.Complete == nil {
		return claim, nil, nil
	}
	return j.book.Complete(claim)
}

// prepare fills in what the readings that stand leave open: the meter's own test signal, the ambient temperature, what then is left of the
// field's default condition, the correction for the leads, the uncertainty. A measured ambient goes before an assumed one. What an earlier
// judging filled in is taken out first, so that to judge a judged part again changes nothing.
func (j *judging) prepare(part Part) []Reading {
	readings := part.Current()
	ambient, hasAmbient := part.Ambient()
	for i := range readings {
		r := &readings[i]
		meter := j.policy.meter(r.Meter)
		r.Value, r.Correction = r.shown(), 0
		r.At = r.At.dropping(&r.AssumedAt).dropping(&r.MeterAt)
		r.AssumedAt, r.MeterAt = Condition{}, Condition{}
		if g, _ := meter.rangeOf(r.Of, r.Unit, math.Abs(r.Value)); g != nil && g.At.n > 0 {
			r.At, r.MeterAt = r.At.filling(&g.At)
		}
		if hasAmbient && r.Of != Temperature.Name && !r.At.Has(PartTemperature) {
			r.At = r.At.With(PartTemperature, ambient.Value)
		}
		if f := j.book.bench(r.Of); f != nil && f.Default.n > 0 {
			r.At, r.AssumedAt = r.At.filling(&f.Default)
		}
		meter.Leads.correct(r)
		d := meter.doubt(r)
		r.U, r.Spec, r.Assumed = d.judged(), 0, meter.Assumed || !d.covered
		if !d.exact {
			r.Spec = d.a.halfWidth(r.shown(), r.Step)
		}
	}
	return readings
}

// stops lists what decides before any number does: what the claim itself bars, then what was seen.
func (j *judging) stops(part Part) []Stop {
	var stops []Stop
	if j.book.Bars != nil {
		stops = j.book.Bars(part.Claim)
	}
	for _, c := range j.book.Look {
		if fault, _ := part.Seen(c.Name); fault && c.Verdict != NoVerdict {
			stops = append(stops, Stop{Check: c.Name, Verdict: c.Verdict, Reason: c.Reason, Do: c.Do, Source: c.Source})
		}
	}
	return stops
}

// findings evaluates every limit that counts under the policy, then applies the rules across readings. A limit without a section that has
// readings by section is held against each of them.
func (j *judging) findings(part Part) ([]Finding, []Reason, error) {
	limits, err := j.book.Limits(part.Claim)
	if err != nil {
		return nil, nil, err
	}
	counting := 0
	for i := range limits {
		if j.policy.counts(part.Kind, &limits[i]) {
			counting++
		}
	}
	findings := make([]Finding, 0, counting)
	for i := range limits {
		l := &limits[i]
		if !j.policy.counts(part.Kind, l) {
			continue
		}
		sections := measuredSections(&part, l)
		for n := range max(1, len(sections)) {
			section := l.Section
			if sections != nil {
				section = sections[n]
			}
			findings = append(findings, Finding{})
			j.find(&part, l, section, &findings[len(findings)-1])
		}
	}
	if j.book.Adjust == nil {
		return findings, nil, nil
	}
	findings, reasons := j.book.Adjust(part, findings)
	return findings, reasons, nil
}

// measuredSections lists, for a limit on the whole part, the sections that were measured; nil where there are none or the limit has its own.
func measuredSections(part *Part, l *Limit) []string {
	if l.Section != "" {
		return nil
	}
	var sections []string
	for i := range part.Readings {
		r := &part.Readings[i]
		if r.Of == l.On && r.Section != "" && !slices.Contains(sections, r.Section) {
			sections = append(sections, r.Section)
		}
	}
	return sections
}

// Plausible checks a reading against what is possible for its field and returns it tidied: a negative reading within two steps of zero is
// a zero. The error says what was wrong; it wraps ErrOutsideBand.
func Plausible(f Field, r Reading) (Reading, error) {
	if !finite(r.Value) {
		return r, fmt.Errorf("%w: %s is not a finite number", ErrOutsideBand, f.Label)
	}
	if f.Unit == quantity.Celsius {
		return r, between(f, r, orSpan(f.Band, Span{-90, 300}))
	}
	if r.Value < 0 && -r.Value <= 2*r.Step && f.Band.Low >= 0 {
		r.Value = 0
	}
	return r, between(f, r, orSpan(f.Band, Span{0, 1e15}))
}

func orSpan(s, fallback Span) Span {
	if s == (Span{}) {
		return fallback
	}
	return s
}

func between(f Field, r Reading, band Span) error {
	switch {
	case r.Value < band.Low && band.Low == 0:
		return fmt.Errorf("%w: %s reads %s; it cannot be negative by more than the meter's last digits", ErrOutsideBand,
			f.Label, quantity.Format(r.Value, r.Unit, 0))
	case r.Value < band.Low || r.Value > band.High:
		return fmt.Errorf("%w: %s reads %s; it lies between %s and %s", ErrOutsideBand, f.Label, quantity.Format(r.Value, r.Unit, 0),
			quantity.Format(band.Low, r.Unit, 0), quantity.Format(band.High, r.Unit, 0))
	}
	return nil
}
