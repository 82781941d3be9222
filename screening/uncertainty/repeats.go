package uncertainty

import (
	"math"

	"gonum.org/v1/gonum/stat"
)

// FewRepeats is how many repeats are too few for their own spread to be believed: of 2 or 3 the prior spread counts where it is larger.
const FewRepeats = 3

// Spread returns the sample standard deviation s of a series, ν = n-1 (JCGM 100, 4.2.2); 0 for fewer than two values.
func Spread(series []float64) float64 {
	if len(series) < 2 {
		return 0
	}
	return stat.StdDev(series, nil)
}

// OfMean returns s/√n, the standard uncertainty of the mean of a series (JCGM 100, 4.2.3); 0 for fewer than two values.
func OfMean(series []float64) float64 {
	if len(series) < 2 {
		return 0
	}
	return Spread(series) / math.Sqrt(float64(len(series)))
}

// Widening returns √((n-1)/(n-3)), by which the standard deviation of what is known of a mean exceeds s/√n, because s itself was found from
// only n values (JCGM 101, 6.4.9.4: a scaled t distribution). It is defined from n = 4 on; below it is 1, and [Repeats] takes a prior spread.
func Widening(n int) float64 {
	if n <= FewRepeats {
		return 1
	}
	return math.Sqrt(float64(n-1) / float64(n-3))
}

// SpreadDoubt returns the relative standard deviation of s itself, found from n values of a normal distribution: √(1-c4²)/c4 (JCGM 100,
// table E.1): 0.76 for n = 2, 0.24 for n = 10. It is NaN below 2.
func SpreadDoubt(n int) float64 {
	if n < 2 {
		return math.NaN()
	}
	a, _ := math.Lgamma(float64(n) / 2)
	b, _ := math.Lgamma(float64(n-1) / 2)
	c4 := math.Sqrt(2/float64(n-1)) * math.Exp(a-b)
	return math.Sqrt(math.Max(0, 1-c4*c4)) / c4
}

// Scatter is what a series of repeats contributes to the uncertainty of its mean.
type Scatter struct {
	U       float64 // standard uncertainty of the mean, Factor included
	Factor  float64 // Widening; 1 where there is none
	Freedom float64 // degrees of freedom of U/Factor; +Inf where the prior spread counts
	Prior   bool    // the prior spread was larger than that of the few repeats, and counts
}

// OfRepeats evaluates n values with sample standard deviation s. Of 2 or 3 the larger of s and the prior spread counts, over √n; from 4 on
// s/√n times [Widening].
func OfRepeats(n int, s, prior float64) Scatter {
	root := math.Sqrt(float64(n))
	switch {
	case n < 2:
		return Scatter{Factor: 1, Freedom: math.Inf(1)}
	case n > FewRepeats:
		w := Widening(n)
		return Scatter{U: w * s / root, Factor: w, Freedom: float64(n - 1)}
	case prior > s:
		return Scatter{U: prior / root, Factor: 1, Freedom: math.Inf(1), Prior: true}
	}
	return Scatter{U: s / root, Factor: 1, Freedom: float64(n - 1)}
}

// Behaviour is what a series of repeats does.
type Behaviour uint8

// The behaviours.
const (
	Steady   Behaviour = iota // nothing but scatter that the meter explains
	Drifting                  // still moving one way
	Restless                  // scattering by more than the meter can be off, to the end
)

// String returns "steady", "still drifting" or "never settled".
func (b Behaviour) String() string {
	return [...]string{"steady", "still drifting", "never settled"}[min(int(b), 2)]
}

// Probability at which a slope counts as one, and the digits by which it must move: a last digit that flickers is no drift (house).
const (
	driftSurely = 0.95
	driftSteps  = 2
	normal95    = 1.9599 // of a normal distribution, rounded down
)

// BehaviourOf looks at a series in the order in which it was taken, with the value of one digit and the half-width by which the meter may
// be off. It drifts where the slope of a straight line through it differs from none at 95 % by Student's t (ν = n-2) and moves it by more
// than two digits in all; the digit's own scatter counts in full, so that a few equal steps prove nothing by themselves. It never settled
// where it does not drift and scatters by more than the half-width, in its second half too. Both are rules of the house on the textbook
// statistics. slope is the change from one reading to the next. Fewer than three values are steady.
func BehaviourOf(series []float64, step, halfWidth float64) (b Behaviour, slope float64) {
	n := len(series)
	if n < 3 {
		return Steady, 0
	}
	middle := float64(n-1) / 2
	mean := stat.Mean(series, nil)
	var sxx, sxy, syy float64
	for i, y := range series {
		dx, dy := float64(i)-middle, y-mean
		sxx, sxy, syy = sxx+dx*dx, sxy+dx*dy, syy+dy*dy
	}
	slope = sxy / sxx
	freedom := float64(n - 2)
	residual := math.Max(0, syy-slope*sxy)/freedom + step*step/12
	moved := math.Abs(slope) * float64(n-1)
	// Student's t is dear, and never below the normal quantile: most series are settled without it.
	if ratio := slope * slope * sxx; moved > driftSteps*step && ratio > normal95*normal95*residual {
		if t := CoverageFactor(driftSurely, freedom); ratio > t*t*residual {
			return Drifting, slope
		}
	}
	half := n / 2
	if halfWidth > 0 && n > FewRepeats && Spread(series) > halfWidth && Spread(series[n-half:]) > halfWidth {
		return Restless, slope
	}
	return Steady, slope
}
