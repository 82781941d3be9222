package lot

import (
	"errors"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

var errTolerance = errors.New("tolerance interval: it takes two parts at least, a share and a confidence above 0 and below 1, such as 0.95")

func toleranceAsks(n int, share, confidence float64) bool {
	return n >= 2 && share > 0 && share < 1 && confidence > 0 && confidence < 1
}

// ToleranceBand returns the limits mean ± k·SD between which at least this share of a normal lot lies, with this confidence.
func (r *Readings) ToleranceBand(share, confidence float64) (Limits, error) {
	k, err := TwoSidedK(r.Len(), share, confidence)
	if err != nil {
		return NoLimits(), err
	}
	s := r.Summary()
	return Limits{s.Mean - k*s.SD, s.Mean + k*s.SD}, nil
}

// TwoSidedK returns the factor k of n normal readings' two-sided tolerance interval mean ± k·SD by Howe's approximation:
// z((1+share)/2)·√((n−1)(1+1/n)/χ²(1−confidence; n−1)) (NIST/SEMATECH 7.2.6.3).
func TwoSidedK(n int, share, confidence float64) (float64, error) {
	if !toleranceAsks(n, share, confidence) {
		return 0, errTolerance
	}
	f := float64(n)
	z := distuv.UnitNormal.Quantile((1 + share) / 2)
	return z * math.Sqrt((f-1)*(1+1/f)/distuv.ChiSquared{K: f - 1}.Quantile(1-confidence)), nil
}

// OneSidedApproximateK returns the one-sided factor by the handbook's approximation (z + √(z²−a·b))/a with a = 1 − zγ²/(2(n−1)) and
// b = z² − zγ²/n (NIST/SEMATECH 7.2.6.3); NaN where it has no solution, for few readings and a high confidence.
func OneSidedApproximateK(n int, share, confidence float64) float64 {
	f := float64(n)
	z, zg := distuv.UnitNormal.Quantile(share), distuv.UnitNormal.Quantile(confidence)
	a, b := 1-zg*zg/(2*(f-1)), z*z-zg*zg/f
	return (z + math.Sqrt(z*z-a*b)) / a
}

// mostNoncentral is the noncentrality up to which gonum's series is exact; beyond it the handbook's approximation is good to 2 in 1000.
const mostNoncentral = 35

// OneSidedK returns the factor k with which mean + k·SD (or mean − k·SD) bounds at least this share of a normal lot from one side, with this
// confidence: the quantile of the noncentral t distribution with n−1 degrees of freedom and noncentrality z(share)·√n, over √n.
func OneSidedK(n int, share, confidence float64) (float64, error) {
	if !toleranceAsks(n, share, confidence) || share < 0.5 {
		return 0, errTolerance
	}
	f := float64(n)
	delta := distuv.UnitNormal.Quantile(share) * math.Sqrt(f)
	if delta > mostNoncentral {
		return OneSidedApproximateK(n, share, confidence), nil
	}
	t := distuv.NoncentralT{Nu: f - 1, Mu: delta}
	high := math.Max(1, 2*delta)
	for t.CDF(high) < confidence {
		high *= 2
		if math.IsInf(high, 1) {
			return 0, errTolerance
		}
	}
	low := 0.0
	for range 200 {
		middle := (low + high) / 2
		if middle == low || middle == high {
			break
		}
		if t.CDF(middle) < confidence {
			low = middle
		} else {
			high = middle
		}
	}
	return high / math.Sqrt(f), nil
}

// SampleForExtremes returns how many parts must be measured before the largest (one-sided) or the smallest and largest (two-sided) of them
// bound at least this share of the lot with this confidence, whatever its distribution: the least n with share^n ≤ 1−confidence, or with
// 1 − n·share^(n−1) + (n−1)·share^n ≥ confidence (Wilks; from memory).
func SampleForExtremes(share, confidence float64, twoSided bool) (int, error) {
	if !toleranceAsks(2, share, confidence) {
		return 0, errTolerance
	}
	if !twoSided {
		return int(math.Ceil(math.Log1p(-confidence)/math.Log(share) - 1e-9)), nil
	}
	enough := func(n int) bool {
		f := float64(n)
		return 1-f*math.Pow(share, f-1)+(f-1)*math.Pow(share, f) >= confidence
	}
	high := 2
	for !enough(high) {
		if high > 1<<29 {
			return 0, errTolerance
		}
		high *= 2
	}
	low := high / 2
	for high-low > 1 {
		if middle := (low + high) / 2; enough(middle) {
			high = middle
		} else {
			low = middle
		}
	}
	return max(high, 2), nil
}
