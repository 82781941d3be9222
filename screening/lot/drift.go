package lot

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

const (
	// leastForDrift is the fewest parts whose order says anything.
	leastForDrift = 10
	// inOrder is the rank correlation from which readings were sorted rather than drifting (house): noise of a fiftieth of the trend already
	// brings it down to this.
	inOrder = 0.995
	// again is how many parts at the start and at the end are worth measuring again.
	again = 3
)

// Trend is how the readings move with the order of measuring.
type Trend struct {
	Rank   float64 // Spearman's rank correlation of reading and place, −1 to 1
	Chance float64 // that readings in random order correlate as much, either way
	Change float64 // median of the last third less that of the first, SI
	LagOne float64 // autocorrelation of neighbours
}

// LagOne returns how much neighbours in the order of measuring agree, −1 to 1: Σ(x_i−m)(x_{i+1}−m)/Σ(x_i−m)². Readings in random order are
// near 0. It is NaN where all are equal.
func (r *Readings) LagOne() float64 {
	if len(r.inOrder) < 2 {
		return math.NaN()
	}
	mean, _ := meanSD(r.sorted)
	products, squares := 0.0, 0.0
	for i, x := range r.inOrder {
		squares += (x - mean) * (x - mean)
		if i > 0 {
			products += (x - mean) * (r.inOrder[i-1] - mean)
		}
	}
	return products / squares
}

// Trend returns Spearman's rank correlation of the readings with their order, equal readings sharing their mean rank, and its chance by
// Student's t with n−2 degrees of freedom: t = ρ·√((n−2)/(1−ρ²)). It assumes the parts were taken from the bag at random. With fewer than
// ten parts, or all equal, it reports false.
func (r *Readings) Trend() (Trend, bool) {
	n := len(r.inOrder)
	if n < leastForDrift || r.sorted[0] == r.sorted[n-1] {
		return Trend{}, false
	}
	places := make([]float64, n)
	for i := range places {
		places[i] = float64(i)
	}
	t := Trend{Rank: stat.Correlation(places, r.ranks(), nil), LagOne: r.LagOne()}
	third := n / 3
	t.Change = median(r.inOrder[n-third:]) - median(r.inOrder[:third])
	if left := 1 - t.Rank*t.Rank; left > 0 {
		student := distuv.StudentsT{Sigma: 1, Nu: float64(n - 2)}
		t.Chance = 2 * student.Survival(math.Abs(t.Rank)*math.Sqrt(float64(n-2)/left))
	}
	return t, true
}

// ranks returns the rank of every reading in the order of measuring, equal ones sharing their mean.
func (r *Readings) ranks() []float64 {
	out := make([]float64, len(r.inOrder))
	for i, x := range r.inOrder {
		first, _ := slices.BinarySearch(r.sorted, x)
		after, _ := slices.BinarySearch(r.sorted, math.Nextafter(x, math.Inf(1)))
		out[i] = float64(first+after-1) / 2
	}
	return out
}

func median(values []float64) float64 {
	sorted := slices.Clone(values)
	slices.Sort(sorted)
	return quantile(sorted, 0.5, LotQuartiles)
}

// orderSuspicion words a trend; nil where there is none.
func (r *Readings) orderSuspicion() *Suspicion {
	t, ok := r.Trend()
	if !ok || t.Chance > FalseAlarm {
		return nil
	}
	n := len(r.inOrder)
	if math.Abs(t.Rank) >= inOrder {
		return &Suspicion{
			Kind: InOrder, Test: "Spearman's rank correlation", Chance: t.Chance,
			Why: fmt.Sprintf("the readings stand in order of size (rank correlation %.3f): whether they drifted or were copied cannot be told; "+
				"enter them in the order of measuring", t.Rank),
		}
	}
	s := &Suspicion{Kind: Drift, Test: "Spearman's rank correlation", Chance: t.Chance}
	for i := range again {
		s.Parts = append(s.Parts, i)
	}
	for i := n - again; i < n; i++ {
		s.Parts = append(s.Parts, i)
	}
	s.Why = fmt.Sprintf("the readings drift as measuring goes on: the last third reads %s away from the first (rank correlation %.2f, by chance in %s of bags). "+
		"Measure the first and last three again with cold hands: if they differ less now, meter, room or fingers drifted; if not, the parts do",
		r.print(t.Change), t.Rank, percent(t.Chance))
	return s
}
