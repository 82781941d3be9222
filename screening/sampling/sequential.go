package sampling

import (
	"errors"
	"math"
)

// Sequential is Wald's test of a lot part by part: after each, go on, accept, or stop. It needs about half the parts of a single plan of
// the same risks, most of all when the lot is very good or very bad.
type Sequential struct {
	Good         float64 // fraction bad of a lot that should be accepted
	Bad          float64 // fraction bad of a lot that should be refused
	SupplierRisk float64 // chance that a good lot is refused (α)
	Risk         float64 // chance that a bad lot is accepted (β)

	h1, h2, s float64
	truncate  int
}

// NewSequential returns the test of these qualities and risks. Fractions and risks are above 0 and below 1, Good below Bad, and the risks
// together below 1. The test is cut off at three times the sample of the single plan with the same risks (NIST/SEMATECH 6.2.6).
func NewSequential(good, bad, supplierRisk, risk float64) (Sequential, error) {
	if !(good > 0 && good < bad && bad < 1) {
		return Sequential{}, errors.New("part by part: the good share of bad parts must be above 0 and below the bad one, such as 1 and 10 %")
	}
	if !(supplierRisk > 0 && risk > 0 && supplierRisk+risk < 1) {
		return Sequential{}, errors.New("part by part: each risk must be above 0 and both together below 100 %, such as 5 and 10 %")
	}
	q := Sequential{Good: good, Bad: bad, SupplierRisk: supplierRisk, Risk: risk}
	k := math.Log(bad*(1-good)) - math.Log(good*(1-bad))
	q.h1 = math.Log((1-supplierRisk)/risk) / k
	q.h2 = math.Log((1-risk)/supplierRisk) / k
	q.s = (math.Log1p(-good) - math.Log1p(-bad)) / k
	single, err := Find(good, 1-supplierRisk, bad, risk)
	if err != nil {
		return Sequential{}, err
	}
	q.truncate = 3 * single.N
	return q, nil
}

// Lines returns the two lines of the test: accept at bad ≤ −h1 + s·tested, refuse at bad ≥ h2 + s·tested.
func (q Sequential) Lines() (h1, h2, s float64) { return q.h1, q.h2, q.s }

// Truncation returns the number of parts at which the test is cut off.
func (q Sequential) Truncation() int { return q.truncate }

// AcceptAt returns the most bad parts among this many tested with which the lot is accepted; −1 while it cannot be.
func (q Sequential) AcceptAt(tested int) int {
	return max(-1, int(math.Floor(-q.h1+q.s*float64(tested))))
}

// RefuseAt returns the fewest bad parts among this many tested with which the lot is refused; −1 while it cannot be, since more would be
// needed than were tested.
func (q Sequential) RefuseAt(tested int) int {
	if n := int(math.Ceil(q.h2 + q.s*float64(tested))); n <= tested {
		return n
	}
	return -1
}

// Step is what to do after a part.
type Step uint8

// The steps.
const (
	GoOn Step = iota
	AcceptLot
	StopAndRefuse
)

// String returns the step in words.
func (s Step) String() string {
	return [...]string{"go on", "accept", "stop: refuse"}[min(s, StopAndRefuse)]
}

// After says what to do when so many of the parts tested were bad. At the truncation the nearer line decides.
func (q Sequential) After(tested, bad int) Step {
	refuse := q.RefuseAt(tested)
	switch {
	case refuse >= 0 && bad >= refuse:
		return StopAndRefuse
	case bad <= q.AcceptAt(tested):
		return AcceptLot
	case tested < q.truncate:
		return GoOn
	case float64(bad) <= (q.h2-q.h1)/2+q.s*float64(tested):
		return AcceptLot
	}
	return StopAndRefuse
}

// AfterInLot is [Sequential.After] for one lot of this many parts. It also ends when the count is certain: refused once the bad parts alone
// make the lot as bad as Bad, accepted once all that is left could not. Its risks are those of an endless stream, so for a lot they are on
// the safe side.
func (q Sequential) AfterInLot(lot, tested, bad int) Step {
	switch worst := q.Bad * float64(lot); {
	case float64(bad) >= worst:
		return StopAndRefuse
	case float64(bad+lot-tested) < worst:
		return AcceptLot
	}
	return q.After(tested, bad)
}

// FirstAcceptance returns the fewest parts after which a lot without a bad one is accepted.
func (q Sequential) FirstAcceptance() int { return int(math.Ceil(q.h1 / q.s)) }

// AverageNumber returns how many parts are tested on average in lots of the good and of the bad fraction (Wald's approximation, without the
// excess over the lines).
func (q Sequential) AverageNumber() (good, bad float64) {
	accept, refuse := math.Log(q.Risk/(1-q.SupplierRisk)), math.Log((1-q.Risk)/q.SupplierRisk)
	gain := func(p float64) float64 {
		return p*math.Log(q.Bad/q.Good) + (1-p)*(math.Log1p(-q.Bad)-math.Log1p(-q.Good))
	}
	good = ((1-q.SupplierRisk)*accept + q.SupplierRisk*refuse) / gain(q.Good)
	bad = (q.Risk*accept + (1-q.Risk)*refuse) / gain(q.Bad)
	return good, bad
}
