package bipolar

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// untested words what the readings leave unproven: blocking above the voltage used, gain away from the sheet's current.
func (b rulebook) untested(part screening.Part, findings []screening.Finding) []string {
	p := b.promiseOf(part.Claim)
	var words []string
	if proven := provenVoltage(part, findings); proven > 0 {
		switch {
		case math.IsNaN(p.vceo):
			words = append(words, "collector to emitter not tested above "+quantity.Format(proven, quantity.Volt, 0)+" (no rating known)")
		case proven < p.vceo:
			words = append(words, fmt.Sprintf("collector to emitter not tested above %s (rated %s)",
				quantity.Format(proven, quantity.Volt, 0), quantity.Format(p.vceo, quantity.Volt, 0)))
		}
	}
	if promised, ok := p.claim.Rating(HFE.Name, ""); ok && gainOnlyInformative(findings) {
		words = append(words, "gain not tested at "+promised.At.String())
	}
	return words
}

// provenVoltage is the highest collector-emitter voltage at which the part was seen to block: a passed leakage reading, or a breakdown
// reading that only bounds from below or lies above it. 0 where there is none.
func provenVoltage(part screening.Part, findings []screening.Finding) float64 {
	var proven float64
	for i := range findings {
		f := &findings[i]
		if f.Limit.On == ICEO.Name && f.Outcome == screening.Pass && f.Reading != nil {
			v, _ := f.Reading.At.Get(screening.VCE)
			proven = math.Max(proven, v)
		}
	}
	for _, r := range part.Readings {
		if r.Of == screening.VBR.Name && r.Sense != quantity.AtMost {
			proven = math.Max(proven, r.Value)
		}
	}
	return proven
}

// gainOnlyInformative reports whether gain was answered by the weak bound alone: no reading was taken at a current of the sheet.
func gainOnlyInformative(findings []screening.Finding) bool {
	weak := false
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != CriterionGain || f.Outcome == screening.Missing {
			continue
		}
		if !informative(&f.Limit) && f.Limit.Source != figures()["gain-lamp"].source {
			return false
		}
		weak = true
	}
	return weak
}

// From these values on a caution is given: the voltage at which a supply can hurt, and the power at which a small part warms in seconds.
const (
	warmPower = 0.1 // W (house)
)

// cautions warn at the measuring step: what spoils the part, what spoils the reading, what can hurt.
func (b rulebook) cautions(part screening.Part, when screening.Moment) []screening.Caution {
	if when != screening.AtMeasure {
		return nil
	}
	p := b.promiseOf(part.Claim)
	all := []screening.Caution{reverseBaseEmitter(p)}
	if p.material == germanium {
		all = append(all, screening.Caution{
			Code: "warm-fingers", Text: "do not hold it: fingers are 10 K warmer than a room, which doubles germanium leakage. Readings settle in minutes",
			Values: map[string]float64{"doubling": junction.Doubling}, Source: junction.DoublingSource,
		})
	}
	if p.vceo > book.TouchVoltage {
		all = append(all, screening.Caution{
			Code: "test-voltage", Level: screening.Danger,
			Text: fmt.Sprintf("a breakdown test of this type goes to %s: above %s a supply can kill. Limit it to 1 mA (%s in series), one hand, "+
				"nobody alone, and do as your local code and licensed practice say; a test at %s or less is enough for a first verdict",
				quantity.Format(p.vceo, quantity.Volt, 0), quantity.Format(book.TouchVoltage, quantity.Volt, 0),
				quantity.Format(p.vceo/1e-3, quantity.Ohm, 2), quantity.Format(20, quantity.Volt, 0)),
			Values: map[string]float64{"voltage": p.vceo, "series-resistance": p.vceo / 1e-3},
			Source: book.TouchSource,
		})
	}
	if c, ok := heat(p); ok {
		all = append(all, c)
	}
	return all
}

// reverseBaseEmitter warns of the one test that is never offered.
func reverseBaseEmitter(p *promise) screening.Caution {
	c := screening.Caution{
		Code:   "reverse-base-emitter",
		Text:   "never drive base to emitter backwards into breakdown: it lowers the gain for good, and no such test is offered",
		Source: screening.Source{Document: "Renesas knowledge base on reverse base-emitter breakdown", Status: screening.Published},
	}
	if r, ok := p.claim.Rating(VEBO.Name, ""); ok {
		most := r.Low - 1
		c.Text += "; stay below " + quantity.Format(most, quantity.Volt, 0)
		c.Values = map[string]float64{"voltage": most}
	}
	return c
}

// heat warns where the gain test at the sheet's condition warms the part.
func heat(p *promise) (screening.Caution, bool) {
	r, ok := p.claim.Rating(HFE.Name, "")
	ic, ok1 := r.At.Get(screening.IC)
	vce, ok2 := r.At.Get(screening.VCE)
	if !ok || !ok1 || !ok2 || ic*vce < warmPower {
		return screening.Caution{}, false
	}
	watts := ic * vce
	return screening.Caution{
		Code: "gain-test-heat",
		Text: fmt.Sprintf("at %s the part turns %s into heat: read within a second or two, let it cool, and fix a power type to metal; sheets "+
			"pulse it for 300 µs", r.At, quantity.Format(watts, quantity.Watt, 2)),
		Values: map[string]float64{"power": watts},
		Source: screening.Source{Document: "2N3055 and TIP data sheets: pulses of 300 µs, 2 % duty", Status: screening.Published},
	}, true
}
