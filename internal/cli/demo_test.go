package cli

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"goodbin/inventory"
	"goodbin/screening"
)

const demoBoxFile = "../../testdata/demo-box.csv"

// screenedPart is what the demo's tests look at in one line of screen --json.
type screenedPart struct {
	Lot, Part  uint32
	Kind       string
	Verdict    string
	Grade      string
	RegradedAs *struct{ Text string } `json:"regraded_as"`
	Readings   []struct {
		Of, Section, Sense string
		Over               bool
		At                 map[string]*float64
		Repeats            []float64
	}
	Reasons []struct{ Code, Text string }
	Next    []struct{ Code, Text, Of string }

	// The last line, and a line for a row that cannot be read.
	Counts map[string]int
	Wrong  int
	Error  string
}

func (p *screenedPart) id() string { return inventory.ID{Lot: p.Lot, Number: p.Part}.String() }

// runCLI runs the program without a terminal and returns what it wrote.
func runCLI(t *testing.T, args ...string) (status int, stdout, stderr string) {
	t.Helper()
	box, err := os.ReadFile(demoBoxFile)
	if err != nil {
		t.Fatal(err)
	}
	var out, errs bytes.Buffer
	status = Run(t.Context(), args, Env{
		In: strings.NewReader(""), Out: &out, Err: &errs, Getenv: func(string) string { return "" }, DemoBox: box,
		Now: func() time.Time { return testTime },
	})
	return status, out.String(), errs.String()
}

// screenDemo screens the demo box into a workbook of its own and returns its parts by id.
func screenDemo(t *testing.T) (parts map[string]*screenedPart, last *screenedPart) {
	t.Helper()
	status, out, stderr := runCLI(t, "screen", demoBoxFile, "--json", "--workbook", filepath.Join(t.TempDir(), "demo.goodbin"))
	if status != ExitNotAccepted || stderr != "" {
		t.Fatalf("exit status %d, want %d; standard error %q, want nothing", status, ExitNotAccepted, stderr)
	}
	parts = map[string]*screenedPart{}
	for line := range strings.Lines(out) {
		if last != nil {
			t.Fatalf("a line after the counts: %s", line)
		}
		p := new(screenedPart)
		if err := json.Unmarshal([]byte(line), p); err != nil {
			t.Fatalf("%v in %s", err, line)
		}
		switch {
		case p.Error != "":
			t.Errorf("a row is refused: %s", p.Error)
		case p.Counts != nil:
			last = p
		case parts[p.id()] != nil:
			t.Errorf("part %s comes twice", p.id())
		default:
			parts[p.id()] = p
		}
	}
	if last == nil {
		t.Fatal("no counts at the end")
	}
	return parts, last
}

func TestDemoBoxHoldsEveryKindAndEveryVerdict(t *testing.T) {
	parts, last := screenDemo(t)
	got := map[string]map[string]int{}
	for _, p := range parts {
		if got[p.Kind] == nil {
			got[p.Kind] = map[string]int{}
		}
		got[p.Kind][p.Verdict]++
	}
	want := map[string]map[string]int{
		"electrolytic": {"accept": 8, "regrade": 1, "treat": 2, "undecided": 2, "barred": 1, "reject": 4},
		"diode":        {"accept": 6, "undecided": 1, "barred": 1, "reject": 4},
		"zener":        {"accept": 3, "regrade": 3, "undecided": 1, "reject": 1},
		"bipolar":      {"accept": 5, "regrade": 1, "undecided": 5, "reject": 3},
		"resistor":     {"accept": 3, "regrade": 3, "treat": 1, "barred": 2, "reject": 2},
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("parts by kind and verdict (-want +got):\n%s", diff)
	}
	total := map[string]int{}
	for _, v := range screening.Verdicts() {
		for _, verdicts := range want {
			total[v.String()] += verdicts[v.String()]
		}
		if total[v.String()] == 0 {
			t.Errorf("no part of the box ends in %s", v)
		}
	}
	if diff := cmp.Diff(total, last.Counts); diff != "" {
		t.Errorf("the counts at the end (-want +got):\n%s", diff)
	}
	if last.Wrong != 0 {
		t.Errorf("%d rows are refused, want none", last.Wrong)
	}
}

// demoVerdicts is what a practitioner would say of these parts, and the code under which the program must say why.
var demoVerdicts = []struct {
	name, id, verdict, grade string
	code                     string // of a reason or of a next step
	of                       string // of the next step's reading, where one is asked for
	as                       string // begins what it is held as
}{
	{name: "2200 µF that reads as new", id: "1-01", verdict: "accept", grade: "within-spec", code: screening.CodePasses},
	{name: "worn, inside twice the new ESR", id: "1-03", verdict: "accept", grade: "serviceable", code: screening.CodePasses},
	{name: "only an ESR at 100 kHz, well below half the limit", id: "1-04", verdict: "accept", grade: "serviceable", code: screening.CodePasses},
	{name: "dried out at 35 V: no lower voltage helps", id: "1-05", verdict: "reject", code: screening.CodeFails},
	{name: "vented", id: "1-06", verdict: "reject", code: screening.CodeStop},
	{name: "no loss measured", id: "1-07", verdict: "undecided", code: screening.CodeMeasure, of: "esr"},
	{name: "high and leaky, of 2003", id: "2-02", verdict: "undecided", code: "electrolyte-fault-era"},
	{name: "the same: no reading settles it, its series does", id: "2-02", verdict: "undecided", code: screening.CodeMeasure, of: "series"},
	{name: "one leaky section of a two-section can of 1962", id: "3-02", verdict: "treat", code: screening.CodeTreatFirst},
	{name: "one open section of a two-section can", id: "3-03", verdict: "reject", code: screening.CodeFails},
	{name: "450 V can that holds at 350 V after two re-formings", id: "4-02", verdict: "regrade", code: screening.CodeLesserClaim, as: "for use up to 350 V"},
	{name: "450 V can that leaks at both after two re-formings", id: "4-03", verdict: "reject", code: screening.CodeTreatedBefore},
	{name: "carbon film 9 % high", id: "5-02", verdict: "regrade", code: screening.CodeLesserClaim, as: "as measured, 5.14 kΩ ±5 %"},
	{name: "open resistor", id: "5-04", verdict: "reject", code: screening.CodeFails},
	{name: "carbon composition 20 % high, never dried", id: "6-02", verdict: "treat", code: screening.CodeTreatFirst},
	{name: "carbon composition dried and still 15 % high", id: "6-03", verdict: "regrade", code: screening.CodeTreatedBefore, as: "±20 %"},
	{name: "1 % part on a 1 % meter", id: "7-01", verdict: "accept", grade: "within-spec", code: screening.CodeToleranceProven, as: "±2 % proven"},
	{name: "transistor without its leakage", id: "8-02", verdict: "undecided", code: screening.CodeMeasure, of: "iceo"},
	{name: "group B that is a group A", id: "9-02", verdict: "regrade", code: screening.CodeLesserClaim, as: "BC547 group A"},
	{name: "germanium without its temperature", id: "10-02", verdict: "undecided", code: screening.CodeMeasure, of: "iceo"},
	{name: "germanium that leaks 1.9 mA at 20 °C", id: "10-03", verdict: "reject", code: screening.CodeFails},
	{name: "germanium still warm from the fingers", id: "10-04", verdict: "undecided", code: screening.CodeMeasure, of: "iceo"},
	{name: "power Darlington on a pocket tester", id: "11-02", verdict: "undecided", code: screening.CodeMeasure, of: "hfe"},
	{name: "1000 V diode that blocks 30 V, all there was", id: "12-01", verdict: "accept", grade: "within-spec", code: screening.CodePasses},
	{name: "1000 V diode that breaks down at 250 V", id: "12-03", verdict: "reject", code: screening.CodeFails},
	{name: "cracked diode that reads well", id: "12-04", verdict: "barred", code: screening.CodeStop},
	{name: "diode never turned round", id: "13-02", verdict: "undecided", code: screening.CodeMeasure, of: "vbr"},
	{name: "dual diode with one half shorted", id: "14-02", verdict: "reject", code: screening.CodeFails},
	{name: "C5V1 that reads 4.79 V, 10 mV out, on a 1 % meter", id: "16-02", verdict: "accept", code: screening.CodeToleranceProven, as: "reads outside 4.8 V to 5.4 V; accepted at ±10 %"},
	{name: "C5V1 that reads 6.21 V", id: "16-03", verdict: "reject", code: screening.CodeFails},
	{name: "unmarked Zener", id: "19-01", verdict: "regrade", code: screening.CodeLesserClaim, as: "unmarked, as measured, 8.24 V"},
	{name: "unmarked Zener, current not written down", id: "19-02", verdict: "undecided", code: screening.CodeMeasure, of: "vz"},
	{name: "resistor from across the mains", id: "20-01", verdict: "barred", code: screening.CodeStop},
}

func TestDemoPartsGetTheVerdictThatTheirReadingsDeserve(t *testing.T) {
	parts, _ := screenDemo(t)
	for _, tt := range demoVerdicts {
		t.Run(tt.name, func(t *testing.T) {
			p := parts[tt.id]
			if p == nil {
				t.Fatalf("no part %s", tt.id)
			}
			if p.Verdict != tt.verdict || tt.grade != "" && p.Grade != tt.grade {
				t.Errorf("%s is %s %s, want %s %s", tt.id, p.Verdict, p.Grade, tt.verdict, tt.grade)
			}
			if !p.says(tt.code, tt.of) {
				t.Errorf("%s gives reasons %v and next %v, want code %s %s", tt.id, p.Reasons, p.Next, tt.code, tt.of)
			}
			as := ""
			if p.RegradedAs != nil && tt.verdict != "treat" {
				as = p.RegradedAs.Text
			}
			if !strings.HasPrefix(as, tt.as) || (as == "") != (tt.as == "") {
				t.Errorf("%s is held as %q, want %q", tt.id, as, tt.as)
			}
		})
	}
}

// says reports whether a reason or a next step has the code; where `of` is not empty the next step must ask for that reading.
func (p *screenedPart) says(code, of string) bool {
	for _, r := range p.Reasons {
		if r.Code == code && of == "" {
			return true
		}
	}
	for _, n := range p.Next {
		if n.Code == code && (of == "" || n.Of == of) {
			return true
		}
	}
	return false
}

// A newcomer learns from the box what may be typed, so each way of typing a reading must be in it.
func TestDemoBoxShowsWhatAMeterShows(t *testing.T) {
	parts, _ := screenDemo(t)
	seen := map[string]bool{}
	for _, p := range parts {
		for _, r := range p.Readings {
			seen["over-range"] = seen["over-range"] || r.Over
			seen["repeats"] = seen["repeats"] || len(r.Repeats) > 1
			seen["a section of a can"] = seen["a section of a can"] || p.Kind == "electrolytic" && r.Section == "2"
			seen["the second diode"] = seen["the second diode"] || p.Kind == "diode" && r.Section == "2"
			if !r.Over {
				seen[r.Sense] = true
			}
			if f := r.At["frequency"]; r.Of == "esr" && f != nil && *f == 100e3 {
				seen["ESR at 100 kHz"] = true
			}
			if r.Of == "temperature" && p.Kind == "bipolar" {
				seen["a temperature"] = true
			}
		}
	}
	want := []string{
		"ESR at 100 kHz", "a section of a can", "a temperature", "at least", "at most", "exactly", "over-range", "repeats", "the second diode",
	}
	if diff := cmp.Diff(want, slices.Sorted(maps.Keys(seen))); diff != "" {
		t.Errorf("readings in the box (-want +got):\n%s", diff)
	}
}

func TestDemoBoxSaysThatItIsInvented(t *testing.T) {
	status, out, stderr := runCLI(t, "--demo", "export")
	if status != ExitDone || stderr != "" {
		t.Fatalf("exit status %d, standard error %q", status, stderr)
	}
	rows, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil || len(rows) < 2 {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	source, note := slices.Index(rows[0], "source"), slices.Index(rows[0], "note")
	if !strings.Contains(rows[1][note], "invented") {
		t.Errorf("the note of the first part, %q, does not say that the box is invented", rows[1][note])
	}
	for _, row := range rows[1:] {
		if !strings.Contains(row[source], "(invented)") {
			t.Errorf("%s lot %s part %s: the source %q does not say that it is invented", row[0], row[1], row[2], row[source])
		}
	}
}

func TestDemoStockIsWhatWasAcceptedOrRegraded(t *testing.T) {
	_, last := screenDemo(t)
	status, out, stderr := runCLI(t, "--demo", "stock", "--json")
	if status != ExitDone || stderr != "" {
		t.Fatalf("exit status %d, standard error %q", status, stderr)
	}
	var stock struct {
		Total int
		Parts []struct{ Verdict, Place string }
	}
	if err := json.Unmarshal([]byte(out), &stock); err != nil {
		t.Fatal(err)
	}
	if want := last.Counts["accept"] + last.Counts["regrade"]; stock.Total != want || len(stock.Parts) != want {
		t.Errorf("%d parts in stock, %d listed, want %d", stock.Total, len(stock.Parts), want)
	}
	for _, p := range stock.Parts {
		if p.Verdict != "accept" && p.Verdict != "regrade" || p.Place == "" {
			t.Errorf("in stock with verdict %q and place %q", p.Verdict, p.Place)
		}
	}
}
