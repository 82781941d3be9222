package screening

import "goodbin/screening/quantity"

// Kind says what sort of part it is, in the one word that the command line and the workbook use: "electrolytic", "diode".
type Kind string

// Characteristic names a measurable property as command line, CSV headers and JSON spell it: "capacitance", "tan-delta", "hfe".
type Characteristic string

// Definition declares a characteristic once for the whole program. Two rulebooks that use one name use one definition; a test holds them
// to it. It is comparable.
type Definition struct {
	Name   Characteristic
	Symbol string // IEC or JEDEC letter symbol as a data sheet prints it: "C", "tan δ", "V(BR)"
	Label  string // plain words for prompts: "capacitance", "leakage current"
	Unit   quantity.Unit

	// AtVolts and AtAmperes say what a bare voltage or current condition means: for hfe, amperes are IC and volts VCE.
	// NoVariable means Voltage and Current themselves.
	AtVolts, AtAmperes Variable
	NamedOnly          bool // conditions must be named: too many voltages and currents to guess which (vce-sat, rds-on)

	Over OverRange // what a meter that shows over-range (OL) has shown; the zero value: nothing
}

// OverRange is what an over-range display proves of a characteristic when the person at the bench types OL.
type OverRange struct {
	Sense quantity.Sense // AtLeast or AtMost; Exactly means that OL proves nothing
	Value float64        // SI
	Why   string         // the assumption in words: "a pocket meter's highest range ends at 2 MΩ or above"
}

// Shared characteristics. A kind with a property of its own declares it in its own file.
var (
	Capacitance = Definition{Name: "capacitance", Symbol: "C", Label: "capacitance", Unit: quantity.Farad}
	ESR         = Definition{Name: "esr", Symbol: "ESR", Label: "equivalent series resistance", Unit: quantity.Ohm}
	TanDelta    = Definition{Name: "tan-delta", Symbol: "tan δ", Label: "dissipation factor", Unit: quantity.One}
	Leakage     = Definition{Name: "leakage", Symbol: "IL", Label: "leakage current", Unit: quantity.Ampere}
	// RatedVoltage is a rating only: the voltage that the part claims to stand.
	RatedVoltage = Definition{Name: "voltage", Symbol: "UR", Label: "rated voltage", Unit: quantity.Volt}
	// Tolerance is a rating only: the allowed deviation from the nominal value as ratios (-0.2, +0.2).
	Tolerance = Definition{Name: "tolerance", Symbol: "tol", Label: "tolerance", Unit: quantity.Ratio}
	// Resistance reads as open when a meter on its highest range overloads; 2 MΩ is the least highest range assumed (from memory).
	Resistance = Definition{
		Name: "resistance", Symbol: "R", Label: "resistance", Unit: quantity.Ohm,
		Over: OverRange{Sense: quantity.AtLeast, Value: 2e6, Why: "taken as above 2 MΩ, the top range of even a simple pocket meter"},
	}
	// VF is a junction's forward voltage. A diode test shows OL from about 2 V upward, the least that such testers are assumed to reach
	// (from memory): an open junction, or one with several junctions in series or a light-emitting one.
	VF = Definition{
		Name: "vf", Symbol: "VF", Label: "forward voltage", Unit: quantity.Volt,
		Over: OverRange{Sense: quantity.AtLeast, Value: 2, Why: "taken as above 2 V, the least at which a diode test gives up"},
	}
	// IR is a junction's reverse current at a stated reverse voltage.
	IR = Definition{Name: "ir", Symbol: "IR", Label: "reverse current", Unit: quantity.Ampere}
	// VBR is the reverse voltage at which a junction breaks down. OL on a diode test connected in reverse shows that the junction blocks
	// at the tester's own voltage, taken as 2 V (from memory); ">30V" that it blocked at all the bench had.
	VBR = Definition{
		Name: "vbr", Symbol: "V(BR)", Label: "reverse breakdown voltage", Unit: quantity.Volt,
		Over: OverRange{Sense: quantity.AtLeast, Value: 2, Why: "it blocks at the tester's own voltage, taken as 2 V"},
	}
	// Ptot is a rating only: the power that the part claims to dissipate, at the mounting its sheet states.
	Ptot = Definition{Name: "ptot", Symbol: "Ptot", Label: "rated dissipation", Unit: quantity.Watt}
	// Temperature is the ambient of the whole set of readings, in °C.
	Temperature = Definition{Name: "temperature", Symbol: "TA", Label: "temperature of the part", Unit: quantity.Celsius}
	// RemainingVoltage is what stands across a part after it was discharged: the gate before it is touched.
	RemainingVoltage = Definition{Name: "remaining-voltage", Symbol: "U", Label: "volts remaining on the part", Unit: quantity.Volt}
)
