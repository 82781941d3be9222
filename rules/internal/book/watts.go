package book

import (
	"strconv"

	"goodbin/screening/quantity"
)

// Watts prints a power as the trade does: below a watt as a decimal of it, "0.25 W" and never "250 mW"; below 10 mW with its prefix. digits is
// the number of significant digits; 0 prints as many as there are.
func Watts(x float64, digits int) string {
	if x < 0.01 || x >= 1 {
		return quantity.Format(x, quantity.Watt, digits)
	}
	if digits <= 0 {
		digits = 12
	}
	rounded, _ := strconv.ParseFloat(strconv.FormatFloat(x, 'g', digits, 64), 64)
	return strconv.FormatFloat(rounded, 'f', -1, 64) + " W"
}
