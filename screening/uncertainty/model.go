package uncertainty

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"

	"gonum.org/v1/gonum/stat"
)

// Sensitivities returns ∂f/∂xi at x by central differences over ±ui, so that ci·ui = ½·(f(xi+ui) - f(xi-ui)) (JCGM 100, 5.1.3, note 2). An
// input without uncertainty has sensitivity 0. x is as it was when it returns.
func Sensitivities(f func([]float64) float64, x, u []float64) []float64 {
	c := make([]float64, len(x))
	at := slices.Clone(x)
	for i := range min(len(x), len(u)) {
		if u[i] == 0 {
			continue
		}
		at[i] = x[i] + u[i]
		up := f(at)
		at[i] = x[i] - u[i]
		c[i] = (up - f(at)) / (2 * u[i])
		at[i] = x[i]
	}
	return c
}

// Covariance returns that of two results y and z computed from the same inputs: Σi Σj (∂y/∂xi)·(∂z/∂xj)·u(xi,xj) (JCGM 100, F.1.2.3 and
// H.2). Both list the same inputs in the same order, and the correlations are those of y.
func Covariance(y, z Budget) float64 {
	var sum float64
	for i := range min(len(y.Contributions), len(z.Contributions)) {
		a, b := y.Contributions[i], z.Contributions[i]
		sum += a.Sensitivity * a.U * b.Sensitivity * b.U
	}
	for _, r := range y.Correlations {
		if y.has(r) && z.has(r) {
			yi, yj, zi, zj := y.Contributions[r.I], y.Contributions[r.J], z.Contributions[r.I], z.Contributions[r.J]
			sum += r.R * (yi.Sensitivity*yi.U*zj.Sensitivity*zj.U + yj.Sensitivity*yj.U*zi.Sensitivity*zi.U)
		}
	}
	return sum
}

// CorrelationOf returns the correlation coefficient of two series that were read together, pair by pair (JCGM 100, 5.2.3); NaN where they
// differ in length, are shorter than two, or one does not vary.
func CorrelationOf(x, y []float64) float64 {
	if len(x) != len(y) || len(x) < 2 {
		return math.NaN()
	}
	return stat.Correlation(x, y, nil)
}

// MaxTrials is the most trials that [Propagate] takes.
const MaxTrials = 10_000_000

// Rander draws from what is known of an input. Distributions of gonum's distuv are Randers.
type Rander interface{ Rand() float64 }

// Propagated is what a Monte Carlo propagation finds.
type Propagated struct {
	Mean, U   float64
	Low, High float64 // of the interval with equal tails that covers with the probability asked for
}

// Propagate carries distributions through f by that many trials (JCGM 101, 7): for results that are far from linear in inputs with large
// uncertainty, where the law of propagation does not hold. draw hands f its inputs from one source of randomness, seeded, so that it repeats.
// It returns an error for a number of trials outside 100 to [MaxTrials] and a p outside 0 to 1.
func Propagate(f func([]float64) float64, draw func(*rand.Rand) []Rander, trials int, seed uint64, p float64) (Propagated, error) {
	if trials < 100 || trials > MaxTrials || !(p > 0 && p < 1) {
		return Propagated{}, errors.New("a propagation takes from 100 to 10000000 trials and a probability between 0 and 1")
	}
	inputs := draw(rand.New(rand.NewPCG(seed, seed)))
	x, y := make([]float64, len(inputs)), make([]float64, trials)
	for t := range y {
		for i, in := range inputs {
			x[i] = in.Rand()
		}
		y[t] = f(x)
	}
	slices.Sort(y)
	mean, u := stat.MeanStdDev(y, nil)
	tail := (1 - p) / 2
	return Propagated{mean, u, stat.Quantile(tail, stat.LinInterp, y, nil), stat.Quantile(1-tail, stat.LinInterp, y, nil)}, nil
}
