package conformity_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"goodbin/screening/conformity"
)

var inf = math.Inf(1)

func within(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %.10g, want %.10g ± %g", name, got, want, tolerance)
	}
}

func upper(x float64) conformity.Interval { return conformity.Interval{Low: -inf, High: x} }

// JCGM 106:2012, 7: the table exists as published; its values and the examples' are from memory, and all are recomputed to the full figure.
func TestConformanceProbabilities(t *testing.T) {
	for pc, z := range map[float64]float64{0.8: 0.84, 0.9: 1.28, 0.95: 1.64, 0.99: 2.33, 0.999: 3.09} {
		within(t, "table 1, printed", distuv.UnitNormal.Quantile(pc), z, 0.0051)
		within(t, "table 1", conformity.Probability(-distuv.UnitNormal.Quantile(pc), 1, upper(0)), pc, 1e-12)
	}
	for _, tt := range []struct {
		name             string
		x, u, low, high  float64
		printed, want    float64
		printedTolerance float64
	}{
		{"7.3 Zener diode", -5.47, 0.05, -inf, -5.40, 0.92, 0.9192433407662289, 0.005},
		{"7.3 lower limit", 509.7, 8.6, 490, inf, 0.99, 0.9890095473848222, 0.005},
		{"7.4 oil", 13.6, 1.8, 12.5, 16.3, 0.66, 0.662630, 0.005},
		{"7.4 oil, z rounded to 1.5 and −0.6", 0.6, 1, 0, 2.1, 0.66, 0.6589396809810684, 0.005},
		{"−5.60", -5.60, 0.05, -inf, -5.40, 1, 0.9999683287581669, 0.005},
		{"−5.45", -5.45, 0.05, -inf, -5.40, 0.84, 0.8413447460685421, 0.005},
		{"−5.42", -5.42, 0.05, -inf, -5.40, 0.66, 0.6554217416103211, 0.005},
		{"−5.38", -5.38, 0.05, -inf, -5.40, 0.34, 0.34457825838967243, 0.005},
		{"−5.35", -5.35, 0.05, -inf, -5.40, 0.16, 0.15865525393145358, 0.005},
		{"an exact value on the limit conforms", 5, 0, 4, 5, 1, 1, 0},
		{"an exact value beyond it does not", 5.01, 0, 4, 5, 0, 0, 0},
		{"an exact value below it does not", 3.9, 0, 4, 5, 0, 0, 0},
	} {
		got := conformity.Probability(tt.x, tt.u, conformity.Interval{Low: tt.low, High: tt.high})
		within(t, tt.name, got, tt.want, 5e-7)
		within(t, tt.name+", as printed", got, tt.printed, tt.printedTolerance)
	}
	// 7.6 by capability index and place in the tolerance (formula from memory, values computed).
	for _, tt := range [][3]float64{
		{1, 0.9, 0.6552626330201665},
		{1, 1, 0.4999683287581669},
		{2, 0.25, 0.9772498670652331},
		{2, 1, 0.4999999999999994},
		{3, 0, 0.5},
		{3, 0.5, 0.9999999980268246},
		{4, 0, 0.5},
		{4, 0.25, 0.9999683287581669},
		{4, 0.5, 0.9999999999999987},
		{4, 0.9, 0.945200708300442},
	} {
		band := conformity.Interval{Low: 0, High: 1}
		u := 1 / (4 * tt[0])
		within(t, "Cm", conformity.Capability(band, u), tt[0], 1e-12)
		within(t, fmt.Sprintf("Cm %g at %g", tt[0], tt[1]), conformity.Probability(tt[1], u, band), tt[2], 1e-12)
	}
	// N(12, 0.4) between 9 and 11 lies outside with 0.99379 (published in a calculator's tests).
	within(t, "outside", 1-conformity.Probability(12, 0.4, conformity.Interval{Low: 9, High: 11}), 0.9937903346742557, 1e-9)
}

// JCGM 106, 8.3.3: at a limit of 100 km/h, u of 2 % of the reading, who drives 107 km/h is too fast with 0.999 (from memory, recomputed).
func TestGuardedRejectionOfASpeed(t *testing.T) {
	v := 100 / (1 - 3.09*0.02)
	within(t, "v", v, 106.58708164570454, 1e-9)
	_, above := conformity.Outside(v, 0.02*v, upper(100))
	within(t, "probability of being too fast", above, 0.999, 1e-5)
	if got := conformity.Statement(107, upper(100), 7); got != conformity.ConditionalFail {
		t.Errorf("107 km/h with a guard band of 7: %s", got)
	}
}

// ILAC-G8:09/2019, table 1, and ISO 14253-1:2017. Published: 2.5 % for w = U, 50 % for none, 0.825·U for 5 %; the other rows are from memory. Exact
// values are computed.
func TestRiskOnTheAcceptanceLimit(t *testing.T) {
	for _, tt := range []struct{ r, exact, atMost float64 }{
		{3, 9.865876450376981e-10, 1e-6},
		{1.5, 0.0013498980316300933, 0.0016},
		{1, 0.02275013194817921, 0.025},
		{0.83, 0.04845722626672282, 0.05},
		{0.825, 0.0494714680336481, 0.05},
		{0, 0.5, 0.5},
	} {
		within(t, fmt.Sprintf("w = %g·U", tt.r), conformity.RiskAtLimit(tt.r), tt.exact, 1e-13)
		if conformity.RiskAtLimit(tt.r) > tt.atMost {
			t.Errorf("w = %g·U risks more than %g", tt.r, tt.atMost)
		}
		// A reading on the acceptance limit has that risk.
		x := 10 - tt.r*conformity.Coverage*0.1
		within(t, "reading on it", 1-conformity.Probability(x, 0.1, upper(10)), tt.exact, 1e-12)
	}
	within(t, "w = −U: false rejection", 1-conformity.RiskAtLimit(-1), 0.02275013194817921, 1e-12)
	within(t, "guard band for 5 %", conformity.GuardFor(0.05), 1.6448536269514722/2, 1e-10)
}

// ILAC-G8:09/2019, 4.2.3, w = U (published).
func TestTheFourWords(t *testing.T) {
	for x, want := range map[float64]conformity.Word{
		8.9: conformity.Pass, 9: conformity.Pass, 9.1: conformity.ConditionalPass, 10: conformity.ConditionalPass, 10.1: conformity.ConditionalFail,
		11: conformity.ConditionalFail, 11.1: conformity.Fail,
	} {
		if got := conformity.Statement(x, upper(10), 1); got != want {
			t.Errorf("%g against at most 10 with a guard band of 1: %s, want %s", x, got, want)
		}
	}
	// The binary rule.
	if conformity.Statement(10, upper(10), 0) != conformity.Pass || conformity.Statement(10.01, upper(10), 0) != conformity.Fail {
		t.Error("without a guard band there is a condition")
	}
	// A guard band wider than the tolerance leaves nothing to pass.
	if got := conformity.Statement(5, conformity.Interval{Low: 4, High: 6}, 1.5); got != conformity.ConditionalPass {
		t.Errorf("in the middle of what is all guard band: %s", got)
	}
}

// Guard factors: the formulas were read second-hand, the values are computed.
func TestGuardFactors(t *testing.T) {
	want := map[string]map[float64]float64{
		"root-sum-square": {1: 0, 1.5: 0.7453559924999299, 2: 0.8660254037844386, 2.5: 0.916515, 3: 0.9428090415820634, 4: 0.968246},
		"uncertainty":     {1: 0, 1.5: 0.33333333333333337, 2: 0.5, 2.5: 0.6, 3: 0.6666666666666667, 4: 0.75},
		"rp-10":           {1.5: 0.583333, 2: 0.75, 2.5: 0.85, 3: 0.916667, 4: 1, 10: 1},
		"managed-risk":    {1.5: 0.7598817960047097, 2: 0.8591773459999559, 2.5: 0.9141856345435068, 3: 0.9482272419968958, 4: 0.9867196754925653, 10: 1},
	}
	recipes := conformity.Recipes()
	if len(recipes) != len(want) {
		t.Fatalf("%d recipes", len(recipes))
	}
	for _, r := range recipes {
		if r.Source == "" || r.Status == "" || r.Formula == "" {
			t.Errorf("%s has no source, status or formula", r.Name)
		}
		for ratio, factor := range want[r.Name] {
			within(t, fmt.Sprintf("%s at %g:1", r.Name, ratio), r.Factor(ratio), factor, 5.1e-7)
		}
		for _, ratio := range []float64{1e-9, 0.1, 0.5, 1, 1e9} {
			if f := r.Factor(ratio); !(f >= 0 && f <= 1) {
				t.Errorf("%s at %g:1 is %g", r.Name, ratio, f)
			}
		}
	}
}

func TestTestRatios(t *testing.T) {
	within(t, "±4 against U = 1", conformity.TestRatio(conformity.Interval{Low: 96, High: 104}, 0.5), 4, 1e-12)
	within(t, "at most 10 with U = 5", conformity.TestRatio(upper(10), 2.5), 2, 1e-12)
	within(t, "at least 10 with U = 5", conformity.TestRatio(conformity.Interval{Low: 10, High: inf}, 2.5), 2, 1e-12)
	if r := conformity.TestRatio(conformity.Interval{Low: -inf, High: inf}, 1); !math.IsNaN(r) {
		t.Errorf("no limit has a ratio of %g", r)
	}
}
