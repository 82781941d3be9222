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
	VGE                      // V, gate to emitter
	VIN                      // V, input voltage of a regulator
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

var variableNames = [variables]string{"", "frequency", "voltage", "current", "ib", "ic", "vce", "vcb", "vgs", "vds", "id", "vge", "vin", "temperature", "after"}

var variableUnits = [variables]quantity.Unit{
	quantity.One, quantity.Hertz, quantity.Volt, quantity.Ampere, quantity.Ampere, quantity.Ampere, quantity.Volt,
	quantity.Volt, quantity.Volt, quantity.Volt, quantity.Ampere, quantity.Volt, quantity.Volt, quantity.Celsius, quantity.Second,
}

// String returns the name that the command line and JSON use: "frequency", "vce", "after".
func (v Variable) String() string {
	if v >= variables {
		return ""
	}
	return variableNames[v]
}

var variableLabels = [variables]string{
	"", "frequency", "voltage", "current", "base current", "collector current", "collector-emitter voltage", "collector-base voltage",
	"gate-source voltage", "drain-source voltage", "drain current", "gate-emitter voltage", "input voltage", "temperature", "time since the voltage was applied",
}

// Label returns the variable in words, for sentences: "collector current".
func (v Variable) Label() string {
	if v >= variables {
		return ""
	}
	return variableLabels[v]
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

// MaxConditions is how many variables one condition can state: more than any data sheet does for one value.
const MaxConditions = 7

// Condition is what a value holds at. A variable that is absent is not zero: DC, 0 V and 0 °C are values. The zero Condition holds at
// nothing in particular. It is comparable, small, and states its variables in their order.
type Condition struct {
	n      uint8
	which  [MaxConditions]Variable
	values [MaxConditions]float64
}

// At builds a condition of one variable; chain With for more.
func At(v Variable, x float64) Condition { return Condition{}.With(v, x) }

// With returns the condition with v set to x (SI). NoVariable, NaN and a variable beyond MaxConditions leave it as it is.
func (c Condition) With(v Variable, x float64) Condition {
	if v == NoVariable || v >= variables || math.IsNaN(x) {
		return c
	}
	i := c.find(v)
	if i < int(c.n) && c.which[i] == v {
		c.values[i] = x
		return c
	}
	if c.n == MaxConditions {
		return c
	}
	copy(c.which[i+1:], c.which[i:c.n])
	copy(c.values[i+1:], c.values[i:c.n])
	c.which[i], c.values[i] = v, x
	c.n++
	return c
}

// find returns where v stands, or would stand.
func (c *Condition) find(v Variable) int {
	i := 0
	for i < int(c.n) && c.which[i] < v {
		i++
	}
	return i
}

// Without returns the condition with v absent.
func (c Condition) Without(v Variable) Condition {
	i := c.find(v)
	if i == int(c.n) || c.which[i] != v {
		return c
	}
	c.n--
	copy(c.which[i:], c.which[i+1:])
	copy(c.values[i:], c.values[i+1:])
	c.which[c.n], c.values[c.n] = NoVariable, 0
	return c
}

// get is Get without the copy.
func (c *Condition) get(v Variable) (float64, bool) {
	i := c.find(v)
	if i == int(c.n) || c.which[i] != v {
		return 0, false
	}
	return c.values[i], true
}

// Get returns the value of v and whether it is present.
func (c Condition) Get(v Variable) (float64, bool) { return c.get(v) }

// Has reports whether v is present.
func (c Condition) Has(v Variable) bool {
	_, ok := c.get(v)
	return ok
}

// IsZero reports whether nothing is stated.
func (c Condition) IsZero() bool { return c.n == 0 }

// Fill returns c with what it lacks taken from d.
func (c Condition) Fill(d Condition) Condition {
	for i, v := range d.which[:d.n] {
		if _, has := c.get(v); !has {
			c = c.With(v, d.values[i])
		}
	}
	return c
}

// filling is Fill that also returns the part that was taken from d.
func (c Condition) filling(d *Condition) (filled, added Condition) {
	for i, v := range d.which[:d.n] {
		if _, has := c.get(v); !has {
			c = c.With(v, d.values[i])
			added = added.With(v, d.values[i])
		}
	}
	return c, added
}

// dropping returns c without the variables of d.
func (c Condition) dropping(d *Condition) Condition {
	for _, v := range d.which[:d.n] {
		c = c.Without(v)
	}
	return c
}

// String prints the condition as people write it: "120 Hz, 35 V, after 2 min". Variables with a name of their own carry it: "IC 10 mA".
func (c Condition) String() string {
	if c.n == 0 {
		return ""
	}
	var b strings.Builder
	for i, v := range c.which[:c.n] {
		x := c.values[i]
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

// Never fits nothing as it stands, not even the limit's own value: the rulebook's Convert brings every reading over, because the condition
// has an uncertainty of its own that counts (the temperature of a thermistor).
var Never = Span{math.Inf(1), 0}

var sameWithin = Span{0.98, 1.02}

// Misfit returns the first variable at which a reading taken at `reading` cannot be compared with a limit stated at `limit` as it stands;
// absent reports whether that variable is missing from the reading rather than off. ok is true when everything fits.
func (f Fit) Misfit(reading, limit *Condition) (v Variable, absent, ok bool) {
	for i, v := range limit.which[:limit.n] {
		want := limit.values[i]
		span, listed := f[v]
		if !listed {
			span = sameWithin
		}
		got, present := reading.get(v)
		switch {
		case span == Any:
		case !present:
			return v, true, false
		case span == Never:
			return v, false, false
		case got == want:
		case want == 0 || got/want < span.Low || got/want > span.High:
			return v, false, false
		}
	}
	return NoVariable, false, true
}
