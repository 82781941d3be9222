package screening_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestConditionHoldsWhatAMapWould(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var c screening.Condition
		model := map[screening.Variable]float64{}
		t.Repeat(map[string]func(*rapid.T){
			"with": func(t *rapid.T) {
				v := rapid.SampledFrom(screening.Variables()).Draw(t, "variable")
				x := rapid.SampledFrom([]float64{-5, 0, 1e-6, 120, math.NaN()}).Draw(t, "value")
				c = c.With(v, x)
				if _, has := model[v]; !math.IsNaN(x) && (has || len(model) < screening.MaxConditions) {
					model[v] = x
				}
			},
			"without": func(t *rapid.T) {
				v := rapid.SampledFrom(screening.Variables()).Draw(t, "variable")
				c = c.Without(v)
				delete(model, v)
			},
			"": func(t *rapid.T) {
				var again screening.Condition
				for v, x := range model {
					again = again.With(v, x)
				}
				if again != c {
					t.Fatalf("%v depends on the order in which it was built: %v", c, again)
				}
				for _, v := range screening.Variables() {
					want, has := model[v]
					if got, ok := c.Get(v); ok != has || got != want || c.Has(v) != has {
						t.Fatalf("%s is %v, %v; want %v, %v", v, got, ok, want, has)
					}
				}
				if c.IsZero() != (len(model) == 0) {
					t.Fatal("IsZero")
				}
			},
		})
	})
}

func TestConditionPrintsAsPeopleWriteIt(t *testing.T) {
	for _, c := range []struct {
		name string
		at   screening.Condition
		want string
	}{
		{"nothing stated", screening.Condition{}, ""},
		{"DC is stated", screening.At(screening.Frequency, 0), "0 Hz"},
		{"a leakage test", screening.At(screening.After, 120).With(screening.Voltage, 35), "35 V, after 2 min"},
		{"named currents carry their name", screening.At(screening.VCE, 5).With(screening.IC, 2e-3), "IC 2 mA, VCE 5 V"},
		{"0 °C is stated", screening.At(screening.PartTemperature, 0), "0 °C"},
	} {
		t.Run(c.name, func(t *testing.T) {
			if got := c.at.String(); got != c.want {
				t.Errorf("%q; want %q", got, c.want)
			}
		})
	}
}

func TestFillTakesOnlyWhatIsAbsent(t *testing.T) {
	got := screening.At(screening.Voltage, 10).Fill(screening.At(screening.Voltage, 35).With(screening.After, 120))
	if got != screening.At(screening.Voltage, 10).With(screening.After, 120) {
		t.Errorf("%v", got)
	}
}

func TestFit(t *testing.T) {
	fit := screening.Fit{screening.Frequency: {Low: 0.8, High: 1.25}, screening.Current: screening.Any}
	limit := screening.At(screening.Frequency, 120).With(screening.Current, 1e-3).With(screening.Voltage, 10)
	whole := func(f, v float64) screening.Condition {
		return screening.At(screening.Frequency, f).With(screening.Voltage, v)
	}
	for _, c := range []struct {
		name   string
		at     screening.Condition
		off    screening.Variable
		absent bool
		fits   bool
	}{
		{"the same", whole(120, 10), 0, false, true},
		{"100 Hz serves 120 Hz where the field says so", whole(100, 10), 0, false, true},
		{"100 kHz does not", whole(100e3, 10), screening.Frequency, false, false},
		{"no frequency is not 120 Hz", screening.At(screening.Voltage, 10), screening.Frequency, true, false},
		{"2 % apart is the same voltage", whole(120, 10.2), 0, false, true},
		{"5 % apart is another", whole(120, 10.5), screening.Voltage, false, false},
		{"0 V is not 10 V", whole(120, 0), screening.Voltage, false, false},
		{"what the limit does not state does not matter", whole(120, 10).With(screening.After, 60), 0, false, true},
	} {
		t.Run(c.name, func(t *testing.T) {
			v, absent, fits := fit.Misfit(&c.at, &limit)
			if fits != c.fits || v != c.off || absent != c.absent {
				t.Errorf("%v, %v, %v; want %v, %v, %v", v, absent, fits, c.off, c.absent, c.fits)
			}
		})
	}
}

func TestEveryVariableHasAWordALabelAndAUnit(t *testing.T) {
	for _, v := range screening.Variables() {
		if back, ok := screening.VariableNamed(v.String()); !ok || back != v || v.Label() == "" || v.Unit() == quantity.One {
			t.Errorf("%d: %q, %q, %v", v, v.String(), v.Label(), v.Unit())
		}
	}
}

func TestWhatNeverFitsIsBroughtOver(t *testing.T) {
	fit := screening.Fit{screening.PartTemperature: screening.Never}
	limit := screening.At(screening.PartTemperature, 25)
	at := limit
	if v, absent, fits := fit.Misfit(&at, &limit); fits || absent || v != screening.PartTemperature {
		t.Errorf("the limit's own temperature: %v, absent %v, fits %v", v, absent, fits)
	}
	none := screening.Condition{}
	if v, absent, fits := fit.Misfit(&none, &limit); fits || !absent || v != screening.PartTemperature {
		t.Errorf("no temperature: %v, absent %v, fits %v", v, absent, fits)
	}
}
