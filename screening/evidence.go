package screening

import (
	"math"

	"goodbin/screening/conformity"
	"goodbin/screening/quantity"
)

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// ConformanceProbability returns the probabilities that the true value lies below low and above high, given a reading x with standard
// uncertainty u and a normal distribution: below = Φ((low−x)/u), above = Φ((x−high)/u); the conformance probability is what is left
// (JCGM 106:2012, clause 7). With u = 0 they are 0 or 1, the bounds being included in the interval. Open bounds are ±Inf.
func ConformanceProbability(x, u, low, high float64) (below, above float64) {
	return conformity.Outside(x, u, conformity.Interval{Low: low, High: high})
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
