package jfet

import (
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const turnedWords = "open forward and a junction's drop in reverse: the probes were the wrong way round, or it is of the other channel"

// adjust applies the rules that look across readings.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var say semi.Say
	turned := semi.Turned(part, screening.VF.Name, screening.VBR.Name)
	g := gates(part.Claim)
	for i := range findings {
		f := &findings[i]
		g.Tidy(f)
		switch {
		case turned && f.Limit.On == screening.VF.Name:
			semi.Unanswer(f, turnedWords)
		case turned && f.Limit.On == screening.VBR.Name:
			semi.Unanswer(f, "turn the probes and read both again")
		case f.Outcome == screening.Fail && (f.Limit.Criterion == gateBlocks || f.Limit.Criterion == gateBreakdown):
			say.Note(f.Limit.On, semi.SuspectStatic)
		case f.Outcome == screening.Fail && f.Limit.Criterion == gateForward && f.Reading.Over:
			say.Note(f.Limit.On, "the gate reads open: the probes turned, another lead is the gate, or the junction is open")
		case f.Outcome == screening.Fail && f.Limit.Criterion == gateLeakage && f.Limit.Grade == screening.WithinSpec:
			say.Note(f.Limit.On, "the gate leaks more than its sheet allows: a sound one leaks nanoamperes; not for high-impedance inputs")
		case f.Outcome == screening.Fail && f.Limit.Criterion == channel && f.Side == screening.Above:
			say.Note(f.Limit.On, "drain to source reads open: find the gate again, or the channel is burnt out")
		}
	}
	semi.AsNew(findings, channel, current)
	say.Note(screening.VGSOff.Name, estimate(part))
	return findings, say.Reasons
}

// estimate says what IDSS and the channel's resistance make of VGS(off), where that was not measured.
func estimate(part screening.Part) string {
	i, ok1 := part.Reading(screening.IDSS.Name, "")
	r, ok2 := part.Reading(screening.RDSOn.Name, "")
	_, measured := part.Reading(screening.VGSOff.Name, "")
	if !ok1 || !ok2 || measured || i.Sense != quantity.Exactly || r.Sense != quantity.Exactly || i.Value == 0 || r.Value <= 0 {
		return ""
	}
	v := CutOff(i.Value, 1/r.Value)
	if v < 0 {
		v = -v
	}
	return "by the square law VGS(off) is about " + semi.Volts(semi.Honest2(v)) + " (2·IDSS times the drain-source ohms); to match a pair measure it"
}

// offset is how far outside the range of its type a drain current may lie and still be kept as measured (house).
const offset = 2.0

// lesser answers a drain current that its group does not promise: the other groups of the type that hold it, the type without a group, and
// near the type's range an unnamed part as measured. Nothing answers any other failure.
func (b rulebook) lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	i := slices.IndexFunc(findings, func(f screening.Finding) bool {
		return f.Limit.Criterion == current && f.Outcome == screening.Fail && f.Evidence() != nil
	})
	row, known := b.table.Lookup(Kind, part.Claim.Trait(screening.TraitType))
	if i < 0 || !known {
		return nil
	}
	e := findings[i].Evidence()
	x := e.Value
	text := ": IDSS " + bound(e.Sense) + quantity.Format(x, quantity.Ampere, 2)
	own := screening.Claim{Traits: slices.Clone(part.Claim.Traits)}
	for _, r := range part.Claim.Ratings {
		if r.Typed != "" && r.Of != screening.IDSS.Name {
			own.Ratings = append(own.Ratings, r)
		}
	}
	own = own.WithTrait(screening.TraitGroup, "")
	var all []screening.Lesser
	offer := func(row *types.Row, text string) {
		r, ok := row.Rating(screening.IDSS.Name)
		if row.Type == part.Claim.Trait(screening.TraitType) || !ok || x < r.Low || x > r.High {
			return
		}
		all = append(all, screening.Lesser{
			Claim: own.WithTrait(screening.TraitType, row.Type), Answers: current, Text: text, Source: r.Source,
		})
	}
	groups, whole := b.siblings(&row)
	for i := range groups {
		offer(&groups[i], family(&row)+" group "+groups[i].Trait(screening.TraitGroup)+text)
	}
	if whole != nil {
		offer(whole, whole.Type+" without a group"+text)
	}
	if l := findings[i].Limit; len(all) == 0 && x >= l.Low/offset && x <= l.High*offset {
		unnamed := own.WithTrait(screening.TraitType, "")
		for _, r := range part.Claim.Ratings {
			if r.Typed == "" && (r.Of == screening.VDSS.Name || r.Of == screening.Ptot.Name) {
				r.Typed = semi.Typed(r.Low, r.Unit)
				unnamed.Ratings = append(unnamed.Ratings, r)
			}
		}
		all = append(all, screening.Lesser{
			Claim: unnamed, Answers: current, Text: "a JFET as measured" + text + ", outside the range of " + row.Type,
			Source: screening.Source{Document: "house rule: JFETs are chosen by measurement, whatever their name", Status: screening.House},
		})
	}
	return all
}

// bound words what a reading that only bounds says.
func bound(s quantity.Sense) string {
	switch s {
	case quantity.AtLeast:
		return "at least "
	case quantity.AtMost:
		return "at most "
	}
	return ""
}

// untested words what the readings leave unproven.
func untested(part screening.Part, findings []screening.Finding) []string {
	lines := gates(part.Claim).Untested(findings)
	for _, d := range []screening.Definition{screening.IDSS, screening.VGSOff} {
		claimed := slices.ContainsFunc(findings, func(f screening.Finding) bool { return f.Limit.On == d.Name })
		if _, read := part.Reading(d.Name, ""); !read && !claimed {
			lines = append(lines, d.Symbol+" (no range is known for it)")
		}
	}
	return lines
}

// cautions warn of static discharge and of what heats the part.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	all := append([]screening.Caution{semi.Static()}, gates(part.Claim).Cautions()...)
	r, ok := part.Claim.Rating(screening.IDSS.Name, "")
	if !ok || !(r.High < inf) {
		return all
	}
	watts := battery * r.High
	text := "IDSS at " + semi.Volts(battery) + " may turn " + semi.Watts(watts) + " into heat: read within a second or two; warm, a large IDSS falls by several percent"
	if p, ok := part.Claim.Rating(screening.Ptot.Name, ""); ok {
		text += " (it claims " + p.String() + ")"
	}
	return append(all, screening.Caution{
		Code: "idss-heat", Text: text, Values: map[string]float64{"supply": battery, "power": watts}, Source: book.Practice,
	})
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	c := part.Claim
	gate, other := semi.Ends(c, "gate", "source or drain")
	switch {
	case l.On == screening.VF.Name:
		return []screening.Recipe{{
			Title: "the gate's junction, with a diode test",
			Lines: []string{
				"red probe on the " + gate + ", black on the " + other + ": read volts, then to the third lead: about the same",
				"the gate is the lead that does so to both others; leads differ by maker, so find it first",
			},
			Values: map[string]float64{}, Source: book.Practice,
		}}
	case l.On == screening.VBR.Name || l.On == screening.IGSS.Name:
		plus, minus := semi.Ends(c, "source", "gate")
		all := gates(c).Recipes(l, plus, minus)
		if v, ok := l.At.Get(screening.VGS); ok && l.On == screening.IGSS.Name {
			all = []screening.Recipe{semi.GateRecipe(v, l.High, semi.Channel(c) == semi.P, "source, which is tied to the drain")}
		}
		return all
	case l.On == screening.RDSOn.Name:
		return []screening.Recipe{{
			Title:  "the channel, with an ohmmeter",
			Lines:  []string{"gate tied to source; ohms from drain to source, then with the probes turned: the same within a few percent"},
			Values: map[string]float64{}, Source: book.Practice,
		}}
	case l.On == screening.IDSS.Name:
		return []screening.Recipe{currentRecipe(c, l)}
	case l.On == screening.VGSOff.Name:
		return []screening.Recipe{cutOffRecipe(c)}
	}
	return nil
}

// currentRecipe reads IDSS on a battery; the milliammeter and 100 Ω drop little of it.
func currentRecipe(c screening.Claim, l screening.Limit) screening.Recipe {
	const shunt = 100.0
	drain, source := semi.Ends(c, "drain", "source")
	most := l.High
	if !(most < inf) {
		most = 10 * l.Low
	}
	return screening.Recipe{
		Title: "IDSS on a battery",
		Lines: []string{
			"gate tied to source; a " + semi.Volts(battery) + " battery, its plus to the " + drain + ", its minus to the " + source + ", " +
				semi.Ohms(shunt) + " in series with the drain",
			"read the volts across the " + semi.Ohms(shunt) + " within a second or two: " + semi.Volts(semi.Honest2(most*shunt)) + " is " +
				quantity.Format(most, quantity.Ampere, 2) + "; or a milliammeter in its place",
			"type idss@9V=…; with what is dropped there the part must keep more volts than its VGS(off)",
		},
		Values: map[string]float64{
			"supply": battery, "series-resistance": shunt, "resistor-power": most * most * shunt, "part-power": battery * most,
		},
		Source: book.Practice,
	}
}

// cutOffRecipe lets a 10 MΩ voltmeter be the source resistor: the source rises until the part is all but off.
func cutOffRecipe(c screening.Claim) screening.Recipe {
	drain, gate := semi.Ends(c, "drain", "gate")
	return screening.Recipe{
		Title: "VGS(off) with a voltmeter of 10 MΩ",
		Lines: []string{
			"battery of " + semi.Volts(battery) + " (two in series for types above 6 V), its plus to the " + drain + ", its minus to the " + gate,
			"the voltmeter from source to gate and nothing else: the source climbs until the channel passes only the meter's current",
			"read after ten seconds: 2.5 V through 10 MΩ are " + semi.Amps(semi.Over10M(2.5)) + "; type vgs-off@0.25uA=2.5V. Sheets take it at " +
				semi.Amps(sheetCurrent) + ", where it is a little more; the program corrects by the square law",
		},
		Values: map[string]float64{"supply": battery, "series-resistance": 10e6}, Source: book.Practice,
	}
}
