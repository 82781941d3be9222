package cli

import (
	"bytes"
	"context"
	"encoding/json"
	"maps"
	"os"
	"path/filepath"
	"reflect"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
)

// updateVariable makes the JSON tests write what they find.
const updateVariable = "UPDATE_GOLDEN"

// runHere runs the program in this process and returns its streams and exit status.
func runHere(t testing.TB, stdin string, args ...string) (stdout, stderr string, status int) {
	t.Helper()
	var out, errs bytes.Buffer
	status = Run(context.Background(), args, Env{
		In: strings.NewReader(stdin), Out: &out, Err: &errs, Now: func() time.Time { return testTime },
		Getenv: func(string) string { return "" },
	})
	return out.String(), errs.String(), status
}

// jsonShapes are the objects that --json prints, by the command that prints them.
var jsonShapes = map[string][]any{
	"judge":    {jsonJudgement{}},
	"limits":   {jsonLimits{}},
	"marking":  {jsonMarking{}},
	"screen":   {jsonJudgement{}, jsonWrong{}, jsonCounts{}},
	"sampling": {jsonSampling{}},
	"meters":   {jsonMeters{}},
	"stock":    {jsonStock{}},
	"lot":      {jsonLotReport{}},
	"export":   {jsonLot{}, jsonPart{}, jsonHouseType{}, jsonFamilies{}},
	"types":    {jsonTypeRow{}, jsonGuess{}},
	"verify":   {jsonVerify{}},
	"version":  {jsonVersion{}},
}

// TestJSONShapes holds the names and types in every JSON output against testdata/json: what scripts rely on does not change unnoticed.
func TestJSONShapes(t *testing.T) {
	for command, shapes := range jsonShapes {
		t.Run(command, func(t *testing.T) {
			names := map[string]bool{}
			for _, shape := range shapes {
				collectNames(names, "", reflect.TypeOf(shape))
			}
			got := strings.Join(slices.Sorted(maps.Keys(names)), "\n") + "\n"
			golden := filepath.Join("testdata", "json", command+".names")
			if os.Getenv(updateVariable) != "" {
				if err := os.WriteFile(golden, []byte(got), 0o600); err != nil {
					t.Fatal(err)
				}
			}
			want, err := os.ReadFile(golden)
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff(string(want), got); diff != "" {
				t.Errorf("names and types differ from %s, which %s=1 writes anew: -want +got\n%s", golden, updateVariable, diff)
			}
		})
	}
}

// collectNames adds the path and type of every name of a shape.
func collectNames(names map[string]bool, path string, t reflect.Type) {
	for t.Kind() == reflect.Pointer || t.Kind() == reflect.Slice {
		t = t.Elem()
	}
	if t.Kind() != reflect.Struct {
		return
	}
	for f := range t.Fields() {
		name, _, _ := strings.Cut(f.Tag.Get("json"), ",")
		names[path+name+" "+jsonType(f.Type)] = true
		collectNames(names, path+name+".", f.Type)
	}
}

// jsonType words the type of a field as JSON has it.
func jsonType(t reflect.Type) string {
	switch t.Kind() {
	case reflect.Pointer:
		return jsonType(t.Elem()) + " or null"
	case reflect.Slice:
		return "list of " + jsonType(t.Elem())
	case reflect.Map:
		return "object of " + jsonType(t.Elem())
	case reflect.Struct:
		return "object"
	case reflect.Bool, reflect.String:
		return t.Kind().String()
	}
	return "number"
}

// TestJSONIsWhatTheShapesSay decodes what every command prints by its shapes, with nothing left over, the schema first.
func TestJSONIsWhatTheShapesSay(t *testing.T) {
	workbook := filepath.Join(t.TempDir(), "parts.goodbin")
	box := filepath.Join(t.TempDir(), "box.csv")
	csv := "kind,lot,part,claim,capacitance,esr@120Hz,resistance,seen\n" +
		"electrolytic,1,1,470uF 450V 1974,470uF,0.3,,cracked\nresistor,2,1,4k7 5%,,,4.68k,nothing\nresistor,2,2,,,,4.68V,\n"
	if err := os.WriteFile(box, []byte(csv), 0o600); err != nil {
		t.Fatal(err)
	}
	tests := []struct {
		name    string
		command string
		status  int
		args    []string
	}{
		{"judge, barred, with repeats and bounds", "judge", ExitNotAccepted, []string{
			"judge", "electrolytic", "470uF", "450V", "1974", "capacitance=520uF, 521uF", "esr@100kHz=0.1", "leakage@35V,5min=..45uA", "seen=cracked",
		}},
		{"judge, undecided", "judge", ExitNotAccepted, []string{"judge", "bipolar", "2N3904", "vbe=0.68"}},
		{"judge, rejected", "judge", ExitNotAccepted, []string{"judge", "electrolytic", "2200uF", "35V", "capacitance=100uF"}},
		{"judge, with its budget", "judge", ExitDone, []string{"judge", "resistor", "4k7", "5%", "resistance=4.68k, 4.69k", "--budget", "--meter", "pocket multimeter"}},
		{"meters", "meters", ExitDone, []string{"meters"}},
		{"limits", "limits", ExitDone, []string{"limits", "electrolytic", "2200uF", "35V", "--all"}},
		{"marking", "marking", ExitDone, []string{"marking", "2A474J"}},
		{"marking, a date", "marking", ExitDone, []string{"marking", "1208"}},
		{"marking, unknown", "marking", ExitNotAccepted, []string{"marking", "hello"}},
		{"screen", "screen", ExitRequest, []string{"screen", box, "--workbook", workbook}},
		{"stock", "stock", ExitDone, []string{"stock", "--all", "--workbook", workbook}},
		{"export", "export", ExitDone, []string{"export", "--workbook", workbook}},
		{"types", "types", ExitDone, []string{"types", "show", "BC547B"}},
		{"types, unknown", "types", ExitNotAccepted, []string{"types", "show", "D965"}},
		{"types, listed", "types", ExitDone, []string{"types", "list", "zener"}},
		{"version", "version", ExitDone, []string{"version"}},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			stdout, stderr, status := runHere(t, "", append(tt.args, "--json")...)
			if status != tt.status {
				t.Fatalf("exit status %d, want %d; standard error: %s", status, tt.status, stderr)
			}
			if stdout == "" {
				t.Fatal("nothing on standard output")
			}
			for line := range strings.Lines(stdout) {
				if !strings.HasPrefix(line, `{"schema":1,`) {
					t.Errorf("the schema does not stand first in %.80s", line)
				}
				if !decodes(line, jsonShapes[tt.command]) {
					t.Errorf("no shape of %s takes %s", tt.command, line)
				}
			}
		})
	}
}

// decodes reports whether one of the shapes takes a line with nothing left over.
func decodes(line string, shapes []any) bool {
	for _, shape := range shapes {
		d := json.NewDecoder(strings.NewReader(line))
		d.DisallowUnknownFields()
		if d.Decode(reflect.New(reflect.TypeOf(shape)).Interface()) == nil {
			return true
		}
	}
	return false
}

// TestJSONValues holds the judge's example of the design against its JSON: SI without prefix, null where open.
func TestJSONValues(t *testing.T) {
	stdout, _, status := runHere(t, "", "judge", "electrolytic", "2200uF", "35V", "M", "capacitance=2010uF", "esr@120Hz=61m",
		"leakage@35V,2min=45uA", "temperature=24C", "--json")
	if status != ExitDone {
		t.Fatalf("exit status %d, want %d", status, ExitDone)
	}
	var j jsonJudgement
	if err := json.Unmarshal([]byte(stdout), &j); err != nil {
		t.Fatal(err)
	}
	if j.Verdict != "accept" || j.Kind != "electrolytic" || len(j.Readings) < 4 {
		t.Fatalf("verdict %q of kind %q with %d readings", j.Verdict, j.Kind, len(j.Readings))
	}
	for _, want := range []struct {
		of    string
		value float64
		unit  string
		typed string
	}{{"capacitance", 0.00201, "F", "2010uF"}, {"esr", 0.061, "ohm", "61m"}, {"leakage", 45e-6, "A", "45uA"}, {"temperature", 24, "C", "24C"}} {
		i := slices.IndexFunc(j.Readings, func(r *jsonReading) bool { return r.Of == want.of })
		if i < 0 {
			t.Errorf("no reading of %s", want.of)
			continue
		}
		r := j.Readings[i]
		if *r.Value != want.value || r.Unit != want.unit || *r.Typed != want.typed || r.Sense != "exactly" || *r.U <= 0 {
			t.Errorf("%s: %g %s, typed %s, u %g; want %g %s, typed %s", want.of, *r.Value, r.Unit, *r.Typed, *r.U, want.value, want.unit, want.typed)
		}
	}
	for _, f := range j.Findings {
		if f.Limit.On == "leakage" && f.Outcome == "pass" {
			// 0.01·CV after 2 min: 0.01 × 2200 µF × 35 V = 770 µA.
			if f.Limit.Low != nil || *f.Limit.High < 0.000769 || *f.Limit.High > 0.000771 || *f.Limit.At["voltage"] != 35 || f.Limit.At["ic"] != nil {
				t.Errorf("leakage limit low %v, high %g, at %v; want null, 770e-6, 35 V", f.Limit.Low, *f.Limit.High, f.Limit.At)
			}
			return
		}
	}
	t.Error("no leakage limit is passed")
}
