package lot

import (
	"math"
	"slices"
)

// AlgorithmA returns the robust mean and standard deviation of ISO 13528 (formula from memory): readings further than 1.5 standard deviations
// from the mean are pulled in to there, until nothing moves; the factor 1.134 gives back what that takes from a normal lot. It begins at the
// median and the scaled MAD, and is NaN without readings or where more than half of them are equal.
func (r *Readings) AlgorithmA() (mean, sd float64) {
	const (
		cut        = 1.5
		giveBack   = 1.134
		mostRounds = 1000
	)
	n := len(r.sorted)
	if n < 2 {
		return math.NaN(), math.NaN()
	}
	mean = quantile(r.sorted, 0.5, LotQuartiles)
	sd = madToSigma * medianDeviation(r.sorted, mean)
	if sd == 0 {
		return math.NaN(), math.NaN()
	}
	pulled := make([]float64, n)
	for range mostRounds {
		for i, x := range r.sorted {
			pulled[i] = min(max(x, mean-cut*sd), mean+cut*sd)
		}
		m, s := meanSD(pulled)
		s *= giveBack
		settled := math.Abs(m-mean) <= 1e-14*math.Abs(m) && math.Abs(s-sd) <= 1e-13*s
		if mean, sd = m, s; settled {
			break
		}
	}
	return mean, sd
}

// HuberMean returns Huber's robust mean with the spread held at the scaled MAD and readings pulled in at 1.5 of it. It is NaN without
// readings; where more than half are equal it is the median.
func (r *Readings) HuberMean() float64 {
	const (
		cut        = 1.5
		mostRounds = 1000
	)
	mean := quantile(r.sorted, 0.5, LotQuartiles)
	if len(r.sorted) == 0 {
		return mean
	}
	reach := cut * madToSigma * medianDeviation(r.sorted, mean)
	if reach == 0 {
		return mean
	}
	pulled := make([]float64, len(r.sorted))
	for range mostRounds {
		for i, x := range r.sorted {
			pulled[i] = min(max(x, mean-reach), mean+reach)
		}
		slices.Sort(pulled)
		m, _ := meanSD(pulled)
		settled := math.Abs(m-mean) <= 1e-14*math.Abs(m)
		if mean = m; settled {
			break
		}
	}
	return mean
}
