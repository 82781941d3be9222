package zener

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The words that a limit carries where the claim is not enough to hold anything against.
const (
	noClaim   = "nothing is claimed: its voltage is taken as measured"
	noCurrent = "the current at which its voltage is printed is not known: state it (izt=5mA), or take the part as measured"
)

func limit(of screening.Definition, criterion screening.Criterion, need screening.Need) screening.Limit {
	return screening.Limit{
		On: of.Name, Unit: of.Unit, Criterion: criterion, Low: math.Inf(-1), High: inf, Need: need, Set: screening.GeneralSet, InUse: true,
	}
}

// mostLimits is how many limits a Zener of the table has.
const mostLimits = 4

func limits(c screening.Claim) ([]screening.Limit, error) {
	all := append(make([]screening.Limit, 0, mostLimits), voltageLimit(c))
	if r, ok := slopeMost(c); ok {
		izt, _ := testCurrent(c)
		l := limit(ZZ, slopeCriterion, screening.Wanted)
		l.At, l.High, l.Source = screening.At(screening.Current, izt), r.High, book.SourceOf(&r)
		all = append(all, l)
	}
	for _, r := range c.Ratings {
		if v, ok := r.At.Get(screening.Voltage); ok && v > 0 && r.Of == screening.IR.Name && !math.IsInf(r.High, 1) {
			l := limit(screening.IR, leakageCriterion, screening.Wanted)
			l.At = screening.At(screening.Voltage, v).With(screening.PartTemperature, junction.Reference)
			l.High, l.Source = r.High, book.SourceOf(&r)
			all = append(all, l)
		}
	}
	f := load().figures["forward"]
	l := limit(screening.VF, forwardCriterion, screening.Wanted)
	l.At, l.Low, l.High, l.Source = screening.At(screening.Current, testerCurrent), f.low, f.high, f.source
	return append(all, l), nil
}

// voltageLimit is the one limit that a Zener is bought for. Without a claim, or without the current that belongs to it, it is asked for and
// held against nothing: see adjust.
func voltageLimit(c screening.Claim) screening.Limit {
	l := limit(VZ, voltageCriterion, screening.Required)
	izt, known := testCurrent(c)
	if known {
		l.At = screening.At(screening.Current, izt)
	}
	low, high, source, ok := band(c)
	switch {
	case !ok:
		l.Source, l.Note = screening.Source{Document: "no voltage is claimed", Status: screening.House}, noClaim
	case !known:
		l.Low, l.High, l.Source, l.Note = low, high, source, noCurrent
	default:
		l.Low, l.High, l.Source = low, high, source
		l.Formula = func() string { return bandFormula(c, low, high) }
	}
	return l
}

func bandFormula(c screening.Claim, low, high float64) string {
	vz, _ := c.Rating(VZ.Name, "")
	if math.IsInf(low, 0) || math.IsInf(high, 0) {
		return vz.String() + " as claimed"
	}
	text := quantity.Format(low, quantity.Volt, 0) + " to " + quantity.Format(high, quantity.Volt, 0)
	if pointlike(vz) {
		t, _ := c.Rating(screening.Tolerance.Name, "")
		return fmt.Sprintf("%s %s = %s", volts(vz.Nominal), t, text)
	}
	if name := c.Trait(screening.TraitType); name != "" && vz.Typed == "" {
		if t, even := evenTolerance(vz, low, high); even {
			return fmt.Sprintf("%s: %s ±%.3g %% = %s", name, volts(vz.Nominal), 100*t, text)
		}
		return name + " is printed as " + text
	}
	return text + " as claimed"
}

// evenTolerance returns the tolerance that bounds lie at on both sides of the nominal, in whole tenths of a percent; not so for bounds that a
// sheet rounds.
func evenTolerance(vz screening.Rating, low, high float64) (tolerance float64, even bool) {
	if !vz.HasNominal() {
		return 0, false
	}
	t := math.Round(1e3*(high/vz.Nominal-1)) / 1e3
	return t, math.Abs(high/vz.Nominal-1-t) < 1e-9 && math.Abs(1-low/vz.Nominal-t) < 1e-9
}
