package marking

import (
	"math"
	"strconv"
	"strings"

	"goodbin/screening/quantity"
)

// scaled is figures·10^e, as exact as the decimal text.
func scaled(figures float64, e int) float64 {
	if e < 0 {
		return figures / math.Pow10(-e)
	}
	return figures * math.Pow10(e)
}

// tidy rounds what arithmetic left in the last places, so that 80 % of 100 nF is 80 nF.
func tidy(x float64) float64 { return rounded(x, 12) }

// short prints a value with what the print of a part can give: no more than six figures.
func short(x float64, unit quantity.Unit) string { return quantity.Short(rounded(x, 6), unit) }

// rounded is x with this many significant figures.
func rounded(x float64, figures int) float64 {
	if x == 0 || math.IsNaN(x) || math.IsInf(x, 0) {
		return x
	}
	var buf [32]byte
	y, err := strconv.ParseFloat(string(strconv.AppendFloat(buf[:0], x, 'e', figures-1, 64)), 64)
	if err != nil {
		return x
	}
	return y
}

// percentText prints a ratio as a number of percent without its sign: 0.2 is "20".
func percentText(x float64) string {
	var buf [32]byte
	return string(strconv.AppendFloat(buf[:0], tidy(math.Abs(100*x)), 'g', -1, 64))
}

// toleranceText prints bounds as ratios as a person would: "±5 %", "−20/+80 %".
func toleranceText(low, high float64) string {
	if low == -high {
		return "±" + percentText(high) + " %"
	}
	return "−" + percentText(low) + "/+" + percentText(high) + " %"
}

// toleranceWord is toleranceText as a word of the command line: "5%", "+80-20%".
func toleranceWord(low, high float64) string {
	if low == -high {
		return percentText(high) + "%"
	}
	return "+" + percentText(high) + "-" + percentText(low) + "%"
}

// valueWord prints a value as a word of the command line: "4k7", "470nF", "100V".
func valueWord(x float64, unit quantity.Unit) string {
	number, prefixed, found := strings.Cut(short(x, unit), " ")
	if !found {
		return number
	}
	prefix := strings.TrimSuffix(prefixed, unit.Symbol())
	if unit != quantity.Ohm {
		if prefix == "µ" {
			prefix = "u"
		}
		return number + prefix + unit.ASCII()
	}
	switch {
	case prefix == "m" && x >= 0.001:
		if decimals := strconv.FormatFloat(rounded(x, 6), 'f', -1, 64)[len("0."):]; len(decimals) <= 3 {
			return "R" + decimals
		}
		return number + "mohm"
	case prefix == "":
		prefix = "R"
	case !strings.Contains("kMG", prefix):
		return number + prefix + "ohm"
	}
	whole, decimals, _ := strings.Cut(number, ".")
	if len(whole)+len(decimals) > 3 { // no letter-and-digit value has more than three figures
		return number + strings.TrimSuffix(prefix, "R") + "ohm"
	}
	return whole + prefix + decimals
}
