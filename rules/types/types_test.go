package types

import (
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

func TestEveryTableLoads(t *testing.T) {
	if _, err := read(); err != nil {
		t.Fatal(err)
	}
	want := map[screening.Kind]int{Bipolar: 99, Diode: 54, Zener: 37 + 37 + 27}
	for kind, n := range want {
		if got := len(Builtin().Names(kind)); got != n {
			t.Errorf("%s: %d types, want %d", kind, got, n)
		}
	}
}

func TestEveryFigureHasASourceAndAStatus(t *testing.T) {
	check := func(typ string, r screening.Rating) {
		if r.Source.Document == "" || r.Source.Status == screening.NoStatus {
			t.Errorf("%s %s: source %+v", typ, r.Of, r.Source)
		}
	}
	for kind, rows := range Builtin().content().rows {
		for _, row := range rows {
			for _, r := range slices.Concat(row.Ratings, row.Points) {
				check(row.Type, r)
			}
			for _, g := range row.Groups {
				check(row.Type+" "+g.Name, g.Gain)
				for _, r := range g.Points {
					check(row.Type+" "+g.Name, r)
				}
			}
			if row.Trait(screening.TraitType) != row.Type {
				t.Errorf("%s %s: trait type is %q", kind, row.Type, row.Trait(screening.TraitType))
			}
		}
	}
}

// same compares one figure of a row with the reference's cell in its unit; an empty cell must be absent.
func same(t *testing.T, name, what, cell string, scale, got float64, present bool) {
	t.Helper()
	if cell == "" {
		if present && !math.IsInf(got, 0) && !math.IsNaN(got) {
			t.Errorf("%s %s: %g, and the reference has none", name, what, got)
		}
		return
	}
	want := booktest.Number(t, cell, math.NaN()) * scale
	if !present || math.Abs(got-want) > 1e-9*math.Abs(want) {
		t.Errorf("%s %s: %g, reference %g", name, what, got, want)
	}
}

func (r Row) nominal(of screening.Characteristic) (float64, bool) {
	x, ok := r.Rating(of)
	return x.Nominal, ok
}

func (r Row) most(of screening.Characteristic) (float64, bool) {
	x, ok := r.Rating(of)
	return x.High, ok
}

func TestTransistorsEqualTheReference(t *testing.T) {
	for _, ref := range booktest.Reference(t, "testdata/types-ref.csv", 99) {
		name := ref["type"]
		row, ok := Builtin().Lookup(Bipolar, name)
		if !ok {
			t.Errorf("%s is not in the table", name)
			continue
		}
		for of, column := range map[screening.Characteristic]string{
			"vceo": "vceo_v", "vcbo": "vcbo_v", "vebo": "vebo_v", "ic-max": "ic_a", "ptot": "ptot_w",
		} {
			got, ok := row.nominal(of)
			same(t, name, column, ref[column], 1, got, ok)
		}
		ft, hasFT := row.nominal("ft")
		same(t, name, "fT", ref["ft_mhz"], 1e6, ft, hasFT)
		gain, hasGain := row.Rating("hfe")
		same(t, name, "hFE min", ref["hfe_min"], 1, gain.Low, hasGain)
		same(t, name, "hFE max", ref["hfe_max"], 1, gain.High, hasGain)
		ic, hasIC := gain.At.Get(screening.IC)
		same(t, name, "hFE at IC", ref["hfe_ic_ma"], 1e-3, ic, hasIC)
		vce, hasVCE := gain.At.Get(screening.VCE)
		if vcb, ok := gain.At.Get(screening.VCB); ok {
			vce, hasVCE = vcb, true // AC128: the sheet's 0 V is collector to base
		}
		same(t, name, "hFE at VCE", ref["hfe_vce_v"], 1, vce, hasVCE)
		icbo, hasICBO := row.most("icbo")
		same(t, name, "ICBO", ref["icbo_max_a"], 1, icbo, hasICBO)
		leak, _ := row.Rating("icbo")
		vcb, hasVCB := leak.At.Get(screening.VCB)
		same(t, name, "ICBO at", ref["icbo_v"], 1, vcb, hasVCB)
		want := map[string]string{
			"polarity": strings.ToLower(ref["pol"]), "material": strings.ToLower(ref["mat"]), "case": ref["package"], "pinout": ref["pinout"],
			"darlington": strconv.FormatBool(strings.Contains(ref["note"], "DARLINGTON")),
		}
		got := map[string]string{
			"polarity": row.Trait("polarity"), "material": row.Trait("material"), "case": row.Trait("case"), "pinout": row.Trait("pinout"),
			"darlington": strconv.FormatBool(row.Darlington),
		}
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("%s (-reference +table):\n%s", name, diff)
		}
		sameStatus(t, name, ref["tag"], row)
	}
}

// quotedPages are rows tagged as seen whose text was a reference page quoting a sheet, not the sheet.
var quotedPages = []string{"AC128", "OC72"}

func sameStatus(t *testing.T, name, tag string, row Row) {
	t.Helper()
	want := screening.Published
	switch {
	case tag == "MEMORY":
		want = screening.FromMemory
	case slices.Contains(quotedPages, name):
		want = screening.SecondHand
	}
	if row.Source.Status != want {
		t.Errorf("%s: status %s, tag %s asks for %s", name, row.Source.Status, tag, want)
	}
}

func TestDiodesEqualTheReference(t *testing.T) {
	for _, ref := range booktest.Reference(t, "testdata/diode-ref.csv", 54) {
		name := ref["type"]
		row, ok := Builtin().Lookup(Diode, name)
		if !ok {
			t.Errorf("%s is not in the table", name)
			continue
		}
		for of, column := range map[screening.Characteristic]string{"vrrm": "vrrm_v", "if-av": "if_av_a", "ifsm": "ifsm_a"} {
			got, ok := row.nominal(of)
			same(t, name, column, ref[column], 1, got, ok)
		}
		vf, _ := row.Rating("vf")
		same(t, name, "VF", ref["vf_max_v"], 1, vf.High, true)
		at, ok := vf.At.Get(screening.Current)
		same(t, name, "VF at", ref["vf_at_a"], 1, at, ok)
		ir, _ := row.Rating("ir")
		same(t, name, "IR", ref["ir_max_a"], 1, ir.High, true)
		at, ok = ir.At.Get(screening.Voltage)
		same(t, name, "IR at", ref["vr_v"], 1, at, ok)
		trr, ok := row.most("trr")
		same(t, name, "trr", ref["trr_ns"], 1e-9, trr, ok)
		if row.Trait("material") != strings.ToLower(ref["mat"]) || row.Trait("case") != ref["package"] || row.Trait("technology") == "" {
			t.Errorf("%s: traits %v", name, row.Traits)
		}
		sameStatus(t, name, ref["tag"], row)
	}
}

func TestZenersEqualTheReference(t *testing.T) {
	for _, ref := range booktest.Reference(t, "testdata/zener-ref.csv", 74) {
		name := ref["type"]
		row, ok := Builtin().Lookup(Zener, name)
		if !ok {
			t.Errorf("%s is not in the table", name)
			continue
		}
		vz, _ := row.Rating("vz")
		same(t, name, "VZ", ref["vz_nom"], 1, vz.Nominal, true)
		same(t, name, "VZ min", ref["vz_min"], 1, vz.Low, true)
		same(t, name, "VZ max", ref["vz_max"], 1, vz.High, true)
		izt, ok := vz.At.Get(screening.Current)
		same(t, name, "IZT", ref["izt_ma"], 1e-3, izt, ok)
		zz, ok := row.most("zz")
		same(t, name, "rz", ref["zzt_max_ohm"], 1, zz, ok)
		ir, ok := row.Rating("ir")
		same(t, name, "IR", ref["ir_max_ua"], 1e-6, ir.High, ok)
		vr, ok := ir.At.Get(screening.Voltage)
		same(t, name, "VR", ref["vr_v"], 1, vr, ok)
		izm, ok := row.nominal("izm")
		same(t, name, "IZM", ref["izm_ma"], 1e-3, izm, ok)
		ptot, ok := row.nominal("ptot")
		same(t, name, "Ptot", ref["ptot_w"], 1, ptot, ok)
		knee := slices.IndexFunc(row.Ratings, func(r screening.Rating) bool {
			at, _ := r.At.Get(screening.Current)
			return r.Of == "zz" && at != izt
		})
		if (knee >= 0) != (ref["zzk_max_ohm"] != "") {
			t.Errorf("%s: rzk present %v, reference %q", name, knee >= 0, ref["zzk_max_ohm"])
		}
		if knee >= 0 {
			at, _ := row.Ratings[knee].At.Get(screening.Current)
			same(t, name, "rzk", ref["zzk_max_ohm"], 1, row.Ratings[knee].High, true)
			same(t, name, "IZK", ref["izk_ma"], 1e-3, at, true)
		}
		low, high, _ := strings.Cut(ref["tc_pct_per_k"], "..")
		same(t, name, "TC low", low, 0.01, row.TempCoLow, true)
		same(t, name, "TC high", strings.TrimPrefix(high, "+"), 0.01, row.TempCoHigh, true)
		if row.Source.Status != screening.Published {
			t.Errorf("%s: status %s, want published", name, row.Source.Status)
		}
	}
}

// TestAgainstASecondTable holds the table against a schematic editor's symbol texts (kicad-symbols 6.0.10). Of 41 types in both, these
// seven differ in collector current or voltage, each with its reason; BC517 agrees but is not independent.
func TestAgainstASecondTable(t *testing.T) {
	differing := map[string]string{
		"BC107": "the other table gives VCES 50 V", "BC108": "the other table gives VCES 30 V", "BC109": "0.2 A and 25 V there",
		"PN2222A": "1 A there", "S8050": "0.7 A and 20 V there", "S8550": "0.7 A and 20 V there", "BF199": "0.05 A there",
	}
	var found []string
	for _, ref := range booktest.Reference(t, "testdata/types-crosscheck.csv", 41) {
		name := ref["type"]
		row, ok := Builtin().Lookup(Bipolar, name)
		if !ok {
			t.Errorf("%s is not in the table", name)
			continue
		}
		ic, _ := row.nominal("ic-max")
		vceo, _ := row.nominal("vceo")
		agrees := ic == booktest.Number(t, ref["ic_kicad"], math.NaN()) && vceo == booktest.Number(t, ref["vceo_kicad"], math.NaN())
		if !agrees {
			found = append(found, name)
		}
		if agrees != (ref["result"] == "agree") {
			t.Errorf("%s: agrees %v, the cross-check says %s", name, agrees, ref["result"])
		}
		if p := strings.ToLower(ref["pol_kicad"]); p != "" && p != row.Trait("polarity") {
			t.Errorf("%s: polarity %s, other table %s", name, row.Trait("polarity"), p)
		}
		if pins := strings.TrimSuffix(row.Trait("pinout"), "(case)"); pins != ref["pins_kicad"] {
			t.Errorf("%s: pins %s, other table %s", name, pins, ref["pins_kicad"])
		}
	}
	if len(found) != len(differing) {
		t.Errorf("types that differ: %v, want the seven named", found)
	}
	for _, name := range found {
		if differing[name] == "" {
			t.Errorf("%s differs and is not among the named exceptions", name)
		}
	}
}
