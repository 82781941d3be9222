package bipolar

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestEveryLimitHasASourceAndCounts(t *testing.T) {
	claims := []screening.Claim{words("polarity=npn"), words("polarity=pnp", "material=ge"), words("polarity=npn", "technology=darlington"), {}}
	for _, name := range types.Builtin().Names(Kind) {
		claims = append(claims, words("type="+name))
		row, _ := types.Builtin().Lookup(Kind, name)
		for _, g := range row.Groups {
			claims = append(claims, words("type="+name, "group="+g.Name))
		}
	}
	bench := map[screening.Characteristic]bool{}
	for _, f := range Book(types.Builtin()).Bench {
		bench[f.Name] = true
	}
	for _, c := range claims {
		completed, _, err := builtin.complete(c)
		if err != nil {
			t.Errorf("%v: %v", c, err)
			continue
		}
		again, _, err := builtin.complete(completed)
		if diff := cmp.Diff(completed, again, cmp.AllowUnexported(screening.Condition{}), nanEqual); err != nil || diff != "" {
			t.Errorf("%v: completing twice changes the claim (%v):\n%s", c, err, diff)
		}
		all, err := builtin.limits(completed)
		if err != nil {
			t.Errorf("%v: %v", c, err)
		}
		criteria := map[screening.Criterion]bool{}
		for _, l := range all {
			criteria[l.Criterion] = true
			if l.Source.Document == "" || l.Source.Status == screening.NoStatus || !l.InUse || math.IsNaN(l.Low) || math.IsNaN(l.High) || l.Low > l.High {
				t.Errorf("%v: limit %+v", c, l)
			}
			if l.Evidence != screening.ByRating && !bench[l.On] {
				t.Errorf("%v: nobody can measure %s", c, l.On)
			}
		}
		for _, want := range []screening.Criterion{CriterionPolarity, CriterionVBE, CriterionGain, CriterionLeakage} {
			if !criteria[want] {
				t.Errorf("%v: no limit asks for %s", c, want)
			}
		}
	}
}

var nanEqual = cmp.Comparer(func(a, b float64) bool { return a == b || math.IsNaN(a) && math.IsNaN(b) })

func TestComplete(t *testing.T) {
	for _, tt := range []struct {
		name  string
		claim screening.Claim
		want  map[string]string
		err   string
	}{
		{"a marking brings its group", words("type=BC547B"), map[string]string{"type": "BC547", "group": "B", "polarity": "npn", "material": "si"}, ""},
		{"group apart", words("type=BC337", "group=-25"), map[string]string{"type": "BC337", "group": "25"}, ""},
		{"Darlington", words("type=TIP122"), map[string]string{"technology": "darlington", "polarity": "npn"}, ""},
		{"germanium", words("type=AC128"), map[string]string{"material": "ge", "polarity": "pnp"}, ""},
		{"no type is silicon", words("polarity=npn"), map[string]string{"material": "si"}, ""},
		{"unknown type is of unknown material", words("type=GT308"), map[string]string{"material": ""}, ""},
		{"wrong polarity", words("type=BC557", "polarity=npn"), nil, `polarity: "npn" is claimed, but BC557 is pnp`},
		{"wrong material", words("type=AC128", "material=si"), nil, `material: "si" is claimed, but AC128 is ge`},
		{"group that the type does not have", words("type=BC546", "group=C"), nil, `group: "C" is no gain group of BC546; it has A, B`},
		{"two groups", words("type=BC547B", "group=C"), nil, `group: "C" after the type BC547, whose marking already says group B`},
		{"group of a type without any", words("type=2N3904", "group=B"), nil, `group: "B", but no gain group of 2N3904 is known; leave it out`},
	} {
		t.Run(tt.name, func(t *testing.T) {
			c, _, err := builtin.complete(tt.claim)
			if tt.err != "" {
				if err == nil || err.Error() != tt.err {
					t.Errorf("error %v, want %s", err, tt.err)
				}
				return
			}
			if err != nil {
				t.Fatal(err)
			}
			for name, want := range tt.want {
				if got := c.Trait(name); got != want {
					t.Errorf("%s is %q, want %q", name, got, want)
				}
			}
		})
	}
}

func TestAPartsOwnRatingsStandBeforeItsTypes(t *testing.T) {
	own := screening.RangeRating(HFE, 200, 300)
	own.At, own.Typed = at(ic, 2e-3, vce, 5.0), "200..300"
	volts := screening.NominalRating(VCEO, 30)
	volts.Typed = "30V"
	c, _, err := builtin.complete(words("type=BC547").WithRating(own).WithRating(volts))
	if err != nil {
		t.Fatal(err)
	}
	if r, _ := c.Rating(HFE.Name, ""); r.Low != 200 || r.High != 300 {
		t.Errorf("gain claimed %v", r)
	}
	if r, _ := c.Rating(VCEO.Name, ""); r.Low != 30 {
		t.Errorf("VCEO claimed %v", r)
	}
	if r, ok := c.Rating(VCBO.Name, ""); !ok || r.Low != 50 {
		t.Errorf("VCBO of the type: %v", r)
	}
}

func TestFieldsTakeWordsOfTheBench(t *testing.T) {
	f, _ := Book(types.Builtin()).ClaimField(screening.TraitType)
	for word, want := range map[string]string{
		"bc547b": "BC547B", "BC337-25": "BC337-25", "c1815-gr": "2SC1815-GR", "2n3904": "2N3904", "1N4148": "", "npn": "", "45V": "",
	} {
		if got, ok := f.AcceptText(word); got != want || ok != (want != "") {
			t.Errorf("type takes %q as %q, %v", word, got, ok)
		}
	}
	g, _ := Book(types.Builtin()).ClaimField(screening.TraitGroup)
	for word, want := range map[string]string{"b": "B", "-25": "25", "GR": "GR", "viii": "VIII", "Z": ""} {
		if got, _ := g.AcceptText(word); got != want {
			t.Errorf("group takes %q as %q", word, got)
		}
	}
}

func TestUnitsOfDefinitions(t *testing.T) {
	for _, f := range append(Book(types.Builtin()).Claims, Book(types.Builtin()).Bench...) {
		if f.Trait {
			continue
		}
		if f.Name == "" || f.Symbol == "" || f.Label == "" || f.Help == "" || f.Example == "" {
			t.Errorf("field %+v lacks a word", f.Definition)
		}
	}
	if VBE.Unit != quantity.Volt || ICEO.Unit != quantity.Ampere || HFE.Unit != quantity.One {
		t.Error("units of VBE, ICEO, hFE")
	}
}
