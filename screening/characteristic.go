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
	// InsulationResistance is what a dielectric passes of direct current, as ohms at a stated voltage. OL on an ohms range shows only what
	// that range ends at, and only at the meter's own volt or two.
	InsulationResistance = Definition{
		Name: "insulation-resistance", Symbol: "Rins", Label: "insulation resistance", Unit: quantity.Ohm,
		Over: OverRange{Sense: quantity.AtLeast, Value: 2e6, Why: "taken as above 2 MΩ, the top range of even a simple pocket meter"},
	}
	// TimeConstant is insulation resistance times capacitance, as a capacitor left to itself shows it: the seconds in which it falls to 37 %.
	TimeConstant = Definition{Name: "time-constant", Symbol: "τ", Label: "time constant of self-discharge", Unit: quantity.Second}
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
	// VRRM is a rating only: the reverse voltage that a junction claims to block again and again.
	VRRM = Definition{Name: "vrrm", Symbol: "VRRM", Label: "rated reverse voltage", Unit: quantity.Volt}
	// IFAV is a rating only: the average forward current that a junction claims to carry.
	IFAV = Definition{Name: "if-av", Symbol: "IF(AV)", Label: "rated forward current", Unit: quantity.Ampere}
	// IFSM is a rating only: the surge of one half-wave that a junction claims to survive.
	IFSM = Definition{Name: "ifsm", Symbol: "IFSM", Label: "rated surge current", Unit: quantity.Ampere}
	// ICEO is the collector-emitter current with the base open; of an optocoupler with its LED dark.
	ICEO = Definition{
		Name: "iceo", Symbol: "ICEO", Label: "collector-emitter leakage, base open", Unit: quantity.Ampere,
		AtVolts: VCE, AtAmperes: IC,
	}
	// VCEO is a rating only: the collector-emitter voltage that the part claims to stand, base open.
	VCEO = Definition{Name: "vceo", Symbol: "VCEO", Label: "rated collector-emitter voltage", Unit: quantity.Volt}
	// Ptot is a rating only: the power that the part claims to dissipate, at the mounting its sheet states.
	Ptot = Definition{Name: "ptot", Symbol: "Ptot", Label: "rated dissipation", Unit: quantity.Watt}
	// Power is a rating only: the power that a resistor, potentiometer or the like claims to stand at the temperature its sheet states.
	Power = Definition{Name: "power", Symbol: "P", Label: "rated power", Unit: quantity.Watt}
	// IDSS is the drain current with the gate tied to the source: all that a junction FET carries, what a MOSFET that is off leaks.
	IDSS = Definition{
		Name: "idss", Symbol: "IDSS", Label: "drain current, gate tied to source", Unit: quantity.Ampere, AtVolts: VDS, AtAmperes: ID,
	}
	// IGSS is what leaks into the gate of a field-effect transistor, drain and source tied together.
	IGSS = Definition{
		Name: "igss", Symbol: "IGSS", Label: "gate leakage, drain tied to source", Unit: quantity.Ampere, AtVolts: VGS, AtAmperes: ID,
	}
	// VGSOff is the gate-source voltage that turns a junction FET off, as a magnitude: the channel says the sign.
	VGSOff = Definition{
		Name: "vgs-off", Symbol: "VGS(off)", Label: "cut-off voltage of the gate", Unit: quantity.Volt, AtVolts: VDS, AtAmperes: ID,
	}
	// VGSTh is the gate-source voltage at which a MOSFET begins to conduct, drain tied to gate, as a magnitude.
	VGSTh = Definition{
		Name: "vgs-th", Symbol: "VGS(th)", Label: "threshold voltage of the gate", Unit: quantity.Volt, AtVolts: VDS, AtAmperes: ID,
	}
	// RDSOn is the resistance from drain to source of a channel that is on. Its gate voltage must be named.
	RDSOn = Definition{
		Name: "rds-on", Symbol: "rDS(on)", Label: "drain-source on-resistance", Unit: quantity.Ohm, NamedOnly: true, Over: Resistance.Over,
	}
	// VDSS is a rating only: the drain-source voltage that the part claims to stand, as a magnitude.
	VDSS = Definition{Name: "vdss", Symbol: "VDSS", Label: "rated drain-source voltage", Unit: quantity.Volt}
	// DCR is the direct-current resistance of a winding. OL shows that it is open.
	DCR = Definition{Name: "dcr", Symbol: "RDC", Label: "winding resistance", Unit: quantity.Ohm, Over: Resistance.Over}
	// Temperature is the ambient of the whole set of readings, in °C.
	Temperature = Definition{Name: "temperature", Symbol: "TA", Label: "temperature of the part", Unit: quantity.Celsius}
	// RemainingVoltage is what stands across a part after it was discharged: the gate before it is touched.
	RemainingVoltage = Definition{Name: "remaining-voltage", Symbol: "U", Label: "volts remaining on the part", Unit: quantity.Volt}
)
