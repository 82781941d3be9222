package optocoupler

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// shorted is the drop below which there is no junction, V (from memory, for words only).
const shorted = 0.1

// adjust applies the rules that look across readings: turned probes, a ratio that nothing is claimed of, and what a failure looks like.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	say := func(of screening.Characteristic, text string) {
		if n := book.Note(of, "%s", text); text != "" && !slices.Contains(reasons, n) {
			reasons = append(reasons, n)
		}
	}
	for i := range findings {
		f := &findings[i]
		led := f.Limit.On == screening.VF.Name || f.Limit.On == screening.VBR.Name
		switch {
		case led && turnedRound(part, f.Limit.Section):
			f.Outcome, f.Unconfirmed, f.Why = screening.Missing, false,
				"open forward and an LED's drop in reverse: the probes were the wrong way round; type each reading as the other"
			if f.Need != screening.Required {
				f.Wants = screening.Gap{}
			}
		case f.Limit.Criterion == breakdownCriterion && f.Outcome == screening.Missing:
			f.Wants = screening.Gap{} // it is never tried on purpose
		case f.Limit.Criterion == worksCriterion:
			f.Wants = screening.Gap{} // the ratio's own question answers it
			if f.Outcome == screening.Fail {
				say(f.Limit.On, "no light passes: an open LED or transistor, or the wrong legs")
			}
		case f.Limit.Criterion == breakdownCriterion && f.Unconfirmed:
			f.Need = screening.Required
			say(f.Limit.On, "its LED breaks down at "+quantity.Format(f.Reading.Value, quantity.Volt, 3)+": damaged, if its rating is right")
		case f.Limit.Note == noRatio:
			f.Outcome, f.Probability, f.Margin, f.Unconfirmed, f.Why = screening.Missing, math.NaN(), math.NaN(), false, noRatio
			if f.Reading != nil && !stated(f.Reading) {
				f.Why, f.Unstated = "the LED's current and VCE of the reading are not stated: ctr@5mA,5V=…", screening.Current
			}
			f.Limit.Note = ""
		case f.Limit.On == screening.VF.Name:
			say(f.Limit.On, ledWords(f))
		case f.Limit.Criterion == ratioCriterion:
			say(f.Limit.On, ratioWords(f))
		case f.Limit.Criterion == darkCriterion && f.Outcome == screening.Fail:
			say(f.Limit.On, "it conducts in the dark: leaky or shorted, or room light reaches an open case")
		}
	}
	return findings, reasons
}

func stated(r *screening.Reading) bool { return r.At.Has(screening.Current) && r.At.Has(screening.VCE) }

func turnedRound(part screening.Part, section string) bool {
	f, ok1 := part.Reading(screening.VF.Name, section)
	r, ok2 := part.Reading(screening.VBR.Name, section)
	led := load()["led"]
	return ok1 && ok2 && f.Over && r.Sense == quantity.Exactly && r.Value >= led.low && r.Value <= led.high
}

func ledWords(f *screening.Finding) string {
	r := f.Reading
	switch {
	case r == nil || f.Outcome != screening.Fail:
		return ""
	case r.Over:
		return "its LED reads open: turned round, the wrong legs, or an open bond"
	case r.Value < shorted:
		return "its LED reads shorted"
	case f.Side == screening.Below:
		return "that is no infrared LED's drop: the wrong legs (the transistor's junctions read 0.6 V), or damaged"
	}
	return ""
}

func ratioWords(f *screening.Finding) string {
	e := f.Evidence()
	switch {
	case e == nil || f.Outcome == screening.Missing:
		return ""
	case e.Value < load()["works"].low:
		return ""
	case f.Outcome == screening.Fail && f.Side == screening.Below && f.Limit.Grade == screening.Serviceable:
		return "its LED has faded: it will fade on"
	case f.Limit.Grade == screening.WithinSpec && (f.Outcome == screening.Fail || f.Unconfirmed) && e.Value >= load()["aged"].low*f.Limit.Low &&
		f.Side == screening.Below:
		return "below its sheet's minimum: its LED has aged; it serves where the circuit has a third in hand"
	}
	return ""
}

// lesser answers a ratio out of its claim with another group of the same family that it meets, else as measured; and a ratio of which
// nothing is claimed as measured.
func lesser(t *types.Table, part screening.Part, findings []screening.Finding) []screening.Lesser {
	var answers []screening.Lesser
	for i := range findings {
		f := &findings[i]
		e := f.Evidence()
		if f.Limit.Criterion != ratioCriterion || e == nil || e.Sense != quantity.Exactly || !stated(e) || len(sections(part.Claim)) > 1 {
			continue
		}
		switch {
		case f.Outcome == screening.Missing && f.Limit.Source.Document == "no transfer ratio is claimed":
			answers = append(answers, measured(part.Claim, f, *e, true)...)
		case f.Outcome == screening.Fail && f.Limit.Grade != screening.WithinSpec, f.Outcome == screening.Close && f.Unconfirmed && f.Limit.Grade != screening.WithinSpec:
			answers = append(answers, groups(t, part.Claim, f, e.Value)...)
			if f.Outcome == screening.Fail {
				answers = append(answers, measured(part.Claim, f, *e, false)...)
			}
		}
	}
	return answers
}

// groups lists the other groups of a type's family, which differ in the last letter or digit, whose range holds the ratio. A group whose
// range is only recalled may stand in where the own one is only recalled too: then the verdict stays accept, at the group that fits.
func groups(t *types.Table, c screening.Claim, f *screening.Finding, x float64) []screening.Lesser {
	own := c.Trait(screening.TraitType)
	if len(own) < 5 {
		return nil
	}
	family := strings.TrimRight(own, "ABCD")
	if cut, _, ok := strings.Cut(own, "-"); ok {
		family = cut
	}
	type group struct {
		row   types.Row
		ratio screening.Rating
	}
	var held []group
	for _, row := range t.Rows(Kind) {
		r, ok := row.Rating(CTR.Name)
		if !ok || row.Type == own || !strings.HasPrefix(row.Type, family) || x < r.Low || x > r.High {
			continue
		}
		held = append(held, group{row, r})
	}
	// The narrowest says most: a type without a group comes last.
	slices.SortStableFunc(held, func(a, b group) int { return cmp.Compare(a.ratio.High/a.ratio.Low, b.ratio.High/b.ratio.Low) })
	var answers []screening.Lesser
	for _, g := range held {
		claim := c.WithTrait(screening.TraitType, g.row.Type)
		claim.Ratings = book.Without(claim.Ratings, CTR.Name)
		answers = append(answers, screening.Lesser{
			Claim: claim, Answers: ratioCriterion, Tolerance: f.Unconfirmed, Source: g.ratio.Source,
			Text: fmt.Sprintf("as %s, ratio %s", g.row.Type, quantity.Format(x, quantity.Ratio, 3)),
		})
	}
	return answers
}

// keeps is how much of a measured ratio is claimed, so that an LED that ages on does not fall out of it at once (house).
const keeps = 0.8

// leastRatio is the lowest ratio at which an optocoupler is kept as measured (house): the lowest minimum of the type table is 10 %.
const leastRatio = 0.10

func measured(c screening.Claim, f *screening.Finding, e screening.Reading, missing bool) []screening.Lesser {
	if e.Value < leastRatio {
		return nil
	}
	source := screening.Source{Document: "taken at what was measured, less a fifth for further ageing", Status: screening.House}
	low := book.Honest(keeps*e.Value, 0, 2)
	rating := screening.RangeRating(CTR, low, inf)
	rating.At = screening.Condition{}
	for _, v := range []screening.Variable{screening.Current, screening.VCE} {
		x, _ := e.At.Get(v)
		rating.At = rating.At.With(v, x)
	}
	rating.Source, rating.Typed = source, rating.String()
	claim := c
	claim.Ratings = append(book.Without(c.Ratings, CTR.Name), rating)
	i, _ := rating.At.Get(screening.Current)
	v, _ := rating.At.Get(screening.VCE)
	return []screening.Lesser{{
		Claim: claim, Answers: f.Limit.Criterion, FromMissing: missing, Source: source,
		Text: fmt.Sprintf("as measured, ratio at least %s at %s, VCE %s", quantity.Format(low, quantity.Ratio, 0), quantity.Format(i, quantity.Ampere, 0),
			quantity.Format(v, quantity.Volt, 0)),
	}}
}

// untested names the insulation first: nothing at the bench proves it.
func untested(part screening.Part, _ []screening.Finding) []string {
	lines := []string{"insulation between the two sides: no bench reading proves it, so never across a mains barrier"}
	if r, v, ok := sheet.Least(part.Claim, screening.VCEO.Name); ok && v > 0 {
		lines = append(lines, "collector-emitter voltage (rated "+r.String()+")")
	}
	return append(lines, "speed, and how far its LED has aged")
}
