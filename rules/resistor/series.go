package resistor

import "math"

// e24 is the only preferred series that departs from rounding (in eight places): IEC 60063.
var e24 = [24]float64{
	1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1,
}

// seriesValue returns value i of series E3, E6, E12, E24, E48, E96 or E192 within the decade 1 to 10 (IEC 60063): every so many values of
// E24, or 10^(i/n) rounded to two decimals, with the one exception that E192 has 9.20 where the rule gives 9.19.
func seriesValue(n, i int) float64 {
	if n <= len(e24) {
		return e24[i*len(e24)/n]
	}
	if n == 192 && i == 185 {
		return 9.20
	}
	return math.Round(100*math.Pow(10, float64(i)/float64(n))) / 100
}

// inSeries reports whether x, in any decade, is a value of the series.
func inSeries(n int, x float64) bool {
	mantissa := x / math.Pow10(int(math.Floor(math.Log10(x))))
	near := int(math.Round(math.Log10(mantissa) * float64(n)))
	for i := near - 1; i <= near+1; i++ {
		v := seriesValue(n, ((i%n)+n)%n)
		if math.Abs(mantissa/v-1) < 1e-6 || math.Abs(mantissa/v-10) < 1e-5 {
			return true
		}
	}
	return false
}

// preferred reports whether a resistor of this value and tolerance is likely: E24 up to 2 %, or else E192, of which E48 and E96 are parts.
// Parts of 1 % are sold in values of E24 too.
func preferred(x, tolerance float64) bool {
	return inSeries(24, x) || tolerance <= 0.02 && inSeries(192, x)
}
