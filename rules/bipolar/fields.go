package bipolar

import (
	"math"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The characteristics of a bipolar transistor. In hfe and its like a bare current is IC and a bare voltage VCE.
var (
	// HFE is the DC current gain IC/IB.
	HFE = screening.Definition{
		Name: "hfe", Symbol: "hFE", Label: "current gain", Unit: quantity.One, AtVolts: screening.VCE, AtAmperes: screening.IC,
	}
	// HFENet is the gain of what the base controls: (IC − ICEO)/IB, both at the same VCE and temperature.
	HFENet = screening.Definition{
		Name: "hfe-net", Symbol: "hFE net", Label: "current gain net of leakage", Unit: quantity.One,
		AtVolts: screening.VCE, AtAmperes: screening.IC,
	}
	// VBE is the forward voltage of the base-emitter junction. A diode test gives up at about 2 V (from memory).
	VBE = screening.Definition{
		Name: "vbe", Symbol: "VBE", Label: "base-emitter voltage", Unit: quantity.Volt, AtVolts: screening.VCE, AtAmperes: screening.IC,
		Over: screening.OverRange{Sense: quantity.AtLeast, Value: 2, Why: "taken as above 2 V, the least at which a diode test gives up"},
	}
	// VEB is what the same two leads show with the probes turned: a sound junction blocks. Only a junction that reads open both ways is open;
	// open one way, it may be connected the wrong way round.
	VEB = screening.Definition{
		Name: "veb", Symbol: "VEB", Label: "base-emitter voltage, probes turned", Unit: quantity.Volt, AtVolts: screening.VCE,
		AtAmperes: screening.IC, Over: VBE.Over,
	}
	// ICEO is the collector-emitter current with the base open.
	ICEO = screening.ICEO
	// ICBO is the collector-base current with the emitter open.
	ICBO = screening.Definition{
		Name: "icbo", Symbol: "ICBO", Label: "collector-base leakage, emitter open", Unit: quantity.Ampere,
		AtVolts: screening.VCB, AtAmperes: screening.IC,
	}
	// VCEO, VCBO and VEBO are ratings: the voltages that the part claims to stand with the third lead open.
	VCEO = screening.VCEO
	VCBO = screening.Definition{Name: "vcbo", Symbol: "VCBO", Label: "rated collector-base voltage", Unit: quantity.Volt}
	VEBO = screening.Definition{Name: "vebo", Symbol: "VEBO", Label: "rated emitter-base voltage", Unit: quantity.Volt}
	// ICMax is a rating: the collector current that the part claims to carry.
	ICMax = screening.Definition{Name: "ic-max", Symbol: "IC", Label: "rated collector current", Unit: quantity.Ampere}
	// FT is a rating: the transition frequency.
	FT = screening.Definition{Name: "ft", Symbol: "fT", Label: "transition frequency", Unit: quantity.Hertz}
)

// The words of the traits.
const (
	npn, pnp           = "npn", "pnp"
	silicon, germanium = "si", "ge"
	darlington         = "darlington"
)

const polarityLabel, materialLabel = "polarity (npn or pnp)", "material (si or ge)"

// claims lists what is printed on a transistor or stands in its sheet.
func (b rulebook) claims() []screening.Field {
	return []screening.Field{
		{
			Definition: book.Trait(screening.TraitType, "type"), Trait: true, Example: "BC547B", AcceptText: b.acceptType,
			Help: "the type number as printed, with its gain group",
		},
		{
			Definition: book.Trait(screening.TraitGroup, "group"), Trait: true, Example: "group=B", AcceptText: b.types.GroupNamed,
			Help: "the letter or number after the type; it belongs to that type",
		},
		{
			Definition: book.Trait(screening.TraitPolarity, polarityLabel), Trait: true, Required: true, Example: npn,
			Help: "npn or pnp; a known type says it", Ask: "SAY whether it is npn or pnp: polarity=npn or polarity=pnp", Words: []screening.Word{{Word: "npn", Text: npn}, {Word: "pnp", Text: pnp}},
		},
		{
			Definition: book.Trait(screening.TraitMaterial, materialLabel), Trait: true, Required: true, Example: silicon,
			Help: "si or ge; a known type says it, and a part without a type number is taken as silicon",
			Ask:  "SAY whether it is silicon or germanium: material=si or material=ge",
			Words: []screening.Word{
				{Word: "si", Text: silicon}, {Word: "silicon", Text: silicon}, {Word: "ge", Text: germanium}, {Word: "germanium", Text: germanium},
			},
		},
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: darlington,
			Help: "darlington for two transistors in one case", Words: []screening.Word{{Word: darlington, Text: darlington}},
		},
		{Definition: HFE, Example: "rated:hfe@ic=2mA,vce=5V=200..450", Help: "the gain it claims, at the current of its sheet"},
		{Definition: VCEO, Example: "rated:vceo=45V", Help: "the collector-emitter voltage it claims to stand"},
		{Definition: VCBO, Example: "rated:vcbo=50V", Help: "the collector-base voltage it claims to stand"},
		{Definition: VEBO, Example: "rated:vebo=6V", Help: "the reverse base-emitter voltage it claims to stand"},
		{Definition: ICMax, Example: "rated:ic-max=100mA", Help: "the collector current it claims to carry"},
		{Definition: screening.Ptot, Example: "rated:ptot=500mW", Help: "the power it claims to dissipate"},
		{Definition: FT, Example: "rated:ft=150MHz", Help: "the frequency at which its gain has fallen to 1"},
		{Definition: ICBO, Example: "rated:icbo@30V=..15nA", Help: "the collector-base leakage its sheet allows"},
		book.CaseField("case=TO-92"),
		{Definition: book.Trait(screening.TraitPinout, "pinout"), Trait: true, Example: "pinout=C-B-E", Help: "the leads in order; check with a meter"},
		book.DatedField(),
	}
}

// How far a reading's condition may lie from a limit's. All house, with these reasons: gain within a factor of two of the sheet's current
// moves by a few percent on every sheet that prints a curve (BC547: 150, 290, 180 at 0.01, 2, 100 mA), and with VCE only by the Early
// effect; VBE moves by 60 mV per decade of current, which its band contains; leakage of a sound junction hardly depends on voltage below
// breakdown, and what does depend on it is said as untested above the voltage used.
var (
	gainFit    = screening.Fit{screening.IC: {Low: 0.5, High: 2}, screening.VCE: {Low: 0.5, High: 10}, screening.VCB: screening.Any}
	vbeFit     = screening.Fit{screening.IC: {Low: 0.05, High: 20}, screening.VCE: screening.Any}
	leakageFit = screening.Fit{screening.VCE: {Low: leastVoltage, High: sameValue}, screening.VCB: {Low: 0.5, High: sameValue}}
)

const (
	leastVoltage = 0.15 // of the limit's voltage: 3 V for 20 V, 9 V for 60 V
	sameValue    = 1.02 // two voltages or currents are the same within 2 %
)

// bench lists what is measured, quick readings that could reject first.
func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: VBE, Example: "vbe=0.68", Fit: vbeFit, Default: screening.At(screening.IC, 1e-3), Effort: 10 * time.Second,
			Help: "diode test base to emitter, the way round that the polarity says; a tester's current is taken as 1 mA",
		},
		{
			Definition: VEB, Example: "veb=OL", Effort: 8 * time.Second,
			Help: "only where vbe reads OL: the same two leads, probes turned",
			Ask:  "TURN THE PROBES and read base to emitter again: type volts as vbe; OL this way too is an open junction (veb=OL)",
		},
		{
			Definition: screening.Temperature, PerPart: true, Example: "temperature=21C", Effort: 12 * time.Second,
			Band: screening.Span{Low: -40, High: 100},
			Help: "of the part itself: an hour indoors, not held in the fingers",
			Ask:  "STATE the temperature of the part: temperature=21C",
		},
		{
			Definition: HFE, Example: "hfe@ic=2mA,vce=5V=290", Fit: gainFit, Default: screening.At(screening.VCE, 5),
			Effort: 20 * time.Second, Band: screening.Span{Low: 0, High: 1e6},
			Help: "IC over IB, with the collector current it was taken at; VCE is taken as 5 V where it is not stated",
		},
		{
			Definition: ICEO, Example: "iceo@20V=..0.1uA", Fit: leakageFit, Effort: time.Minute, Band: screening.Span{Low: 0, High: 100},
			Help: "base open, collector and emitter through a resistor to the supply; state the voltage, of germanium the temperature too",
		},
		{
			Definition: ICBO, Example: "icbo@30V=5nA", Fit: leakageFit, Effort: 90 * time.Second, Band: screening.Span{Low: 0, High: 100},
			Help: "emitter open, collector and base reverse-biased; state the voltage",
		},
		{
			Definition: screening.VBR, Example: "vbr=30..", Fit: screening.Fit{screening.Current: screening.Any}, Effort: 2 * time.Minute,
			Band: screening.Span{Low: 0, High: 5000},
			Help: "collector to emitter, base open, current limited to 1 mA or less; >30V where it blocks all the supply has",
		},
		{
			Definition: HFENet, Example: "hfe-net@ic=0.5mA,vce=6V=110", Fit: gainFit, Default: screening.At(screening.VCE, 5),
			Effort: 3 * time.Minute, Band: screening.Span{Low: 0, High: 1e6},
			Help: "computed from hfe with its current and iceo at the same VCE; type it only where your own set-up subtracts the leakage",
		},
	}
}

// acceptType takes a word that is a known type number, alone or with one of its groups; its canonical text keeps the group.
func (b rulebook) acceptType(word string) (string, bool) {
	row, ok := b.types.Lookup(Kind, word)
	if !ok {
		return "", false
	}
	return nameWithGroup(row), true
}

// nameWithGroup prints the type with its group as it is marked: "BC547B", "BC337-25", "2SC1815-GR".
func nameWithGroup(row types.Row) string {
	if len(row.Group) == 1 && (row.Group[0] < '0' || row.Group[0] > '9') || row.Group == "" {
		return row.Type + row.Group
	}
	return row.Type + "-" + row.Group
}

var nan, inf = math.NaN(), math.Inf(1)
