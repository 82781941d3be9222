package marking

import (
	"math"
	"strings"
	"testing"
	"time"
	"unicode/utf8"

	"goodbin/screening"
)

var now = time.Date(2026, 3, 1, 12, 0, 0, 0, time.UTC)

// decode reads a marking that must have a meaning.
func decode(t testing.TB, text string) []Meaning {
	t.Helper()
	meanings, err := Decode(text, Options{Now: now})
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return meanings
}

// place returns where a meaning with these numbers stands, from 1; 0 where there is none. A bound of NaN must be open.
func place(meanings []Meaning, of screening.Characteristic, value, low, high float64) int {
	for i, m := range meanings {
		if m.Of == of && near(m.Value, value) && near(m.Low, low) && near(m.High, high) {
			return i + 1
		}
	}
	return 0
}

func near(got, want float64) bool {
	return math.IsNaN(got) && math.IsNaN(want) || math.Abs(got-want) <= 1e-9*math.Abs(want)
}

func list(meanings []Meaning) string {
	var b strings.Builder
	for _, m := range meanings {
		b.WriteString("\n  " + m.String() + " (" + m.Scheme + ", " + m.Source.Status.String() + "): " + m.Why)
	}
	return b.String()
}

const (
	c = screening.Characteristic("capacitance")
	r = screening.Characteristic("resistance")
	l = inductance
)

var nan = math.NaN()

// Printed values and what they mean. at is the place where the meaning stands, from 1; 0 anywhere.
var valueCases = []struct {
	name, text       string
	of               screening.Characteristic
	value, low, high float64
	at               int
	source           string
}{
	{"R47", "R47", r, 0.47, nan, nan, 1, "WIKI-RKM (published)"},
	{"4R7", "4R7", r, 4.7, nan, nan, 1, "WIKI-RKM (published)"},
	{"470R", "470R", r, 470, nan, nan, 1, "WIKI-RKM (published)"},
	{"4K7", "4K7", r, 4700, nan, nan, 1, "WIKI-RKM (published)"},
	{"47K3 has three figures", "47K3", r, 47300, nan, nan, 1, "WIKI-RKM (published)"},
	{"4M7", "4M7", r, 4.7e6, nan, nan, 1, "WIKI-RKM (published)"},
	{"15M0", "15M0", r, 15e6, nan, nan, 1, "WIKI-RKM (published)"},
	{"8K2", "8K2", r, 8200, nan, nan, 1, "WIKI-RKM (published)"},
	{"1R2", "1R2", r, 1.2, nan, nan, 1, "WIKI-RKM (published)"},
	{"18R", "18R", r, 18, nan, nan, 1, "WIKI-RKM (published)"},
	{"R10", "R10", r, 0.10, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"R15", "R15", r, 0.15, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"R332", "R332", r, 0.332, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"1R0", "1R0", r, 1, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"3R32", "3R32", r, 3.32, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"33R2", "33R2", r, 33.2, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"1K0", "1K0", r, 1000, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"3K32", "3K32", r, 3320, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"1M0", "1M0", r, 1e6, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"1G0", "1G0", r, 1e9, nan, nan, 1, "GOST IEC 60062-2014 (published)"},
	{"k10 is 0.10 kΩ", "k10", r, 100, nan, nan, 1, "Grieder (published)"},
	{"M10 is 0.10 MΩ", "M10", r, 100e3, nan, nan, 1, "Grieder (published)"},
	{"K15, Soviet", "K15", r, 150, nan, nan, 1, "shemu.ru (published)"},
	{"4E7, Soviet before 1984", "4E7", r, 4.7, nan, nan, 1, "shemu.ru (published)"},
	{"К15 in Cyrillic letters", "К15", r, 150, nan, nan, 1, "shemu.ru (published)"},
	{"1Г0 in Cyrillic letters", "1Г0", r, 1e9, nan, nan, 1, "shemu.ru (published)"},
	{"30R1F", "30R1F", r, 30.1, 29.799, 30.401, 1, "Grieder (published)"},
	{"9090B is 909 Ω", "9090B", r, 909, 908.091, 909.909, 1, "Grieder (published)"},
	{"4K7J", "4K7J", r, 4700, 4465, 4935, 1, "IEC 60062, letter after the value (from memory)"},
	{"33pK", "33pK", c, 33e-12, 29.7e-12, 36.3e-12, 1, "IEC 60062, letter after the value (from memory)"},
	{"p33", "p33", c, 0.33e-12, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"3p3", "3p3", c, 3.3e-12, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"33p", "33p", c, 33e-12, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"330p", "330p", c, 330e-12, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"n33", "n33", c, 330e-12, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"4n7", "4n7", c, 4.7e-9, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"47n", "47n", c, 47e-9, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"u47", "u47", c, 470e-9, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"µ47 with the sign", "µ47", c, 470e-9, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"4u7", "4u7", c, 4.7e-6, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"47u", "47u", c, 47e-6, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"4m7 is milli on a capacitor", "4m7", c, 4.7e-3, nan, nan, 1, "IEC 60062 (rule published, string from memory)"},
	{"4R7 on an inductor is µH", "4R7", l, 4.7e-6, nan, nan, 0, "WIKI-RKM (published)"},
	{"47K is 47 kΩ", "47K", r, 47e3, nan, nan, 0, "IEC 60062 (published)"},
	{"47K on a ceramic is 47 pF ±10 %", "47K", c, 47e-12, 42.3e-12, 51.7e-12, 0, "electro-tech-online (published opinion)"},
	{"47K in old print is 47 nF", "47K", c, 47e-9, nan, nan, 0, "old labels (from memory)"},
	{"104", "104", c, 100e-9, nan, nan, 1, "ENDPROD, ORIEDZA (published)"},
	{"104 on a resistor", "104", r, 100e3, nan, nan, 0, "chip resistors (common practice)"},
	{"473", "473", c, 47e-9, nan, nan, 1, "ENDPROD, ORIEDZA (published)"},
	{"220 is 22 pF, not 220", "220", c, 22e-12, nan, nan, 1, "ENDPROD, ORIEDZA (published)"},
	{"156J", "156J", c, 15e-6, 14.25e-6, 15.75e-6, 1, "ORIEDZA (published)"},
	{"479: 9 is ×0.1", "479", c, 4.7e-12, nan, nan, 1, "ENDPROD (derived)"},
	{"338: 8 is ×0.01", "338", c, 0.33e-12, nan, nan, 1, "ENDPROD (derived)"},
	{"3R9 is 3.9 pF", "3R9", c, 3.9e-12, nan, nan, 0, "ORIEDZA (published)"},
	{"107 is 100 µF where high values carry it", "107", c, 100e-6, nan, nan, 1, "trade practice"},
	{"2A474J", "2A474J", c, 470e-9, 446.5e-9, 493.5e-9, 1, "ORIEDZA (published)"},
	{"104Z", "104Z", c, 100e-9, 80e-9, 180e-9, 1, "tolerance letters (rule published)"},
	{"1002 on a resistor", "1002", r, 10e3, nan, nan, 1, "Grieder (published)"},
	{"S3", "S3", c, 4.7e-9, nan, nan, 1, "MARSPORT (published)"},
	{"A2", "A2", c, 100e-12, nan, nan, 1, "MARSPORT (published)"},
	{"T6", "T6", c, 5.1e-6, nan, nan, 1, "MARSPORT (published)"},
	{"a0 is 2.5 pF", "a0", c, 2.5e-12, nan, nan, 1, "MARSPORT (published)"},
	{"y1 is 90 pF", "y1", c, 90e-12, nan, nan, 1, "MARSPORT (published)"},
	{"b0 is 3.5 pF", "b0", c, 3.5e-12, nan, nan, 1, "MARSPORT (published)"},
	{"b0 is 3.0 pF in another copy", "b0", c, 3.0e-12, nan, nan, 2, "edaboard (second-hand)"},
	{"c0 only in the other copy", "c0", c, 3.5e-12, nan, nan, 1, "edaboard (second-hand)"},
	{"g0 only in the other copy", "g0", c, 9.0e-12, nan, nan, 1, "edaboard (second-hand)"},
	{"ICEL 1274", "1274", c, 2740e-12, nan, nan, 0, "ICEL-MPL (published)"},
	{"ICEL 3560", "3560", c, 0.56e-6, nan, nan, 0, "ICEL-MPL (published)"},
	{"ICEL 4121", "4121", c, 1.21e-6, nan, nan, 0, "ICEL-MPL (published)"},
	{"471K on a varistor is 470 V", "471K", varistorVoltage, 470, 423, 517, 0, "Chemi-Con varistor FAQ (published)"},
	{".003 MFD", ".003 MFD", c, 3e-9, nan, nan, 1, "old labels (common practice)"},
	{"80 µµF", "80 µµF", c, 80e-12, nan, nan, 1, "md0mdi.im (published)"},
	{"80 mmf", "80 mmf", c, 80e-12, nan, nan, 1, "old labels (common practice)"},
	{"8 MF is 8 µF in old print", "8 MF", c, 8e-6, nan, nan, 1, "old labels (common practice)"},
	{"8 MF may be 8 mF", "8 MF", c, 8e-3, nan, nan, 2, "SI (from memory)"},
	{"9 jars are 10 nF", "9 jars", c, 10e-9, nan, nan, 1, "1 jar = 1/900 µF (from memory)"},
	{"900 cm are 1 nF", "900 cm", c, 900 * 1.112650056e-12, nan, nan, 1, "4π·ε0·1 cm (derived)"},
	{"1,000 MFD with a decimal comma", "1,000 MFD", c, 1e-6, nan, nan, 1, "both readings"},
	{"1,000 MFD with separated thousands", "1,000 MFD", c, 1000e-6, nan, nan, 2, "both readings"},
	{"0.1/400", "0.1/400", c, 100e-9, nan, nan, 1, "trade practice"},
	{"100/25 on a can", "100/25", c, 100e-6, nan, nan, 1, "trade practice"},
	{".1K400", ".1K400", c, 100e-9, 90e-9, 110e-9, 1, "trade practice"},
	{"104J630", "104J630", c, 100e-9, 95e-9, 105e-9, 1, "trade practice"},
	{"107A on a tantalum chip", "107A", c, 100e-6, nan, nan, 1, "F93 letters (published)"},
	{"2u2 as 2U2", "2U2", c, 2.2e-6, nan, nan, 1, "print on parts (from memory)"},
	{"4R7 with an ohm sign", "4Ω7", r, 4.7, nan, nan, 1, "Soviet print (published: letter for the sign)"},
	{"5W10RJ", "5W10RJ", r, 10, 9.5, 10.5, 1, "wirewound print"},
	{"+80-20% in figures", "100nF +80-20%", c, 100e-9, 80e-9, 180e-9, 1, "number with its unit"},
	{"lower case is read in capitals", "2a474j", c, 470e-9, 446.5e-9, 493.5e-9, 1, "as 2A474J"},
	{"0 on a link", "000", r, 0, nan, nan, 1, "chip resistor sheets (common practice)"},
}

func TestValues(t *testing.T) {
	for _, tt := range valueCases {
		t.Run(tt.name, func(t *testing.T) {
			meanings := decode(t, tt.text)
			at := place(meanings, tt.of, tt.value, tt.low, tt.high)
			if at == 0 || tt.at != 0 && at != tt.at {
				t.Errorf("%s: %v %g (%g to %g) stands at %d, want %d; source: %s%s", tt.text, tt.of, tt.value, tt.low, tt.high, at, tt.at, tt.source,
					list(meanings))
			}
		})
	}
}

func TestAmbiguousPrintsAreNeverOneGuess(t *testing.T) {
	for text, least := range map[string]int{"47K": 4, "104": 4, "4R7": 3, "1208": 4, "2A": 2, "C5": 2, "R47": 4, "M": 2, "X2": 3} {
		if meanings := decode(t, text); len(meanings) < least {
			t.Errorf("%s has %d meanings, want %d or more:%s", text, len(meanings), least, list(meanings))
		}
	}
}

// The first word of the print is the voltage, and each piece says what it is.
func TestPiecesOfAPrint(t *testing.T) {
	m := decode(t, "2A474J")[0]
	want := []Part{{Text: "2A", Says: "100 V"}, {Text: "474", Says: "470 nF"}, {Text: "J", Says: "±5 %"}}
	if len(m.Parts) != len(want) {
		t.Fatalf("%d pieces, want %d", len(m.Parts), len(want))
	}
	for i, p := range m.Parts {
		if p.Text != want[i].Text || p.Says != want[i].Says || p.Scheme == "" || p.Source.Status != screening.Published {
			t.Errorf("piece %d: %+v, want %s is %s", i, p, want[i].Text, want[i].Says)
		}
	}
	if got := strings.Join(m.Words, " "); got != "470nF 5% 100V" {
		t.Errorf("claims %q", got)
	}
	if got := m.String(); got != "470 nF ±5 %, 100 V" {
		t.Errorf("reads %q", got)
	}
}

// ICEL-MPL: "do not guess this from a bare four-digit print".
func TestReversedFourDigitsAreOfferedLast(t *testing.T) {
	for _, text := range []string{"1274", "3560", "4121"} {
		meanings := decode(t, text)
		last := meanings[len(meanings)-1]
		if last.Scheme != "reversed four-digit code" || !strings.Contains(last.Note, "not to be taken from a bare print") {
			t.Errorf("%s: last stands %s, %q", text, last.Scheme, last.Note)
		}
	}
	for _, text := range []string{"1027", "104", "9999J"} {
		for _, m := range decode(t, text) {
			if m.Scheme == "reversed four-digit code" {
				t.Errorf("%s is read as a reversed code: %s", text, m)
			}
		}
	}
}

func TestOldValuesNameTheirModernNeighbours(t *testing.T) {
	for text, want := range map[string]string{
		"0.05 mfd": "today 47 nF (−6 %) or 56 nF (+12 %)",
		"8 MFD":    "today 6.8 µF (−15 %) or 8.2 µF (+3 %)",
		"250k":     "today 240 kΩ (−4 %) or 270 kΩ (+8 %)",
		"50K":      "today 47 kΩ (−6 %) or 51 kΩ (+2 %)",
		"0.02 mfd": "today 18 nF (−10 %) or 22 nF (+10 %)",
	} {
		if m := decode(t, text)[0]; !strings.Contains(m.Note, want) {
			t.Errorf("%s: %q, want %q", text, m.Note, want)
		}
	}
	for _, text := range []string{"47n", "4K7", "4K75", "2K0"} {
		if m := decode(t, text)[0]; strings.Contains(m.Note, "today") {
			t.Errorf("%s is no old value: %q", text, m.Note)
		}
	}
}

func TestThreeFiguresHintAtACloseTolerance(t *testing.T) {
	for text, want := range map[string]bool{"15M0": true, "4K70": true, "15M": false, "1R0": false, "47K3": false} {
		if got := strings.Contains(decode(t, text)[0].Note, "extra zero"); got != want {
			t.Errorf("%s: hint %v, want %v", text, got, want)
		}
	}
}

func TestTheNamedKindStandsFirst(t *testing.T) {
	for _, tt := range []struct {
		text string
		kind screening.Kind
		want string
	}{
		{"47K", "", "47 kΩ"},
		{"47K", "ceramic", "47 pF ±10 %"},
		{"104", "potentiometer", "100 kΩ"},
		{"104", "inductor", "100 mH"},
		{"9090", "mica", "909 pF"},
		{"220", "electrolytic", "220 µF"},
		{"471K", "varistor", "470 V ±10 %"},
		{"4R7", "ceramic", "4.7 pF"},
		{"104", "diode", "100 nF"},
	} {
		meanings, err := Decode(tt.text, Options{Now: now, Kind: tt.kind})
		if err != nil || meanings[0].String() != tt.want {
			t.Errorf("%s on %q: %v, want %s first%s", tt.text, tt.kind, err, tt.want, list(meanings))
		}
		if all := decode(t, tt.text); len(meanings) != len(all) {
			t.Errorf("%s on %q: %d meanings, want all %d", tt.text, tt.kind, len(meanings), len(all))
		}
	}
}

func TestWhatIsNoMarking(t *testing.T) {
	for _, tt := range []struct {
		text, says string
		unknown    bool
	}{
		{"hello", "is no marking that is known here; tried letter-and-digit values", true},
		{"1N4148", "is no marking", true},
		{"2N3904", "is no marking", true},
		{"BC547B", "is no marking", true},
		{"red", "resistor bands in both directions", true},
		{"gold gold gold", "is no marking", true},
		{"4R7R7", "is no marking", true},
		{"", "is empty", false},
		{"   ", "is empty", false},
		{strings.Repeat("9", 81), "too long", false},
		{"4k7\x1b[31m", "control character", false},
		{"4k7\u202e", "control character", false},
		{"4k7\xff", "not readable text", false},
	} {
		meanings, err := Decode(tt.text, Options{Now: now})
		e, ok := err.(*Error)
		if !ok {
			t.Errorf("%q: %v, %v", tt.text, err, list(meanings))
			continue
		}
		if e.Unknown() != tt.unknown || !strings.Contains(e.Error(), tt.says) {
			t.Errorf("%q: unknown %v, %q; want %v, %q", tt.text, e.Unknown(), e, tt.unknown, tt.says)
		}
		if strings.ContainsAny(e.Error(), "\x1b\u202e") || !utf8.ValidString(e.Error()) {
			t.Errorf("%q: the error lets through what was typed: %q", tt.text, e)
		}
	}
}
