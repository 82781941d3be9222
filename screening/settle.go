package screening

import (
	"math"
	"strconv"

	"goodbin/screening/conformity"
	"goodbin/screening/quantity"
	"goodbin/screening/uncertainty"
)

// MaxMoreRepeats is how many more readings are ever offered: beyond it a better meter is the shorter way (house).
const MaxMoreRepeats = 20

// tooNear says of a close finding why, and what would decide it: the accuracy, and how many more readings.
func (j *judging) tooNear(f *Finding, r *Reading) {
	f.Wants.Accuracy = j.accuracyNeeded(f, r)
	f.Wants.Repeats = j.repeatsNeeded(f, r)
	accept, _ := j.policy.zones(&f.Limit, r.U)
	switch {
	case r.Step > 0 && 2*r.Step >= r.Spec/2:
		// Where the digits make up half of what the meter may be off, more digits settle more than a better meter.
		f.TooCoarse, f.Why = true, "read to too few digits: the last one is worth "+quantity.Format(r.Step, r.Unit, 0)
	case j.policy.Rule != ByProbability && accept.Low > accept.High:
		f.Why = "the guard band of this meter leaves nothing to accept"
	default:
		f.Why = "too near the limit for this meter"
	}
}

// decided reports whether the same value would be decided if it had this standard uncertainty and the meter this specification.
func (j *judging) decided(l *Limit, x, u, spec float64) bool {
	below, above := conformity.Outside(x, u, l.interval())
	return j.policy.weigh(l, x, u, spec, below, above).outcome != Close
}

// accuracyNeeded returns the relative half-width of a rectangular meter specification with which a repeat of the same reading would be decided
// under the policy, all else that makes it uncertain staying as it is; 0 where no accuracy would do. Whether a value is decided falls with
// its uncertainty, so halving the span finds it: thirty steps leave 1e-9 of it.
func (j *judging) accuracyNeeded(f *Finding, r *Reading) float64 {
	if r.Value == 0 {
		return 0
	}
	const halvings = 30
	other, worst := 0.0, r.Spec
	if f.Converted != nil {
		other = f.Converted.U
		worst = math.Sqrt(3 * math.Max(0, r.U*r.U-other*other))
	} else {
		meter := uncertainty.Rectangular(r.Spec)
		other = math.Sqrt(math.Max(0, r.U*r.U-meter*meter))
	}
	decides := func(a float64) bool {
		spec := a
		if f.Converted != nil {
			spec = 0
		}
		return j.decided(&f.Limit, r.Value, math.Hypot(other, uncertainty.Rectangular(a)), spec)
	}
	if !decides(0) {
		return 0
	}
	enough := 0.0
	for range halvings {
		if a := (enough + worst) / 2; decides(a) {
			enough = a
		} else {
			worst = a
		}
	}
	return enough / math.Abs(r.Value)
}

// repeatsNeeded returns how many more readings would decide a close finding if their mean and spread stayed as they are: 0 for a reading that
// was not repeated, whose scatter nobody knows, and where what repeats do not shrink is too much by itself, or [MaxMoreRepeats] not enough.
func (j *judging) repeatsNeeded(f *Finding, r *Reading) int {
	n := len(r.Repeats)
	if n < 2 || f.Converted != nil || r.Rule != "" {
		return 0
	}
	meter := j.policy.meter(r.Meter)
	d := meter.doubt(r)
	if !j.decided(&f.Limit, r.Value, math.Sqrt(d.fixed()), r.Spec) {
		return 0
	}
	s := r.Spread()
	for more := 1; more <= MaxMoreRepeats; more++ {
		scatter := uncertainty.OfRepeats(n+more, s, d.prior).U
		if j.decided(&f.Limit, r.Value, math.Sqrt(d.fixed()+scatter*scatter), r.Spec) {
			return more
		}
	}
	return 0
}

// moreReadings words a number of readings; "" for none.
func moreReadings(n int) string {
	switch n {
	case 0:
		return ""
	case 1:
		return "one more reading like these"
	}
	return strconv.Itoa(n) + " more readings like these"
}

// behaviours notes which readings were repeated and would not stand still. It decides nothing: a mean of such readings is still what was read.
func (j *judging) behaviours(readings []Reading) []Reason {
	var notes []Reason
	for i := range readings {
		r := &readings[i]
		b, slope := uncertainty.BehaviourOf(r.Repeats, r.Step, r.Spec)
		switch b {
		case uncertainty.Drifting:
			sign := "+"
			if slope < 0 {
				sign = "−"
			}
			notes = append(notes, Reason{
				Code: CodeDrifting, Of: r.Of, Text: j.name(r.Of, r.Section) + " is still drifting, by " + sign +
					quantity.Format(math.Abs(slope), r.Unit, 2) + " from one reading to the next: let it settle, then read again",
			})
		case uncertainty.Restless:
			notes = append(notes, Reason{
				Code: CodeUnsettled, Of: r.Of, Text: j.name(r.Of, r.Section) + " never settled: its repeats spread by " +
					quantity.Format(r.Spread(), r.Unit, 2) + ", more than the meter may be off; look to the contacts",
			})
		}
	}
	return notes
}
