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

// Accuracy is a meter's claim for one characteristic: ±(Relative·|x| + Counts·step + Absolute), taken as rectangular (JCGM 100, 4.3.7).
// The counts or the absolute part include the digit.
type Accuracy struct {
	Relative float64 // of the reading, as a ratio
	Counts   float64 // in units of the last digit
	Absolute float64 // SI
}

// Meter is an instrument with its accuracies by characteristic; Default serves those it does not name, by unit.
type Meter struct {
	Name    string
	By      map[Characteristic]Accuracy
	ByUnit  map[quantity.Unit]Accuracy
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

// accuracy returns the meter's claim for a characteristic.
func (m *Meter) accuracy(of Characteristic, unit quantity.Unit) Accuracy {
	if a, ok := m.By[of]; ok {
		return a
	}
	return m.ByUnit[unit]
}

// HalfWidth returns how far a meter that keeps its specification can be off at this reading, SI: never less than half of the last typed
// digit, 0 for an exact meter.
func (m *Meter) HalfWidth(r Reading) float64 {
	a := m.accuracy(r.Of, r.Unit)
	if a == (Accuracy{}) {
		return 0
	}
	return math.Max(a.Relative*math.Abs(r.Value)+a.Counts*r.Step+a.Absolute, r.Step/2)
}

// Uncertainty returns the standard uncertainty of a reading taken with this meter, SI: the specification as a rectangular distribution
// of half-width a, u = a/√3, combined with the scatter of repeats s/√n (JCGM 100, 4.2.3, 4.3.7). Repeats shrink only the scatter; the
// specification is common to all of them. Of an exact meter it is 0.
func (m *Meter) Uncertainty(r Reading) float64 {
	u := m.HalfWidth(r) / math.Sqrt(3)
	if u == 0 {
		return 0
	}
	if n := len(r.Repeats); n > 1 {
		u = math.Hypot(u, r.Spread()/math.Sqrt(float64(n)))
	}
	return u
}
