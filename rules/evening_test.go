package rules_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"goodbin/rules"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The first evening: what becomes of healthy parts that are measured once with the assumed meter. The populations are invented; their
// spreads are what the design states for them.

const perPopulation = 2000

// bench draws true values and meter errors.
type bench struct {
	*rand.Rand
	meter screening.Meter
}

// measure returns a reading of a true value: the assumed meter's error, rectangular inside its specification, rounded to three digits.
func (b bench) measure(d screening.Definition, truth float64, at screening.Condition) screening.Reading {
	r := screening.Reading{Of: d.Name, Unit: d.Unit, Value: truth, At: at}
	r.Step = math.Pow10(int(math.Floor(math.Log10(truth))) - 2)
	half := b.meter.Uncertainty(r) * math.Sqrt(3)
	r.Value = math.Round((truth+half*(2*b.Float64()-1))/r.Step) * r.Step
	return r
}

func (b bench) pick(from ...float64) float64 { return from[b.IntN(len(from))] }

func field(book *screening.Rulebook, name screening.Characteristic) screening.Definition {
	f, ok := book.BenchField(name)
	if !ok {
		panic("no reading " + name)
	}
	return f.Definition
}

// tanDeltaMax is the ladder that low-impedance and normal-size series print (Nichicon UPW, Rubycon ZL: published).
var tanDeltaMax = map[float64]float64{6.3: .22, 10: .19, 16: .16, 25: .14, 35: .12, 50: .10}

var populations = []struct {
	name string
	kind screening.Kind
	make func(bench, *screening.Rulebook) screening.Part
}{
	{"radial electrolytics after 1985, under 63 V, to 2200 µF", "electrolytic", func(b bench, book *screening.Rulebook) screening.Part {
		c := b.pick(1, 2.2, 4.7) * b.pick(1e-6, 10e-6, 100e-6)
		if b.IntN(4) == 0 {
			c = b.pick(1000e-6, 2200e-6)
		}
		v := b.pick(6.3, 10, 16, 25, 35, 50)
		claim := screening.Claim{}.WithRating(screening.NominalRating(screening.Capacitance, c)).
			WithRating(screening.NominalRating(screening.RatedVoltage, v)).
			WithTrait(screening.TraitCase, "radial").WithTrait(screening.TraitDated, fmt.Sprint(1986+b.IntN(30)))
		truth := c * (1 - 0.05 + 0.06*b.NormFloat64())
		// A printed maximum is about twice the typical value (EPCOS B41456 rows: derived).
		tan := (tanDeltaMax[v] + 0.02*max(0, math.Floor(c/1000e-6)-1)) * 0.55 * math.Exp(0.2*b.NormFloat64())
		at := screening.At(screening.Frequency, 120)
		return screening.Part{Claim: claim, Readings: []screening.Reading{
			b.measure(screening.Capacitance, truth, at),
			b.measure(screening.ESR, tan/(2*math.Pi*120*truth), at),
		}}
	}},
	{"5 % resistors, 10 Ω to 1 MΩ", "resistor", func(b bench, _ *screening.Rulebook) screening.Part {
		r := b.pick(1, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2) * b.pick(10, 100, 1e3, 10e3, 100e3)
		claim := screening.Claim{}.WithRating(screening.NominalRating(screening.Resistance, r)).
			WithRating(screening.RangeRating(screening.Tolerance, -0.05, 0.05))
		truth := r * (1 + 0.005 + 0.012*b.NormFloat64())
		return screening.Part{Claim: claim, Readings: []screening.Reading{b.measure(screening.Resistance, truth, screening.Condition{})}}
	}},
	{"signal diodes, reverse OL on the diode range", "diode", func(b bench, book *screening.Rulebook) screening.Part {
		over := field(book, "vbr")
		return screening.Part{
			Claim: screening.Claim{}.WithTrait(screening.TraitType, "1N4148"),
			Readings: []screening.Reading{
				b.measure(field(book, "vf"), 0.62+0.02*b.NormFloat64(), screening.Condition{}),
				{Of: over.Name, Unit: over.Unit, Over: true, Sense: over.Over.Sense, Value: over.Over.Value, Typed: "OL"},
			},
		}
	}},
	{"small silicon transistors with centred gains", "bipolar", func(b bench, book *screening.Rulebook) screening.Part {
		kinds := []struct {
			name        string
			gain        float64
			ic, vce, cv float64
		}{{"2N3904", 190, 10e-3, 1, 0.12}, {"BC547B", 300, 2e-3, 5, 0.12}, {"2SC1815", 200, 2e-3, 6, 0.2}, {"BC557B", 300, 2e-3, 5, 0.12}}
		k := kinds[b.IntN(len(kinds))]
		at := screening.At(screening.IC, k.ic).With(screening.VCE, k.vce)
		name, group := k.name, ""
		if strings.HasPrefix(name, "BC") {
			name, group = name[:5], name[5:]
		}
		claim := screening.Claim{}.WithTrait(screening.TraitType, name).WithTrait(screening.TraitGroup, group)
		iceo := field(book, "iceo")
		return screening.Part{Claim: claim, Readings: []screening.Reading{
			b.measure(field(book, "vbe"), 0.66+0.015*b.NormFloat64(), screening.Condition{}),
			b.measure(field(book, "hfe"), k.gain*(1+k.cv*b.NormFloat64()), at),
			{Of: iceo.Name, Unit: iceo.Unit, Sense: quantity.AtMost, Value: 0.1e-6, At: screening.At(screening.VCE, 20), Typed: "<0.1uA"},
		}}
	}},
}

func TestFirstEveningOfHealthyParts(t *testing.T) {
	b := bench{rand.New(rand.NewPCG(1, 2)), screening.AssumedMeter()}
	var table strings.Builder
	fmt.Fprintf(&table, "%-56s", "healthy parts, assumed meter, share in %")
	for _, v := range screening.Verdicts() {
		fmt.Fprintf(&table, "%10s", v)
	}
	rest := map[string]int{}
	for _, p := range populations {
		book, ok := rules.All().Find(p.kind)
		if !ok {
			t.Errorf("no rulebook %q", p.kind)
			continue
		}
		counts := map[screening.Verdict]int{}
		for range perPopulation {
			j, err := screening.Judge(book, p.make(b, book), screening.DefaultPolicy())
			if err != nil {
				t.Fatal(err)
			}
			counts[j.Verdict]++
			if j.Verdict != screening.Accept {
				why := ""
				if len(j.Reasons) > 0 {
					why = j.Reasons[len(j.Reasons)-1].Text
				}
				rest[fmt.Sprintf("  %s, %s: %s", p.kind, j.Verdict, firstWords(why, 6))]++
			}
		}
		fmt.Fprintf(&table, "\n%-56s", p.name)
		for _, v := range screening.Verdicts() {
			fmt.Fprintf(&table, "%10.1f", 100*float64(counts[v])/perPopulation)
		}
		if share := float64(counts[screening.Accept]) / perPopulation; share < 0.95 {
			t.Errorf("%s: %.1f %% are accepted; at least 95 %% must be", p.name, 100*share)
		}
	}
	table.WriteString("\nwhat becomes of the rest:")
	for what, n := range rest {
		fmt.Fprintf(&table, "\n%s (%d of %d)", what, n, perPopulation)
	}
	t.Log("\n" + table.String())
}

func firstWords(text string, n int) string {
	words := strings.Fields(text)
	if len(words) > n {
		words = append(words[:n], "…")
	}
	return strings.Join(words, " ")
}
