package family_test

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules"
	"goodbin/rules/family"
	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// samples are claims of a kind that can be judged.
func samples(t *testing.T, b *screening.Rulebook) []screening.Claim {
	f, err := os.Open(filepath.Join("..", "testdata", "kinds", string(b.Kind)+".csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var claims []screening.Claim
	for _, row := range rows {
		if row[0] == "sample" {
			claims = append(claims, booktest.Part(t, b, row[1]).Claim)
		}
	}
	return claims
}

// drawClaim claims one of the samples, or anything that a kind can claim.
func drawClaim(t *rapid.T, b *screening.Rulebook, samples []screening.Claim) screening.Claim {
	if rapid.Bool().Draw(t, "a sample") {
		return rapid.SampledFrom(samples).Draw(t, "sample")
	}
	var c screening.Claim
	for i := range b.Claims {
		f := &b.Claims[i]
		name := string(f.Name)
		if !f.Required && rapid.Bool().Draw(t, "leave out "+name) {
			continue
		}
		switch {
		case f.Trait && f.Name == screening.TraitType:
			if names := types.Builtin().Names(b.Kind); len(names) > 0 {
				c = c.WithTrait(name, rapid.SampledFrom(names).Draw(t, name))
			}
		case f.Trait && f.Name == screening.TraitDated:
			c = c.WithTrait(name, fmt.Sprint(rapid.IntRange(1920, 2020).Draw(t, name)))
		case f.Trait && len(f.Words) > 0:
			c = c.WithTrait(name, rapid.SampledFrom(f.Words).Draw(t, name).Text)
		case f.Trait:
		case f.Unit == quantity.Ratio:
			x := rapid.Float64Range(0.01, 0.3).Draw(t, name)
			c = c.WithRating(screening.RangeRating(f.Definition, -x, x))
		default:
			c = c.WithRating(screening.NominalRating(f.Definition, drawValue(t, name)))
		}
	}
	return c
}

// drawValue draws a positive value of any size that parts have.
func drawValue(t *rapid.T, name string) float64 {
	return rapid.Float64Range(1, 10).Draw(t, name) * math.Pow10(rapid.IntRange(-12, 6).Draw(t, name+" decade"))
}

// withReadings adds readings at the conditions that the limits ask, half of them inside, and whatever else is seen.
func withReadings(t *rapid.T, b *screening.Rulebook, p screening.Part) screening.Part {
	p.Treated = rapid.IntRange(0, 2).Draw(t, "treated")
	for _, check := range b.Look {
		if rapid.IntRange(0, 9).Draw(t, check.Name) == 0 {
			p.Look = append(p.Look, screening.Observation{Check: check.Name, Fault: true})
		}
	}
	j, err := screening.Judge(b, p, screening.DefaultPolicy())
	if err != nil {
		return p
	}
	for i := range j.Findings {
		l := j.Findings[i].Limit
		x := drawValue(t, "reading")
		switch inside := rapid.Bool().Draw(t, "inside"); {
		case !inside:
		case !math.IsInf(l.Low, -1) && !math.IsInf(l.High, 1):
			x = (l.Low + l.High) / 2
		case !math.IsInf(l.High, 1):
			x = l.High / 2
		case !math.IsInf(l.Low, -1):
			x = l.Low * 2
		}
		p.Readings = append(p.Readings, screening.Reading{Of: l.On, Section: l.Section, Unit: l.Unit, Value: x, At: l.At})
	}
	return p
}

// law draws parts until enough were judged: claims that contradict themselves are refused and prove nothing.
func law(t *testing.T, b *screening.Rulebook, why string, change func(*rapid.T, *screening.Part)) {
	t.Helper()
	judged, from := 0, samples(t, b)
	rapid.Check(t, func(t *rapid.T) {
		p := screening.Part{Kind: b.Kind, Claim: drawClaim(t, b, from)}
		change(t, &p)
		if mustBeBarred(t, b, withReadings(t, b, p), why) {
			judged++
		}
	})
	if judged < 10 {
		t.Errorf("%s: only %d of the parts drawn could be judged", b.Kind, judged)
	}
}

func mustBeBarred(t *rapid.T, b *screening.Rulebook, p screening.Part, why string) bool {
	judged := false
	for _, policy := range []screening.Policy{screening.DefaultPolicy(), {Rule: screening.SimpleAcceptance, Meters: map[string]screening.Meter{"": screening.ExactMeter()}}} {
		j, err := screening.Judge(b, p, policy)
		if err == nil && j.Verdict != screening.Barred {
			t.Fatalf("%s, %s: %s\n%v\n%v", b.Kind, why, j.Verdict, p.Claim, p.Readings)
		}
		judged = judged || err == nil
	}
	return judged
}

// Across the mains or cracked, no part of any kind is anything but barred, whatever it claims, reads, and shows besides.
func TestNoReadingPassesAPartForTheMainsOrACrackedOne(t *testing.T) {
	for _, b := range rules.All() {
		t.Run(string(b.Kind), func(t *testing.T) { heldByEye(t, b, "across the mains or cracked", []string{"mains", "cracked"}) })
	}
}

// barredAsSuch are kinds that are refused whatever they claim.
var barredAsSuch = []screening.Kind{"mains-capacitor", "selenium"}

func TestNoReadingPassesAKindThatIsBarredAsSuch(t *testing.T) {
	kinds := rules.All()
	for _, kind := range barredAsSuch {
		t.Run(string(kind), func(t *testing.T) {
			b, ok := kinds.Find(kind)
			if !ok {
				t.Fatalf("there is no kind %s", kind)
			}
			law(t, b, "barred as such", func(*rapid.T, *screening.Part) {})
		})
	}
}

// A part of an always-barred family is barred whatever it claims, reads, and shows besides; told by eye or by its claim.
func TestNoReadingPassesAPartOfABarredFamily(t *testing.T) {
	kinds := rules.All()
	for _, f := range family.Builtin() {
		if !f.Always() {
			continue
		}
		for _, kind := range f.Kinds {
			b, ok := kinds.Find(kind)
			if !ok {
				t.Errorf("%s is about %s, which is no kind", f.ID, kind)
				continue
			}
			if f.Check.Name != "" {
				words := append(slices.Clone(f.Check.Words), f.Check.Name)
				t.Run(f.ID+" "+string(kind)+" by eye", func(t *testing.T) { heldByEye(t, b, f.ID, words) })
			}
			if claims := telling(t, b, f); claims != nil {
				t.Run(f.ID+" "+string(kind)+" by claim", func(t *testing.T) { heldByClaim(t, b, f, claims) })
			} else if f.Check.Name == "" {
				t.Errorf("%s: nothing that a %s can claim or show tells it", f.ID, kind)
			}
		}
	}
}

func heldByEye(t *testing.T, b *screening.Rulebook, why string, words []string) {
	for _, w := range words {
		i := slices.IndexFunc(b.Look, func(c screening.Check) bool { return c.Name == w || slices.Contains(c.Words, w) })
		if i < 0 {
			t.Fatalf("%s: nothing to see is called %q", b.Kind, w)
		}
		law(t, b, why, func(_ *rapid.T, p *screening.Part) {
			p.Look = append(p.Look, screening.Observation{Check: b.Look[i].Name, Fault: true})
		})
	}
}

// telling lists claims that a kind can make and that tell the family: its type numbers, or the words of its traits.
func telling(t *testing.T, b *screening.Rulebook, f family.Family) []screening.Claim {
	var claims []screening.Claim
	for _, pattern := range f.Types {
		for _, digit := range "0123456789" {
			name := ""
			for _, r := range pattern {
				switch r {
				case '?':
					name += string(digit)
				case '*':
				default:
					name += string(r)
				}
			}
			claims = append(claims, screening.Claim{}.WithTrait(screening.TraitType, name))
		}
	}
	for i := range b.Claims {
		field := &b.Claims[i]
		for _, w := range field.Words {
			c := screening.Claim{}.WithTrait(string(field.Name), w.Text)
			if f.Types == nil && f.Holds(b.Kind, c) {
				claims = append(claims, c)
			}
		}
	}
	return claims
}

func heldByClaim(t *testing.T, b *screening.Rulebook, f family.Family, claims []screening.Claim) {
	law(t, b, f.ID, func(t *rapid.T, p *screening.Part) {
		for _, trait := range rapid.SampledFrom(claims).Draw(t, "what tells it").Traits {
			p.Claim = p.Claim.WithTrait(trait.Name, trait.Text)
		}
		if f.Before != 0 {
			p.Claim = p.Claim.WithTrait(screening.TraitDated, rapid.SampledFrom([]string{"", "1955", "1978", "197x"}).Draw(t, "dated"))
		}
		for _, u := range f.Unless {
			p.Claim = p.Claim.WithTrait(u.Name, "")
		}
	})
}

// A kind has one digit key for each thing to look for.
func TestEveryLookHasAKey(t *testing.T) {
	for _, b := range rules.All() {
		if len(b.Look) > screening.MaxLook {
			t.Errorf("%s: %d things to look for; there are %d keys", b.Kind, len(b.Look), screening.MaxLook)
		}
		seen := map[string]bool{}
		for _, c := range b.Look {
			for _, w := range append(slices.Clone(c.Words), c.Name) {
				if seen[w] && !slices.Contains(c.Words, c.Name) {
					t.Errorf("%s: %q reports two things", b.Kind, w)
				}
				seen[w] = true
			}
		}
	}
}

// A sound dipped tantalum bead is accepted, says where not to use it, and is barred there and not at a timing position.
func TestASoundTantalumBeadIsNotBarredAtATimingPosition(t *testing.T) {
	b, ok := rules.All().Find("tantalum")
	if !ok {
		t.Fatal("there is no kind tantalum")
	}
	j := booktest.Judge(t, b, "10uF 16V bead 1978 capacitance=9.8uF resistance=OL seen=nothing", screening.DefaultPolicy())
	if j.Verdict != screening.Accept {
		t.Fatalf("%s\n%s", j.Verdict, booktest.Texts(j))
	}
	if !slices.ContainsFunc(j.Untested, func(s string) bool { return strings.HasPrefix(s, "not for: low-impedance rails") }) {
		t.Errorf("it does not say where not to use it: %q", j.Untested)
	}
	for _, tt := range []struct {
		at     family.Position
		barred bool
	}{
		{family.Position{Role: "timing", Voltage: 5}, false},
		{family.Position{Role: "rail-decoupling", Voltage: 12}, true},
		{family.Position{Role: "rail-decoupling", Voltage: 5, SeriesResistance: 10}, false},
	} {
		if stops := family.Barred(family.Builtin(), b.Kind, j.Claim, tt.at); len(stops) > 0 != tt.barred {
			t.Errorf("%+v: %+v", tt.at, stops)
		}
	}
}

func BenchmarkBarred(b *testing.B) {
	families, c := family.Builtin(), screening.Claim{}.WithTrait(screening.TraitType, "BC547B").WithTrait(screening.TraitMaterial, "si")
	b.ReportAllocs()
	for b.Loop() {
		family.Barred(families, "bipolar", c, family.Position{})
	}
}
