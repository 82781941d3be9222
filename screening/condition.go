package screening

import (
	"math"
	"strings"

	"goodbin/screening/quantity"
)

// Variable is one thing that a value holds at.
type Variable uint8

// The variables of a condition. Voltages and currents that a characteristic needs by name have their own.
const (
	NoVariable      Variable = iota
	Frequency                // Hz; 0 is DC
	Voltage                  // V across the part
	Current                  // A through the part
	IB                       // A, base current
	IC                       // A, collector current
	VCE                      // V, collector to emitter
	VCB                      // V, collector to base
	VGS                      // V, gate to source
	VDS                      // V, drain to source
	ID                       // A, drain current
	PartTemperature          // °C, of the part itself
	After                    // s since the voltage was applied
	variables                // how many there are
)

// Variables lists every variable in the order in which a condition is printed.
func Variables() []Variable {
	all := make([]Variable, 0, variables-1)
	for v := Frequency; v < variables; v++ {
		all = append(all, v)
	}
	return all
}

var variableNames = [variables]string{"", "frequency", "voltage", "current", "ib", "ic", "vce", "vcb", "vgs", "vds", "id", "temperature", "after"}

var variableUnits = [variables]quantity.Unit{
	quantity.One, quantity.Hertz, quantity.Volt, quantity.Ampere, quantity.Ampere, quantity.Ampere, quantity.Volt,
	quantity.Volt, quantity.Volt, quantity.Volt, quantity.Ampere, quantity.Celsius, quantity.Second,
}

// String returns the name that the command line and JSON use: "frequency", "vce", "after".
func (v Variable) String() string {
	if v >= variables {
		return ""
	}
	return variableNames[v]
}

// Unit returns the variable's unit.
func (v Variable) Unit() quantity.Unit {
	if v >= variables {
		return quantity.One
	}
	return variableUnits[v]
}

// VariableNamed finds the variable of a name; it reports false for an unknown one.
func VariableNamed(name string) (Variable, bool) {
	for v := Frequency; v < variables; v++ {
		if variableNames[v] == name {
			return v, true
		}
	}
	return NoVariable, false
}

// Condition is what a value holds at. A variable that is absent is not zero: DC, 0 V and 0 °C are values. The zero Condition holds at
// nothing in particular. It is comparable.
type Condition struct {
	has    uint16
	values [variables]float64
}

// At builds a condition of one variable; chain With for more.
func At(v Variable, x float64) Condition { return Condition{}.With(v, x) }

// With returns the condition with v set to x (SI). NoVariable and NaN leave it as it is.
func (c Condition) With(v Variable, x float64) Condition {
	if v == NoVariable || v >= variables || math.IsNaN(x) {
		return c
	}
	c.has |= 1 << v
	c.values[v] = x
	return c
}

// Without returns the condition with v absent.
func (c Condition) Without(v Variable) Condition {
	if v < variables {
		c.has &^= 1 << v
		c.values[v] = 0
	}
	return c
}

// Get returns the value of v and whether it is present.
func (c Condition) Get(v Variable) (float64, bool) {
	if v >= variables || c.has&(1<<v) == 0 {
		return 0, false
	}
	return c.values[v], true
}

// Has reports whether v is present.
func (c Condition) Has(v Variable) bool { return v < variables && c.has&(1<<v) != 0 }

// IsZero reports whether nothing is stated.
func (c Condition) IsZero() bool { return c.has == 0 }

// Fill returns c with what it lacks taken from d.
func (c Condition) Fill(d Condition) Condition {
	for v := Frequency; v < variables; v++ {
		if x, ok := d.Get(v); ok && !c.Has(v) {
			c = c.With(v, x)
		}
	}
	return c
}

// String prints the condition as people write it: "120 Hz, 35 V, after 2 min". Variables with a name of their own carry it: "IC 10 mA".
func (c Condition) String() string {
	if c.has == 0 {
		return ""
	}
	var b strings.Builder
	for v := Frequency; v < variables; v++ {
		x, ok := c.Get(v)
		if !ok {
			continue
		}
		if b.Len() > 0 {
			b.WriteString(", ")
		}
		switch v {
		case Frequency, Voltage, Current, PartTemperature:
		case After:
			b.WriteString("after ")
		default:
			b.WriteString(strings.ToUpper(variableNames[v]))
			b.WriteByte(' ')
		}
		b.WriteString(quantity.Format(x, v.Unit(), 0))
	}
	return b.String()
}

// Fit says, per variable, how far a reading's condition may lie from a limit's and still be compared with it as it stands: the allowed
// ratio reading/limit, both ends included. A variable with no entry must be equal to within 2 %. Any takes whatever it is.
type Fit map[Variable]Span

// Span is a closed interval of ratios.
type Span struct{ Low, High float64 }

// Any fits whatever the reading's condition is.
var Any = Span{0, math.Inf(1)}

var sameWithin = Span{0.98, 1.02}

// Misfit returns the first variable at which a reading taken at `reading` cannot be compared with a limit stated at `limit` as it stands;
// absent reports whether that variable is missing from the reading rather than off. ok is true when everything fits.
func (f Fit) Misfit(reading, limit *Condition) (v Variable, absent, ok bool) {
	for v := Frequency; v < variables; v++ {
		want, stated := limit.Get(v)
		if !stated {
			continue
		}
		span, listed := f[v]
		if !listed {
			span = sameWithin
		}
		got, present := reading.Get(v)
		switch {
		case span == Any:
		case !present:
			return v, true, false
		case got == want:
		case want == 0 || got/want < span.Low || got/want > span.High:
			return v, false, false
		}
	}
	return NoVariable, false, true
}
