// Package variablecap is the rulebook of variable capacitors: tuning gangs and trimmers. What counts first is that no plates touch on the way;
// what capacitance they reach is mostly printed nowhere, and then it is kept as measured.
package variablecap

import (
	_ "embed"
	"fmt"
	"math"
	"slices"
	"strings"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "variable-capacitor"

// edition goes up when a rule in code changes; a change of the table changes the version by itself.
const edition = "1"

// The traits that a variable capacitor claims.
const (
	TraitForm       = "form"
	TraitDielectric = "dielectric"
)

// air is the dielectric whose plates can be bent back and cleaned.
const air = "air"

// The two ends of its range.
var (
	CapacitanceMax = screening.Definition{Name: "capacitance-max", Symbol: "Cmax", Label: "highest capacitance", Unit: quantity.Farad}
	CapacitanceMin = screening.Definition{Name: "capacitance-min", Symbol: "Cmin", Label: "lowest capacitance", Unit: quantity.Farad}
)

const (
	maxCriterion   screening.Criterion = "capacitance-max"
	minCriterion   screening.Criterion = "capacitance-min"
	shortCriterion screening.Criterion = "insulation"
)

//go:embed figures.csv
var figuresCSV string

// figure is an allowance: a share of the claimed value and farads besides.
type figure struct {
	share, farad float64
	source       screening.Source
}

var figures = sync.OnceValue(func() map[string]figure {
	all, err := readFigures(figuresCSV)
	if err != nil {
		panic("variablecap: embedded table: " + err.Error())
	}
	return all
})

func readFigures(text string) (map[string]figure, error) {
	t := book.ReadTable("figures.csv", text)
	all := map[string]figure{}
	for _, r := range t.Rows() {
		all[r.Required("name")] = figure{r.Number("share"), r.Number("pf") / 1e12, r.Source()}
	}
	return all, t.Err()
}

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "variable capacitor or trimmer", Tables: book.Version(Kind, edition, figuresCSV),
		Claims: claims(), Bench: bench(), Look: look(),
		Complete: complete, Limits: limits, Adjust: adjust, Lesser: lesser, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Capacitance, Example: "10..365pF", AcceptRange: printedRange,
			Help: "lowest to highest, 10..365pF, or the highest alone; by section: rated:capacitance/1=10..365pF; none: it is kept as measured",
		},
		{
			Definition: book.Trait(book.TraitSections, "sections"), Trait: true, Example: "2-gang", Help: "sections moved together: single, 2-gang, 3-gang",
			Words: []screening.Word{{Word: "single", Text: "1"}, {Word: "dual", Text: "2"}, {Word: "2-gang", Text: "2"}, {Word: "3-gang", Text: "3"}, {Word: "4-gang", Text: "4"}},
		},
		{
			Definition: book.Trait(TraitDielectric, "dielectric"), Trait: true, Example: air, Help: "what is between the plates: air, plastic film, ceramic, mica, glass",
			Words: []screening.Word{{Word: air, Text: air}, {Word: "film", Text: "film"}, {Word: "plastic", Text: "film"}, {Word: "ceramic", Text: "ceramic"}, {Word: "mica", Text: "mica"}, {Word: "glass", Text: "glass"}},
		},
		{
			Definition: book.Trait(TraitForm, "form"), Trait: true, Example: "trimmer", Help: "gang or trimmer",
			Words: []screening.Word{{Word: "gang", Text: "gang"}, {Word: "tuning", Text: "gang"}, {Word: "trimmer", Text: "trimmer"}, {Word: "padder", Text: "trimmer"}},
		},
		book.DatedField(),
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.InsulationResistance, Effort: 10 * time.Second, Example: "OL",
			Help: "stator to rotor on the highest ohms range, out of circuit: turn slowly from end to end and type the lowest, OL where it stays open",
		},
		{
			Definition: CapacitanceMax, Effort: 15 * time.Second, Example: "372pF",
			Help: "plates fully meshed, or the screw where it reads most; rotor or frame to the meter's low side, and its leads' own pF taken off",
		},
		{Definition: CapacitanceMin, Effort: 15 * time.Second, Example: "12pF", Help: "plates fully open, or the screw where it reads least"},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the room", Example: "22C"},
	}
}

func look() []screening.Check {
	practice := screening.Source{Document: "restorers' rule", Status: screening.CommonPractice}
	return book.Look(
		screening.Check{
			Name: "bent-plates", Words: []string{"bent-plates", "bent"}, Question: "Are plates bent, loose or touching?",
			Help:    "look along the gaps against a light while you turn; slotted end plates that are spread on purpose are no fault",
			Verdict: screening.Undecided, Reason: "its plates are bent, loose or touching: what it reads is not what it will read",
			Do: "STRAIGHTEN them with a flat blade thinner than the gap, then measure it all again", Source: practice,
		},
		screening.Check{
			Name: "worn-film", Words: []string{"worn-film", "milky"}, Question: "Is its film milky, creased or coming out?",
			Help:    "plastic sheets between the plates of small tuning capacitors; in a sealed one you hear or feel them scrape",
			Verdict: screening.Reject, Reason: "its film is worn: it crackles now and shorts later, and cannot be mended",
			Do: "SCRAP it, or keep it for its shaft and screws", Source: practice,
		},
		screening.Check{
			Name: "stiff", Words: []string{"stiff", "wobbly", "seized"}, Question: "Is the shaft stiff, wobbly or bent?",
			Help: "old grease sets hard: never force it", Reason: "its shaft is stiff, wobbly or bent: see that it serves", Source: practice,
		},
	)
}

// printedRange reads a range as it is printed or typed: "10..365pF", "10-365p", "10pF..365pF". Where only the upper end has a unit it is that of
// both: nobody makes a variable capacitor from 10 F.
func printedRange(word string) (low, high float64, ok bool) {
	from, to, cut := strings.Cut(word, "..")
	if !cut {
		from, to, cut = strings.Cut(word, "-")
	}
	if !cut || from == "" || to == "" {
		return 0, 0, false
	}
	if digits := strings.TrimLeft(to, "0123456789.,"); strings.Trim(from, "0123456789.,") == "" {
		from += digits
	}
	l, err := quantity.Parse(from, quantity.Farad)
	h, err2 := quantity.Parse(to, quantity.Farad)
	if err != nil || err2 != nil || l.Sense != quantity.Exactly || h.Sense != quantity.Exactly || !(l.Number < h.Number) {
		return 0, 0, false
	}
	return l.Number, h.Number, true
}

// largest is the most that a variable capacitor has: beyond it a unit was mistyped (house).
const largest = 10e-9

func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	for _, r := range c.Ratings {
		if r.Of == screening.Capacitance.Name && (!(r.High > 0) || r.High > largest && !math.IsInf(r.High, 1)) {
			return c, nil, fmt.Errorf("capacitance: %s is no variable capacitor; they reach from a few pF to some 1000 pF, such as 10..365pF", r)
		}
	}
	return c, nil, book.CheckSections(c)
}

func farads(x float64) string { return quantity.Format(x, quantity.Farad, 0) }

func sectionNamed(s string) string {
	if s == "" {
		return ""
	}
	return "section " + s + ": "
}

// mendable reports whether plates that touch can be bent back: in air, or where nobody said what is between them.
func mendable(c screening.Claim) bool {
	return slices.Contains([]string{"", air}, c.Trait(TraitDielectric))
}
