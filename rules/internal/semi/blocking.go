package semi

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	// BlocksAt is the voltage that shows that two leads block at all: the 2 V of a diode test less its error (house).
	BlocksAt = 1.9
	// UsualSupply is the voltage that a bench has, V (house).
	UsualSupply = 30.0
	// testCurrent is what a blocking test is limited to even into a short, A (house).
	testCurrent = 1e-3
)

// Blocking is a pair of leads that must block: the criteria it makes, what is read, and what is claimed.
type Blocking struct {
	Volts, Leak                    screening.Definition
	Across                         screening.Variable // the voltage that Leak is taken at; NoVariable is Voltage itself
	Required, Breakdown, Leakage   screening.Criterion
	Most                           Figure // the most that it may leak before it does not block, at whatever voltage
	Rated                          float64
	RatedSource                    screening.Source // of Rated
	Lead1, Lead2, Tied, Aim, Typed string           // for words: "drain", "source", "gate tied to source", what it is
}

// Rate takes the rating that the leads claim to stand and the sheet's own leakage from a claim.
func (b Blocking) Rate(c screening.Claim, stands screening.Definition) Blocking {
	b.Rated = nan
	if r, ok := c.Rating(stands.Name, ""); ok && r.Low > 0 && !math.IsInf(r.Low, 1) {
		b.Rated, b.RatedSource = r.Low, book.SourceOf(&r)
	}
	if r, _, ok := b.sheet(c); ok && r.High > b.Most.High {
		b.Most.High, b.Most.Source = r.High, book.SourceOf(&r)
	}
	return b
}

func (b Blocking) across() screening.Variable {
	if b.Across == screening.NoVariable {
		return screening.Voltage
	}
	return b.Across
}

func (b Blocking) sheet(c screening.Claim) (screening.Rating, float64, bool) {
	r, ok := c.Rating(b.Leak.Name, "")
	v, stated := r.At.Get(b.across())
	return r, v, ok && stated && v > 0 && !math.IsInf(r.High, 1)
}

// Supply is a voltage that a bench has and that the part claims to block, V.
func (b Blocking) Supply() float64 {
	if math.IsNaN(b.Rated) {
		return UsualSupply
	}
	return math.Min(b.Rated, UsualSupply)
}

// Limits ask that the leads block at whatever voltage there was, by the volts that they stood or by the current that leaked; hold a measured
// breakdown against the rating; and the leakage at the sheet's voltage against the sheet.
func (b Blocking) Limits(all []screening.Limit, c screening.Claim) []screening.Limit {
	stands := Open(b.Volts, b.Required)
	stands.Low = BlocksAt
	stands.Source = screening.Source{Document: "a diode test that shows OL, 2 V less its error", Status: screening.House}
	stands.Note = b.Tied + "; as far as the bench goes: what is proved is said with the verdict"
	leaks := Open(b.Leak, b.Required)
	leaks.High, leaks.Source = b.Most.High, b.Most.Source
	leaks.At = screening.At(b.across(), b.Supply()).With(screening.PartTemperature, junction.Reference)
	leaks.Note = "at whatever voltage is stated, from " + Volts(BlocksAt) + " up"
	all = append(all, stands, leaks)
	if !math.IsNaN(b.Rated) {
		l := Open(b.Volts, b.Breakdown)
		l.Low, l.Source, l.Need = b.Rated, b.RatedSource, screening.Wanted
		l.Note = "a breakdown above the rating is normal and no new rating; below it the part is damaged"
		all = append(all, l)
	}
	if r, v, ok := b.sheet(c); ok && b.Leakage != "" {
		at := screening.At(b.across(), v).With(screening.PartTemperature, junction.Reference)
		within := LimitOf(b.Leak, b.Leakage, &r)
		within.At, within.Need = at, screening.Wanted
		if r.High >= b.Most.High {
			return append(all, within)
		}
		within.Grade = screening.WithinSpec
		loose := leaks
		loose.Criterion, loose.At, loose.Need, loose.Grade, loose.Note = b.Leakage, at, screening.Wanted, screening.Serviceable, ""
		all = append(all, within, loose)
	}
	return all
}

// Convert brings a leakage to a limit's voltage and to 25 °C; it reports false for any other reading.
func (b Blocking) Convert(part screening.Part, r screening.Reading, l screening.Limit) (screening.Conversion, bool) {
	if l.On != b.Leak.Name || l.Criterion != b.Required && l.Criterion != b.Leakage {
		return screening.Conversion{}, false
	}
	return junction.Bring(part, r, l, junction.Rule{
		Across: b.across(), AnyVoltage: l.Criterion == b.Required, LeastVoltage: BlocksAt,
	}), true
}

// Tidy states a limit that holds at whatever voltage is stated at the reading's, and leaves it to Untested to say how far blocking was
// proved.
func (b Blocking) Tidy(f *screening.Finding) {
	switch {
	case f.Limit.Criterion == b.Breakdown && f.Outcome == screening.Missing:
		f.Wants = screening.Gap{}
	case f.Limit.Criterion == b.Required && f.Limit.On == b.Volts.Name && f.Reading == nil:
		f.Why = "whether it blocks was not tried"
	case f.Limit.Criterion == b.Required && f.Limit.On == b.Leak.Name && f.Outcome != screening.Missing && f.Reading != nil:
		if v, ok := f.Reading.At.Get(b.across()); ok {
			f.Limit.At = f.Limit.At.With(b.across(), v)
		}
		if c := f.Converted; c != nil && c.U == 0 && c.Reading.Value == f.Reading.Value && c.Reading.Sense == f.Reading.Sense {
			f.Converted = nil
		}
	}
}

// Proven is the highest voltage at which the leads were seen to block, V; 0 where it was not tried.
func (b Blocking) Proven(findings []screening.Finding) float64 {
	var proven float64
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != b.Required || f.Outcome != screening.Pass || f.Reading == nil {
			continue
		}
		v := f.Reading.Value
		if f.Limit.On == b.Leak.Name {
			v, _ = f.Reading.At.Get(b.across())
		}
		proven = math.Max(proven, math.Abs(v))
	}
	return proven
}

// Untested says how far blocking was proved.
func (b Blocking) Untested(findings []screening.Finding) []string {
	switch proven := b.Proven(findings); {
	case proven == 0:
	case math.IsNaN(b.Rated):
		return []string{b.Aim + " untested above " + plainVolts(proven) + " (no rating known)"}
	case proven < b.Rated:
		return []string{fmt.Sprintf("%s untested above %s (rated %s)", b.Aim, plainVolts(proven), plainVolts(b.Rated))}
	}
	return nil
}

// plainVolts writes a voltage as it stands on parts: "1000 V", never "1 kV".
func plainVolts(x float64) string { return fmt.Sprintf("%g V", x) }

// Recipes say how to prove blocking: with a diode test, and with a supply and a resistor.
func (b Blocking) Recipes(l screening.Limit, plus, minus string) []screening.Recipe {
	var all []screening.Recipe
	volts := b.Supply()
	switch {
	case l.On == b.Volts.Name && l.Criterion == b.Required:
		all = append(all, screening.Recipe{
			Title: b.Aim + ", with a diode test",
			Lines: []string{
				b.Tied + "; red probe on the " + plus + ", black on the " + minus + ": a sound part shows OL; type " + string(b.Volts.Name) + "=" + b.Typed,
				"any number of volts is leakage or a breakdown: type that",
			},
			Values: map[string]float64{"supply": b.Volts.Over.Value}, Source: book.Practice,
		})
	case l.On == b.Volts.Name && l.Criterion == b.Breakdown:
		volts = l.Low
	case l.On == b.Leak.Name:
		if v, ok := l.At.Get(b.across()); ok {
			volts = v
		}
	default:
		return nil
	}
	return append(all, b.supplyRecipe(volts, plus, minus))
}

// supplyRecipe limits the current to 1 mA into a short: R = V/1 mA, P = V·1 mA.
func (b Blocking) supplyRecipe(volts float64, plus, minus string) screening.Recipe {
	ohms, watts := volts/testCurrent, volts*testCurrent
	at := Typed(volts, quantity.Volt)
	lines := []string{
		fmt.Sprintf("%s; supply %s, its plus through %s (%s into a short) to the %s, its minus to the %s", b.Tied, Volts(volts), Ohms(ohms),
			Watts(watts), plus, minus),
		fmt.Sprintf("read the volts across the resistor; volts ÷ %s is the leakage. Near 0 V it blocks: type %s=>%s, or %s@%s=…", Ohms(ohms),
			b.Volts.Name, at, b.Leak.Name, at),
		"if the resistor takes volts, the rest stands across the part: that is its breakdown, type it as " + string(b.Volts.Name),
	}
	if volts > book.TouchVoltage {
		lines = append([]string{"only with the caution for this voltage; a lower one proves less, and that is said with the verdict"}, lines...)
	}
	return screening.Recipe{
		Title: b.Aim + " at " + plainVolts(volts), Lines: lines, Source: book.Practice,
		Values: map[string]float64{"supply": volts, "series-resistance": ohms, "resistor-power": watts, "test-current": testCurrent},
	}
}

// Cautions warn of the current of a blocking test, and where the rating lies above 60 V of the supply that would prove it.
func (b Blocking) Cautions() []screening.Caution {
	supply := b.Supply()
	ohms, watts := supply/testCurrent, supply*testCurrent
	all := []screening.Caution{{
		Code: "blocking-test",
		Text: fmt.Sprintf("limit every blocking test to %s: %s in series at %s (%s into a short). Without it one slip destroys a good part",
			Amps(testCurrent), Ohms(ohms), Volts(supply), Watts(watts)),
		Values: map[string]float64{"supply": supply, "series-resistance": ohms, "resistor-power": watts}, Source: book.Practice,
	}}
	if !(b.Rated > book.TouchVoltage) {
		return all
	}
	return append(all, book.TestVoltage(b.Rated, testCurrent))
}
