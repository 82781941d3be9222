package sampling

import "math"

// Hypergeometric returns the chance of at most c bad parts among n drawn at random, without putting any back, from a lot that holds this
// many bad ones: Σ C(bad,i)·C(lot−bad,n−i)/C(lot,n) for i ≤ c. It is NaN where a number is negative or more than the lot holds.
//
// gonum has no hypergeometric distribution. The first term is a product of at most min(n, bad) ratios and each next one a ratio of the
// last, so that nothing cancels: the result is good to about 10⁻¹² of itself.
func Hypergeometric(lot, bad, n, c int) float64 {
	if bad < 0 || n < 0 || lot < 0 || bad > lot || n > lot {
		return math.NaN()
	}
	least, most := max(0, n-(lot-bad)), min(n, bad)
	switch {
	case c < least:
		return 0
	case c >= most:
		return 1
	}
	// The chance of the fewest bad parts possible: none, or as many as there are more parts drawn than good ones. The latter is the chance
	// that no good part is left among those not drawn.
	logFirst := logNone(lot, bad, n)
	if least > 0 {
		logFirst = logNone(lot, lot-bad, lot-n)
	}
	const large = 1e250 // terms grow by more than a float64 holds when the first one is far in the tail
	sum, term := 1.0, 1.0
	for i := least; i < c; i++ {
		term *= float64(bad-i) * float64(n-i) / (float64(i+1) * float64(lot-bad-n+i+1))
		sum += term
		if sum > large {
			sum /= large
			term /= large
			logFirst += math.Log(large)
		}
	}
	return math.Min(1, math.Exp(logFirst+math.Log(sum)))
}

// logNone returns the logarithm of the chance to draw none of the marked parts: Π (lot−more−j)/(lot−j) for j < fewer, which is the same
// whichever of marked and n is the fewer.
func logNone(lot, marked, n int) float64 {
	fewer, more := min(marked, n), max(marked, n)
	sum := 0.0
	for j := range fewer {
		sum += math.Log1p(-float64(more) / float64(lot-j))
	}
	return sum
}
