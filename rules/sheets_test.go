package rules_test

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"goodbin/rules"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// The type tables are read before any rulebook is known. What they read is what the rulebook of the kind says of the same cell: the name, its
// unit, which voltage a condition without a name is, and the words that a trait takes.
func TestTypeTablesSayWhatTheirRulebooksUnderstand(t *testing.T) {
	books, checked := rules.All(), 0
	for _, kind := range types.Builtin().Kinds() {
		b, ok := books.Find(kind)
		if !ok {
			t.Errorf("types/%s.csv is the table of no kind", kind)
			continue
		}
		for _, row := range types.Builtin().Rows(kind) {
			for _, r := range row.Ratings {
				f, ok := b.ClaimField(r.Of)
				if kind == types.Zener && r.Of == "izm" {
					continue // kept to be shown; nothing is judged by it, so nobody is asked to claim it
				}
				if !ok || f.Trait || f.Unit != r.Unit {
					t.Errorf("%s %s: a rating %s in %v, which the rulebook does not claim so", kind, row.Type, r.Of, r.Unit)
				}
				checked++
			}
			for _, trait := range row.Traits {
				p, err := entry.Words(b, []string{trait.Name + "=" + trait.Text})
				if err != nil || p.Claim.Trait(trait.Name) != trait.Text {
					t.Errorf("%s %s: %s %q reads as %q, %v", kind, row.Type, trait.Name, trait.Text, p.Claim.Trait(trait.Name), err)
				}
			}
		}
		for name, cells := range generalTable(t, string(kind)) {
			row, _ := types.Builtin().Lookup(kind, name)
			for of, cell := range cells {
				f, _ := b.ClaimField(screening.Characteristic(of))
				want, err := entry.Rating(f, screening.Condition{}, cell, "")
				got, ok := row.Rating(screening.Characteristic(of))
				if err != nil || !ok || got.At != want.At || got.Low != want.Low || got.High != want.High || got.HasNominal() != want.HasNominal() {
					t.Errorf("%s %s: %s=%s is read as %v at %v; the rulebook says %v at %v, %v", kind, name, of, cell, got, got.At, want, want.At, err)
				}
			}
		}
	}
	if checked < 1000 {
		t.Errorf("only %d ratings were checked", checked)
	}
}

// generalTable returns the ratings of a table in the general format as they stand in its file, by type and name; nil where a kind has none.
func generalTable(t *testing.T, kind string) map[string]map[string]string {
	t.Helper()
	f, err := os.Open(filepath.Join("types", kind+".csv"))
	if err != nil {
		return nil
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	records, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	all := map[string]map[string]string{}
	for _, record := range records[1:] {
		cells := map[string]string{}
		for i, column := range records[0] {
			if of, rated := strings.CutPrefix(column, "rated:"); rated && record[i] != "" {
				cells[of] = record[i]
			}
		}
		all[record[0]] = cells
	}
	return all
}
