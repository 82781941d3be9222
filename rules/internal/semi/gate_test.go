package semi

import (
	"math"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// A 10 MΩ voltmeter in series shows 10 mV for 1 nA: 10 nA are 0.1 V, and no more than the supply ever stands across it.
func TestAVoltmeterInSeriesWithTheGate(t *testing.T) {
	if i := Over10M(10e-3); math.Abs(i-1e-9) > 1e-20 {
		t.Errorf("10 mV over 10 MΩ is %g A", i)
	}
	for _, tt := range []struct{ volts, most, shown float64 }{{15, 10e-9, 0.1}, {9, 1e-6, 9}, {15, 1e-6, 10}} {
		if v := GateRecipe(tt.volts, tt.most, true, "source").Values; math.Abs(v["limit-voltage"]-tt.shown) > 1e-12 || v["series-resistance"] != 10e6 {
			t.Errorf("%g A at %g V: %v", tt.most, tt.volts, v)
		}
	}
}

func TestGateLeakageBounds(t *testing.T) {
	limit := screening.Limit{On: "igss", At: screening.At(screening.VGS, 15), High: 1e-6}
	for _, tt := range []struct {
		name       string
		volts      float64
		value      float64
		sense      quantity.Sense
		anyVoltage bool
		ok         bool
		as         quantity.Sense
	}{
		{"at more volts it bounds from above", 20, 1e-9, quantity.Exactly, false, true, quantity.AtMost},
		{"at less from below", 9, 1e-9, quantity.Exactly, false, true, quantity.AtLeast},
		{"at most, at less volts, says nothing", 9, 1e-9, quantity.AtMost, false, false, 0},
		{"at least, at more volts, says nothing", 20, 1e-9, quantity.AtLeast, false, false, 0},
		{"a limit at any voltage holds from the least on", 4, 1e-9, quantity.Exactly, true, true, quantity.Exactly},
		{"below that nothing shows", 3, 1e-9, quantity.Exactly, true, false, 0},
		{"but what leaks too much there leaks", 3, 2e-6, quantity.Exactly, true, true, quantity.Exactly},
	} {
		r := screening.Reading{Of: "igss", Value: tt.value, Sense: tt.sense, At: screening.At(screening.VGS, tt.volts)}
		c := GateLeakage(r, limit, screening.VGS, tt.anyVoltage, 4)
		if c.OK != tt.ok || c.OK && (c.Reading.Sense != tt.as || c.Reading.At != limit.At) || !c.OK && c.Why == "" {
			t.Errorf("%s: %+v", tt.name, c)
		}
	}
	if c := GateLeakage(screening.Reading{Of: "igss"}, limit, screening.VGS, true, 4); c.OK {
		t.Error("a reading without its voltage was taken")
	}
}

func TestThresholdBounds(t *testing.T) {
	limit := screening.Limit{On: "vgs-th", At: screening.At(screening.ID, 1e-3)}
	for _, tt := range []struct {
		id, from, to float64
		sense        quantity.Sense
		ok           bool
		as           quantity.Sense
	}{
		{0.25e-3, 0, 0, quantity.Exactly, true, quantity.AtLeast},
		{5e-3, 0, 0, quantity.Exactly, true, quantity.AtMost},
		{0.25e-3, 0, 0, quantity.AtMost, false, 0},
		{5e-3, 0, 0, quantity.AtLeast, false, 0},
		{0.25e-3, ThresholdFrom, ThresholdTo, quantity.Exactly, true, quantity.Exactly},
		{0.1e-3, ThresholdFrom, ThresholdTo, quantity.Exactly, true, quantity.AtLeast},
	} {
		r := screening.Reading{Of: "vgs-th", Value: 2, Sense: tt.sense, At: screening.At(screening.ID, tt.id)}
		if c := Threshold(r, limit, screening.ID, tt.from, tt.to); c.OK != tt.ok || c.OK && c.Reading.Sense != tt.as {
			t.Errorf("%+v: %+v", tt, c)
		}
	}
}

// The instruction that stands before every reading of a gate: strap, shorted leads, supply off, no floating gate.
func TestTheStaticGuardSaysWhatTheGuidesSay(t *testing.T) {
	c := Static()
	if c.Code != "static" || c.Values["gate-resistance"] != 100e3 || c.Source.Status != screening.Published {
		t.Errorf("%+v", c)
	}
}
