package lot

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize/convex/lp"
)

// dipByProgram computes the dip from its definition: for each place of the hump a linear program finds the curve, convex before and concave
// after it, that misses the points (x_i, i) least. It fails where gonum's simplex method does, on nearly equal readings.
func dipByProgram(x []float64) (float64, error) {
	n := len(x)
	best := math.Inf(1)
	for hump := range n - 1 { // the steepest piece joins hump and hump+1
		var g [][]float64
		var h []float64
		add := func(bound float64, set func(row []float64)) {
			row := make([]float64, n+1)
			set(row)
			g, h = append(g, row), append(h, bound)
		}
		for i := range n {
			add(float64(i), func(row []float64) { row[i], row[n] = 1, -1 })
			add(-float64(i), func(row []float64) { row[i], row[n] = -1, -1 })
		}
		for i := 1; i < n-1; i++ {
			sign := 1.0 // convex: slope before ≤ slope after
			if i > hump {
				sign = -1
			}
			before, after := x[i+1]-x[i], x[i]-x[i-1] // the slopes times both gaps
			before, after = before/(before+after), after/(before+after)
			add(0, func(row []float64) {
				row[i-1], row[i], row[i+1] = -sign*before, sign*(before+after), -sign*after
			})
		}
		c := make([]float64, n+1)
		c[n] = 1
		G := mat.NewDense(len(g), n+1, nil)
		for i, row := range g {
			G.SetRow(i, row)
		}
		cNew, aNew, bNew := lp.Convert(c, G, h, nil, nil)
		e, _, err := lp.Simplex(cNew, aNew, bNew, 1e-10, nil)
		if err != nil {
			return 0, err
		}
		best = math.Min(best, e)
	}
	return (best + 0.5) / float64(n), nil
}

func TestDipIsTheDistanceToTheNearestSingleHump(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 5))
	compared := 0
	for round := range 300 {
		x := make([]float64, 4+r.IntN(9))
		for i := range x {
			x[i] = r.Float64()
			if round%3 == 0 && i%2 == 0 {
				x[i] += 2
			}
			if round%5 == 0 {
				x[i] = x[i] * x[i] * x[i]
			}
		}
		slices.Sort(x)
		want, err := dipByProgram(x)
		if err != nil {
			continue
		}
		compared++
		if got := dip(x); math.Abs(got-want) > 1e-7 {
			t.Errorf("round %d, %d readings: dip %.9f, want %.9f of %v", round, len(x), got, want, x)
		}
	}
	if compared < 270 {
		t.Errorf("only %d of 300 could be computed from the definition", compared)
	}
}
