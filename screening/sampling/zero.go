package sampling

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mathext"

	"goodbin/screening"
)

// mostLot bounds the lots that a sample is counted out for.
const mostLot = 10_000_000

// Zero is a plan that accepts on zero for one very lot: test N parts; one bad part refuses the lot.
type Zero struct {
	Lot    int
	Worst  float64 // fraction bad at which the lot must not slip through (LTPD)
	Risk   float64 // chance allowed that such a lot is accepted all the same (consumer's risk)
	Bad    int     // bad parts in a lot that bad: max(1, floor(lot·worst))
	N      int     // parts to test, the fewest that do
	Chance float64 // chance that N parts show none of the Bad ones
	Source screening.Source
}

// AcceptOnZero returns the fewest parts to test, with none bad, before a lot of this many can be said not to hold the worst fraction, at
// this risk: the smallest n with C(lot−bad,n)/C(lot,n) ≤ risk, exactly (hypergeometric). For fewer than about 30 parts it is nearly all of
// them.
func AcceptOnZero(lot int, worst, risk float64) (Zero, error) {
	switch {
	case lot < 1 || lot > mostLot:
		return Zero{}, fmt.Errorf("lot: %d parts are no lot; it has 1 to %d", lot, mostLot)
	case !(worst > 0 && worst < 1):
		return Zero{}, fmt.Errorf("worst: %g %% is no share of bad parts; it is above 0 and below 100, such as 5", worst*100)
	case !(risk > 0 && risk < 1):
		return Zero{}, fmt.Errorf("risk: %g %% is no risk; it is above 0 and below 100, such as 10", risk*100)
	}
	const slack = 1e-9 // 100 × 0.29 is 28.999…
	z := Zero{
		Lot: lot, Worst: worst, Risk: risk, Bad: max(1, int(math.Floor(float64(lot)*worst+slack))), Chance: 1,
		Source: screening.Source{Document: "hypergeometric distribution, acceptance number 0", Status: screening.Derived},
	}
	for z.Chance > risk*(1+1e-12) && z.N < lot {
		left := lot - z.N
		z.Chance *= float64(max(0, left-z.Bad)) / float64(left)
		z.N++
	}
	return z, nil
}

// ApproximateZero returns the usual approximation (1−β^(1/D))·(lot−(D−1)/2) rounded up, never above the lot. Where it differs from
// [AcceptOnZero] it asks one part too many.
func ApproximateZero(lot, bad int, risk float64) int {
	d := float64(bad)
	n := (1 - math.Pow(risk, 1/d)) * (float64(lot) - (d-1)/2)
	return min(lot, int(math.Ceil(n-1e-9)))
}

// WithoutFailure returns how many parts must pass, none failing, before this share of good parts is shown with this confidence:
// ln(1−confidence)/ln(good), and that rounded up ("success run"; 0.95 at 0.90 is 45 parts, AEC-Q100's sample). It fails outside 0 to 1.
func WithoutFailure(good, confidence float64) (n int, exact float64, err error) {
	if !(good > 0 && good < 1 && confidence > 0 && confidence < 1) {
		return 0, 0, fmt.Errorf("success run: share %g and confidence %g must be above 0 and below 1", good, confidence)
	}
	exact = math.Log1p(-confidence) / math.Log(good)
	return int(math.Ceil(exact - 1e-9)), exact, nil
}

// MeanAtRisk returns the mean number of bad parts in a sample at which a plan with this acceptance number accepts with just this chance
// (Poisson): the m with Σ e^−m·m^i/i! = risk for i ≤ accept. Divided by the worst fraction it is the sample size.
func MeanAtRisk(accept int, risk float64) float64 {
	if accept < 0 || !(risk > 0 && risk < 1) {
		return math.NaN()
	}
	return mathext.GammaIncRegCompInv(float64(accept+1), risk)
}
