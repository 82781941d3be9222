package uncertainty

import "math"

// Divisor99 turns a half-width that a maker claims with 99 % confidence of a normal distribution into a standard uncertainty: 2.58, as
// JCGM 100, 4.3.4 has it.
const Divisor99 = 2.58

// Rectangular returns the standard uncertainty of a quantity that lies anywhere within ±a alike: a/√3 (JCGM 100, 4.3.7).
func Rectangular(a float64) float64 { return a / math.Sqrt(3) }

// Triangular is that of one whose values near the middle are likelier, falling to nothing at ±a: a/√6 (JCGM 100, 4.3.9).
func Triangular(a float64) float64 { return a / math.Sqrt(6) }

// UShaped is that of one that swings between -a and a as a sine does: a/√2 (JCGM 101, 6.4.6).
func UShaped(a float64) float64 { return a / math.Sqrt2 }

// Resolution is that of a display whose last digit is worth step: step/√12 = 0.29·step (JCGM 100, F.2.2.1).
func Resolution(step float64) float64 { return step / math.Sqrt(12) }
