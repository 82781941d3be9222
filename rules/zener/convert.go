package zener

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// A reading is brought to the test current from between half and twice of it (half: derived beside the tables; twice: house).
const least, most = 0.5, 2.0

// convert brings a voltage to the test current and a reverse current to the sheet's voltage and 25 °C.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	switch l.On {
	case VZ.Name:
		return toTestCurrent(part.Claim, r, l)
	case screening.IR.Name:
		return junction.Bring(part, r, l, junction.Rule{})
	}
	return screening.Conversion{}
}

// toTestCurrent brings a voltage from a current I to the test current IZT:
//
//	VZ(IZT) = VZ(I) + r·(IZT − I)  with this part's slope r somewhere between 0 and the sheet's maximum
//
// so the correction lies between 0 and the whole of that; its middle is taken, and half of it as a rectangular half-width. Below the test
// current the slope is steeper than at it, about in inverse proportion to the current (derived: the sheets' knee slopes), so there the whole
// is rmax·IZT·ln(IZT/I). Outside half to twice the test current the reading only bounds: more current is more volts.
func toTestCurrent(c screening.Claim, r screening.Reading, l screening.Limit) screening.Conversion {
	izt, _ := l.At.Get(screening.Current)
	i, stated := r.At.Get(screening.Current)
	window := fmt.Sprintf("measure between %s and %s", amperes(least*izt), amperes(most*izt))
	if !stated || i <= 0 {
		return screening.Conversion{Why: fmt.Sprintf("the current of the reading is not stated: vz@%s=…; %s", amperes(izt), window)}
	}
	result := screening.Conversion{OK: true, Reading: r}
	result.Reading.At = l.At
	slope, known := slopeMost(c)
	ratio := i / izt
	if !known || ratio < least*0.999 || ratio > most*1.001 {
		why := window
		if !known {
			why = "its slope resistance is not known, so measure at " + amperes(izt)
		}
		return bound(result, r, i, izt, why)
	}
	whole := slope.High * (izt - i)
	if i < izt {
		whole = slope.High * izt * math.Log(izt/i)
	}
	result.U = math.Abs(whole) / 2 / math.Sqrt(3)
	result.Reading.Value = r.Value + whole/2
	result.Reading.U = math.Hypot(r.U, result.U)
	result.Source = screening.Source{Document: book.SourceOf(&slope).Document, Clause: "highest slope resistance", Status: screening.Derived}
	result.Rule = fmt.Sprintf("%+.2g V ± %.2g V from %s to %s: 0 to %s of slope", whole/2, math.Abs(whole)/2, amperes(i), amperes(izt),
		quantity.Format(slope.High, quantity.Ohm, 0))
	result.Reading.Rule = result.Rule
	return result
}

// bound lets a reading at another current settle what it can: at less current it shows at least, at more at most so many volts.
func bound(c screening.Conversion, r screening.Reading, i, izt float64, why string) screening.Conversion {
	side := quantity.AtLeast
	if i > izt {
		side = quantity.AtMost
	}
	if r.Sense != quantity.Exactly && r.Sense != side {
		return screening.Conversion{Why: why}
	}
	c.Reading.Sense = side
	c.Rule = fmt.Sprintf("taken at %s it only bounds the voltage at %s: %s", amperes(i), amperes(izt), why)
	c.Source = screening.Source{Document: "more current is more volts", Status: screening.CommonPractice}
	c.Reading.Rule = c.Rule
	return c
}
