package lot

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"

	"goodbin/screening/quantity"
)

// Readings are one characteristic of a lot's parts in the order of measuring. A part's index is its place in that order, from 0.
type Readings struct {
	Unit quantity.Unit // what texts print values in
	Step float64       // the last digit of the coarsest reading, SI; 0 where it is not known

	inOrder []float64
	sorted  []float64
}

// New returns the readings of a lot so far. It fails where a value is no number or infinite, or the step is negative.
func New(unit quantity.Unit, step float64, values ...float64) (*Readings, error) {
	if !(step >= 0) || math.IsInf(step, 0) {
		return nil, fmt.Errorf("step: %g is no size of a last digit", step)
	}
	for i, x := range values {
		if err := finite(x, i); err != nil {
			return nil, err
		}
	}
	r := &Readings{Unit: unit, Step: step, inOrder: slices.Clone(values), sorted: slices.Clone(values)}
	slices.Sort(r.sorted)
	return r, nil
}

func finite(x float64, index int) error {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return fmt.Errorf("part %d: %g is no reading that statistics can use", index+1, x)
	}
	return nil
}

// Add puts the next part's reading to the others. It fails where the value is no number or infinite.
func (r *Readings) Add(x float64) error {
	if err := finite(x, len(r.inOrder)); err != nil {
		return err
	}
	r.inOrder = append(r.inOrder, x)
	at, _ := slices.BinarySearch(r.sorted, x)
	r.sorted = slices.Insert(r.sorted, at, x)
	return nil
}

// Len returns how many parts were measured.
func (r *Readings) Len() int { return len(r.inOrder) }

// InOrder returns a copy of the readings in the order of measuring.
func (r *Readings) InOrder() []float64 { return slices.Clone(r.inOrder) }

// print shows a value with the unit of the readings, to four significant digits.
func (r *Readings) print(x float64) string { return quantity.Format(x, r.Unit, 4) }

// Limits are the bounds that the lot's parts must keep, SI; ±Inf where open.
type Limits struct{ Low, High float64 }

// NoLimits leaves both sides open.
func NoLimits() Limits { return Limits{math.Inf(-1), math.Inf(1)} }

// Hold reports whether a value keeps the limits; a value on a bound does.
func (l Limits) Hold(x float64) bool { return x >= l.Low && x <= l.High }

// QuantileRule is how a quantile between two readings is read off (Hyndman and Fan 1996). On 100 readings the choice alone moves the limits
// of part average testing by 12 %, so one is fixed: [LotQuartiles].
type QuantileRule uint8

// The rules that programs use. Position h counts sorted readings from 1; between two of them the line joining them is taken.
const (
	Type6 QuantileRule = 6 // h = (n+1)p
	Type7 QuantileRule = 7 // h = (n−1)p + 1, the inclusive quartile of spreadsheets
	Type8 QuantileRule = 8 // h = (n+1/3)p + 1/3, about unbiased for the median of the quantile
)

// LotQuartiles is the rule for every quartile that this package reports: of the three it alone gives a robust sigma that is nearly right on
// average at any number of parts, where type 7 reads a quarter low on five parts and so finds outliers that are none.
const LotQuartiles = Type8

// String names the rule in full.
func (q QuantileRule) String() string { return fmt.Sprintf("Hyndman-Fan type %d", uint8(q)) }

// Quantile returns the p-quantile (0 ≤ p ≤ 1) by a rule; NaN without readings, outside that range and for a rule there is none of.
func (r *Readings) Quantile(p float64, rule QuantileRule) float64 { return quantile(r.sorted, p, rule) }

func quantile(sorted []float64, p float64, rule QuantileRule) float64 {
	n := float64(len(sorted))
	if n == 0 || !(p >= 0 && p <= 1) {
		return math.NaN()
	}
	var h float64
	switch rule {
	case Type6:
		h = (n + 1) * p
	case Type7:
		h = (n-1)*p + 1
	case Type8:
		h = (n+1./3)*p + 1./3
	default:
		return math.NaN()
	}
	h = min(max(h, 1), n)
	below := math.Floor(h)
	low := sorted[int(below)-1]
	if h == below {
		return low
	}
	return low + (h-below)*(sorted[int(below)]-low)
}

const (
	// iqrToSigma is the interquartile range of a normal distribution in sigmas as AEC-Q001 rounds it; exactly it is 1.34898.
	iqrToSigma = 1.35
	// madToSigma is 1/Φ⁻¹(0.75), which makes the median absolute deviation of a normal distribution its sigma.
	madToSigma = 1.482602218505602
)

// Summary describes the readings so far, in SI units. Of no readings everything but N is NaN; the spreads of one reading are NaN.
type Summary struct {
	N           int
	Min, Max    float64
	Mean        float64
	SD          float64 // with n−1
	Median      float64
	Q1, Q3      float64 // quartiles by LotQuartiles
	RobustSigma float64 // (Q3−Q1)/1.35, as AEC-Q001 has it
	MAD         float64 // median absolute deviation from the median
	ScaledMAD   float64 // 1.4826·MAD: another robust sigma, blind to less than half of the parts
}

// MeanUncertainty returns the standard uncertainty of the mean from the scatter alone, SD/√n (JCGM 100, 4.2.3).
func (s Summary) MeanUncertainty() float64 { return s.SD / math.Sqrt(float64(s.N)) }

// Summary describes the readings so far. It does not depend on the order of measuring.
func (r *Readings) Summary() Summary {
	nan := math.NaN()
	s := Summary{N: len(r.sorted), Min: nan, Max: nan, Mean: nan, SD: nan, Median: nan, Q1: nan, Q3: nan, RobustSigma: nan, MAD: nan, ScaledMAD: nan}
	if s.N == 0 {
		return s
	}
	s.Min, s.Max = r.sorted[0], r.sorted[s.N-1]
	s.Mean, s.SD = meanSD(r.sorted)
	s.Median = quantile(r.sorted, 0.5, LotQuartiles)
	s.Q1, s.Q3 = quantile(r.sorted, 0.25, LotQuartiles), quantile(r.sorted, 0.75, LotQuartiles)
	if s.N == 1 {
		return s
	}
	s.RobustSigma = (s.Q3 - s.Q1) / iqrToSigma
	s.MAD = medianDeviation(r.sorted, s.Median)
	s.ScaledMAD = madToSigma * s.MAD
	return s
}

// meanSD returns mean and standard deviation of sorted values. Both work on the distances from the middle one, so that digits common to all
// readings cost nothing.
func meanSD(sorted []float64) (mean, sd float64) {
	middle := sorted[len(sorted)/2]
	distances := make([]float64, len(sorted))
	for i, x := range sorted {
		distances[i] = x - middle
	}
	m, v := stat.MeanVariance(distances, nil)
	if len(sorted) == 1 {
		return sorted[0], math.NaN()
	}
	return middle + m, math.Sqrt(v)
}

// medianDeviation returns the median distance from the median. Both halves of the sorted readings are already in order of distance, so that
// merging them from the median outwards needs no sorting.
func medianDeviation(sorted []float64, median float64) float64 {
	right, _ := slices.BinarySearch(sorted, median)
	left := right - 1
	n := len(sorted)
	next := func() float64 {
		if right >= n || left >= 0 && median-sorted[left] <= sorted[right]-median {
			left--
			return median - sorted[left+1]
		}
		right++
		return sorted[right-1] - median
	}
	var last, current float64
	for range n/2 + 1 {
		last, current = current, next()
	}
	if n%2 == 1 {
		return current
	}
	return (last + current) / 2
}
