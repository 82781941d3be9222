package screening

import (
	_ "embed"
	"encoding/csv"
	"math"
	"strconv"
	"strings"
	"sync"

	"goodbin/screening/quantity"
)

// Confidence says what a maker's ±a means.
type Confidence uint8

// The confidences. What is not said is taken as rectangular.
const (
	WithinIt Confidence = iota // never further off than ±a, anywhere inside alike: u = a/√3 (JCGM 100, 4.3.7)
	Normal99                   // 99 % of a normal distribution: u = a/2.58 (JCGM 100, 4.3.4)
)

// String returns the confidence as a meter's description spells it: "rectangular" or "99%".
func (c Confidence) String() string { return [...]string{"rectangular", "99%"}[min(int(c), 1)] }

// Accuracy is a meter's claim for one characteristic: ±(Relative·|x| + Counts·step + Absolute), x being what the meter shows. The counts or
// the absolute part include the digit unless DigitApart says otherwise.
type Accuracy struct {
	Relative   float64 // of the reading, as a ratio
	Counts     float64 // in units of the last digit
	Absolute   float64 // SI
	Resolution float64 // value of one count, SI; 0: that of the last typed digit
	Confidence Confidence
	DigitApart bool    // the claim leaves the digit out; it is added
	Spread     float64 // standard deviation of repeats on a steady part, SI, that two or three repeats are not believed below; 0: not stated
}

// Range is one range of a meter: what it claims of readings whose magnitude lies from Low to High.
type Range struct {
	Of        Characteristic // "" for every characteristic in Unit that has no ranges of its own
	Unit      quantity.Unit
	Low, High float64   // SI, both ends included; a High of 0 has no upper end
	At        Condition // the test signal; readings that state none were taken at it
	Accuracy
}

func (g *Range) holds(x float64) bool { return x >= g.Low && (g.High == 0 || x <= g.High) }

// Meter is an instrument with its accuracies. Those in Ranges go first, by characteristic before by unit, the first that holds the reading;
// then By, then ByUnit. A meter with Ranges that lists none for a reading is taken to be no better than the assumed one.
type Meter struct {
	Name    string
	Ranges  []Range
	By      map[Characteristic]Accuracy
	ByUnit  map[quantity.Unit]Accuracy
	Leads   Leads
	Assumed bool
}

// ExactMeter has no uncertainty at all; published boundary cases are tested with it.
func ExactMeter() Meter { return Meter{Name: "exact"} }

//go:embed meter_assumed.csv
var assumedCSV string

// AssumedMeter is what is taken where no meter is named: the accuracies of a pocket multimeter and a hand-held LCR and ESR meter. The
// figures are the house's, as listed in meter_assumed.csv.
func AssumedMeter() Meter { return assumedMeter() }

var assumedMeter = sync.OnceValue(func() Meter {
	m := Meter{By: map[Characteristic]Accuracy{}, ByUnit: map[quantity.Unit]Accuracy{}, Assumed: true}
	rows, err := csv.NewReader(strings.NewReader(assumedCSV)).ReadAll()
	if err != nil {
		panic("screening: embedded meter_assumed.csv: " + err.Error())
	}
	units := map[string]quantity.Unit{
		"V": quantity.Volt, "ohm": quantity.Ohm, "F": quantity.Farad, "A": quantity.Ampere, "C": quantity.Celsius,
		"1": quantity.One, "H": quantity.Henry,
	}
	for _, row := range rows[1:] {
		var a Accuracy
		for i, field := range []*float64{&a.Relative, &a.Counts, &a.Absolute} {
			x, err := strconv.ParseFloat(row[i+1], 64)
			if err != nil {
				panic("screening: embedded meter_assumed.csv: " + err.Error())
			}
			*field = x
		}
		if unit, ok := units[row[0]]; ok {
			m.ByUnit[unit] = a
		} else {
			m.By[Characteristic(row[0])] = a
		}
	}
	return m
})

// accuracy returns the meter's claim for a reading that shows x, and the range it stands in, nil where it stands in none. covered is false
// where the meter has ranges and none of them serves: the assumed meter's claim then counts, or that of the nearest range if it is wider.
func (m *Meter) accuracy(of Characteristic, unit quantity.Unit, x, step float64) (a Accuracy, in *Range, covered bool) {
	x = math.Abs(x)
	in, own := m.rangeOf(of, unit, x)
	if in != nil && in.holds(x) {
		return in.Accuracy, in, true
	}
	if a, ok := m.By[of]; ok && !own {
		return a, nil, true
	}
	if a, ok := m.ByUnit[unit]; ok && !own || len(m.Ranges) == 0 {
		return a, nil, true
	}
	assumed := AssumedMeter()
	a, _, _ = assumed.accuracy(of, unit, x, step)
	if in != nil && in.halfWidth(x, step) > a.halfWidth(x, step) {
		a = in.Accuracy
	}
	return a, in, false
}

// Covers reports whether the meter's own claim holds for a reading. Where it does not, the assumed meter's counts, or that of the nearest range
// where it is wider.
func (m *Meter) Covers(r Reading) bool {
	_, _, covered := m.accuracy(r.Of, r.Unit, r.shown(), r.Step)
	return covered
}

// rangeOf returns the first range that holds x, else the nearest one to it; own reports that it is the characteristic's own.
func (m *Meter) rangeOf(of Characteristic, unit quantity.Unit, x float64) (nearest *Range, own bool) {
	off := math.Inf(1)
	for i := range m.Ranges {
		g := &m.Ranges[i]
		mine := g.Of == of
		if !mine && (own || g.Of != "" || g.Unit != unit) {
			continue
		}
		d := math.Max(0, g.Low-x)
		if g.High > 0 {
			d = math.Max(d, x-g.High)
		}
		if mine && !own || d < off {
			nearest, off, own = g, d, mine
		}
	}
	return nearest, own
}

// halfWidth returns ±a for a reading that shows x with this last digit, the digit included.
func (a *Accuracy) halfWidth(x, step float64) float64 {
	claim, digit := a.claim(x, step)
	return claim + digit
}

// claim returns the half-widths of what the maker claims and of the digit where the claim does not hold it: where it leaves it out, and where
// fewer digits were written down than the meter shows. A claim that says nothing of the digit is never less than half of it.
func (a *Accuracy) claim(x, step float64) (claim, digit float64) {
	count := step
	if a.Resolution > 0 {
		count = a.Resolution
	}
	claim = a.Relative*math.Abs(x) + a.Counts*count + a.Absolute
	switch {
	case a.DigitApart:
		return claim, math.Max(count, step) / 2
	case a.Resolution > 0 && step > a.Resolution*(1+1e-9):
		return claim, step / 2
	}
	return math.Max(claim, step/2), 0
}

// HalfWidth returns how far a meter that keeps its specification can be off at this reading, SI: never less than half of the last typed
// digit, 0 for an exact meter.
func (m *Meter) HalfWidth(r Reading) float64 {
	a, _, _ := m.accuracy(r.Of, r.Unit, r.shown(), r.Step)
	if a == (Accuracy{}) {
		return 0
	}
	return a.halfWidth(r.shown(), r.Step)
}

// Uncertainty returns the standard uncertainty of a reading taken with this meter, SI, as JCGM 100 states it: the specification as a
// rectangular distribution of half-width a, u = a/√3, or as the meter's entry says, combined with the digit, the leads and the scatter of
// repeats s/√n (JCGM 100, 4.2.3, 4.3.7). Repeats shrink only the scatter; the specification is common to all of them. Of an exact meter it
// is 0. The judge, who takes every reading as normally distributed, widens the scatter of few repeats ([BudgetOf]).
func (m *Meter) Uncertainty(r Reading) float64 {
	d := m.doubt(&r)
	return d.plain()
}
