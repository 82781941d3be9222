package screening

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"goodbin/screening/quantity"
)

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// ConformanceProbability returns the probabilities that the true value lies below low and above high, given a reading x with standard
// uncertainty u and a normal distribution: below = Φ((low−x)/u), above = Φ((x−high)/u); the conformance probability is what is left
// (JCGM 106:2012, clause 7). With u = 0 they are 0 or 1, the bounds being included in the interval. Open bounds are ±Inf.
func ConformanceProbability(x, u, low, high float64) (below, above float64) {
	if u == 0 {
		if x < low {
			return 1, 0
		}
		if x > high {
			return 0, 1
		}
		return 0, 0
	}
	if !math.IsInf(low, -1) {
		below = distuv.UnitNormal.CDF((low - x) / u)
	}
	if !math.IsInf(high, 1) {
		above = distuv.UnitNormal.CDF((x - high) / u)
	}
	return below, above
}

// find holds one limit, for one section, against the best evidence the part has for it: a reading whose condition fits, the latest first;
// else a reading that a stated rule brings over; else, where the limit takes one, a rating. It fills in f.
func (j *judging) find(part *Part, l *Limit, section string, f *Finding) {
	*f = Finding{
		Limit: *l, Need: l.Need, By: l.Evidence, Probability: math.NaN(), Margin: math.NaN(),
		Wants: Gap{Of: l.On, Section: section, At: l.At},
	}
	f.Limit.Section = section
	var fit Fit
	if field := j.book.bench(l.On); field != nil {
		fit = field.Fit
	}
	if l.Evidence != ByRating {
		for i := len(part.Readings) - 1; i >= 0; i-- {
			r := &part.Readings[i]
			if r.Of != l.On || r.Section != section {
				continue
			}
			if _, _, fits := fit.Misfit(&r.At, &l.At); fits {
				f.Reading = r
				j.hold(f, r)
				break
			}
			if f.Outcome == Missing {
				j.tryConversion(part, f, fit, r)
			}
		}
	}
	if f.Outcome == Missing && l.Evidence != ByReading {
		j.holdRating(part, f)
	}
	if f.Outcome == Missing && f.Why == "" {
		f.Why = "not measured"
	}
}

// tryConversion brings a reading to the limit's condition by the rulebook's rule. Where no rule applies the finding stays missing and says
// which condition is off.
func (j *judging) tryConversion(part *Part, f *Finding, fit Fit, r *Reading) {
	why := ""
	if j.book.Convert != nil {
		c := j.book.Convert(*part, *r, f.Limit)
		if c.OK {
			held := *f
			held.Reading, held.Converted = r, &c
			j.hold(&held, &c.Reading)
			if held.Outcome == Pass && c.NeverPasses {
				held.Outcome = Missing
				held.Why = "a value converted this way can refute but not prove: " + c.Rule
			}
			*f = held
			return
		}
		why = c.Why
	}
	if f.Why == "" {
		v, absent, _ := fit.Misfit(&r.At, &f.Limit.At)
		if absent {
			f.Unstated = v
		}
		if why == "" {
			why = misfitText(v, absent, r, &f.Limit)
		}
		f.Reading, f.Why = r, why
	}
}

// misfitText says which condition of a reading is off, or not stated.
func misfitText(v Variable, absent bool, r *Reading, l *Limit) string {
	if absent {
		want, _ := l.At.Get(v)
		return "the " + v.Label() + " of the reading is not stated; the limit holds at " + quantity.Format(want, v.Unit(), 0)
	}
	return "taken at " + r.At.String() + ", the limit holds at " + l.At.String()
}

// hold decides one limit by one reading that fits it.
func (j *judging) hold(f *Finding, r *Reading) {
	l := &f.Limit
	f.By = ByReading
	f.Outcome, f.Why = Missing, ""
	below, above := ConformanceProbability(r.Value, r.U, l.Low, l.High)
	f.Margin = margin(r.Value, l.Low, l.High)
	f.Side = Inside
	switch r.Sense {
	case quantity.Exactly:
		f.Probability = math.Max(0, 1-below-above)
		if j.policy.Rule == SimpleAcceptance {
			j.holdSimply(f, r.Value)
			break
		}
		j.decide(f, r, below, above)
	case quantity.AtMost:
		// The true value is no more than x: it can clear the upper bound and refute the lower one.
		j.holdOneSided(f, 1-above, below, Below, math.IsInf(l.Low, -1) || l.Low <= 0 && j.nonNegative(l))
	case quantity.AtLeast:
		j.holdOneSided(f, 1-below, above, Above, math.IsInf(l.High, 1))
	}
	if f.Outcome == Fail && !l.Source.Status.MayReject() {
		f.Outcome, f.Unconfirmed = Close, true
		f.Why = "out of limits, but the figure is " + l.Source.Status.String()
	}
	if f.Outcome == Close && !f.Unconfirmed {
		f.Wants.Accuracy = j.accuracyNeeded(f, r)
		f.Why = "too near the limit for this meter"
		// Where the digits make up half of what the meter may be off, more digits settle more than a better meter.
		if r.Step > 0 && 2*r.Step >= r.Spec/2 {
			f.TooCoarse, f.Why = true, "read to too few digits: the last one is worth "+quantity.Format(r.Step, r.Unit, 0)
		}
	}
}

func (j *judging) holdSimply(f *Finding, x float64) {
	switch {
	case x < f.Limit.Low:
		f.Outcome, f.Side = Fail, Below
	case x > f.Limit.High:
		f.Outcome, f.Side = Fail, Above
	default:
		f.Outcome = Pass
	}
}

// holdOneSided settles a limit by a reading that only bounds: clear is the probability that the bound itself clears the side it speaks
// for, refuted that it lies beyond the other one, and open whether there is nothing on the side it cannot speak for.
func (j *judging) holdOneSided(f *Finding, clear, refuted float64, side Side, open bool) {
	switch {
	case refuted >= j.policy.Reject:
		f.Outcome, f.Side, f.Probability = Fail, side, 1-refuted
	case open && clear >= j.policy.threshold(&f.Limit):
		f.Outcome, f.Probability = Pass, clear
		f.NearLimit = clear < j.policy.Accept
	default:
		f.Why = "the reading only bounds the value and does not settle this limit"
	}
}

// nonNegative reports whether the limit's characteristic cannot be negative, so that a lower bound at or below zero is no bound.
func (j *judging) nonNegative(l *Limit) bool { return l.Unit != quantity.Celsius }

// decide passes or fails a limit by probability. A meter that keeps its specification is never further off than that, so a reading fails a
// part only where the bound lies beyond the specification too: a poor meter never rejects a perfect part.
func (j *judging) decide(f *Finding, r *Reading, below, above float64) {
	p, spec := f.Probability, r.Spec
	if f.Converted != nil {
		spec = 0
	}
	if below > above {
		f.Side = Below
	} else if above > 0 {
		f.Side = Above
	}
	switch {
	case p >= j.policy.threshold(&f.Limit):
		f.Outcome, f.NearLimit = Pass, p < j.policy.Accept
	case below >= j.policy.Reject && f.Limit.Low-r.Value > spec:
		f.Outcome, f.Side = Fail, Below
	case above >= j.policy.Reject && r.Value-f.Limit.High > spec:
		f.Outcome, f.Side = Fail, Above
	default:
		f.Outcome = Close
	}
}

// accuracyNeeded returns the relative half-width of a rectangular meter specification with which a repeat of the same reading would be
// decided: u = distance to the nearest bound over the normal quantile of the policy's threshold, times √3.
func (j *judging) accuracyNeeded(f *Finding, r *Reading) float64 {
	if r.Value == 0 {
		return 0
	}
	distance, needed := math.Inf(1), j.policy.threshold(&f.Limit)
	for _, bound := range []float64{f.Limit.Low, f.Limit.High} {
		if !math.IsInf(bound, 0) {
			distance = math.Min(distance, math.Abs(r.Value-bound))
		}
	}
	if r.Value < f.Limit.Low || r.Value > f.Limit.High {
		needed = j.policy.Reject
	}
	z := distuv.UnitNormal.Quantile(needed)
	if z <= 0 || math.IsInf(distance, 1) {
		return 0
	}
	return math.Sqrt(3) * distance / z / math.Abs(r.Value)
}

// holdRating lets a rating answer: its whole band must lie inside. A measured value may refute a rating, never replace it.
func (j *judging) holdRating(part *Part, f *Finding) {
	rating, ok := part.Claim.Rating(f.Limit.On, f.Limit.Section)
	if !ok {
		f.Why = "not claimed"
		return
	}
	if rating.Low >= f.Limit.Low && rating.High <= f.Limit.High {
		f.By, f.Outcome, f.Probability = ByRating, Pass, 1
		return
	}
	f.Why = "the rating's band reaches outside the limit"
}

// margin is the distance from x to the nearest bound over the width where there are two, over the bound where there is one.
func margin(x, low, high float64) float64 {
	switch {
	case finite(low) && finite(high) && high > low:
		return math.Min(x-low, high-x) / (high - low)
	case finite(high) && high != 0:
		return (high - x) / math.Abs(high)
	case finite(low) && low != 0:
		return (x - low) / math.Abs(low)
	}
	return math.NaN()
}

// Alarm says that a reading looks like a slip of a power of ten.
type Alarm struct {
	Exponent  int     // the reading times 10^Exponent lies in the band
	Suggested float64 // that value, SI
	Low, High float64 // the serviceable band, SI
}

// PowerOfTen reports whether a reading lies outside the serviceable band of its nominal but would lie inside it after a slip of the decimal
// point or of a prefix, 10^k with k = ±1, ±2, ±3, ±6, ±9, ±12. It speaks only where the claim states a nominal.
func PowerOfTen(book *Rulebook, part Part, r Reading) (Alarm, bool) {
	f, ok := book.BenchField(r.Of)
	if !ok || !f.FollowsNominal || book.Limits == nil || r.Sense != quantity.Exactly || r.Value == 0 {
		return Alarm{}, false
	}
	j := judging{book: book}
	claim, _, err := j.complete(part.Claim)
	if err != nil {
		return Alarm{}, false
	}
	if _, ok := claim.Nominal(r.Of, r.Section); !ok {
		return Alarm{}, false
	}
	limits, err := book.Limits(claim)
	if err != nil {
		return Alarm{}, false
	}
	a := Alarm{Low: math.Inf(1), High: math.Inf(-1)}
	for i := range limits {
		l := &limits[i]
		if l.On == r.Of && (l.Section == r.Section || l.Section == "") && l.InUse && finite(l.Low) && finite(l.High) {
			a.Low, a.High = math.Min(a.Low, l.Low), math.Max(a.High, l.High)
		}
	}
	if a.Low > a.High || r.Value >= a.Low && r.Value <= a.High {
		return Alarm{}, false
	}
	for _, k := range []int{1, -1, 2, -2, 3, -3, 6, -6, 9, -9, 12, -12} {
		if x := r.Value * math.Pow10(k); x >= a.Low && x <= a.High {
			a.Exponent, a.Suggested = k, x
			return a, true
		}
	}
	return Alarm{}, false
}
