package thyristor

import (
	"fmt"
	"math"
	"strconv"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/rules/internal/sheet"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	leastOn    = 50e-3 // A, the least current at which its drop says that it latched (house)
	mostLimits = 24
)

// forward and backward are the two directions in which it must block.
func (b rulebook) forward(c screening.Claim) semi.Blocking {
	return semi.Blocking{
		Volts: VBO, Leak: IDRM, Required: blocks, Breakdown: breakover, Most: figures()["off-leak"],
		Tied: "gate open", Aim: "forward blocking", Typed: "OL",
	}.Rate(c, VDRM)
}

func (b rulebook) backward(c screening.Claim) semi.Blocking {
	return semi.Blocking{
		Volts: screening.VBR, Leak: screening.IR, Required: blocksBack, Breakdown: breakdown, Most: figures()["off-leak"],
		Tied: "gate open", Aim: "reverse blocking", Typed: "OL",
	}.Rate(c, VDRM)
}

// directions lists the sections in which it must trigger and latch: quadrants I and III of a triac.
func (b rulebook) directions() []string {
	if b.triac() {
		return []string{"1", "3"}
	}
	return []string{""}
}

func (b rulebook) complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	if err := book.CheckStands(c, &VDRM, &ITRMS, &ITSM); err != nil {
		return c, nil, err
	}
	for i := range c.Ratings {
		if r := &c.Ratings[i]; (r.Of == IGT.Name || r.Of == IGTQ4.Name) && !(r.High > 0) {
			return c, nil, fmt.Errorf("%s: %s triggers nothing; a gate needs a current, such as rated:%s=..15mA", r.Of, r, r.Of)
		}
	}
	name := c.Trait(screening.TraitType)
	if name == "" {
		return c, nil, nil
	}
	row, known := b.table.Lookup(b.kind, name)
	base, grade, graded := splitGrade(name)
	if !known && graded {
		row, known = b.table.Lookup(b.kind, base)
	}
	if !known {
		return c, []screening.Reason{sheet.Unknown(b.table, b.kind, c, "rated:vdrm=600V rated:igt=..15mA")}, nil
	}
	if graded {
		row.Type += "-" + grade
		row.Traits = screening.Claim{Traits: row.Traits}.WithTrait(screening.TraitType, row.Type).Traits
		volts, err := strconv.ParseFloat(grade, 64)
		if err != nil || volts <= 0 {
			return c, nil, fmt.Errorf("type: %q after %s is no voltage grade", grade, row.Type)
		}
		rated := screening.RangeRating(VDRM, volts, math.Inf(1))
		rated.Source = screening.Source{Document: "the number after the type is its voltage grade", Status: screening.CommonPractice}
		row.Ratings = append(book.Without(row.Ratings, VDRM.Name), rated)
	}
	c, err := semi.Complete(c, &row, VDRM)
	return c, nil, err
}

func (b rulebook) limits(c screening.Claim) ([]screening.Limit, error) {
	all := make([]screening.Limit, 0, mostLimits)
	all = b.forward(c).Limits(all, c)
	all = b.backward(c).Limits(all, c)
	// Wanted: a part that triggers and holds has a sound gate, and one that does not fails by that.
	for _, l := range []screening.Limit{figures().Limit(screening.VF, gate, "gate-junction"), figures().Limit(RGK, gate, "gate-ohms")} {
		l.Need = screening.Wanted
		all = append(all, l)
	}
	for _, section := range b.directions() {
		if _, expected := c.Rating(IGT.Name, ""); expected {
			all = append(all, b.triggerLimit(c, IGT, section))
		} else {
			all = semi.Graded(all, b.triggerLimit(c, IGT, section), "as good as new only where the gate current of its sheet is known")
		}
		on := figures().Limit(VT, latches, "on")
		on.Section = section
		all = append(all, on)
	}
	if r, ok := c.Rating(IGTQ4.Name, ""); ok && b.triac() {
		l := semi.LimitOf(IGT, "triggers-q4", &r)
		l.Low, l.Section, l.Need, l.Note = math.Inf(-1), "4", screening.Wanted, "quadrant IV: T2 minus, gate plus"
		all = append(all, l)
	}
	for _, w := range []struct {
		of        screening.Definition
		criterion screening.Criterion
	}{{VGT, gateVolts}, {IH, holding}, {VT, onDrop}} {
		r, ok := c.Rating(w.of.Name, "")
		if !ok || math.IsInf(r.High, 1) {
			continue
		}
		for _, section := range b.directions() {
			if w.of.Name != VT.Name && section == "3" {
				continue
			}
			l := semi.LimitOf(w.of, w.criterion, &r)
			l.Low, l.Need = math.Inf(-1), screening.Wanted
			if w.of.Name == VT.Name {
				l.Section = section
			}
			all = append(all, l)
		}
	}
	return all, nil
}

// triggerLimit asks that it latches with no more gate current than its sheet allows; of an unknown type, with no more than any needs.
func (b rulebook) triggerLimit(c screening.Claim, of screening.Definition, section string) screening.Limit {
	l := figures().Limit(of, triggers, "trigger")
	if r, ok := c.Rating(of.Name, ""); ok && r.High < math.Inf(1) {
		l = semi.LimitOf(of, triggers, &r)
		l.Low, l.At = math.Inf(-1), screening.Condition{}
		l.Note = "it latches with so much gate current or less"
	}
	l.Section = section
	return l
}

// convert brings leakages to the limit's condition, and takes the drop at another current for what it shows.
func (b rulebook) convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	if c, ok := b.forward(part.Claim).Convert(part, r, l); ok {
		return c
	}
	if c, ok := b.backward(part.Claim).Convert(part, r, l); ok {
		return c
	}
	if l.On != VT.Name {
		return screening.Conversion{}
	}
	got, stated := r.At.Get(screening.Current)
	want, _ := l.At.Get(screening.Current)
	c := screening.Conversion{OK: true, Reading: r, Source: screening.Source{Document: "on-state voltage grows with current", Status: screening.CommonPractice}}
	c.Reading.At = l.At
	switch {
	case !stated:
		return screening.Conversion{Why: "the current of the reading is not stated: vt@0.4A=…"}
	case l.Criterion == latches && got >= leastOn:
		c.Rule = "the limit holds at whatever current is stated"
		if got > want {
			c.Reading.Sense, c.Rule = noMore(r), "at "+semi.Amps(want)+" it drops no more than at "+semi.Amps(got)
			if r.Sense == quantity.Exactly && r.Value <= l.High {
				c.Reading.Sense, c.Rule = quantity.Exactly, "even at "+semi.Amps(got)+" it keeps what is allowed"
			}
		}
	case l.Criterion == latches:
		return screening.Conversion{Why: "taken at " + semi.Amps(got) + ", which many types cannot hold; at least " + semi.Amps(leastOn) + " is needed"}
	case got < want && r.Sense != quantity.AtMost:
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at "+semi.Amps(want)+" it drops no less than at "+semi.Amps(got)
	case got > want && r.Sense != quantity.AtLeast:
		c.Reading.Sense, c.Rule = quantity.AtMost, "at "+semi.Amps(want)+" it drops no more than at "+semi.Amps(got)
	default:
		return screening.Conversion{Why: "taken at " + semi.Amps(got) + ", which says nothing of " + semi.Amps(want)}
	}
	c.Reading.Rule = c.Rule
	return c
}

func noMore(r screening.Reading) quantity.Sense {
	if r.Sense == quantity.AtLeast {
		return quantity.AtLeast
	}
	return quantity.AtMost
}

// drivenWithin is how well a gate current is known that a supply and a resistor set (house).
const drivenWithin = 0.05

// driven restates a gate current that only bounds: it was set by a supply and a resistor, so its digits are not a meter's.
func driven(part screening.Part) ([]screening.Reading, []screening.Reason) {
	var all []screening.Reading
	for _, r := range part.Readings {
		if r.Of != IGT.Name || r.Sense == quantity.Exactly {
			continue
		}
		r.Spec, r.Step, r.Repeats, r.Assumed = drivenWithin*r.Value, 0, nil, false
		r.U, r.Rule = r.Spec/math.Sqrt(3), "set by supply and resistor, to 5 %"
		all = append(all, r)
	}
	return all, nil
}
