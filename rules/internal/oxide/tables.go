package oxide

import (
	"fmt"
	"math"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Figure is one number with where it comes from: a plain ratio or SI.
type Figure struct {
	Value  float64
	Source screening.Source
}

// Tables is what a rulebook embeds.
type Tables struct {
	leakage []leakageRow
	loss    []lossRow
	figures map[string]Figure
}

// leakageRow is one printed form of a leakage limit: I = factor·CV, and at least the floor.
type leakageRow struct {
	technology         string // "" for every one
	set                screening.LimitSet
	overVolts, toVolts float64
	after              float64 // s
	factor             float64
	floor              float64 // A
	source             screening.Source
	note               string
}

// lossRow is one step of a ladder of tan δ at 120 Hz.
type lossRow struct {
	technology         string
	set                screening.LimitSet
	overFarad, toFarad float64
	tanDelta           float64
	source             screening.Source
	note               string
}

// The names that every figures table holds, by technology ("fall/solid") or for all of them ("fall").
const (
	figureFall    = "fall"         // of the capacitance by the end of life, a ratio
	figureRise    = "rise"         // the same upward
	figureLoss    = "loss"         // tan δ and ESR by the end of life over their limit
	figureLeakage = "leakage"      // leakage by the end of life over its limit
	figureShort   = "short"        // how many times its leakage limit a part passes that counts as shorted
	figureOhms    = "short-ohms"   // Ω; the most that a reading must show to be no short
	figureHalf    = "capacitance"  // the share of nominal below which a part is broken, whatever its series
	figureDrop    = "leakage-drop" // the share of the voltage that may stand across the resistor of a leakage test
)

var figureNames = []string{figureFall, figureRise, figureLoss, figureLeakage, figureShort, figureOhms, figureHalf, figureDrop}

// Read reads the three tables: leakage by technology, tan δ by technology and capacitance, single figures by name.
func Read(leakageCSV, lossCSV, figuresCSV string, technologies ...string) (*Tables, error) {
	t := &Tables{figures: map[string]Figure{}}
	leakage := book.ReadTable("leakage.csv", leakageCSV)
	for _, row := range leakage.Rows() {
		r := leakageRow{
			technology: row.Text("technology"), set: screening.LimitSet(row.Required("set")), overVolts: row.NumberOr("over_volts", 0),
			toVolts: row.NumberOr("to_volts", math.Inf(1)), after: row.Number("after_s"), factor: row.NumberOr("factor", 0),
			floor: row.NumberOr("floor_ua", 0) * 1e-6, source: row.Source(), note: row.Text("note"),
		}
		if r.overVolts >= r.toVolts || r.after <= 0 || r.factor <= 0 && r.floor <= 0 {
			row.Errorf("set", "an empty range, no time, or neither factor nor floor")
		}
		t.leakage = append(t.leakage, r)
	}
	loss := book.ReadTable("tan_delta.csv", lossCSV)
	for _, row := range loss.Rows() {
		r := lossRow{
			technology: row.Text("technology"), set: screening.LimitSet(row.Required("set")), overFarad: row.NumberOr("over_uf", 0) * 1e-6,
			toFarad: row.NumberOr("to_uf", math.Inf(1)) * 1e-6, tanDelta: row.Number("tan_delta"), source: row.Source(), note: row.Text("note"),
		}
		if r.overFarad >= r.toFarad || r.tanDelta <= 0 || r.tanDelta > 1 {
			row.Errorf("tan_delta", "a tan δ lies between 0 and 1, for a range of capacitance")
		}
		t.loss = append(t.loss, r)
	}
	figures := book.ReadTable("figures.csv", figuresCSV)
	for _, row := range figures.Rows() {
		name := row.Required("name")
		if _, twice := t.figures[name]; twice {
			row.Errorf("name", "%q stands twice", name)
		}
		t.figures[name] = Figure{row.Number("value"), row.Source()}
	}
	for _, table := range []*book.Table{leakage, loss, figures} {
		if err := table.Err(); err != nil {
			return nil, err
		}
	}
	for _, technology := range technologies {
		for _, name := range figureNames {
			if t.Named(name, technology).Source.Status == screening.NoStatus {
				return nil, fmt.Errorf("figures.csv: %s is missing for %s", name, technology)
			}
		}
	}
	return t, nil
}

// Named returns a figure of a technology, else the one for all of them; one that the tables do not hold has no status.
func (t *Tables) Named(name, technology string) Figure {
	if f, ok := t.figures[name+"/"+technology]; ok {
		return f
	}
	return t.figures[name]
}

// covers reports whether a row holds for a technology and a part.
func (r *leakageRow) covers(technology string, u capacitor.Unit) bool {
	return (r.technology == "" || r.technology == technology) && u.Volts > r.overVolts && u.Volts <= r.toVolts
}

// amperes returns the limit for a part.
func (r *leakageRow) amperes(u capacitor.Unit) float64 {
	return math.Max(r.factor*u.Farad*u.Volts, r.floor)
}

// formula renders the printed form with the part's numbers: "0.01·10 µF·16 V, at least 500 nA = 1.60 µA".
func (r *leakageRow) formula(u capacitor.Unit) string {
	var b strings.Builder
	if r.factor > 0 {
		fmt.Fprintf(&b, "%g·%s·%s", r.factor, capacitor.Farads(u.Farad), quantity.Format(u.Volts, quantity.Volt, 0))
		if r.floor > 0 {
			fmt.Fprintf(&b, ", at least %s", quantity.Format(r.floor, quantity.Ampere, 0))
		}
		fmt.Fprintf(&b, " = %s", quantity.Format(r.amperes(u), quantity.Ampere, 3))
		return b.String()
	}
	return quantity.Format(r.floor, quantity.Ampere, 3) + " whatever the capacitance"
}

// covers reports whether a step of a ladder holds for a technology and a part.
func (r *lossRow) covers(technology string, u capacitor.Unit) bool {
	slack := 1 + 1e-9 // 1.5 µF typed is 1.5e-06, a table's 1.5 times 1e-6 may be next to it
	return (r.technology == "" || r.technology == technology) && u.Farad > r.overFarad*slack && u.Farad <= r.toFarad*slack
}

// laxestLoss returns the largest tan δ that any ladder known allows a part, whatever its status.
func (t *Tables) laxestLoss(technology string, u capacitor.Unit) float64 {
	laxest := 0.0
	for i := range t.loss {
		if t.loss[i].covers(technology, u) {
			laxest = math.Max(laxest, t.loss[i].tanDelta)
		}
	}
	return laxest
}

// LeakageLimit returns the laxest leakage limit in use for a part, ampere: as of a new one.
func (t *Tables) LeakageLimit(technology string, u capacitor.Unit) float64 {
	laxest := 0.0
	for i := range t.leakage {
		if r := &t.leakage[i]; r.set == screening.GeneralSet && r.covers(technology, u) {
			laxest = math.Max(laxest, r.amperes(u))
		}
	}
	return laxest
}
