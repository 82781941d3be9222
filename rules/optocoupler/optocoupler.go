// Package optocoupler is the rulebook of optocouplers with a transistor or Darlington output, of one channel or several.
//
// What it is bought for is the current transfer ratio: collector current over LED current. Its LED ages, so the ratio falls with hours; the
// insulation between the two sides is what keeps people alive, and no bench reading proves it.
package optocoupler

import (
	_ "embed"
	"errors"
	"fmt"
	"math"
	"strconv"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "optocoupler"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The characteristics of an optocoupler.
var (
	// CTR is the collector current over the LED's current. A bare current is the LED's, a bare voltage VCE.
	CTR = screening.Definition{
		Name: "ctr", Symbol: "CTR", Label: "current transfer ratio", Unit: quantity.Ratio, AtVolts: screening.VCE,
	}
	// IC is the collector current that a stated LED current makes: CTR as it is measured.
	IC = screening.Definition{
		Name: "ic", Symbol: "IC", Label: "collector current with the LED lit", Unit: quantity.Ampere, AtVolts: screening.VCE,
	}
)

// The traits of its own.
const (
	traitOutput   = "output"
	traitChannels = "channels"
	darlington    = "darlington"
)

// The criteria.
const (
	ledCriterion       screening.Criterion = "led"
	blockingCriterion  screening.Criterion = "led-blocking"
	ratioCriterion     screening.Criterion = "transfer-ratio"
	worksCriterion     screening.Criterion = "passes-light"
	darkCriterion      screening.Criterion = "dark-current"
	sheetDarkCriterion screening.Criterion = "dark-current-of-sheet"
	breakdownCriterion screening.Criterion = "led-breakdown"
)

var inf = math.Inf(1)

//go:embed figures.csv
var figuresCSV string

type figure struct {
	low, high, from, to float64
	source              screening.Source
}

var load = sync.OnceValue(func() map[string]figure {
	all, err := readFigures(figuresCSV)
	if err != nil {
		panic("optocoupler: embedded table: " + err.Error())
	}
	return all
})

func readFigures(text string) (map[string]figure, error) {
	t := book.ReadTable("figures.csv", text)
	all := map[string]figure{}
	for _, r := range t.Rows() {
		f := figure{r.Number("low"), r.Number("high"), r.Number("from"), r.Number("to"), r.Source()}
		if f.low >= f.high {
			r.Errorf("high", "bounds are upside down")
		}
		all[r.Required("of")] = f
	}
	var missing error
	for _, name := range []string{"led", "dark-current", "aged", "works"} {
		if _, ok := all[name]; !ok {
			missing = errors.Join(missing, errors.New("figures.csv: no row "+name))
		}
	}
	return all, errors.Join(t.Err(), missing)
}

// Book returns the rulebook; t is the table of type numbers.
func Book(t *types.Table) *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "optocoupler", Tables: book.Version(Kind, edition, figuresCSV) + ", " + t.Version(Kind),
		Claims: claims(t), Bench: bench(), Look: book.Look(barrier(), burnt()),
		Complete: func(c screening.Claim) (screening.Claim, []screening.Reason, error) { return complete(t, c) },
		Limits:   limits, Derive: derive, Convert: convert, Adjust: adjust,
		Lesser:   func(p screening.Part, f []screening.Finding) []screening.Lesser { return lesser(t, p, f) },
		Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims(t *types.Table) []screening.Field {
	return []screening.Field{
		sheet.Field(t, Kind, "4N35"),
		{
			Definition: book.Trait(traitOutput, "output"), Trait: true, Example: "transistor",
			Help: "transistor or darlington; triac, logic and resistor outputs are not judged here",
			Words: []screening.Word{
				{Word: "transistor", Text: "transistor"}, {Word: "phototransistor", Text: "transistor"}, {Word: darlington, Text: darlington},
			},
		},
		{
			Definition: book.Trait(traitChannels, "channels"), Trait: true, Example: "dual",
			Help:  "single, dual or quad; several are measured as ctr/1=… ctr/2=…",
			Words: []screening.Word{{Word: "single", Text: "1"}, {Word: "dual", Text: "2"}, {Word: "quad", Text: "4"}},
		},
		{Definition: CTR, Example: "rated:ctr@5mA,5V=80%..160%", Help: "the transfer ratio it claims, at LED current and VCE"},
		{Definition: screening.VF, Example: "rated:vf@10mA=..1.5V", Help: "the highest drop of its LED in its sheet, at a current"},
		{Definition: screening.VRRM, Example: "rated:vrrm=6V", Help: "the reverse voltage that its LED claims to stand"},
		{Definition: screening.ICEO, Example: "rated:iceo@10V=..50nA", Help: "the dark current its sheet allows, at VCE"},
		{Definition: screening.VCEO, Example: "rated:vceo=30V", Help: "the collector-emitter voltage it claims to stand; not tested"},
		book.CaseField("case=DIP-6"),
		{
			Definition: book.Trait(screening.TraitPinout, "pinout"), Trait: true, Example: "pinout=A-K-E-C",
			Help: "the leads in order; four and six legs differ",
		},
		book.DatedField(),
	}
}

func bench() []screening.Field {
	near := screening.Fit{screening.Current: {Low: 0.8, High: 1.25}, screening.VCE: {Low: 0.5, High: 4}}
	return []screening.Field{
		{
			Definition: screening.VF, Effort: 5 * time.Second, Default: screening.At(screening.Current, testerCurrent), Example: "vf=1.05",
			Help: "diode test on the LED side, red on the anode (leg 1)",
		},
		{
			Definition: screening.VBR, Effort: 5 * time.Second, Example: "vbr=OL",
			Ask:  "TURN THE PROBES on the LED side and read again: OL shows that it blocks (vbr=OL)",
			Help: "the LED side, probes turned: OL is what a sound one shows; never more than 3 V there",
		},
		{
			Definition: screening.ICEO, Effort: 30 * time.Second, Example: "iceo@10V=..0.1uA",
			Fit:  screening.Fit{screening.VCE: {Low: 0.15, High: 1.02}},
			Help: "collector current with the LED off, in the dark of its case; state the voltage",
		},
		{
			Definition: CTR, Effort: time.Minute, Example: "ctr@10mA,10V=120%", Fit: near, Band: screening.Span{Low: 0, High: 100},
			Help: "collector current over LED current, in percent; state LED current and VCE",
		},
		{
			Definition: IC, Effort: time.Minute, Example: "ic@10mA,10V=9.2mA", Fit: near,
			Help: "the collector current itself, with the LED's current stated: the ratio is computed",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the part, lying in the room", Example: "22C"},
	}
}

// barrier keeps salvage out of safety insulation.
func barrier() screening.Check {
	return screening.Check{
		Name: "barrier", Words: []string{"barrier", "isolation"}, Question: "Will it part mains from what people touch?",
		Help: "in switch-mode supplies, chargers, mains switches and telephone sets the optocoupler is the safety barrier; between two " +
			"low-voltage circuits it is not",
		Verdict: screening.Barred,
		Reason:  "there its insulation is a safety barrier, and no bench reading proves insulation: a flash-over or heat in its former life leaves no trace",
		Do:      "FIT a new part with its safety approvals there; keep this one for circuits that are low voltage on both sides",
		Source:  screening.Source{Document: "house rule", Status: screening.House},
	}
}

func burnt() screening.Check {
	return screening.Check{
		Name: "burnt", Words: []string{"burnt", "scorched"}, Question: "Is it discoloured, blistered or burnt?",
		Help:    "a brown or blistered case has been hot: look at the leg ends and the board under it, too",
		Verdict: screening.Reject, Reason: "it has been far too hot: the LED fades on, and the insulation is not to be trusted",
		Do: "SCRAP it, or mark it so that it is not used", Source: screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
	}
}

// sections lists the channels.
func sections(c screening.Claim) []string {
	n, err := strconv.Atoi(c.Trait(traitChannels))
	if err != nil || n < 2 {
		return []string{""}
	}
	all := make([]string, n)
	for i := range all {
		all[i] = strconv.Itoa(i + 1)
	}
	return all
}

// ratio returns what the claim promises of the transfer ratio, and the LED's current and VCE that belong to it.
func ratio(c screening.Claim) (r screening.Rating, current, vce float64, ok bool) {
	for _, r := range c.Ratings {
		i, hasCurrent := r.At.Get(screening.Current)
		v, hasVoltage := r.At.Get(screening.VCE)
		if r.Of == CTR.Name && hasCurrent && i > 0 && (r.Low > 0 || !math.IsInf(r.High, 1)) {
			if !hasVoltage || v <= 0 {
				v = usualVCE
			}
			return r, i, v, true
		}
	}
	return screening.Rating{}, usualCurrent, usualVCE, false
}

// legsStatus is what the table's legs are: no text was seen for them, whatever the status of the row.
const legsStatus = screening.FromMemory

// complete adds what the type's row says, and refuses a claim that cannot be.
func complete(t *types.Table, c screening.Claim) (screening.Claim, []screening.Reason, error) {
	own := c.Trait(traitOutput)
	if n := c.Trait(traitChannels); n != "" && n != "1" && n != "2" && n != "4" {
		return c, nil, fmt.Errorf("channels: %q is not known; single, dual or quad", n)
	}
	c, notes := sheet.Complete(t, Kind, c, "rated:ctr@5mA,5V=80%..160%")
	row, tabled := t.Lookup(Kind, c.Trait(screening.TraitType))
	if tabled && own != "" && row.Trait(traitOutput) != own {
		return c, nil, fmt.Errorf("output: %q is claimed, but %s is %s", own, row.Type, row.Trait(traitOutput))
	}
	for _, r := range c.Ratings {
		if r.Of != CTR.Name {
			continue
		}
		if _, has := r.At.Get(screening.Current); !has {
			notes = append(notes, book.Note(CTR.Name, "rated:ctr=%s is not used: it does not say at which LED current it holds", r))
		}
	}
	if p := row.Trait(screening.TraitPinout); p != "" && tabled && c.Trait(screening.TraitPinout) == p {
		notes = append(notes, book.Note("", "%s: legs %s (%s)", row.Type, p, legsStatus))
	}
	return c, notes, nil
}
