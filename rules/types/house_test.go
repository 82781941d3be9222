package types

import (
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// sheetClaim is what a house row claims: a type, further traits, and ratings.
func sheetClaim(typ string, traits map[string]string, ratings ...screening.Rating) screening.Claim {
	c := screening.Claim{Ratings: ratings}.WithTrait(screening.TraitType, typ)
	for name, text := range traits {
		c = c.WithTrait(name, text)
	}
	return c
}

func figure(of screening.Characteristic, unit quantity.Unit, low, high float64, at screening.Condition) screening.Rating {
	return screening.Rating{Of: of, At: at, Unit: unit, Nominal: notGiven, Low: low, High: high, Typed: "as typed"}
}

func volts(of screening.Characteristic, x float64) screening.Rating {
	return screening.Rating{Of: of, Unit: quantity.Volt, Nominal: x, Low: x, High: x, Typed: "as typed"}
}

var at2mA = screening.At(screening.IC, 2e-3).With(screening.VCE, 5)

func TestAHouseRowWinsFigureByFigure(t *testing.T) {
	own := HouseRow(Bipolar, sheetClaim("BC547", map[string]string{screening.TraitPinout: "E-B-C"}, figure("hfe", quantity.One, 300, 500, at2mA)), "", "read twice", "")
	table := Builtin().With([]Row{own})
	was, _ := Builtin().Lookup(Bipolar, "BC547")
	is, ok := table.Lookup(Bipolar, "bc547")
	if !ok || !is.House || was.House {
		t.Fatalf("%v, house %v, built-in %v", ok, is.House, was.House)
	}
	hfe, _ := is.Rating("hfe")
	if hfe.Low != 300 || hfe.High != 500 || hfe.Source.Status != screening.House || hfe.Source.Document != HouseDocument || hfe.Typed != "" {
		t.Errorf("gain %+v", hfe)
	}
	vceo, _ := is.Rating("vceo")
	before, _ := was.Rating("vceo")
	if vceo != before {
		t.Errorf("a figure that the house row does not state: %+v, was %+v", vceo, before)
	}
	if is.Trait(screening.TraitPinout) != "E-B-C" || is.Trait(screening.TraitPolarity) != "npn" || is.Note != "read twice" {
		t.Errorf("traits %v, note %q", is.Traits, is.Note)
	}
	for _, p := range is.Points {
		if p.Of == "hfe" {
			t.Errorf("a gain of the built-in sheet stays beside the house one: %+v", p)
		}
	}
	if g, _ := table.Lookup(Bipolar, "BC547B"); g.Group != "B" {
		t.Errorf("the group of a type with a house row: %q", g.Group)
	}
	if other, _ := table.Lookup(Bipolar, "BC557"); other.House {
		t.Error("another type is marked house")
	}
	if again, _ := Builtin().Lookup(Bipolar, "BC547"); cmp.Diff(was.Traits, again.Traits) != "" || again.House {
		t.Error("the built-in table was changed")
	}
}

func TestAHouseRowOfOneGroup(t *testing.T) {
	rows := []Row{
		HouseRow(Bipolar, sheetClaim("BC547", map[string]string{screening.TraitGroup: "B"}, figure("hfe", quantity.One, 180, 460, at2mA)), "", "", "a sheet"),
		HouseRow(Bipolar, sheetClaim("QX1", map[string]string{screening.TraitGroup: "R", screening.TraitPolarity: "pnp"},
			volts("vceo", 60), figure("hfe", quantity.One, 60, 120, at2mA)), "", "", ""),
		HouseRow(Bipolar, sheetClaim("QX1", map[string]string{screening.TraitGroup: "O"}, figure("hfe", quantity.One, 100, 200, at2mA)), "", "", ""),
	}
	table := Builtin().With(rows)
	b, _ := table.Lookup(Bipolar, "BC547B")
	g, _ := b.FindGroup("B")
	if g.Gain.Low != 180 || g.Gain.Source.Status != screening.House || g.Gain.Source.Document != "a sheet" {
		t.Errorf("group B: %+v", g.Gain)
	}
	a, _ := b.FindGroup("A")
	if a.Gain.Source.Status != screening.Published {
		t.Errorf("group A: %+v", a.Gain)
	}
	if all, _ := b.Rating("hfe"); all.Source.Status != screening.Published || all.Low != 110 {
		t.Errorf("the type's own gain: %+v", all)
	}
	own, ok := table.Lookup(Bipolar, "QX1-R")
	all, _ := own.Rating("hfe")
	vceo, _ := own.Rating("vceo")
	if !ok || own.Group != "R" || len(own.Groups) != 2 || all.Low != 60 || all.High != 200 || vceo.Low != 60 || own.Trait(screening.TraitPolarity) != "pnp" {
		t.Errorf("a new type by its groups: %v %+v", ok, own)
	}
}

func TestAHouseRowNamedLikeOneGroupTakesThatGroupsGain(t *testing.T) {
	table := Builtin().With([]Row{HouseRow(Bipolar, sheetClaim("BC547B", nil, volts("vceo", 40)), "", "", "")})
	row, _ := table.Lookup(Bipolar, "BC547B")
	hfe, _ := row.Rating("hfe")
	vceo, _ := row.Rating("vceo")
	if row.Type != "BC547B" || row.Group != "" || hfe.Low != 200 || hfe.High != 450 || vceo.Low != 40 {
		t.Errorf("%s group %q: gain %g to %g, vceo %g", row.Type, row.Group, hfe.Low, hfe.High, vceo.Low)
	}
	if other, _ := table.Lookup(Bipolar, "BC547C"); other.Type != "BC547" || other.Group != "C" {
		t.Errorf("the other groups: %s %s", other.Type, other.Group)
	}
}

func TestAliasesAndLaterRowsOfAHouseTable(t *testing.T) {
	table := Builtin().With([]Row{
		HouseRow(Diode, sheetClaim("D1", nil, volts("vrrm", 100)), "KD1", "", ""),
		HouseRow(Diode, sheetClaim("D1", nil, volts("vrrm", 200)), "", "", ""),
		HouseRow("led", sheetClaim("L1", map[string]string{screening.TraitGroup: "X"}), "", "", ""),
	})
	row, ok := table.Lookup(Diode, "kd1")
	vrrm, _ := row.Rating("vrrm")
	if !ok || row.Type != "D1" || vrrm.Low != 200 {
		t.Errorf("%v %s %g V", ok, row.Type, vrrm.Low)
	}
	if n := len(table.Names(Diode)); n != len(Builtin().Names(Diode))+1 {
		t.Errorf("%d names", n)
	}
	if led, ok := table.Lookup("led", "L1"); !ok || led.Group != "" || led.Trait(screening.TraitGroup) != "X" {
		t.Errorf("a group of a kind whose groups are rows of their own: %+v", led)
	}
}

// A verdict is stale when the rows of its kind changed, and only then.
func TestVersionsFollowTheRowsOfTheirKind(t *testing.T) {
	plain := Builtin()
	one := plain.With([]Row{HouseRow(Diode, sheetClaim("D1", nil, volts("vrrm", 100)), "", "", "")})
	other := plain.With([]Row{HouseRow(Diode, sheetClaim("D1", nil, volts("vrrm", 101)), "", "", "")})
	if plain.Version(Diode) == one.Version(Diode) || one.Version(Diode) == other.Version(Diode) {
		t.Error("a house row does not change the version")
	}
	if plain.Version(Bipolar) != one.Version(Bipolar) {
		t.Error("a diode changes the version of transistors")
	}
	if plain.Version() == one.Version() {
		t.Error("a house row does not change the version of the whole")
	}
	if plain.With(nil) != plain || plain.Version(Diode) != Builtin().Version(Diode) {
		t.Error("no rows make another table")
	}
}

// Whatever a house table holds, every row of it is found by its name with its figures, and no other built-in row changes.
func TestEveryHouseRowIsFound(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var rows []Row
		names := append([]string{"BC547", "BC547B", "2N3904", "QX1", "QX1B", "BZX79-C5V1"}, rapid.SliceOfN(rapid.StringMatching("[A-Z0-9-]{1,8}"), 0, 3).Draw(t, "names")...)
		stated := map[string]float64{}
		for range rapid.IntRange(1, 5).Draw(t, "rows") {
			name, x := rapid.SampledFrom(names).Draw(t, "name"), rapid.Float64Range(1, 1000).Draw(t, "vceo")
			if fold(name) == "" {
				continue
			}
			stated[fold(name)] = x
			rows = append(rows, HouseRow(Bipolar, sheetClaim(name, nil, volts("vceo", x)), "", "", ""))
		}
		table := Builtin().With(rows)
		for _, r := range rows {
			row, ok := table.Lookup(Bipolar, r.Type)
			vceo, _ := row.Rating("vceo")
			if !ok || !row.House || vceo.Low != stated[fold(r.Type)] || vceo.Source.Status != screening.House {
				t.Fatalf("%s: %v, %+v", r.Type, ok, vceo)
			}
		}
		for _, name := range Builtin().Names(Bipolar) {
			if _, own := stated[fold(name)]; own {
				continue
			}
			if row, _ := table.Lookup(Bipolar, name); row.House {
				t.Fatalf("%s is marked house", name)
			}
		}
	})
}
