package marking

import (
	"math"
	"strings"

	"goodbin/screening"
)

// meaning makes one meaning of the pieces on the stack with the sayings picked.
func (d *decoder) meaning(kinds kindSet, rank int) {
	value, tolerance := -1, -1
	for i := range d.stack {
		switch d.stack[i].role {
		case asValue:
			value = i
		case asTolerance:
			tolerance = i
		}
	}
	main := max(value, 0)
	s := d.picks[main]
	m := Meaning{
		Of: s.of, Value: s.value, Low: s.low, High: s.high, Unit: s.unit, Text: s.says, Dates: s.dates, Scheme: s.scheme.name, Why: s.scheme.why,
		Note: s.note, rank: s.scheme.rank + rank,
	}
	var band spread
	if value >= 0 && tolerance >= 0 {
		var ok bool
		if band, ok = spreadOf(s, d.picks[tolerance]); !ok {
			return
		}
		m.Low, m.High = band.low, band.high
	}
	if value < 0 && s.of == screening.Tolerance.Name {
		d.bareTolerance(&m)
	}
	if value >= 0 {
		if beyond(s) || d.farFetched(value, tolerance) {
			return
		}
		d.rankValue(&m, s)
	}
	if kinds = d.narrowed(kinds); value >= 0 {
		kinds = d.made(&m, kinds, s)
	}
	d.gather(&m, main, band)
	m.Kinds = kinds.names()
	if len(s.dates) > 0 {
		m.Value, m.Low, m.High = math.NaN(), float64(s.dates[len(s.dates)-1].Year), float64(s.dates[0].Year)
		if m.Low == m.High {
			m.Value = m.High
		}
	}
	if d.hint != 0 && kinds != 0 && kinds&d.hint == 0 {
		m.rank += notOfThisKind
		m.Why = "not on the kind of part that was named; " + m.Why
	}
	d.keep(m)
}

// bareTolerance words a tolerance without a value, of which nobody knows whether it is below 10 pF.
func (d *decoder) bareTolerance(m *Meaning) {
	if m.Low == m.High {
		m.Low, m.High = math.NaN(), math.NaN()
	}
	for i := range d.tables.tolerance[d.stack[0].letter] {
		l := &d.tables.tolerance[d.stack[0].letter][i]
		if l.below != "" && l.low == m.Low && l.high == m.High {
			m.Note = joinNotes(m.Note, l.below)
		}
	}
}

// farFetched reports a bare number that touches a letter on which the lists disagree: 35V is no 35 µF.
func (d *decoder) farFetched(value, tolerance int) bool {
	return tolerance >= 0 && d.stack[value].shape == plainShape && d.picks[tolerance].rank > 0 && d.stack[value].to == d.stack[tolerance].from
}

// narrowed leaves out kinds that do not claim what the pieces say: trimmers neither tolerance nor voltage; and what names its dielectric is
// of the mains only with a class.
func (d *decoder) narrowed(kinds kindSet) kindSet {
	left := kinds
	if d.has(asTolerance) || d.has(asVoltage) {
		left &^= variableKind
	}
	if (d.has(asCeramic) || d.has(asDielectric)) && !d.has(asClass) {
		left &^= mainsKind
	}
	if left == 0 {
		return kinds
	}
	return left
}

// leastAlternating is the alternating voltage in V from which it is claimed as one of the mains.
const leastAlternating = 100

// made leaves out the kinds that are not made in the value; a value that none of them is made in stands further behind.
func (d *decoder) made(m *Meaning, kinds kindSet, s *saying) kindSet {
	made := d.madeIn(kinds, s)
	if made == 0 && kinds != 0 {
		m.rank += unusual
		m.Why += "; not made in that value"
		return kinds
	}
	return made
}

// madeIn leaves out the kinds that are not made in a value.
func (d *decoder) madeIn(kinds kindSet, s *saying) kindSet {
	if s.of != screening.Capacitance.Name || kinds == 0 {
		return kinds
	}
	for i := range kindOrder {
		if r := d.tables.ranges[i]; r.high > 0 && (s.value < r.low || s.value > r.high) {
			kinds &^= 1 << i
		}
	}
	return kinds
}

// beyond reports a value a thousand times outside the usual range of its scheme: no part has it.
func beyond(s *saying) bool {
	return s.value > 0 && (s.value < s.scheme.low/1000 || s.value > s.scheme.high*1000)
}

// notOfThisKind puts meanings that the hinted kind does not carry behind all others.
const notOfThisKind = 1000

// gather fills in what the pieces say one by one: parts, words, notes, and the weakest source.
func (d *decoder) gather(m *Meaning, main int, band spread) {
	m.Source = *d.picks[main].source
	if len(d.stack) > 1 {
		m.Parts = make([]Part, 0, len(d.stack))
	}
	for i := range d.stack {
		p, s := &d.stack[i], d.picks[i]
		if i != main {
			if s.dates != nil {
				m.Dates = s.dates
				m.rank += s.scheme.rank - d.schemes[dateYYWW].rank
			}
			m.Note = joinNotes(m.Note, s.note)
			if weaker(s.source.Status, m.Source.Status) {
				m.Source = *s.source
			}
		}
		if m.Parts != nil {
			says := band.says
			if p.role != asTolerance {
				says = s.text()
			}
			m.Parts = append(m.Parts, Part{Text: d.text[p.from:p.to], Says: says, Of: s.of, Scheme: s.scheme.name, Source: *s.source})
		}
	}
	m.Words = d.claim(band)
}

// claim puts what the pieces claim into words of the command line, value and tolerance first; nil where nothing is definite.
func (d *decoder) claim(band spread) []string {
	words := make([]string, 0, len(d.stack)+1)
	for r := asValue; r <= asDate; r++ {
		for i := range d.stack {
			if d.stack[i].role == r {
				words = d.appendWord(words, i, band)
			}
		}
	}
	if len(words) == 0 {
		return nil
	}
	return words
}

// appendWord appends what a piece claims as words of the command line; nothing where it is not definite.
func (d *decoder) appendWord(words []string, i int, band spread) []string {
	s := d.picks[i]
	switch d.stack[i].role {
	case asValue:
		switch {
		case s.of == varistorVoltage:
			words = append(words, "rated:"+string(s.of)+"="+valueWord(s.value, s.unit))
		case s.value > 0:
			words = append(words, valueWord(s.value, s.unit))
		}
		if s.word != "" {
			words = append(words, s.word)
		}
	case asTolerance:
		word := band.word
		if len(d.stack) == 1 && s.low < s.high {
			word = toleranceWord(s.low, s.high)
		}
		if word != "" {
			words = append(words, word)
		}
	case asVoltage:
		switch {
		case s.of == screening.RatedVoltage.Name:
			words = append(words, valueWord(s.value, s.unit))
		case s.value >= leastAlternating:
			words = append(words, valueWord(s.value, s.unit)+"AC")
		}
	case asPower:
		words = append(words, valueWord(s.value, s.unit))
	case asDate:
		if len(s.dates) == 1 {
			words = append(words, screening.TraitDated+"="+s.dates[0].year())
		}
	case asCeramic, asDielectric, asClass:
		word := s.word
		if d.stack[i].role != asClass && d.has(asClass) {
			word = s.mainsWord
		}
		if word != "" {
			words = append(words, word)
		}
	}
	return words
}

// text prints what a saying says.
func (s *saying) text() string {
	switch {
	case s.says != "":
		return s.says
	case len(s.dates) > 0:
		return datesText(s.dates)
	}
	return short(s.value, s.unit) + alternating(s.of)
}

// alternating is what stands behind the unit of an alternating voltage.
func alternating(of screening.Characteristic) string {
	if of == acVoltage {
		return " AC"
	}
	return ""
}

// String prints a meaning in one line: "470 nF ±5 %, 100 V", "week 8 of 2012", "−1500 ±250 ppm/K".
func (m Meaning) String() string {
	var b strings.Builder
	switch {
	case m.Text != "":
		b.WriteString(m.Text)
	case m.Of == OfDate:
		b.WriteString(datesText(m.Dates))
	case m.Value == 0:
		b.WriteString("0 Ω")
	default:
		b.WriteString(short(m.Value, m.Unit) + alternating(m.Of))
		m.writeSpread(&b)
	}
	for _, p := range m.Parts {
		if p.Of == m.Of || p.Of == screening.Tolerance.Name {
			continue
		}
		b.WriteString(", " + p.Says)
	}
	return b.String()
}

// writeSpread prints the tolerance that the bounds are: as printed, else in percent.
func (m Meaning) writeSpread(b *strings.Builder) {
	if math.IsNaN(m.Low) || math.IsNaN(m.High) || !(m.Value > 0) {
		return
	}
	for _, p := range m.Parts {
		if p.Of == screening.Tolerance.Name {
			b.WriteString(" " + p.Says)
			return
		}
	}
	b.WriteString(" " + toleranceText(tidy(m.Low/m.Value-1), tidy(m.High/m.Value-1)))
}
