package mica

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	says, as    string
}{
	{"a moulded part's one reading", "470pF 500V J moulded capacitance=468pF", screening.Accept, "silver that has crept", ""},
	{"insulation read too: nothing left of that", "470pF 500V J moulded capacitance=468pF insulation-resistance@500V=>20G", screening.Accept, "new part", ""},
	{"0.5 pF beyond its tolerance", "22pF J dipped capacitance=23.3pF", screening.Accept, "", ""},
	{"off its value: kept as measured", "470pF 500V J capacitance=540pF", screening.Regrade, "", "as measured, 540 pF"},
	{"1 % is more than a pocket meter proves", "3.3nF 1% silver capacitance=3.40nF", screening.Accept, "not provable", "±5 % proven"},
	{"nothing read", "470pF 500V J moulded", screening.Undecided, "MEASURE capacitance at 1 MHz", ""},
	{"silver on the move", "470pF 500V J moulded capacitance=468pF seen=noisy", screening.Reject, "crept between its plates", ""},
	{"leaks at voltage", "470pF 500V J capacitance=468pF insulation-resistance@500V=45.0M", screening.Reject, "at least 1 GΩ", ""},
	{"leaks on an ohms range", "470pF 500V J capacitance=468pF insulation-resistance=1.8M", screening.Reject, "at least 1 GΩ", ""},
	{"lossy at 100 kHz", "470pF 500V J capacitance=468pF tan-delta@100kHz=0.03", screening.Reject, "at most 0.005", ""},
	{"half its value", "470pF 500V J capacitance=235pF", screening.Reject, "", ""},
	{"open, no tolerance printed", "470pF capacitance=2.0pF", screening.Reject, "", ""},
	{"cracked", "470pF 500V J capacitance=468pF seen=cracked", screening.Barred, "", ""},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		t.Run(tt.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tt.words, screening.DefaultPolicy())
			seen[j.Verdict]++
			if j.Verdict != tt.verdict || !strings.Contains(booktest.Texts(j), tt.says) || booktest.NotSoAs(j, tt.as) {
				t.Errorf("%s: %s as %q, want %s as %q, saying %q\n%s", tt.words, j.Verdict, booktest.As(j), tt.verdict, tt.as, tt.says, booktest.Texts(j))
			}
		})
	}
	booktest.EveryVerdict(t, seen, screening.Treat)
}

// passives.md section 4, mica: CDE radial guide and transmitting types (published); below 75 pF from memory.
func TestPublishedFigures(t *testing.T) {
	for _, tt := range []struct {
		name, words string
		on          screening.Definition
		hertz, want float64
		status      screening.Status
	}{
		{"75 pF: 0.00075 at 1 MHz", "75pF", screening.TanDelta, 1e6, 0.00075, screening.Published},
		{"1000 pF: 0.00075 at 1 MHz", "1000pF", screening.TanDelta, 1e6, 0.00075, screening.Published},
		{"1.1 nF: 0.0014 at 1 kHz", "1.1nF", screening.TanDelta, 1e3, 0.0014, screening.Published},
		{"3.6 nF: 0.0013 at 1 kHz", "3.6nF", screening.TanDelta, 1e3, 0.0013, screening.Published},
		{"10 nF: 0.0012 at 1 kHz", "10nF", screening.TanDelta, 1e3, 0.0012, screening.Published},
		{"22 pF: from memory", "22pF", screening.TanDelta, 1e6, 0.0015, screening.FromMemory},
		{"insulation 7500 MΩ", "470pF 100V transmitting", screening.InsulationResistance, 0, 7.5e9, screening.Published},
	} {
		all, err := limits(booktest.Judge(t, Book(), tt.words, screening.DefaultPolicy()).Claim)
		if err != nil {
			t.Fatal(err)
		}
		found := 0
		for _, l := range all {
			hertz, _ := l.At.Get(screening.Frequency)
			if l.On != tt.on.Name || hertz != tt.hertz || l.Grade != screening.WithinSpec {
				continue
			}
			found++
			bound := l.High
			if math.IsInf(bound, 1) {
				bound = l.Low
			}
			if bound != tt.want || l.Source.Status != tt.status {
				t.Errorf("%s: %v, %v", tt.name, bound, l.Source)
			}
		}
		if found != 1 {
			t.Errorf("%s: %d such limits", tt.name, found)
		}
	}
}

func TestTheTableIsChecked(t *testing.T) {
	for name, text := range map[string]string{
		"neither loss nor insulation": strings.Replace(limitsCSV, "tan,*", "esr,*", 1),
		"worn better than new":        strings.Replace(limitsCSV, "0.003,0.005", "0.003,0.001", 1),
		"no such status":              strings.Replace(limitsCSV, "house,house", "house,sure", 1),
		"an empty range":              strings.Replace(limitsCSV, "3500,9500", "9500,3500", 1),
	} {
		if _, err := readRows(text); err == nil {
			t.Errorf("%s is read", name)
		}
	}
	if _, err := readRows(limitsCSV); err != nil {
		t.Error(err)
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "470pF 500V J moulded capacitance=468pF tan-delta@100kHz=0.001")
}

// The program's rule: 1 % or 0.5 pF, whichever is more, beyond the tolerance; below 50 pF the picofarads are more.
func TestDriftIsOnePercentOrHalfAPicofarad(t *testing.T) {
	for words, want := range map[string]float64{"22pF J": 22*1.05 + 0.5, "470pF J": 470*1.05 + 4.7} {
		all, err := limits(booktest.Judge(t, Book(), words, screening.DefaultPolicy()).Claim)
		if err != nil {
			t.Fatal(err)
		}
		if l := all[1]; l.Grade != screening.Serviceable || math.Abs(l.High*1e12-want) > 1e-9 {
			t.Errorf("%s: up to %v, want %v pF", words, l.High, want)
		}
	}
}
