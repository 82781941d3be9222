package rules_test

import (
	"math"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// JCGM 106:2012: table 1 (values from memory, recomputed), and 7.6, conformance probability by capability Cm = T/(4u) and place in the band
// (formula from memory, values computed).
func TestConformanceOfReadings(t *testing.T) {
	inf := math.Inf(1)
	for _, tt := range []struct {
		name              string
		z                 float64 // of a reading inside one bound
		want, within      float64
		capability, place float64 // of a reading inside two
	}{
		{name: "table 1: 0.80", z: 0.84, want: 0.80, within: 0.0015},
		{name: "table 1: 0.90", z: 1.28, want: 0.90, within: 0.0015},
		{name: "table 1: 0.95", z: 1.64, want: 0.95, within: 0.0015},
		{name: "table 1: 0.99", z: 2.33, want: 0.99, within: 0.0015},
		{name: "table 1: 0.999", z: 3.09, want: 0.999, within: 0.0015},
		{name: "Cm 1 at 0.9", capability: 1, place: 0.9, want: 0.6552626330201665, within: 1e-12},
		{name: "Cm 1 on the bound", capability: 1, place: 1, want: 0.4999683287581669, within: 1e-12},
		{name: "Cm 2 at 0.25", capability: 2, place: 0.25, want: 0.9772498670652331, within: 1e-12},
		{name: "Cm 3 in the middle", capability: 3, place: 0.5, want: 0.9999999980268246, within: 1e-12},
		{name: "Cm 4 at 0.25", capability: 4, place: 0.25, want: 0.9999683287581669, within: 1e-12},
		{name: "Cm 4 at 0.9", capability: 4, place: 0.9, want: 0.945200708300442, within: 1e-12},
	} {
		var below, above float64
		if tt.capability > 0 {
			// A band from 0 to 1.
			below, above = screening.ConformanceProbability(tt.place, 1/(4*tt.capability), 0, 1)
		} else {
			below, above = screening.ConformanceProbability(-tt.z, 1, -inf, 0)
		}
		if got := 1 - below - above; math.Abs(got-tt.want) > tt.within {
			t.Errorf("%s: %.6f, want %.6f", tt.name, got, tt.want)
		}
	}
}

// JCGM 100 (GUM) 4.4.3: twenty readings of a temperature (data and printed values from memory, self-consistent): mean 100.145 °C, s 1.489 K, and
// 0.333 K for the mean.
func TestRepeatsAreEvaluatedAsTheGUMDoes(t *testing.T) {
	var readings []screening.Reading
	for _, x := range []float64{
		96.90, 98.18, 98.25, 98.61, 99.03, 99.49, 99.56, 99.74, 99.89, 100.07, 100.33, 100.42, 100.68, 100.95, 101.11, 101.20, 101.57, 101.84, 102.36,
		102.72,
	} {
		readings = append(readings, screening.Reading{Of: screening.Temperature.Name, Unit: quantity.Celsius, Value: x})
	}
	r := screening.Series(readings...)
	if math.Abs(r.Value-100.145) > 5e-4 || math.Abs(r.Spread()-1.488844) > 5e-6 {
		t.Errorf("mean %.4f, s %.6f", r.Value, r.Spread())
	}
	// A meter with no error worth naming leaves the scatter alone.
	m := screening.Meter{ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Celsius: {Absolute: 1e-9}}}
	if u := m.Uncertainty(r); math.Abs(u-0.332916) > 5e-6 {
		t.Errorf("u of the mean %.6f, want 0.332916", u)
	}
}

// JCGM 100 (GUM) 4.4.5: anything from 96 to 104 °C alike is 100 °C with u = 2.3 K; 5.1.5: 8.7 µV of the meter and 12 µV of scatter make 15 µV
// (from memory, recomputed).
func TestUncertaintiesCombineAsTheGUMDoes(t *testing.T) {
	even := screening.Meter{ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Celsius: {Absolute: 4}}}
	if u := even.Uncertainty(screening.Reading{Unit: quantity.Celsius, Value: 100}); math.Abs(u-2.309401) > 5e-6 {
		t.Errorf("half-width 4 K: u = %.6f", u)
	}
	// Two repeats 12 µV on either side of their mean have s = 12·√2 µV, and s/√2 = 12 µV.
	volts := screening.Meter{ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Volt: {Relative: 14e-6, Absolute: 2e-6}}}
	r := screening.Reading{Unit: quantity.Volt, Value: 0.928571, Repeats: []float64{0.928571 - 12e-6, 0.928571 + 12e-6}}
	if u := volts.Uncertainty(r); math.Abs(u-14.7986e-6) > 5e-10 {
		t.Errorf("combined: u = %.4f µV, want 14.7986 µV", u*1e6)
	}
}
