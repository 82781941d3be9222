package lot

import (
	"maps"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/screening/quantity"
)

func capacitors(t testing.TB, step float64, values ...float64) *Readings {
	t.Helper()
	r, err := New(quantity.Farad, step, values...)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// find returns the suspicions of one kind.
func find(all []Suspicion, kind SuspicionKind) []Suspicion {
	return slices.DeleteFunc(slices.Clone(all), func(s Suspicion) bool { return s.Kind != kind })
}

// shapes are distributions with one hump.
var shapes = map[string]func(r *rand.Rand) float64{
	"normal":              func(r *rand.Rand) float64 { return 100 + 2*r.NormFloat64() },
	"uniform":             func(r *rand.Rand) float64 { return 100 + 10*r.Float64() },
	"exponential":         func(r *rand.Rand) float64 { return 100 + 5*r.ExpFloat64() },
	"long-tailed":         func(r *rand.Rand) float64 { return 100 + 3*r.NormFloat64()/math.Sqrt(r.ExpFloat64()) },
	"normal, coarse":      func(r *rand.Rand) float64 { return math.Round(100 + 2*r.NormFloat64()) },
	"normal, very coarse": func(r *rand.Rand) float64 { return math.Round(100 + 0.6*r.NormFloat64()) },
}

// TestFalseAlarms draws bags in which nothing is wrong and counts how often each test suspects them: no more than FalseAlarm, within four
// standard errors (there are some seventy comparisons), whatever the shape and the resolution. The draws are the same in every run.
func TestFalseAlarms(t *testing.T) {
	const runs = 1000
	most := FalseAlarm + 4*math.Sqrt(FalseAlarm*(1-FalseAlarm)/runs)
	for _, name := range slices.Sorted(maps.Keys(shapes)) {
		draw := shapes[name]
		for _, n := range []int{12, 40, 120} {
			r := rand.New(rand.NewPCG(6, uint64(n)))
			alarms := map[SuspicionKind]int{}
			for range runs {
				values := make([]float64, n)
				for i := range values {
					values[i] = draw(r)
				}
				step := 0.0
				if strings.Contains(name, "coarse") {
					step = 1
				}
				lot, err := New(quantity.One, step, values...)
				if err != nil {
					t.Fatal(err)
				}
				seen := map[SuspicionKind]bool{}
				for _, s := range lot.Examine() {
					seen[s.Kind] = true
				}
				for kind := range seen {
					alarms[kind]++
				}
			}
			for kind, count := range alarms {
				if share := float64(count) / runs; share > most {
					t.Errorf("%s, %d parts: %.4f of sound bags raise %q, want at most %.4f", name, n, share, kind, most)
				}
			}
		}
	}
}

func TestTwoPopulationsInOneBag(t *testing.T) {
	random := rand.New(rand.NewPCG(7, 7))
	const runs = 200
	for _, tt := range []struct {
		fact       string
		small, big int
		apart      float64 // in sigmas of each
		least      float64 // share of bags found
	}{
		{"30 and 30, six sigma apart", 30, 30, 6, .95},
		{"20 and 30, eight sigma apart", 20, 30, 8, .95},
		{"8 and 8, ten sigma apart", 8, 8, 10, .6},
		{"100 and 100, four sigma apart", 100, 100, 4, .8},
	} {
		found := 0
		for range runs {
			values := append(normal(random, tt.small, 100+tt.apart, 1, 0.1), normal(random, tt.big, 100, 1, 0.1)...)
			named := map[float64]bool{}
			for i := range tt.small {
				named[values[i]] = true
			}
			random.Shuffle(len(values), func(i, j int) { values[i], values[j] = values[j], values[i] })
			lot, err := New(quantity.Volt, 0.1, values...)
			if err != nil {
				t.Fatal(err)
			}
			s := find(lot.Examine(), TwoPopulations)
			if len(s) != 1 {
				continue
			}
			found++
			wrong := 0
			for _, i := range s[0].Parts {
				if !named[values[i]] && tt.small < tt.big {
					wrong++
				}
			}
			if wrong > 1 || s[0].Chance > FalseAlarm || s[0].Why == "" {
				t.Errorf("%s: %d parts of the larger group are named: %+v", tt.fact, wrong, s[0])
			}
		}
		if share := float64(found) / runs; share < tt.least {
			t.Errorf("%s: found in %.2f of bags, want %.2f", tt.fact, share, tt.least)
		}
	}
}

func TestDriftWhileMeasuring(t *testing.T) {
	random := rand.New(rand.NewPCG(8, 8))
	values := normal(random, 40, 0.650, 0.004, 0.0001)
	for i := range values { // fingers warm the parts: −2 mV/K over 6 K
		values[i] -= 0.012 * float64(i) / 40
	}
	lot, err := New(quantity.Volt, 0.0001, values...)
	if err != nil {
		t.Fatal(err)
	}
	s := find(lot.Examine(), Drift)
	if len(s) != 1 || !slices.Equal(s[0].Parts, []int{0, 1, 2, 37, 38, 39}) || !strings.Contains(s[0].Why, "cold hands") {
		t.Errorf("%+v", s)
	}
	trend, ok := lot.Trend()
	if !ok || trend.Rank > -.5 || math.Abs(trend.Change+.008) > .003 {
		t.Errorf("%+v", trend)
	}
	shuffled := lot.InOrder()
	random.Shuffle(len(shuffled), func(i, j int) { shuffled[i], shuffled[j] = shuffled[j], shuffled[i] })
	if s := find(of(t, shuffled...).Examine(), Drift); len(s) != 0 {
		t.Errorf("in another order: %+v", s)
	}
	slices.Sort(shuffled)
	if s := of(t, shuffled...).Examine(); len(find(s, InOrder)) != 1 || len(find(s, Copied)) != 0 || len(find(s, Drift)) != 0 {
		t.Errorf("in order of size: %+v", s)
	}
	// Ranks with ties: Spearman's ρ of 1 2 2 4 … against the places, by hand.
	ranks := of(t, 5, 7, 7, 9).ranks()
	if !slices.Equal(ranks, []float64{0, 1.5, 1.5, 3}) {
		t.Errorf("ranks %v", ranks)
	}
	if _, ok := of(t, 1, 2, 3).Trend(); ok {
		t.Error("three parts have a trend")
	}
}

func TestUnitSlips(t *testing.T) {
	family := []float64{47e-6, 48.2e-6, 45.9e-6, 46.6e-6, 47.7e-6, 48.8e-6, 46.1e-6, 47.3e-6}
	for _, tt := range []struct {
		fact   string
		values []float64
		want   [][]int
		why    string
	}{
		{"nano typed for micro", append(slices.Clone(family), 47.1e-9), [][]int{{8}}, "47.10 nF is 1/1000 of what the rest reads (47.15 µF): a unit prefix slipped"},
		{"milli typed for micro", append([]float64{46.8e-3}, family...), [][]int{{0}}, "1000 times"},
		{"a decimal point", append(slices.Clone(family), 4.66e-6), [][]int{{8}}, "1/10 of what the rest reads (47.15 µF): a decimal point"},
		{"two of one kind and one of another", append(slices.Clone(family), 47.2e-9, 4.7e-6, 46.9e-9), [][]int{{8, 10}, {9}}, "unit prefix"},
		{"a part of another value", append(slices.Clone(family), 22e-6), nil, ""},
		{"a power of ten off and then not in the family", append(slices.Clone(family), 22e-9), nil, ""},
		{"half the bag is another value", append(slices.Clone(family), 4.7e-6, 4.6e-6, 4.8e-6, 4.75e-6, 4.65e-6), nil, ""},
		{"a family too wide to tell", []float64{1, 3, 9, 2, 20, 40, 5, 12, 1000}, nil, ""},
		{"four parts are too few", []float64{1, 1, 1, 1000}, nil, ""},
		{"negative readings", []float64{-0.61, -0.62, -0.615, -0.605, -0.617, -610}, [][]int{{5}}, "1000 times"},
		{"a zero and a wrong sign are no slip", []float64{0.61, 0.62, 0.615, 0.605, 0.617, 0, -0.61}, nil, ""},
	} {
		t.Run(tt.fact, func(t *testing.T) {
			found := find(capacitors(t, 0, tt.values...).Examine(), UnitSlip)
			var got [][]int
			for _, s := range found {
				got = append(got, s.Parts)
				if s.Chance <= 0 || s.Chance > widestFamily {
					t.Errorf("chance %g", s.Chance)
				}
			}
			if len(got) != len(tt.want) || !slices.EqualFunc(got, tt.want, slices.Equal[[]int]) {
				t.Fatalf("parts %v, want %v", got, tt.want)
			}
			if len(found) > 0 && !strings.Contains(found[0].Why, tt.why) {
				t.Errorf("%q, want %q", found[0].Why, tt.why)
			}
		})
	}
}

func TestCopiedRows(t *testing.T) {
	random := rand.New(rand.NewPCG(9, 9))
	fine := func(n int) []float64 { return normal(random, n, 470, 8, 0.1) }
	coarse := func(n int) []float64 { return normal(random, n, 470, 0.4, 1) }
	run := fine(30)
	copy(run[10:15], []float64{471.3, 471.3, 471.3, 471.3, 471.3})
	block := fine(40)
	copy(block[30:35], block[4:9])
	for _, tt := range []struct {
		fact   string
		values []float64
		want   [][]int
	}{
		{"five equal readings in a row at a fine digit", run, [][]int{{10, 11, 12, 13, 14}}},
		{"five readings that come again", block, [][]int{{30, 31, 32, 33, 34}}},
		{"a coarse digit explains itself", coarse(40), nil},
		{"all equal explain themselves", slices.Repeat([]float64{470}, 20), nil},
		{"nothing copied", fine(40), nil},
	} {
		t.Run(tt.fact, func(t *testing.T) {
			var got [][]int
			for _, s := range find(of(t, tt.values...).Examine(), Copied) {
				got = append(got, s.Parts)
				if s.Chance > FalseAlarm {
					t.Errorf("chance %g", s.Chance)
				}
			}
			if !slices.EqualFunc(got, tt.want, slices.Equal[[]int]) {
				t.Errorf("parts %v, want %v", got, tt.want)
			}
		})
	}
	var rows [][]float64
	for i := range 20 {
		rows = append(rows, []float64{fine(1)[0], math.Round(random.NormFloat64() * 3), math.NaN()})
		if i >= 8 && i < 12 {
			rows[i] = rows[7]
		}
	}
	if s := CopiedRows(rows); len(s) != 1 || !slices.Equal(s[0].Parts, []int{7, 8, 9, 10, 11}) || !strings.Contains(s[0].Why, "5 parts in a row") {
		t.Errorf("%+v", s)
	}
	if s := CopiedRows(nil); len(s) != 0 {
		t.Errorf("no rows: %+v", s)
	}
}

// TestRunChance holds the expected number of runs against all orders of a few readings.
func TestRunChance(t *testing.T) {
	keys := []int{1, 1, 1, 2, 2, 3, 4}
	count := map[int]int{1: 3, 2: 2, 3: 1, 4: 1}
	orders, runs := 0, 0
	var walk func(k int)
	walk = func(k int) {
		if k == len(keys) {
			orders++
			for i := 0; i+3 <= len(keys); i++ {
				if constant(keys[i : i+3]) {
					runs++
				}
			}
			return
		}
		for i := k; i < len(keys); i++ {
			keys[k], keys[i] = keys[i], keys[k]
			walk(k + 1)
			keys[k], keys[i] = keys[i], keys[k]
		}
	}
	walk(0)
	near(t, "expected runs of three", runChance(count, len(keys), 3), float64(runs)/float64(orders), 1e-12)
}

// TestExamineNamesPartsThatAreThere holds that whatever the readings, every part named is one of them and every chance is one.
func TestExamineNamesPartsThatAreThere(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		values := drawn(t, 0)
		for i := range values {
			values[i] *= math.Pow10(rapid.IntRange(-3, 3).Draw(t, "power"))
		}
		r, err := New(quantity.One, rapid.SampledFrom([]float64{0, 0.125, 5}).Draw(t, "step"), values...)
		if err != nil {
			t.Fatal(err)
		}
		for _, s := range r.Examine() {
			if !(s.Chance >= 0 && s.Chance <= 1) || s.Why == "" || s.Test == "" || s.Kind.String() == "" {
				t.Errorf("%+v", s)
			}
			for k, i := range s.Parts {
				if i < 0 || i >= len(values) || slices.Contains(s.Parts[:k], i) {
					t.Errorf("%s names part %d of %d: %v", s.Kind, i, len(values), s.Parts)
				}
			}
		}
		if d := dip(r.spread()); len(values) > 3 && !(d >= 1/(2*float64(len(values)))-1e-12 && d <= .25+1/(2*float64(len(values)))) {
			t.Errorf("dip %g of %d readings", d, len(values))
		}
	})
}

func TestPercent(t *testing.T) {
	for chance, want := range map[float64]string{
		0: "less than 0.001 %", 1e-9: "less than 0.001 %", 0.005: "0.5 %", 0.00123: "0.12 %", 0.123: "12 %", 1: "100 %", 0.00002: "0.002 %",
	} {
		if got := percent(chance); got != want {
			t.Errorf("%g is %q, want %q", chance, got, want)
		}
	}
}
