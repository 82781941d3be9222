package quantity

// Unit is the coherent SI unit of a value. Temperature in °C is the one exception; Ratio is a dimensionless ratio that people write in
// percent.
type Unit uint8

// The units.
const (
	One Unit = iota // dimensionless: gain, tan δ
	Farad
	Ohm
	Volt
	Ampere
	Hertz
	Second
	Celsius
	Watt
	Henry
	Ratio // 0.2 is 20 %
	Metre
	Coulomb
	units // how many there are
)

type unitInfo struct{ symbol, ascii, noun, example string }

var unitTable = [units]unitInfo{
	One:     {"", "", "a plain number", "180"},
	Farad:   {"F", "F", "a capacitance", "2200uF"},
	Ohm:     {"Ω", "ohm", "a resistance", "4k7"},
	Volt:    {"V", "V", "a voltage", "35V"},
	Ampere:  {"A", "A", "a current", "45uA"},
	Hertz:   {"Hz", "Hz", "a frequency", "120Hz"},
	Second:  {"s", "s", "a time", "2min"},
	Celsius: {"°C", "C", "a temperature", "24C"},
	Watt:    {"W", "W", "a power", "0.5W"},
	Henry:   {"H", "H", "an inductance", "10mH"},
	Ratio:   {"%", "%", "a percentage", "5%"},
	Metre:   {"m", "m", "a length", "12mm"},
	Coulomb: {"C", "C", "a charge", "45uC"},
}

func (u Unit) info() unitInfo {
	if u >= units {
		return unitInfo{noun: "an unknown unit"}
	}
	return unitTable[u]
}

// Symbol returns the unit as printed: "F", "Ω", "°C", "" for One.
func (u Unit) Symbol() string { return u.info().symbol }

// ASCII returns the unit in ASCII: "ohm" for Ω, "C" for °C.
func (u Unit) ASCII() string { return u.info().ascii }

// Noun says what a value in this unit is, for sentences: "a capacitance".
func (u Unit) Noun() string { return u.info().noun }

// Example returns something to type: "45uA".
func (u Unit) Example() string { return u.info().example }

// Sense says how a number bounds the true value.
type Sense uint8

// The senses.
const (
	Exactly Sense = iota
	AtLeast       // the meter shows that it is this or more: ">400V"
	AtMost        // this or less: "<0.1uA"
)

// String returns "exactly", "at least" or "at most".
func (s Sense) String() string {
	switch s {
	case Exactly:
		return "exactly"
	case AtLeast:
		return "at least"
	case AtMost:
		return "at most"
	}
	return "in no known sense"
}
