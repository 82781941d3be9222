package electrolytic

import (
	_ "embed"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The criteria.
const (
	criterionCapacitance screening.Criterion = "capacitance"
	criterionLoss        screening.Criterion = "loss"
	criterionLeakage     screening.Criterion = "leakage"
	criterionCeiling     screening.Criterion = "leakage-ceiling"
	criterionSeries      screening.Criterion = "series" // only of parts with the signs of the electrolyte fault
)

// Years at which what is asked changes (house).
const (
	vintageBefore = 1980 // the vintage military leakage set is in use
	oldBefore     = 1985 // leakage is required at any voltage
)

// leakageVolts is the rated voltage above which leakage is required whatever the age (house).
const leakageVolts = 63

// roomTemperature is where leakage and tan δ are stated, °C (every sheet read).
const roomTemperature = 20

//go:embed leakage.csv
var leakageCSV string

// leakageRow is one printed form of a leakage limit. Its numbers are as printed: CV in µC, currents in µA.
type leakageRow struct {
	set                screening.LimitSet
	overVolts, toVolts float64
	after              float64 // s
	overCV, toCV       float64 // µC
	shape              string
	factor, plus       float64
	floor, cap         float64
	source             screening.Source
	note               string
}

func readLeakage(text string) ([]leakageRow, error) {
	t := book.ReadTable("leakage.csv", text)
	rows := make([]leakageRow, 0, len(t.Rows()))
	for _, row := range t.Rows() {
		r := leakageRow{
			set: screening.LimitSet(row.Required("set")), overVolts: row.NumberOr("over_volts", 0), toVolts: row.NumberOr("to_volts", math.Inf(1)),
			after: row.Number("after_s"), overCV: row.NumberOr("over_cv", 0), toCV: row.NumberOr("to_cv", math.Inf(1)),
			shape: row.Required("shape"), factor: row.Number("factor"), plus: row.NumberOr("plus_ua", 0), floor: row.NumberOr("floor_ua", 0),
			cap: row.NumberOr("cap_ua", math.Inf(1)), source: row.Source(), note: row.Text("note"),
		}
		if !slices.Contains([]string{"linear", "root", "per-microfarad"}, r.shape) {
			row.Errorf("shape", "%q is none of linear, root, per-microfarad", r.shape)
		}
		if r.overVolts >= r.toVolts || r.overCV >= r.toCV || r.after <= 0 || r.factor <= 0 {
			row.Errorf("set", "an empty range, or a time or factor that is not positive")
		}
		rows = append(rows, r)
	}
	return rows, t.Err()
}

func (r *leakageRow) covers(u unit) bool {
	cv := u.cv() * 1e6
	return u.volts > r.overVolts && u.volts <= r.toVolts && cv > r.overCV && cv <= r.toCV
}

// amperes returns the limit for a unit.
func (r *leakageRow) amperes(u unit) float64 {
	cv := u.cv() * 1e6
	var micro float64
	switch r.shape {
	case "root":
		micro = r.factor * math.Sqrt(cv)
	case "per-microfarad":
		micro = r.factor*1e3*u.farad*1e6 + r.plus
	default:
		micro = r.factor*cv + r.plus
	}
	return math.Min(math.Max(micro, r.floor), r.cap) * 1e-6
}

// formula renders the printed form with this unit's numbers: "0.01·2200 µF·35 V = 770 µA".
func (r *leakageRow) formula(u unit) string {
	var b strings.Builder
	c, v := microfarads(u.farad), quantity.Format(u.volts, quantity.Volt, 0)
	switch r.shape {
	case "root":
		fmt.Fprintf(&b, "%g·√(%s·%s)", r.factor, c, v)
	case "per-microfarad":
		fmt.Fprintf(&b, "%g mA/µF·%s", r.factor, c)
	default:
		fmt.Fprintf(&b, "%g·%s·%s", r.factor, c, v)
	}
	if r.plus > 0 {
		fmt.Fprintf(&b, " + %s", quantity.Format(r.plus*1e-6, quantity.Ampere, 0))
	}
	if r.floor > 0 {
		fmt.Fprintf(&b, ", at least %s", quantity.Format(r.floor*1e-6, quantity.Ampere, 0))
	}
	if !math.IsInf(r.cap, 1) {
		fmt.Fprintf(&b, ", at most %s", quantity.Format(r.cap*1e-6, quantity.Ampere, 0))
	}
	fmt.Fprintf(&b, " = %s", quantity.Format(r.amperes(u), quantity.Ampere, 3))
	return b.String()
}

// microfarads prints a capacitance as the trade does, in four figures: "2200 µF", never "2.2 mF" or "1e+04 µF".
func microfarads(c float64) string {
	return strconv.FormatFloat(book.Honest(c*1e6, 0, 4), 'f', -1, 64) + " µF"
}

// leakageSetFor returns the set that counts for a unit: vintage military for parts dated before 1980, non-polar for non-polar types, snap-in
// for snap-in and screw cans, else general.
func leakageSetFor(claim screening.Claim, u unit) screening.LimitSet {
	set := screening.GeneralSet
	switch {
	case nonPolar(claim):
		set = nonPolarSet
	case largeCan(claim):
		set = screening.SnapInSet
	}
	if year, ok := claim.Year(); ok && year < vintageBefore {
		rows := embedded().leakage
		for i := range rows {
			if rows[i].set == screening.VintageMilitarySet && rows[i].covers(u) {
				return screening.VintageMilitarySet
			}
		}
	}
	return set
}

// leakageNeed returns how much leakage is needed: above 63 V, before 1985, and on undated axial, can and screw types it decides.
func leakageNeed(claim screening.Claim, u unit) screening.Need {
	year, dated := claim.Year()
	if u.volts > leakageVolts || dated && year < oldBefore {
		return screening.Required
	}
	if !dated {
		switch claim.Trait(screening.TraitCase) {
		case caseAxial, caseCan, caseScrew:
			return screening.Required
		}
	}
	return screening.Wanted
}

// leakageLimits lists the leakage limits of every set for a unit, and the ceilings, each way that the part must hold.
func leakageLimits(limits []screening.Limit, claim screening.Claim, u *unit) []screening.Limit {
	for _, w := range ways(claim) {
		limits = leakageLimitsOf(limits, claim, u, w)
	}
	return limits
}

func leakageLimitsOf(limits []screening.Limit, claim screening.Claim, u *unit, w way) []screening.Limit {
	inUse, need := leakageSetFor(claim, *u), leakageNeed(claim, *u)
	rows := embedded().leakage
	least, longest := math.Inf(1), 0.0
	for i := range rows {
		row := &rows[i]
		if !row.covers(*u) || row.set == nonPolarSet && !nonPolar(claim) {
			continue
		}
		l := leakageLimit(u, w, row.after, row.amperes(*u), row.source)
		l.Need, l.Set, l.InUse, l.Note = need, row.set, row.set == inUse, row.note
		l.Formula = func() string { return row.formula(*u) }
		if l.InUse {
			least, longest = math.Min(least, l.High), math.Max(longest, row.after)
		}
		limits = append(limits, l)
	}
	return ceilings(limits, claim, u, w, least, longest)
}

func leakageLimit(u *unit, w way, after, high float64, source screening.Source) screening.Limit {
	return screening.Limit{
		On: w.on.Name, Unit: quantity.Ampere, Section: u.section, Criterion: w.leakage,
		At:  screening.At(screening.Voltage, u.volts).With(screening.After, after).With(screening.PartTemperature, roomTemperature),
		Low: math.Inf(-1), High: high, TreatHigh: screening.Reform, Source: source,
	}
}

// ceilings adds the bounds that no leakage limit may pass whatever CV says: 10 mA, and what heats the can by 10 K. They count where they
// are tighter than the limit in use.
func ceilings(limits []screening.Limit, claim screening.Claim, u *unit, w way, inUse, after float64) []screening.Limit {
	military := named("military-ceiling")
	l := leakageLimit(u, w, after, military.value, military.source)
	l.Criterion, l.Need, l.Set = w.ceiling, screening.Wanted, screening.VintageMilitarySet
	l.InUse = military.value < inUse
	l.Formula = func() string { return "10 mA whatever the capacitance" }
	limits = append(limits, l)
	if watts, ok := canPower(claim); ok {
		heat := leakageLimit(u, w, after, watts/u.volts, named("can-heat").source)
		heat.Criterion, heat.Need, heat.Set = w.ceiling, screening.Wanted, "can-heat"
		heat.InUse = heat.High < inUse
		heat.Formula = func() string {
			return fmt.Sprintf("%.2g W / %s = %s, which warms a %s mm can by 10 K", watts, quantity.Format(u.volts, quantity.Volt, 0),
				quantity.Format(watts/u.volts, quantity.Ampere, 2), claim.Trait(traitCanSize))
		}
		limits = append(limits, heat)
	}
	return limits
}

// publishedLeakage returns the published limit, general or of non-polar types, that a current after so many seconds at rated voltage can be
// held against: the one of the same or a shorter time. ok is false before the first minute, and where nothing is published.
func publishedLeakage(claim screening.Claim, u unit, after float64) (amperes float64, ok bool) {
	rows, set := embedded().leakage, screening.GeneralSet
	if nonPolar(claim) {
		set = nonPolarSet
	}
	latest := 0.0
	for i := range rows {
		r := &rows[i]
		if r.set == set && r.source.Status == screening.Published && r.covers(u) && r.after <= after && r.after > latest {
			latest, amperes, ok = r.after, r.amperes(u), true
		}
	}
	return amperes, ok
}
