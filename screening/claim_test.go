package screening_test

import (
	"math"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func sectioned(d screening.Definition, section string, x float64) screening.Rating {
	r := screening.NominalRating(d, x)
	r.Section = section
	return r
}

func TestClaimPrintsAsOnTheBag(t *testing.T) {
	table := screening.NominalRating(screening.RatedVoltage, 40)
	table.Source = screening.Source{Document: "a type table", Status: screening.Published}
	can := func(c1, c2, v1, v2 float64) screening.Claim {
		return screening.Claim{Ratings: []screening.Rating{
			sectioned(screening.Capacitance, "1", c1), sectioned(screening.RatedVoltage, "1", v1),
			sectioned(screening.Capacitance, "2", c2), sectioned(screening.RatedVoltage, "2", v2),
		}}
	}
	for _, c := range []struct {
		name  string
		claim screening.Claim
		want  string
	}{
		{"numbers first, then words", screening.Claim{}.WithTrait("dated", "1974").
			WithRating(screening.NominalRating(screening.Capacitance, 2200e-6)).
			WithRating(screening.RangeRating(screening.Tolerance, -0.2, 0.2)), "2200 µF ±20 % 1974"},
		{"an asymmetric tolerance", screening.Claim{}.WithRating(screening.RangeRating(screening.Tolerance, -0.1, 0.5)), "-10/+50 %"},
		{"what a table supplied is left out", screening.Claim{}.WithTrait("type", "2N3904").WithRating(table), "2N3904"},
		{"sections of one voltage", can(32e-6, 32e-6, 350, 350), "32+32 µF 350 V"},
		{"sections of two voltages", can(50e-6, 25e-6, 350, 25), "50+25 µF 350+25 V"},
		{"a minimum", screening.Claim{}.WithRating(screening.RangeRating(screening.VBR, 100, math.Inf(1))), "≥ 100 V"},
		{"nothing", screening.Claim{}, ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			if got := c.claim.String(); got != c.want {
				t.Errorf("%q; want %q", got, c.want)
			}
		})
	}
}

func TestYearOfADate(t *testing.T) {
	for text, want := range map[string]int{"1974": 1974, "197x": 1979, "1974-06": 1974, "74": 0, "xxxx": 0, "": 0, "0012": 0} {
		year, ok := screening.Claim{}.WithTrait(screening.TraitDated, text).Year()
		if ok != (want != 0) || ok && year != want {
			t.Errorf("%q is %d, %v; want %d", text, year, ok, want)
		}
	}
}

func TestASectionTakesTheWholePartsRatingWhereItHasNone(t *testing.T) {
	c := screening.Claim{}.WithRating(screening.NominalRating(screening.RatedVoltage, 450)).
		WithRating(sectioned(screening.Capacitance, "1", 8e-6)).WithRating(sectioned(screening.Capacitance, "2", 16e-6))
	if v, ok := c.Nominal(screening.RatedVoltage.Name, "2"); !ok || v != 450 {
		t.Errorf("voltage of section 2: %v, %v", v, ok)
	}
	if x, ok := c.Nominal(screening.Capacitance.Name, "2"); !ok || x != 16e-6 {
		t.Errorf("capacitance of section 2: %v, %v", x, ok)
	}
	if got := c.Sections(); len(got) != 2 || got[0] != "1" || got[1] != "2" {
		t.Errorf("sections %v", got)
	}
	if before := c.String(); c.WithTrait("dated", "1974").WithTrait("dated", "").String() != before || c.String() != before {
		t.Error("a claim is changed by what is built from it")
	}
}

func TestDecisiveReasonsComeFirstAndNotesLast(t *testing.T) {
	book := toy()
	book.Complete = func(c screening.Claim) (screening.Claim, []screening.Reason, error) {
		return c, []screening.Reason{{Code: screening.CodeNote, Text: "a default was taken"}}, nil
	}
	for _, c := range []struct {
		name string
		part screening.Part
		code string
	}{
		{"accepted", toyPart(100, 1e-4, 0.7), screening.CodePasses},
		{"rejected", toyPart(100, 1e-4, 0.2), screening.CodeFails},
		{"to be treated", toyPart(100, 5e-3, 0.7), screening.CodeUntreated},
		{"undecided", toyPart(100, math.NaN(), 0.7), screening.CodeMeasure},
	} {
		t.Run(c.name, func(t *testing.T) {
			j, err := screening.Judge(book, c.part, relative(0.001))
			if err != nil {
				t.Fatal(err)
			}
			if j.Reasons[0].Code != c.code || j.Reasons[len(j.Reasons)-1].Code != screening.CodeNote {
				t.Errorf("reasons %+v", j.Reasons)
			}
			if untested := len(j.NotTested) > 0; untested != (j.Verdict != screening.Reject) {
				t.Errorf("%v lists as not tested %v", j.Verdict, j.NotTested)
			}
		})
	}
}

func TestAConditionThatIsNotStatedIsAskedFor(t *testing.T) {
	book := toy()
	limits := book.Limits
	book.Limits = func(c screening.Claim) ([]screening.Limit, error) {
		all, err := limits(c)
		all[3].At = screening.At(screening.PartTemperature, 25)
		return all, err
	}
	j, _ := screening.Judge(book, toyPart(100, 1e-4, 0.7), relative(0.001))
	if got := j.Next[0].Text; got != "STATE the temperature of the reading: quick value" {
		t.Errorf("the step is %q", got)
	}
	with := toyPart(100, 1e-4, 0.7, screening.Reading{Of: "temperature", Unit: quantity.Celsius, Value: 25})
	if j, _ := screening.Judge(book, with, relative(0.001)); j.Verdict != screening.Accept {
		t.Errorf("with the ambient stated the verdict is %v", j.Verdict)
	}
}
