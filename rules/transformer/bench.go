package transformer

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/winding"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The source of the ratio test: a small isolating AC supply or a generator behind a resistor. All house.
const (
	sourceVolts  = 12.0 // V r.m.s. at most
	sourceShare  = 0.1  // of the fed winding's rated voltage at most, so that the core is far from saturation
	seriesOhms   = 220.0
	resistorRate = 1.0 // W
)

// fedVolts is what is put on the winding with the highest rated voltage.
func fedVolts(rated float64) float64 { return math.Min(sourceVolts, sourceShare*rated) }

// cautions warns of what a winding fed from the wrong side gives out.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	all := []screening.Caution{{
		Code: "no-mains", Level: screening.Danger,
		Text: "test it with a few volts from a small isolating supply, never from the mains, and never to see whether it works: mains and " +
			"high-voltage work belongs to your local code and licensed practice. Cut off the current only at the supply: a winding kicks when " +
			"its current is broken",
		Source: book.Practice,
	}}
	ws := windings(part.Claim)
	if len(ws) < 2 {
		return all
	}
	high, low := ws[0], ws[len(ws)-1]
	if out := fedVolts(high.Nominal) * high.Nominal / low.Nominal; out > book.TouchVoltage {
		all = append(all, screening.Caution{
			Code: "steps-up", Level: screening.Danger,
			Text: fmt.Sprintf("feed winding %s only: %s put on winding %s by mistake gives %s on winding %s, which can kill",
				high.Section, quantity.Format(fedVolts(high.Nominal), quantity.Volt, 2), low.Section, book.About(out, quantity.Volt), high.Section),
			Values: map[string]float64{"fed-voltage": fedVolts(high.Nominal), "voltage": out}, Source: book.TouchSource,
		})
	}
	return all
}

// recipes says how to measure what a limit asks with what people own.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	switch l.On {
	case screening.DCR.Name:
		return []screening.Recipe{winding.Recipe(screening.DCR, part.Claim, l.Section)}
	case screening.InsulationResistance.Name:
		return []screening.Recipe{insulationRecipe(l)}
	case Ratio.Name:
		return ratioRecipe(part.Claim, l)
	}
	return nil
}

func insulationRecipe(l screening.Limit) screening.Recipe {
	if volts, ok := l.At.Get(screening.Voltage); ok {
		return screening.Recipe{
			Title: "Insulation tester",
			Lines: []string{
				fmt.Sprintf("with an insulation tester at %s DC, all ends of one winding joined against the core and all others joined: read after 2 min, "+
					"earlier only where it stands still or rises above the limit", quantity.Format(volts, quantity.Volt, 0)),
				"hands off while it is on; let the tester discharge the windings, then read the volts that remain",
			},
			Values: map[string]float64{"voltage": volts},
			Source: screening.Source{Document: "MIL-STD-202 method 302", Clause: "condition B, 500 V, 2 min", Status: screening.Published},
		}
	}
	return screening.Recipe{
		Title: "Highest ohms range", Source: book.Practice,
		Lines: []string{
			"from one end of each winding to bare metal of the core, then from winding to winding; the bodies of both probes insulated, fingers off",
			"OL is what a sound one shows: type insulation-resistance/1-core=OL; anything that creeps up from below is damp",
		},
	}
}

func ratioRecipe(c screening.Claim, l screening.Limit) []screening.Recipe {
	all := windings(c)
	if len(all) < 2 {
		return nil
	}
	fed, volts, expected := all[0], fedVolts(all[0].Nominal), 0.0
	for _, w := range all {
		if w.Section == l.Section {
			expected = volts * w.Nominal / fed.Nominal
		}
	}
	short := volts * volts / seriesOhms
	return []screening.Recipe{{
		Title: "A few volts AC on the winding with the highest rated voltage", Source: book.Practice,
		Lines: []string{
			fmt.Sprintf("feed winding %s, and no other, with %s AC of mains frequency (audio parts: 1 kHz) from a small isolating supply or a generator, through %s, %.0f W "+
				"(a short takes %s)", fed.Section, quantity.Format(volts, quantity.Volt, 2), quantity.Format(seriesOhms, quantity.Ohm, 0),
				resistorRate, book.About(short, quantity.Watt)),
			"read the volts on the fed winding itself: far less than the supply gives is a shorted turn (from memory)",
			fmt.Sprintf("read the volts on winding %s: about %s; voltage-ratio/%s is these over those", l.Section, book.About(expected, quantity.Volt), l.Section),
		},
		Values: map[string]float64{
			"supply": volts, "series-resistance": seriesOhms, "resistor-power": short, "expected-voltage": expected,
		},
	}}
}
