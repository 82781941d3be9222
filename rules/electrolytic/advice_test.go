package electrolytic

import (
	"math"
	"slices"
	"strings"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func cautionOf(cs []screening.Caution, code string) (screening.Caution, bool) {
	for _, c := range cs {
		if c.Code == code {
			return c, true
		}
	}
	return screening.Caution{}, false
}

func TestReformingIsWarnedOfByNumber(t *testing.T) {
	leaky := leakage(5000, 450, 5)
	for _, tc := range []struct {
		name     string
		uF, v    float64
		traits   []string
		readings []screening.Reading
		treated  int
		seen     string
		ohms     float64 // 0: no caution at all
		watts    float64
	}{
		// Cornell-Dubilier 1993: 100 kΩ above 75 V and at most 1 mA: 450 kΩ at 450 V, which is 0.45 W into a short (1 kΩ would be 203 W).
		{"450 V: 450 kΩ", 47, 450, nil, []screening.Reading{leaky}, 0, "", 450e3, 0.45},
		{"80 V: 100 kΩ", 47, 80, nil, []screening.Reading{leakage(5000, 80, 5)}, 0, "", 100e3, 0.064},
		{"35 V: 10 kΩ", 47, 35, nil, []screening.Reading{leakage(5000, 35, 2)}, 0, "", 10e3, 0.1225},
		// 0.11 W warms a 10×20 can by 10 K: 0.275 mA at 400 V.
		{"a 10x20 can at 400 V stands 0.28 mA", 47, 400, []string{"can-size", "10x20"}, []screening.Reading{leakage(5000, 400, 5)}, 0, "", 1.5e6, 0.107},
		{"high capacitance asks for it too", 47, 450, nil, []screening.Reading{capacitance(90)}, 0, "", 450e3, 0.45},
		{"sound leakage does not", 47, 450, nil, []screening.Reading{leakage(20, 450, 5)}, 0, "", 0, 0},
		{"above a derived limit only: accepted, so not told", 10000, 63, []string{"case", "screw", "dated", "1995"}, []screening.Reading{leakage(1900, 63, 5)}, 0, "", 0, 0},
		{"too near for the meter: not told", 47, 450, nil, []screening.Reading{{Of: screening.Leakage.Name, Unit: quantity.Ampere, Value: 450e-6, U: 5e-6, Spec: 9e-6, At: leakage(1, 450, 5).At}}, 0, "", 0, 0},
		{"bulged parts never", 47, 450, nil, []screening.Reading{leaky}, 0, bulged, 0, 0},
		{"twice is enough", 47, 450, nil, []screening.Reading{leaky}, 2, "", 0, 0},
	} {
		t.Run(tc.name, func(t *testing.T) {
			part := screening.Part{Claim: claimed(t, tc.uF, tc.v, tc.traits...), Readings: tc.readings, Treated: tc.treated}
			if tc.seen != "" {
				part.Look = []screening.Observation{{Check: tc.seen, Fault: true}}
			}
			c, ok := cautionOf(cautions(part, screening.AtVerdict), "re-form")
			if ok != (tc.ohms > 0) {
				t.Fatalf("caution given: %v", ok)
			}
			if !ok {
				return
			}
			if got := c.Values["series-resistance"]; math.Abs(got-tc.ohms) > 1e-6*tc.ohms {
				t.Errorf("series resistance %v, want %v", got, tc.ohms)
			}
			if got := c.Values["resistor-power"]; math.Abs(got-tc.watts) > 0.01*tc.watts {
				t.Errorf("resistor power %v, want %v", got, tc.watts)
			}
			for _, words := range []string{"neither bulged nor leaking", "plus to plus", "across the part itself", "not the charge already in the part", "rest it 12 to 48 h"} {
				if !strings.Contains(c.Text, words) {
					t.Errorf("it does not say %q: %s", words, c.Text)
				}
			}
			if high := tc.v > 60; strings.Contains(c.Text, "local code") != high || (c.Level == screening.Danger) != high || c.Gate != high {
				t.Errorf("level %s, gate %v: %s", c.Level, c.Gate, c.Text)
			}
		})
	}
}

func TestStoredChargeCountsTheWorstCaseOfAllSections(t *testing.T) {
	c := screening.Claim{}.WithRating(screening.NominalRating(screening.RatedVoltage, 450)).WithRating(screening.RangeRating(screening.Tolerance, -0.1, 0.5))
	for _, s := range []string{"1", "2"} {
		r := screening.NominalRating(screening.Capacitance, 8e-6)
		r.Section = s
		c = c.WithRating(r)
	}
	for _, at := range []screening.Moment{screening.AtLook, screening.AtMeasure, screening.AtVerdict} {
		w, ok := cautionOf(cautions(screening.Part{Claim: c}, at), "stored-charge")
		if !ok || !w.Gate || w.Level != screening.Danger {
			t.Fatalf("moment %v: %+v", at, w)
		}
		// ½·(2·8 µF·1.5)·450² = 2.43 J
		if math.Abs(w.Values["energy"]-2.43) > 0.001 {
			t.Errorf("energy %v J, want 2.43 J", w.Values["energy"])
		}
	}
	if cs := cautions(screening.Part{Claim: claimed(t, 100, 25)}, screening.AtLook); cs != nil {
		t.Errorf("100 µF 25 V needs no warning: %v", cs)
	}
	if cs := cautions(screening.Part{}, screening.AtLook); cs != nil {
		t.Errorf("an empty claim has no number to warn with: %v", cs)
	}
}

func TestRecipesCarryThisPartsNumbers(t *testing.T) {
	for _, tc := range []struct {
		name   string
		uF, v  float64
		on     screening.Characteristic
		set    screening.LimitSet
		after  float64
		values map[string]float64
		says   []string
	}{
		{
			"leakage at 35 V", 2200, 35, screening.Leakage.Name, screening.GeneralSet, 120,
			map[string]float64{"supply": 35, "series-resistance": 10e3, "sense-resistance": 1e3, "volts-at-limit": 0.77, "after": 120},
			[]string{"discharge", "10 kΩ", "770 µA", "plus to plus"},
		},
		{
			"leakage at 450 V", 47, 450, screening.Leakage.Name, screening.GeneralSet, 300,
			map[string]float64{"supply": 450, "series-resistance": 450e3, "resistor-power": 0.45},
			[]string{"then put 81 kΩ in its place (5 W or more: 2.5 W if the part fails short)", "never set the supply above 450 V", "local code", "eye protection"},
		},
		{
			"capacitance by the watch", 2200, 35, screening.Capacitance.Name, screening.GeneralSet, 0,
			map[string]float64{"supply": 9},
			[]string{"63.2 %", "10 % more"},
		},
		{
			"ESR", 470, 25, screening.ESR.Name, screening.GeneralSet, 0,
			map[string]float64{"frequency": 120},
			[]string{"touch the probes together", "120 Hz", "can show this part bad, not good"},
		},
		{"tan δ", 470, 25, screening.TanDelta.Name, screening.GeneralSet, 0, nil, []string{"100 or 120 Hz"}},
	} {
		t.Run(tc.name, func(t *testing.T) {
			c := claimed(t, tc.uF, tc.v)
			rs := recipes(screening.Part{Claim: c}, limitOf(t, c, tc.on, tc.set, tc.after))
			if len(rs) == 0 {
				t.Fatal("none")
			}
			var text strings.Builder
			values := map[string]float64{}
			for _, r := range rs {
				text.WriteString(strings.Join(r.Lines, "\n") + "\n")
				for k, v := range r.Values {
					values[k] = v
				}
				if r.Title == "" || r.Source.Status == screening.NoStatus {
					t.Errorf("no title or status: %+v", r)
				}
			}
			for k, want := range tc.values {
				if math.Abs(values[k]-want) > 0.005*want {
					t.Errorf("%s = %v, want %v", k, values[k], want)
				}
			}
			for _, words := range tc.says {
				if !strings.Contains(text.String(), words) {
					t.Errorf("it does not say %q:\n%s", words, text.String())
				}
			}
		})
	}
}

func TestUntestedThingsAreSaid(t *testing.T) {
	for _, tc := range []struct {
		name     string
		readings []screening.Reading
		want     string // "" for nothing
	}{
		{"leakage at 10 V only", []screening.Reading{capacitance(450), esr(0.2), leakage(1, 10, 2)}, "leakage at its rated 25 V: read only at 10 V"},
		{"ESR bounded only", []screening.Reading{capacitance(450), esr100k(0.15), leakage(1, 25, 2)}, "only bounded by a reading at a higher frequency"},
		{"everything measured", []screening.Reading{capacitance(450), esr(0.2), leakage(1, 25, 2)}, ""},
	} {
		t.Run(tc.name, func(t *testing.T) {
			j := judge(t, verdictCase{uF: 470, v: 25, readings: tc.readings})
			said := strings.Join(j.Untested, "\n")
			if j.Verdict != screening.Accept || (tc.want == "") != (said == "") || !strings.Contains(said, tc.want) {
				t.Errorf("%s, untested %q, want %q", j.Verdict, said, tc.want)
			}
		})
	}
}

// A wanted leakage that is missing stands among the gaps, or in the rulebook's words where they say more; never in both.
func TestMissingLeakageIsSaidOnce(t *testing.T) {
	for _, tc := range []struct {
		name           string
		readings       []screening.Reading
		gaps, untested int
	}{
		{"left out", []screening.Reading{capacitance(450), esr(0.2)}, 1, 0},
		{"read at 10 V only", []screening.Reading{capacitance(450), esr(0.2), leakage(1, 10, 2)}, 0, 1},
		{"measured", []screening.Reading{capacitance(450), esr(0.2), leakage(1, 25, 2)}, 0, 0},
	} {
		j := judge(t, verdictCase{uF: 470, v: 25, readings: tc.readings})
		if len(j.NotTested) != tc.gaps || len(j.Untested) != tc.untested {
			t.Errorf("%s: not tested %+v, untested %q", tc.name, j.NotTested, j.Untested)
		}
	}
	// A ceiling (here 10 mA, and what warms the can) asks for the same reading.
	j := judge(t, verdictCase{uF: 22000, v: 63, traits: []string{"can-size", "35x50"}, readings: []screening.Reading{capacitance(22000), esr(0.005)}})
	if ceiling := slices.ContainsFunc(j.Findings, func(f screening.Finding) bool { return f.Limit.Criterion == criterionCeiling }); !ceiling || len(j.NotTested) != 1 {
		t.Errorf("with a ceiling (%v): not tested %+v", ceiling, j.NotTested)
	}
}

// Parts of 1999 to 2007 that read high are measured before they are treated, and where they leak no reading settles them.
func TestTheNextStepOfTheFaultEraSettlesIt(t *testing.T) {
	high := []screening.Reading{capacitance(640), esr(0.28)}
	leaky := append(slices.Clone(high), leakage(3800, 50, 2))
	for _, tc := range []struct {
		name     string
		traits   []string
		readings []screening.Reading
		want     screening.Verdict
		next     []string
		reform   bool // told how to re-form it
	}{
		{"2003, leakage not read", []string{"dated", "2003"}, high, screening.Undecided, []string{"MEASURE leakage current at 50 V, 20 °C, after 2 min"}, false},
		{"some year of 200x", []string{"dated", "200x"}, high, screening.Undecided, []string{"MEASURE leakage current at 50 V, 20 °C, after 2 min"}, false},
		{"2003, leaking", []string{"dated", "2003"}, leaky, screening.Undecided, []string{"REPLACE it, or prove the series good"}, false},
		{"2003, leaking, of a series that lasted", []string{"dated", "2003", "series", seriesSound}, leaky, screening.Treat, []string{"RE-FORM it"}, true},
		{
			"2003, high though leakage passes",
			[]string{"dated", "2003"},
			append(slices.Clone(high), leakage(5, 50, 2)),
			screening.Undecided,
			[]string{"REPEAT capacitance"},
			false,
		},
		{
			"1995, leakage not read: treat, after the reading that can reject",
			[]string{"dated", "1995"},
			high, screening.Treat,
			[]string{"MEASURE leakage current at 50 V, 20 °C, after 2 min first", "RE-FORM it"},
			true,
		},
		{"1995, leaking", []string{"dated", "1995"}, leaky, screening.Treat, []string{"RE-FORM it"}, true},
	} {
		t.Run(tc.name, func(t *testing.T) {
			j := judge(t, verdictCase{uF: 470, v: 50, traits: tc.traits, readings: tc.readings})
			matches := len(j.Next) == len(tc.next)
			for i := range min(len(j.Next), len(tc.next)) {
				matches = matches && strings.HasPrefix(j.Next[i].Text, tc.next[i])
			}
			if j.Verdict != tc.want || !matches {
				t.Errorf("%s, next %+v; want %s, %q", j.Verdict, j.Next, tc.want, tc.next)
			}
			if _, told := cautionOf(j.Cautions, "re-form"); told != tc.reform {
				t.Errorf("told how to re-form it: %v", told)
			}
		})
	}
}

func TestALowerVoltageIsToBeMarked(t *testing.T) {
	j := judge(t, verdictCase{uF: 47, v: 450, treated: 2, readings: []screening.Reading{capacitance(46), esr(2), leakage(60, 350, 5), leakage(2000, 450, 5)}})
	if j.RegradedAs == nil || !strings.HasSuffix(j.RegradedAs.Text, "mark it 350 V") {
		t.Errorf("regraded as %+v", j.RegradedAs)
	}
}

func TestBareWords(t *testing.T) {
	for word, want := range map[string]string{"1974": "1974", "197x": "197x", "197X": "197x", "2099": "2099", "1899": "", "2100": "", "74": "", "197": "", "1974a": ""} {
		got, ok := acceptYear(word)
		if ok != (want != "") || ok && got != want {
			t.Errorf("%q as a year: %q %v", word, got, ok)
		}
	}
	for word, want := range map[string]string{"10x20": "10x20", "10×20": "10x20", "12,5x25mm": "12.5x25", "12.5 X 25": "12.5x25", "10": "", "10x": "", "0x20": "", "ax20": ""} {
		got, ok := acceptCanSize(word)
		if ok != (want != "") || got != want {
			t.Errorf("%q as a can size: %q %v", word, got, ok)
		}
	}
}
