package quantity

import (
	"math"
	"strconv"
	"strings"
)

type siPrefix struct {
	exponent int
	letter   string
}

// prefixes are those that each sort of unit is printed with, the largest first. Capacitances have neither milli nor kilo: the trade prints
// 2200 µF.
var (
	allPrefixes   = []siPrefix{{9, "G"}, {6, "M"}, {3, "k"}, {0, ""}, {-3, "m"}, {-6, "µ"}, {-9, "n"}, {-12, "p"}}
	faradPrefixes = []siPrefix{{0, ""}, {-6, "µ"}, {-9, "n"}, {-12, "p"}}
	smallPrefixes = []siPrefix{{0, ""}, {-3, "m"}, {-6, "µ"}, {-9, "n"}, {-12, "p"}}
)

const shortDigits = 12

// Format prints x (SI) in engineering notation with this many significant digits: 770e-6 A with 3 is "770 µA". With digits ≤ 0 it is the
// shortest text that reads back to 12 significant digits. NaN prints as "–".
func Format(x float64, unit Unit, digits int) string {
	switch {
	case math.IsNaN(x):
		return "–"
	case math.IsInf(x, 1):
		return "∞"
	case math.IsInf(x, -1):
		return "-∞"
	}
	switch unit {
	case One, Celsius:
		return join(number(x, digits), "", unit)
	case Ratio:
		return join(number(x*100, digits), "", unit)
	case Second:
		if m := x / 60; math.Abs(m) >= 1 && m == math.Trunc(m) && digits <= 0 {
			return number(m, 0) + " min"
		}
	}
	p := choosePrefix(x, unit, digits)
	return join(number(shift(x, -p.exponent), digits), p.letter, unit)
}

// FormatASCII is [Format] in ASCII: "u" for µ, "ohm" for Ω, "C" for °C, "inf" for ∞.
func FormatASCII(x float64, unit Unit, digits int) string {
	return asciiText.Replace(Format(x, unit, digits))
}

var asciiText = strings.NewReplacer("µ", "u", "Ω", "ohm", "°C", "C", "∞", "inf", "–", "-", "≤", "<=", "≥", ">=", "±", "+-")

// Short is [Format] with the shortest text that [Parse] reads back to 12 significant digits.
func Short(x float64, unit Unit) string { return Format(x, unit, 0) }

// String prints a value with the digits that its step justifies and with its sense: "> 400 V", "2010 µF", "OL".
func (v Value) String() string {
	if v.Over {
		return "OL"
	}
	digits := 0
	if v.Step > 0 && v.Number != 0 {
		digits = max(1, int(math.Floor(math.Log10(math.Abs(v.Number))+1e-9))-int(math.Floor(math.Log10(v.Step)+1e-9))+1)
	}
	text := Format(v.Number, v.Unit, min(digits, shortDigits))
	switch v.Sense {
	case AtLeast:
		return "> " + text
	case AtMost:
		return "< " + text
	}
	return text
}

func join(number, prefix string, unit Unit) string {
	if prefix == "" && unit == One {
		return number
	}
	return number + " " + prefix + unit.Symbol()
}

func shift(x float64, e int) float64 {
	if e < 0 {
		return x / math.Pow10(-e)
	}
	return x * math.Pow10(e)
}

// choosePrefix takes the largest prefix that leaves one digit or more before the decimal sign, after rounding.
func choosePrefix(x float64, unit Unit, digits int) siPrefix {
	list := allPrefixes
	switch unit {
	case Farad:
		list = faradPrefixes
	case Second, Metre, Coulomb:
		list = smallPrefixes
	}
	if x == 0 {
		return siPrefix{}
	}
	if digits <= 0 {
		digits = shortDigits
	}
	x = math.Abs(rounded(x, digits))
	for _, p := range list {
		if shift(x, -p.exponent) >= 1-1e-14 {
			return p
		}
	}
	return list[len(list)-1]
}

func rounded(x float64, digits int) float64 {
	r, _ := strconv.ParseFloat(strconv.FormatFloat(x, 'e', digits-1, 64), 64)
	return r
}

// number prints without exponent and without a negative zero.
func number(x float64, digits int) string {
	if x == 0 {
		return "0"
	}
	shortest := digits <= 0
	if shortest {
		digits = shortDigits
	}
	x = rounded(x, digits)
	if shortest {
		return strconv.FormatFloat(x, 'f', -1, 64)
	}
	decimals := digits - 1 - int(math.Floor(math.Log10(math.Abs(x))+1e-12))
	return strconv.FormatFloat(x, 'f', max(decimals, 0), 64)
}
