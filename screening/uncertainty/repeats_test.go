package uncertainty_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"goodbin/screening/uncertainty"
)

// Few repeats: the rule of the house for 2 and 3, JCGM 101, 6.4.9 from 4 on.
func TestFewRepeats(t *testing.T) {
	for _, tt := range []struct {
		name     string
		n        int
		s, prior float64
		want     uncertainty.Scatter
	}{
		{"one reading has no scatter", 1, 0, 5, uncertainty.Scatter{Factor: 1, Freedom: inf}},
		{"two equal readings are not believed to be without", 2, 0, 0.2, uncertainty.Scatter{U: 0.2 / math.Sqrt2, Factor: 1, Freedom: inf, Prior: true}},
		{"three that scatter more than expected count as they are", 3, 0.3, 0.2, uncertainty.Scatter{U: 0.3 / math.Sqrt(3), Factor: 1, Freedom: 2}},
		{"four: √3", 4, 0.2, 9, uncertainty.Scatter{U: math.Sqrt(3) * 0.1, Factor: math.Sqrt(3), Freedom: 3}},
		{"ten: √(9/7)", 10, 1, 9, uncertainty.Scatter{U: math.Sqrt(9.0/7) / math.Sqrt(10), Factor: math.Sqrt(9.0 / 7), Freedom: 9}},
	} {
		got := uncertainty.OfRepeats(tt.n, tt.s, tt.prior)
		if math.Abs(got.U-tt.want.U) > 1e-12 || math.Abs(got.Factor-tt.want.Factor) > 1e-12 || got.Freedom != tt.want.Freedom || got.Prior != tt.want.Prior {
			t.Errorf("%s: %+v, want %+v", tt.name, got, tt.want)
		}
	}
}

func TestWhatASeriesDoes(t *testing.T) {
	for _, tt := range []struct {
		name      string
		series    []float64
		step      float64
		halfWidth float64
		want      uncertainty.Behaviour
	}{
		{"two readings show nothing", []float64{1, 2}, 0.1, 0.1, uncertainty.Steady},
		{"a last digit that flickers", []float64{10.1, 10.2, 10.1, 10.2, 10.1}, 0.1, 0.3, uncertainty.Steady},
		{"three digits that creep by one are too few to tell", []float64{10.1, 10.2, 10.3}, 0.1, 0.3, uncertainty.Steady},
		{"leakage that still falls", []float64{52, 47, 43.5, 40.8, 38.6}, 0.1, 3, uncertainty.Drifting},
		{"a warming part", []float64{180, 182, 184, 186, 188}, 1, 18, uncertainty.Drifting},
		{"a bad contact", []float64{1.2, 3.4, 1.1, 2.9, 1.3, 3.6}, 0.1, 0.3, uncertainty.Restless},
		{"scatter that the meter explains", []float64{1.2, 1.4, 1.1, 1.3, 1.2, 1.4}, 0.1, 0.3, uncertainty.Steady},
		{"it settled at its end", []float64{1.2, 3.4, 1.1, 2.1, 2.0, 2.1}, 0.1, 0.3, uncertainty.Steady},
		{"no digit known and no scatter at all", []float64{5, 5, 5, 5}, 0, 0, uncertainty.Steady},
	} {
		if got, slope := uncertainty.BehaviourOf(tt.series, tt.step, tt.halfWidth); got != tt.want {
			t.Errorf("%s: %s by %g a reading, want %s", tt.name, got, slope, tt.want)
		}
	}
}

func TestNoiseIsSeldomCalledDrift(t *testing.T) {
	drifting, series := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		var xs []float64
		for range rapid.IntRange(4, 12).Draw(t, "n") {
			var x float64
			for range 6 { // near enough to normal
				x += rapid.Float64Range(-1, 1).Draw(t, "x")
			}
			xs = append(xs, x)
		}
		series++
		if b, _ := uncertainty.BehaviourOf(xs, 0.01, 100); b == uncertainty.Drifting {
			drifting++
		}
	})
	if series >= 50 && drifting*5 > series {
		t.Errorf("%d of %d series of noise drift; 5 %% should", drifting, series)
	}
}

// What is combined never lies below its largest part while nothing is negatively correlated, nor above the sum of the parts.
func TestCombinedLiesBetweenItsPartsAndTheirSum(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var b uncertainty.Budget
		var sum, largest float64
		n := rapid.IntRange(1, 6).Draw(t, "n")
		for range n {
			c := uncertainty.Contribution{
				U: rapid.Float64Range(1e-6, 10).Draw(t, "u"), Sensitivity: rapid.Float64Range(0.01, 3).Draw(t, "c"), Freedom: rapid.Float64Range(1, 60).Draw(t, "nu"),
			}
			b.Contributions = append(b.Contributions, c)
			sum += c.Part()
			largest = math.Max(largest, c.Part())
		}
		r := rapid.Float64Range(0, 1).Draw(t, "r")
		if n > 1 {
			b.Correlations = []uncertainty.Correlation{{I: 0, J: 1, R: r}, {I: 0, J: 99, R: 1}, {I: 0, J: 0, R: 1}}
		}
		got := b.Combined()
		if got < largest*(1-1e-12) || got > sum*(1+1e-12) {
			t.Fatalf("combined %g of parts to %g, sum %g", got, largest, sum)
		}
		if nu := b.Freedom(); nu < 1-1e-9 {
			t.Fatalf("ν = %g", nu)
		}
		if u, k := b.Expanded(0.95); !(u >= 1.959*got) || !(k > 1.959) {
			t.Fatalf("expanded %g, k %g, combined %g", u, k, got)
		}
	})
}

func TestDegenerateInputsAreNotNumbersAndNoPanics(t *testing.T) {
	if u := (uncertainty.Budget{}).Combined(); u != 0 {
		t.Errorf("nothing combines to %g", u)
	}
	if nu := (uncertainty.Budget{}).Freedom(); !math.IsInf(nu, 1) {
		t.Errorf("nothing has %g degrees of freedom", nu)
	}
	if r := uncertainty.CorrelationOf([]float64{1, 2}, []float64{1}); !math.IsNaN(r) {
		t.Errorf("series of two lengths correlate by %g", r)
	}
	if uncertainty.Behaviour(9).String() == "" || uncertainty.Kind(99).String() == "" {
		t.Error("an unknown word is empty")
	}
}
