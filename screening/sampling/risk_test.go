package sampling

import (
	"math"
	"math/big"
	"testing"

	"pgregory.net/rapid"
)

// exact is the hypergeometric distribution in fractions.
func exact(lot, bad, n, c int64) *big.Rat {
	sum := new(big.Rat)
	all := new(big.Int).Binomial(lot, n)
	for i := int64(0); i <= min(c, n, bad); i++ {
		if n-i > lot-bad {
			continue
		}
		ways := new(big.Int).Mul(new(big.Int).Binomial(bad, i), new(big.Int).Binomial(lot-bad, n-i))
		sum.Add(sum, new(big.Rat).SetFrac(ways, all))
	}
	return sum
}

func TestHypergeometricIsExact(t *testing.T) {
	for _, tt := range []struct {
		lot, bad, n, c int
		want           *big.Rat
	}{
		{50, 3, 5, 0, big.NewRat(1419, 1960)},
		{20, 2, 5, 0, big.NewRat(21, 38)},
		{200, 10, 32, 0, big.NewRat(3048832002519, 18223217783290)},
	} {
		if e := exact(int64(tt.lot), int64(tt.bad), int64(tt.n), int64(tt.c)); e.Cmp(tt.want) != 0 {
			t.Errorf("the exact sum of %d %d %d %d is %s, want %s", tt.lot, tt.bad, tt.n, tt.c, e, tt.want)
		}
		want, _ := tt.want.Float64()
		near(t, "hypergeometric", Hypergeometric(tt.lot, tt.bad, tt.n, tt.c), want, 1e-14)
	}
	near(t, "N 100 D 5 n 10 c 0", Hypergeometric(100, 5, 10, 0), .583752366926, 5e-13)
	near(t, "N 50 D 5 n 5 c 1", Hypergeometric(50, 5, 5, 1), .928247654288, 5e-13)
	rapid.Check(t, func(t *rapid.T) {
		lot := rapid.IntRange(1, 3000).Draw(t, "lot")
		bad := rapid.IntRange(0, lot).Draw(t, "bad")
		n := rapid.IntRange(0, lot).Draw(t, "n")
		c := rapid.IntRange(-1, 40).Draw(t, "c")
		got := Hypergeometric(lot, bad, n, c)
		want, _ := exact(int64(lot), int64(bad), int64(n), int64(c)).Float64()
		if !(math.Abs(got-want) <= 1e-11*want+1e-300) {
			t.Errorf("%d %d %d %d: %.15g, want %.15g", lot, bad, n, c, got, want)
		}
	})
	for _, wrong := range [][3]int{{10, 11, 5}, {10, 5, 11}, {10, -1, 5}, {10, 5, -1}, {-1, 0, 0}} {
		if got := Hypergeometric(wrong[0], wrong[1], wrong[2], 0); !math.IsNaN(got) {
			t.Errorf("%v gives %g, want NaN", wrong, got)
		}
	}
}

// TestAcceptOnZero holds every row of testdata/zero.csv, computed in exact fractions.
func TestAcceptOnZero(t *testing.T) {
	rows := table(t, "zero.csv")
	if len(rows) != 504 {
		t.Fatalf("%d rows, want 504", len(rows))
	}
	tooMany := 0
	for _, row := range rows {
		lot, risk := whole(t, row["lot"]), number(t, row["risk"])
		z, err := AcceptOnZero(lot, number(t, row["ltpd"]), risk)
		if err != nil {
			t.Fatal(err)
		}
		if z.Bad != whole(t, row["bad"]) || z.N != whole(t, row["n"]) || math.Abs(z.Chance-number(t, row["pa"])) > 6e-9 {
			t.Errorf("lot %d ltpd %s risk %g: %+v, want bad %s n %s chance %s", lot, row["ltpd"], risk, z, row["bad"], row["n"], row["pa"])
		}
		approximate := ApproximateZero(lot, z.Bad, risk)
		if approximate != whole(t, row["approximate_n"]) {
			t.Errorf("lot %d ltpd %s risk %g: approximately %d, want %s", lot, row["ltpd"], risk, approximate, row["approximate_n"])
		}
		switch approximate - z.N {
		case 0:
		case 1:
			tooMany++
		default:
			t.Errorf("lot %d ltpd %s risk %g: approximately %d, exactly %d", lot, row["ltpd"], risk, approximate, z.N)
		}
	}
	if tooMany != 18 {
		t.Errorf("the approximation asks one too many in %d rows, want 18", tooMany)
	}
	for _, wrong := range [][3]float64{{0, .1, .1}, {10, 0, .1}, {10, 1, .1}, {10, .1, 0}, {10, .1, 1}, {10, math.NaN(), .1}, {10, .1, math.NaN()}} {
		if z, err := AcceptOnZero(int(wrong[0]), wrong[1], wrong[2]); err == nil {
			t.Errorf("%v gives %+v", wrong, z)
		}
	}
}

func TestCurvesFall(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 2000).Draw(t, "n")
		p := plan(n, rapid.IntRange(0, n).Draw(t, "c"))
		a := rapid.Float64Range(0, 1).Draw(t, "a")
		b := rapid.Float64Range(a, 1).Draw(t, "b")
		if pa, pb := p.FromProcess(a), p.FromProcess(b); pb > pa+1e-12 || pa < 0 || pa > 1 {
			t.Errorf("n %d c %d: %.17g at %g, %.17g at %g", n, p.Accept, pa, a, pb, b)
		}
		if p.Accept < n {
			chance := rapid.Float64Range(1e-6, 1-1e-6).Draw(t, "chance")
			if got := p.FromProcess(p.QualityAt(chance)); math.Abs(got-chance) > 1e-8 {
				t.Errorf("n %d c %d: the quality at %g is accepted with %g", n, p.Accept, chance, got)
			}
		}
		lot := rapid.IntRange(n, 3000).Draw(t, "lot")
		bad := rapid.IntRange(0, lot-1).Draw(t, "bad")
		if better, worse := p.FromLot(lot, bad), p.FromLot(lot, bad+1); worse > better+1e-12 {
			t.Errorf("lot %d n %d c %d: %g with %d bad, %g with one more", lot, n, p.Accept, better, bad, worse)
		}
	})
}

func TestTypeABecomesTypeBForLargeLots(t *testing.T) {
	p := plan(50, 2)
	near(t, "a lot of a million", p.FromLot(1_000_000, 40_000), p.FromProcess(.04), 1e-5)
	if p.FromLot(100, 4) == p.FromProcess(.04) {
		t.Error("a lot of 100 is no stream")
	}
}

func TestReducedInspectionAcceptsBetweenItsNumbers(t *testing.T) {
	reduced, full := mustLookup(t, "G", 4, Reduced), plan(13, 3) // 13, 1/4
	for _, p := range []float64{.02, .1, .3} {
		near(t, "stream", reduced.FromProcess(p), full.FromProcess(p), 0)
	}
	near(t, "lot", reduced.FromLot(200, 20), full.FromLot(200, 20), 0)
	near(t, "quality", reduced.QualityAt(.5), full.QualityAt(.5), 0)
}

func TestEdgesOfTheCurve(t *testing.T) {
	p := plan(13, 1)
	for _, tt := range []struct{ got, want float64 }{
		{p.FromProcess(0), 1},
		{p.FromProcess(1), 0},
		{p.FromDefects(0), 1},
		{plan(5, 5).FromProcess(1), 1},
		{SchemeAcceptance(p, p, 0), 1},
		{SchemeAcceptance(p, p, 1), 0},
	} {
		if tt.got != tt.want {
			t.Errorf("got %g, want %g", tt.got, tt.want)
		}
	}
	for i, got := range []float64{
		p.FromProcess(-1), p.FromProcess(math.NaN()), p.FromDefects(-1), p.QualityAt(2), plan(5, 5).QualityAt(.5),
		p.OutgoingQuality(5, .1), p.TotalInspection(5, .1), MeanAtRisk(-1, .1), MeanAtRisk(1, 0),
	} {
		if !math.IsNaN(got) {
			t.Errorf("number %d is %g, want NaN", i, got)
		}
	}
	near(t, "AQL 40 counts defects", mustLookup(t, "F", 40, Normal).AtAQL(), plan(20, 14).FromDefects(40), 0.1)
	for _, wrong := range [][4]float64{{0, .9, .1, .1}, {.1, .9, .1, .1}, {.1, .1, .2, .9}, {.1, .9, 1, .1}} {
		if got, err := Find(wrong[0], wrong[1], wrong[2], wrong[3]); err == nil {
			t.Errorf("%v finds %+v", wrong, got)
		}
	}
}
