// Package varistor is the rulebook of metal oxide varistors: the voltage at which 1 mA flows, and the leakage at half of it. What surge it still
// stands no bench shows, and its usual place, across the mains, is barred to anything salvaged.
package varistor

import (
	_ "embed"
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "varistor"

// edition goes up when a rule in code changes; a change of the table changes the version by itself.
const edition = "1"

// VV is the varistor voltage: what stands across it while 1 mA flows.
var VV = screening.Definition{Name: "vv", Symbol: "VV", Label: "varistor voltage", Unit: quantity.Volt}

// ACVoltage is a rating only: the highest AC voltage that may stand across it for good, V rms.
var ACVoltage = screening.Definition{Name: "ac-voltage", Symbol: "Vrms", Label: "highest AC voltage", Unit: quantity.Volt}

// testCurrent is the current at which a varistor's voltage is named, A.
const testCurrent = 1e-3

const (
	voltageCriterion screening.Criterion = "vv"
	leakageCriterion screening.Criterion = "leakage"
	shortCriterion   screening.Criterion = "short"
)

//go:embed figures.csv
var figuresCSV string

type figure struct {
	value  float64
	source screening.Source
}

var figures = sync.OnceValue(func() map[string]figure {
	all, err := readFigures(figuresCSV)
	if err != nil {
		panic("varistor: embedded table: " + err.Error())
	}
	return all
})

func readFigures(text string) (map[string]figure, error) {
	t := book.ReadTable("figures.csv", text)
	all := map[string]figure{}
	for _, r := range t.Rows() {
		all[r.Required("name")] = figure{r.Number("value"), r.Source()}
	}
	return all, t.Err()
}

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "metal oxide varistor", Tables: book.Version(Kind, edition, figuresCSV),
		Claims: claims(), Bench: bench(), Look: look(),
		Complete: complete, Limits: limits, Convert: convert, Adjust: adjust, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{
			Definition: VV, Required: true, Example: "rated:vv=470V", Ambiguous: codeMeaning,
			Help: "at 1 mA: a print of 471K is rated:vv=470V 10%; of a print of an AC voltage, 275 V, say ac-voltage=275V",
		},
		{
			Definition: ACVoltage, Example: "ac-voltage=275V", AcceptRange: acceptAC,
			Help: "where only the highest AC voltage is printed: 275VAC, 275V~ or ac-voltage=275V",
		},
		{
			Definition: screening.Tolerance, Example: "10%", Help: "of the voltage at 1 mA; letters J K L M; ±10 % where none is printed",
			AcceptRange: book.ToleranceLetter, Ambiguous: book.ToleranceMeanings,
		},
		book.DatedField(),
	}
}

var acPattern = regexp.MustCompile(`^(?i)(\d{1,4})(?:V~|V\.?A\.?C\.?|VRMS)$`)

// acceptAC takes a bare word as a highest AC voltage: "275VAC", "275V~".
func acceptAC(word string) (low, high float64, ok bool) {
	m := acPattern.FindStringSubmatch(strings.TrimSpace(word))
	if m == nil {
		return 0, 0, false
	}
	volts, err := strconv.ParseFloat(m[1], 64)
	return volts, volts, err == nil
}

// anyTemperature takes readings whatever the temperature: it moves the voltage by 0.05 % per kelvin.
var anyTemperature = screening.Fit{screening.PartTemperature: screening.Any}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Resistance, Effort: 5 * time.Second, Example: "OL",
			Help: "on the highest ohms range, out of circuit: a sound one reads open (OL), and so does a worn one",
		},
		{
			Definition: VV, Effort: 60 * time.Second, Example: "vv@1mA=468V", UnderVoltage: true, Fit: anyTemperature,
			Help: "volts across it while 1 mA flows, a few seconds only; with the current it was read at",
		},
		{
			Definition: screening.Leakage, Effort: 60 * time.Second, Example: "leakage@235V=2uA", UnderVoltage: true,
			Fit:  screening.Fit{screening.PartTemperature: screening.Any, screening.After: screening.Any},
			Help: "at half its voltage, DC, through a series resistor",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the room", Example: "22C"},
	}
}

func look() []screening.Check {
	return book.Look(screening.Check{
		Name: "burnt", Words: []string{"burnt", "charred", "scorched"}, Question: "Is it burnt, scorched, or its coating lifted?",
		Help:    "a dark spot, a blister, a split at the leads: it has taken its surge",
		Verdict: screening.Reject, Reason: "it has taken more than it stands: it will conduct at its working voltage and burn",
		Do:     "SCRAP it, and fit a new, approved part",
		Source: screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
	})
}

// code is a printed varistor code: disc size and D, three digits of volts, and a tolerance letter: "471K", "14D471K".
var code = regexp.MustCompile(`^(?:\d{1,2}[A-Z])?(\d)(\d)(\d)([JKLM])$`)

// codeMeaning says what a printed code means; it is typed as the value it stands for.
func codeMeaning(word string) []string {
	m := code.FindStringSubmatch(word)
	if m == nil {
		return nil
	}
	digits, _ := strconv.Atoi(m[1] + m[2])
	zeros, _ := strconv.Atoi(m[3])
	volts := quantity.Format(float64(digits)*math.Pow10(zeros), quantity.Volt, 0)
	tolerance := map[string]string{"J": "5%", "K": "10%", "L": "15%", "M": "20%"}[m[4]]
	return []string{fmt.Sprintf("%s at 1 mA ±%s, the code of a varistor: type rated:vv=%.0fV %s", volts, tolerance,
		float64(digits)*math.Pow10(zeros), tolerance)}
}

// complete computes the voltage at 1 mA of a part that prints its AC voltage only, adds the default tolerance, and refuses what cannot be.
func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	var notes []screening.Reason
	for _, d := range []screening.Definition{VV, ACVoltage} {
		if r, ok := c.Rating(d.Name, ""); ok && !(r.High > 0) {
			return c, nil, fmt.Errorf("%s: %s is no voltage of a varistor; it lies above zero, such as 470V", d.Name, r)
		}
	}
	if r, ok := c.Rating(ACVoltage.Name, ""); ok && !r.HasNominal() && r.Low == r.High { // printed as 275VAC
		r.Nominal = r.Low
		c = c.WithRating(r)
	}
	ac, hasAC := c.Nominal(ACVoltage.Name, "")
	vv, hasVV := c.Rating(VV.Name, "")
	switch f := figures()["ac-ratio"]; {
	case hasAC && !hasVV:
		vv = screening.NominalRating(VV, ac*f.value)
		vv.Source = f.source
		c, hasVV = c.WithRating(vv), true
		notes = append(notes, book.Note(VV.Name, "voltage at 1 mA taken as 1.6 times the AC voltage, about %s, which may not reject (%s)",
			book.About(vv.Nominal, quantity.Volt), f.source.Status))
	case hasAC && ac*math.Sqrt2 > vv.High:
		return c, nil, fmt.Errorf("ac-voltage: %s rms has peaks of %.0f V, above its voltage at 1 mA (%s): one of the two is misread",
			quantity.Format(ac, quantity.Volt, 0), ac*math.Sqrt2, vv)
	}
	t, claimed := c.Rating(screening.Tolerance.Name, "")
	switch {
	case claimed && (t.Low <= -1 || t.High >= 1 || t.Low > 0 || t.High < 0):
		return c, nil, fmt.Errorf("tolerance: %s is no tolerance of a varistor; it is a band such as ±10 %%", t)
	case !claimed && hasVV && vv.HasNominal():
		f := figures()["tolerance"]
		t = screening.RangeRating(screening.Tolerance, -f.value, f.value)
		t.Source = f.source
		c = c.WithRating(t)
		notes = append(notes, book.Note(screening.Tolerance.Name, "no tolerance claimed: taken as %s (%s)", t, f.source.Status))
	}
	return c, notes, nil
}

func volts(x float64) string { return quantity.Format(x, quantity.Volt, 0) }
