package conformity

import (
	"errors"
	"math"
	"slices"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/stat/distuv"
)

// Prior is what is known of items before they are measured: the density of their true values. distuv.Normal and distuv.Gamma are priors.
//
// For salvaged parts it is no factory's narrow curve, and a global risk is only as good as the prior: say which one was used.
type Prior interface {
	Prob(x float64) float64
	CDF(x float64) float64
	Quantile(p float64) float64
}

// ErrRisk says that a risk cannot be computed.
var ErrRisk = errors.New("a global risk needs a prior, a standard uncertainty above zero and an interval that tolerates something")

// Risks are the global risks of measuring and deciding (JCGM 106:2012, 9.5), as probabilities over all items.
type Risks struct {
	Conforming float64 // before measuring
	Accepted   float64
	Consumer   float64 // RC: does not conform and is accepted
	Producer   float64 // RP: conforms and is rejected
}

// FalseAccepted returns the share of accepted items that do not conform: the consumer's risk conditional on acceptance.
func (r Risks) FalseAccepted() float64 { return r.Consumer / r.Accepted }

// Nodes per panel, how far from an edge the error curve matters in u, and the tail of the prior that is left out. Halving or doubling the
// first changes no check value by more than 1e-12.
const (
	nodes = 48
	reach = 9
	tail  = 1e-14
)

// GlobalRisks integrates prior and meter: items whose true values follow the prior are measured with standard uncertainty u and accepted when
// the reading lies in accept; they conform when the true value lies in tolerance. The integrals are Gauss-Legendre sums over panels that end
// where prior, tolerance or acceptance turn. It returns [ErrRisk] for arguments that make no sense.
func GlobalRisks(prior Prior, u float64, tolerance, accept Interval) (Risks, error) {
	if prior == nil || !(u > 0) || math.IsInf(u, 1) || !(tolerance.Low < tolerance.High) {
		return Risks{}, ErrRisk
	}
	accepted := func(y float64) float64 {
		if accept.Low > accept.High {
			return 0
		}
		if y > (accept.Low+accept.High)/2 { // differences of small tails keep their digits
			return distuv.UnitNormal.CDF((y-accept.Low)/u) - distuv.UnitNormal.CDF((y-accept.High)/u)
		}
		return distuv.UnitNormal.CDF((accept.High-y)/u) - distuv.UnitNormal.CDF((accept.Low-y)/u)
	}
	density := func(y float64) float64 { return prior.Prob(y) * accepted(y) }
	missed := func(y float64) float64 { return prior.Prob(y) * (1 - accepted(y)) }
	edges := panels(prior, u, tolerance, accept)
	var r Risks
	for i := range len(edges) - 1 {
		from, to := edges[i], edges[i+1]
		in := quad.Fixed(density, from, to, nodes, quad.Legendre{}, 0)
		r.Accepted += in
		if tolerance.Contains((from + to) / 2) {
			r.Producer += quad.Fixed(missed, from, to, nodes, quad.Legendre{}, 0)
		} else {
			r.Consumer += in
		}
	}
	r.Conforming = prior.CDF(tolerance.High) - prior.CDF(tolerance.Low)
	return r, nil
}

// panels returns the ends of the panels, ascending: where the prior lives, cut at every limit and at the feet of the error curve about it.
func panels(prior Prior, u float64, tolerance, accept Interval) []float64 {
	low, high := prior.Quantile(tail), prior.Quantile(1-tail)
	edges := []float64{low, high}
	for _, p := range []float64{1e-9, 1e-5, 0.01, 0.2, 0.5, 0.8, 0.99, 1 - 1e-5, 1 - 1e-9} {
		edges = append(edges, prior.Quantile(p))
	}
	for _, limit := range []float64{tolerance.Low, tolerance.High, accept.Low, accept.High} {
		for _, d := range []float64{-reach, -3, 0, 3, reach} {
			if x := limit + d*u; x > low && x < high { // an open limit has no edge
				edges = append(edges, x)
			}
		}
	}
	slices.Sort(edges)
	return slices.Compact(edges)
}

// Guard widths that [GuardForConsumer] tries, in u.
const widestGuard = 12

// GuardForConsumer returns the guard band w, in the unit of the value, with which the global consumer's risk is the one asked for: the
// tolerance narrowed by w on each bounded side. It is 0 where no guard band is needed, and an error where none up to 12·u is enough.
func GuardForConsumer(prior Prior, u float64, tolerance Interval, risk float64) (float64, error) {
	at := func(w float64) (float64, error) {
		r, err := GlobalRisks(prior, u, tolerance, tolerance.Guarded(w))
		return r.Consumer, err
	}
	low, high := 0.0, widestGuard*u
	have, err := at(low)
	if err != nil || have <= risk {
		return 0, err
	}
	if least, err := at(high); err != nil || least > risk {
		return 0, errors.Join(ErrRisk, err)
	}
	for range 60 {
		w := (low + high) / 2
		if have, err = at(w); err != nil {
			return 0, err
		}
		if have > risk {
			low = w
		} else {
			high = w
		}
	}
	return high, nil
}
