package cli

import (
	"encoding/json"
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/mattn/go-runewidth"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/lot"
	"goodbin/screening/quantity"
)

// invented makes a group of resistances in ohms, read to 1 Ω, parts numbered from 1.
func invented(low, high float64, values ...float64) *lotGroup {
	g := &lotGroup{unit: quantity.Ohm, limits: lot.Limits{Low: low, High: high}}
	for i, x := range values {
		g.all = append(g.all, lotReading{inventory.ID{Lot: 1, Number: uint32(i + 1)}, x, 1, screening.Accept, false})
	}
	g.examine()
	return g
}

func asTyped(s string) string { return s }

func TestHistogramDrawsBarsAndLimits(t *testing.T) {
	open := math.Inf(1)
	tests := []struct {
		name string
		g    *lotGroup
		want []string
	}{
		{
			"a limit on an edge stands between bars, one inside a bar under it", invented(80, 114.5, 90, 100, 110, 100),
			[]string{
				"  ------ low limit 80 Ω", "   from 80 Ω  1  #", "  from 100 Ω  3  ###",
				"  ------ inside the bar above: high limit 114.5 Ω",
			},
		},
		{
			"empty bars in a row are one line", invented(-open, open, 100, 100, 101, 101, 102, 102, 150),
			[]string{"  from 100 Ω  6  ######", "  from 105 Ω  0  (9 such bars)", "  from 150 Ω  1  #"},
		},
		{
			"a limit far away is said to be", invented(-open, 1e6, 100, 101),
			[]string{"  from 100 Ω  2  ##", "  the high limit 1 MΩ lies too far away to be drawn"},
		},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			if diff := cmp.Diff(tt.want, histogramLines(tt.g, 80, asTyped)); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestHistogramFitsItsColumns(t *testing.T) {
	for _, n := range []int{2, 19, 300, 20_000} {
		values := make([]float64, n)
		for i := range values {
			values[i] = 4700 + float64(i%7)
		}
		g := invented(4465, 4935, values...)
		for _, columns := range []int{40, 80} {
			lines := histogramLines(g, columns, asTyped)
			for _, l := range lines {
				if runewidth.StringWidth(l) > columns && strings.HasSuffix(l, "#") {
					t.Errorf("%d parts: wider than %d: %q", n, columns, l)
				}
			}
			if scaled := slices.ContainsFunc(lines, func(l string) bool { return strings.HasPrefix(l, "  each # is up to ") }); scaled != (n > 100) {
				t.Errorf("%d parts in %d columns: scaled is %v", n, columns, scaled)
			}
		}
	}
}

// TestWhatCounts holds who is in the statistics and who is only named.
func TestWhatCounts(t *testing.T) {
	g := invented(90, 110)
	for i, r := range []struct {
		value   float64
		verdict screening.Verdict
	}{
		{99, screening.Accept},
		{100, screening.Accept},
		{101, screening.Undecided},
		{100, screening.Regrade},
		{102, screening.NoVerdict},
		{140, screening.Reject},
		{100_000, screening.Reject},
		{100, screening.Barred},
	} {
		g.all = append(g.all, lotReading{inventory.ID{Lot: 1, Number: uint32(i + 1)}, r.value, 1, r.verdict, false})
	}
	g.examine()
	got := map[string][]string{"in": idTexts(g.ids), "rejected": idTexts(g.rejected), "slipped": idTexts(g.slipped), "barred": idTexts(g.barred)}
	want := map[string][]string{
		"in": {"1-01", "1-02", "1-03", "1-04", "1-05"}, "rejected": {"1-06"}, "slipped": {"1-07"}, "barred": {"1-08"},
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

func TestTooFewSaysWhatNeedsHowMany(t *testing.T) {
	for n, want := range map[int]string{
		1:  "1 part here; it takes more for a spread from 2, outliers from 4, unit slips and capability from 5, drift and two populations from 10, part average testing from 20",
		9:  "9 parts here; it takes more for drift and two populations from 10, part average testing from 20",
		20: "",
	} {
		if got := tooFew(invented(0, 200, slices.Repeat([]float64{100}, n)...)); got != want {
			t.Errorf("%d parts: %q, want %q", n, got, want)
		}
	}
}

// lotOf screens rows of resistors and returns the report on lot 1.
func lotOf(t *testing.T, rows string, args ...string) (report jsonLotReport, stdout string) {
	t.Helper()
	workbook := filepath.Join(t.TempDir(), "w.goodbin")
	if _, stderr, status := runHere(t, rows, "screen", "-", "--as-typed", "--workbook", workbook); status > ExitNotAccepted {
		t.Fatalf("screen: status %d: %s", status, stderr)
	}
	args = append([]string{"lot", "1", "--workbook", workbook}, args...)
	stdout, stderr, status := runHere(t, "", args...)
	if status != ExitDone {
		t.Fatalf("lot: status %d: %s", status, stderr)
	}
	out, _, _ := runHere(t, "", append(args, "--json")...)
	if !decodes(out, jsonShapes["lot"]) {
		t.Errorf("the shape does not take %s", out)
	}
	if err := json.Unmarshal([]byte(out), &report); err != nil {
		t.Fatal(err)
	}
	return report, stdout
}

// TestSuspicionsNameParts gives bags in which something went wrong (invented), numbered from 3 so that places and numbers differ.
func TestSuspicionsNameParts(t *testing.T) {
	noise := []float64{3, -5, 1, 8, -2, 6, -7, 0, 4, -4, 7, -1, 5, -6, 2, -3, 9, -8, 10, -9}
	tests := []struct {
		name, kind string
		at         func(i int) float64
		first      string
	}{
		{"warm hands or a drifting meter", "drift", func(i int) float64 { return 4700 + 6*float64(i) + noise[i] }, "1-03"},
		{"two bags in one", "two populations", func(i int) float64 { return 4600 + 200*float64(i*7%3/2) + noise[i]/2 }, "1-05"},
		{"the meter held its value", "copied", func(i int) float64 {
			if i > 9 && i < 15 {
				return 4711
			}
			return 4700 + 3*noise[i]
		}, "1-13"},
		{"a prefix slipped", "unit slip", func(i int) float64 {
			if i == 4 {
				return 4.7
			}
			return 4700 + noise[i]
		}, "1-07"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			rows := "kind,lot,part,claim,resistance,seen\n"
			for i := range noise {
				rows += fmt.Sprintf("resistor,1,%d,4k7 5%%,%.1f,nothing\n", i+3, tt.at(i))
			}
			report, stdout := lotOf(t, rows)
			all := report.Characteristics[0].Suspicions
			i := slices.IndexFunc(all, func(s jsonLotSuspicion) bool { return s.Kind == tt.kind })
			if i < 0 || len(all[i].Parts) == 0 || all[i].Parts[0] != tt.first {
				t.Fatalf("no %s that begins with %s in %+v", tt.kind, tt.first, all)
			}
			if !strings.Contains(stdout, "again    "+tt.first) {
				t.Errorf("the person is not told:\n%s", stdout)
			}
		})
	}
}

// TestCopiedRowsNameParts copies two characteristics at once.
func TestCopiedRowsNameParts(t *testing.T) {
	rows := "kind,lot,part,claim,capacitance,esr@120Hz,seen\n"
	for i := range 20 {
		c, esr := 2000+11*(i*7%20), 50+(i*3%20)
		if i >= 12 && i < 17 {
			c, esr = 2044, 58
		}
		rows += fmt.Sprintf("electrolytic,1,%d,2200uF 35V M,%duF,%dm,nothing\n", i+1, c, esr)
	}
	report, _ := lotOf(t, rows)
	if len(report.CopiedRows) == 0 || !slices.Contains(report.CopiedRows[0].Parts, "1-15") {
		t.Errorf("copied rows are not named: %+v", report.CopiedRows)
	}
}

// TestEveryClaimIsLookedAtForItself: a tin of mixed parts has no median.
func TestEveryClaimIsLookedAtForItself(t *testing.T) {
	report, stdout := lotOf(t, "kind,lot,part,claim,resistance,seen\n"+
		"resistor,1,1,4k7 5%,4.68k,nothing\nresistor,1,2,1k 5%,1.01k,nothing\nresistor,1,3,4k7 5%,4.70k,nothing\n")
	if len(report.Characteristics) != 2 || report.Characteristics[0].N != 2 || *report.Characteristics[1].High != 1050 {
		t.Errorf("%+v", report.Characteristics)
	}
	if !strings.Contains(stdout, "resistance of parts that claim 1 kΩ ±5 %") {
		t.Errorf("the other claim is not named:\n%s", stdout)
	}
}

// TestNothingTypedMovesTheCursor puts escapes where a workbook keeps words.
func TestNothingTypedMovesTheCursor(t *testing.T) {
	v := &lotView{book: &screening.Rulebook{Kind: "resistor", Label: "resistor"}, within: 0.05}
	v.lot = inventory.Lot{ID: 1, Kind: "resistor", Place: "a\x1b[31m", Claim: screening.Claim{}.WithTrait("type", "\x1b]0;x\a\u202e")}
	g := invented(90, 110, 99, 100, 101)
	g.section, g.claim, g.limitsWhy = "\x1b[2J", "\x9b31m", "\x1b[H"
	v.groups = []*lotGroup{g}
	var out strings.Builder
	a := &app{env: &Env{Out: &out, plain: true}}
	if err := a.printLot(v); err != nil {
		t.Fatal(err)
	}
	for line := range strings.Lines(out.String()) {
		if text := strings.TrimSuffix(line, "\n"); clean(text) != text {
			t.Errorf("unprintable: %q", text)
		}
	}
	report, err := json.Marshal(lotReportJSON(v))
	if err != nil {
		t.Fatal(err)
	}
	for _, bad := range []string{`\u001b`, `\u0007`, "\u202e"} {
		if strings.Contains(string(report), bad) {
			t.Errorf("%q is in %s", bad, report)
		}
	}
}

// TestALimitNeedsAllPartsNearItsTemperature: a reverse current has a limit at 25 °C; a part measured hot cannot be held against it as it stands.
func TestALimitNeedsAllPartsNearItsTemperature(t *testing.T) {
	at := func(celsius string) bool {
		report, _ := lotOf(t, "kind,lot,part,claim,ir@20V,temperature,seen\ndiode,1,1,1N4148,10nA,25C,nothing\ndiode,1,2,1N4148,11nA,"+celsius+",nothing\n")
		return report.Characteristics[0].High != nil
	}
	if !at("25C") || at("60C") {
		t.Errorf("limit with both at 25 °C: %v, with one at 60 °C: %v", at("25C"), at("60C"))
	}
}

func TestAShareShortOfAllNeverPrintsAsAll(t *testing.T) {
	for fraction, want := range map[float64]string{1: "100 %", 0: "0 %", 0.5: "50 %", 0.9996312: "99.96 %", 0.99999: "99.999 %"} {
		if got := yieldText(fraction); got != want {
			t.Errorf("%g prints as %s, want %s", fraction, got, want)
		}
	}
}
