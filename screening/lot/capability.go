package lot

import (
	"errors"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Capability holds the lot's spread against its limits. Since the parts come from no process under control these are performance figures,
// Pp and Ppk; the trade often writes Cp and Cpk all the same.
type Capability struct {
	Pp        float64 // (high−low)/(6·SD); NaN with one limit only
	Ppk       float64 // distance from the mean to the nearer limit over 3·SD; negative when the mean is outside
	PpkLow    float64 // what Ppk is at least, one-sided 95 %, by Bissell's approximation (from memory)
	RobustPpk float64 // the same from median and robust sigma: what the lot would be without its stragglers
	Outside   int     // parts measured outside the limits
	Expected  float64 // fraction outside if the lot is normal with this mean and SD
}

// leastCapability is the fewest parts of which a capability is worth printing (house).
const leastCapability = 5

// Capability returns the figures for these limits. It fails with fewer than five parts, with both sides open, with limits in the wrong
// order, and when all readings are equal.
func (r *Readings) Capability(l Limits) (Capability, error) {
	s := r.Summary()
	switch {
	case s.N < leastCapability:
		return Capability{}, errors.New("capability: measure five parts at least")
	case math.IsInf(l.Low, -1) && math.IsInf(l.High, 1):
		return Capability{}, errors.New("capability: there is no limit to hold the lot against")
	case !(l.Low < l.High):
		return Capability{}, errors.New("capability: the low limit must be below the high one")
	case s.SD == 0:
		return Capability{}, errors.New("capability: all parts read the same; a finer digit is needed")
	}
	c := Capability{Pp: (l.High - l.Low) / (6 * s.SD), Ppk: nearer(l, s.Mean, s.SD), RobustPpk: nearer(l, s.Median, s.RobustSigma)}
	if math.IsInf(c.Pp, 1) {
		c.Pp = math.NaN()
	}
	n := float64(s.N)
	c.PpkLow = c.Ppk - distuv.UnitNormal.Quantile(0.95)*math.Sqrt(1/(9*n)+c.Ppk*c.Ppk/(2*(n-1)))
	normal := distuv.Normal{Mu: s.Mean, Sigma: s.SD}
	c.Expected = normal.CDF(l.Low) + normal.Survival(l.High)
	for _, x := range r.sorted {
		if !l.Hold(x) {
			c.Outside++
		}
	}
	return c, nil
}

// nearer returns the distance from the centre to the nearer limit in units of three sigma; +Inf where sigma is 0.
func nearer(l Limits, centre, sigma float64) float64 {
	return math.Min(l.High-centre, centre-l.Low) / (3 * sigma)
}

// Interval is a fraction with the bounds of its confidence interval.
type Interval struct {
	Fraction  float64
	Low, High float64
	Method    string
}

// YieldMethod names the interval of [Yield].
const YieldMethod = "Clopper-Pearson"

// Yield returns the share of good parts so far and where the share of the whole bag lies with this confidence: Clopper and Pearson's exact
// interval, which never covers less than it claims. It holds for parts drawn at random, from a bag much larger than the sample; for a small
// bag it is on the safe side.
func Yield(good, tested int, confidence float64) (Interval, error) {
	if tested < 1 || good < 0 || good > tested {
		return Interval{}, errors.New("yield: the good parts are some of those tested, and one at least is tested")
	}
	if !(confidence > 0 && confidence < 1) {
		return Interval{}, errors.New("yield: the confidence is above 0 and below 1, such as 0.95")
	}
	k, n, tail := float64(good), float64(tested), (1-confidence)/2
	out := Interval{Fraction: k / n, Low: 0, High: 1, Method: YieldMethod}
	if good > 0 {
		out.Low = distuv.Beta{Alpha: k, Beta: n - k + 1}.Quantile(tail)
	}
	if good < tested {
		out.High = distuv.Beta{Alpha: k + 1, Beta: n - k}.Quantile(1 - tail)
	}
	return out, nil
}
