// Package bridge is the rulebook of silicon bridge rectifiers: four diodes in one case, each a leg with a name that can be read at the case.
//
// A leg is named from its anode to its cathode: ac1-plus lets current from the first AC lead to plus. Forward, each of the four is read by
// itself, since in parallel a sound one hides an open one. In reverse two readings prove all four: from one AC lead to the other the current
// must pass one leg backwards on either way round (through plus, and through minus), and it is the other two legs with the probes turned.
package bridge

import (
	_ "embed"
	"errors"
	"math"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "bridge"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// VFApart is how far the forward voltages of a bridge's legs lie apart: computed from the four readings.
var VFApart = screening.Definition{Name: "vf-apart", Symbol: "ΔVF", Label: "difference between the legs' forward voltages", Unit: quantity.Volt}

// The criteria.
const (
	forwardCriterion   screening.Criterion = "forward"
	seriesCriterion    screening.Criterion = "in-series"
	balanceCriterion   screening.Criterion = "balance"
	blockingCriterion  screening.Criterion = "blocking"
	breakdownCriterion screening.Criterion = "breakdown"
	leakageCriterion   screening.Criterion = "leakage"
)

// across is a pair of leads between which the bridge is read in reverse, red probe first, and the legs that must block then.
type across struct {
	section string
	legs    [2]string
}

// The sections: the four legs, anode to cathode; the whole bridge forward; the two ways across the AC leads.
var legs = [...]string{"ac1-plus", "ac2-plus", "minus-ac1", "minus-ac2"}

const wholeBridge = "minus-plus"

var ways = [...]across{{"ac1-ac2", [2]string{"ac2-plus", "minus-ac1"}}, {"ac2-ac1", [2]string{"ac1-plus", "minus-ac2"}}}

var inf = math.Inf(1)

//go:embed forward.csv
var forwardCSV string

// band is a row of forward.csv: bounds in volts (of leakage, amperes) for readings from `from` to `to` amperes.
type band struct {
	low, high, from, to float64
	source              screening.Source
}

var load = sync.OnceValue(func() map[string]band {
	bands, err := readBands(forwardCSV)
	if err != nil {
		panic("bridge: embedded table: " + err.Error())
	}
	return bands
})

func readBands(text string) (map[string]band, error) {
	t := book.ReadTable("forward.csv", text)
	bands := map[string]band{}
	for _, r := range t.Rows() {
		b := band{r.Number("low"), r.Number("high"), r.Number("from"), r.Number("to"), r.Source()}
		if b.low >= b.high || b.from > b.to {
			r.Errorf("high", "bounds are upside down")
		}
		bands[r.Required("of")] = b
	}
	var missing error
	for _, name := range []string{"expected", "sound", "apart", "far-apart", "leakage"} {
		if _, ok := bands[name]; !ok {
			missing = errors.Join(missing, errors.New("forward.csv: no row "+name))
		}
	}
	return bands, errors.Join(t.Err(), missing)
}

// Book returns the rulebook; t is the table of type numbers.
func Book(t *types.Table) *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "bridge rectifier", Tables: book.Version(Kind, edition, forwardCSV) + ", " + t.Version(Kind),
		Claims: claims(t), Bench: bench(), Look: book.Look(plates()),
		Complete: func(c screening.Claim) (screening.Claim, []screening.Reason, error) { return complete(t, c) },
		Limits:   limits, Derive: derive, Convert: convert, Adjust: adjust, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims(t *types.Table) []screening.Field {
	return []screening.Field{
		sheet.Field(t, Kind, "KBP208"),
		{
			Definition: screening.VRRM, Example: "800V", AcceptRange: book.AtLeastIn(quantity.Volt, "V"),
			Help: "the peak reverse voltage of its sheet; a B80 print is 80 V of AC input, not this",
		},
		{
			Definition: screening.IFAV, Example: "1.5A", AcceptRange: book.AtLeastIn(quantity.Ampere, "A"),
			Help: "the output current it claims to carry; not tested",
		},
		{Definition: screening.IFSM, Example: "rated:ifsm=50A", Help: "the surge of one half-wave that its sheet allows; not tested"},
		{Definition: screening.VF, Example: "rated:vf@1.5A=..1.1V", Help: "the highest forward voltage of one leg in its sheet, at a current"},
		{Definition: screening.IR, Example: "rated:ir@800V=..5uA", Help: "the highest reverse current of one leg in its sheet, at a voltage"},
		book.CaseField("case=KBP"),
		{
			Definition: book.Trait(screening.TraitPinout, "pinout"), Trait: true, Example: "pinout=+~~-",
			Help: "the leads in order; + and ~ are mostly printed at them",
		},
		book.DatedField(),
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.VF, Effort: 5 * time.Second, Default: screening.At(screening.Current, testerCurrent), Example: "vf/ac1-plus=0.52",
			Help: "diode test, red on the lead named first, black on the second: each leg by itself",
		},
		{
			Definition: screening.VBR, Effort: 5 * time.Second, Example: "vbr/ac1-ac2=OL",
			Ask:  "READ from one AC lead to the other, red on the one named first: OL shows that two legs block",
			Help: "AC lead to AC lead, red on the one named first; each way tests two legs, so both ways test all four",
		},
		{
			Definition: screening.IR, Effort: time.Minute, Example: "ir/ac1-ac2@30V=0.1uA",
			Help: "reverse current through a series resistor, AC lead to AC lead or of one leg, at the voltage stated",
		},
		{
			Definition: VFApart, Effort: time.Hour, Example: "vf-apart=10mV",
			Help: "computed from the four legs: the highest forward voltage less the lowest",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the part, lying in the room", Example: "22C"},
	}
}

// plates keeps selenium from being judged by silicon's figures.
func plates() screening.Check {
	return screening.Check{
		Name: "plates", Words: []string{"plates", "fins", "selenium"},
		Question: "Stacked plates, fins, or a flat metal can (selenium)?",
		Help: "selenium stacks are square plates on a bolt; flat ones sit in a thin aluminium can and carry prints such as B250C100. " +
			"A leg that drops 1 V and more at a tester's current is not silicon",
		Verdict: screening.Barred,
		Reason:  "it looks like selenium: that gives off toxic, foul-smelling gas when it fails, and its drop grows with age",
		Do:      "JUDGE it as kind selenium; do not power it up, burn or grind it",
		Source:  screening.Source{Document: "restorers' safety notes on selenium rectifiers", Status: screening.Published},
	}
}

// complete adds what the type's row says, and refuses a claim that contradicts it.
func complete(t *types.Table, c screening.Claim) (screening.Claim, []screening.Reason, error) {
	if r, v, ok := sheet.Least(c, screening.VRRM.Name); ok {
		tabled, has := sheet.Tabled(t, Kind, c, screening.VRRM.Name)
		switch {
		case v <= 0:
			return c, nil, errors.New("vrrm: " + asPrinted(v) + " is no reverse voltage to block")
		case has && r.Typed != "" && v > tabled.Low:
			return c, nil, errors.New("vrrm: " + asPrinted(v) + " is claimed, but " + c.Trait(screening.TraitType) + " is rated " + asPrinted(tabled.Low))
		}
	}
	c, notes := sheet.Complete(t, Kind, c, "rated:vrrm=400V")
	return c, notes, nil
}
