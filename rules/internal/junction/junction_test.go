package junction

import (
	"math"
	"strings"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Textbook companions (published): 15 nA at 25 °C is 3.84 µA at 105 °C (Bell EDC 5.18); 2 µA at 25 °C is 64 µA at 75 °C (Kishore 4.5);
// 5 nA, seven doublings and 7 % per kelvin for five, to 100 °C is 897.6 nA (Malvino 2-6), within 1 % of doubling throughout.
func TestDoublingAgreesWithTextbooks(t *testing.T) {
	for _, tt := range []struct{ i, to, want, within float64 }{
		{15e-9, 105, 3.84e-6, 1e-9}, {2e-6, 75, 64e-6, 1e-9}, {5e-9, 100, 897.6e-9, 0.01},
	} {
		if got := Scale(tt.i, Reference, tt.to, Doubling); math.Abs(got/tt.want-1) > tt.within {
			t.Errorf("%v A at %v °C is %v, want %v", tt.i, tt.to, got, tt.want)
		}
	}
	// A builder saw 0.32 mA at about 40 °C fall to 75 µA at about 20 °C: ×2.07 per 10 K (derived from the observation).
	if got := Scale(0.32e-3, 40, 20, Doubling); math.Abs(got/75e-6-1) > 0.07 {
		t.Errorf("0.32 mA at 40 °C is %v A at 20 °C, want about 75 µA", got)
	}
	if per10K := math.Pow(0.32e-3/75e-6, 10.0/20); math.Abs(per10K-2.07) > 0.02 {
		t.Errorf("the observation gives ×%.2f per 10 K, want ×2.07", per10K)
	}
}

func TestBring(t *testing.T) {
	at := screening.At(screening.Voltage, 20).With(screening.PartTemperature, 25)
	limit := screening.Limit{On: "ir", At: at, Low: math.Inf(-1), High: 1e-6}
	for _, tt := range []struct {
		name   string
		value  float64
		at     screening.Condition
		sense  quantity.Sense
		rule   Rule
		want   float64 // 0: not brought over
		as     quantity.Sense
		never  bool
		saying string
	}{
		{"as it stands", 2e-7, at, quantity.Exactly, Rule{}, 2e-7, quantity.Exactly, false, ""},
		{"15 °C doubles", 2e-7, at.With(screening.PartTemperature, 15), quantity.Exactly, Rule{}, 4e-7, quantity.Exactly, false, "×2.00 from 15 °C to 25 °C (2 per 10 K; 1.88 to 2.38 for 8 to 11 K)"},
		{"hot and above the limit halves, and can only refute", 4e-6, at.With(screening.PartTemperature, 35), quantity.Exactly, Rule{}, 2e-6, quantity.Exactly, true, "cool"},
		{"hot and below the limit is an upper bound", 4e-7, at.With(screening.PartTemperature, 45), quantity.Exactly, Rule{}, 4e-7, quantity.AtMost, false, "leaks less"},
		{"51 °C is out of reach", 4e-7, at.With(screening.PartTemperature, 51), quantity.Exactly, Rule{}, 0, 0, false, "between 0 and 50 °C"},
		{"a higher voltage bounds from above", 2e-7, at.With(screening.Voltage, 75), quantity.Exactly, Rule{}, 2e-7, quantity.AtMost, false, "no more"},
		{"a lower voltage bounds from below", 2e-7, at.With(screening.Voltage, 9), quantity.Exactly, Rule{}, 2e-7, quantity.AtLeast, false, "no less"},
		{"at most at a lower voltage says nothing", 2e-7, at.With(screening.Voltage, 9), quantity.AtMost, Rule{}, 0, 0, false, "says nothing"},
		{"a trade rule holds at any voltage", 2e-7, at.With(screening.Voltage, 9), quantity.Exactly, Rule{AnyVoltage: true, LeastVoltage: 2}, 2e-7, quantity.Exactly, false, "whatever voltage"},
		{"but not at none", 2e-7, at.With(screening.Voltage, 1), quantity.Exactly, Rule{AnyVoltage: true, LeastVoltage: 2}, 0, 0, false, "at least 2 V"},
		{"voltage not stated", 2e-7, at.Without(screening.Voltage), quantity.Exactly, Rule{}, 0, 0, false, "not stated: ir@20 V"},
		{"temperature not stated: a room's", 2e-7, at.Without(screening.PartTemperature), quantity.Exactly, Rule{}, 2e-7, quantity.Exactly, false, "25 ± 5 °C"},
		{"not for germanium", 2e-7, at.Without(screening.PartTemperature), quantity.Exactly, Rule{NeedTemperature: true}, 0, 0, false, "state its temperature"},
		// From 15 °C, with a doubling per 8 K, the factor to 25 °C is 2^(10/8) = 2.378: 0.42 µA may be 1.0 µA, 0.43 µA more.
		{"germanium that clears the limit in any room", 4.2e-7, at.Without(screening.PartTemperature), quantity.Exactly, Rule{NeedTemperature: true, ClearsAnyRoom: true}, 4.2e-7 * math.Exp2(1.25), quantity.AtMost, false, "assumed a room's, 15 to 35 °C"},
		{"germanium that a cold room could bring over it", 4.3e-7, at.Without(screening.PartTemperature), quantity.Exactly, Rule{NeedTemperature: true, ClearsAnyRoom: true}, 0, 0, false, "state its temperature"},
		{"at least so much clears no room", 1e-8, at.Without(screening.PartTemperature), quantity.AtLeast, Rule{NeedTemperature: true, ClearsAnyRoom: true}, 0, 0, false, "state its temperature"},
		{"hot and to be seen cool: no upper bound", 4e-7, at.With(screening.PartTemperature, 45), quantity.Exactly, Rule{SeenCool: true}, 1e-7, quantity.Exactly, true, "cool"},
		{"another voltage that counts as the same", 2e-7, at.With(screening.Voltage, 9), quantity.Exactly, Rule{Same: screening.Span{Low: 0.15, High: 1.02}}, 2e-7, quantity.Exactly, false, ""},
		{"below the least voltage, and too much already", 2e-6, at.With(screening.Voltage, 1), quantity.Exactly, Rule{AnyVoltage: true, LeastVoltage: 2}, 2e-6, quantity.AtLeast, false, "no less"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			c := Bring(screening.Part{}, screening.Reading{Of: "ir", Value: tt.value, At: tt.at, Sense: tt.sense}, limit, tt.rule)
			if c.OK != (tt.want != 0) || !strings.Contains(c.Rule+c.Why, tt.saying) {
				t.Fatalf("%v, %q%q", c.OK, c.Rule, c.Why)
			}
			if c.OK && (math.Abs(c.Reading.Value/tt.want-1) > 1e-9 || c.Reading.Sense != tt.as || c.NeverPasses != tt.never || c.Reading.At != limit.At) {
				t.Errorf("%v %v never %v at %v", c.Reading.Value, c.Reading.Sense, c.NeverPasses, c.Reading.At)
			}
		})
	}
}

// GUM (JCGM 100, 4.3.7 and 5.1.2): from 15 °C the factor is 2, or 2^(10/8) = 2.378 and 2^(10/11) = 1.878 at the ends of the range; the larger
// deviation as a rectangular half-width, and 3 K of the assumed thermometer: u² = (0.378·x/√3)² + (2x·ln2/10·3/√3)².
func TestUncertaintyOfTheLaw(t *testing.T) {
	at := screening.At(screening.PartTemperature, 15)
	c := Bring(screening.Part{}, screening.Reading{Of: "ir", Value: 1e-6, At: at}, screening.Limit{High: 1}, Rule{})
	want := 1e-6 * math.Hypot(0.37841/math.Sqrt(3), 2*math.Ln2/10*3/math.Sqrt(3))
	if math.Abs(c.U/want-1) > 1e-4 {
		t.Errorf("u = %v, want %v", c.U, want)
	}
}

func TestBringTakesTheVoltageThatCounts(t *testing.T) {
	limit := screening.Limit{On: "iceo", At: screening.At(screening.VCE, 20).With(screening.PartTemperature, 25), High: 1e-6}
	r := screening.Reading{Of: "iceo", Value: 2e-7, At: limit.At.With(screening.VCE, 30)}
	if c := Bring(screening.Part{}, r, limit, Rule{Across: screening.VCE}); !c.OK || c.Reading.Sense != quantity.AtMost {
		t.Errorf("VCE of 30 V against 20 V: %+v", c)
	}
	r.At = screening.At(screening.Voltage, 30).With(screening.PartTemperature, 25)
	if c := Bring(screening.Part{}, r, limit, Rule{Across: screening.VCE}); c.OK || !strings.Contains(c.Why, "voltage of the reading is not stated") {
		t.Errorf("VCE not stated: %+v", c)
	}
}
