package marking

import (
	"math"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"goodbin/rules/internal/series"
	"goodbin/screening"
)

// sound holds what every decoding must hold, whatever was read.
func sound(t interface {
	Helper()
	Fatalf(format string, args ...any)
}, text string, opt Options,
) {
	t.Helper()
	meanings, err := Decode(text, opt)
	again, errAgain := Decode(text, opt)
	if diff := cmp.Diff(meanings, again, cmp.AllowUnexported(Meaning{}), cmpopts.EquateNaNs()); diff != "" || (err == nil) != (errAgain == nil) {
		t.Fatalf("%q is read in two ways: %v, %v\n%s", text, err, errAgain, diff)
	}
	if (err == nil) != (len(meanings) > 0) {
		t.Fatalf("%q: %d meanings and %v", text, len(meanings), err)
	}
	if len(meanings) > maxMeanings+8 {
		t.Fatalf("%q has %d meanings", text, len(meanings))
	}
	for i, m := range meanings {
		where := func(format string, args ...any) {
			t.Helper()
			t.Fatalf("%q, "+format+": %+v", append(append([]any{text}, args...), m)...)
		}
		switch {
		case m.Of == "" || m.Scheme == "" || m.Why == "" || m.String() == "":
			where("a meaning without a name, a scheme, a reason or a text")
		case m.Source.Document == "" || m.Source.Status == screening.NoStatus:
			where("a meaning without a source")
		case math.IsInf(m.Value, 0) || math.IsInf(m.Low, 0) || math.IsInf(m.High, 0):
			where("without end")
		case m.Low > m.High, m.Value < m.Low, m.Value > m.High, math.IsNaN(m.Low) != math.IsNaN(m.High):
			where("bounds are inverted, open on one side, or leave out the value")
		case m.Value < 0 && m.Of != OfTemperatureCoefficient, m.Value == 0 && m.Of != r && m.Of != OfTemperatureCoefficient:
			where("a value of zero or below")
		case math.IsNaN(m.Value) && math.IsNaN(m.Low) && m.Text == "" && m.Dates == nil:
			where("says nothing")
		case i > 0 && m.rank < meanings[i-1].rank:
			where("out of order")
		}
		for _, d := range m.Dates {
			if !dayOf(opt.Now).past(d) || d.Year < earliestYear || d.Month > 12 || d.Week > lastWeek || d.Month < 0 || d.Week < 0 {
				where("an impossible date, or one of the future")
			}
		}
		for _, p := range m.Parts {
			if p.Text == "" || p.Says == "" || p.Scheme == "" || p.Source.Status == screening.NoStatus {
				where("a piece that says nothing")
			}
		}
		for _, w := range m.Words {
			if w == "" || strings.ContainsAny(w, " \t") || strings.Contains(w, "NaN") || strings.Contains(w, "Inf") {
				where("words %q", m.Words)
			}
		}
	}
}

// figures draws a value of E192 or E24 as figures from 100 to 999.
func figures(t *rapid.T) int {
	if rapid.Bool().Draw(t, "fine") {
		return int(math.Round(100 * series.Value(192, rapid.IntRange(0, 191).Draw(t, "index"))))
	}
	return int(math.Round(100 * series.Value(24, rapid.IntRange(0, 23).Draw(t, "index"))))
}

// letterAndDigits writes figures·10^e as a letter-and-digit value with its decimal letter among those given.
func letterAndDigits(t *rapid.T, letters string) (text string, x float64) {
	f := figures(t)
	i := rapid.IntRange(0, len(letters)-1).Draw(t, "letter")
	exponent := map[byte]int{'R': 0, 'K': 3, 'M': 6, 'G': 9, 'p': -12, 'n': -9, 'u': -6}[letters[i]]
	digits := strconv.Itoa(f)
	whole := rapid.IntRange(0, 3).Draw(t, "whole")
	text = digits[:whole] + letters[i:i+1] + strings.TrimRight(digits[whole:], "0")
	if strings.HasSuffix(text, letters[i:i+1]) && whole == 0 {
		text += "0"
	}
	return text, scaled(float64(f), exponent+whole-3)
}

func TestLetterAndDigitValuesReadBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text, x := letterAndDigits(t, "RKMG")
		if m := mustDecode(t, text); place(m, r, x, nan, nan) == 0 {
			t.Fatalf("%s is not %g Ω:%s", text, x, list(m))
		}
		text, x = letterAndDigits(t, "pnu")
		if m := mustDecode(t, text); place(m, c, x, nan, nan) != 1 {
			t.Fatalf("%s is not %g F:%s", text, x, list(m))
		}
		text, x = letterAndDigits(t, "pnu")
		letter := rapid.SampledFrom([]string{"J", "K", "M", "G"}).Draw(t, "tolerance")
		width := map[string]float64{"J": 0.05, "K": 0.1, "M": 0.2, "G": 0.02}[letter]
		low, high := x*(1-width), x*(1+width)
		if letter == "G" && x < 10e-12 {
			low, high = math.Max(0, x-2e-12), x+2e-12
		}
		if m := mustDecode(t, text+letter); place(m, c, x, low, high) == 0 {
			t.Fatalf("%s%s is not %g F, %g to %g:%s", text, letter, x, low, high, list(m))
		}
	})
}

func TestDigitCodesReadBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		two := int(math.Round(10 * series.Value(24, rapid.IntRange(0, 23).Draw(t, "index"))))
		power := rapid.IntRange(-2, 6).Draw(t, "power")
		digit := (power + 10) % 10
		text := strconv.Itoa(two) + strconv.Itoa(digit)
		if m := mustDecode(t, text); place(m, c, scaled(float64(two), power-12), nan, nan) == 0 {
			t.Fatalf("%s is not %d·10^%d pF:%s", text, two, power, list(m))
		}
		three, up := figures(t), rapid.IntRange(0, 5).Draw(t, "up")
		text = strconv.Itoa(three) + strconv.Itoa(up)
		if m := mustDecode(t, text); place(m, r, scaled(float64(three), up), nan, nan) == 0 {
			t.Fatalf("%s is not %d·10^%d Ω:%s", text, three, up, list(m))
		}
	})
}

var digitColours = []string{"black", "brown", "red", "orange", "yellow", "green", "blue", "violet", "grey", "white"}

// Whichever end is read first, the true value is among the meanings.
func TestColoursReadBackFromBothEnds(t *testing.T) {
	multipliers := map[string]int{"silver": -2, "gold": -1, "black": 0, "brown": 1, "red": 2, "orange": 3, "yellow": 4, "green": 5}
	tolerances := map[string]float64{"brown": 0.01, "red": 0.02, "green": 0.005, "blue": 0.0025, "violet": 0.001, "gold": 0.05, "silver": 0.1}
	rapid.Check(t, func(t *rapid.T) {
		f, n := figures(t), 3
		if rapid.Bool().Draw(t, "four bands") {
			f, n = int(math.Round(10*series.Value(24, rapid.IntRange(0, 23).Draw(t, "E24")))), 2
		}
		var bands []string
		for _, digit := range strconv.Itoa(f)[:n] {
			bands = append(bands, digitColours[digit-'0'])
		}
		multiplier := rapid.SampledFrom([]string{"silver", "gold", "black", "brown", "red", "orange", "yellow", "green"}).Draw(t, "multiplier")
		tolerance := rapid.SampledFrom([]string{"brown", "red", "green", "blue", "violet", "gold", "silver"}).Draw(t, "tolerance")
		bands = append(bands, multiplier, tolerance)
		x, width := scaled(float64(f), multipliers[multiplier]), tolerances[tolerance]
		backwards := make([]string, len(bands))
		for i, b := range bands {
			backwards[len(bands)-1-i] = b
		}
		for _, text := range []string{strings.Join(bands, " "), strings.Join(backwards, "-")} {
			if m := mustDecode(t, text); place(m, r, x, x*(1-width), x*(1+width)) == 0 {
				t.Fatalf("%s is not %g Ω ±%g:%s", text, x, width, list(m))
			}
		}
	})
}

func mustDecode(t *rapid.T, text string) []Meaning {
	meanings, err := Decode(text, Options{Now: now})
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return meanings
}

// A later day only adds candidates to a date.
func TestDatesOnlyGrow(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.StringMatching(`[0-9]{3,4}|[A-X][1-9OND]|[0-9][1-9ABC]|[A-X][0-5][0-9]`).Draw(t, "text")
		day := func(name string, from int) time.Time {
			return time.Date(from+rapid.IntRange(0, 30).Draw(t, name), 1, 1, 0, 0, 0, 0, time.UTC).AddDate(0, 0, rapid.IntRange(0, 364).Draw(t, name+" day"))
		}
		early := day("early", 1990)
		late := early.AddDate(rapid.IntRange(0, 20).Draw(t, "later"), 0, 0)
		before, _ := Decode(text, Options{Now: early})
		after, _ := Decode(text, Options{Now: late})
		for _, m := range before {
			for _, d := range m.Dates {
				if !hasDate(after, m.Scheme, d) {
					t.Fatalf("%s: %v by %s on %v, no longer on %v", text, d, m.Scheme, early, late)
				}
			}
		}
	})
}

func hasDate(meanings []Meaning, scheme string, want Date) bool {
	for _, m := range meanings {
		for _, d := range m.Dates {
			if m.Scheme == scheme && d == want {
				return true
			}
		}
	}
	return false
}
