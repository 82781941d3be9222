// Package resistor is the rulebook of fixed resistors: the tolerance band, what a value outside it means for each technology, and drying.
package resistor

import (
	"fmt"
	"math"
	"strings"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "resistor"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "3"

// Power is a rating only: the power that the part claims to stand at 70 °C, or at 25 °C on old and wirewound types.
var Power = screening.Power

const valueCriterion screening.Criterion = "resistance"

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "fixed resistor", Tables: book.Version(Kind, edition, technologiesCSV, dryingCSV),
		Claims: claims(), Bench: bench(), Look: look(),
		Complete: complete, Limits: limits, Adjust: adjust, Lesser: lesser, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{Definition: screening.Resistance, Required: true, Help: "as printed or by its colours: 4k7, R47, 470R", Example: "4k7"},
		{
			Definition: screening.Tolerance, Help: "gold 5 %, silver 10 %, none 20 %; letters F G J K M", Example: "5%",
			AcceptRange: book.ToleranceLetter, Ambiguous: book.ToleranceMeanings,
		},
		{Definition: Power, Help: "printed, or judged by size; it is not tested", Example: "0.25W"},
		{
			Definition: screening.Definition{Name: screening.TraitTechnology, Label: "technology"}, Trait: true, Words: technologyWords(),
			AskWhen: mayBeDamp,
			Help:    "carbon composition (a solid moulded rod) can be dried, film and wire cannot; \"unknown\" where you cannot tell",
			Example: "carbon-film",
		},
		{
			Definition: screening.Definition{Name: screening.TraitDated, Label: "maker's date"}, Trait: true,
			Help: "a year, or a decade such as 196x", Example: "1964",
		},
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Resistance, Effort: 5 * time.Second, FollowsNominal: true, Example: "4.68k",
			Help: "out of circuit, or one lead lifted; short the probes first and note what they read",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the room", Example: "22C"},
	}
}

func look() []screening.Check {
	return book.Look(
		screening.Check{
			Name: "burnt", Words: []string{"burnt", "charred"},
			Question: "Is it charred, blistered or discoloured by heat?",
			Help:     "a brown band round the middle, bubbled paint, colours that have shifted",
			Verdict:  screening.Reject,
			Reason:   "it has been overheated: its value may still read well and will not stay",
			Do:       "scrap it, and find out what overloaded it before you fit another",
			Source:   screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
		},
	)
}

// complete adds the default tolerance and says where the value is an unlikely one.
func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	if err := book.CheckStands(c, &screening.Power); err != nil {
		return c, nil, err
	}
	nominal, ok := c.Nominal(screening.Resistance.Name, "")
	if ok && nominal <= 0 {
		return c, nil, fmt.Errorf("resistance: %s has no tolerance band; a link of 0 Ω is judged as a piece of wire",
			quantity.Format(nominal, quantity.Ohm, 0))
	}
	tech, known := technologyNamed(c.Trait(screening.TraitTechnology))
	if !known {
		return c, nil, fmt.Errorf("technology: %q is not known; one of %s", c.Trait(screening.TraitTechnology), technologyNames())
	}
	var notes []screening.Reason
	tolerance, claimed := c.Rating(screening.Tolerance.Name, "")
	tightest := 0.0
	switch {
	case !claimed:
		tolerance = screening.RangeRating(screening.Tolerance, -tech.tolerance, tech.tolerance)
		tolerance.Source = tech.source
		c = c.WithRating(tolerance)
		notes = append(notes, book.Note(screening.Tolerance.Name, "no tolerance claimed: taken as %s, %s", tolerance, tolerance.Source))
	case tolerance.Low <= -1 || tolerance.High >= 10 || tolerance.Low > 0 || tolerance.High < 0:
		return c, nil, fmt.Errorf("tolerance: %s is no tolerance of a resistor; it is a band such as ±5 %%", tolerance)
	default:
		tightest = width(tolerance)
	}
	if ok && !preferred(nominal, tightest) {
		notes = append(notes, book.Note(screening.Resistance.Name, "%s is not a preferred value of IEC 60063 at this tolerance: read the marking "+
			"again (old parts carry round values such as 250 kΩ)", quantity.Format(nominal, quantity.Ohm, 0)))
	}
	return c, notes, nil
}

func technologyNames() string {
	var names []string
	for _, t := range load().technologies {
		names = append(names, t.name)
	}
	return strings.Join(names, ", ")
}

// width is the larger side of a tolerance, as a ratio.
func width(t screening.Rating) float64 { return math.Max(-t.Low, t.High) }

// band returns the bounds in ohms that a claim implies.
func band(c screening.Claim) (low, high float64, ok bool) {
	r, claimed := c.Rating(screening.Resistance.Name, "")
	if !claimed {
		return 0, 0, false
	}
	if !r.HasNominal() {
		return r.Low, r.High, true
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	return r.Nominal * (1 + t.Low), r.Nominal * (1 + t.High), true
}

// bandFormula says how the bounds come about: "4.7 kΩ ±5 % = 4.465 kΩ to 4.935 kΩ".
func bandFormula(c screening.Claim) string {
	r, _ := c.Rating(screening.Resistance.Name, "")
	if !r.HasNominal() {
		return r.String() + " as claimed"
	}
	low, high, _ := band(c)
	t, _ := c.Rating(screening.Tolerance.Name, "")
	return fmt.Sprintf("%s %s = %s to %s", quantity.Format(r.Nominal, quantity.Ohm, 0), t,
		quantity.Format(low, quantity.Ohm, 4), quantity.Format(high, quantity.Ohm, 4))
}

// toleranceSource is where the band comes from: the part's own print, the letter's meaning, or the default's source.
func toleranceSource(t screening.Rating) screening.Source {
	switch {
	case book.ToleranceSource(t.Typed).Status != screening.NoStatus:
		return book.ToleranceSource(t.Typed)
	}
	return book.SourceOf(&t)
}

func limits(c screening.Claim) ([]screening.Limit, error) {
	low, high, ok := band(c)
	if !ok {
		return nil, nil
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	l := screening.Limit{
		On: screening.Resistance.Name, Unit: quantity.Ohm, Criterion: valueCriterion, Low: low, High: high,
		Need: screening.Required, Set: screening.GeneralSet, InUse: true, Grade: screening.WithinSpec, Source: toleranceSource(t),
		Formula: func() string { return bandFormula(c) },
	}
	if technologyOf(c).name == composition {
		l.TreatHigh = screening.Dry
		l.Note = "moisture only ever raises carbon composition; drying can bring it back"
	}
	return []screening.Limit{l}, nil
}

func untested(part screening.Part, _ []screening.Finding) []string {
	if p, ok := part.Claim.Nominal(Power.Name, ""); ok {
		return []string{"rated power (" + quantity.Format(p, quantity.Watt, 0) + ") and value under load"}
	}
	return []string{"rated power and value under load"}
}
