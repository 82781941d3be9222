package potentiometer

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// middleWithin is how far off the middle of the travel people set a shaft by eye, as a share of the travel; on a linear track that is the same
// share of the resistance (house).
const middleWithin = 0.05

// trackingMost is how far the sections of a stereo control may differ: 3 dB (from memory).
const trackingMost = 3.0

// derive computes the share of the track that lies below the wiper in mid-travel: r = R1-2/R1-3, with the middle set by eye.
func derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	var derived []screening.Reading
	for i := range part.Readings {
		m := &part.Readings[i]
		if m.Of != Midpoint.Name || m.Sense != quantity.Exactly {
			continue
		}
		whole, ok := part.Reading(screening.Resistance.Name, m.Section)
		if !ok || whole.Sense != quantity.Exactly || whole.Section != m.Section || !(whole.Value > 0) {
			continue
		}
		share := m.Value / whole.Value
		meters := math.Hypot(m.U/whole.Value, share*whole.U/whole.Value)
		derived = append(derived, screening.Reading{
			Of: MidpointShare.Name, Unit: quantity.Ratio, Section: m.Section, Value: share, Sense: quantity.Exactly, Step: 1e-3,
			U: math.Hypot(meters, middleWithin/math.Sqrt(3)), Spec: middleWithin, Assumed: m.Assumed || whole.Assumed,
			Rule: fmt.Sprintf("%s ÷ %s = %s, the middle of the travel taken as set to ±%s", ohms(m.Value), ohms(whole.Value), percent(share),
				percent(middleWithin)),
		})
	}
	return derived, nil
}

// adjust gives dirt a second chance, tells the taper, and says what a failure looks like.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	strict(findings)
	for i := range findings {
		f := &findings[i]
		switch f.Limit.On {
		case CRV.Name, EndCCW.Name, EndCW.Name, SwitchClosed.Name:
			firstDirt(part, f)
		case Midpoint.Name:
			reasons = append(reasons, tellTaper(part, f, findings)...)
		case screening.Resistance.Name:
			if f.Outcome == screening.Fail && f.Reading != nil && f.Reading.Sense == quantity.AtLeast {
				reasons = append(reasons, book.Note(f.Limit.On, "the track reads open: burnt through, or a rivet has let go"))
			}
		}
	}
	reasons = append(reasons, tracking(part)...)
	if part.Claim.Trait(TraitSwitch) != "" {
		reasons = append(reasons, book.Note(SwitchClosed.Name,
			"a volume control's switch mostly carried the mains: what passes here passes for signals and low voltages only"))
	}
	return findings, reasons
}

// strict keeps a part from passing as new on a weak figure that it only comes close to, where it fails what is serviceable.
func strict(findings []screening.Finding) {
	for i := range findings {
		worn := &findings[i]
		if worn.Outcome != screening.Fail || worn.Limit.Grade != screening.Serviceable {
			continue
		}
		for k := range findings {
			if f := &findings[k]; f.Limit.Criterion == worn.Limit.Criterion && f.Limit.Section == worn.Limit.Section {
				f.Need = screening.Required
			}
		}
	}
}

// firstDirt leaves a wiper or switch contact that fails open until it was cleaned: dirt and grease do what wear does, and come off.
func firstDirt(part screening.Part, f *screening.Finding) {
	if f.Outcome != screening.Fail || part.Treated > 0 || f.Reading == nil {
		return
	}
	read := quantity.Format(f.Reading.Value, quantity.Ohm, 3)
	if f.Reading.Sense == quantity.AtLeast {
		read = "open"
	}
	f.Outcome, f.Need = screening.Missing, screening.Required
	f.Why = fmt.Sprintf("it read %s, and dirt does that too: clean it, work it 20 times from stop to stop, then measure again and say treated=1", read)
}

// tellTaper answers the question for the midpoint: it passes with the share, or where no taper is claimed; and what the taper is gets said.
func tellTaper(part screening.Part, f *screening.Finding, findings []screening.Finding) []screening.Reason {
	if f.Reading == nil {
		return nil
	}
	section := f.Limit.Section
	f.Outcome, f.Why = screening.Missing, "the whole track was not measured, so its share is not known"
	f.Probability, f.Margin = math.NaN(), math.NaN()
	share, ok := part.Reading(MidpointShare.Name, section)
	if !ok || share.Section != section {
		return nil
	}
	f.Why = "its share of the track decides"
	claimed := part.Claim.Trait(TraitTaper)
	if _, named := taperNamed(claimed); !named {
		f.Outcome, f.Why = screening.Pass, ""
	}
	for i := range findings {
		if s := &findings[i]; s.Limit.On == MidpointShare.Name && s.Limit.Section == section && s.Outcome == screening.Pass {
			f.Outcome, f.Why = screening.Pass, ""
		}
	}
	found := nearestTaper(share.Value)
	if found == claimed {
		return nil
	}
	text := "its taper reads " + found
	if found == otherTaper {
		text = "its taper reads like none of linear, log and reverse-log"
	}
	return []screening.Reason{book.Note(Midpoint.Name, "%s: %s of the track in mid-travel%s", text, percent(share.Value), ofSection(section))}
}

func ofSection(s string) string {
	if s == "" {
		return ""
	}
	return ", section " + s
}

// nearestTaper returns the taper whose band holds a share, [otherTaper] where none does.
func nearestTaper(share float64) string {
	for _, t := range load().tapers {
		if share >= t.low && share <= t.high {
			return t.name
		}
	}
	return otherTaper
}

// tracking says how far sections on one shaft differ in mid-travel.
func tracking(part screening.Part) []screening.Reason {
	low, high, n := math.Inf(1), 0.0, 0
	for i := range part.Readings {
		if r := &part.Readings[i]; r.Of == MidpointShare.Name && r.Section != "" && r.Value > 0 {
			low, high, n = math.Min(low, r.Value), math.Max(high, r.Value), n+1
		}
	}
	if n < 2 {
		return nil
	}
	db := 20 * math.Log10(high/low)
	text := "the sections differ by %.1f dB in mid-travel; %.0f dB is the usual limit for stereo (%s)"
	if db > trackingMost {
		text += ": use it where they need not match"
	}
	return []screening.Reason{book.Note(Midpoint.Name, text, db, trackingMost, screening.FromMemory)}
}

// Between these shares of its printed value a track is kept at the value it reads; beyond them it is damaged or misread (house).
const keptLow, keptHigh = 0.5, 1.5

// lesser answers all that fails at once: a track of another value is kept at the value it reads, another taper as the taper it reads, and a
// dead switch does without.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	var texts []string
	var first screening.Criterion
	claim := bySection(part.Claim, findings)
	ownTaper := false
	for i := range findings {
		f := &findings[i]
		if f.Outcome != screening.Fail || f.Limit.Grade == screening.WithinSpec {
			continue
		}
		text := ""
		switch f.Limit.On {
		case screening.Resistance.Name:
			var rating screening.Rating
			if rating, text = asMeasured(part.Claim, f); text == "" {
				return nil
			}
			claim = claim.WithRating(rating)
		case MidpointShare.Name:
			claim, text = claim.WithTrait(TraitTaper, nearestTaper(f.Reading.Value)), taperAsRead(part.Claim.Trait(TraitTaper), f)
			ownTaper = true
		case SwitchClosed.Name, SwitchOpen.Name:
			claim, text = claim.WithTrait(TraitSwitch, ""), "without its switch"
		default:
			return nil // a wiper or an end that fails has nothing less to be
		}
		if first == "" {
			first = f.Limit.Criterion
		}
		texts = append(texts, text)
	}
	if texts == nil {
		return nil
	}
	text := strings.Join(slices.Compact(texts), "; ")
	answers := []screening.Lesser{{Claim: claim, Answers: first, Text: text, Source: asReadSource}}
	if ownTaper {
		answers = append(answers, screening.Lesser{
			Claim: claim.WithTrait(TraitTaper, otherTaper), Answers: first, Text: text + ", and near no named taper", Source: asReadSource,
		})
	}
	return answers
}

// bySection claims the value of each section that was measured by itself, so that one of them can be claimed otherwise.
func bySection(c screening.Claim, findings []screening.Finding) screening.Claim {
	whole, ok := c.Rating(screening.Resistance.Name, "")
	if !ok || whole.Section != "" {
		return c
	}
	split := c
	split.Ratings = book.Without(c.Ratings, screening.Resistance.Name)
	for i := range findings {
		if l := &findings[i].Limit; l.On == screening.Resistance.Name && l.Section != "" {
			whole.Section = l.Section
			split = split.WithRating(whole)
		}
	}
	if whole.Section == "" {
		return c
	}
	return split
}

func taperAsRead(claimed string, f *screening.Finding) string {
	name := nearestTaper(f.Reading.Value)
	called := name + " taper"
	if name == otherTaper {
		called = "a taper of its own"
	}
	text := fmt.Sprintf("%s, as it reads: %s of the track in mid-travel", called, percent(f.Reading.Value))
	if name == "reverse-log" && claimed == "log" || name == "log" && claimed == "reverse-log" {
		text += " (or it was measured from the other end: do that again)"
	}
	return text
}

var asReadSource = screening.Source{Document: "kept as it reads", Status: screening.House}

// asMeasured returns the value that a failed track reads as its rating, and the text; "" where it may not be kept so.
func asMeasured(c screening.Claim, f *screening.Finding) (rating screening.Rating, text string) {
	nominal, claimed := c.Nominal(screening.Resistance.Name, f.Limit.Section)
	r := f.Reading
	if !claimed || r.Sense != quantity.Exactly || r.Value < keptLow*nominal || r.Value > keptHigh*nominal {
		return rating, ""
	}
	rating = screening.NominalRating(screening.Resistance, book.Honest(r.Value, r.U, 3))
	rating.Section, rating.Typed = f.Limit.Section, rating.String()
	rating.Source = screening.Source{
		Document: fmt.Sprintf("kept at its measured value between %s and %s of the printed one", percent(keptLow), percent(keptHigh)),
		Status:   screening.House,
	}
	return rating, "as measured, " + rating.String() + ofSection(f.Limit.Section)
}

func untested(part screening.Part, _ []screening.Finding) []string {
	list := []string{"noise faster than a meter shows, insulation to the shaft, life"}
	if p, ok := part.Claim.Nominal(screening.Power.Name, ""); ok {
		return append(list, "rated power ("+quantity.Format(p, quantity.Watt, 0)+") and working voltage")
	}
	return append(list, "rated power and working voltage")
}
