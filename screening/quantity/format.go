package quantity

import (
	"math"
	"strconv"
)

const (
	// shortDigits are what Short rounds to: with 13 significant digits a value reads back within 5·10⁻¹³ of itself.
	shortDigits = 13
	// mostDigits are those that every float64 holds.
	mostDigits = 15
)

// Format prints x (SI) in engineering notation with this many significant digits: 770e-6 A with 3 is "770 µA". With digits ≤ 0 it is the
// shortest text that reads back to 12 significant digits. Capacitances have neither milli nor kilo (2200 µF), plain numbers and
// temperatures no prefix, ratios print in percent, whole minutes as minutes. NaN prints as "–", an infinity as "∞" or "-∞".
func Format(x float64, unit Unit, digits int) string {
	var buf [bufferSize]byte
	return string(appendFormat(buf[:0], x, unit, digits))
}

// Bound prints a limit: as it stands where four significant digits hold it ("4.845 V", "10 µA"), else with three ("98.9 mΩ").
func Bound(x float64, unit Unit) string {
	if x-x != 0 {
		return Format(x, unit, 0)
	}
	if d := round(x, 0); d.n <= 4 {
		return Format(x, unit, 0)
	}
	return Format(x, unit, 3)
}

// Short is [Format] with the shortest text that [Parse] reads back to 12 significant digits.
func Short(x float64, unit Unit) string { return Format(x, unit, 0) }

// bufferSize holds any value that a bench sees, so that printing allocates the string only.
const bufferSize = 48

func appendFormat(b []byte, x float64, unit Unit, digits int) []byte {
	switch {
	case math.IsNaN(x):
		return append(b, "–"...)
	case math.IsInf(x, 1):
		return append(b, "∞"...)
	case math.IsInf(x, -1):
		return append(b, "-∞"...)
	}
	if unit == Second && wholeMinutes(x) {
		return append(appendPlaced(b, round(x/60, 0), 0), " min"...)
	}
	d := round(x, digits)
	p := choosePrefix(&d, unit)
	return appendUnit(appendPlaced(b, d, p), p, unit)
}

func wholeMinutes(x float64) bool { return math.Abs(x) >= 60 && math.Mod(x, 60) == 0 }

// decimal is a number rounded to n significant digits: d.ddd·10^exponent. Laying the digits out, instead of scaling the number, keeps
// every printed digit right.
type decimal struct {
	digits   [mostDigits]byte
	n        int
	exponent int
	negative bool
}

// round rounds to this many significant digits; with digits ≤ 0 to shortDigits without their trailing zeros.
func round(x float64, digits int) decimal {
	want := min(digits, mostDigits)
	if digits <= 0 {
		want = shortDigits
	}
	d := decimal{negative: x < 0}
	if x == 0 {
		d.digits[0], d.n = '0', 1
		return d
	}
	var buf [32]byte
	text := strconv.AppendFloat(buf[:0], math.Abs(x), 'e', want-1, 64) // d.ddde±xx
	i := 0
	for ; text[i] != 'e'; i++ {
		if text[i] != '.' {
			d.digits[d.n] = text[i]
			d.n++
		}
	}
	for _, c := range text[i+2:] {
		d.exponent = d.exponent*10 + int(c-'0')
	}
	if text[i+1] == '-' {
		d.exponent = -d.exponent
	}
	if digits <= 0 {
		for d.n > 1 && d.digits[d.n-1] == '0' {
			d.n--
		}
	}
	return d
}

// choosePrefix returns the power of ten of the largest prefix that leaves a digit before the decimal sign, or else of the smallest.
func choosePrefix(d *decimal, unit Unit) int {
	if d.digits[0] == '0' {
		return ratioExponent(unit)
	}
	if unit == Watt && d.exponent < 0 && d.exponent >= -2 {
		return 0 // the trade prints 0.25 W
	}
	lowest := ratioExponent(unit)
	for p := 9; p >= -12; p -= 3 {
		if prints(p, unit) {
			if p <= d.exponent {
				return p
			}
			lowest = p
		}
	}
	return lowest
}

// prints reports whether values of a unit are printed with the prefix 10^p.
func prints(p int, unit Unit) bool {
	switch {
	case unit >= units || unit == One || unit == Celsius || unit == Ratio:
		return false
	case p == 0:
		return true
	case unit == Farad && p == -3:
		return false // the trade prints 2200 µF
	case p == 3 && (unit == Metre || unit == Coulomb):
		return false
	}
	return prefixRange[unit].low <= p && p <= prefixRange[unit].high
}

// Beyond these powers of ten a number is printed as 1.5e-12 instead of in a row of zeros.
const longestZeros, longestNumber = -7, 15

// appendPlaced prints d/10^p.
func appendPlaced(b []byte, d decimal, p int) []byte {
	if d.negative {
		b = append(b, '-')
	}
	digits := d.digits[:d.n]
	whole := d.exponent - p + 1 // digits before the decimal sign
	if d.digits[0] == '0' {
		whole = 1
	}
	if whole-1 < longestZeros || whole-1 > longestNumber {
		b = appendSplit(b, digits, 1)
		return strconv.AppendInt(append(b, 'e'), int64(whole-1), 10)
	}
	return appendSplit(b, digits, whole)
}

// appendSplit prints digits with the decimal sign after this many of them.
func appendSplit(b, digits []byte, whole int) []byte {
	if whole <= 0 {
		b = append(b, '0', '.')
		for ; whole < 0; whole++ {
			b = append(b, '0')
		}
		return append(b, digits...)
	}
	if whole >= len(digits) {
		b = append(b, digits...)
		for range whole - len(digits) {
			b = append(b, '0')
		}
		return b
	}
	b = append(b, digits[:whole]...)
	b = append(b, '.')
	return append(b, digits[whole:]...)
}

func appendUnit(b []byte, p int, unit Unit) []byte {
	symbol := unit.Symbol()
	if symbol == "" {
		return b
	}
	b = append(b, ' ')
	switch {
	case p == ratioExponent(unit):
	case p == -6:
		b = append(b, "µ"...)
	default:
		b = append(b, "pnum kMG"[(p+12)/3])
	}
	return append(b, symbol...)
}
