package marking

import (
	"math"
	"slices"

	"goodbin/rules/internal/series"
	"goodbin/screening"
)

// weaker reports whether a is known less well than b.
func weaker(a, b screening.Status) bool { return weakness[a] > weakness[b] }

var weakness = [...]int{
	screening.NoStatus: 9, screening.Published: 0, screening.House: 1, screening.Derived: 2, screening.CommonPractice: 3, screening.SecondHand: 4,
	screening.FromMemory: 5,
}

// The places by which a value that is no preferred one, or lies outside the usual range, stands behind.
const (
	fineSeries = 10 // a value of E48 to E192 where parts are made to E24
	oldValue   = 8
	noSeries   = 15
	unusual    = 40
)

// rankValue says how likely the value is, and why.
func (d *decoder) rankValue(m *Meaning, s *saying) {
	if !(s.value > 0) {
		return
	}
	if s.value < s.scheme.low || s.value > s.scheme.high {
		m.rank += unusual
		m.Why += "; an unusual value for it"
	}
	coarsest := series.Coarsest(s.value)
	resistance := s.of == screening.Resistance.Name
	old := d.isOld(figuresOf(s.value))
	switch {
	case coarsest == 0 && old:
		m.rank += oldValue
	case coarsest == 0:
		m.rank += noSeries
		m.Why += "; no preferred value"
	case coarsest > 24 && resistance:
		m.rank += 3
		m.Why += seriesWhy[coarsest]
	case coarsest > 24:
		m.rank += fineSeries
		m.Why += seriesWhy[coarsest]
	default:
		m.Why += seriesWhy[coarsest]
	}
	if old && (coarsest == 0 || !resistance) {
		m.Note = joinNotes(m.Note, neighbours(s, resistance))
	}
	switch voltage, tolerance := d.has(asVoltage), d.has(asTolerance); {
	case s.scheme == &d.schemes[plainUFCan] && voltage:
		m.rank -= 25
		m.Why += "; with a voltage beside it"
	case s.scheme == &d.schemes[plainPF] && tolerance:
		m.rank -= 22
		m.Why += "; with a tolerance beside it, as ceramics print"
		if d.letter() == 'K' {
			m.Note = joinNotes(m.Note, "K behind a capacitor's bare number is taken for ±10 %, not for kilo")
		}
	}
}

// letter is the tolerance letter on the stack; 0 where there is none.
func (d *decoder) letter() byte {
	for i := range d.stack {
		if d.stack[i].role == asTolerance {
			return d.stack[i].letter
		}
	}
	return 0
}

// has reports whether a piece on the stack plays a role.
func (d *decoder) has(r role) bool {
	return slices.ContainsFunc(d.stack, func(p piece) bool { return p.role == r })
}

var seriesWhy = map[int]string{
	3: "; a value of E3", 6: "; a value of E6", 12: "; a value of E12", 24: "; a value of E24", 48: "; a value of E48", 96: "; a value of E96",
	192: "; a value of E192",
}

// figuresOf returns the three figures of a value, from 100 to 999, rounded.
func figuresOf(x float64) float64 {
	return math.Round(x / math.Pow10(int(math.Floor(math.Log10(x)))) * 100)
}

// neighbours names the modern values beside an old one.
func neighbours(s *saying, resistance bool) string {
	n := 12
	if resistance {
		n = 24
	}
	below, above := series.Neighbours(n, s.value)
	return "an old value; today " + short(below, s.unit) + " (" + shift(below/s.value) + ") or " + short(above, s.unit) +
		" (" + shift(above/s.value) + ")"
}

// shift prints a ratio as a change in whole percent: "−6 %".
func shift(ratio float64) string {
	return signed(math.Round(tidy(100*(ratio-1)))) + " %"
}

// keep adds a meaning unless one that says the same is there; of two the likelier stays.
func (d *decoder) keep(m Meaning) {
	for i := range d.meanings {
		o := &d.meanings[i]
		same := o.Of == m.Of && equal(o.Value, m.Value) && equal(o.Low, m.Low) && equal(o.High, m.High) && o.Scheme == m.Scheme && o.Text == m.Text
		if same && slices.Equal(o.Words, m.Words) && slices.Equal(o.Dates, m.Dates) && slices.EqualFunc(o.Parts, m.Parts, sameSaid) {
			if m.rank < o.rank {
				*o = m
			}
			return
		}
	}
	d.meanings = append(d.meanings, m)
}

func sameSaid(a, b Part) bool { return a.Says == b.Says }

func equal(a, b float64) bool { return a == b || math.IsNaN(a) && math.IsNaN(b) }
