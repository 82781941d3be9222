// Package mosfet is the rulebook of enhancement MOSFETs.
//
// A pocket meter and a 9 V battery tell one: from source to drain lies a diode, the gate reads open to everything, and between drain and
// source it is off with the gate tied to the source and on with the battery at the gate. A gate keeps its charge: a part that reads shorted
// is not damaged before its gate was tied to the source. Milliohms cannot be read with two leads; an ampere and millivolts can. Voltages are
// magnitudes throughout: the channel says the sign.
package mosfet

import (
	_ "embed"
	"fmt"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/rules/internal/sheet"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's word.
const Kind screening.Kind = "mosfet"

// The criteria.
const (
	channelClaimed screening.Criterion = "channel-claimed"
	bodyDiode      screening.Criterion = "body-diode"
	gateInsulates  screening.Criterion = "gate-insulates"
	gateLeakage    screening.Criterion = "gate-leakage"
	turnsOff       screening.Criterion = "turns-off"
	turnsOn        screening.Criterion = "turns-on"
	breakdown      screening.Criterion = "breakdown"
	offLeakage     screening.Criterion = "off-leakage"
	onResistance   screening.Criterion = "on-resistance"
	threshold      screening.Criterion = "threshold"
)

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "2"

var (
	// VSD is the drop of the diode that lies between source and drain.
	VSD = screening.Definition{
		Name: "vsd", Symbol: "VSD", Label: "forward voltage of the body diode", Unit: quantity.Volt, AtAmperes: screening.ID, Over: screening.VF.Over,
	}
	// RGS is what an ohmmeter shows from gate to source.
	RGS = semi.OpenGate("rgs", "RGS", "gate-source resistance")
	// VDSOn is the drop from drain to source of a channel that is on, from which the on-resistance is computed.
	VDSOn = screening.Definition{
		Name: "vds-on", Symbol: "VDS(on)", Label: "drain-source voltage when on", Unit: quantity.Volt, NamedOnly: true,
	}
	// IDMax is a rating: the drain current that it claims to carry.
	IDMax = screening.Definition{Name: "id-max", Symbol: "ID", Label: "rated drain current", Unit: quantity.Ampere}
)

//go:embed limits.csv
var limitsCSV string

var figures = sync.OnceValue(func() semi.Figures { return semi.MustFigures("mosfet limits.csv", limitsCSV) })

type rulebook struct{ table *types.Table }

// Book returns the rulebook of enhancement MOSFETs, with the type numbers of a table.
func Book(t *types.Table) *screening.Rulebook {
	b := rulebook{t}
	return &screening.Rulebook{
		Kind: Kind, Label: "MOSFET, enhancement type", Tables: book.Version(Kind, edition, limitsCSV) + ", " + t.Version(Kind),
		Claims: b.claims(), Bench: bench(), Look: book.Look(), Complete: b.complete, Limits: limits, Derive: derive, Convert: convert,
		Adjust: adjust, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func (b rulebook) claims() []screening.Field {
	return []screening.Field{
		sheet.Field(b.table, Kind, "2N7000"),
		semi.ChannelField(),
		{
			Definition: screening.VDSS, Example: "60V", AcceptRange: semi.StandsIn(quantity.Volt), Help: "the drain-source voltage it claims to stand",
		},
		{
			Definition: IDMax, Example: "28A", AcceptRange: semi.StandsIn(quantity.Ampere), Help: "the drain current it claims to carry; not tested",
		},
		{Definition: screening.RDSOn, Example: "rated:rds-on@vgs=10V=..44mohm", Help: "the on-resistance its sheet allows, at a gate voltage"},
		{Definition: screening.VGSTh, Example: "rated:vgs-th@id=0.25mA=2V..4V", Help: "the threshold it claims, without its sign"},
		{Definition: screening.IGSS, Example: "rated:igss@vgs=20V=..100nA", Help: "the gate leakage its sheet allows"},
		{Definition: screening.IDSS, Example: "rated:idss@vds=48V=..1uA", Help: "the leakage its sheet allows when off"},
		{Definition: screening.Ptot, Example: "rated:ptot=1W", Help: "the power it claims to dissipate"},
		semi.PinoutField("G-D-S"), book.CaseField("case=TO-220"), book.DatedField(),
	}
}

func bench() []screening.Field {
	both := func(x float64) screening.Span { return screening.Span{Low: -x, High: x} }
	return []screening.Field{
		{
			Definition: RGS, Example: "rgs=OL", Effort: 5 * time.Second,
			Help: "ohms from gate to source, both ways, the drain open: OL is what a sound gate shows",
		},
		{
			Definition: VSD, Example: "vsd=0.52", Effort: 6 * time.Second,
			Help: "gate tied to source; diode test, red on the source of an n-channel part, black on the drain",
		},
		{
			Definition: screening.VBR, Example: "vbr=OL", Effort: 7 * time.Second, Band: both(5000),
			Ask:  "TIE the gate to the source, TURN THE PROBES and read drain to source: OL shows that it is off (vbr=OL)",
			Help: "gate tied to source, probes turned: OL is what a sound one shows; >30V where it blocked 30 V through a resistor",
		},
		{
			Definition: screening.RDSOn, Example: "rds-on@vgs=9V=1.2", Effort: 20 * time.Second, Fit: screening.Fit{screening.ID: screening.Any},
			Ask:  "PUT a 9 V battery from gate to source and read ohms from drain to source (rds-on@vgs=9V=…)",
			Help: "9 V battery from gate to source (plus on the gate of an n-channel part), ohms from drain to source; state the gate voltage",
		},
		{
			Definition: VDSOn, Example: "vds-on@id=1A,vgs=10V=44mV", Effort: time.Minute, Band: both(100),
			Help: "millivolts right at the leads with a known current through them: the on-resistance is computed",
		},
		{
			Definition: screening.VGSTh, Example: "vgs-th@id=0.5mA=2.9", Effort: time.Minute, Band: both(100),
			Fit:  screening.Fit{screening.ID: {Low: 0.8, High: 1.25}},
			Help: "drain tied to gate, the sheet's current through a resistor, else about 0.5 mA: volts from gate to source; state the current",
		},
		{
			Definition: screening.IGSS, Example: "igss@15V=..10nA", Effort: 90 * time.Second, Band: both(1),
			Help: "a 10 MΩ voltmeter in series with the gate: 10 mV are 1 nA; state the voltage",
		},
		{
			Definition: screening.IDSS, Example: "idss@30V=0.1uA", Effort: 90 * time.Second, Band: both(100),
			Help: "gate tied to source, drain through a resistor to the supply; state the voltage",
		},
		semi.TemperatureField(),
	}
}

// off is the blocking from drain to source.
func off(c screening.Claim) semi.Blocking {
	return semi.Blocking{
		Volts: screening.VBR, Leak: screening.IDSS, Across: screening.VDS,
		Required: turnsOff, Breakdown: breakdown, Leakage: offLeakage, Most: figures()["off-leak"],
		Tied: "gate tied to source", Aim: "blocking", Typed: "OL",
	}.Rate(c, screening.VDSS)
}

func (b rulebook) complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	c = semi.Unsigned(c)
	if ch := semi.Channel(c); ch != "" && ch != semi.N && ch != semi.P {
		return c, nil, fmt.Errorf("channel: %q is not known; n-channel or p-channel", ch)
	}
	if err := book.CheckStands(c, &screening.VDSS, &IDMax, &screening.Ptot); err != nil {
		return c, nil, err
	}
	name := c.Trait(screening.TraitType)
	if name == "" {
		return c, nil, nil
	}
	row, known := b.table.Lookup(Kind, name)
	if !known {
		return c, []screening.Reason{sheet.Unknown(b.table, Kind, c, "rated:vdss=60V rated:rds-on@vgs=10V=..5ohm")}, nil
	}
	c, err := semi.Complete(c, &row, screening.VDSS, semi.TraitChannel)
	return c, nil, err
}
