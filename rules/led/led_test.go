package led

import (
	"fmt"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

func judge(t *testing.T, words string, policy screening.Policy) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, Book(types.Builtin()), words, policy)
}

func TestVerdictsOfLEDs(t *testing.T) {
	given := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		want        screening.Verdict
		says        string
	}{
		{"red at a tester's current", "red vf=1.72 vbr=OL", screening.Accept, "forward voltage at 20 mA"},
		{"red at 20 mA is as good as new", "red vf@20mA=1.95 vbr=OL", screening.Accept, "what is asked of a new part"},
		{"whether it lights is untested until someone looked", "red vf=1.72 vbr=OL", screening.Accept, "whether it lights"},
		{"looked at and lit", "red vf=1.72 vbr=OL seen=nothing", screening.Accept, "how brightly"},
		{"an old yellow-green one at 2.6 V is serviceable", "gap-green vf@20mA=2.60 vbr=OL", screening.Accept, ""},
		{"green does not say which green", "green vf@20mA=3.1 vbr=OL", screening.Accept, ""},
		{"blue beyond a tester's reach is no fault", "blue vf=OL vbr=OL", screening.Undecided, "OL forward is no fault yet"},
		{"blue lit through a resistor", "blue vf=OL vbr=OL vf@20mA=3.21", screening.Accept, "what is asked of a new part"},
		{"probes turned", "red vf=OL vbr=1.75", screening.Undecided, "type each reading as the other"},
		{"not turned round yet", "red vf=1.72", screening.Undecided, "TURN THE PROBES"},
		{"no colour, as measured: the colours that overlap there", "vf@20mA=1.95 vbr=OL", screening.Regrade, "red or yellow-green"},
		{"no colour at a tester's current: more colours are possible", "vf=1.72 vbr=OL", screening.Regrade, "infrared, red, orange, amber or yellow-green"},
		{"claimed red, drops like blue", "red vf@20mA=3.2 vbr=OL", screening.Regrade, "true-green, blue, white or uv"},
		{"claimed red, at a tester's current less than red: read it lit", "red vf=1.15 vbr=OL", screening.Undecided, "20 mA"},
		{"claimed red, at 20 mA infrared", "red vf@20mA=1.20 vbr=OL", screening.Regrade, "infrared"},
		{"a silicon diode in an LED's body", "red vf=0.62 vbr=OL", screening.Reject, "silicon"},
		{"unmarked, and no LED", "vf=0.62 vbr=OL", screening.Reject, "silicon"},
		{"shorted", "red vf=0.003 vbr=0.002", screening.Reject, "shorted"},
		{"leaks in reverse", "red vf=1.72 vbr=0.4", screening.Reject, ""},
		{"a second one in reverse is no damage", "red vf=1.72 vbr=1.9V", screening.Undecided, "two in one case"},
		{"it stays dark", "red vf=1.72 vbr=OL seen=dark", screening.Reject, "no light"},
		{"two in one case, each by its colour", "red+yellow-green vf/red=1.72 vf/yellow-green=1.85", screening.Accept, ""},
		{"two in one case, one shorted", "red+yellow-green vf/red=1.72 vf/yellow-green=0.002", screening.Reject, ""},
		{"two in one case, one not read", "red+yellow-green vf/red=1.72", screening.Undecided, "yellow-green"},
		{"two in one case, which of them was read is not said", "red+yellow-green vf=1.72", screening.Undecided, "type each as vf/red"},
		{"breaks down below the claimed 5 V", "red rated:vrrm=5V vf=1.72 vbr=4.6V", screening.Reject, ""},
		{"breaks down below the recalled 5 V", "red vf=1.72 vbr=4.6V", screening.Undecided, "CONFIRM"},
		{"across the mains", "red vf=1.72 vbr=OL seen=mains", screening.Barred, ""},
		{"above the sheet's own recalled maximum", "TSAL6200 vf@100mA=1.75 vbr=OL", screening.Undecided, "CONFIRM"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			j := judge(t, tt.words, screening.DefaultPolicy())
			given[j.Verdict]++
			if said := booktest.Texts(j); j.Verdict != tt.want || !strings.Contains(said, tt.says) {
				t.Errorf("%s, want %s saying %q\n%s", j.Verdict, tt.want, tt.says, said)
			}
		})
	}
	booktest.EveryVerdict(t, given, screening.Treat)
}

// Published forward voltages at 20 mA (tables of LED forward voltages): inside within spec, outside not.
func TestPublishedBandsHoldAtTheirEdges(t *testing.T) {
	for _, tt := range []struct {
		colour    string
		low, high float64
	}{
		{"infrared", 1.1, 1.6},
		{"red", 1.8, 2.2},
		{"orange", 2.0, 2.1},
		{"amber", 2.0, 2.3},
		{"yellow", 2.0, 2.3},
		{"gap-green", 1.9, 2.4},
		{"ingan-green", 2.8, 3.5},
		{"blue", 3.0, 3.6},
		{"white", 2.8, 3.6},
		{"uv", 3.2, 4.4},
	} {
		for v, inside := range map[float64]bool{tt.low: true, tt.high: true, tt.low - 0.01: false, tt.high + 0.01: false} {
			j := judge(t, fmt.Sprintf("%s vf@20mA=%.2f vbr=OL", tt.colour, v), booktest.Exactly())
			if got := j.Verdict == screening.Accept && j.Grade == screening.WithinSpec; got != inside {
				t.Errorf("%s %.2f V: %s %s, want within spec %v", tt.colour, v, j.Verdict, j.Grade, inside)
			}
		}
	}
}

// A voltage at less current never proves the band at 20 mA, and can only refute it from above.
func TestATestersReadingOnlyBoundsThePublishedBand(t *testing.T) {
	for words, want := range map[string]screening.Outcome{"red vf=1.95": screening.Missing, "red vf=2.40": screening.Fail} {
		j := judge(t, words, screening.DefaultPolicy())
		for i := range j.Findings {
			if f := &j.Findings[i]; f.Limit.Grade == screening.WithinSpec && f.Outcome != want {
				t.Errorf("%s: %v, want %v", words, f.Outcome, want)
			}
		}
	}
}

// R = (9 V − VF)/I: red at 20 mA is (9 − 2)/0.02 = 350 Ω, 0.14 W; a low-current type at its 7 mA is 1 kΩ.
func TestTheSeriesResistorIsComputed(t *testing.T) {
	for words, want := range map[string][2]float64{"red": {350, 0.14}, "blue": {285, 0.114}, "HLMP-4700": {1000, 0.049}} {
		j := judge(t, words, screening.DefaultPolicy())
		c := cautions(j.Part, screening.AtMeasure)[0].Values
		if d := c["series-resistance"] - want[0]; d > 1e-6 || d < -1e-6 || c["resistor-power"]-want[1] > 1e-6 {
			t.Errorf("%s: %v Ω %v W, want %v", words, c["series-resistance"], c["resistor-power"], want)
		}
		if c["reverse-voltage"] > 5 {
			t.Errorf("%s: %v V in reverse", words, c["reverse-voltage"])
		}
	}
}

func TestAPoorMeterRejectsNoSoundLED(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters = map[string]screening.Meter{"": {By: map[screening.Characteristic]screening.Accuracy{screening.VF.Name: {Relative: 0.15}}}}
	for _, words := range []string{"red vf@20mA=1.55 vbr=OL", "red vf@20mA=2.5 vbr=OL", "orange vf@20mA=2.4 vbr=OL", "infrared vf@20mA=0.95 vbr=OL"} {
		if j := judge(t, words, policy); j.Verdict == screening.Reject {
			t.Errorf("%s: %s", words, j.Verdict)
		}
	}
}

func TestClaimsThatCannotBeAreRefused(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]string{
		"colour=purple": `colour: "purple" is not known`, "TSAL6200 red": "TSAL6200 is infrared", "rated:if-av=0A": "no current to light it with",
		"colour=red+purple": `"purple" is not known`,
	} {
		_, err := screening.Judge(b, booktest.Part(t, b, words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

func TestTablesAreChecked(t *testing.T) {
	const header = "colour,words,low,high,sound-low,sound-high,source,clause,status\n"
	for text, want := range map[string]string{
		header + "red,,1.8,2.2,1.9,2.6,x,,house\n": "does not contain the published one", header + "red,,1.8,2.2,1.4,2.6,x,,house\n": "last row is not unknown",
	} {
		if _, err := readColours(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%v, want %q", err, want)
		}
	}
}

func BenchmarkJudge(b *testing.B) { booktest.Benchmark(b, Book(types.Builtin()), "red vf=1.72 vbr=OL") }
