// Package led is the rulebook of light-emitting diodes, of one colour or of several in one case.
//
// A light-emitting diode is told by its colour and its forward voltage. The published bands hold at 20 mA; a diode test sends about 1 mA,
// where it drops less, and many testers give up below what blue and white need: OL is then no fault. Bands of neighbouring colours
// overlap, so a voltage names colours that are possible and never one.
package led

import (
	_ "embed"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "led"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// TraitColour is the colour of its light; several, joined by +, for several in one case.
const TraitColour = "colour"

// The criteria.
const (
	forwardCriterion   screening.Criterion = "forward"
	colourCriterion    screening.Criterion = "colour"
	blockingCriterion  screening.Criterion = "blocking"
	breakdownCriterion screening.Criterion = "breakdown"
)

// The currents, A: what a diode test is taken to send; at which the published bands hold; from which on a reading tells a leaky one from
// another colour (house); the range for which the sound bands are taken (house).
const (
	testerCurrent           = 1e-3
	publishedCurrent        = 20e-3
	tellingCurrent          = 5e-3
	soundFrom, soundCurrent = 0.2e-3, 30e-3
)

var inf = math.Inf(1)

//go:embed colours.csv
var coloursCSV string

// colour is one row of colours.csv, volts.
type colour struct {
	name                string
	words               []string
	low, high           float64 // published, at 20 mA
	soundLow, soundHigh float64
	source              screening.Source
}

const unknown = "unknown"

var soundSource = screening.Source{Document: "the published band of its colour, widened", Clause: "colours.csv", Status: screening.House}

var load = sync.OnceValue(func() []colour {
	all, err := readColours(coloursCSV)
	if err != nil {
		panic("led: embedded table: " + err.Error())
	}
	return all
})

func readColours(text string) ([]colour, error) {
	t := book.ReadTable("colours.csv", text)
	var all []colour
	for _, r := range t.Rows() {
		c := colour{
			name: r.Required("colour"), low: r.Number("low"), high: r.Number("high"), soundLow: r.Number("sound-low"),
			soundHigh: r.Number("sound-high"), source: r.Source(),
		}
		if r.Has("words") {
			c.words = strings.Split(r.Text("words"), "|")
		}
		if c.low >= c.high || c.soundLow > c.low || c.soundHigh < c.high {
			r.Errorf("low", "the sound band does not contain the published one")
		}
		all = append(all, c)
	}
	if len(all) == 0 || all[len(all)-1].name != unknown {
		return all, errors.Join(t.Err(), errors.New("colours.csv: the last row is not unknown"))
	}
	return all, t.Err()
}

// colourNamed finds a colour by name or word; what is not known is the last row.
func colourNamed(text string) (*colour, bool) {
	all := load()
	for i := range all {
		if strings.EqualFold(all[i].name, text) || slices.ContainsFunc(all[i].words, func(w string) bool { return strings.EqualFold(w, text) }) {
			return &all[i], true
		}
	}
	return &all[len(all)-1], false
}

// Book returns the rulebook; t is the table of type numbers.
func Book(t *types.Table) *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "light-emitting diode", Tables: book.Version(Kind, edition, coloursCSV) + ", " + t.Version(Kind),
		Claims: claims(t), Bench: bench(), Look: book.Look(dark(), dim()),
		Complete: func(c screening.Claim) (screening.Claim, []screening.Reason, error) { return complete(t, c) },
		Limits:   limits, Convert: convert, Adjust: adjust, Lesser: lesser, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims(t *types.Table) []screening.Field {
	return []screening.Field{
		sheet.Field(t, Kind, "TSAL6200"),
		{
			Definition: book.Trait(TraitColour, "colour"), Trait: true, Example: "red", Words: colourWords(), AcceptText: severalColours,
			Ask:  "SAY which colour it lights: colour=red",
			Help: "of its light, not its body; green may be yellow-green or true-green; two in one case: red+green", AskWhen: colourMatters,
		},
		{Definition: screening.IFAV, Example: "rated:if-av=20mA", Help: "the current it claims to carry"},
		{Definition: screening.VRRM, Example: "rated:vrrm=5V", Help: "the reverse voltage it claims to stand; 5 V where it claims none"},
		{Definition: screening.VF, Example: "rated:vf@20mA=..2.2V", Help: "the highest forward voltage its sheet allows, at a current"},
		book.CaseField("case=5mm"),
		book.DatedField(),
	}
}

func colourWords() []screening.Word {
	var words []screening.Word
	for _, c := range load() {
		words = append(words, screening.Word{Word: c.name, Text: c.name})
		for _, w := range c.words {
			words = append(words, screening.Word{Word: w, Text: c.name})
		}
	}
	return words
}

// mostColours is how many light-emitting diodes one case is taken to hold.
const mostColours = 4

// severalColours takes "red+green" for two in one case.
func severalColours(word string) (string, bool) {
	var names []string
	for part := range strings.SplitSeq(word, "+") {
		c, ok := colourNamed(part)
		if !ok || c.name == unknown || slices.Contains(names, c.name) {
			return "", false
		}
		names = append(names, c.name)
	}
	return strings.Join(names, "+"), len(names) > 1 && len(names) <= mostColours
}

// colourMatters asks for the colour of one that was measured without one: who lit it has seen it.
func colourMatters(_ screening.Part, findings []screening.Finding) bool {
	return slices.ContainsFunc(findings, func(f screening.Finding) bool {
		return f.Limit.Criterion == forwardCriterion && f.Outcome == screening.Pass
	})
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.VF, Effort: 5 * time.Second, Default: screening.At(screening.Current, testerCurrent), Example: "vf=1.75",
			Fit:  screening.Fit{screening.Current: {Low: 0.75, High: 1.25}},
			Help: "diode test, red on the long lead; through a resistor say the current: vf@20mA=1.9. Two in one case: vf/red=…",
		},
		{
			Definition: screening.VBR, Effort: 5 * time.Second, Example: "vbr=OL",
			Ask:  "TURN THE PROBES and read again: OL shows that it blocks (vbr=OL)",
			Help: "turn the probes: OL is what a sound one shows; never put more than 5 V on it this way round",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the part, lying in the room", Example: "22C"},
	}
}

func dark() screening.Check {
	return screening.Check{
		Name: "dark", Words: []string{"dark", "no-light"}, Question: "Lit through its resistor, does it stay dark?",
		Help: "light it first: the diode test lights red to green, blue and white need a supply and a resistor (see the recipe for vf); " +
			"infrared shows through a camera, ultraviolet on white paper, never by eye. Not tried yet: say so, it is listed as untested",
		Verdict: screening.Reject, Reason: "it gives no light, whatever its voltage says",
		Do:     "SCRAP it, or mark it so that it is not used",
		Source: screening.Source{Document: "what it is for", Status: screening.House},
	}
}

func dim() screening.Check {
	return screening.Check{
		Name: "dim", Words: []string{"dim"}, Question: "Is it dimmer than a sound twin at the same current?",
		Help:   "light fades with hours and heat long before the voltage tells; kept with the part",
		Reason: "it is dimmer than a sound twin: it has aged, so use it where its light need not match another's",
	}
}

// colours lists the colours claimed, one for each section; a single one, known or not, is the whole part.
func colours(c screening.Claim) (names, sections []string) {
	text := c.Trait(TraitColour)
	if !strings.Contains(text, "+") {
		return []string{text}, []string{""}
	}
	names = strings.Split(text, "+")
	return names, names
}

// complete adds what the type's row says, and refuses a claim that cannot be.
func complete(t *types.Table, c screening.Claim) (screening.Claim, []screening.Reason, error) {
	own := c.Trait(TraitColour)
	c, notes := sheet.Complete(t, Kind, c, "colour=red")
	names, _ := colours(c)
	for _, name := range names {
		if _, ok := colourNamed(name); name != "" && !ok {
			return c, nil, fmt.Errorf("colour: %q is not known; one of %s", name, colourNames())
		}
	}
	row, tabled := t.Lookup(Kind, c.Trait(screening.TraitType))
	if known := row.Trait(TraitColour); tabled && own != "" && own != unknown && known != "" && own != known {
		return c, nil, fmt.Errorf("colour: %q is claimed, but %s is %s", own, row.Type, known)
	}
	if r, i, ok := sheet.Least(c, screening.IFAV.Name); ok && i <= 0 {
		return c, nil, fmt.Errorf("if-av: %s is no current to light it with", quantity.Format(r.Low, quantity.Ampere, 0))
	}
	return c, notes, nil
}

func colourNames() string {
	var names []string
	for _, c := range load() {
		names = append(names, c.name)
	}
	return strings.Join(names, ", ") + ", or several such as red+green"
}
