package resistor

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func claim(ohms, watts float64, technology string) screening.Claim {
	c := screening.Claim{}.WithRating(screening.NominalRating(screening.Resistance, ohms)).WithTrait(screening.TraitTechnology, technology)
	if watts > 0 {
		c = c.WithRating(screening.NominalRating(Power, watts))
	}
	c, _, _ = complete(c)
	return c
}

// MIL-R-39008C 6.9 as quoted on mailing lists (second-hand): 25 h RCR05, 96 h others, 130 h RCR42, at 100 ± 5 °C.
func TestDryingHoursFollowTheSize(t *testing.T) {
	for _, tt := range []struct {
		name         string
		watts, hours float64
	}{
		{"⅛ W", 0.125, 25},
		{"¼ W", 0.25, 96},
		{"1 W", 1, 96},
		{"2 W", 2, 130},
		{"size not stated", 0, 96},
	} {
		part := screening.Part{
			Claim:    claim(4700, tt.watts, composition),
			Readings: []screening.Reading{{Of: screening.Resistance.Name, Unit: quantity.Ohm, Value: 5900}},
		}
		cautions := Book().Cautions(part, screening.AtVerdict)
		if len(cautions) != 1 {
			t.Fatalf("%s: %d cautions, want 1", tt.name, len(cautions))
		}
		c := cautions[0]
		if c.Values["time"] != tt.hours*3600 || c.Values["temperature"] != 100 || c.Source.Status != screening.SecondHand {
			t.Errorf("%s: %v, %v", tt.name, c.Values, c.Source)
		}
		for _, words := range []string{"thermostat", "never over a flame", "food", "ventilate", "may drop it"} {
			if !strings.Contains(c.Text, words) {
				t.Errorf("%s: the text does not say %q: %s", tt.name, words, c.Text)
			}
		}
		part.Treated = 1
		if len(Book().Cautions(part, screening.AtVerdict)) != 0 {
			t.Errorf("%s: told to dry what was dried", tt.name)
		}
	}
	film := screening.Part{
		Claim:    claim(4700, 0.25, "metal-film"),
		Readings: []screening.Reading{{Of: screening.Resistance.Name, Unit: quantity.Ohm, Value: 5900}},
	}
	if len(Book().Cautions(film, screening.AtVerdict)) != 0 {
		t.Error("told to dry a film resistor")
	}
}

func TestRecipes(t *testing.T) {
	limit := screening.Limit{On: screening.Resistance.Name}
	for _, tt := range []struct {
		name                    string
		ohms, watts             float64
		title                   string
		current, voltage, power float64 // of four wires
		says                    string
	}{
		{"1 Ω ½ W: the current is what the supply regulates", 1, 0.5, "Four wires", 0.1, 0.1, 0.01, "swap the current"},
		// I = √(0.1·0.25 W/4.7 Ω) = 72.9 mA, U = 343 mV, P = 25 mW.
		{"4.7 Ω ¼ W: a tenth of its power", 4.7, 0.25, "Four wires", 0.07293, 0.34278, 0.025, "10 % of its power: 0.025 W"},
		{"10 Ω on two wires", 10, 0.25, "Ohms range", 0, 0, 0, "lift one lead"},
		{"1 MΩ: no fingers", 1e6, 0.25, "Ohms range", 0, 0, 0, "do not touch"},
	} {
		found := Book().Recipes(screening.Part{Claim: claim(tt.ohms, tt.watts, "")}, limit)
		if len(found) != 1 || !strings.HasPrefix(found[0].Title, tt.title) {
			t.Errorf("%s: %+v", tt.name, found)
			continue
		}
		r := found[0]
		for name, want := range map[string]float64{"test-current": tt.current, "expected-voltage": tt.voltage, "resistor-power": tt.power} {
			if got := r.Values[name]; math.Abs(got-want) > 1e-3*want {
				t.Errorf("%s: %s is %v, want %v", tt.name, name, got, want)
			}
		}
		if !strings.Contains(strings.Join(r.Lines, "\n"), tt.says) {
			t.Errorf("%s: nothing says %q: %v", tt.name, tt.says, r.Lines)
		}
	}
	if c := Book().Cautions(screening.Part{}, screening.AtMeasure); len(c) != 1 || !strings.Contains(c[0].Text, "dead circuit") {
		t.Errorf("before measuring: %+v", c)
	}
}

// Which values a resistor of a tolerance may have; the series themselves are held against the published lists where they stand.
func TestPreferredValues(t *testing.T) {
	for _, tt := range []struct {
		name      string
		ohms, tol float64
		want      bool
	}{
		{"4.7 kΩ 5 %", 4700, 0.05, true},
		{"4.75 kΩ 1 %: E96", 4750, 0.01, true},
		{"4.75 kΩ 5 %: not in E24", 4750, 0.05, false},
		{"4.7 kΩ 1 %: sold in E24 values too", 4700, 0.01, true},
		{"9.20 kΩ 0.5 %: the exception of E192", 9200, 0.005, true},
		{"9.19 kΩ 0.5 %: what the rule alone would give", 9190, 0.005, false},
		{"8.2 Ω, not 8.3", 8.2, 0.05, true},
		{"8.3 Ω", 8.3, 0.05, false},
		{"250 kΩ of before the series", 250e3, 0.1, false},
		{"1 MΩ", 1e6, 0.05, true},
	} {
		if got := preferred(tt.ohms, tt.tol); got != tt.want {
			t.Errorf("%s: %v, want %v", tt.name, got, tt.want)
		}
	}
	j := judge(t, "250k 10% resistance=251k", screening.DefaultPolicy())
	if j.Verdict != screening.Accept || !strings.Contains(booktest.Texts(j), "not a preferred value") {
		t.Errorf("250 kΩ: %s\n%s", j.Verdict, booktest.Texts(j))
	}
}

func TestTablesAreChecked(t *testing.T) {
	if _, err := readTables(technologiesCSV, dryingCSV); err != nil {
		t.Error(err)
	}
	head := "style,power-to,hours,source,status\n"
	if _, err := readTables(technologiesCSV, head+"a,1,1,x,published\nb,1,1,x,published\n"); err == nil {
		t.Error("sizes out of order are read")
	}
	if _, err := readTables("technology,words,default,as-measured,source,status\nwood,,0.1,0.1,x,published\n", dryingCSV); err == nil {
		t.Error("a table without the unknown technology is read")
	}
	for _, w := range []struct{ word, want string }{{"cc", composition}, {"Carbon-Composition", composition}, {"", unknown}, {"mox", "metal-oxide"}} {
		if tech, ok := technologyNamed(w.word); !ok || tech.name != w.want {
			t.Errorf("%q is %q", w.word, tech.name)
		}
	}
}
