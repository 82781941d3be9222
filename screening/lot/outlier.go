package lot

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat/distuv"

	"goodbin/screening"
)

const (
	// averageSigmas is how many robust sigmas part average testing leaves a part from the median.
	averageSigmas = 6
	// leastForAverage is the number of parts from which quartiles are steady enough for it (house; AEC-Q001 bases its limits on six lots of
	// 30). With fewer, Dixon's and Grubbs's tests look at the parts themselves.
	leastForAverage = 20
	// leastStepSigmas: readings cannot show a spread finer than half their last digit (house).
	leastStepSigmas = 0.5
	// smallAlpha is the one-sided level of Dixon's and Grubbs's tests here, so 1 % for both ends: in a hundred bags of sound parts one
	// has a part named.
	smallAlpha = 0.005
	// ModifiedZ is the limit of the modified z-score (second-hand; NIST/SEMATECH 1.3.5.17 from memory).
	ModifiedZ = 3.5
)

// averageSource is where part average testing is from.
var averageSource = screening.Source{Document: "AEC-Q001: median ± 6 robust sigma, robust sigma (Q3−Q1)/1.35", Status: screening.SecondHand}

// PartAverage is the limits of part average testing: what the lot's own spread allows a part, inside what the data sheet does.
type PartAverage struct {
	Limits            // median ± 6 robust sigma, never wider than the limits given
	Median    float64 // SI
	Sigma     float64 // robust sigma, SI; at least half the step
	Rule      QuantileRule
	Enough    bool // at least 20 parts, and a spread that the digits show; else Limits are those given
	Source    screening.Source
	LowIsOwn  bool // the low limit is the lot's, tighter than the one given
	HighIsOwn bool // the same of the high one
}

// PartAverage returns the limits of part average testing after AEC-Q001, with quartiles by a rule; [LotQuartiles] is this program's.
func (r *Readings) PartAverage(l Limits, rule QuantileRule) PartAverage {
	p := PartAverage{Limits: l, Rule: rule, Source: averageSource}
	p.Median = quantile(r.sorted, 0.5, rule)
	p.Sigma = (quantile(r.sorted, 0.75, rule) - quantile(r.sorted, 0.25, rule)) / iqrToSigma
	p.Sigma = math.Max(p.Sigma, leastStepSigmas*r.Step)
	if len(r.sorted) < leastForAverage || !(p.Sigma > 0) {
		return p
	}
	p.Enough = true
	if low := p.Median - averageSigmas*p.Sigma; low > l.Low {
		p.Low, p.LowIsOwn = low, true
	}
	if high := p.Median + averageSigmas*p.Sigma; high < l.High {
		p.High, p.HighIsOwn = high, true
	}
	return p
}

// ModifiedZScores returns 0.6745·(x − median)/MAD of every part in the order of measuring; beyond ±3.5 a part is unlike its fellows. Where
// more than half the parts read the same the MAD is 0 and the scores are not finite.
func (r *Readings) ModifiedZScores() []float64 {
	median := quantile(r.sorted, 0.5, LotQuartiles)
	if len(r.sorted) == 0 {
		return nil
	}
	scale := madToSigma * medianDeviation(r.sorted, median)
	out := make([]float64, len(r.inOrder))
	for i, x := range r.inOrder {
		out[i] = (x - median) / scale
	}
	return out
}

// Grubbs returns the largest distance from the mean in standard deviations, and whether it is the high end's. It is NaN for fewer than three
// parts, 0 where all read the same.
func (r *Readings) Grubbs() (g float64, high bool) {
	if len(r.sorted) < 3 {
		return math.NaN(), false
	}
	s := r.Summary()
	if s.SD == 0 {
		return 0, false
	}
	up, down := (s.Max-s.Mean)/s.SD, (s.Mean-s.Min)/s.SD
	return math.Max(up, down), up >= down
}

// GrubbsCritical returns Grubbs's critical value for one end at level alpha: (n−1)/√n·√(t²/(n−2+t²)) with t the upper alpha/n quantile of
// Student's distribution with n−2 degrees of freedom. For either end use alpha/2. It is NaN for fewer than three parts.
func GrubbsCritical(n int, alpha float64) float64 {
	if n < 3 || !(alpha > 0 && alpha < 1) {
		return math.NaN()
	}
	f := float64(n)
	t := distuv.StudentsT{Sigma: 1, Nu: f - 2}.Quantile(1 - alpha/f)
	return (f - 1) / math.Sqrt(f) * math.Sqrt(t*t/(f-2+t*t))
}

// Outlier is a part that is unlike its fellows.
type Outlier struct {
	Index     int // in the order of measuring
	Value     float64
	Within    bool    // it keeps the limits all the same
	Test      string  // the test and its threshold
	Statistic float64 // in the test's own measure
	Threshold float64
	Why       string
}

// Outliers names the parts unlike their fellows, worst first, and so those to look at although they pass: from 20 parts on by part average
// testing; with fewer by Dixon's ratio (to 7 parts) or Grubbs's test (8 to 19), again without the part found, up to a quarter of the parts.
// Fewer than four parts have no outliers: none of three tells who is wrong.
func (r *Readings) Outliers(l Limits) []Outlier {
	if len(r.sorted) >= leastForAverage {
		return r.averageOutliers(l)
	}
	return r.smallOutliers(l)
}

func (r *Readings) averageOutliers(l Limits) []Outlier {
	p := r.PartAverage(NoLimits(), LotQuartiles)
	if !p.Enough {
		return nil
	}
	var out []Outlier
	for i, x := range r.inOrder {
		if p.Hold(x) {
			continue
		}
		sigmas := math.Abs(x-p.Median) / p.Sigma
		out = append(out, Outlier{
			Index: i, Value: x, Within: l.Hold(x), Statistic: sigmas, Threshold: averageSigmas,
			Test: "part average testing, AEC-Q001: 6 robust sigma from the median, quartiles by " + LotQuartiles.String(),
			Why: fmt.Sprintf("%s is %.3g robust sigma from the median %s; the lot leaves %s to %s",
				r.print(x), sigmas, r.print(p.Median), r.print(p.Low), r.print(p.High)),
		})
	}
	slices.SortStableFunc(out, func(a, b Outlier) int {
		switch {
		case a.Statistic > b.Statistic:
			return -1
		case a.Statistic < b.Statistic:
			return 1
		}
		return 0
	})
	return out
}

// leastForSmall is the fewest parts among which one can be called the odd one.
const leastForSmall = 4

func (r *Readings) smallOutliers(l Limits) []Outlier {
	left := &Readings{Unit: r.Unit, Step: r.Step, sorted: slices.Clone(r.sorted)}
	var out []Outlier
	for n := len(left.sorted); n >= leastForSmall && 4*len(out) < len(r.sorted); n = len(left.sorted) {
		o, high, found := left.smallOutlier()
		if !found {
			break
		}
		at := 0
		if high {
			at = n - 1
		}
		o.Value = left.sorted[at]
		o.Index = r.indexOf(o.Value, out)
		o.Within = l.Hold(o.Value)
		o.Why = fmt.Sprintf("%s stands apart from the other %d: %s %.3g, above %.3g", r.print(o.Value), n-1, o.Test, o.Statistic, o.Threshold)
		out = append(out, o)
		left.sorted = slices.Delete(left.sorted, at, at+1)
	}
	return out
}

// smallOutlier tests the more suspect end of a few parts. A gap no wider than the last digit is none.
func (r *Readings) smallOutlier() (o Outlier, high, found bool) {
	n := len(r.sorted)
	if n <= 7 {
		var ratio string
		ratio, o.Statistic, high = r.Dixon()
		o.Threshold, _ = DixonCritical(ratio, n, smallAlpha)
		o.Test = "Dixon's " + ratio
	} else {
		o.Statistic, high = r.Grubbs()
		o.Threshold = GrubbsCritical(n, smallAlpha)
		o.Test = "Grubbs's G"
	}
	gap := r.sorted[1] - r.sorted[0]
	if high {
		gap = r.sorted[n-1] - r.sorted[n-2]
	}
	return o, high, o.Statistic > o.Threshold && gap > r.Step*1.5
}

// indexOf finds the place of a value in the order of measuring among those not yet named.
func (r *Readings) indexOf(x float64, named []Outlier) int {
	for i, y := range r.inOrder {
		if y == x && !slices.ContainsFunc(named, func(o Outlier) bool { return o.Index == i }) {
			return i
		}
	}
	return -1
}
