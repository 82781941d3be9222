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
	"goodbin/rules"
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

// demoCounts is what the parts of each kind end in. A kind whose verdicts change needs another look at its parts in the box.
var demoCounts = map[string]string{
	"electrolytic":       "21 parts: 9 accept, 1 regrade, 2 treat, 4 undecided, 1 barred, 4 reject",
	"tantalum":           "8 parts: 3 accept, 2 undecided, 1 barred, 2 reject",
	"polymer":            "5 parts: 2 accept, 1 undecided, 1 barred, 1 reject",
	"film":               "8 parts: 3 accept, 1 regrade, 1 undecided, 1 barred, 2 reject",
	"paper":              "5 parts: 1 accept, 1 undecided, 2 barred, 1 reject",
	"mica":               "5 parts: 1 accept, 1 regrade, 1 undecided, 1 barred, 1 reject",
	"ceramic":            "8 parts: 3 accept, 1 regrade, 1 undecided, 1 barred, 2 reject",
	"mains-capacitor":    "5 parts: 5 barred",
	"variable-capacitor": "8 parts: 3 accept, 1 regrade, 2 undecided, 1 barred, 1 reject",
	"diode":              "12 parts: 6 accept, 1 undecided, 1 barred, 4 reject",
	"zener":              "9 parts: 3 accept, 3 regrade, 1 undecided, 1 barred, 1 reject",
	"bridge":             "5 parts: 1 accept, 1 undecided, 1 barred, 2 reject",
	"led":                "8 parts: 4 accept, 1 regrade, 1 undecided, 1 barred, 1 reject",
	"selenium":           "2 parts: 2 barred",
	"bipolar":            "18 parts: 6 accept, 1 regrade, 6 undecided, 2 barred, 3 reject",
	"jfet":               "6 parts: 2 accept, 1 regrade, 1 undecided, 1 barred, 1 reject",
	"mosfet":             "6 parts: 2 accept, 1 undecided, 1 barred, 2 reject",
	"igbt":               "4 parts: 1 accept, 1 undecided, 1 barred, 1 reject",
	"thyristor":          "5 parts: 1 accept, 1 undecided, 1 barred, 2 reject",
	"triac":              "4 parts: 1 accept, 1 undecided, 1 barred, 1 reject",
	"resistor":           "14 parts: 4 accept, 3 regrade, 1 treat, 2 undecided, 2 barred, 2 reject",
	"potentiometer":      "7 parts: 3 accept, 1 regrade, 1 undecided, 1 barred, 1 reject",
	"thermistor":         "5 parts: 1 accept, 1 regrade, 1 undecided, 1 barred, 1 reject",
	"varistor":           "4 parts: 1 accept, 1 undecided, 1 barred, 1 reject",
	"inductor":           "7 parts: 2 accept, 1 regrade, 1 undecided, 1 barred, 2 reject",
	"transformer":        "4 parts: 1 accept, 1 undecided, 1 barred, 1 reject",
	"relay":              "4 parts: 1 accept, 1 undecided, 1 barred, 1 reject",
	"optocoupler":        "6 parts: 2 accept, 1 regrade, 1 undecided, 1 barred, 1 reject",
	"regulator":          "5 parts: 2 accept, 1 undecided, 1 barred, 1 reject",
	"unknown":            "5 parts: 3 undecided, 1 barred, 1 reject",
}

func TestDemoBoxHoldsEveryKindAndEveryVerdict(t *testing.T) {
	parts, last := screenDemo(t)
	got := map[string]map[screening.Verdict]int{}
	total := map[string]int{}
	for _, p := range parts {
		v, ok := screening.VerdictNamed(p.Verdict)
		if !ok {
			t.Fatalf("part %s ends in %q", p.id(), p.Verdict)
		}
		if got[p.Kind] == nil {
			got[p.Kind] = map[screening.Verdict]int{}
		}
		got[p.Kind][v]++
		total[p.Verdict]++
	}
	counts := map[string]string{}
	for kind, verdicts := range got {
		n := 0
		for _, of := range verdicts {
			n += of
		}
		counts[kind] = countsText(n, 0, func(v screening.Verdict) int { return verdicts[v] })
	}
	if diff := cmp.Diff(demoCounts, counts); diff != "" {
		t.Errorf("parts by kind and verdict (-want +got):\n%s", diff)
	}
	for _, b := range rules.All() {
		if got[string(b.Kind)] == nil {
			t.Errorf("no part of the box is of kind %s", b.Kind)
		}
	}
	for _, v := range screening.Verdicts() {
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

// The central tests of the rulebooks hold a part for every verdict that a kind can give; a newcomer should meet each in the box.
func TestDemoBoxShowsEveryVerdictThatAKindCanGive(t *testing.T) {
	parts, _ := screenDemo(t)
	shown := map[string]bool{}
	for _, p := range parts {
		shown[p.Kind+" "+p.Verdict] = true
	}
	for _, b := range rules.All() {
		text, err := os.ReadFile(filepath.Join("../../rules/testdata/kinds", string(b.Kind)+".csv"))
		if err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(bytes.NewReader(text)).ReadAll()
		if err != nil {
			t.Fatalf("%s: %v", b.Kind, err)
		}
		verdicts := 0
		for _, row := range rows {
			if _, ok := screening.VerdictNamed(row[0]); !ok || row[1] == "" {
				continue
			}
			verdicts++
			if !shown[string(b.Kind)+" "+row[0]] {
				t.Errorf("a %s can end in %s, such as %q, and none of the box does", b.Kind, row[0], row[1])
			}
		}
		if verdicts == 0 {
			t.Errorf("%s.csv holds no part with a verdict", b.Kind)
		}
	}
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
			if r.Section != "" {
				seen["sections: "+p.Kind] = true
			}
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
		"ESR at 100 kHz", "a temperature", "at least", "at most", "exactly", "over-range", "repeats", "sections: bridge",
		"sections: diode", "sections: electrolytic", "sections: potentiometer", "sections: relay", "sections: transformer",
		"sections: triac", "sections: unknown", "sections: variable-capacitor",
	}
	if diff := cmp.Diff(want, slices.Sorted(maps.Keys(seen))); diff != "" {
		t.Errorf("readings in the box (-want +got):\n%s", diff)
	}
}

// What holds for every kind can be seen on some part of the box.
func TestDemoBoxShowsWhatEyesFind(t *testing.T) {
	box, err := os.ReadFile(demoBoxFile)
	if err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(bytes.NewReader(box)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	column := slices.Index(rows[0], "seen")
	found := map[string]bool{}
	for _, row := range rows[1:] {
		found[row[column]] = true
	}
	for _, word := range []string{"", "nothing", "mains", "cracked", "in-circuit", "intermittent", "poor-leads"} {
		if !found[word] {
			t.Errorf("no part of the box has seen=%s", word)
		}
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
