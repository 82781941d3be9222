package led

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Voltages that tell what is wrong, V (from memory, for words only): below shorted there is no junction, between it and noLED it is another
// diode; what an LED of any colour drops, a second one in reverse drops too.
const shorted, noLED = 0.1, 0.8

// adjust applies the rules that look across readings: turned probes, a tester too weak for the colour, a second LED in reverse, and a reading
// at too little current to tell another colour from a leaky one.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	say := func(of screening.Characteristic, text string) {
		if n := book.Note(of, "%s", text); text != "" && !slices.Contains(reasons, n) {
			reasons = append(reasons, n)
		}
	}
	for i := range findings {
		f := &findings[i]
		switch r := f.Reading; {
		case turnedRound(part, f.Limit.Section) && f.Limit.Criterion != colourCriterion:
			f.Outcome, f.Unconfirmed, f.Why = screening.Missing, false,
				"open forward and an LED's drop in reverse: the probes were the wrong way round; type each reading as the other"
			if f.Need != screening.Required {
				f.Wants = screening.Gap{}
			}
		case f.Limit.Criterion == colourCriterion && f.Outcome == screening.Missing:
			f.Why, f.Limit.Note = noColour, ""
		case f.Limit.Criterion == breakdownCriterion && f.Outcome == screening.Missing:
			f.Wants = screening.Gap{} // it is never tried on purpose
		case f.Limit.Criterion == breakdownCriterion && f.Outcome != screening.Missing && secondInReverse(r):
			f.Outcome, f.Unconfirmed, f.Wants = screening.Missing, false, screening.Gap{}
		case f.Limit.Criterion == blockingCriterion && secondInReverse(r):
			f.Outcome, f.Unconfirmed = screening.Close, false
			f.Why = "in reverse it drops like another LED: if it lights this way round it is two in one case, colour=red+green; if not it is damaged"
		case f.Limit.Criterion == breakdownCriterion && f.Unconfirmed:
			f.Need = screening.Required
			say(f.Limit.On, "it breaks down at "+quantity.Format(r.Value, quantity.Volt, 3)+": damaged, if its rating is right")
		case f.Limit.On == screening.VF.Name && r != nil && f.Limit.Grade != screening.WithinSpec:
			if lowAtTester(f) {
				f.Outcome = screening.Close
				f.Why = "at a tester's current it drops less than its colour should: another colour, or leaky; read it at " +
					quantity.Format(testCurrent(part.Claim), quantity.Ampere, 0) + " through a resistor"
			}
			if words := forwardWords(f); f.Outcome == screening.Missing && words != "" {
				f.Why = words
			} else {
				say(f.Limit.On, words)
			}
		}
		if f.Limit.On == screening.VBR.Name && f.Reading != nil && f.Reading.Value > reverseMost {
			say(f.Limit.On, "that reading put more than 5 V on it in reverse: most LEDs are not rated for that; not again")
		}
	}
	if names, _ := colours(part.Claim); len(names) > 1 && unsectioned(part) {
		say(screening.VF.Name, "it claims several colours: type each as vf/"+names[0]+"=…, vf/"+names[1]+"=…")
	}
	return findings, reasons
}

func unsectioned(part screening.Part) bool {
	return slices.ContainsFunc(part.Readings, func(r screening.Reading) bool { return r.Of == screening.VF.Name && r.Section == "" })
}

// turnedRound reports whether the readings are those of a sound LED whose probes were the wrong way round.
func turnedRound(part screening.Part, section string) bool {
	f, ok1 := part.Reading(screening.VF.Name, section)
	r, ok2 := part.Reading(screening.VBR.Name, section)
	return ok1 && ok2 && f.Over && r.Sense == quantity.Exactly && r.Value >= noLED
}

// secondInReverse reports whether what was read in reverse is the drop of another LED.
func secondInReverse(r *screening.Reading) bool {
	all := load()
	any := &all[len(all)-1]
	return r != nil && r.Sense == quantity.Exactly && r.Value >= any.low && r.Value <= any.high
}

// lowAtTester reports whether a reading fails its colour on the low side at too little current to tell why.
func lowAtTester(f *screening.Finding) bool {
	i, ok := f.Reading.At.Get(screening.Current)
	return f.Outcome == screening.Fail && f.Side == screening.Below && f.Reading.Value >= noLED && ok && i < tellingCurrent
}

// forwardWords says what a forward voltage looks like.
func forwardWords(f *screening.Finding) string {
	r := f.Reading
	switch {
	case r.Over && f.Outcome != screening.Pass:
		return "OL forward is no fault yet: the probes may be turned, or the tester gives up below what it drops; turn the probes, then light it " +
			"through a resistor"
	case f.Outcome != screening.Fail || r.Sense != quantity.Exactly:
		return ""
	case r.Value < shorted:
		return "forward it reads shorted"
	case r.Value < noLED:
		return "it drops like a silicon or Schottky diode, not like an LED"
	case f.Side == screening.Above:
		return "it drops more than its colour should: another colour, a resistor built in (5 V and 12 V types), or a bad bond"
	}
	return "it drops less than its colour should: another colour, or leaky"
}

// lesser answers a colour that was not claimed, or another one than was claimed, with the voltage as measured and the colours that it allows.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	names, _ := colours(part.Claim)
	r, ok := part.Reading(screening.VF.Name, "")
	if len(names) > 1 || !ok || r.Sense != quantity.Exactly || r.Value < noLED {
		return nil
	}
	current, stated := r.At.Get(screening.Current)
	if !stated {
		return nil
	}
	l := screening.Lesser{Source: screening.Source{Document: "taken at what was measured", Status: screening.House}}
	for i := range findings {
		switch f := &findings[i]; {
		case f.Limit.Criterion == colourCriterion && f.Outcome == screening.Missing:
			l.Answers, l.FromMissing = colourCriterion, true
		case f.Limit.Criterion == forwardCriterion && f.Limit.Grade != screening.WithinSpec && f.Outcome == screening.Fail:
			l.Answers = forwardCriterion
		}
	}
	if l.Answers == "" {
		return nil
	}
	v := book.Honest(r.Value, r.U, 3)
	rating := screening.RangeRating(screening.VF, v*0.9, v*1.1)
	rating.At, rating.Typed, rating.Source = screening.At(screening.Current, current), asMeasured, l.Source
	c := part.Claim.WithTrait(TraitColour, unknown).WithTrait(screening.TraitType, "")
	c.Ratings = append(book.Without(c.Ratings, screening.VF.Name), rating)
	l.Claim = c
	l.Text = fmt.Sprintf("as measured, %s at %s: by its voltage %s", quantity.Format(v, quantity.Volt, 3),
		quantity.Format(current, quantity.Ampere, 0), possible(v, current))
	return []screening.Lesser{l}
}

// possible lists the colours that a voltage allows: by the published bands near 20 mA, by the sound ones elsewhere.
func possible(v, current float64) string {
	var names []string
	near := math.Abs(current/publishedCurrent-1) <= 0.25
	for _, c := range load() {
		low, high := c.soundLow, c.soundHigh
		if near {
			low, high = c.low, c.high
		}
		if c.name != unknown && c.name != "green" && v >= low && v <= high {
			names = append(names, c.name)
		}
	}
	if len(names) == 0 {
		return "between the usual colours"
	}
	text := strings.Join(names[:len(names)-1], ", ")
	if text != "" {
		text += " or "
	}
	return text + names[len(names)-1]
}

// untested says what the readings leave open: its light above all.
func untested(part screening.Part, _ []screening.Finding) []string {
	var lines []string
	_, looked := part.Seen("dark")
	dim, _ := part.Seen("dim")
	switch {
	case dim: // seen lit, and how brightly
	case !looked:
		lines = append(lines, "whether it lights, and how brightly")
	default:
		lines = append(lines, "how brightly it lights (compare it with a twin)")
	}
	current, most := testCurrent(part.Claim), 0.0
	for _, r := range part.Readings {
		if i, ok := r.At.Get(screening.Current); ok && r.Of == screening.VF.Name {
			most = math.Max(most, i)
		}
	}
	if most > 0 && most < current*0.75 {
		lines = append(lines, "forward voltage at "+quantity.Format(current, quantity.Ampere, 0))
	}
	return append(lines, "reverse blocking above what was used (5 V at most)")
}
