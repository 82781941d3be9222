package book

import (
	"math"
	"strings"
	"testing"

	"goodbin/screening"
)

func TestDischargeTakesThePublishedSeconds(t *testing.T) {
	// Design table: 470 µF from 450 V to 10 V through 22 kΩ: 39 s, 47 s at +20 %.
	cautions := StoredCharge(470e-6, 1.2*470e-6, 450)
	if len(cautions) != 1 {
		t.Fatalf("got %d cautions, want 1", len(cautions))
	}
	c := cautions[0]
	for _, want := range []struct {
		name      string
		value     float64
		tolerance float64
	}{
		{"discharge-resistance", 22e3, 0},
		{"discharge-time", 39, 0.5},
		{"discharge-time-worst", 47, 0.5},
		{"discharge-power", 9.2, 0.01}, // 450²/22k
		{"energy", 57.1, 0.1},          // ½·564 µF·450²
		{"charge", 0.2538, 1e-9},
		{"discharge-voltage", 450, 0},
	} {
		if got := c.Values[want.name]; math.Abs(got-want.value) > want.tolerance {
			t.Errorf("%s = %v, want %v", want.name, got, want.value)
		}
	}
	if c.Level != screening.Danger || !c.Gate {
		t.Errorf("level %v, gate %v; want a danger with a gate", c.Level, c.Gate)
	}
	for _, words := range []string{"39 s", "47 s at +20 %", "22 kΩ, 10 W", "450 V", "charge itself again", "eye protection", "local code"} {
		if !strings.Contains(c.Text, words) {
			t.Errorf("the text does not say %q:\n%s", words, c.Text)
		}
	}
}

func TestStoredChargeLevels(t *testing.T) {
	for _, tc := range []struct {
		name string
		c, v float64
		want string
	}{
		{"2200 µF 35 V: 1.3 J at a low voltage is nothing to warn of", 2200e-6, 35, ""},
		{"1 µF 60 V is not above 60 V", 1e-6, 60, ""},
		{"0.7 µF 63 V: 44 µC is below 45 µC", 0.7e-6, 63, ""},
		{"1 µF 63 V: 63 µC", 1e-6, 63, "notice"},
		{"10000 µF 63 V: 19.8 J below 100 V", 10000e-6, 63, "notice"},
		{"100 µF 100 V: half a joule", 100e-6, 100, "notice"},
		{"220 µF 100 V: 1.1 J at 100 V", 220e-6, 100, "danger"},
		{"3.3 µF 400 V: 0.264 J at 400 V", 3.3e-6, 400, "danger"},
		{"3.3 µF 385 V: 0.245 J below 400 V", 3.3e-6, 385, "notice"},
		{"100000 µF 50 V: 125 J at any voltage", 0.1, 50, "danger"},
		{"100000 µF 40 V: 80 J", 0.1, 40, ""},
	} {
		t.Run(tc.name, func(t *testing.T) {
			got := ""
			for _, c := range StoredCharge(tc.c, tc.c, tc.v) {
				got = c.Level.String()
				if c.Source.Status == screening.NoStatus || c.Code == "" || !c.Gate {
					t.Errorf("caution without status, code or gate: %+v", c)
				}
			}
			if got != tc.want {
				t.Errorf("got %q, want %q", got, tc.want)
			}
		})
	}
}

func TestTheDischargeResistorStandsItsWatts(t *testing.T) {
	for v := 1.0; v <= 1000; v++ {
		for _, c := range []float64{1e-6, 47e-6, 1e-3, 0.1} {
			ohms, watts := DischargeResistor(c, v)
			if watts > dischargeWatts {
				t.Fatalf("%v F at %v V: %v Ω takes %v W, more than %v W", c, v, ohms, watts, dischargeWatts)
			}
			if math.Abs(watts-v*v/ohms) > 1e-9 {
				t.Fatalf("%v V across %v Ω is not %v W", v, ohms, watts)
			}
		}
	}
	if ohms, _ := DischargeResistor(100e-6, 500); ohms != 47e3 {
		t.Errorf("500 V across 22 kΩ is 11.4 W: got %v Ω, want 47 kΩ", ohms)
	}
	if ohms, _ := DischargeResistor(10000e-6, 63); ohms >= 22e3 {
		t.Errorf("10000 µF at 63 V takes 6 minutes through 22 kΩ: got %v Ω, want less", ohms)
	}
	// 60 V is the touch limit of equipment safety standards (second-hand), for charges and supplies alike.
	if TouchVoltage != 60 || noticeVolts != TouchVoltage {
		t.Errorf("touch voltage %v, notice from %v V", TouchVoltage, noticeVolts)
	}
	if s := DischargeTime(22e3, 1, 5); s != 0 {
		t.Errorf("from 5 V it takes %v s, want 0", s)
	}
}
