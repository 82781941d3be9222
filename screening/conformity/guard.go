package conformity

import "math"

// Recipe is a published way to choose an acceptance limit from the test uncertainty ratio alone: the acceptance limit is the factor times
// the tolerance limit, both counted from the nominal value.
type Recipe struct {
	Name    string
	Formula string
	Source  string // the texts that state the formula
	Status  string
	Factor  func(ratio float64) float64 // from 0 (nothing is accepted) to 1 (no guard band), for a ratio above 0
}

// Recipes lists the guard-factor recipes. Their formulas were read in the tests of an open-source uncertainty calculator, which attributes
// them as stated; the documents themselves were not seen.
func Recipes() []Recipe {
	const readIn = "attributed so by an uncertainty calculator's tests"
	return []Recipe{
		{"root-sum-square", "√(1 − 1/TUR²)", "handbook of ANSI/NCSL Z540.3, method 5; " + readIn, "second-hand", rootSumSquare},
		{"uncertainty", "1 − 1/TUR (w = U)", "ANSI/NCSL Z540.3 handbook, 95 % test uncertainty; " + readIn, "second-hand", func(r float64) float64 {
			return within(1 - 1/r)
		}},
		{"rp-10", "1.25 − 1/TUR", "NCSL RP-10; " + readIn, "second-hand", func(r float64) float64 { return within(1.25 - 1/r) }},
		{"managed-risk", "1 − M/TUR, M = 1.04 − exp(0.38·ln TUR − 0.54)", "Dobbert: false acceptance of at most 2 %; " + readIn, "second-hand", managedRisk},
	}
}

func rootSumSquare(ratio float64) float64 {
	if ratio < 1 {
		return 0
	}
	return math.Sqrt(1 - 1/(ratio*ratio))
}

// managedRisk needs no guard band from a ratio of about 4.6 on, where its M reaches zero.
func managedRisk(ratio float64) float64 {
	m := 1.04 - math.Exp(0.38*math.Log(ratio)-0.54)
	return within(1 - m/ratio)
}

func within(factor float64) float64 { return math.Min(1, math.Max(0, factor)) }
