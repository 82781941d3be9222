package rules_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// drawPart draws a part of a kind: a few of the claims that its fields give as examples or take as words, some with other numbers, then
// readings of any size at any condition, by section or not, and what was seen.
func drawPart(t *rapid.T, b *screening.Rulebook) screening.Part {
	var words []string
	for i := range b.Claims {
		f := &b.Claims[i]
		if !rapid.Bool().Draw(t, "claims "+string(f.Name)) && !f.Required {
			continue
		}
		switch {
		case f.Trait && len(f.Words) > 0:
			w := rapid.SampledFrom(f.Words).Draw(t, "word of "+string(f.Name))
			words = append(words, string(f.Name)+"="+strings.ReplaceAll(w.Text, " ", "-"))
		case !f.Trait && rapid.Bool().Draw(t, "another "+string(f.Name)):
			words = append(words, fmt.Sprintf("rated:%s=%.3g%s", f.Name, drawn(t, "rated "+string(f.Name)), f.Unit.ASCII()))
		case f.Example != "":
			words = append(words, strings.Fields(f.Example)[0])
		}
	}
	part := screening.Part{Kind: b.Kind}
	for _, w := range words { // a word that does not go with the others is left out
		if p, err := entry.Words(b, []string{w}); err == nil {
			for _, r := range p.Claim.Ratings {
				part.Claim = part.Claim.WithRating(r)
			}
			for _, x := range p.Claim.Traits {
				part.Claim = part.Claim.WithTrait(x.Name, x.Text)
			}
		}
	}
	for i := range b.Bench {
		f := &b.Bench[i]
		if !rapid.Bool().Draw(t, "reads "+string(f.Name)) {
			continue
		}
		r := screening.Reading{
			Of: f.Name, Unit: f.Unit, Value: drawn(t, string(f.Name)), Sense: rapid.SampledFrom([]quantity.Sense{quantity.Exactly, quantity.AtLeast, quantity.AtMost}).Draw(t, "sense"),
			Section: rapid.SampledFrom([]string{"", "1", "2"}).Draw(t, "section"),
		}
		r.Step = math.Abs(r.Value) / 1000
		if v := rapid.SampledFrom(screening.Variables()).Draw(t, "variable"); rapid.Bool().Draw(t, "conditioned") {
			r.At = screening.At(v, drawn(t, "condition"))
		}
		if r, err := screening.Plausible(*f, r); err == nil {
			part.Readings = append(part.Readings, r)
		}
	}
	for _, c := range b.Look {
		if rapid.IntRange(0, 9).Draw(t, c.Name) == 0 {
			part.Look = append(part.Look, screening.Observation{Check: c.Name, Fault: true})
		}
	}
	part.Treated = rapid.IntRange(0, 2).Draw(t, "treated")
	return part
}

func drawn(t *rapid.T, label string) float64 {
	return math.Pow(10, rapid.Float64Range(-12, 7).Draw(t, label))
}

// Whatever is claimed, measured and seen, a judgement, its recipes and its cautions hold no figure that is none.
func TestNothingThatIsDrawnBreaksARulebook(t *testing.T) {
	for _, b := range rules.All() {
		t.Run(string(b.Kind), rapid.MakeCheck(func(t *rapid.T) {
			part := drawPart(t, b)
			j, err := screening.Judge(b, part, screening.DefaultPolicy())
			if err != nil {
				return // a claim that contradicts itself is refused in words
			}
			var texts []string
			for _, r := range j.Reasons {
				texts = append(texts, r.Text)
			}
			for _, s := range j.Next {
				texts = append(texts, s.Text)
			}
			texts = append(texts, j.Untested...)
			for _, m := range []screening.Moment{screening.AtLook, screening.AtMeasure, screening.AtVerdict} {
				if b.Cautions == nil {
					break
				}
				for _, c := range b.Cautions(j.Part, m) {
					texts = append(texts, c.Text)
					holdFinite(t, c.Code, c.Values)
				}
			}
			for i := range j.Findings {
				l := j.Findings[i].Limit
				texts = append(texts, l.FormulaText(), l.Note, j.Findings[i].Why)
				if b.Recipes == nil {
					continue
				}
				for _, r := range b.Recipes(j.Part, l) {
					texts = append(append(texts, r.Title), r.Lines...)
					holdFinite(t, r.Title, r.Values)
				}
			}
			for _, text := range texts {
				for _, none := range []string{"NaN", "Inf", "∞", "%!"} {
					if strings.Contains(text, none) {
						t.Fatalf("%s: %q holds %s", part.Claim, text, none)
					}
				}
			}
		}))
	}
}

func holdFinite(t *rapid.T, name string, values map[string]float64) {
	for k, x := range values {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			t.Fatalf("%s: %s is %v", name, k, x)
		}
	}
}
