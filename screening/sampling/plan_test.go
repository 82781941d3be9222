package sampling

import (
	"strconv"
	"strings"
	"testing"

	"goodbin/screening"
)

// TestWholeTableIsReproduced looks up all 3 × 16 × 26 cells of tables II-A, II-B and II-C, which the package holds with their arrows, and
// holds them against a list in which the arrows are followed.
func TestWholeTableIsReproduced(t *testing.T) {
	rows := table(t, "single-105e.csv")
	if len(rows) != 1248 {
		t.Fatalf("%d rows, want 1248", len(rows))
	}
	seen := map[string]bool{}
	for _, row := range rows {
		inspection, err := ParseInspection(row["inspection"])
		if err != nil {
			t.Fatal(err)
		}
		p := mustLookup(t, row["code_letter"], number(t, row["aql_percent"]), inspection)
		if p.N != whole(t, row["n"]) || p.Accept != whole(t, row["ac"]) || p.Reject != whole(t, row["re"]) || p.Source.Status != screening.Published {
			t.Errorf("%s %s %s: n %d Ac %d Re %d, want %s %s %s", row["inspection"], row["code_letter"], row["aql_percent"],
				p.N, p.Accept, p.Reject, row["n"], row["ac"], row["re"])
		}
		seen[row["inspection"]+row["code_letter"]+row["aql_percent"]] = true
	}
	if len(seen) != len(rows) {
		t.Errorf("%d different cells, want %d", len(seen), len(rows))
	}
}

// The sample sizes and acceptance numbers that the tables are built from.
func TestTablesAreBuiltAsTheStandardIs(t *testing.T) {
	base := []int{2, 3, 5, 8, 13, 20, 32, 50, 80, 125, 200, 315, 500, 800, 1250, 2000}
	reduced := []int{2, 2, 2, 3, 5, 8, 13, 20, 32, 50, 80, 125, 200, 315, 500, 800}
	ladder := map[Inspection]string{
		Normal: "0/1 1/2 2/3 3/4 5/6 7/8 10/11 14/15 21/22", Tightened: "0/1 1/2 2/3 3/4 5/6 8/9 12/13 18/19",
		Reduced: "0/1 0/2 1/3 1/4 2/5 3/6 5/8 7/10 10/13",
	}
	for inspection, want := range ladder {
		for i, row := range standard().plans[inspection][:16] {
			n := base[i]
			if inspection == Reduced {
				n = reduced[i]
			}
			if row.n != n {
				t.Errorf("%s, %s: n %d, want %d", inspection, row.letter, row.n, n)
			}
			var own []string
			for _, c := range row.cells {
				if c.step == 0 {
					own = append(own, strconv.Itoa(c.accept)+"/"+strconv.Itoa(c.reject))
				}
			}
			// Rows F to Q hold the whole ladder, each a column further left.
			if i >= 5 && i <= 14 && strings.Join(own, " ") != want {
				t.Errorf("%s, %s: %v, want %s", inspection, row.letter, own, want)
			}
		}
	}
}

func TestLotsFindTheirPlan(t *testing.T) {
	for _, tt := range []struct {
		fact       string
		lot        int
		level      Level
		aql        float64
		inspection Inspection
		letter     string
		from       string
		n, ac, re  int
		all        bool
	}{
		{"3201 to 10000 at II and 1.5 is L, 200, 7/8 (AQLSchemes vignette, published)", 5000, "II", 1.5, Normal, "L", "L", 200, 7, 8, false},
		{"the same, tightened: 5/6 (published)", 5000, "II", 1.5, Tightened, "L", "L", 200, 5, 6, false},
		{"100 at II and 2.5 is F, 20, 1/2 (two transcriptions, published)", 100, "II", 2.5, Normal, "F", "F", 20, 1, 2, false},
		{"1000 at II and 1.0 is J, 80, 2/3 (two transcriptions, published)", 1000, "II", 1.0, Normal, "J", "J", 80, 2, 3, false},
		{"the same, tightened: 1/2 (published)", 1000, "II", 1.0, Tightened, "J", "J", 80, 1, 2, false},
		{"500 at II and 1.0 is H, 50, 1/2", 500, "II", 1.0, Normal, "H", "H", 50, 1, 2, false},
		{"500 at II and 1.0 tightened follows an arrow down to J", 500, "II", 1.0, Tightened, "H", "J", 80, 1, 2, false},
		{"500 at S1 and 4.0 is B", 500, "S-1", 4, Normal, "B", "B", 3, 0, 1, false},
		{"40 at II and 0.65 follows arrows to F", 40, "II", 0.65, Normal, "D", "F", 20, 0, 1, false},
		{"a lot no larger than the sample is tested through", 10, "II", 0.65, Normal, "B", "F", 10, 0, 1, true},
		{"the letter beyond R: tightened 0.025 at Q", 200_000, "III", 0.025, Tightened, "Q", "S", 3150, 1, 2, false},
		{"no end to the largest lots", 9_000_000, "II", 1.0, Normal, "Q", "Q", 1250, 21, 22, false},
	} {
		t.Run(tt.fact, func(t *testing.T) {
			p, err := Single(tt.lot, tt.level, tt.aql, tt.inspection)
			if err != nil {
				t.Fatal(err)
			}
			if p.Letter != tt.letter || p.From != tt.from || p.N != tt.n || p.Accept != tt.ac || p.Reject != tt.re || p.TestAll != tt.all {
				t.Errorf("got %+v", p)
			}
		})
	}
}

func TestRefusalsSayWhatWouldBeRight(t *testing.T) {
	for _, tt := range []struct {
		lot        int
		level      Level
		aql        float64
		inspection Inspection
		want       string
	}{
		{1, "II", 1, Normal, "lot: 1 parts are no lot to sample; table I begins at 2 parts"},
		{-5, "II", 1, Normal, "lot: -5 parts"},
		{500, "IV", 1, Normal, `level: "IV" is no inspection level; the levels are S-1, S-2, S-3, S-4, I, II and III`},
		{500, "II", 1.2, Normal, "aql: the tables have none of 1.2 %; the nearest are 1 and 1.5"},
		{500, "II", 0.001, Normal, "the lowest is 0.01"},
		{500, "II", 2000, Normal, "the highest is 1000"},
		{500, "II", -1, Normal, "aql: -1 is no percentage"},
		{500, "II", 1, Inspection(9), "normal, tightened or reduced"},
	} {
		if _, err := Single(tt.lot, tt.level, tt.aql, tt.inspection); err == nil || !strings.Contains(err.Error(), tt.want) {
			t.Errorf("lot %d level %s aql %g: %v, want %q", tt.lot, tt.level, tt.aql, err, tt.want)
		}
	}
	for _, letter := range []string{"", "S", "I", "O", "a"} {
		if p, err := Lookup(letter, 1, Normal); err == nil {
			t.Errorf("letter %q gives %+v", letter, p)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, seed := range []string{"II", "s1", "S-4", "normal", "TIGHTENED", "aaara", "a, r b", "", "\x1b[31m", "−1"} {
		f.Add(seed, 500, 1.0)
	}
	f.Fuzz(func(t *testing.T, text string, lot int, aql float64) {
		if level, err := ParseLevel(text); err == nil {
			if again, err := ParseLevel(string(level)); err != nil || again != level {
				t.Errorf("level %q reads back as %q, %v", level, again, err)
			}
			if p, err := Single(lot, level, aql, Normal); err == nil && (p.N > lot || p.N < 1 || p.Reject <= p.Accept) {
				t.Errorf("lot %d, %s, %g: %+v", lot, level, aql, p)
			}
		}
		if i, err := ParseInspection(text); err == nil && i > Reduced {
			t.Errorf("inspection %q is %d", text, i)
		}
		if outcomes, err := History(text); err == nil {
			var s Switching
			for _, o := range outcomes {
				s, _ = s.Next(o)
			}
			if s.Inspection > Reduced || s.Stopped && s.Inspection != Tightened {
				t.Errorf("%q ends in %+v", text, s)
			}
		}
	})
}
