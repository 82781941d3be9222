package mainscap

import (
	_ "embed"
	"math"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
)

var (
	//go:embed classes.csv
	classesCSV string
	//go:embed limits.csv
	limitsCSV string
)

// class is one X or Y class of IEC 60384-14.
type class struct {
	place   string
	impulse float64 // V up to 1 µF; 0 where none is known
	root    bool    // above 1 µF it is divided by √(C/µF)
	source  screening.Source
}

// asked is what data sheets ask of one technology.
type asked struct {
	words      string
	hertz, tan float64
	tanSource  screening.Source
	insulation capacitor.Insulation // no status where nothing is stated
	volts      float64              // at which insulation is stated
}

type tableSet struct {
	classes map[string]class
	asked   map[string]asked
}

func readTables(classesText, limitsText string) (tableSet, error) {
	t := tableSet{map[string]class{}, map[string]asked{}}
	classes := book.ReadTable("classes.csv", classesText)
	for _, row := range classes.Rows() {
		t.classes[row.Required("class")] = class{
			place: row.Required("place"), impulse: row.NumberOr("impulse_v", 0), root: row.Text("above_1uf") == "root", source: row.Source(),
		}
	}
	if err := classes.Err(); err != nil {
		return t, err
	}
	limits := book.ReadTable("limits.csv", limitsText)
	source := func(row book.Row, of string) screening.Source {
		status, ok := screening.StatusNamed(row.Required(of + "_status"))
		if !ok {
			row.Errorf(of+"_status", "%q is no status", row.Text(of+"_status"))
		}
		return screening.Source{Document: row.Required(of + "_source"), Clause: row.Text(of + "_clause"), Status: status}
	}
	for _, row := range limits.Rows() {
		a := asked{words: row.Required("words"), hertz: row.Number("hertz"), tan: row.Number("tan_delta"), tanSource: source(row, "tan")}
		if row.Has("ir_volts") {
			a.volts = row.Number("ir_volts")
			a.insulation = capacitor.Insulation{
				Ohms: row.NumberOr("ir_ohms", math.Inf(1)), Seconds: row.NumberOr("ir_seconds", math.Inf(1)), Source: source(row, "ir"),
			}
		}
		t.asked[row.Required("technology")] = a
	}
	return t, limits.Err()
}

// tables panics on a bad table; TestEmbeddedTablesLoad reads both.
var tables = sync.OnceValue(func() tableSet {
	t, err := readTables(classesCSV, limitsCSV)
	if err != nil {
		panic("mains-capacitor: embedded tables: " + err.Error())
	}
	return t
})
