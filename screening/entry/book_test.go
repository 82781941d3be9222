package entry

import (
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The kinds below exist only here: a capacitor and a transistor with every sort of field that entry must serve.

func ratioField() screening.Field {
	return screening.Field{
		Definition: screening.Tolerance, Example: "M",
		AcceptRange: func(word string) (float64, float64, bool) { return -0.2, 0.2, word == "M" },
		Ambiguous: func(word string) []string {
			if word == "A" {
				return []string{"agreed", "±0.05 %"}
			}
			return nil
		},
	}
}

func canBook() *screening.Rulebook {
	nominal := func(claim screening.Claim) ([]screening.Limit, error) { return nil, nil }
	return &screening.Rulebook{
		Kind: "can", Label: "capacitor in a can", Tables: "test", Limits: nominal,
		Claims: []screening.Field{
			{
				Definition: screening.Capacitance, Required: true, Example: "2200uF",
				Ambiguous: func(word string) []string {
					if word == "47K" {
						return []string{"47 pF K", "47 nF"}
					}
					return nil
				},
			},
			{Definition: screening.RatedVoltage, Required: true, Example: "35V"},
			ratioField(),
			{Definition: screening.Definition{Name: "dated", Label: "maker's date"}, Trait: true, Example: "1974"},
			{Definition: screening.Definition{Name: "case", Label: "case"}, Trait: true, Words: []screening.Word{{Word: "axial", Text: "axial"}, {Word: "snap", Text: "snap-in"}}},
		},
		Bench: []screening.Field{
			{Definition: screening.Capacitance, FollowsNominal: true, Example: "2010uF", Band: screening.Span{Low: 0, High: 100}},
			{Definition: screening.ESR, Default: screening.At(screening.Frequency, 120), Example: "61m"},
			{Definition: screening.Leakage, UnderVoltage: true, Example: "45uA"},
			{Definition: screening.Temperature, PerPart: true},
		},
		Look: []screening.Check{
			{Name: "mains-or-cracked", Words: []string{"mains", "cracked"}},
			{Name: "bulged", Words: []string{"bulged", "leaking"}},
		},
	}
}

var (
	gain = screening.Definition{
		Name: "hfe", Label: "current gain", Unit: quantity.One, AtVolts: screening.VCE, AtAmperes: screening.IC,
	}
	saturation = screening.Definition{Name: "vce-sat", Label: "saturation voltage", Unit: quantity.Volt, NamedOnly: true}
	collector  = screening.Definition{Name: "vceo", Label: "collector voltage", Unit: quantity.Volt}
	base       = screening.Definition{Name: "vcbo", Label: "collector-base voltage", Unit: quantity.Volt}
	blocking   = screening.Definition{
		Name: "blocking", Label: "blocking", Unit: quantity.Ohm,
		Over: screening.OverRange{Sense: quantity.AtLeast, Value: 2e6, Why: "test"},
	}
)

func transistorBook() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: "transistor", Label: "transistor", Tables: "test",
		Claims: []screening.Field{
			{
				Definition: screening.Definition{Name: "type", Label: "type"}, Trait: true, Example: "2N3904",
				AcceptText: func(word string) (string, bool) {
					up := strings.ToUpper(word)
					return up, up == "2N3904" || up == "1N4148" || up == "4N7"
				},
			},
			{
				Definition: screening.Definition{Name: "polarity", Label: "polarity"}, Trait: true,
				Words: []screening.Word{{Word: "npn", Text: "npn"}, {Word: "pnp", Text: "pnp"}},
			},
			{
				Definition: screening.Definition{Name: "group", Label: "gain group"}, Trait: true,
				AcceptText: func(word string) (string, bool) { return word, len(word) == 1 && word >= "A" && word <= "C" },
			},
			{
				Definition: screening.Definition{Name: "bin", Label: "bin"}, Trait: true,
				AcceptText: func(word string) (string, bool) { return word, word == "C" },
			},
			{Definition: gain},
			{Definition: collector},
			{Definition: base},
		},
		Bench: []screening.Field{{Definition: gain, Example: "180"}, {Definition: saturation}, {Definition: blocking}},
	}
}

func testBooks() screening.Kinds { return screening.Kinds{canBook(), transistorBook()} }
