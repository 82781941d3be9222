package cli

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"goodbin/inventory"
	"goodbin/rules"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// houseWorkbook is a workbook whose house table overrules the gain of BC547.
func houseWorkbook(t testing.TB) string {
	t.Helper()
	dir := t.TempDir()
	path, sheets := filepath.Join(dir, "parts.goodbin"), filepath.Join(dir, "sheets.csv")
	if err := os.WriteFile(sheets, []byte("kind,type,rated:hfe,source\nbipolar,BC547,\"200..450@ic=2mA,vce=5V\",own sheet\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, stderr, status := runHere(t, "", "types", "add", sheets, "--workbook", path); status != ExitDone {
		t.Fatalf("status %d: %s", status, stderr)
	}
	return path
}

var weakBC547 = []string{"judge", "bipolar", "BC547", "vbe=0.66", "hfe@ic=2mA,vce=5V=150", "iceo@20V=..0.1uA", "--workbook"}

// The pages may have the workbook open: judge reads the house tables all the same, does not wait, and says nothing.
func TestJudgeCountsHouseTablesOfAHeldWorkbook(t *testing.T) {
	path := houseWorkbook(t)
	held, err := inventory.Open(path, inventory.Options{})
	if err != nil {
		t.Fatal(err)
	}
	defer held.Close()
	start := time.Now()
	for _, args := range [][]string{append(weakBC547, path), {"limits", "bipolar", "BC547", "--workbook", path}, {"types", "show", "BC547", "--workbook", path}} {
		stdout, stderr, _ := runHere(t, "", args...)
		if !strings.Contains(stdout, "own sheet (house)") || stderr != "" {
			t.Errorf("%s: standard error %q\n%s", args[0], stderr, stdout)
		}
	}
	if waited := time.Since(start); waited > 10*inventory.DefaultTimeout {
		t.Errorf("took %s: it waits for the other process", waited)
	}
	if _, stderr, status := runHere(t, "", "types", "remove", "BC547", "--workbook", path); status != ExitWorkbook || !strings.Contains(stderr, "in use") {
		t.Errorf("a change while the workbook is held: status %d, %s", status, stderr)
	}
}

// A damaged table, or a file that is none, leaves the built-in one, and that is said.
func TestHouseTablesThatCannotBeReadAreSaid(t *testing.T) {
	path := houseWorkbook(t)
	file, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	damaged := bytes.ReplaceAll(file, []byte("own sheet"), []byte("own sheep"))
	if err := os.WriteFile(path, damaged, 0o600); err != nil {
		t.Fatal(err)
	}
	stdout, stderr, status := runHere(t, "", append(weakBC547, path)...)
	if status != ExitDone || !strings.Contains(stderr, "only the built-in tables count") || strings.Contains(stdout, "your own row") {
		t.Errorf("status %d, standard error %q\n%s", status, stderr, stdout)
	}
	stdout, stderr, status = runHere(t, "", append(weakBC547, filepath.Join(t.TempDir(), "absent"))...)
	if status != ExitDone || stderr != "" || !strings.HasPrefix(stdout, "ACCEPT") {
		t.Errorf("no workbook: status %d, standard error %q\n%s", status, stderr, stdout)
	}
}

// A house row wins, its verdict says house in JSON too, and without it the built-in verdict is back.
func TestAHouseRowDecidesUntilItIsRemoved(t *testing.T) {
	path := houseWorkbook(t)
	for _, step := range []struct {
		name    string
		do      []string
		verdict string
		house   bool
	}{
		{"with the row", nil, "reject", true},
		{"removed", []string{"types", "remove", "BC547"}, "accept", false},
		{"undone", []string{"undo"}, "reject", true},
		{"done again", []string{"redo"}, "accept", false},
	} {
		if step.do != nil {
			if _, stderr, status := runHere(t, "", append(step.do, "--workbook", path)...); status != ExitDone {
				t.Fatalf("%s: status %d, %s", step.name, status, stderr)
			}
		}
		stdout, _, _ := runHere(t, "", append(append([]string{}, weakBC547...), path, "--json")...)
		// 150 is below 200: of the house row a failure, of the built-in 110 to 800 a pass.
		house := strings.Contains(stdout, `"source":{"document":"own sheet","clause":null,"status":"house"}`)
		if house != step.house || !strings.Contains(stdout, `"verdict":"`+step.verdict+`"`) {
			t.Errorf("%s: house %v, want %v; the verdict is not %s", step.name, house, step.house, step.verdict)
		}
	}
}

// sameCondition compares to the last digit that a decimal text keeps.
func sameCondition(a, b screening.Condition) bool {
	for _, v := range screening.Variables() {
		x, hasX := a.Get(v)
		y, hasY := b.Get(v)
		if hasX != hasY || math.Abs(x-y) > 1e-14*math.Abs(x) {
			return false
		}
	}
	return true
}

// What types export writes is read again to the same rows, whatever figures they hold.
func TestExportedTypesAreReadAgain(t *testing.T) {
	books := rules.All()
	value := rapid.Custom(func(t *rapid.T) float64 { // what can be typed, from nanoamperes up, and what a table in other units makes of it
		x := float64(rapid.IntRange(0, 9999).Draw(t, "figures")) * math.Pow(10, float64(rapid.IntRange(-12, 4).Draw(t, "power")))
		return x / float64(rapid.IntRange(1, 9).Draw(t, "divided by"))
	})
	text := rapid.StringMatching(`[A-Za-z0-9=+'"; ,µΩ-]{0,12}`)
	condition := func(t *rapid.T) screening.Condition {
		var c screening.Condition
		for _, v := range []screening.Variable{screening.IC, screening.VCE, screening.VCB} {
			if rapid.Bool().Draw(t, "has") {
				c = c.With(v, value.Draw(t, "at"))
			}
		}
		return c
	}
	rapid.Check(t, func(t *rapid.T) {
		var kept []inventory.HouseType
		for i := range rapid.IntRange(1, 4).Draw(t, "rows") {
			c := screening.Claim{}.WithTrait(screening.TraitType, "QX"+string(rune('A'+i)))
			c = c.WithTrait(screening.TraitPinout, rapid.SampledFrom([]string{"", "E-B-C"}).Draw(t, "pinout"))
			for _, f := range []struct {
				of   screening.Characteristic
				unit quantity.Unit
			}{{"hfe", quantity.One}, {"hfe", quantity.One}, {"vceo", quantity.Volt}, {"icbo", quantity.Ampere}} {
				low, high := value.Draw(t, "low"), value.Draw(t, "high")
				low, high = min(low, high), max(low, high)
				r := screening.Rating{Of: f.of, Unit: f.unit, At: condition(t), Nominal: math.NaN(), Low: low, High: high}
				switch rapid.IntRange(0, 3).Draw(t, "shape") {
				case 0:
					r.Nominal, r.High = low, low
				case 1:
					r.Low = math.Inf(-1)
				case 2:
					r.High = math.Inf(1)
				}
				c = c.WithRating(r)
			}
			kept = append(kept, inventory.HouseType{
				Kind: "bipolar", Claim: c, Alias: strings.TrimSpace(rapid.StringMatching("[A-Z0-9]{0,6}").Draw(t, "alias")),
				Source: strings.Join(strings.Fields(text.Draw(t, "source")), " "), Note: strings.Join(strings.Fields(text.Draw(t, "note")), " "),
			})
		}
		var file bytes.Buffer
		if err := writeTypes(&file, kept); err != nil {
			t.Fatal(err)
		}
		rows, err := entry.ReadTypes(&file, books)
		if err != nil {
			t.Fatal(err)
		}
		var back []inventory.HouseType
		for _, r := range rows {
			if len(r.Errors) > 0 {
				t.Fatalf("%v in\n%s", r.Errors, file.String())
			}
			for i := range r.Claim.Ratings {
				r.Claim.Ratings[i].Typed = ""
			}
			back = append(back, inventory.HouseType{Kind: r.Book.Kind, Claim: r.Claim, Alias: r.Alias, Source: r.Source, Note: r.Note})
		}
		less := func(a, b screening.Rating) bool { return string(a.Of)+a.At.String() < string(b.Of)+b.At.String() }
		diff := cmp.Diff(kept, back, cmpopts.EquateNaNs(), cmpopts.EquateApprox(1e-14, 0), cmpopts.EquateEmpty(), cmpopts.SortSlices(less),
			cmpopts.SortSlices(func(a, b screening.Trait) bool { return a.Name < b.Name }), cmp.Comparer(sameCondition))
		if diff != "" {
			t.Fatalf("(-kept +read again):\n%s", diff)
		}
	})
}
