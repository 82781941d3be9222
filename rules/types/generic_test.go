package types

import (
	"math"
	"strings"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestEveryFileOfTheGeneralFormatKeepsItsPins(t *testing.T) {
	entries, err := files.ReadDir(".")
	if err != nil {
		t.Fatal(err)
	}
	read := 0
	for _, e := range entries {
		kind := strings.TrimSuffix(e.Name(), ".csv")
		rows := Builtin().Rows(screening.Kind(kind))
		if len(rows) == 0 {
			continue // one of its own format, whose tests stand elsewhere
		}
		read++
		text, _ := files.ReadFile(e.Name())
		for _, row := range rows {
			if row.Source.Document == "" || row.Source.Status == screening.NoStatus || row.Kind != screening.Kind(kind) {
				t.Errorf("%s %s: source %v, kind %s", kind, row.Type, row.Source, row.Kind)
			}
			if pinout := row.Trait(screening.TraitPinout); !strings.Contains(string(text), pinout) {
				t.Errorf("%s %s: pinout %q is not the file's", kind, row.Type, pinout)
			}
			for _, r := range row.Ratings {
				if r.Source.Status == screening.NoStatus || math.IsNaN(r.Low) || math.IsNaN(r.High) || r.Low > r.High || r.Typed != "" {
					t.Errorf("%s %s: %+v", kind, row.Type, r)
				}
			}
		}
	}
	if read < 5 {
		t.Errorf("%d files of the general format", read)
	}
}

func TestCellsOfTheGeneralFormat(t *testing.T) {
	head := "type,alias,channel,rated:vdss,rated:rds-on,rated:idss,pinout,case,source,status,except,note\n"
	for _, tt := range []struct {
		name, row string
		of        screening.Characteristic
		nominal   float64
		low, high float64
		at        screening.Condition
		status    screening.Status
	}{
		{"a value", "X1,,n,60V,,,,,sheet,published,,", "vdss", 60, 60, 60, screening.Condition{}, screening.Published},
		{
			"a bound with named conditions", `X1,,n,,"..44mohm@vgs=10V,id=16A",,,,sheet,published,,`, "rds-on", math.NaN(), math.Inf(-1), 0.044,
			screening.At(screening.VGS, 10).With(screening.ID, 16), screening.Published,
		},
		{
			"a range; bare volts are VDS where the definition says so", "X1,,n,,,2mA..20mA@15V,,,sheet,published,,", "idss", math.NaN(), 2e-3, 20e-3,
			screening.At(screening.VDS, 15), screening.Published,
		},
		{"a figure of another status", "X1,,n,60V,,,,,sheet,published,vdss=from memory,", "vdss", 60, 60, 60, screening.Condition{}, screening.FromMemory},
	} {
		table := newContent()
		if err := table.readKind("mosfet", head+tt.row+"\n"); err != nil {
			t.Errorf("%s: %v", tt.name, err)
			continue
		}
		row, _ := table.lookup("mosfet", "X1")
		r, ok := row.Rating(tt.of)
		same := r.Nominal == tt.nominal || math.IsNaN(r.Nominal) && math.IsNaN(tt.nominal)
		if !ok || !same || r.Low != tt.low || r.High != tt.high || r.At != tt.at || r.Source.Status != tt.status || row.Trait("channel") != "n" {
			t.Errorf("%s: %+v, traits %v", tt.name, r, row.Traits)
		}
	}
	for name, text := range map[string]string{
		"no source":               head + "X1,,n,60V,,,,,,published,,\n",
		"a status that is none":   head + "X1,,n,60V,,,,,sheet,certain,,\n",
		"a row that says nothing": head + "X1,,,,,,,,sheet,published,,\n",
		"a type twice":            head + "X1,,n,60V,,,,,sheet,published,,\nx-1,,n,60V,,,,,sheet,published,,\n",
		"a wrong unit":            head + "X1,,n,60A,,,,,sheet,published,,\n",
		"no condition":            head + "X1,,n,60V,..1ohm@vxx=1V,,,,sheet,published,,\n",
		"upside down":             head + "X1,,n,60V,,20mA..2mA,,,sheet,published,,\n",
		"no alias column":         "type,rated:vdss,source,status,except,note\nX1,60V,sheet,published,,\n",
	} {
		if err := newContent().readKind("mosfet", text); err == nil {
			t.Errorf("%s is read without an error", name)
		}
	}
	if got := unitOf("..5nA@10V"); got != quantity.Ampere {
		t.Errorf("unit of ..5nA is %v", got)
	}
	if got := unitOf("110..220"); got != quantity.One {
		t.Errorf("unit of 110..220 is %v", got)
	}
}
