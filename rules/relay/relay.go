// Package relay is the rulebook of relays in short form: one coil, and contacts that are sections.
//
// A coil conducts, pulls in and lets go. A contact is closed where it should be and open where it should be. What an ohmmeter says of a
// closed contact misleads: its milliampere does not break the film that an ampere breaks at once, so only a reading at a contact's own
// current may refuse it. Contacts that switched the mains go back to no mains.
package relay

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/winding"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "relay"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The characteristics of a relay.
var (
	// CoilResistance is the coil's direct-current resistance.
	CoilResistance = screening.Definition{
		Name: "coil-resistance", Symbol: "Rcoil", Label: "coil resistance", Unit: quantity.Ohm, Over: screening.Resistance.Over,
	}
	// CoilVoltage is a rating: the volts that the coil is made for.
	CoilVoltage = screening.Definition{Name: "coil-voltage", Symbol: "Ucoil", Label: "rated coil voltage", Unit: quantity.Volt}
	// PullIn and DropOut are the coil voltages at which the contacts change over, rising and falling.
	PullIn  = screening.Definition{Name: "pull-in", Symbol: "Uon", Label: "pull-in voltage", Unit: quantity.Volt}
	DropOut = screening.Definition{Name: "drop-out", Symbol: "Uoff", Label: "drop-out voltage", Unit: quantity.Volt}
	// ContactResistance is that of a closed contact, by section.
	ContactResistance = screening.Definition{
		Name: "contact-resistance", Symbol: "Rc", Label: "resistance of the closed contact", Unit: quantity.Ohm, Over: screening.Resistance.Over,
	}
	// OpenContact is the resistance of an open contact, by section.
	OpenContact = screening.Definition{
		Name: "open-contact", Symbol: "Ropen", Label: "resistance of the open contact", Unit: quantity.Ohm, Over: screening.Resistance.Over,
	}
	// ContactCurrent is a rating: the current that a contact claims to switch.
	ContactCurrent = screening.Definition{Name: "contact-current", Symbol: "Ic", Label: "rated contact current", Unit: quantity.Ampere}
)

// The traits of a relay besides those of every kind.
const (
	TraitSupply   = "supply"   // what the coil is made for: ac or dc
	TraitContacts = "contacts" // what the contacts claim, as printed: "2 changeover, 5 A 250 V"
)

// The words of a coil's supply.
const ac, dc = "ac", "dc"

// The criteria.
const (
	contactCriterion screening.Criterion = "contact"
	newCriterion     screening.Criterion = "contact-as-new"
	openCriterion    screening.Criterion = "open-contact"
	pullInCriterion  screening.Criterion = "pull-in"
	dropOutCriterion screening.Criterion = "drop-out"
)

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "relay", Tables: book.Version(Kind, edition, figuresCSV, winding.CSV),
		Claims: claims(), Bench: bench(), Look: look(),
		Complete: complete, Limits: limits, Adjust: adjust, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{Definition: CoilVoltage, Example: "12V", Help: "the coil's, as printed", AcceptRange: exactly(quantity.Volt, "V")},
		{Definition: CoilResistance, Example: "270R", Help: "the coil's, as printed or of a twin", AcceptRange: exactly(quantity.Ohm, "R", "ohm", "Ω", "k")},
		{
			Definition: book.Trait(TraitSupply, "supply of the coil"), Trait: true, Example: dc, Help: "ac or dc; dc is taken where none is given",
			Words: []screening.Word{{Word: ac, Text: ac}, {Word: dc, Text: dc}},
		},
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: "power",
			Help: "power or signal contacts, reed, or mercury-wetted; power is taken where none is given",
			Words: []screening.Word{
				{Word: power, Text: power},
				{Word: signal, Text: signal},
				{Word: "reed", Text: "reed"},
				{Word: "mercury", Text: "mercury-wetted"},
				{Word: "mercury-wetted", Text: "mercury-wetted"},
			},
		},
		{Definition: ContactCurrent, Example: "rated:contact-current=5A", Help: "what a contact claims to switch; it is not tested"},
		{
			Definition: book.Trait(TraitContacts, "contacts"), Trait: true, Example: "contacts=2xCO-5A-250V",
			Help: "what the contacts claim, as printed; it is not tested",
		},
		{Definition: ContactResistance, Example: "rated:contact-resistance=..50m", Help: "the most that its sheet allows a new contact"},
		{Definition: PullIn, Example: "rated:pull-in=..8.4V", Help: "the coil voltage at which its sheet says that it must have pulled in"},
		{Definition: DropOut, Example: "rated:drop-out=1.2V..", Help: "the coil voltage at which its sheet says that it must have let go"},
		book.DatedField(),
	}
}

// The technologies that decide at which current a contact is judged.
const power, signal = "power", "signal"

// exactly takes a bare value that states its unit by one of the signs as this rating: of all the volts and ohms of a relay the coil's are
// what is printed on it.
func exactly(unit quantity.Unit, signs ...string) func(string) (low, high float64, ok bool) {
	return func(word string) (low, high float64, ok bool) {
		if !slices.ContainsFunc(signs, func(s string) bool { return strings.Contains(word, s) }) {
			return 0, 0, false
		}
		v, err := quantity.Parse(word, unit)
		if err != nil || v.Sense != quantity.Exactly || v.Over || v.Number <= 0 {
			return 0, 0, false
		}
		return v.Number, v.Number, true
	}
}

func bench() []screening.Field {
	anyCurrent := screening.Fit{screening.Current: {Low: 0.5, High: 100}, screening.Voltage: screening.Any}
	return []screening.Field{
		{
			Definition: CoilResistance, Example: "coil-resistance=268", Effort: 5 * time.Second, FollowsNominal: true,
			Band: screening.Span{Low: 0, High: 1e9}, Help: "ohms range across the coil; a diode across it reads one way round: take the higher",
		},
		{
			Definition: OpenContact, Example: "open-contact/1=OL", Effort: 10 * time.Second, Band: screening.Span{Low: 0, High: 1e15},
			Help: "of each contact by its name, where it should be open: normally open ones at rest, the others pulled in",
		},
		{
			Definition: ContactResistance, Example: "contact-resistance/1@1A=28m", Effort: 20 * time.Second, Fit: anyCurrent,
			Band: screening.Span{Low: 0, High: 1e9},
			Help: "of each contact where it should be closed, with the current it was taken at; an ohmmeter's reading may only pass it",
		},
		{
			Definition: PullIn, Example: "pull-in=7.9V", Effort: time.Minute, Band: screening.Span{Low: 0, High: 1000},
			Help: "turn the coil's supply up slowly from nothing until it clicks",
		},
		{
			Definition: DropOut, Example: "drop-out=2.1V", Effort: time.Minute, Band: screening.Span{Low: 0, High: 1000},
			Help: "turn it down slowly from the rated voltage until it lets go",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the room: a hot coil pulls in later", Example: "22C"},
	}
}

func look() []screening.Check {
	repairers := screening.Source{Document: "repairers' rule", Status: screening.CommonPractice}
	return book.Look(
		screening.Check{
			Name: "burnt", Words: []string{"burnt", "charred", "melted"}, Question: "Is coil, case or a contact burnt or melted?",
			Help:    "through a clear case: dark lacquer, melted bobbin, contacts with craters or welded beads. Leave a closed case closed",
			Verdict: screening.Reject, Reason: "a coil or contact that has burnt will stick or open at the next load",
			Do: "SCRAP it, and find out what overloaded it before you fit another", Source: repairers,
		},
		screening.Check{
			Name: "stuck", Words: []string{"stuck", "loose-armature"}, Question: "Does the armature stick, or hang loose?",
			Help:    "pressed and let go it must come back by itself; a spring that is off, a contact bent away",
			Verdict: screening.Reject, Reason: "an armature that does not return leaves its circuit on",
			Do: "SCRAP it, or keep it for its parts", Source: repairers,
		},
	)
}

// complete makes a value of the coil's print, and refuses what no relay claims.
func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	for _, d := range []screening.Definition{CoilVoltage, CoilResistance} {
		r, ok := c.Rating(d.Name, "")
		switch {
		case !ok:
		case r.HasNominal() && r.Nominal <= 0, !r.HasNominal() && r.High <= 0:
			return c, nil, fmt.Errorf("%s: %s is none of a coil", d.Name, r)
		case !r.HasNominal() && r.Low == r.High:
			r.Nominal = r.Low
			c = c.WithRating(r)
		}
	}
	var notes []screening.Reason
	if _, ok := coilVolts(c); !ok {
		notes = append(notes, book.Note(CoilVoltage.Name, "the coil's voltage is not claimed, so what it must pull in at is not known"))
	}
	if c.Trait(TraitSupply) == ac {
		notes = append(notes, book.Note(PullIn.Name, "an AC coil is held only to its sheet's own pull-in and drop-out; on DC of its printed voltage it burns"))
	}
	return c, notes, nil
}

// coilVolts returns the coil's rated voltage in volts.
func coilVolts(c screening.Claim) (float64, bool) { return c.Nominal(CoilVoltage.Name, "") }

// judgedAt returns the amperes at which this relay's contacts are judged, and the volts of the open source.
func judgedAt(c screening.Claim) (amperes, volts float64) {
	f := load()
	if t := c.Trait(screening.TraitTechnology); t == signal || t == "reed" {
		return f["signal"].value, f["signal-volts"].value
	}
	return f["power"].value, f["power-volts"].value
}

func untested(part screening.Part, findings []screening.Finding) []string {
	said := []string{"not for: switching the mains (fit a new, approved one there)", "what the contacts switch, and for how long"}
	if t := part.Claim.Trait(TraitContacts); t != "" {
		said[1] += " (" + t + ")"
	}
	operated := false
	for i := range findings {
		operated = operated || findings[i].Limit.On == PullIn.Name && findings[i].Reading != nil
	}
	if _, measured := part.Reading(PullIn.Name, ""); !operated && !measured {
		said = append(said, "that it pulls in and lets go")
	}
	return append(said, "insulation from coil to contacts")
}

var inf = math.Inf(1)
