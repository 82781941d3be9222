package lot

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
)

// Within is how far apart the members of a group may read: Relative times the middle of the largest and smallest, plus Absolute in SI.
type Within struct{ Relative, Absolute float64 }

// holds reports whether the two ends of a group are near enough.
func (w Within) holds(low, high float64) bool {
	return high-low <= w.Relative*math.Abs(low+high)/2+w.Absolute
}

// Forecast says how many more parts must be measured before a group is found.
type Forecast struct {
	Have       []int // places of a group that is already there, the tightest; nil where there is none
	Likely     int   // more parts after which half of such bags hold a group; 0 where there is one already
	Sure       int   // more parts after which nine in ten do
	Most       int   // parts looked ahead; a number above it means that more are needed
	Assumption string
}

const (
	forecastRuns  = 400 // bags drawn; the numbers scatter by about 5 % (house)
	leastForecast = 5   // parts before a spread is worth extrapolating
	mostForecast  = 1000
	mostGroup     = 16
)

var errGroup = fmt.Errorf("group: its size is 2 to %d and the spread allowed is above 0, such as 0.02 for 2 %%", mostGroup)

// MoreForGroup says how many more parts must be measured, of at most so many left, until size of them read within a spread. It draws bags
// from a normal distribution with the median and robust sigma of the parts so far, which must be five at least, adds their parts to those
// measured one by one and counts; the same readings give the same answer whatever their order. Parts that are already in a set are to be
// left out beforehand.
func (r *Readings) MoreForGroup(size int, w Within, left int) (Forecast, error) {
	if size < 2 || size > mostGroup || !(w.Relative >= 0) || !(w.Absolute >= 0) || !(w.Relative+w.Absolute > 0) || left < 0 {
		return Forecast{}, errGroup
	}
	f := Forecast{Most: min(left, mostForecast)}
	if low, found := tightest(r.sorted, size, w); found {
		f.Have = r.places(r.sorted[low : low+size])
		f.Assumption = "such a group is among the parts measured"
		return f, nil
	}
	if len(r.sorted) < leastForecast {
		return Forecast{}, errors.New("group: measure five parts at least; fewer do not show how the lot is spread")
	}
	s := r.Summary()
	sigma := math.Max(s.RobustSigma, leastStepSigmas*r.Step)
	f.Assumption = fmt.Sprintf("the parts left come from the same normal distribution as the %d measured: median %s, robust sigma %s",
		s.N, r.print(s.Median), r.print(sigma))
	random := rand.New(rand.NewPCG(uint64(len(r.sorted)), uint64(size)))
	needed := make([]int, forecastRuns)
	bag := make([]float64, 0, len(r.sorted)+f.Most)
	for k := range needed {
		bag = append(bag[:0], r.sorted...)
		needed[k] = f.Most + 1
		for i := 1; i <= f.Most; i++ {
			x := s.Median + sigma*random.NormFloat64()
			at, _ := slices.BinarySearch(bag, x)
			bag = slices.Insert(bag, at, x)
			if completes(bag, at, size, w) {
				needed[k] = i
				break
			}
		}
	}
	slices.Sort(needed)
	f.Likely, f.Sure = needed[forecastRuns/2-1], needed[forecastRuns*9/10-1]
	return f, nil
}

// completes reports whether the value at a place of sorted ones is in a group.
func completes(sorted []float64, at, size int, w Within) bool {
	for low := max(0, at-size+1); low <= at && low+size <= len(sorted); low++ {
		if w.holds(sorted[low], sorted[low+size-1]) {
			return true
		}
	}
	return false
}

// tightest returns where the tightest group within the spread begins.
func tightest(sorted []float64, size int, w Within) (low int, found bool) {
	best := math.Inf(1)
	for i := 0; i+size <= len(sorted); i++ {
		if d := sorted[i+size-1] - sorted[i]; d < best && w.holds(sorted[i], sorted[i+size-1]) {
			best, low, found = d, i, true
		}
	}
	return low, found
}

// places finds where readings stand in the order of measuring, each place once.
func (r *Readings) places(values []float64) []int {
	var out []int
	for _, x := range values {
		for i, y := range r.inOrder {
			if y == x && !slices.Contains(out, i) {
				out = append(out, i)
				break
			}
		}
	}
	slices.Sort(out)
	return out
}
