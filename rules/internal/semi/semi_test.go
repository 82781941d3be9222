package semi

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestSignsAreDropped(t *testing.T) {
	at := screening.At(screening.VGS, -10).With(screening.ID, -1).With(screening.PartTemperature, -5)
	all, _ := Magnitudes(screening.Part{Readings: []screening.Reading{
		{Of: "vds-on", Value: -0.4, At: at},
		{Of: "vds-on", Value: 0.4},
		{Of: "vgs-off", Value: -8, Sense: quantity.AtLeast}, // no lower than -8 V is 8 V at most
		{Of: screening.Temperature.Name, Value: -3},
	}})
	if len(all) != 2 || all[0].Value != 0.4 || all[1].Value != 8 || all[1].Sense != quantity.AtMost {
		t.Fatalf("%+v", all)
	}
	for v, want := range map[screening.Variable]float64{screening.VGS: 10, screening.ID: 1, screening.PartTemperature: -5} {
		if got, _ := all[0].At.Get(v); got != want {
			t.Errorf("%s is %g, want %g", v, got, want)
		}
	}
	r := screening.RangeRating(screening.VGSOff, -8, -0.25)
	c := screening.Claim{Ratings: []screening.Rating{r}}
	u := Unsigned(c)
	if u.Ratings[0].Low != 0.25 || u.Ratings[0].High != 8 || c.Ratings[0].Low != -8 {
		t.Errorf("%+v of %+v", u, c)
	}
}

func TestCompletingKeepsWhatThePartClaims(t *testing.T) {
	table := screening.Source{Document: "a sheet", Status: screening.Published}
	row := types.Row{Type: "X1", Traits: []screening.Trait{{Name: "type", Text: "X1"}, {Name: TraitChannel, Text: N}, {Name: "pinout", Text: "D-G-S"}}}
	for _, v := range []float64{60, 5} {
		r := screening.NominalRating(screening.VDSS, v)
		if v == 5 {
			r = screening.RangeRating(screening.VGSTh, 1, 3)
		}
		r.Source = table
		row.Ratings = append(row.Ratings, r)
	}
	own := screening.NominalRating(screening.VDSS, 50)
	own.Typed = "50V"
	c, err := Complete(screening.Claim{Ratings: []screening.Rating{own}, Traits: []screening.Trait{{Name: "pinout", Text: "S-G-D"}}}, &row, screening.VDSS, TraitChannel)
	if v, _ := c.Rating(screening.VDSS.Name, ""); err != nil || v.Low != 50 || c.Trait("pinout") != "S-G-D" || c.Trait(TraitChannel) != N || len(c.Ratings) != 2 {
		t.Errorf("%+v, %v", c, err)
	}
	if again, err := Complete(c, &row, screening.VDSS, TraitChannel); err != nil || len(again.Ratings) != 2 || len(again.Traits) != len(c.Traits) {
		t.Errorf("twice: %+v, %v", again, err)
	}
	own.Low = 70
	if _, err := Complete(screening.Claim{Ratings: []screening.Rating{own}}, &row, screening.VDSS); err == nil || !strings.Contains(err.Error(), "70 V is claimed, but X1 is rated 60 V") {
		t.Errorf("%v", err)
	}
	if _, err := Complete(screening.Claim{Traits: []screening.Trait{{Name: TraitChannel, Text: P}}}, &row, screening.VDSS, TraitChannel); err == nil {
		t.Error("another channel was taken")
	}
}

func TestTableErrorsNameTheRow(t *testing.T) {
	const head = "name,low,high,at,source,clause,status,note\n"
	for text, want := range map[string]string{
		head + "a,2,1,,x,,house,\n":         "line 2, high: is not above low",
		head + "a,1,2,volts=9V,x,,house,\n": "line 2, at:",
		head + "a,1,2,vgs=9V,x,,rumour,\n":  "is no status",
		head + "a,1,2,vgs=9V,x,,house,ok\n": "",
	} {
		f, err := ReadFigures("t.csv", text)
		switch {
		case want == "" && (err != nil || f["a"].High != 2 || !f["a"].At.Has(screening.VGS)):
			t.Errorf("%v %v", f, err)
		case want != "" && (err == nil || !strings.Contains(err.Error(), want)):
			t.Errorf("%v, want %q", err, want)
		}
	}
}

func TestTypedVoltages(t *testing.T) {
	stands := StandsIn(quantity.Volt)
	for word, want := range map[string]float64{"60V": 60, "-100V": 100, "1kV": 1000, "60": 0, "0V": 0, ">60V": 0, "V": 0, "10A": 0} {
		low, high, ok := stands(word)
		if ok != (want > 0) || ok && (low != want || !math.IsInf(high, 1)) {
			t.Errorf("%s: %g %g %v", word, low, high, ok)
		}
	}
	for want, x := range map[string]float64{"0.5mA": 0, "500uA": 500e-6, "13.5mA": 13.5e-3, "1A": 1} {
		if x > 0 && Typed(x, quantity.Ampere) != want {
			t.Errorf("%g A is typed %s", x, Typed(x, quantity.Ampere))
		}
	}
}

// What a recipe tells people to type must read back as what was meant.
func TestWhatIsTypedReadsBack(t *testing.T) {
	for _, x := range []float64{180e-6, 0.5e-3, 13.5e-3, 0.42, 1, 30, 500, 1200} {
		for _, unit := range []quantity.Unit{quantity.Volt, quantity.Ampere} {
			v, err := quantity.Parse(Typed(x, unit), unit)
			if err != nil || math.Abs(v.Number-x) > 1e-9*x {
				t.Errorf("%g is typed %q and reads %g, %v", x, Typed(x, unit), v.Number, err)
			}
		}
	}
}
