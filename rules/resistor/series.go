package resistor

import "goodbin/rules/internal/series"

// preferred reports whether a resistor of this value and tolerance is likely: E24 up to 2 %, or else E192, of which E48 and E96 are parts.
// Parts of 1 % are sold in values of E24 too.
func preferred(x, tolerance float64) bool {
	return series.Contains(24, x) || tolerance <= 0.02 && series.Contains(192, x)
}
