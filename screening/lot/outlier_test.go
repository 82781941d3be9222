package lot

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
	"pgregory.net/rapid"

	"goodbin/screening/quantity"
)

func TestGrubbsTable(t *testing.T) {
	rows := table(t, "grubbs.csv")
	if len(rows) != 392 {
		t.Fatalf("%d rows, want 392", len(rows))
	}
	for _, row := range rows {
		n, alpha := int(number(t, row["n"])), number(t, row["alpha"])
		near(t, "Grubbs "+row["n"]+" at "+row["alpha"], GrubbsCritical(n, alpha), number(t, row["critical"]), 6e-6)
	}
	// The published table (a scan of Grubbs's, .05 one-sided, n 3 to 20; published).
	for i, want := range []float64{1.15, 1.46, 1.67, 1.82, 1.94, 2.03, 2.11, 2.18, 2.23, 2.29, 2.33, 2.37, 2.41, 2.44, 2.47, 2.50, 2.53, 2.56} {
		near(t, "Grubbs .05", GrubbsCritical(i+3, .05), want, .0062)
	}
	for _, wrong := range []float64{GrubbsCritical(2, .05), GrubbsCritical(5, 0), GrubbsCritical(5, 1)} {
		if !math.IsNaN(wrong) {
			t.Errorf("%g, want NaN", wrong)
		}
	}
}

func TestDixonTable(t *testing.T) {
	for i, want := range []float64{.941, .765, .642, .560, .507, .468, .437, .412} { // r10 .05 (published)
		if got, ok := DixonCritical("r10", i+3, .05); !ok || got != want {
			t.Errorf("r10 at n %d: %g, want %g", i+3, got, want)
		}
	}
	for i, want := range []float64{.988, .889, .780, .698, .637, .590, .555, .527} { // r10 .01 (published)
		if got, ok := DixonCritical("r10", i+3, .01); !ok || got != want {
			t.Errorf("r10 at n %d: %g, want %g", i+3, got, want)
		}
	}
	if len(dixonTable()) != 795 {
		t.Errorf("%d critical values, want 795", len(dixonTable()))
	}
	for n := 3; n <= mostDixon; n++ {
		name, _, _ := dixonRatio(n)
		if _, ok := DixonCritical(name, n, smallAlpha); !ok {
			t.Errorf("%s for %d parts at %g is not tabled", name, n, smallAlpha)
		}
	}
	if _, ok := DixonCritical("r10", 31, .05); ok {
		t.Error("31 parts are tabled")
	}
}

func TestUranium(t *testing.T) {
	r := of(t, uranium...)
	g, high := r.Grubbs()
	near(t, "G (NIST 1.3.5.17, from memory)", g, 2.468765, 5e-7)
	near(t, "critical (NIST 1.3.5.17, from memory)", GrubbsCritical(8, .05), 2.031652, 5e-7)
	if !high {
		t.Error("the low end is the suspect one")
	}
	scores := r.ModifiedZScores()
	near(t, "modified z of 245.57 (derived)", scores[7], 29.9627, 2e-3)
	for i, z := range scores[:7] {
		if math.Abs(z) > ModifiedZ {
			t.Errorf("part %d has %g", i+1, z)
		}
	}
	out := r.Outliers(Limits{190, 250})
	if len(out) != 1 || out[0].Index != 7 || !out[0].Within || out[0].Why == "" {
		t.Errorf("%+v", out)
	}
}

func TestPartAverageOfMichelso(t *testing.T) {
	r := of(t, michelso...)
	p := r.PartAverage(NoLimits(), Type8)
	near(t, "high by type 8 (derived)", p.High, 300.2574074074073, 1e-10)
	near(t, "low by type 8", p.Low, 2*299.85-300.2574074074073, 1e-10)
	if !p.Enough || !p.LowIsOwn || !p.HighIsOwn {
		t.Errorf("%+v", p)
	}
	tight := r.PartAverage(Limits{299.7, 299.9}, Type8)
	if tight.Low != 299.7 || tight.High != 299.9 || tight.LowIsOwn || tight.HighIsOwn {
		t.Errorf("wider than the limits: %+v", tight)
	}
	if few := of(t, michelso[:19]...).PartAverage(Limits{299, 301}, Type8); few.Enough || few.Low != 299 || few.High != 301 {
		t.Errorf("19 parts: %+v", few)
	}
}

func TestOutliersWithinTolerance(t *testing.T) {
	random := rand.New(rand.NewPCG(2, 2))
	family := func(n int) []float64 { return normal(random, n, 100, 1, 0.1) }
	for _, tt := range []struct {
		fact   string
		values []float64
		want   []int
	}{
		{"60 parts and one eight sigma off", append(family(60), 108), []int{60}},
		{"60 parts and two", append(append([]float64{92}, family(60)...), 108.5), []int{61, 0}},
		{"12 parts and one eight sigma off", append(family(12), 110), []int{12}},
		{"six parts and one far off", []float64{100, 100.3, 99.8, 100.1, 99.9, 104}, []int{5}},
		{"six parts, two equal ones far off: none is named", []float64{100, 100.3, 99.8, 100.1, 104, 104}, nil},
		{"three parts are too few", []float64{100, 100, 150}, nil},
		{"all equal", []float64{100, 100, 100, 100, 100, 100, 100, 100}, nil},
		{"a last digit is no gap", []float64{100, 100, 100, 100, 100, 100, 100, 100.1}, nil},
		{"more than half equal and one three digits off", append(slices.Repeat([]float64{100}, 30), 99.9, 100.1, 100.4), []int{32}},
	} {
		t.Run(tt.fact, func(t *testing.T) {
			r, err := New(quantity.One, 0.1, tt.values...)
			if err != nil {
				t.Fatal(err)
			}
			var got []int
			for _, o := range r.Outliers(Limits{80, 120}) {
				got = append(got, o.Index)
				if !o.Within || o.Statistic <= o.Threshold {
					t.Errorf("%+v", o)
				}
			}
			if !slices.Equal(got, tt.want) {
				t.Errorf("parts %v, want %v", got, tt.want)
			}
		})
	}
}

// TestOutlierFalseAlarms counts how often bags of sound parts have a part named: 1 % for few parts, less for many.
func TestOutlierFalseAlarms(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 4))
	const runs = 3000
	for _, tt := range []struct {
		n    int
		most float64
	}{{4, .016}, {6, .016}, {7, .016}, {10, .016}, {19, .016}, {20, .016}, {50, .003}} {
		alarms := 0
		for range runs {
			if len(of(t, normal(r, tt.n, 100, 1, 0)...).Outliers(NoLimits())) > 0 {
				alarms++
			}
		}
		if got := float64(alarms) / runs; got > tt.most {
			t.Errorf("%d parts: %.4f of sound bags have an outlier, want at most %g", tt.n, got, tt.most)
		}
	}
}

// TestOneMorePartInTheFamilyMakesNoOutlier holds that adding a part between the quartiles leaves every part that was within three robust
// sigma unnamed, and the new part too.
func TestOneMorePartInTheFamilyMakesNoOutlier(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(leastForAverage, 80).Draw(t, "n")
		scale := math.Pow10(rapid.IntRange(-9, 6).Draw(t, "scale"))
		values := make([]float64, n)
		for i := range values {
			jitter := rapid.Float64Range(-.4, .4).Draw(t, "jitter")
			values[i] = scale * (1000 + 10*distuv.UnitNormal.Quantile((float64(i)+.5+jitter)/float64(n)))
		}
		r, err := New(quantity.One, 0, values...)
		if err != nil {
			t.Fatal(err)
		}
		before := r.Summary()
		share := rapid.Float64Range(0, 1).Draw(t, "share")
		if err := r.Add(before.Q1 + share*(before.Q3-before.Q1)); err != nil {
			t.Fatal(err)
		}
		for _, o := range r.Outliers(NoLimits()) {
			if o.Index == n || math.Abs(o.Value-before.Median) <= 3*before.RobustSigma {
				t.Errorf("part %d, %g, became an outlier: %s", o.Index, o.Value, o.Why)
			}
		}
	})
}

func TestPartAverageIsNeverWiderThanTheLimits(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r, err := New(quantity.One, 0.125, drawn(t, 0)...)
		if err != nil {
			t.Fatal(err)
		}
		low := rapid.Float64Range(-300, 300).Draw(t, "low")
		l := Limits{low, low + rapid.Float64Range(0, 500).Draw(t, "width")}
		if p := r.PartAverage(l, LotQuartiles); p.Low < l.Low || p.High > l.High {
			t.Errorf("%+v is wider than %v", p, l)
		}
	})
}
