package capacitor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Unit is one section of a capacitor with what it claims; a part without sections is one unit.
type Unit struct {
	Section         string
	Farad           float64 // nominal capacitance
	Volts           float64 // rated voltage; 0 where none is claimed
	Low, High       float64 // tolerance as ratios: −0.1, +0.1
	ToleranceSource screening.Source
}

// Bottom returns the lowest capacitance inside the tolerance, farad.
func (u Unit) Bottom() float64 { return u.Farad * (1 + u.Low) }

// Top returns the highest capacitance inside the tolerance, farad: the worst case for stored charge.
func (u Unit) Top() float64 { return u.Farad * (1 + u.High) }

// Span is what a kind's capacitances may be, farad: beyond it a prefix is wrong.
type Span struct {
	Kind        string // for the error: "a film capacitor"
	Least, Most float64
}

// The rated voltages that a claim may state, V: beyond them a prefix is wrong (house).
const leastVolts, mostVolts = 1.0, 100e3

// Units lists the sections of a completed claim. The error names what is missing or impossible.
func Units(claim screening.Claim, span Span) ([]Unit, error) {
	sections := claim.Sections()
	all := make([]Unit, 0, len(sections))
	for _, s := range sections {
		u := Unit{Section: s}
		var err error
		if u.Farad, err = nominal(claim, screening.Capacitance, s, span.Kind, span.Least, span.Most); err != nil {
			return nil, err
		}
		if _, claimed := claim.Rating(screening.RatedVoltage.Name, s); claimed {
			if u.Volts, err = nominal(claim, screening.RatedVoltage, s, span.Kind, leastVolts, mostVolts); err != nil {
				return nil, err
			}
		}
		t, ok := claim.Rating(screening.Tolerance.Name, s)
		if !ok {
			return nil, fmt.Errorf("tolerance: none is claimed; type one such as K or 10%%")
		}
		if u.Low, u.High, err = toleranceBounds(t); err != nil {
			return nil, err
		}
		u.ToleranceSource = toleranceSource(t)
		all = append(all, u)
	}
	return all, nil
}

// UnitOf returns the unit of a section, the first where there is none of that name, and whether the claim can be read at all.
func UnitOf(claim screening.Claim, span Span, section string) (Unit, bool) {
	us, err := Units(claim, span)
	if err != nil {
		return Unit{}, false
	}
	for _, u := range us {
		if u.Section == section {
			return u, true
		}
	}
	return us[0], true
}

func nominal(claim screening.Claim, d screening.Definition, section, kind string, least, most float64) (float64, error) {
	r, ok := claim.Rating(d.Name, section)
	of := string(d.Name)
	if section != "" {
		of += " of section " + section
	}
	switch {
	case !ok:
		return 0, fmt.Errorf("%s: none is claimed; type it as printed, such as %s", of, d.Unit.Example())
	case !r.HasNominal():
		return 0, fmt.Errorf("%s: %s is a range; %s claims one value such as %s", of, r, kind, quantity.Format(math.Sqrt(least*most), d.Unit, 1))
	case r.Nominal < least || r.Nominal > most:
		return 0, fmt.Errorf("%s: %s is beyond %s; it lies between %s and %s", of, r, kind,
			quantity.Format(least, d.Unit, 0), quantity.Format(most, d.Unit, 0))
	}
	return r.Nominal, nil
}

// toleranceBounds returns the ratios below and above nominal; a single value counts both ways.
func toleranceBounds(r screening.Rating) (low, high float64, err error) {
	low, high = r.Low, r.High
	if r.HasNominal() {
		low, high = -math.Abs(r.Nominal), math.Abs(r.Nominal)
	}
	if math.IsNaN(low) || math.IsNaN(high) || low <= -1 || low > 0 || high < 0 || high > 5 || low == high {
		return 0, 0, fmt.Errorf("tolerance: %s does not enclose the nominal value; type a letter such as K, 10%% or +80-20%%", r)
	}
	return low, high, nil
}

// toleranceSource is where the band comes from: a table's or default's source, the letter's meaning, or the part's own print.
func toleranceSource(t screening.Rating) screening.Source {
	if t.Source.Status == screening.NoStatus {
		if s := book.ToleranceSource(t.Typed); s.Status != screening.NoStatus {
			return s
		}
	}
	return book.SourceOf(&t)
}

// Farads prints a capacitance as the trade does, never in millifarads: "4700 µF", "100 nF", "22 pF".
func Farads(c float64) string {
	if c >= 1e-3 {
		return fmt.Sprintf("%g µF", book.Honest(c*1e6, 0, 4))
	}
	return quantity.Format(book.Honest(c, 0, 4), quantity.Farad, 0)
}

// Percents prints a tolerance: "±20 %", "−20/+80 %".
func Percents(low, high float64) string {
	if low == -high {
		return fmt.Sprintf("±%.3g %%", 100*high)
	}
	return fmt.Sprintf("−%.3g/+%.3g %%", -100*low, 100*high)
}
