// Package thermistor is the rulebook of thermistors: an NTC's resistance brought to 25 °C by its B value, with all that the thermometer and the
// B value leave open; a switching PTC below its switching temperature.
package thermistor

import (
	"math"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "thermistor"

// edition goes up when a rule in code changes; a change of the table changes the version by itself.
const edition = "1"

// The traits that only a thermistor claims, and their texts.
const (
	TraitCoefficient = "coefficient"
	ntc, ptc         = "ntc", "ptc"
)

// B is a rating only: the constant of R = R25·exp(B·(1/T − 1/298.15 K)), in kelvin. K after a number is kilo on a bench, so it is typed bare.
var B = screening.Definition{Name: "b-value", Symbol: "B25/85", Label: "B value in kelvin", Unit: quantity.One}

// The criteria.
const (
	r25Criterion         screening.Criterion = "resistance"
	temperatureCriterion screening.Criterion = "temperature" // stated, whatever it is
)

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "thermistor", Tables: book.Version(Kind, edition, figuresCSV),
		Claims: claims(), Bench: bench(), Look: look(),
		Complete: complete, Limits: limits, Convert: convert, Adjust: adjust, Lesser: lesser, Untested: untested, Cautions: cautions,
		Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{Definition: screening.Resistance, Example: "10k", Help: "at 25 °C, as printed; none: it is kept as measured"},
		{
			Definition: book.Trait(TraitCoefficient, "temperature coefficient"), Trait: true, Example: "ntc",
			Help:  "ntc falls when it warms (taken where nothing is claimed), ptc jumps up above a temperature",
			Words: []screening.Word{{Word: "ntc", Text: ntc}, {Word: "ptc", Text: ptc}, {Word: "posistor", Text: ptc}},
		},
		{
			Definition: screening.Tolerance, Example: "5%", Help: "of the resistance at 25 °C; letters F G H J K M N are common",
			AcceptRange: book.ToleranceLetter, Ambiguous: book.ToleranceMeanings,
		},
		{
			Definition: B, Example: "B3977", AcceptRange: bRange,
			Help: "B3977, or B3977±1% with its tolerance; without it a reading counts near 25 °C only",
		},
		book.DatedField(),
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Temperature, PerPart: true, Effort: 60 * time.Second, Example: "22.5C",
			Ask:  "STATE the temperature of the thermistor: temperature=22.5C",
			Help: "of the thermistor itself: let both lie side by side",
		},
		{
			Definition: screening.Resistance, Effort: 90 * time.Second, FollowsNominal: true, Example: "11.2k",
			Help: "at rest for 5 min beside the thermometer, out of draught and hand; with the temperature: resistance@22C=11.2k",
			Fit:  screening.Fit{screening.PartTemperature: screening.Never},
		},
	}
}

func look() []screening.Check {
	return book.Look(screening.Check{
		Name: "burnt", Words: []string{"burnt", "charred", "scorched"}, Question: "Is it burnt, scorched or flaking?",
		Help:    "a dark spot, a coating that has lifted, solder that has run on its leads",
		Verdict: screening.Reject, Reason: "it has run far too hot: its ceramic or its contacts will not stay",
		Do:     "SCRAP it, and find out what overloaded it before you fit another",
		Source: screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
	})
}

// kelvin is 0 °C in kelvin, and reference the temperature at which a thermistor is named, °C.
const kelvin, reference = 273.15, 25.0

// Ratio returns R/R25 of an NTC at a temperature in °C: exp(B·(1/T − 1/298.15 K)).
func Ratio(b, celsius float64) float64 { return math.Exp(b * inverse(celsius)) }

// inverse is 1/T − 1/298.15 K for a temperature in °C.
func inverse(celsius float64) float64 { return 1/(celsius+kelvin) - 1/(reference+kelvin) }

// Slope returns how fast an NTC falls at a temperature in °C, as a ratio per kelvin: B/T².
func Slope(b, celsius float64) float64 { return b / ((celsius + kelvin) * (celsius + kelvin)) }

// Kelvins returns the error of temperature that an error of resistance makes, both as one: ΔT = (ΔR/R)/α, with α as a ratio per kelvin.
func Kelvins(share, slope float64) float64 { return share / slope }

func isPTC(c screening.Claim) bool { return c.Trait(TraitCoefficient) == ptc }
