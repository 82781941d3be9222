package screening_test

import (
	"math"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func near(got, want, relative float64) bool { return math.Abs(got-want) <= relative*math.Abs(want) }

// shed is a meter with ranges of its own: two for capacitance, volts and ohms by unit.
func shed() screening.Meter {
	kHz := screening.At(screening.Frequency, 1000)
	return screening.Meter{
		Name: "shed",
		Ranges: []screening.Range{
			{Of: "capacitance", Unit: quantity.Farad, High: 20e-6, At: kHz, Accuracy: screening.Accuracy{Relative: 0.02, Counts: 5, Resolution: 10e-9}},
			{Of: "capacitance", Unit: quantity.Farad, Low: 20e-6, High: 2e-3, At: screening.At(screening.Frequency, 120), Accuracy: screening.Accuracy{Relative: 0.05}},
			{Unit: quantity.Ohm, Accuracy: screening.Accuracy{Relative: 0.01, Absolute: 0.1}},
			{Unit: quantity.Volt, Accuracy: screening.Accuracy{Relative: 0.005, Counts: 2, Confidence: screening.Normal99}},
			{Of: "quick", Unit: quantity.Volt, High: 2, Accuracy: screening.Accuracy{Relative: 0.005, Counts: 2, DigitApart: true}},
		},
		Leads: screening.Leads{SeriesR: 0.2, SeriesRU: 0.05, StrayC: 3e-12, StrayCU: 1e-12},
	}
}

func TestAReadingHasTheAccuracyOfItsRange(t *testing.T) {
	m := shed()
	for _, tt := range []struct {
		name      string
		r         screening.Reading
		halfWidth float64
		u         float64 // 0: a rectangle of the half-width
	}{
		{"the lower range, its own count", screening.Reading{Of: "capacitance", Unit: quantity.Farad, Value: 10e-6, Step: 10e-9}, 0.25e-6, math.Hypot(0.25e-6/math.Sqrt(3), 1e-12)},
		{"fewer digits written down than shown", screening.Reading{Of: "capacitance", Unit: quantity.Farad, Value: 10e-6, Step: 1e-6}, 0.75e-6, math.Hypot(0.25e-6, 0.5e-6) / math.Sqrt(3)},
		{"the upper range", screening.Reading{Of: "capacitance", Unit: quantity.Farad, Value: 100e-6, Step: 1e-7}, 5e-6, 0},
		{"above the last range: no better than it, nor than the assumed meter", screening.Reading{Of: "capacitance", Unit: quantity.Farad, Value: 1}, 0.05, 0},
		{"by unit", screening.Reading{Of: "resistance", Unit: quantity.Ohm, Value: 1000}, 10.1, math.Hypot(10.1/math.Sqrt(3), 0.05)},
		{"99 % of a normal distribution is divided by 2.58", screening.Reading{Of: "vf", Unit: quantity.Volt, Value: 1, Step: 0.001}, 0.007, 0.007 / 2.58},
		{"the digit apart", screening.Reading{Of: "quick", Unit: quantity.Volt, Value: 1, Step: 0.001}, 0.0075, 0.004051748593714407},
		{"a characteristic's own ranges are not helped out by its unit's", screening.Reading{Of: "quick", Unit: quantity.Volt, Value: 3, Step: 0.001}, 0.032, 0},
		{"what it does not measure is as with the assumed meter", screening.Reading{Of: "leakage", Unit: quantity.Ampere, Value: 45e-6, Step: 1e-6}, 2.9e-6, 0},
	} {
		if got := m.HalfWidth(tt.r); !near(got, tt.halfWidth, 1e-9) {
			t.Errorf("%s: ±%g, want ±%g", tt.name, got, tt.halfWidth)
		}
		if want := tt.u; want == 0 {
			if got := m.Uncertainty(tt.r); tt.r.Unit != quantity.Farad && !near(got, tt.halfWidth/math.Sqrt(3), 1e-9) {
				t.Errorf("%s: u = %g, want %g", tt.name, got, tt.halfWidth/math.Sqrt(3))
			}
		} else if got := m.Uncertainty(tt.r); !near(got, want, 1e-9) {
			t.Errorf("%s: u = %g, want %g", tt.name, got, want)
		}
	}
}

// Leads in series read high, and so do those with a capacitance of their own: the part has less. What they add is taken out, its own doubt
// stays in.
func TestTheLeadsAreTakenOut(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters["shed"] = shed()
	b := withLimits(quickLimit(0, 1))
	b.Bench = append(b.Bench, screening.Field{Definition: screening.Resistance}, screening.Field{Definition: screening.Capacitance}, screening.Field{Definition: screening.InsulationResistance},
		screening.Field{Definition: screening.Definition{Name: "impedance", Unit: quantity.Ohm}})
	for _, tt := range []struct {
		name    string
		r       screening.Reading
		value   float64
		offsetU float64
	}{
		{"1.2 Ω with leads of 0.2 Ω is 1.0 Ω", screening.Reading{Of: "resistance", Unit: quantity.Ohm, Value: 1.2, Meter: "shed"}, 1.0, 0.05},
		{"less than the leads alone is nothing", screening.Reading{Of: "resistance", Unit: quantity.Ohm, Value: 0.15, Meter: "shed"}, 0, 0.05},
		{"100 pF with leads of 3 pF is 97 pF", screening.Reading{Of: "capacitance", Unit: quantity.Farad, Value: 100e-12, Meter: "shed"}, 97e-12, 1e-12},
		{"insulation is not in series with anything that matters", screening.Reading{Of: "insulation-resistance", Unit: quantity.Ohm, Value: 1e9, Meter: "shed"}, 1e9, 0},
		{"of an impedance the phase is not known: a doubt", screening.Reading{Of: "impedance", Unit: quantity.Ohm, Value: 1, Meter: "shed"}, 1, math.Hypot(0.2/math.Sqrt(3), 0.05)},
		{"over-range is left alone", screening.Reading{Of: "resistance", Unit: quantity.Ohm, Value: 2e6, Over: true, Sense: quantity.AtLeast, Meter: "shed"}, 2e6, 0},
		{"another meter has other leads", screening.Reading{Of: "resistance", Unit: quantity.Ohm, Value: 1.2}, 1.2, 0},
	} {
		j := judged(t, b, policy, tt.r)
		r := j.Part.Readings[0]
		if !near(r.Value, tt.value, 1e-12) || math.Abs(r.Value-r.Correction-tt.r.Value) > 1e-15 {
			t.Errorf("%s: %g after a correction of %g", tt.name, r.Value, r.Correction)
		}
		var offset float64
		for _, c := range screening.BudgetOf(r, policy).Contributions {
			if c.Kind.String() == "offset" {
				offset = c.Part()
			}
		}
		if !near(offset, tt.offsetU, 1e-12) {
			t.Errorf("%s: the leads contribute %g, want %g", tt.name, offset, tt.offsetU)
		}
		// To judge what was judged changes nothing.
		again, err := screening.Judge(b, j.Part, policy)
		if err != nil || again.Part.Readings[0].Value != r.Value || again.Part.Readings[0].U != r.U {
			t.Errorf("%s: judged again it reads %g, %v", tt.name, again.Part.Readings[0].Value, err)
		}
	}
}

// A meter's own test signal goes before the field's default, after what was typed, and is told apart from both.
func TestTheMetersTestSignalCounts(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters["shed"] = shed()
	b := withLimits(quickLimit(0, 1))
	b.Bench = append(b.Bench, screening.Field{Definition: screening.Capacitance, Default: screening.At(screening.Frequency, 400).With(screening.Voltage, 1)})
	reading := func(x float64, meter string) screening.Reading {
		return screening.Reading{Of: "capacitance", Unit: quantity.Farad, Value: x, Meter: meter}
	}
	typed := reading(1e-6, "shed")
	typed.At = screening.At(screening.Frequency, 50)
	for _, tt := range []struct {
		name      string
		r         screening.Reading
		hertz     float64
		of, other bool // by the meter, by default
	}{
		{"the lower range measures at 1 kHz", reading(1e-6, "shed"), 1000, true, false},
		{"the upper at 120 Hz", reading(1e-3, "shed"), 120, true, false},
		{"typed goes first", typed, 50, false, false},
		{"a meter that says nothing leaves the default", reading(1e-6, ""), 400, false, true},
	} {
		r := judged(t, b, policy, tt.r).Part.Readings[0]
		if hz, _ := r.At.Get(screening.Frequency); hz != tt.hertz || r.MeterAt.Has(screening.Frequency) != tt.of || r.AssumedAt.Has(screening.Frequency) != tt.other {
			t.Errorf("%s: %v; of the meter %v, assumed %v", tt.name, r.At, r.MeterAt, r.AssumedAt)
		}
		if !r.At.Has(screening.Voltage) || !r.AssumedAt.Has(screening.Voltage) {
			t.Errorf("%s: what the meter leaves open is the default: %v, assumed %v", tt.name, r.At, r.AssumedAt)
		}
	}
}

func TestAMeterThatDoesNotCoverAReadingIsSaidToBeAssumed(t *testing.T) {
	policy := screening.DefaultPolicy()
	m := shed()
	m.Leads = screening.Leads{}
	policy.Meters["shed"] = m
	for _, tt := range []struct {
		r    screening.Reading
		want bool
	}{
		{screening.Reading{Of: "quick", Unit: quantity.Volt, Value: 0.7, Step: 1e-3, Meter: "shed"}, false},
		{screening.Reading{Of: "quick", Unit: quantity.Volt, Value: 3, Step: 1e-3, Meter: "shed"}, true},
		{screening.Reading{Of: "quick", Unit: quantity.Volt, Value: 0.7, Step: 1e-3, Meter: "sold"}, true},
	} {
		j := judged(t, withLimits(quickLimit(0.5, 0.8)), policy, tt.r)
		if r := j.Part.Readings[0]; r.Assumed != tt.want || r.U == 0 || j.Assumed != tt.want {
			t.Errorf("%v V by %q: assumed %v, u %g", tt.r.Value, tt.r.Meter, r.Assumed, r.U)
		}
	}
}
