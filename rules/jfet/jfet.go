// Package jfet is the rulebook of junction field-effect transistors.
//
// A pocket meter tells one: the gate is a diode to both other leads, which blocks in reverse, and between those two lies a plain resistance
// the same both ways round. What one is worth in a circuit is IDSS and VGS(off), which spread three to ten to one within a type, so makers
// sort them into groups: a part that is sold as a group must show it. Gate voltages are magnitudes throughout: the channel says the sign.
package jfet

import (
	_ "embed"
	"fmt"
	"math"
	"strings"
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
const Kind screening.Kind = "jfet"

// The criteria.
const (
	channelClaimed screening.Criterion = "channel-claimed"
	gateForward    screening.Criterion = "gate-forward"
	gateBlocks     screening.Criterion = "gate-blocks"
	gateBreakdown  screening.Criterion = "gate-breakdown"
	gateLeakage    screening.Criterion = "gate-leakage"
	channel        screening.Criterion = "channel"
	current        screening.Criterion = "drain-current"
	cutOff         screening.Criterion = "cut-off"
)

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

//go:embed limits.csv
var limitsCSV string

var figures = sync.OnceValue(func() semi.Figures { return semi.MustFigures("jfet limits.csv", limitsCSV) })

var inf = math.Inf(1)

// rulebook knows the type numbers.
type rulebook struct{ table *types.Table }

// Book returns the rulebook of junction field-effect transistors, with the type numbers of a table.
func Book(t *types.Table) *screening.Rulebook {
	b := rulebook{t}
	return &screening.Rulebook{
		Kind: Kind, Label: "junction field-effect transistor",
		Tables: book.Version(Kind, edition, limitsCSV) + ", " + t.Version(Kind),
		Claims: b.claims(), Bench: bench(), Look: book.Look(),
		Complete: b.complete, Limits: b.limits, Derive: semi.Magnitudes, Convert: convert, Adjust: adjust, Lesser: b.lesser,
		Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func (b rulebook) claims() []screening.Field {
	return []screening.Field{
		sheet.Field(b.table, Kind, "2N3819"),
		{
			Definition: book.Trait(screening.TraitGroup, "group"), Trait: true, Example: "group=B", AcceptText: b.groupNamed,
			Help: "the letter after the type: its range of IDSS",
		},
		semi.ChannelField(),
		{Definition: screening.IDSS, Example: "rated:idss@vds=15V=2mA..20mA", Help: "the drain current it claims at a gate voltage of zero"},
		{Definition: screening.VGSOff, Example: "rated:vgs-off@id=10nA=0.5V..8V", Help: "the cut-off voltage it claims, without its sign"},
		{
			Definition: screening.VDSS, Example: "30V", AcceptRange: semi.StandsIn(quantity.Volt),
			Help: "the drain-source and gate-drain voltage it claims to stand",
		},
		{Definition: screening.IGSS, Example: "rated:igss@vgs=15V=..2nA", Help: "the gate leakage its sheet allows"},
		{Definition: screening.Ptot, Example: "rated:ptot=300mW", Help: "the power it claims to dissipate"},
		semi.PinoutField("D-S-G"), book.CaseField("case=TO-92"), book.DatedField(),
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.VF, Example: "vf=0.66", Effort: 5 * time.Second,
			Help: "diode test from the gate to either other lead, the way it conducts: red on the gate of an n-channel part",
		},
		{
			Definition: screening.VBR, Example: "vbr=OL", Effort: 6 * time.Second,
			Ask:  "TURN THE PROBES on the gate and read again: OL shows that it blocks (vbr=OL)",
			Help: "the same with the probes turned: OL is what a sound gate shows",
		},
		{
			Definition: screening.RDSOn, Example: "rds-on=220", Effort: 10 * time.Second, Default: screening.At(screening.VGS, 0),
			Ask:  "TIE gate to source and read ohms from drain to source (rds-on=…)",
			Help: "ohms from drain to source with the gate tied to the source; tens to thousands, the same both ways",
		},
		{
			Definition: screening.IDSS, Example: "idss@9V=6.2mA", Effort: 40 * time.Second, Default: screening.At(screening.VDS, battery),
			Band: screening.Span{Low: -1, High: 1},
			Fit:  screening.Fit{screening.VDS: {Low: 0.5, High: 2}},
			Help: "gate tied to source, a battery and a milliammeter in the drain; read within a second or two",
		},
		{
			Definition: screening.VGSOff, Example: "vgs-off=2.4V", Effort: time.Minute, Default: screening.At(screening.ID, meterCurrent),
			Band: screening.Span{Low: -100, High: 100},
			Help: "source to gate through a 10 MΩ voltmeter, drain on a battery; the sign does not matter",
		},
		{
			Definition: screening.IGSS, Example: "igss@9V=..1nA", Effort: 90 * time.Second, Band: screening.Span{Low: -1, High: 1},
			Help: "a 10 MΩ voltmeter in series with the gate, reversed: 10 mV are 1 nA; state the voltage",
		},
		semi.TemperatureField(),
	}
}

// gates is the blocking of the gate.
func gates(c screening.Claim) semi.Blocking {
	return semi.Blocking{
		Volts: screening.VBR, Leak: screening.IGSS, Across: screening.VGS,
		Required: gateBlocks, Breakdown: gateBreakdown, Leakage: gateLeakage, Most: figures()["gate-leak"],
		Tied: "drain and source tied together, or either alone", Aim: "gate blocking", Typed: "OL",
	}.Rate(c, screening.VDSS)
}

// groupNamed reports whether any type of the table has this group, and how it is printed.
func (b rulebook) groupNamed(word string) (string, bool) {
	word = strings.TrimPrefix(word, "-")
	for _, row := range b.table.Rows(Kind) {
		if g := row.Trait(screening.TraitGroup); g != "" && strings.EqualFold(g, word) {
			return g, true
		}
	}
	return "", false
}

// family is a type's name without its group.
func family(row *types.Row) string {
	return strings.TrimSuffix(strings.TrimSuffix(row.Type, row.Trait(screening.TraitGroup)), "-")
}

// siblings lists the rows of a type's groups, in the table's order; whole is the row without a group, where the table has one.
func (b rulebook) siblings(of *types.Row) (groups []types.Row, whole *types.Row) {
	for _, row := range b.table.Rows(Kind) {
		switch {
		case family(&row) != family(of):
		case row.Trait(screening.TraitGroup) == "":
			whole = &row
		default:
			groups = append(groups, row)
		}
	}
	return groups, whole
}

// complete adds what the type number and its group promise. It returns an error where the claim contradicts its type, or names a group that
// the type does not have.
func (b rulebook) complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	c = semi.Unsigned(c)
	name, group := c.Trait(screening.TraitType), c.Trait(screening.TraitGroup)
	if ch := semi.Channel(c); ch != "" && ch != semi.N && ch != semi.P {
		return c, nil, fmt.Errorf("channel: %q is not known; n-channel or p-channel", ch)
	}
	if name == "" {
		if group != "" {
			return c, []screening.Reason{book.Note(screening.IDSS.Name, "a group belongs to its type: without a known type it says nothing")}, nil
		}
		return c, nil, nil
	}
	row, known := b.table.Lookup(Kind, name)
	if !known {
		return c, []screening.Reason{sheet.Unknown(b.table, Kind, c, "rated:idss@vds=15V=2mA..20mA")}, nil
	}
	if own := row.Trait(screening.TraitGroup); group != "" && own != group {
		groups, _ := b.siblings(&row)
		var names []string
		found := false
		for _, g := range groups {
			names = append(names, g.Trait(screening.TraitGroup))
			if own == "" && strings.EqualFold(names[len(names)-1], group) {
				row, found = g, true
			}
		}
		switch {
		case own != "":
			return c, nil, fmt.Errorf("group: %q after the type %s, whose marking already says group %s", group, row.Type, own)
		case !found && len(names) == 0:
			return c, nil, fmt.Errorf("group: %q, but no group of %s is known; leave it out", group, row.Type)
		case !found:
			return c, nil, fmt.Errorf("group: %q is no group of %s; it has %s", group, row.Type, strings.Join(names, ", "))
		}
	}
	c, err := semi.Complete(c, &row, screening.VDSS, semi.TraitChannel)
	return c, nil, err
}
