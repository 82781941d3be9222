package zener

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
)

func completed(t testing.TB, words string) screening.Claim {
	t.Helper()
	p, err := entry.Words(Book(types.Builtin()), strings.Fields(words))
	if err != nil {
		t.Fatal(err)
	}
	c, _, err := builtin.complete(p.Claim)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// R = (Vs − Vz)/IZT in the nearest E12 value, watts as current times the volts across it.
func TestDriveIsComputedForThePart(t *testing.T) {
	for _, tt := range []struct {
		words                              string
		supply, ohms, watts, current, part float64
	}{
		// 9 − 5.1 = 3.9 V at 5 mA is 780 Ω: 820 Ω, 4.756 mA, 18.5 mW; 24.3 mW in the part.
		{"BZX79-C5V1", 9, 820, 18.55e-3, 4.756e-3, 24.26e-3},
		// 9 − 5.1 V at 49 mA is 79.6 Ω: 82 Ω, 47.6 mA, 185 mW; 243 mW in the part.
		{"1N4733A", 9, 82, 0.1855, 47.56e-3, 0.2426},
		// 120 − 75 V at 2 mA is 22.5 kΩ: 22 kΩ, 2.05 mA.
		{"BZX79-C75", 120, 22e3, 92.05e-3, 2.045e-3, 0.1534},
	} {
		c := completed(t, tt.words)
		r := Book(types.Builtin()).Recipes(screening.Part{Claim: c}, voltageLimit(c))[0]
		for name, want := range map[string]float64{
			"supply": tt.supply, "series-resistance": tt.ohms, "resistor-power": tt.watts, "test-current": tt.current, "part-power": tt.part,
		} {
			if got := r.Values[name]; math.Abs(got/want-1) > 1e-3 {
				t.Errorf("%s: %s is %v, want %v", tt.words, name, got, want)
			}
		}
	}
	for x, want := range map[float64]float64{780: 820, 79.6: 82, 1000: 1000, 9.6e3: 10e3, 0.5: 0.47, 0.082: 0.082} {
		if got := nearest(x); math.Abs(got/want-1) > 1e-9 {
			t.Errorf("nearest to %v Ω is %v, want %v", x, got, want)
		}
	}
}

// The drive stays in the window in which a reading counts, for every type of the table.
func TestEveryDriveReachesTheWindow(t *testing.T) {
	for _, name := range types.Builtin().Names(Kind) {
		c := completed(t, "type="+name)
		vz, current, _ := operating(c)
		d := driveFor(vz, current)
		if d.current < 0.8*current || d.current > 1.2*current || d.supply-vz < 2 || d.part > 0.6 {
			t.Errorf("%s: %+v for %v A", name, d, current)
		}
	}
}

func TestCautions(t *testing.T) {
	for _, tt := range []struct{ words, codes, says string }{
		{"BZX79-C5V1", "", ""},
		{"1N4733A", "test-heat", "at 49 mA it takes 0.25 W"},
		{"1N4728A", "test-heat", "at 76 mA it takes 0.25 W: it gets hot, and its voltage drifts as it does. Read it 90 s"},
		{"BZX79-C75", "test-heat test-voltage", "kill"},
		{"1N4764A", "test-heat test-voltage", "local code and licensed practice"},
		{"", "power-unknown", "assume the smallest for this body"},
		{"12V izt=5mA", "power-unknown", "21 mA at 12 V"},
	} {
		var codes []string
		var text string
		for _, c := range Book(types.Builtin()).Cautions(screening.Part{Claim: completed(t, tt.words)}, screening.AtMeasure) {
			codes = append(codes, c.Code)
			text += c.Text + "\n"
			if c.Source.Status == screening.NoStatus || len(c.Values) == 0 {
				t.Errorf("%s: %+v", tt.words, c)
			}
		}
		if strings.Join(codes, " ") != tt.codes || !strings.Contains(text, tt.says) {
			t.Errorf("%q: %v, want %q, saying %q\n%s", tt.words, codes, tt.codes, tt.says, text)
		}
	}
}

func TestEveryLimitHasARecipe(t *testing.T) {
	for _, words := range []string{"BZX79-C2V4", "BZX79-C75", "1N4764A", "", "5V1", "rated:vz=5V..6V", "400V izt=1uA", "0.1V izt=10A", "5V1 izt=5mA rated:ir@0V=..1uA", "rated:vz=..6V"} {
		c := completed(t, words)
		all, err := limits(c)
		if err != nil || len(all) == 0 {
			t.Fatalf("%s: %d limits, %v", words, len(all), err)
		}
		for _, l := range all {
			found := Book(types.Builtin()).Recipes(screening.Part{Claim: c}, l)
			if len(found) == 0 {
				t.Errorf("%q: no recipe for %s", words, l.On)
			}
			for _, r := range found {
				if len(r.Lines) == 0 || r.Source.Status == screening.NoStatus || strings.Contains(strings.Join(r.Lines, ""), "%!") {
					t.Errorf("%q: %+v", words, r)
				}
				for name, x := range r.Values {
					if math.IsNaN(x) || math.IsInf(x, 0) || x <= 0 {
						t.Errorf("%q, %s: %s is %v", words, r.Title, name, x)
					}
				}
			}
		}
	}
}

func TestTablesAreChecked(t *testing.T) {
	if _, err := readTables(figuresCSV, lettersCSV); err != nil {
		t.Error(err)
	}
	if _, err := readTables("name,low,high,source,status\nforward,1,0,x,house\n", lettersCSV); err == nil {
		t.Error("bounds upside down are read")
	}
	for _, name := range []string{"forward", "default-tolerance"} {
		if _, ok := load().figures[name]; !ok {
			t.Errorf("no figure %s", name)
		}
	}
}
