package electrolytic

import (
	_ "embed"
	"fmt"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

//go:embed figures.csv
var figuresCSV string

// figure is one published or stated number with where it comes from, SI or a plain ratio.
type figure struct {
	value  float64
	source screening.Source
}

func readFigures(text string) (map[string]figure, error) {
	t := book.ReadTable("figures.csv", text)
	figures := make(map[string]figure, len(t.Rows()))
	for _, row := range t.Rows() {
		name := row.Required("name")
		if _, twice := figures[name]; twice {
			row.Errorf("name", "%q stands twice", name)
		}
		figures[name] = figure{row.Number("value"), row.Source()}
	}
	for _, name := range figureNames {
		if _, ok := figures[name]; !ok {
			return nil, fmt.Errorf("figures.csv: %s is missing", name)
		}
	}
	return figures, t.Err()
}

var figureNames = []string{
	"tolerance-modern", "tolerance-old-low", "tolerance-old-high", "serviceable-capacitance", "serviceable-loss", "esr-ratio",
	"military-ceiling", "can-heat", "leakage-doubling-low", "leakage-doubling-high", "reform-current", "reform-ohms-low",
	"reform-ohms-high", "reform-volts", "rest-min", "rest-max",
}

// tables is everything embedded, read once.
type tables struct {
	figures map[string]figure
	leakage []leakageRow
	loss    []lossRow
}

func readTables() (tables, error) {
	var t tables
	var err error
	if t.figures, err = readFigures(figuresCSV); err != nil {
		return t, err
	}
	if t.leakage, err = readLeakage(leakageCSV); err != nil {
		return t, err
	}
	t.loss, err = readLoss(tanDeltaCSV, t.figures["serviceable-loss"].source)
	return t, err
}

// embedded panics on a bad table; TestEmbeddedTablesLoad reads every one of them.
var embedded = sync.OnceValue(func() tables {
	t, err := readTables()
	if err != nil {
		panic("electrolytic: embedded tables: " + err.Error())
	}
	return t
})

func named(name string) figure { return embedded().figures[name] }
