package lot

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"gonum.org/v1/gonum/stat/distuv"
	"pgregory.net/rapid"

	"goodbin/screening/quantity"
)

func TestReadingsRefuseWhatIsNone(t *testing.T) {
	for _, x := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		if _, err := New(quantity.Ohm, 0, 1, x); err == nil {
			t.Errorf("New takes %g", x)
		}
		r := of(t, 1, 2)
		if err := r.Add(x); err == nil || r.Len() != 2 {
			t.Errorf("Add takes %g", x)
		}
	}
	if _, err := New(quantity.Ohm, -1); err == nil {
		t.Error("a negative step is taken")
	}
}

// drawn draws readings of a lot, many of them equal.
func drawn(t *rapid.T, least int) []float64 {
	return rapid.SliceOfN(rapid.Custom(func(t *rapid.T) float64 { return float64(rapid.IntRange(-2000, 2000).Draw(t, "x")) / 8 }), least, 60).Draw(t, "readings")
}

func TestSummaryDoesNotDependOnOrder(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		values := drawn(t, 1)
		a, err := New(quantity.One, 0, values...)
		if err != nil {
			t.Fatal(err)
		}
		b, _ := New(quantity.One, 0)
		for _, x := range rapid.Permutation(values).Draw(t, "order") {
			if err := b.Add(x); err != nil {
				t.Fatal(err)
			}
		}
		if diff := cmp.Diff(a.Summary(), b.Summary(), cmp.Comparer(same)); diff != "" {
			t.Error(diff)
		}
		l := Limits{-100, 100}
		if diff := cmp.Diff(a.Histogram(l, 20), b.Histogram(l, 20), cmp.Comparer(same)); diff != "" {
			t.Error(diff)
		}
		values1, values2 := outlierValues(a.Outliers(l)), outlierValues(b.Outliers(l))
		if !slices.Equal(values1, values2) {
			t.Errorf("outliers %v in one order, %v in the other", values1, values2)
		}
		split1, found1 := a.Split()
		split2, found2 := b.Split()
		if found1 != found2 || split1.Dip != split2.Dip || split1.Low != split2.Low || split1.High != split2.High {
			t.Errorf("split %+v in one order, %+v in the other", split1, split2)
		}
	})
}

func same(a, b float64) bool { return a == b || math.IsNaN(a) && math.IsNaN(b) }

func outlierValues(outliers []Outlier) []float64 {
	var out []float64
	for _, o := range outliers {
		out = append(out, o.Value)
	}
	slices.Sort(out)
	return out
}

func TestSummaryIsWhatItsNamesSay(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		values := drawn(t, 2)
		r, err := New(quantity.One, 0, values...)
		if err != nil {
			t.Fatal(err)
		}
		s := r.Summary()
		distances := make([]float64, len(values))
		for i, x := range values {
			distances[i] = math.Abs(x - s.Median)
		}
		if want := median(distances); math.Abs(s.MAD-want) > 1e-12 {
			t.Errorf("MAD %g, want %g", s.MAD, want)
		}
		if s.Min > s.Q1 || s.Q1 > s.Median || s.Median > s.Q3 || s.Q3 > s.Max || s.SD < 0 {
			t.Errorf("%+v is in no order", s)
		}
		below := 0
		for _, x := range values {
			if x < s.Median {
				below++
			}
		}
		if 2*below > len(values) {
			t.Errorf("%d of %d lie below the median", below, len(values))
		}
	})
}

func TestFewReadings(t *testing.T) {
	empty := of(t)
	s := empty.Summary()
	if s.N != 0 || !math.IsNaN(s.Median) || !math.IsNaN(s.SD) {
		t.Errorf("of none: %+v", s)
	}
	one := of(t, 4.7).Summary()
	if one.Median != 4.7 || one.Mean != 4.7 || !math.IsNaN(one.SD) || !math.IsNaN(one.RobustSigma) {
		t.Errorf("of one: %+v", one)
	}
	if len(empty.Examine()) != 0 || len(empty.Outliers(NoLimits())) != 0 || len(empty.ModifiedZScores()) != 0 || len(empty.Histogram(NoLimits(), 10).Bins) != 0 {
		t.Error("an empty lot has findings")
	}
	if !math.IsNaN(empty.Quantile(.5, Type7)) || !math.IsNaN(of(t, 1, 2).Quantile(.5, 9)) || !math.IsNaN(of(t, 1, 2).Quantile(2, Type7)) {
		t.Error("a quantile that there is none of is not NaN")
	}
}

// TestLotQuartilesAreNearlyRight shows by simulation why type 8 was chosen: on average the robust sigma of few normal readings is right by it,
// and a fifth to a quarter low by type 7.
func TestLotQuartilesAreNearlyRight(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 3))
	const runs = 4000
	for _, tt := range []struct {
		n            int
		low7, high7  float64
		low8, high8  float64
		rule7, rule8 float64
	}{{n: 5, low7: .68, high7: .80, low8: .97, high8: 1.12}, {n: 20, low7: .90, high7: .97, low8: .97, high8: 1.05}} {
		for range runs {
			x := normal(r, tt.n, 0, 1, 0)
			slices.Sort(x)
			tt.rule7 += (quantile(x, .75, Type7) - quantile(x, .25, Type7)) / iqrToSigma / runs
			tt.rule8 += (quantile(x, .75, Type8) - quantile(x, .25, Type8)) / iqrToSigma / runs
		}
		if tt.rule7 < tt.low7 || tt.rule7 > tt.high7 || tt.rule8 < tt.low8 || tt.rule8 > tt.high8 {
			t.Errorf("n %d: robust sigma %.3f by type 7, %.3f by type 8", tt.n, tt.rule7, tt.rule8)
		}
	}
}

func TestCapability(t *testing.T) {
	r := of(t, 98, 99, 100, 101, 102)
	c, err := r.Capability(Limits{90, 107})
	if err != nil {
		t.Fatal(err)
	}
	sd := math.Sqrt(2.5)
	near(t, "Pp", c.Pp, 17/(6*sd), 1e-12)
	near(t, "Ppk", c.Ppk, 7/(3*sd), 1e-12)
	near(t, "Bissell's lower bound", c.PpkLow, c.Ppk-1.6448536*math.Sqrt(1/45.+c.Ppk*c.Ppk/8), 1e-6)
	near(t, "expected outside", c.Expected, distuv.UnitNormal.CDF(-10/sd)+distuv.UnitNormal.CDF(-7/sd), 1e-12)
	if c.Outside != 0 {
		t.Errorf("%d outside", c.Outside)
	}
	one, err := r.Capability(Limits{math.Inf(-1), 101})
	if err != nil || !math.IsNaN(one.Pp) || one.Outside != 1 || math.Abs(one.Ppk-1/(3*sd)) > 1e-12 {
		t.Errorf("one limit: %+v, %v", one, err)
	}
	for _, tt := range []struct {
		r *Readings
		l Limits
	}{{of(t, 1, 2), Limits{0, 3}}, {r, NoLimits()}, {r, Limits{2, 1}}, {of(t, 1, 1, 1, 1, 1), Limits{0, 2}}} {
		if c, err := tt.r.Capability(tt.l); err == nil {
			t.Errorf("%v gives %+v", tt.l, c)
		}
	}
}

func TestHistogram(t *testing.T) {
	h := of(t, 1.02, 1.04, 1.06, 1.08, 1.1, 0.98, 0.96).Histogram(Limits{0.9, 1.1}, 40)
	if h.Width != 0.1 || len(h.Bins) != 3 || h.Bins[1].Count != 4 || math.Abs(h.LowAt-0) > 1e-6 || math.Abs(h.HighAt-2) > 1e-6 {
		t.Errorf("%+v", h)
	}
	if far := of(t, 1, 2, 3).Histogram(Limits{-1000, 5}, 40); !math.IsNaN(far.LowAt) || math.IsNaN(far.HighAt) {
		t.Errorf("a limit far away is drawn: %+v", far)
	}
	rapid.Check(t, func(t *rapid.T) {
		values := drawn(t, 1)
		scale := math.Pow10(rapid.IntRange(-12, 9).Draw(t, "scale"))
		for i := range values {
			values[i] *= scale
		}
		r, err := New(quantity.One, 0, values...)
		if err != nil {
			t.Fatal(err)
		}
		most := rapid.IntRange(2, 60).Draw(t, "most")
		h := r.Histogram(Limits{-150 * scale, 150 * scale}, most)
		total := 0
		for i, b := range h.Bins {
			total += b.Count
			if i > 0 && b.Low != h.Bins[i-1].High {
				t.Errorf("a gap before bin %d", i)
			}
		}
		if total != len(values) || len(h.Bins) > most {
			t.Errorf("%d bins of at most %d hold %d of %d readings", len(h.Bins), most, total, len(values))
		}
	})
}

func TestYieldCoversWhatItClaims(t *testing.T) {
	for _, tt := range []struct {
		good, n   int
		low, high float64
	}{{8, 10, .4439, .9748}, {0, 10, 0, .3085}, {10, 10, .6915, 1}} { // textbook values, from memory; 1−.025^(1/10) is .3085
		i, err := Yield(tt.good, tt.n, .95)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "low", i.Low, tt.low, 6e-5)
		near(t, "high", i.High, tt.high, 6e-5)
	}
	for _, n := range []int{1, 5, 12, 30} {
		for p := 0.02; p < 1; p += 0.02 {
			covered := 0.0
			for k := 0; k <= n; k++ {
				i, err := Yield(k, n, .95)
				if err != nil {
					t.Fatal(err)
				}
				if i.Low <= p && p <= i.High {
					covered += distuv.Binomial{N: float64(n), P: p}.Prob(float64(k))
				}
			}
			if covered < .95-1e-9 {
				t.Errorf("n %d: a yield of %.2f is covered in %.4f of bags", n, p, covered)
			}
		}
	}
	for _, wrong := range [][2]int{{0, 0}, {-1, 5}, {6, 5}} {
		if i, err := Yield(wrong[0], wrong[1], .95); err == nil {
			t.Errorf("%v gives %+v", wrong, i)
		}
	}
	if i, err := Yield(1, 2, 1); err == nil {
		t.Errorf("confidence 1 gives %+v", i)
	}
}

func TestMoreForGroup(t *testing.T) {
	got, err := of(t, 100, 90, 110, 100.5, 95).MoreForGroup(2, Within{Relative: .01}, 50)
	if err != nil || got.Likely != 0 || !slices.Equal(got.Have, []int{0, 3}) {
		t.Errorf("a pair that is there: %+v, %v", got, err)
	}
	// Readings at the quantiles of a normal distribution of sigma 10, so that the forecast's distribution is known.
	var values []float64
	for i := range 9 {
		values = append(values, 1000+10*distuv.UnitNormal.Quantile((float64(i)+.5)/9))
	}
	r := of(t, values...)
	sigma := r.Summary().RobustSigma
	w := Within{Absolute: .4}
	pair, err := r.MoreForGroup(2, w, 500)
	if err != nil {
		t.Fatal(err)
	}
	// Each part to come meets one of the nine by the density at them; after m of them the chance of no pair is about
	// exp(−m·Σ 2wφ(x_i) − m²/2·P(|x−y| ≤ w)).
	atOnce := 0.0
	for _, x := range values {
		atOnce += 2 * w.Absolute * distuv.Normal{Mu: 1000, Sigma: sigma}.Prob(x)
	}
	each := 2*distuv.UnitNormal.CDF(w.Absolute/(sigma*math.Sqrt2)) - 1
	for m := 1; ; m++ {
		none := math.Exp(-float64(m)*atOnce - float64(m*(m-1))/2*each)
		if none <= .5 {
			if diff := pair.Likely - m; diff < -1 || diff > 1 {
				t.Errorf("pair likely after %d, want about %d", pair.Likely, m)
			}
			break
		}
	}
	quad, err := r.MoreForGroup(4, w, 500)
	if err != nil || quad.Likely <= pair.Likely || quad.Sure < quad.Likely || pair.Sure < pair.Likely {
		t.Errorf("quad %+v, pair %+v, %v", quad, pair, err)
	}
	if few, err := r.MoreForGroup(4, w, 3); err != nil || few.Likely != 4 || few.Most != 3 {
		t.Errorf("with three parts left: %+v, %v; want one more than there are", few, err)
	}
	for _, wrong := range []struct {
		size int
		w    Within
	}{{1, w}, {99, w}, {2, Within{}}, {2, Within{Relative: math.NaN()}}, {2, Within{Absolute: -1}}} {
		if f, err := r.MoreForGroup(wrong.size, wrong.w, 10); err == nil {
			t.Errorf("%+v gives %+v", wrong, f)
		}
	}
	if f, err := of(t, 1, 2).MoreForGroup(2, Within{Relative: .01}, 10); err == nil {
		t.Errorf("two parts give %+v", f)
	}
}

func BenchmarkStatisticsOf10000Parts(b *testing.B) {
	values := normal(rand.New(rand.NewPCG(1, 1)), 10_000, 100e-6, 3e-6, 1e-8)
	l := Limits{80e-6, 120e-6}
	b.Run("summary, capability, histogram, outliers", func(b *testing.B) {
		for b.Loop() {
			r, err := New(quantity.Farad, 1e-8, values...)
			if err != nil {
				b.Fatal(err)
			}
			r.Summary()
			if _, err := r.Capability(l); err != nil {
				b.Fatal(err)
			}
			r.Histogram(l, 60)
			r.Outliers(l)
		}
	})
	b.Run("with all that is examined", func(b *testing.B) {
		for b.Loop() {
			r, err := New(quantity.Farad, 1e-8, values...)
			if err != nil {
				b.Fatal(err)
			}
			r.Summary()
			if _, err := r.Capability(l); err != nil {
				b.Fatal(err)
			}
			r.Histogram(l, 60)
			r.Outliers(l)
			r.Examine()
		}
	})
	b.Run("one more part", func(b *testing.B) {
		r, err := New(quantity.Farad, 1e-8, values...)
		if err != nil {
			b.Fatal(err)
		}
		for b.Loop() {
			if err := r.Add(100e-6); err != nil {
				b.Fatal(err)
			}
			r.Summary()
			r.sorted, r.inOrder = r.sorted[:10_000], r.inOrder[:10_000]
		}
	})
}
