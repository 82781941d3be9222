package book

import (
	"strings"
	"testing"

	"goodbin/screening"
)

func TestMainsOrCrackedBars(t *testing.T) {
	c := MainsOrCracked()
	if c.Name != "mains-or-cracked" || c.Verdict != screening.Barred || c.Source.Status == screening.NoStatus {
		t.Errorf("got %q %v %v", c.Name, c.Verdict, c.Source)
	}
	if strings.Join(c.Words, " ") != "mains cracked" {
		t.Errorf("words are %v", c.Words)
	}
	for text, want := range map[string]string{c.Do: "never open", c.Reason: "no reading shows", c.Question: "cross the mains"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q does not say %q", text, want)
		}
	}
}

func TestToleranceLetters(t *testing.T) {
	for _, tc := range []struct {
		letter    string
		low, high float64
		any       bool // on a part that is no capacitor
		capacitor bool
	}{
		{"M", -0.2, 0.2, true, true},
		{"K", -0.1, 0.1, true, true},
		{"J", -0.05, 0.05, true, true},
		{"G", -0.02, 0.02, true, true},
		{"F", -0.01, 0.01, true, true},
		{"T", -0.1, 0.5, false, true}, // Vishay 030/031 and 132/133 data sheets, published
		{"S", -0.2, 0.5, false, true},
		{"Z", -0.2, 0.8, false, true},
		{"Q", -0.1, 0.3, false, true},
		{"W", 0, 0, false, false},
		{"m", 0, 0, false, false},
		{"MM", 0, 0, false, false},
		{"", 0, 0, false, false},
	} {
		t.Run("letter "+tc.letter, func(t *testing.T) {
			low, high, ok := CapacitorToleranceLetter(tc.letter)
			if ok != tc.capacitor || low != tc.low || high != tc.high {
				t.Errorf("capacitor: %v %v %v", low, high, ok)
			}
			if _, _, ok := ToleranceLetter(tc.letter); ok != tc.any {
				t.Errorf("any part: %v, want %v", ok, tc.any)
			}
			if ok && ToleranceSource(tc.letter).Status != screening.Published {
				t.Errorf("source %v", ToleranceSource(tc.letter))
			}
		})
	}
	for _, letter := range strings.Split("WVYXAPLNEH", "") {
		if len(ToleranceMeanings(letter)) == 0 {
			t.Errorf("%s has no list of meanings", letter)
		}
	}
	if m := ToleranceMeanings("M"); m != nil {
		t.Errorf("M is not ambiguous: %v", m)
	}
	for word, want := range map[string]int{"47K": 2, "4.7K": 2, "K": 0, "47k": 0, "47uK": 0, "": 0} {
		if got := len(KiloOrTolerance(word)); got != want {
			t.Errorf("%q has %d meanings, want %d", word, got, want)
		}
	}
}

func TestTableErrorsNameRowAndColumn(t *testing.T) {
	for _, tc := range []struct {
		name, csv string
		read      func(Row)
		want      string // "" where it must read
	}{
		{"a good row", "a,source,status\n1.5,book,published\n", func(r Row) { r.Number("a"); r.Source() }, ""},
		{"comments do not count", "# why\na\n# more\n2\n", func(r Row) { r.Number("a") }, ""},
		{"no rows", "a,b\n", func(Row) {}, "t.csv: no rows"},
		{"a header twice", "a,a\n1,2\n", func(Row) {}, `column 2: header "a" is empty or a repeat`},
		{"a short row", "a,b\n1\n", func(Row) {}, "wrong number of fields"},
		{"no number", "a,b\n1,x\n", func(r Row) { r.Number("b") }, `t.csv: line 2, b: "x" is not a number`},
		{"not finite", "a,b\n1,NaN\n", func(r Row) { r.Number("b") }, `line 2, b: "NaN" is not a number`},
		{"line after a comment", "# c\na,b\n1,x\n", func(r Row) { r.Number("b") }, "line 3, b"},
		{"empty where needed", "a,b\n1,\n", func(r Row) { r.Required("b") }, "line 2, b: is empty"},
		{"empty with a fallback", "a,b\n1,\n", func(r Row) { r.NumberOr("b", 7) }, ""},
		{"no such column", "a,b\n1,2\n", func(r Row) { r.Text("c") }, "there is no such column; the table has a, b"},
		{"no status", "source,status\nbook,rumour\n", func(r Row) { r.Source() }, `status: "rumour" is no status`},
		{"no document", "source,status\n,published\n", func(r Row) { r.Source() }, "line 2, source: is empty"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			table := ReadTable("t.csv", tc.csv)
			for _, r := range table.Rows() {
				tc.read(r)
			}
			err := table.Err()
			switch {
			case tc.want == "" && err != nil:
				t.Errorf("unexpected: %v", err)
			case tc.want != "" && (err == nil || !strings.Contains(err.Error(), tc.want)):
				t.Errorf("got %v, want %q", err, tc.want)
			}
		})
	}
}

func TestEmbeddedTablesLoad(t *testing.T) {
	letters, err := readToleranceLetters(toleranceCSV)
	if err != nil || len(letters) == 0 {
		t.Fatalf("tolerance.csv: %d letters, %v", len(letters), err)
	}
	for name, l := range letters {
		if l.known == (l.meanings != nil) {
			t.Errorf("%s: either bounds or a list of meanings", name)
		}
	}
	if _, err := readToleranceLetters("letter,for,low,high,meanings,source,status\nM,any,0.2,-0.2,,x,published\n"); err == nil {
		t.Error("a tolerance upside down was read")
	}
}
