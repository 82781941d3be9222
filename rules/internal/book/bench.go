package book

import (
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Practice is where a recipe or a caution comes from that every bench knows.
var Practice = screening.Source{Document: "bench practice", Status: screening.CommonPractice}

// TouchVoltage is the DC voltage from which a supply can hurt, V.
const TouchVoltage = 60.0

// TouchSource is where it comes from.
var TouchSource = screening.Source{Document: "60 V DC as the touch limit of equipment safety standards", Status: screening.SecondHand}

// About prints a computed value in two figures, without an empty one.
func About(x float64, unit quantity.Unit) string {
	if x <= 0 {
		return quantity.Format(x, unit, 0)
	}
	figures := 2
	if math.Mod(math.Round(x/math.Pow10(int(math.Floor(math.Log10(x)))-1)), 10) == 0 {
		figures = 1
	}
	return quantity.Format(x, unit, figures)
}

// Honest rounds x to the decimal place of its standard uncertainty's first digit; to so many digits where there is none, and never to more.
func Honest(x, u float64, digits int) float64 {
	if x == 0 {
		return 0
	}
	place := math.Floor(math.Log10(math.Abs(x))) + 1 - float64(digits)
	if u > 0 {
		place = math.Max(place, math.Floor(math.Log10(u)))
	}
	// Dividing by a whole power of ten keeps 0.47 exact where multiplying by its inverse does not.
	if place < 0 {
		scale := math.Pow10(int(-place))
		return math.Round(x*scale) / scale
	}
	scale := math.Pow10(int(place))
	return math.Round(x/scale) * scale
}
