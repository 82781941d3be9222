package marking

import (
	"bytes"
	"encoding/csv"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"goodbin/screening"
)

// Bands as a resistor's: the meaning that stands first.
var bandCases = []struct {
	name, text       string
	value, tolerance float64
	source           string
}{
	{"1 kΩ 5 %", "brown black red gold", 1000, 0.05, "CHART (published)"},
	{"joined by dashes", "brown-black-red-gold", 1000, 0.05, "CHART (published)"},
	{"with commas and capitals", "Brown, Black, Red, Gold", 1000, 0.05, "CHART (published)"},
	{"letters of IEC 60757", "BN BK RD GD", 1000, 0.05, "IEC 60757 (from memory)"},
	{"letters joined", "BNBKRDGD", 1000, 0.05, "IEC 60757 (from memory)"},
	{"read from the other end", "gold red black brown", 1000, 0.05, "either end first"},
	{"4.7 kΩ 5 %", "yellow violet red gold", 4700, 0.05, "CHART (published)"},
	{"purple is violet", "yellow purple red gold", 4700, 0.05, "usage"},
	{"10 Ω 1 %", "brown black black gold brown", 10, 0.01, "CHART (published)"},
	{"10 Ω 1 % from the other end", "brown gold black black brown", 10, 0.01, "CHART (published)"},
	{"0.33 Ω 5 %", "orange orange silver gold", 0.33, 0.05, "colour table (derived)"},
	{"pink is ×0.001", "orange orange pink gold", 0.033, 0.05, "colour table (published)"},
	{"3 bands are ±20 %", "brown black red", 1000, 0.2, "CHART (published)"},
	{"no fourth band, said", "brown black red none", 1000, 0.2, "CHART (published)"},
	{"silver is ±10 %", "green blue orange silver", 56e3, 0.1, "CHART (published)"},
	{"6 bands", "brown black black brown brown red", 1000, 0.01, "CHART (published)"},
	{"499 Ω of E96 at 1 %", "yellow white white black brown", 499, 0.01, "E96 (published)"},
	{"green ±0.5 %", "brown black black red green", 10e3, 0.005, "CHART (published)"},
	{"blue ±0.25 %", "brown black black red blue", 10e3, 0.0025, "CHART (published)"},
	{"violet ±0.1 %", "brown black black red violet", 10e3, 0.001, "CHART (published)"},
}

func TestResistorBands(t *testing.T) {
	for _, tt := range bandCases {
		m := decode(t, tt.text)[0]
		if m.Of != r || !near(m.Value, tt.value) || !near(m.Low, tt.value*(1-tt.tolerance)) || !near(m.High, tt.value*(1+tt.tolerance)) {
			t.Errorf("%s: %s: %s %g to %g, want %g Ω ±%g; source: %s%s", tt.name, tt.text, m, m.Low, m.High, tt.value, tt.tolerance, tt.source,
				list(decode(t, tt.text)))
		}
	}
}

// Either end may be first: the direction that gives a value of a preferred series stands first (freshcircuits, published).
func TestThePreferredDirectionStandsFirst(t *testing.T) {
	for _, tt := range []struct {
		text  string
		value float64
		why   string
	}{
		{"brown yellow green red brown", 14.5e3, "from the other end 125·10⁴, and 1.25 is in no series"},
		{"brown red green yellow brown", 14.5e3, "the same, held the other way round"},
		{"brown green brown brown brown", 11.1e6, "as typed 151·10, and 1.51 is in no series"},
		{"brown brown brown green brown", 11.1e6, "the same, held the other way round"},
		{"red violet violet orange brown", 277e3, "from the other end 1.37 GΩ"},
	} {
		if m := decode(t, tt.text); !near(m[0].Value, tt.value) {
			t.Errorf("%s: %s first, want %g Ω: %s%s", tt.text, m[0], tt.value, tt.why, list(m))
		}
	}
}

// Grey: ±0.05 % by the older editions (CHART, published), ±0.01 % by that of 2016 (from memory); orange and yellow have older meanings.
func TestDisputedToleranceColours(t *testing.T) {
	for _, tt := range []struct {
		text         string
		x, tolerance float64
		status       screening.Status
	}{
		{"brown black black red grey", 10e3, 0.0005, screening.Published},
		{"brown black black red grey", 10e3, 0.0001, screening.FromMemory},
		{"brown black red grey", 1e3, 0.1, screening.FromMemory},
		{"brown black black red orange", 10e3, 0.0005, screening.Published},
		{"brown black red orange", 1e3, 0.03, screening.SecondHand},
		{"brown black black red yellow", 10e3, 0.0002, screening.Published},
		{"brown black red yellow", 1e3, 0.04, screening.SecondHand},
		{"brown black red yellow", 1e3, 0.05, screening.FromMemory},
	} {
		m, x := decode(t, tt.text), tt.x
		at := place(m, r, x, x*(1-tt.tolerance), x*(1+tt.tolerance))
		if at == 0 || m[at-1].Source.Status != tt.status || m[at-1].Note == "" && tt.status != screening.Published {
			t.Errorf("%s: ±%g stands at %d%s", tt.text, tt.tolerance, at, list(m))
		}
	}
}

// TCR in ppm/K (CHART; GOST 28883-90; published).
func TestSixthBand(t *testing.T) {
	for colour, want := range map[string]string{
		"black": "±250 ppm/K", "brown": "±100 ppm/K", "red": "±50 ppm/K", "orange": "±15 ppm/K", "yellow": "±25 ppm/K", "green": "±20 ppm/K",
		"blue": "±10 ppm/K", "violet": "±5 ppm/K", "grey": "±1 ppm/K",
	} {
		found := false
		for _, m := range decode(t, "yellow violet black brown brown "+colour) {
			found = found || m.Scheme == "resistor colours" && m.String() == "4.7 kΩ ±1 %, "+want
		}
		if !found {
			t.Errorf("%s is not %s:%s", colour, want, list(decode(t, "yellow violet black brown brown "+colour)))
		}
	}
}

// Capacitor colours, as candidates. Bead: ENDPROD; mica and paper: liquisearch; ceramic and polyester: tritium (colours published, the order
// of the dots from memory).
func TestCapacitorColours(t *testing.T) {
	for _, tt := range []struct{ name, text, scheme, want string }{
		{"bead 47 µF 16 V", "yellow violet black green", "tantalum bead colours", "47 µF, 16 V"},
		{"bead without a voltage", "brown black white", "tantalum bead colours", "1 µF"},
		{"bead 3.3 µF 6.3 V", "orange orange white yellow", "tantalum bead colours", "3.3 µF, 6.3 V"},
		{"bead with grey spot", "yellow violet grey pink", "tantalum bead colours", "470 nF, 35 V"},
		{"ceramic tubular N750 100 pF", "violet brown black brown green", "ceramic tubular colours", "100 pF ±5 %, −750 ppm/K"},
		{"ceramic tubular NP0 4.7 pF ±0.25 pF", "black yellow violet white grey", "ceramic tubular colours", "4.7 pF"},
		{"polyester 100 nF 10 % 250 V", "brown black yellow white red", "polyester film bands", "100 nF ±10 %, 250 V"},
		{"mica six dots, multiplier last", "white brown black red red brown", "moulded mica or paper dots", "100 pF ±2 %"},
		{"mica six dots, multiplier first", "white brown black brown red red", "moulded mica or paper dots", "100 pF ±2 %"},
		{"old mica, three figures", "red green black green silver brown", "moulded mica dots of three figures", "2.5 nF ±10 %, 500 V"},
		{"three mica dots", "brown black brown", "three mica dots", "100 pF ±20 %"},
		{"paper bands", "brown black yellow silver gold", "moulded paper bands", "100 nF ±10 %, 1 kV"},
		{"choke 100 µH 10 %", "brown black brown silver", "inductor colours", "100 µH ±10 %"},
		{"military fifth band", "brown black red gold red", "resistor colours with failure rate", "1 kΩ ±5 %"},
	} {
		found := false
		for _, m := range decode(t, tt.text) {
			found = found || m.Scheme == tt.scheme && strings.HasPrefix(m.String(), tt.want)
		}
		if !found {
			t.Errorf("%s: %s is not %s by %s:%s", tt.name, tt.text, tt.want, tt.scheme, list(decode(t, tt.text)))
		}
	}
}

// What the npm package resistor-data 1.1.1 gets wrong, and what is right: it truncates instead of rounding.
var resistorDataIsWrong = map[string]struct{ theirs, right float64 }{
	"grey red green gold":           {8199999, 8200000},
	"red black green yellow brown":  {2049999, 2050000},
	"yellow black red yellow brown": {4019999, 4020000},
	"yellow black red brown brown":  {4019, 4020},
}

// Four bands with the values of E24 and five with those of E96, from 10 Ω up.
func TestBandsAgainstResistorData(t *testing.T) {
	f, err := os.Open("testdata/resistor-data.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	reader := csv.NewReader(f)
	reader.Comment = '#'
	rows, err := reader.ReadAll()
	if err != nil || len(rows) != 1+6*24+5*96 {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	wrong := 0
	for _, row := range rows[1:] {
		theirs, err1 := strconv.ParseFloat(row[2], 64)
		percent, err2 := strconv.ParseFloat(row[3], 64)
		if err1 != nil || err2 != nil {
			t.Fatalf("row %q", row)
		}
		m := decode(t, row[0])[0]
		if known, ok := resistorDataIsWrong[row[0]]; ok && known.theirs == theirs {
			wrong++
			theirs = known.right
		}
		if m.Of != r || m.Value != theirs || !near(m.High, theirs*(1+percent/100)) {
			t.Errorf("%s: %s (%g Ω), the reference has %s (%g Ω ±%g %%)", row[0], m, m.Value, row[1], theirs, percent)
		}
	}
	if wrong != len(resistorDataIsWrong) {
		t.Errorf("%d of the rows known as wrong were seen, want %d: drop those that are right now", wrong, len(resistorDataIsWrong))
	}
}

// resistorDataVariable names the directory of the npm package, where Node does not find it by itself.
const resistorDataVariable = "RESISTOR_DATA"

// TestRecordedResistorDataIsWhatItPrints runs where Node and the package are present.
func TestRecordedResistorDataIsWhatItPrints(t *testing.T) {
	node, err := exec.LookPath("node")
	if err != nil {
		t.Skip("there is no node")
	}
	module := os.Getenv(resistorDataVariable)
	if module == "" {
		module = "resistor-data"
	}
	if err := exec.Command(node, "-e", "require(process.argv[1])", module).Run(); err != nil { //nolint:gosec // the tester's own module
		t.Skipf("node finds no %s; %s may name its directory", module, resistorDataVariable)
	}
	got, err := exec.Command(node, "testdata/resistor-data.js", module).Output() //nolint:gosec // the tester's own module
	if err != nil {
		t.Fatal(err)
	}
	recorded, err := os.ReadFile("testdata/resistor-data.csv")
	if err != nil {
		t.Fatal(err)
	}
	for bytes.HasPrefix(recorded, []byte("#")) {
		_, recorded, _ = bytes.Cut(recorded, []byte("\n"))
	}
	if diff := cmp.Diff(string(recorded), string(got)); diff != "" {
		t.Errorf("recorded, and printed by %s today: -recorded +today\n%s", module, diff)
	}
}
