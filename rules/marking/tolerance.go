package marking

import (
	"math"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// disputed is how far a meaning on which the lists disagree stands behind, per place in its order.
const disputed = 12

// toleranceAt reads a tolerance letter, or a percentage, at i.
func (d *decoder) toleranceAt(i int) {
	c := d.text[i]
	if c >= 'A' && c <= 'Z' {
		d.toleranceLetter(i, c)
	}
	if d.percent {
		d.tolerancePercent(i)
	}
}

func (d *decoder) toleranceLetter(i int, c byte) {
	start := len(d.sayings)
	for l := range d.tables.tolerance[c] {
		t := &d.tables.tolerance[c][l]
		s := d.value(toleranceLetter, math.NaN())
		s.low, s.high, s.pf, s.kinds, s.rank, s.says, s.source = t.low, t.high, t.pf*1e-12, t.kinds, disputed*t.order, t.says, &t.source
		s.note = t.note
		if t.order > 0 {
			s.note = "the letter " + string(rune(c)) + " is disputed: " + t.note
		}
		d.sayings = append(d.sayings, s)
	}
	if n := len(d.sayings) - start; n > 0 {
		d.found = append(d.found, piece{role: asTolerance, shape: letterShape, from: i, to: i + 1, letter: c, first: start, count: n})
	}
}

// tolerancePercent reads a tolerance in figures: 5%, ±20 %, +80-20%.
func (d *decoder) tolerancePercent(i int) {
	at := strings.IndexByte(d.text[i:], '%')
	if at < 1 || !isDigit(d.text[i]) && strings.IndexByte("+-.", d.text[i]) < 0 && !strings.HasPrefix(d.text[i:], "±") {
		return
	}
	low, high, err := quantity.ParseTolerance(d.text[i : i+at+1])
	if err != nil {
		return
	}
	s := d.value(unitScheme, math.NaN())
	s.of, s.unit, s.low, s.high, s.says = screening.Tolerance.Name, quantity.Ratio, low, high, toleranceText(low, high)
	d.add(piece{role: asTolerance, shape: unitShape, from: i, to: i + at + 1}, s)
}

// spread is what a tolerance makes of a value: the bounds in SI, and the tolerance in words and as a word of the command line ("" where
// the line has none for it). ok is false where the letter means nothing on such a value.
type spread struct {
	low, high  float64
	says, word string
}

func spreadOf(value *saying, tolerance *saying) (s spread, ok bool) {
	x := value.value
	if tolerance.pf > 0 && value.of == screening.Capacitance.Name && x < 10e-12 {
		s.low, s.high = tidy(max(0, x-tolerance.pf)), tidy(x+tolerance.pf)
		s.says = "±" + short(tolerance.pf, quantity.Farad)
		if ratio := tolerance.pf / x; ratio < 1 {
			ratio = math.Round(1e5*ratio) / 1e5 // four figures are enough for a claim
			s.word = toleranceWord(-ratio, ratio)
		}
		return s, true
	}
	if tolerance.low == tolerance.high || value.of == varistorVoltage && tolerance.low != -tolerance.high {
		return s, false
	}
	s.low, s.high = tidy(x*(1+tolerance.low)), tidy(x*(1+tolerance.high))
	s.says, s.word = tolerance.says, toleranceWord(tolerance.low, tolerance.high)
	return s, true
}
