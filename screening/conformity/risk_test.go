package conformity_test

import (
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
	"pgregory.net/rapid"

	"goodbin/screening/conformity"
)

func risks(t *testing.T, prior conformity.Prior, u float64, tolerance, accept conformity.Interval) conformity.Risks {
	t.Helper()
	r, err := conformity.GlobalRisks(prior, u, tolerance, accept)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// JCGM 106:2012, 9.5: resistors of 1500 Ω (inputs second-hand; printed 0.90, 0.01 and 0.07 from memory, recomputed), and under simple
// acceptance (computed).
func TestGlobalRisksOfResistors(t *testing.T) {
	made := distuv.Normal{Mu: 1500, Sigma: 0.12}
	tolerance := conformity.Interval{Low: 1499.8, High: 1500.2}
	r := risks(t, made, 0.04, tolerance, conformity.Interval{Low: 1499.82, High: 1500.18})
	within(t, "conforming", r.Conforming, 0.9044192954544461, 1e-9)
	within(t, "RC", r.Consumer, 0.0098783, 5e-8)
	within(t, "RP", r.Producer, 0.0690265104615649, 1e-9)
	within(t, "accepted", r.Accepted, 0.8452710765143215, 1e-9)
	r = risks(t, made, 0.04, tolerance, tolerance)
	within(t, "RC, simple", r.Consumer, 0.0189422, 5e-8)
	within(t, "RP, simple", r.Producer, 0.03720780017813553, 1e-9)
}

// JCGM 106:2012, 9.5.4: bearings, worn 1 µm on average, gamma(4, rate 4), at most 2 µm (second-hand: a calculator's worked example).
func TestGlobalRisksOfBearings(t *testing.T) {
	worn := distuv.Gamma{Alpha: 4, Beta: 4}
	r := risks(t, worn, 0.25, upper(2), upper(2))
	within(t, "not conforming", 1-r.Conforming, 0.04238011199168396, 1e-12)
	within(t, "RC", r.Consumer, 0.00801911, 5e-9)
	w, err := conformity.GuardForConsumer(worn, 0.25, upper(2), 0.001)
	if err != nil {
		t.Fatal(err)
	}
	within(t, "acceptance limit for RC = 0.001", 2-w, 1.6718287715556626, 1e-8)
	within(t, "as printed", 2-w, 1.6718287715440068, 5e-9)
	within(t, "RP at 1.67", risks(t, worn, 0.25, upper(2), upper(1.67)).Producer, 0.07598348102526256, 1e-9)
	if w, err := conformity.GuardForConsumer(worn, 0.25, upper(2), 0.5); err != nil || w != 0 {
		t.Errorf("a risk of one half needs a guard band of %g, %v", w, err)
	}
}

// Deaver's cases (second-hand): limits in standard deviations of the process, which is so many times the meter's; the limit of acceptance is
// the guard factor times the limit. The printed 0.0025 is rounded from 0.00245.
func TestDeaver(t *testing.T) {
	for _, tt := range []struct {
		name                                       string
		limit, ratio, factor                       float64
		consumer, producer, printed, printedWithin float64
	}{
		{"2 σ, 4:1", 2, 4, 1, 0.008006084834450096, 0.01485088, 0.008, 5e-4},
		{"2.5 σ, 4:1", 2.5, 4, 1, 0.0024453487127036417, math.NaN(), 0.0025, 1e-4},
		{"2 σ, 2:1, guarded by 0.91", 2, 2, 0.91, 0.00805161, 0.06610645215903409, 0.008, 5e-4},
	} {
		band := conformity.Interval{Low: -tt.limit, High: tt.limit}
		accept := conformity.Interval{Low: -tt.limit * tt.factor, High: tt.limit * tt.factor}
		r := risks(t, distuv.UnitNormal, 1/tt.ratio, band, accept)
		within(t, tt.name+" RC", r.Consumer, tt.consumer, 5e-9)
		within(t, tt.name+" RC as printed", r.Consumer, tt.printed, tt.printedWithin)
		if !math.IsNaN(tt.producer) {
			within(t, tt.name+" RP", r.Producer, tt.producer, 5e-9)
		}
	}
}

// The draft table of NCSL RP-19 (second-hand; its quadrature differs in the sixth figure): σ of the test a quarter of the process's, percent.
func TestDraftTableByInTolerance(t *testing.T) {
	for _, tt := range [][3]float64{
		{0.6, 4.83860326, 8.26008199},
		{0.7, 3.92234109, 5.72322042},
		{0.8, 2.8558, 3.63227145},
		{0.9, 1.59995312, 1.7988043},
		{0.95, 0.8710, 0.9239},
		{0.99, 0.19991684, 0.20243866},
	} {
		tolerance := 5e-6
		if tt[0] == 0.8 || tt[0] == 0.95 {
			tolerance = 5e-5 // read to fewer digits
		}
		sigma := 1 / distuv.UnitNormal.Quantile((1+tt[0])/2)
		band := conformity.Interval{Low: -1, High: 1}
		r := risks(t, distuv.Normal{Sigma: sigma}, sigma/4, band, band)
		within(t, "unconditional", 100*r.Consumer, tt[1], tolerance)
		within(t, "conditional", 100*r.FalseAccepted(), tt[2], math.Max(tolerance, 5e-5*boolean(tt[0] == 0.8 || tt[0] == 0.95)))
	}
}

func boolean(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

// By share in tolerance and test ratio L/U (computed).
func TestRisksByTestRatio(t *testing.T) {
	for _, tt := range [][4]float64{
		{0.95, 4, 0.008582664808923128, math.NaN()},
		{0.8, 2, 0.03457959496613085, 0.056876517488183904},
		{0.95, 2, 0.01337340828206914, math.NaN()},
		{0.85, 4, 0.017277491116599042, math.NaN()},
	} {
		band := conformity.Interval{Low: -1, High: 1}
		u := 1 / (conformity.Coverage * tt[1])
		within(t, "the ratio", conformity.TestRatio(band, u), tt[1], 1e-12)
		r := risks(t, distuv.Normal{Sigma: 1 / distuv.UnitNormal.Quantile((1+tt[0])/2)}, u, band, band)
		within(t, "false acceptance", r.Consumer, tt[2], 1e-9)
		if !math.IsNaN(tt[3]) {
			within(t, "false rejection", r.Producer, tt[3], 1e-9)
		}
	}
}

// Every item is accepted or not and conforms or not: the four shares add up to one.
func TestSharesAddUp(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		sigma := rapid.Float64Range(0.05, 3).Draw(t, "sigma")
		mean, u := rapid.Float64Range(-2, 2).Draw(t, "mean"), rapid.Float64Range(0.01, 2).Draw(t, "u")
		band := conformity.Interval{Low: -rapid.Float64Range(0.1, 3).Draw(t, "low"), High: rapid.Float64Range(0.1, 3).Draw(t, "high")}
		if rapid.Bool().Draw(t, "open") {
			band.Low = -inf
		}
		accept := band.Guarded(rapid.Float64Range(-0.5, 0.05).Draw(t, "guard"))
		r, err := conformity.GlobalRisks(distuv.Normal{Mu: mean, Sigma: sigma}, u, band, accept)
		if err != nil {
			t.Fatal(err)
		}
		if d := r.Conforming + r.Consumer - r.Producer - r.Accepted; math.Abs(d) > 1e-9 {
			t.Fatalf("%+v: off by %g", r, d)
		}
		wide := math.Hypot(sigma, u)
		want := distuv.UnitNormal.CDF((accept.High-mean)/wide) - distuv.UnitNormal.CDF((accept.Low-mean)/wide)
		if math.Abs(r.Accepted-want) > 1e-9 {
			t.Fatalf("accepted %g, in closed form %g", r.Accepted, want)
		}
	})
}

func TestWhatMakesNoRisk(t *testing.T) {
	band := conformity.Interval{Low: -1, High: 1}
	for name, err := range map[string]error{
		"no prior":         second(conformity.GlobalRisks(nil, 1, band, band)),
		"an exact meter":   second(conformity.GlobalRisks(distuv.UnitNormal, 0, band, band)),
		"u not a number":   second(conformity.GlobalRisks(distuv.UnitNormal, math.NaN(), band, band)),
		"nothing conforms": second(conformity.GlobalRisks(distuv.UnitNormal, 1, conformity.Interval{Low: 1, High: -1}, band)),
		"unreachable risk": second(conformity.GuardForConsumer(distuv.UnitNormal, 1, band, -1)),
	} {
		if !errors.Is(err, conformity.ErrRisk) {
			t.Errorf("%s: %v", name, err)
		}
	}
	if r := risks(t, distuv.UnitNormal, 1, band, band.Guarded(2)); r.Accepted != 0 {
		t.Errorf("an empty acceptance interval accepts %g", r.Accepted)
	}
}

func second[T any](_ T, err error) error { return err }
