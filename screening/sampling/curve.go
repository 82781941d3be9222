package sampling

import (
	"errors"
	"math"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/stat/distuv"
)

// most is the most bad parts with which the lot is accepted: under reduced inspection those between the two numbers still are.
func (p Plan) most() int { return max(p.Accept, p.Reject-1) }

// FromProcess returns the chance that the plan accepts a lot drawn from a stream with this fraction bad (operating characteristic type B,
// binomial): Σ C(n,i)·p^i·(1−p)^(n−i) for i ≤ Accept, or for
// i < Reject under reduced inspection, where lots between the numbers are accepted too. A fraction outside 0 to 1 gives NaN.
func (p Plan) FromProcess(fraction float64) float64 {
	return binomialAtMost(p.N, p.most(), fraction)
}

// FromLot returns the chance that the plan accepts this very lot with so many bad parts in it (operating characteristic type A,
// hypergeometric); NaN where the lot cannot hold them or is smaller than the sample.
func (p Plan) FromLot(lot, bad int) float64 { return Hypergeometric(lot, bad, p.N, p.most()) }

// FromDefects returns the chance of acceptance when defects are counted and a part may have several (Poisson): perHundred is defects per
// hundred parts, as the AQLs above 10 are.
func (p Plan) FromDefects(perHundred float64) float64 {
	if !(perHundred >= 0) {
		return math.NaN()
	}
	if perHundred == 0 {
		return 1
	}
	return distuv.Poisson{Lambda: float64(p.N) * perHundred / 100}.CDF(float64(p.most()))
}

// AtAQL returns the chance that a lot exactly as bad as the AQL is accepted: what the supplier of such lots can count on.
func (p Plan) AtAQL() float64 {
	if p.AQL > mostPercent {
		return p.FromDefects(p.AQL)
	}
	return p.FromProcess(p.AQL / 100)
}

// QualityAt returns the fraction bad that the plan accepts with this chance (type B): the solution of FromProcess(p) = chance by the
// inverse of the incomplete beta function. It is NaN outside 0 to 1 and where the plan accepts whatever it finds.
func (p Plan) QualityAt(chance float64) float64 {
	c := p.most()
	if !(chance >= 0 && chance <= 1) || c >= p.N || c < 0 {
		return math.NaN()
	}
	return mathext.InvRegIncBeta(float64(c+1), float64(p.N-c), 1-chance)
}

// OutgoingQuality returns the average fraction bad after inspection when every refused lot is tested through and its bad parts are taken
// out: Pa·p·(lot−n)/lot (from memory; NIST/SEMATECH 6.2.3.2).
func (p Plan) OutgoingQuality(lot int, fraction float64) float64 {
	if lot < p.N || lot <= 0 {
		return math.NaN()
	}
	return p.FromProcess(fraction) * fraction * float64(lot-p.N) / float64(lot)
}

// TotalInspection returns how many parts are tested on average when every refused lot is tested through: n + (1−Pa)·(lot−n) (from memory;
// NIST/SEMATECH 6.2.3.2).
func (p Plan) TotalInspection(lot int, fraction float64) float64 {
	if lot < p.N {
		return math.NaN()
	}
	return float64(p.N) + (1-p.FromProcess(fraction))*float64(lot-p.N)
}

// binomialAtMost returns the chance of at most c successes among n of this chance each.
func binomialAtMost(n, c int, fraction float64) float64 {
	switch {
	case !(fraction >= 0 && fraction <= 1) || n < 0:
		return math.NaN()
	case c < 0:
		return 0
	case c >= n || fraction == 0:
		return 1
	case fraction == 1:
		return 0
	}
	return distuv.Binomial{N: float64(n), P: fraction}.CDF(float64(c))
}

// SchemeAcceptance returns the chance of acceptance in the long run when normal and tightened inspection switch by their rules, from the
// chances of the two plans at the same fraction bad (Stephens and Larson 1967, as in AQLSchemes): (a·PN + b·PT)/(a+b) with
// a = (2−PN⁴)/((1−PN)(1−PN⁴)) and b = (1−PT⁵)/((1−PT)·PT⁵).
func SchemeAcceptance(normal, tightened Plan, fraction float64) float64 {
	pn, pt := normal.FromProcess(fraction), tightened.FromProcess(fraction)
	switch {
	case pn == 1:
		return 1 // never leaves normal inspection
	case pt == 0:
		return 0 // never leaves tightened inspection
	case pt == 1:
		return pn
	}
	pn4, pt5 := math.Pow(pn, 4), math.Pow(pt, 5)
	a := (2 - pn4) / ((1 - pn) * (1 - pn4))
	b := (1 - pt5) / ((1 - pt) * pt5)
	if math.IsInf(b, 1) {
		return pt
	}
	return (a*pn + b*pt) / (a + b)
}

// Double is a double sampling plan: after N1 parts accept with at most Accept1 bad ones, refuse with Reject1 or more, else test N2 more and
// accept with at most Accept2 bad ones in all.
type Double struct {
	N1, Accept1, Reject1 int
	N2, Accept2          int
}

// FromProcess returns the chance of acceptance at this fraction bad (type B).
func (d Double) FromProcess(fraction float64) float64 {
	chance := binomialAtMost(d.N1, d.Accept1, fraction)
	for bad := d.Accept1 + 1; bad < d.Reject1; bad++ {
		exactly := binomialAtMost(d.N1, bad, fraction) - binomialAtMost(d.N1, bad-1, fraction)
		chance += exactly * binomialAtMost(d.N2, d.Accept2-bad, fraction)
	}
	return chance
}

// mostSample bounds the search for a plan; a larger sample than this is no bench's.
const mostSample = 100_000

var errNoPlan = errors.New("plan: the good quality must be better than the bad one and wanted more often, such as 1.5 % at 0.95 and 15 % at 0.075")

// Find returns the smallest single plan that accepts lots of the good fraction with at least the chance goodChance and lots of the bad
// fraction with at most badChance (type B). It fails where none with at most 100 000 parts does.
func Find(good, goodChance, bad, badChance float64) (Plan, error) {
	if !(good > 0 && good < bad && bad < 1 && badChance > 0 && badChance < goodChance && goodChance < 1) {
		return Plan{}, errNoPlan
	}
	n := 1
	for c := 0; c < mostSample; c++ {
		// The sample that brings the bad quality down to its chance grows with c, so the search for it starts where the last one ended.
		for n <= mostSample && binomialAtMost(n, c, bad) > badChance {
			n++
		}
		if n > mostSample {
			break
		}
		if binomialAtMost(n, c, good) >= goodChance {
			return Plan{Sample: n, N: n, Accept: c, Reject: c + 1}, nil
		}
	}
	return Plan{}, errors.New("plan: the two qualities are too near each other to be told apart with 100 000 parts")
}
