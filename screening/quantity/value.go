package quantity

import (
	"math"
	"strings"
)

// Value is one number as read.
type Value struct {
	Number float64 // SI; 0 where Over
	Unit   Unit
	Sense  Sense
	Step   float64 // value of one unit in the last typed digit: what the counts of a meter's accuracy refer to; 0 where unknown
	Over   bool    // the meter showed over-range (OL); what that proves depends on what was measured
}

// String prints a value with the digits that its step justifies, neither more nor fewer, and with its sense: "> 400 V", "0.00 A", "OL".
// A prefix that would add digits gives way to the next: a reading of 0.1 µA is not 100 nA. Where a unit has no such prefix (180000 of a
// plain number, 2200 µF of 2,2m) zeros fill the place. A value without step prints as [Short].
func (v Value) String() string {
	if v.Over {
		return "OL"
	}
	var buf [bufferSize]byte
	b := buf[:0]
	switch v.Sense {
	case AtLeast:
		b = append(b, "> "...)
	case AtMost:
		b = append(b, "< "...)
	}
	plain := !(v.Step > 0) || math.IsInf(v.Step, 0) || v.Number-v.Number != 0
	if plain || v.Unit == Second && wholeMinutes(v.Number) {
		return string(appendFormat(b, v.Number, v.Unit, 0))
	}
	last := round(v.Step, 0).exponent
	d := roundTo(v.Number, last)
	p := choosePrefix(&d, v.Unit)
	if d.digits[0] == '0' {
		p = zeroPrefix(last, v.Unit)
		b = appendZero(b, last-p)
	} else {
		p = honestPrefix(p, last, v.Unit)
		b = appendPlaced(b, d, p)
	}
	return string(appendUnit(b, p, v.Unit))
}

// PlusMinus prints a value with a half-width beside it, both in the prefix of the value: "61 ± 29 mΩ". The half-width has two significant
// digits. A value that only bounds, or a half-width that is not above zero, prints as [Value.String].
func (v Value) PlusMinus(half float64) string {
	text := v.String()
	if v.Over || v.Sense != Exactly || !(half > 0) || math.IsInf(half, 0) {
		return text
	}
	number, unit, _ := strings.Cut(text, " ")
	prefix, ok := strings.CutSuffix(unit, v.Unit.Symbol())
	if !ok {
		return text // minutes
	}
	p := ratioExponent(v.Unit)
	switch prefix {
	case "p":
		p = -12
	case "n":
		p = -9
	case "µ":
		p = -6
	case "m":
		p = -3
	case "k":
		p = 3
	case "M":
		p = 6
	case "G":
		p = 9
	}
	b := append(make([]byte, 0, bufferSize), number...)
	b = appendPlaced(append(b, " ± "...), round(half, 2), p)
	if unit != "" {
		b = append(append(b, ' '), unit...)
	}
	return string(b)
}

// roundTo rounds to the decimal place 10^last, and to at least one significant digit.
func roundTo(x float64, last int) decimal {
	if x == 0 {
		return round(0, 1)
	}
	exponent := round(x, mostDigits).exponent
	d := round(x, max(1, exponent-last+1))
	if d.exponent > exponent && exponent >= last && d.n < mostDigits {
		d.digits[d.n] = '0' // 9.996 became 10.0, and the place asked for is one further
		d.n++
	}
	return d
}

// honestPrefix goes up from prefix 10^p until the last justified digit stands in the ones or behind the decimal sign.
func honestPrefix(p, last int, unit Unit) int {
	for q := p; q <= 9; q += 3 {
		if q >= last && prints(q, unit) && (unit != Farad || q < 0 || p == 0) {
			return q
		}
	}
	return p
}

// zeroPrefix is the smallest prefix in which a zero read to the place 10^last needs no digit that was not read.
func zeroPrefix(last int, unit Unit) int {
	for p := -12; p <= 9; p += 3 {
		if p >= last && prints(p, unit) {
			return p
		}
	}
	return ratioExponent(unit)
}

// appendZero prints 0, 0.0, 0.00 for the decimal places 0, -1, -2.
func appendZero(b []byte, place int) []byte {
	b = append(b, '0')
	if place < 0 {
		b = append(b, '.')
	}
	for ; place < 0; place++ {
		b = append(b, '0')
	}
	return b
}
