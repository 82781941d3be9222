package marking

import (
	"strings"
	"testing"

	"goodbin/rules/internal/series"
)

// A damaged table is refused with the row and what is wrong with it.
func TestTablesAreChecked(t *testing.T) {
	var tt tables
	for _, c := range []struct {
		name  string
		read  func(string) error
		table string
		says  string
	}{
		{"a tolerance for nobody", tt.readTolerance, "letter,for,low,high,pf,order,note,source,status\nK,fish,-0.1,0.1,,0,,x,published\n", `"fish" is not any`},
		{"a tolerance the wrong way round", tt.readTolerance, "letter,for,low,high,pf,order,note,source,status\nK,any,0.1,-0.1,,0,,x,published\n", "not above low"},
		{"a letter of two", tt.readTolerance, "letter,for,low,high,pf,order,note,source,status\nKK,any,-0.1,0.1,,0,,x,published\n", "no single character"},
		{"a tolerance without a status", tt.readTolerance, "letter,for,low,high,pf,order,note,source,status\nK,any,-0.1,0.1,,0,,x,\n", "status"},
		{"a voltage of zero", tt.readVoltage, "code,use,volts,source,status\n2A,code,0,x,published\n", "not above zero"},
		{"a voltage for nothing", tt.readVoltage, "code,use,volts,source,status\n2A,fish,100,x,published\n", "is not code"},
		{"a position that no code has", tt.readCeramic, "position,character,low,high,order,note,source,status\nfish,X,1,1,0,,x,published\n", "no position"},
		{"a name without bounds", tt.readCeramicNames, "name,code,kind,low,high,note,source,status\nSL,,coefficient,,,,x,published\n", "no code"},
		{"a dielectric of an unknown kind", tt.readDielectrics, "letters,text,kind,word,mains,order,note,source,status\nMKT,x,fish,pet,,0,,x,published\n", "no kind"},
		{"a chip letter beyond a decade", tt.readChip, "letter,figures,order,note,source,status\nA,10.1,0,,x,published\n", "does not lie between"},
		{"a unit of nothing", tt.readUnits, "word,of,figure,exponent,scheme,order,note,source,status\nfish,fish,1,0,unit,0,,x,published\n", "nothing that a marking"},
		{"a unit of no scheme", tt.readUnits, "word,of,figure,exponent,scheme,order,note,source,status\nF,capacitance,1,0,fish,0,,x,published\n", "is not unit"},
		{"a year letter twice", tt.readYears, "letter,year,note,source,status\nA,1990,,x,published\nA,1991,,x,published\n", "stands twice"},
		{"an old value beyond a decade", tt.readOldValues, "figures,source,status\n12,x,published\n", "does not lie between"},
		{"an empty range", tt.readKindRanges, "kind,low,high,source,status\nfilm,2,1,x,published\n", "range is empty"},
		{"a scheme that nobody reads", func(s string) error { _, err := readSchemes(s); return err }, "id,scheme,of,kinds,rank,low,high,why,note,source,clause,status\nfish,x,capacitance,film,1,,,x,,x,,published\n", "no row for"},
	} {
		if err := c.read(c.table); err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: %v, want %q", c.name, err, c.says)
		}
	}
	if _, err := readColours(coloursCSV, "colour,bands,tolerance,order,note,source,status\nmauve,0,0.1,0,,x,published\n", capacitorColoursCSV); err == nil {
		t.Error("a tolerance of an unknown colour is read")
	}
	twice := capacitorColoursCSV + "bead,voltage,white,4,,x,published\n"
	if _, err := readColours(coloursCSV, colourToleranceCSV, twice); err == nil || !strings.Contains(err.Error(), "stands twice") {
		t.Errorf("a colour that means two things in one place: %v", err)
	}
}

// Every scheme of the table is reached by some print, and says why it stands where it does.
func TestEverySchemeIsReached(t *testing.T) {
	reached := map[string]bool{}
	for _, tt := range valueCases {
		for _, m := range decode(t, tt.text) {
			reached[m.Scheme] = true
			for _, p := range m.Parts {
				reached[p.Scheme] = true
			}
		}
	}
	for _, text := range []string{
		"М47", "X7R", "P3K", "NP0", "MKT", "X2", "C5", "7A", "7D", "942", "K24", "A", "235-6742", "H1015", "1974", "1208", "J", "2A", "4N7", "10mH", "22u", "P33",
		"brown black red gold", "brown black red gold red", "yellow violet black green", "white brown black red red brown", "red green black green silver brown",
		"brown black brown", "brown black yellow silver gold", "violet brown black brown green", "brown black yellow white red",
	} {
		for _, m := range decode(t, text) {
			reached[m.Scheme] = true
		}
	}
	for i, s := range schemes() {
		if !reached[s.name] {
			t.Errorf("no print of the tests is read by %s (%s)", schemeNames[i], s.name)
		}
		if s.why == "" && schemeID(i) != colourOhm {
			t.Errorf("%s does not say why it stands where it does", schemeNames[i])
		}
	}
}

// What counts as an old value is none of E12: parts of that value were made before the series, or are rare since.
func TestOldValuesAreOldOnly(t *testing.T) {
	count := 0
	for figures, old := range load().old {
		if !old {
			continue
		}
		count++
		if n := series.Coarsest(float64(figures)); n != 0 && n < 24 {
			t.Errorf("%d is a value of E%d", figures, n)
		}
	}
	if count < 10 {
		t.Errorf("%d old values", count)
	}
}
