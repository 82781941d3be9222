package lot

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// allSiRstv is the 25 readings of SiRstv in one row.
func allSiRstv() []float64 {
	var out []float64
	for _, instrument := range siRstv {
		out = append(out, instrument...)
	}
	return out
}

// notHeld are the rows of testdata/stats-check.csv whose estimators this package has no use for: Qn, Sn and the tau scale.
var notHeld = map[string]bool{"R06b": true, "R06e": true, "R08e": true}

// checks evaluates the quantity of a row by the beginning of its id.
var checks = map[string]func(t *testing.T, row map[string]string) float64{
	"D02":  func(t *testing.T, row map[string]string) float64 { return GrubbsCritical(idNumber(t, row), 0.05) },
	"D02b": func(t *testing.T, row map[string]string) float64 { return GrubbsCritical(idNumber(t, row), 0.05/2) },
	"D04":  func(*testing.T, map[string]string) float64 { return madToSigma },
	"D05b": func(t *testing.T, _ map[string]string) float64 { return 97.07 - twoSided(t, 43, 0.90, 0.99)*0.0268 },
	"D05c": func(t *testing.T, _ map[string]string) float64 { return 97.07 + twoSided(t, 43, 0.90, 0.99)*0.0268 },
	"D06b": func(t *testing.T, _ map[string]string) float64 { return oneSided(t, 43, 0.90, 0.99) },
	"D06c": func(*testing.T, map[string]string) float64 {
		return 97.07 + OneSidedApproximateK(43, 0.90, 0.99)*0.0268
	},
	"D07":  func(t *testing.T, _ map[string]string) float64 { return oneSided(t, 50, 0.95, 0.95) },
	"D07b": func(t *testing.T, _ map[string]string) float64 { return 2.3 + 0.2*oneSided(t, 50, 0.95, 0.95) },
	"D08": func(t *testing.T, row map[string]string) float64 {
		n, p := idPair(t, row)
		return oneSided(t, n, p, 0.95)
	},
	"D08b": func(t *testing.T, row map[string]string) float64 {
		n, p := idPair(t, row)
		return twoSided(t, n, p, 0.95)
	},
	"D09":  wilks,
	"D09b": func(t *testing.T, _ map[string]string) float64 { return extremes(t, 0.95, 0.95, true) },
	"R01b": func(t *testing.T, _ map[string]string) float64 { return of(t, michelso...).Summary().SD },
	"R02c": func(t *testing.T, _ map[string]string) float64 { return of(t, numAcc1...).LagOne() },
	"R03":  func(t *testing.T, _ map[string]string) float64 { return of(t, numAcc3...).Summary().Mean },
	"R04":  func(t *testing.T, _ map[string]string) float64 { return of(t, michelso...).Summary().Median },
	"R05b": func(t *testing.T, row map[string]string) float64 {
		return of(t, michelso...).Quantile(0.75, idRule(t, row))
	},
	"R05": func(t *testing.T, row map[string]string) float64 {
		return of(t, michelso...).Quantile(0.25, idRule(t, row))
	},
	"R05c": func(t *testing.T, row map[string]string) float64 {
		return of(t, michelso...).PartAverage(NoLimits(), idRule(t, row)).Sigma
	},
	"R05e": func(t *testing.T, row map[string]string) float64 {
		return of(t, michelso...).PartAverage(NoLimits(), idRule(t, row)).High
	},
	"R06":  func(t *testing.T, _ map[string]string) float64 { return of(t, michelso...).HuberMean() },
	"R07b": func(t *testing.T, _ map[string]string) float64 { _, s := of(t, michelso...).AlgorithmA(); return s },
	"R10": func(t *testing.T, row map[string]string) float64 {
		return of(t, siRstv[idNumber(t, row)-1]...).Summary().Mean
	},
	"R10b": func(t *testing.T, row map[string]string) float64 {
		return of(t, siRstv[idNumber(t, row)-1]...).Summary().MeanUncertainty()
	},
	"R11":  func(t *testing.T, _ map[string]string) float64 { return of(t, allSiRstv()...).Summary().Mean },
	"R11b": func(t *testing.T, _ map[string]string) float64 { return of(t, allSiRstv()...).Summary().SD },
	"R11c": func(t *testing.T, _ map[string]string) float64 { g, _ := of(t, allSiRstv()...).Grubbs(); return g },
	"R16":  dixonRow,
}

func idNumber(t *testing.T, row map[string]string) int {
	t.Helper()
	_, n, _ := strings.Cut(row["id"], "-")
	return int(number(t, n))
}

func idRule(t *testing.T, row map[string]string) QuantileRule {
	t.Helper()
	return QuantileRule(idNumber(t, row))
}

func idPair(t *testing.T, row map[string]string) (int, float64) {
	t.Helper()
	parts := strings.Split(row["id"], "-")
	return int(number(t, parts[1])), number(t, parts[2])
}

func oneSided(t *testing.T, n int, share, confidence float64) float64 {
	t.Helper()
	k, err := OneSidedK(n, share, confidence)
	if err != nil {
		t.Fatal(err)
	}
	return k
}

func twoSided(t *testing.T, n int, share, confidence float64) float64 {
	t.Helper()
	k, err := TwoSidedK(n, share, confidence)
	if err != nil {
		t.Fatal(err)
	}
	return k
}

func extremes(t *testing.T, share, confidence float64, both bool) float64 {
	t.Helper()
	n, err := SampleForExtremes(share, confidence, both)
	if err != nil {
		t.Fatal(err)
	}
	return float64(n)
}

func wilks(t *testing.T, row map[string]string) float64 {
	parts := strings.Split(row["id"], "-")
	return extremes(t, number(t, parts[1]), number(t, parts[2]), false)
}

func dixonRow(t *testing.T, row map[string]string) float64 {
	n, confidence := idPair(t, row)
	name, _, _ := dixonRatio(n)
	if !strings.Contains(row["inputs"], name) {
		t.Errorf("%d parts take %s, not as %s", n, name, row["inputs"])
	}
	c, ok := DixonCritical(name, n, math.Round((1-confidence)*1000)/1000)
	if !ok {
		t.Errorf("%s for %d parts at %g is not tabled", name, n, 1-confidence)
	}
	return c
}

// TestChecksAgree holds every row of testdata/stats-check.csv on lots against its value, to 10⁻⁹ of it.
func TestChecksAgree(t *testing.T) {
	used, skipped := map[string]bool{}, 0
	for _, row := range table(t, "stats-check.csv") {
		if notHeld[row["id"]] {
			skipped++
			continue
		}
		t.Run(row["id"], func(t *testing.T) {
			prefix, _, _ := strings.Cut(row["id"], "-")
			check := checks[prefix]
			if check == nil {
				t.Fatalf("nothing computes %s", row["id"])
			}
			used[prefix] = true
			tolerance := 1e-9
			switch prefix {
			case "D04":
				tolerance = 2e-6 // the row holds the rounded 1.4826
			case "D02", "D02b":
				tolerance = 1e-8 // gonum's inverse of the incomplete beta function stops there
			}
			got, want := check(t, row), number(t, row["value"])
			if !(math.Abs(got-want) <= tolerance*math.Abs(want)) {
				t.Errorf("%s of %s: %.15g, want %.15g (%s, %s)", row["quantity"], row["inputs"], got, want, row["source"], row["status"])
			}
		})
	}
	if len(used) != len(checks) || skipped != len(notHeld) {
		t.Errorf("%d of %d checks have a row; %d of %d rows are left out", len(used), len(checks), skipped, len(notHeld))
	}
}

func TestCertifiedData(t *testing.T) {
	for _, tt := range []struct {
		name         string
		values       []float64
		mean, sd     float64
		meanWithin   float64 // relative
		sdWithin     float64
		lag          float64
		lagCertified bool
	}{
		{"Michelso", michelso, 299.8524, .0790105478190518, 1e-15, 1e-12, .535199668621283, true},
		{"NumAcc1", numAcc1, 10000002, 1, 0, 0, -.5, true},
		{"NumAcc2", numAcc2, 1.2, .1, 2e-16, 1e-14, 0, false},
		{"NumAcc3", numAcc3, 1000000.2, .1, 1e-15, 1e-9, 0, false},
		{"NumAcc4", numAcc4, 10000000.2, .1, 1e-15, 1e-7, 0, false},
	} {
		r := of(t, tt.values...)
		s := r.Summary()
		near(t, tt.name+" mean (NIST StRD, published)", s.Mean, tt.mean, tt.meanWithin*tt.mean)
		near(t, tt.name+" sd (NIST StRD, published)", s.SD, tt.sd, tt.sdWithin*tt.sd)
		if tt.lagCertified {
			near(t, tt.name+" lag 1 (NIST StRD, published)", r.LagOne(), tt.lag, 1e-10)
		}
	}
}

// TestSiRstvVariances holds the certified analysis of variance (NIST StRD, published) with the summaries of the five instruments.
func TestSiRstvVariances(t *testing.T) {
	within, between := 0.0, 0.0
	all := of(t, allSiRstv()...).Summary()
	for i, readings := range siRstv {
		s := of(t, readings...).Summary()
		within += s.SD * s.SD / 5
		between += 5 * (s.Mean - all.Mean) * (s.Mean - all.Mean) / 4
		want := [][2]float64{{196.24308, .03912}, {196.24430, .06170}, {196.16702, .04191}, {196.14814, .04661}, {196.14324, .03956}}[i]
		near(t, fmt.Sprintf("instrument %d mean (derived)", i+1), s.Mean, want[0], 1e-9)
		near(t, fmt.Sprintf("instrument %d u (derived)", i+1), s.MeanUncertainty(), want[1], 6e-6)
	}
	near(t, "between", between, .0127865654, 1e-9)
	near(t, "within", within, .010831828, 1e-11)
	near(t, "F", between/within, 1.18046237440255, 1e-9)
	near(t, "residual sd", math.Sqrt(within), .104076068334656, 1e-12)
}

func TestRobustFigures(t *testing.T) {
	r := of(t, michelso...)
	s := r.Summary()
	near(t, "scaled MAD of Michelso (derived)", s.ScaledMAD, .066717, 5e-7)
	mean, sd := r.AlgorithmA()
	near(t, "Algorithm A mean (derived)", mean, 299.852681, 5e-7)
	near(t, "Algorithm A sd (derived)", sd, .0786285, 5e-8)
	near(t, "Huber (derived)", r.HuberMean(), 299.852155, 5e-7)
	for rule, want := range map[QuantileRule]float64{Type6: .0703704, Type7: .0629630, Type8: .0679012} {
		near(t, "robust sigma by "+rule.String()+" (derived)", r.PartAverage(NoLimits(), rule).Sigma, want, 5e-8)
	}
	// The rule alone moves the limits by 12 %.
	near(t, "type 6 over type 7", r.PartAverage(NoLimits(), Type6).Sigma/r.PartAverage(NoLimits(), Type7).Sigma, 1.12, .005)
	if s.RobustSigma != r.PartAverage(NoLimits(), LotQuartiles).Sigma {
		t.Error("the summary and part average testing use two rules")
	}
	near(t, "1/Φ⁻¹(.75)", madToSigma, 1/distuv.UnitNormal.Quantile(.75), 1e-14)
	near(t, "interquartile range of a normal distribution", 2*distuv.UnitNormal.Quantile(.75), 1.34898, 5e-6)
}

func TestTolerancePublished(t *testing.T) {
	near(t, "n 43 90/99 two-sided (NIST 7.2.6.3, published)", twoSided(t, 43, .90, .99), 2.2173159, 5e-8)
	near(t, "n 43 90/99 one-sided approximately (NIST 7.2.6.3, published)", OneSidedApproximateK(43, .90, .99), 1.8751896, 5e-8)
	near(t, "n 43 90/99 one-sided (NIST: 1.8740, from memory)", oneSided(t, 43, .90, .99), 1.87395, 5e-6)
	near(t, "n 50 95/95 (Owen, published)", oneSided(t, 50, .95, .95), 2.064993399768, 5e-8)
	for i, n := range []int{5, 10, 20} {
		near(t, "95/95 one-sided (derived)", oneSided(t, n, .95, .95), []float64{4.202681, 2.910963, 2.396002}[i], 5e-7)
	}
	for i, n := range []int{5, 10, 20, 50} {
		near(t, "95/95 two-sided (derived)", twoSided(t, n, .95, .95), []float64{5.093526, 3.381913, 2.752285, 2.378769}[i], 5e-7)
	}
	for _, tt := range []struct {
		share, confidence float64
		both              bool
		want              float64
	}{{.95, .95, false, 59}, {.90, .95, false, 29}, {.99, .95, false, 299}, {.90, .90, false, 22}, {.95, .95, true, 93}} {
		if got := extremes(t, tt.share, tt.confidence, tt.both); got != tt.want {
			t.Errorf("%g/%g: %g, want %g (Wilks, from memory)", tt.share, tt.confidence, got, tt.want)
		}
	}
	// Where gonum's series ends the approximation takes over without a jump.
	series, approximate := oneSided(t, 225, .99, .95), OneSidedApproximateK(225, .99, .95)
	near(t, "99/95 at n 225 by both", approximate, series, 2e-3*series)
	limits, err := of(t, 97.05, 97.06, 97.07, 97.08, 97.09).ToleranceBand(.95, .95)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "band of five", limits.High-97.07, 5.093526*0.0158113883, 1e-7)
}
