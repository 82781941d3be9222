// Package igbt is the rulebook of insulated-gate bipolar transistors.
//
// One is told as a MOSFET is: the gate reads open to everything, with the gate tied to the emitter nothing flows from collector to emitter,
// and with a dozen volts on the gate it conducts and leaves a junction's drop. From emitter to collector it is open too, unless a diode is
// packed with it. Only n-channel ones are made in numbers, and only they are judged.
package igbt

import (
	_ "embed"
	"fmt"
	"sync"
	"time"

	"goodbin/rules/bipolar"
	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/rules/internal/sheet"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's word.
const Kind screening.Kind = "igbt"

// TraitDiode says whether a diode is packed with it: "co-packed" or "none".
const TraitDiode = "diode"

// The criteria.
const (
	gateInsulates screening.Criterion = "gate-insulates"
	gateLeakage   screening.Criterion = "gate-leakage"
	reverse       screening.Criterion = "reverse"
	turnsOff      screening.Criterion = "turns-off"
	turnsOn       screening.Criterion = "turns-on"
	breakdown     screening.Criterion = "breakdown"
	threshold     screening.Criterion = "threshold"
)

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "2"

var (
	// RGE is what an ohmmeter shows from gate to emitter.
	RGE = semi.OpenGate("rge", "RGE", "gate-emitter resistance")
	// VCEOn is the drop from collector to emitter when it is on.
	VCEOn = screening.Definition{
		Name: "vce-on", Symbol: "VCE(on)", Label: "collector-emitter voltage when on", Unit: quantity.Volt, NamedOnly: true, Over: screening.VF.Over,
	}
	// VGETh is the gate-emitter voltage at which it begins to conduct, collector tied to gate.
	VGETh = screening.Definition{
		Name: "vge-th", Symbol: "VGE(th)", Label: "threshold voltage of the gate", Unit: quantity.Volt, AtAmperes: screening.IC, AtVolts: screening.VCE,
	}
	// ICES is what leaks from collector to emitter with the gate tied to the emitter.
	ICES = screening.Definition{
		Name: "ices", Symbol: "ICES", Label: "collector leakage, gate tied to emitter", Unit: quantity.Ampere, AtVolts: screening.VCE,
		AtAmperes: screening.IC,
	}
	// IGES is what leaks into the gate, collector tied to emitter.
	IGES = screening.Definition{
		Name: "iges", Symbol: "IGES", Label: "gate leakage, collector tied to emitter", Unit: quantity.Ampere, AtVolts: screening.VGE,
		AtAmperes: screening.IC,
	}
	// VCES is a rating: the collector-emitter voltage that it claims to block.
	VCES = screening.Definition{Name: "vces", Symbol: "VCES", Label: "rated collector-emitter voltage, gate tied to emitter", Unit: quantity.Volt}
)

//go:embed limits.csv
var limitsCSV string

var figures = sync.OnceValue(func() semi.Figures { return semi.MustFigures("igbt limits.csv", limitsCSV) })

type rulebook struct{ table *types.Table }

// Book returns the rulebook of insulated-gate bipolar transistors, with the type numbers of a table.
func Book(t *types.Table) *screening.Rulebook {
	b := rulebook{t}
	return &screening.Rulebook{
		Kind: Kind, Label: "insulated-gate bipolar transistor", Tables: book.Version(Kind, edition, limitsCSV) + ", " + t.Version(Kind),
		Claims: b.claims(), Bench: bench(), Look: book.Look(), Complete: b.complete, Limits: limits, Convert: convert, Adjust: adjust,
		Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func (b rulebook) claims() []screening.Field {
	return []screening.Field{
		sheet.Field(b.table, Kind, "IRG4BC20U"),
		{
			Definition: VCES, Example: "600V", AcceptRange: semi.StandsIn(quantity.Volt), Help: "the collector-emitter voltage it claims to block",
		},
		{
			Definition: bipolar.ICMax, Example: "13A", AcceptRange: semi.StandsIn(quantity.Ampere),
			Help: "the collector current it claims to carry; not tested",
		},
		{
			Definition: book.Trait(TraitDiode, "diode packed with it"), Trait: true, Example: "co-packed", Help: "co-packed or no-diode, where known",
			Words: []screening.Word{
				{Word: coPacked, Text: coPacked}, {Word: "with-diode", Text: coPacked}, {Word: "no-diode", Text: noDiode},
			},
		},
		{Definition: VGETh, Example: "rated:vge-th@ic=0.25mA=3V..6V", Help: "the threshold it claims"},
		{Definition: IGES, Example: "rated:iges@vge=20V=..100nA", Help: "the gate leakage its sheet allows"},
		{Definition: screening.Ptot, Example: "rated:ptot=60W", Help: "the power it claims to dissipate"},
		semi.PinoutField("G-C-E"), book.CaseField("case=TO-220"), book.DatedField(),
	}
}

const coPacked, noDiode = "co-packed", "none"

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: RGE, Example: "rge=OL", Effort: 5 * time.Second,
			Help: "ohms from gate to emitter, both ways, the collector open: OL is what a sound gate shows",
		},
		{
			Definition: screening.VBR, Example: "vbr=OL", Effort: 6 * time.Second,
			Ask:  "TIE the gate to the emitter and read with the diode test, red on the collector: OL shows that it is off (vbr=OL)",
			Help: "gate tied to emitter; red on the collector, black on the emitter: OL is what a sound one shows",
		},
		{
			Definition: screening.VF, Example: "vf=OL", Effort: 7 * time.Second,
			Ask:  "TURN THE PROBES and read from emitter to collector: OL without a diode, its drop with one (vf=…)",
			Help: "gate tied to emitter; diode test, red on the emitter: OL, or the drop of a co-packed diode",
		},
		{
			Definition: VCEOn, Example: "vce-on@ic=0.4A,vge=12V=0.95", Effort: 40 * time.Second,
			Ask:  "LIGHT a lamp through it with 12 V on the gate and read the volts across it (vce-on@ic=0.4A,vge=12V=…)",
			Help: "12 V at the gate, a lamp in the collector: volts from collector to emitter; state gate voltage and current",
		},
		{
			Definition: VGETh, Example: "vge-th@ic=0.5mA=4.6", Effort: time.Minute, Fit: screening.Fit{screening.IC: {Low: 0.8, High: 1.25}},
			Help: "collector tied to gate, the sheet's current through a resistor, else about 0.5 mA: volts from gate to emitter; state the current",
		},
		{
			Definition: IGES, Example: "iges@15V=..10nA", Effort: 90 * time.Second,
			Help: "a 10 MΩ voltmeter in series with the gate: 10 mV are 1 nA; state the voltage",
		},
		{
			Definition: ICES, Example: "ices@30V=0.1uA", Effort: 90 * time.Second,
			Help: "gate tied to emitter, collector through a resistor to the supply; state the voltage",
		},
		semi.TemperatureField(),
	}
}

// off is the blocking from collector to emitter.
func off(c screening.Claim) semi.Blocking {
	return semi.Blocking{
		Volts: screening.VBR, Leak: ICES, Across: screening.VCE, Required: turnsOff, Breakdown: breakdown, Most: figures()["off-leak"],
		Tied: "gate tied to emitter", Aim: "blocking", Typed: "OL",
	}.Rate(c, VCES)
}

func (b rulebook) complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	if d := c.Trait(TraitDiode); d != "" && d != coPacked && d != noDiode {
		return c, nil, fmt.Errorf("diode: %q is not known; co-packed or none", d)
	}
	if err := book.CheckStands(c, &VCES); err != nil {
		return c, nil, err
	}
	name := c.Trait(screening.TraitType)
	if name == "" {
		return c, nil, nil
	}
	row, known := b.table.Lookup(Kind, name)
	if !known {
		return c, []screening.Reason{sheet.Unknown(b.table, Kind, c, "rated:vces=600V")}, nil
	}
	c, err := semi.Complete(c, &row, VCES, TraitDiode)
	return c, nil, err
}
