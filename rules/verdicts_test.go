package rules_test

import (
	"strings"
	"testing"

	"goodbin/rules"
	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// verdicts lists, for every kind and verdict, one part in the words of the command line, or why the kind cannot give that verdict.
var verdicts = []struct {
	kind    screening.Kind
	verdict screening.Verdict
	words   string
	never   string // why not; words is then ""
}{
	{"electrolytic", screening.Accept, "2200uF 35V M capacitance=2010uF esr@120Hz=61m leakage@35V,2min=45uA temperature=24C", ""},
	{"electrolytic", screening.Regrade, "47uF 350V M dated=1990 capacitance=50uF esr@120Hz=2 leakage@350V,5min=4mA leakage@250V,5min=40uA treated=2", ""},
	{"electrolytic", screening.Treat, "47uF 350V M dated=1990 capacitance=50uF esr@120Hz=2 leakage@350V,5min=4mA", ""},
	{"electrolytic", screening.Undecided, "100uF 25V M capacitance=101uF", ""},
	{"electrolytic", screening.Barred, "100uF 25V M capacitance=101uF esr@120Hz=0.5 seen=cracked", ""},
	{"electrolytic", screening.Reject, "100uF 35V M capacitance=41uF esr@120Hz=9", ""},

	{"diode", screening.Accept, "1N4148 vf=0.62 vbr=OL", ""},
	{"diode", screening.Regrade, "", "a lower voltage does not answer a breakdown below the rating: such a diode is damaged"},
	{"diode", screening.Treat, "", "nothing undoes what is wrong with a semiconductor"},
	{"diode", screening.Undecided, "1N4148 vf=0.62", ""},
	{"diode", screening.Barred, "1N4007 vf=0.52 vbr=OL seen=mains", ""},
	{"diode", screening.Reject, "1N4007 vf=0.52 vbr=250V", ""},

	{"zener", screening.Accept, "BZX79-C5V1 vz@5mA=5.12", ""},
	{"zener", screening.Regrade, "vz@3mA=12.1", ""},
	{"zener", screening.Treat, "", "nothing undoes what is wrong with a semiconductor"},
	{"zener", screening.Undecided, "BZX79-C5V1 vz=5.12", ""},
	{"zener", screening.Barred, "BZX79-C5V1 vz@5mA=5.12 seen=cracked", ""},
	{"zener", screening.Reject, "BZX79-C5V1 vz@5mA=4.4", ""},

	{"bipolar", screening.Accept, "2N3904 vbe=0.68 hfe@ic=10mA,vce=1V=180 iceo@20V=..0.1uA", ""},
	{"bipolar", screening.Regrade, "BC547B vbe=0.66 hfe@ic=2mA,vce=5V=150 iceo@20V=..0.1uA", ""},
	{"bipolar", screening.Treat, "", "nothing undoes what is wrong with a semiconductor"},
	{"bipolar", screening.Undecided, "2N3904 vbe=OL", ""},
	{"bipolar", screening.Barred, "2N3904 vbe=0.68 seen=mains", ""},
	{"bipolar", screening.Reject, "2N3904 vbe=0.68 hfe@ic=10mA,vce=1V=180 iceo@20V=500uA", ""},

	{"resistor", screening.Accept, "4k7 5% metal-film resistance=4.68k", ""},
	{"resistor", screening.Regrade, "4k7 5% metal-film resistance=5.14k", ""},
	{"resistor", screening.Treat, "4k7 5% cc resistance=5.26k", ""},
	{"resistor", screening.Undecided, "4k7 5%", ""},
	{"resistor", screening.Barred, "4k7 5% resistance=4.7k seen=mains", ""},
	{"resistor", screening.Reject, "4k7 5% metal-film resistance=OL", ""},
}

func TestEveryKindGivesEveryVerdictItCan(t *testing.T) {
	given := map[screening.Kind]int{}
	for _, tt := range verdicts {
		b, ok := rules.All().Find(tt.kind)
		if !ok {
			t.Errorf("no kind %s", tt.kind)
			continue
		}
		given[tt.kind]++
		if tt.words == "" {
			t.Logf("%-13s %-10s never: %s", tt.kind, tt.verdict, tt.never)
			continue
		}
		t.Run(string(tt.kind)+" "+tt.verdict.String(), func(t *testing.T) {
			j := booktest.Judge(t, b, tt.words, screening.DefaultPolicy())
			t.Logf("%-13s %-10s %s", tt.kind, j.Verdict, tt.words)
			if j.Verdict != tt.verdict {
				t.Errorf("%s, want %s\n%s", j.Verdict, tt.verdict, booktest.Texts(j))
			}
			if len(j.Reasons) == 0 || len(j.Next) == 0 {
				t.Errorf("no reason or no next step:\n%s", booktest.Texts(j))
			}
		})
	}
	for _, b := range rules.All() {
		if given[b.Kind] != len(screening.Verdicts()) {
			t.Errorf("%s: %d verdicts listed, want %d", b.Kind, given[b.Kind], len(screening.Verdicts()))
		}
	}
}

// What a kind never gives it gives under no reading: held against every word of the table's other rows and of the grid, with readings far
// outside each limit.
func TestWhatAKindNeverGives(t *testing.T) {
	never := map[screening.Kind][]screening.Verdict{}
	for _, tt := range verdicts {
		if tt.words == "" {
			never[tt.kind] = append(never[tt.kind], tt.verdict)
		}
	}
	for _, b := range rules.All() {
		for _, words := range grid(b.Kind) {
			part := booktest.Part(t, b, words)
			all, err := b.Limits(booktest.JudgePart(t, b, part, screening.DefaultPolicy()).Claim)
			if err != nil || len(never[b.Kind]) == 0 {
				continue
			}
			for _, l := range all {
				for _, x := range outside(l) {
					p := part
					p.Readings = []screening.Reading{{Of: l.On, Section: l.Section, Unit: l.Unit, Value: x, At: l.At}}
					j := booktest.JudgePart(t, b, p, screening.DefaultPolicy())
					for _, v := range never[b.Kind] {
						if j.Verdict == v {
							t.Errorf("%s %s with %s %v: %s", b.Kind, strings.TrimSpace(words), l.On, x, v)
						}
					}
				}
			}
		}
	}
}
