package lot

import (
	"math"
	"strconv"
)

// FalseAlarm is the chance that one of the tests of [Readings.Examine] suspects a bag in which nothing is wrong: one bag in 200 for each
// (house).
const FalseAlarm = 0.005

// SuspicionKind is what may have gone wrong.
type SuspicionKind uint8

// What the readings of a lot can give away.
const (
	TwoPopulations SuspicionKind = iota // two makers, two ages, good and faked: one bag that is two lots
	Drift                               // the readings move as measuring goes on
	InOrder                             // the readings stand in order of size, so drift and copying cannot be told
	UnitSlip                            // a power of ten off the rest
	Copied                              // equal readings in a row, or a stretch of readings again
)

// String returns the kind in words.
func (k SuspicionKind) String() string {
	return [...]string{"two populations", "drift", "in order of size", "unit slip", "copied"}[min(k, Copied)]
}

// Suspicion is a reason to measure some parts again.
type Suspicion struct {
	Kind   SuspicionKind
	Parts  []int   // to be measured or looked at again, by their place in the order of measuring from 0
	Why    string  // for the person at the bench
	Test   string  // the test that found it
	Chance float64 // that this shows in a bag in which nothing is wrong, at most; what it is of, Why says
}

// Examine looks through the readings for what happens at benches: a slipped unit, two populations, drift while measuring, copied rows. The
// slipped readings are left out of what follows them. Of a bag in which nothing is wrong each test suspects no more than one in 200.
func (r *Readings) Examine() []Suspicion {
	var out []Suspicion
	slips := r.unitSlips()
	out = append(out, slips...)
	rest, place := r.without(slips)
	if s, found := rest.splitSuspicion(); found {
		out = append(out, s.at(place))
	}
	order := rest.orderSuspicion()
	if order != nil {
		out = append(out, order.at(place))
	}
	if order == nil || order.Kind != InOrder {
		for _, s := range rest.copies() {
			out = append(out, s.at(place))
		}
	}
	return out
}

// without returns the readings that no suspicion names, and where they stood.
func (r *Readings) without(named []Suspicion) (rest *Readings, place []int) {
	out := map[int]bool{}
	for _, s := range named {
		for _, i := range s.Parts {
			out[i] = true
		}
	}
	values := make([]float64, 0, len(r.inOrder))
	for i, x := range r.inOrder {
		if !out[i] {
			values, place = append(values, x), append(place, i)
		}
	}
	if len(place) == len(r.inOrder) {
		return r, place
	}
	rest, err := New(r.Unit, r.Step, values...)
	if err != nil { // they were finite before
		return r, place
	}
	return rest, place
}

// at translates the places among the rest into those of the lot.
func (s Suspicion) at(place []int) Suspicion {
	parts := make([]int, len(s.Parts))
	for k, i := range s.Parts {
		parts[k] = place[i]
	}
	s.Parts = parts
	return s
}

// percent words a chance for the person at the bench, to two digits.
func percent(chance float64) string {
	const least = 0.001
	p := 100 * chance
	if p < least {
		return "less than 0.001 %"
	}
	decimals := max(0, 1-int(math.Floor(math.Log10(p))))
	rounded, err := strconv.ParseFloat(strconv.FormatFloat(p, 'f', decimals, 64), 64)
	if err != nil {
		rounded = p
	}
	return strconv.FormatFloat(rounded, 'f', -1, 64) + " %"
}
