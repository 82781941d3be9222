// Package series knows the preferred numbers of IEC 60063: E3, E6, E12, E24, E48, E96 and E192. A series is named by its count of values
// in a decade.
package series

import (
	"math"
	"sync"
)

// All lists the series, the coarsest first.
var All = [...]int{3, 6, 12, 24, 48, 96, 192}

// e24 is the only preferred series that departs from rounding (in eight places): IEC 60063.
var e24 = [24]float64{
	1.0, 1.1, 1.2, 1.3, 1.5, 1.6, 1.8, 2.0, 2.2, 2.4, 2.7, 3.0, 3.3, 3.6, 3.9, 4.3, 4.7, 5.1, 5.6, 6.2, 6.8, 7.5, 8.2, 9.1,
}

// Value returns value i of series n within the decade 1 to 10 (IEC 60063): every so many values of E24, or 10^(i/n) rounded to two
// decimals, with the one exception that E192 has 9.20 where the rule gives 9.19. It returns NaN where there is no such value.
func Value(n, i int) float64 {
	if i < 0 || i >= n || position(n) < 0 {
		return math.NaN()
	}
	if n <= len(e24) {
		return e24[i*len(e24)/n]
	}
	if n == 192 && i == 185 {
		return 9.20
	}
	return math.Round(100*math.Pow(10, float64(i)/float64(n))) / 100
}

func position(n int) int {
	for p, s := range All {
		if s == n {
			return p
		}
	}
	return -1
}

// members holds, for every three-digit mantissa from 100 to 999, the series that have it: bit p for All[p].
var members = sync.OnceValue(func() *[900]uint8 {
	var m [900]uint8
	for p, n := range All {
		for i := range n {
			m[int(math.Round(100*Value(n, i)))-100] |= 1 << p
		}
	}
	return &m
})

// mantissa returns the three figures of x, from 100 to 999, and its decade; ok is false where x has more than three figures or is not a
// finite number above zero.
func mantissa(x float64) (m, decade int, ok bool) {
	if !(x > 0) || math.IsInf(x, 0) {
		return 0, 0, false
	}
	decade = int(math.Floor(math.Log10(x)))
	exact := x / math.Pow10(decade) * 100
	rounded := math.Round(exact)
	if math.Abs(exact/rounded-1) > 1e-6 {
		return 0, decade, false
	}
	m = int(rounded)
	switch {
	case m >= 1000:
		m, decade = m/10, decade+1
	case m < 100:
		m, decade = m*10, decade-1
	}
	return m, decade, m >= 100 && m <= 999
}

// Contains reports whether x, in any decade, is a value of series n.
func Contains(n int, x float64) bool {
	p := position(n)
	m, _, ok := mantissa(x)
	return ok && p >= 0 && members()[m-100]&(1<<p) != 0
}

// Coarsest returns the coarsest series that has x, in any decade: 3, 6, 12, 24, 48, 96 or 192; 0 where none has it.
func Coarsest(x float64) int {
	m, _, ok := mantissa(x)
	if !ok {
		return 0
	}
	has := members()[m-100]
	for p, n := range All {
		if has&(1<<p) != 0 {
			return n
		}
	}
	return 0
}

// Neighbours returns the values of series n next below and next above x; a value of the series is not its own neighbour. They are NaN
// where x is not a finite number above zero or there is no such series.
func Neighbours(n int, x float64) (below, above float64) {
	if !(x > 0) || math.IsInf(x, 0) || position(n) < 0 {
		return math.NaN(), math.NaN()
	}
	decade := int(math.Floor(math.Log10(x)))
	below, above = math.NaN(), math.NaN()
	for d := decade - 1; d <= decade+1; d++ {
		for i := range n {
			v := inDecade(Value(n, i), d)
			switch {
			case math.Abs(v/x-1) < 1e-6:
			case v < x:
				below = v
			case math.IsNaN(above):
				above = v
			}
		}
	}
	return below, above
}

// inDecade is v·10^d for a v of two decimals, as exact as its decimal text.
func inDecade(v float64, d int) float64 {
	figures := math.Round(100 * v)
	if d -= 2; d < 0 {
		return figures / math.Pow10(-d)
	}
	return figures * math.Pow10(d)
}
