package uncertainty

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat/distuv"
)

// Kind says what sort of thing contributes.
type Kind uint8

// The kinds of contribution.
const (
	Specification Kind = iota // what the meter's maker claims
	Digit                     // the resolution of the display, or of what was written down
	Repeats                   // the scatter of several readings
	Offset                    // leads and jig, corrected for but not perfectly known
	Conversion                // a rule that brings a reading to another condition
	Input                     // a reading that the result was computed from
)

var kindNames = [...]string{"specification", "resolution", "repeats", "offset", "conversion", "input"}

// String returns the kind as JSON spells it.
func (k Kind) String() string { return kindNames[min(int(k), len(kindNames)-1)] }

// Contribution is one line of a budget.
type Contribution struct {
	Kind        Kind
	Name        string  // what it is: "±(1 % + 2 counts)"
	U           float64 // standard uncertainty of the input, in the input's unit; Factor included
	Sensitivity float64 // ∂result/∂input
	Freedom     float64 // degrees of freedom of U/Factor; +Inf, or 0 for short, where U is taken as known
	Factor      float64 // by which few repeats widen s/√n (JCGM 101, 6.4.9.4); 0 and 1 are none
	Source      string  // where U is from
}

// Part returns |c·u|: what it contributes, in the result's unit.
func (c Contribution) Part() float64 { return math.Abs(c.Sensitivity * c.U) }

func (c Contribution) freedom() float64 {
	if c.Freedom <= 0 {
		return math.Inf(1)
	}
	return c.Freedom
}

// plain returns c·u without Factor: what JCGM 100 combines and counts degrees of freedom of.
func (c Contribution) plain() float64 {
	if c.Factor > 1 {
		return c.Sensitivity * c.U / c.Factor
	}
	return c.Sensitivity * c.U
}

// Correlation says that the inputs of two contributions, by their places in the budget, are correlated with coefficient R in -1 to 1.
type Correlation struct {
	I, J int
	R    float64
}

// Budget is a result with everything that makes it uncertain.
type Budget struct {
	Value         float64
	Contributions []Contribution
	Correlations  []Correlation // each pair once; what is not listed is independent
}

// Combined returns the combined standard uncertainty (JCGM 100, 5.2.2).
func (b Budget) Combined() float64 {
	return b.combine(func(c Contribution) float64 { return c.Sensitivity * c.U })
}

// combine sums squares and covariances of the parts. A rounding error below zero, where everything cancels, is zero.
func (b Budget) combine(part func(Contribution) float64) float64 {
	var sum float64
	for _, c := range b.Contributions {
		x := part(c)
		sum += x * x
	}
	for _, r := range b.Correlations {
		if b.has(r) {
			sum += 2 * r.R * part(b.Contributions[r.I]) * part(b.Contributions[r.J])
		}
	}
	return math.Sqrt(math.Max(0, sum))
}

func (b Budget) has(r Correlation) bool {
	n := len(b.Contributions)
	return r.I >= 0 && r.J >= 0 && r.I < n && r.J < n && r.I != r.J
}

// Freedom returns the effective degrees of freedom uc⁴/Σ(ui⁴/νi) of Welch and Satterthwaite (JCGM 100, G.4.1), +Inf where nothing limits
// them. The formula is for independent contributions; correlated ones enter together, as one with the fewest degrees of freedom among them,
// which gives n-1 where all were observed n times together.
func (b Budget) Freedom() float64 {
	group := make([]int, len(b.Contributions))
	for i := range group {
		group[i] = i
	}
	for _, r := range b.Correlations {
		if b.has(r) && r.R != 0 {
			from, to := group[r.J], group[r.I]
			for i := range group {
				if group[i] == from {
					group[i] = to
				}
			}
		}
	}
	variance, fewest := make([]float64, len(group)), make([]float64, len(group))
	var total, sum float64
	for i, c := range b.Contributions {
		g := group[i]
		variance[g] += c.plain() * c.plain()
		if fewest[g] == 0 || c.freedom() < fewest[g] {
			fewest[g] = c.freedom()
		}
	}
	for _, r := range b.Correlations {
		if b.has(r) {
			variance[group[r.I]] += 2 * r.R * b.Contributions[r.I].plain() * b.Contributions[r.J].plain()
		}
	}
	for g := range variance {
		total += variance[g]
		if fewest[g] > 0 {
			sum += variance[g] * variance[g] / fewest[g]
		}
	}
	if sum <= 0 {
		return math.Inf(1)
	}
	return total * total / sum
}

// Expanded returns U = k·uc that covers the value with probability p, and k. As JCGM 100, G.4.1 does it, k is Student's t at the effective
// degrees of freedom rounded down, and uc is without the widening of few repeats, which k then stands for.
func (b Budget) Expanded(p float64) (expanded, k float64) {
	k = CoverageFactor(p, math.Floor(b.Freedom()))
	return k * b.combine(Contribution.plain), k
}

// CoverageFactor returns the k of a two-sided interval that covers with probability p: the quantile (1+p)/2 of Student's t with these degrees
// of freedom (JCGM 100, table G.2), of the normal distribution where they are infinite. It is NaN for a p outside 0 to 1 and fewer than one
// degree of freedom.
func CoverageFactor(p, freedom float64) float64 {
	switch {
	case !(p > 0 && p < 1), !(freedom >= 1):
		return math.NaN()
	case math.IsInf(freedom, 1):
		return distuv.UnitNormal.Quantile((1 + p) / 2)
	}
	return distuv.StudentsT{Sigma: 1, Nu: freedom}.Quantile((1 + p) / 2)
}

// BySize returns the contributions, the largest part first.
func (b Budget) BySize() []Contribution {
	sorted := slices.Clone(b.Contributions)
	slices.SortStableFunc(sorted, func(x, y Contribution) int { return cmp.Compare(y.Part(), x.Part()) })
	return sorted
}
