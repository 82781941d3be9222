package marking

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"goodbin/rules/internal/book"

	"goodbin/rules/internal/series"
	"goodbin/screening"
)

// EIA-96 (basictables.com and three further tables, published): 01 to 96 number the values of E96.
func TestAllCodesOfEIA96(t *testing.T) {
	multipliers := map[string]float64{
		"Z": 1e-3, "Y": 1e-2, "R": 1e-2, "X": 0.1, "S": 0.1, "A": 1, "B": 10, "H": 10, "C": 100, "D": 1e3, "E": 1e4, "F": 1e5,
	}
	for i := range 96 {
		for letter, m := range multipliers {
			text := strconv.Itoa(i + 101)[1:] + letter
			x := math.Round(100*series.Value(96, i)) * m
			if place(decode(t, text), r, x, x*0.99, x*1.01) == 0 {
				t.Errorf("%s is not %g Ω ±1 %%:%s", text, x, list(decode(t, text)))
			}
		}
	}
	for text, want := range map[string]float64{
		"01A": 100, "14A": 137, "15A": 140, "68A": 499, "96A": 976, "68X": 49.9, "01D": 100e3, "30C": 20e3,
	} {
		if at := place(decode(t, text), r, want, want*0.99, want*1.01); at != 1 {
			t.Errorf("%s: %g Ω stands at %d:%s", text, want, at, list(decode(t, text)))
		}
	}
	for _, text := range []string{"00A", "97A", "99Z"} {
		meanings, err := Decode(text, Options{Now: now})
		for _, m := range meanings {
			if m.Scheme == "EIA-96 code" {
				t.Errorf("%s is read as EIA-96: %v, %v", text, m, err)
			}
		}
	}
}

// The letters of the chip capacitor code from A on, without I and O, are the values of E24 (MARSPORT, published).
func TestChipLettersAreE24(t *testing.T) {
	i := 0
	for letter := 'A'; letter <= 'Z'; letter++ {
		if letter == 'I' || letter == 'O' {
			if len(load().chip[letter]) != 0 {
				t.Errorf("%c stands for something", letter)
			}
			continue
		}
		x := series.Value(24, i)
		if place(decode(t, string(letter)+"0"), c, x*1e-12, nan, nan) == 0 {
			t.Errorf("%c0 is not %g pF:%s", letter, x, list(decode(t, string(letter)+"0")))
		}
		i++
	}
	if i != 24 {
		t.Errorf("%d letters", i)
	}
}

// Voltage codes (ORIEDZA, published; most also PANA).
func TestVoltageCodes(t *testing.T) {
	const voltage = screening.Characteristic("voltage")
	for code, want := range map[string]float64{
		"0G": 4, "0L": 5.5, "0J": 6.3, "1A": 10, "1C": 16, "1D": 20, "1E": 25, "1V": 35, "1H": 50, "1J": 63, "1K": 80, "2A": 100, "2Q": 110,
		"2B": 125, "2C": 160, "2Z": 180, "2D": 200, "2P": 220, "2E": 250, "2F": 315, "2V": 350, "2G": 400, "2W": 450, "2H": 500, "2J": 630,
		"3A": 1000,
	} {
		if place(decode(t, code), voltage, want, nan, nan) == 0 {
			t.Errorf("%s is not %g V:%s", code, want, list(decode(t, code)))
		}
	}
	// Codes that no list prints follow from the pattern, and say so.
	m := decode(t, "3C")
	if at := place(m, voltage, 1600, nan, nan); at == 0 || m[at-1].Source.Status != screening.Derived || m[at-1].Note == "" {
		t.Errorf("3C: %v", m)
	}
	for letter, want := range map[string]float64{"G": 4, "J": 6.3, "A": 10, "C": 16, "D": 20, "E": 25, "V": 35, "T": 50} {
		if place(decode(t, letter), voltage, want, nan, nan) == 0 {
			t.Errorf("%s is not %g V on tantalum (F93, published):%s", letter, want, list(decode(t, letter)))
		}
	}
	for text, want := range map[string]float64{"6V3": 6.3, "35V": 35, "63-": 63, "1kV": 1000, "400 VDC": 400} {
		if at := place(decode(t, text), voltage, want, nan, nan); at != 1 {
			t.Errorf("%s: %g V stands at %d", text, want, at)
		}
	}
}

// Tolerance letters where every list agrees, and the picofarads below 10 pF (component lists, published).
func TestToleranceLetters(t *testing.T) {
	for letter, want := range map[string][2]float64{
		"B": {-0.001, 0.001}, "C": {-0.0025, 0.0025}, "D": {-0.005, 0.005}, "F": {-0.01, 0.01}, "G": {-0.02, 0.02}, "J": {-0.05, 0.05},
		"K": {-0.1, 0.1}, "M": {-0.2, 0.2}, "Q": {-0.1, 0.3}, "T": {-0.1, 0.5}, "S": {-0.2, 0.5}, "Z": {-0.2, 0.8},
	} {
		x := 1e-9
		if at := place(decode(t, "102"+letter), c, x, x*(1+want[0]), x*(1+want[1])); at != 1 {
			t.Errorf("102%s stands at %d:%s", letter, at, list(decode(t, "102"+letter)))
		}
		low, high, ok := book.CapacitorToleranceLetter(letter)
		if !ok || low != want[0] || high != want[1] {
			t.Errorf("%s: the rulebooks take it as %g to %g", letter, low, high)
		}
	}
	for text, want := range map[string][3]float64{
		"4p7B": {4.7, 4.6, 4.8}, "4p7C": {4.7, 4.45, 4.95}, "4p7D": {4.7, 4.2, 5.2}, "4p7F": {4.7, 3.7, 5.7}, "8p2G": {8.2, 6.2, 10.2},
		"9p1J": {9.1, 8.645, 9.555}, "10pC": {10, 9.975, 10.025}, "479C": {4.7, 4.45, 4.95}, "100C": {10, 9.975, 10.025}, "p47F": {0.47, 0, 1.47},
	} {
		if place(decode(t, text), c, want[0]*1e-12, want[1]*1e-12, want[2]*1e-12) == 0 {
			t.Errorf("%s is not %g pF, %g to %g:%s", text, want[0], want[1], want[2], list(decode(t, text)))
		}
	}
}

// Letters on which the lists disagree have every meaning, each marked, and none counts as published.
func TestDisputedLetters(t *testing.T) {
	for _, letter := range []string{"E", "L", "P", "W", "N", "H", "A", "R", "U", "V", "Y", "X"} {
		marked := 0
		for _, m := range decode(t, "102"+letter) {
			for _, p := range m.Parts {
				if p.Of != screening.Tolerance.Name {
					continue
				}
				marked++
				if p.Source.Status == screening.Published || m.Source.Status == screening.Published || !contains(m.Note, "disputed") {
					t.Errorf("102%s: %s is not marked as disputed: %q, %s", letter, m, m.Note, m.Source)
				}
			}
		}
		if marked == 0 {
			t.Errorf("102%s has no meaning with a tolerance", letter)
		}
		if book.ToleranceMeanings(letter) == nil {
			t.Errorf("%s is disputed here and not in the rulebooks", letter)
		}
	}
}

func TestLettersFollowThePart(t *testing.T) {
	for text, want := range map[string]string{
		"1K0P": "1 kΩ ±0.02 %", "102P": "1 nF −0/+100 %", "1K0L": "1 kΩ ±0.01 %", "102L": "1 nF ±15 %", "1K0W": "1 kΩ ±0.05 %",
	} {
		if got := decode(t, text)[0].String(); got != want {
			t.Errorf("%s: %s first, want %s%s", text, got, want, list(decode(t, text)))
		}
	}
}

// EIA class 1 (3BM, E14, HOLY; published). Figures in ppm/K.
func TestClass1(t *testing.T) {
	const tc = OfTemperatureCoefficient
	for text, want := range map[string][2]float64{
		"P3K": {-1500, 250}, "M7G": {100, 30}, "C0G": {0, 30}, "NP0": {0, 30}, "NPO": {0, 30}, "B2G": {-30, 30}, "N030": {-30, 30},
		"U1G": {-75, 30}, "N075": {-75, 30}, "P2G": {-150, 30}, "N150": {-150, 30}, "S2H": {-330, 60}, "N330": {-330, 60}, "T2H": {-470, 60},
		"N470": {-470, 60}, "U2J": {-750, 120}, "N750": {-750, 120}, "N1500": {-1500, 250}, "R3L": {-2200, 500}, "N2200": {-2200, 500},
		"P100": {100, 30}, "CG": {0, 30}, "CH": {0, 60}, "UJ": {-750, 120},
	} {
		if at := place(decode(t, text), tc, want[0]*1e-6, (want[0]-want[1])*1e-6, (want[0]+want[1])*1e-6); at != 1 {
			t.Errorf("%s: %g ±%g ppm/K stands at %d:%s", text, want[0], want[1], at, list(decode(t, text)))
		}
	}
	if place(decode(t, "SL"), tc, nan, -1000e-6, 350e-6) != 1 {
		t.Errorf("SL:%s", list(decode(t, "SL")))
	}
	// Two lists print the digit 4 for +1, a third for −10 000 and 5 for +1: both meanings, marked.
	m := decode(t, "P4K")
	if place(m, tc, 1.5e-6, -248.5e-6, 251.5e-6) != 1 || place(m, tc, -0.015, -0.01525, -0.01475) == 0 || !contains(m[0].Note, "lists disagree") {
		t.Errorf("P4K:%s", list(m))
	}
}

// EIA class 2 and 3 (3BM, E14, HOLY; published), BX and BR (MIL-PRF-123D table V).
func TestClass2(t *testing.T) {
	for text, want := range map[string]string{
		"X7R": "±15 % from −55 to +125 °C", "X5R": "±15 % from −55 to +85 °C", "Y5V": "−82/+22 % from −30 to +85 °C",
		"Z5U": "−56/+22 % from +10 to +85 °C", "Y5P": "±10 % from −30 to +85 °C", "X7T": "−33/+22 % from −55 to +125 °C",
		"X8R": "±15 % from −55 to +150 °C", "Z4V": "−82/+22 % from +10 to +65 °C", "X6S": "±22 % from −55 to +105 °C",
		"X5B": "±1.5 % from −55 to +85 °C", "X9A": "±1 % from −55 to +200 °C", "BX": "−25/+15 %", "BR": "−40/+15 %",
	} {
		if got := decode(t, text)[0].String(); got != want {
			t.Errorf("%s: %s, want %s", text, got, want)
		}
	}
	if m := decode(t, "X3R")[0]; !contains(m.Note, "3 for +45") {
		t.Errorf("X3R is printed by one list only: %q", m.Note)
	}
}

func TestDielectricLetters(t *testing.T) {
	for text, want := range map[string]string{
		"MKT": "PET (polyester) film, metallised", "MKP": "polypropylene film, metallised", "MKC": "polycarbonate film, metallised",
		"MKI": "PPS film, metallised", "FKP": "polypropylene film and foil", "FKC": "polycarbonate film and foil",
		"KT": "PET (polyester) film and foil", "KP": "polypropylene film and foil", "MP": "metallised paper",
	} {
		if got := decode(t, text)[0]; got.String() != want || got.Of != OfDielectric {
			t.Errorf("%s: %s of %s, want %s", text, got, got.Of, want)
		}
	}
	m := decode(t, "MKS")
	if len(m) != 2 || m[0].Text != "polystyrene film, metallised" || m[1].Text != "PET (polyester) film, metallised" || m[1].Source.Status != screening.FromMemory {
		t.Errorf("MKS is ambiguous:%s", list(m))
	}
	if m := decode(t, "MKP 0,47 63-")[0]; m.String() != "470 nF, polypropylene film, metallised, 63 V" {
		t.Errorf("MKP 0,47 63-: %s", m)
	}
	if m := decode(t, "X7R104K 50V")[0]; m.String() != "100 nF ±10 %, ±15 % from −55 to +125 °C, 50 V" {
		t.Errorf("X7R104K 50V: %s", m)
	}
}

// IEC 60384-14 classes (TOV, KYO; published): such a part is told as one for the mains, whatever else it could be.
func TestInterferenceClassesStandFirst(t *testing.T) {
	for _, class := range []string{"X1", "X2", "X3", "Y1", "Y2", "Y3", "Y4"} {
		m := decode(t, class)[0]
		if m.Of != OfClass || len(m.Kinds) != 1 || m.Kinds[0] != "mains-capacitor" || !contains(m.Note, "never passed for the mains") {
			t.Errorf("%s: %s on %v, %q", class, m, m.Kinds, m.Note)
		}
	}
	if m := decode(t, "0.1uF 275VAC X2")[0]; m.Value != 100e-9 || len(m.Kinds) != 1 || m.Kinds[0] != "mains-capacitor" {
		t.Errorf("0.1uF 275VAC X2: %s on %v", m, m.Kinds)
	}
}

func contains(text, part string) bool { return strings.Contains(text, part) }
