package bipolar

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

func TestEveryTypesLimitsEqualItsRow(t *testing.T) {
	for _, ref := range booktest.Reference(t, "../types/testdata/types-ref.csv", 99) {
		name := ref["type"]
		claim, _, err := builtin.complete(words("type=" + name))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		all, err := builtin.limits(claim)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		on := HFE.Name
		if ref["mat"] == "Ge" {
			on = HFENet.Name
		}
		type bounds struct {
			On        screening.Characteristic
			Low, High float64
			IC        float64
		}
		wantGain := bounds{on, booktest.Number(t, ref["hfe_min"], 0), booktest.Number(t, ref["hfe_max"], inf), booktest.Number(t, ref["hfe_ic_ma"], 0) * 1e-3}
		wantVBR := bounds{On: "vbr", Low: booktest.Number(t, ref["vceo_v"], 0), High: inf}
		wantICBO := bounds{On: "icbo", Low: -inf, High: booktest.Number(t, ref["icbo_max_a"], 0)}
		var spec, serviceable, breakdown, cutOff bool
		for _, l := range all {
			collector, _ := l.At.Get(screening.IC)
			got := bounds{l.On, l.Low, l.High, math.Round(collector*1e9) / 1e9}
			spec = spec || got == wantGain && l.Grade == screening.WithinSpec && !l.Soft
			serviceable = serviceable || got == wantGain && l.Grade == screening.Serviceable && l.Soft
			breakdown = breakdown || got == wantVBR && l.Need == screening.Wanted
			cutOff = cutOff || got == wantICBO && l.Need == screening.Wanted && l.Grade == screening.WithinSpec
		}
		if !spec || !serviceable || !breakdown || cutOff != (ref["icbo_max_a"] != "") {
			t.Errorf("%s: gain %v/%v, breakdown %v, ICBO %v", name, spec, serviceable, breakdown, cutOff)
		}
	}
}

// Under simple acceptance the bounds belong to the range (BC547 group B: 200 to 450 at 2 mA, 5 V).
func TestGainBoundaries(t *testing.T) {
	policy := booktest.Exactly()
	for gain, want := range map[float64]screening.Verdict{
		199.9: screening.Regrade, 200: screening.Accept, 450: screening.Accept, 450.1: screening.Regrade, 109.9: screening.Reject,
	} {
		part := screening.Part{Claim: words("type=BC547B"), Readings: []screening.Reading{
			read(VBE, 0.65, none), read(HFE, gain, at(ic, 2e-3, vce, 5.0)), atMost(read(ICEO, 0.1e-6, at(vce, 20.0))),
		}}
		j, err := screening.Judge(Book(types.Builtin()), part, policy)
		if err != nil || j.Verdict != want {
			t.Errorf("gain %g: %s (%v), want %s\n%s", gain, j.Verdict, err, want, texts(j))
		}
	}
}

func TestAPoorMeterNeverRejectsAMiddlingPart(t *testing.T) {
	policy := screening.DefaultPolicy()
	poor := screening.Accuracy{Relative: 0.5}
	policy.Meters = map[string]screening.Meter{"": {By: map[screening.Characteristic]screening.Accuracy{"hfe": poor, "vbe": poor, "iceo": poor}}}
	part := screening.Part{Claim: words("type=BC547B"), Readings: []screening.Reading{
		read(VBE, 0.65, none), read(HFE, 300, at(ic, 2e-3, vce, 5.0)), read(ICEO, 0.1e-6, at(vce, 20.0)),
	}}
	j, err := screening.Judge(Book(types.Builtin()), part, policy)
	if err != nil || j.Verdict == screening.Reject || j.Verdict == screening.Regrade {
		t.Errorf("verdict %s, %v\n%s", j.Verdict, err, texts(j))
	}
}

// Laws over all types: what is sound by its own row, measured at its own condition, is never rejected; and a gain far below the sheet's
// currents never rejects either, whatever it reads above one.
func TestSoundPartsAreNeverRejected(t *testing.T) {
	names := types.Builtin().Names(Kind)
	rapid.Check(t, func(rt *rapid.T) {
		name := rapid.SampledFrom(names).Draw(rt, "type")
		c, _, err := builtin.complete(words("type=" + name))
		if err != nil {
			rt.Fatal(err)
		}
		p := builtin.promiseOf(c)
		promised, _ := c.Rating(HFE.Name, "")
		high := math.Min(promised.High, 4*promised.Low)
		gain := rapid.Float64Range(promised.Low*1.2, math.Max(promised.Low*1.2, high*0.85)).Draw(rt, "gain")
		band := figures()[p.vbeFigure()]
		vbe := rapid.Float64Range(band.low+0.05, band.high-0.05).Draw(rt, "vbe")
		away := rapid.Bool().Draw(rt, "away from the sheet's current")
		where := promised.At
		if away {
			where = at(ic, 3e-6, vce, 5.0) // below every current that a sheet prints
			gain = rapid.Float64Range(1.5, 2*promised.Low).Draw(rt, "low gain")
		}
		j, err := screening.Judge(Book(types.Builtin()), screening.Part{Claim: words("type=" + name), Readings: []screening.Reading{
			read(VBE, vbe, none), read(HFE, gain, where), read(ICEO, 1e-6, at(vce, 9.0, warm, 22.0)),
		}}, screening.DefaultPolicy())
		if err != nil {
			rt.Fatal(err)
		}
		if j.Verdict == screening.Reject || j.Verdict == screening.Regrade {
			rt.Errorf("%s with gain %g at %s, VBE %g: %s\n%s", name, gain, where, vbe, j.Verdict, texts(j))
		}
	})
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "BC547B vbe=0.65 hfe@ic=2mA,vce=5V=290 iceo@20V=..0.1uA")
}

// A gain limit that asks the same at both grades is shown once, unless the reading is sure enough for one of them only.
func TestEveryGainLimitIsShownOnce(t *testing.T) {
	for _, tt := range []struct {
		name     string
		claim    screening.Claim
		readings []screening.Reading
		rows     int
	}{
		{"TIP122, nothing measured: 0.5 A and 3 A", words("type=TIP122"), nil, 2},
		{"2N3904 at 180: 0.1, 1, 10, 50 and 100 mA", words("type=2N3904"), []screening.Reading{read(HFE, 180, at(ic, 10e-3, vce, 1.0))}, 5},
		{"BC547B that fails", words("type=BC547B"), []screening.Reading{read(HFE, 60, at(ic, 2e-3, vce, 5.0))}, 1},
		{"BC547B near its lower bound: serviceable, and not surely more", words("type=BC547B"), []screening.Reading{read(HFE, 205, at(ic, 2e-3, vce, 5.0))}, 2},
	} {
		j := judge(t, tt.claim, tt.readings...)
		rows := 0
		for i := range j.Findings {
			if l := &j.Findings[i].Limit; l.Criterion == CriterionGain && l.At.Has(screening.IC) && l.Source != figures()["gain-lamp"].source {
				rows++
			}
		}
		if rows != tt.rows {
			t.Errorf("%s: %d limits on gain, want %d", tt.name, rows, tt.rows)
		}
	}
	near := judge(t, words("type=BC547B"), read(VBE, 0.65, none), read(HFE, 205, at(ic, 2e-3, vce, 5.0)), atMost(read(ICEO, 0.1e-6, at(vce, 20.0))))
	if near.Verdict != screening.Accept || near.Grade != screening.Serviceable || !strings.Contains(texts(near), "near its limit") {
		t.Errorf("205 of at least 200: %s %s\n%s", near.Verdict, near.Grade, texts(near))
	}
}

// How far blocking was proved is said once: the gap in the breakdown limit is listed only where nothing was proved.
func TestBlockingIsSaidOnce(t *testing.T) {
	for _, tt := range []struct {
		name     string
		readings []screening.Reading
		listed   bool
	}{
		{"nothing measured", nil, true},
		{"leakage at 20 V", []screening.Reading{atMost(read(ICEO, 1e-6, at(vce, 20.0)))}, false},
		{"blocks 30 V", []screening.Reading{atLeast(read(screening.VBR, 30, none))}, false},
	} {
		j := judge(t, words("type=2N3904"), tt.readings...)
		if got := slices.ContainsFunc(j.NotTested, func(g screening.Gap) bool { return g.Of == screening.VBR.Name }); got != tt.listed {
			t.Errorf("%s: not tested %+v, untested %q", tt.name, j.NotTested, j.Untested)
		}
	}
}

func TestUntested(t *testing.T) {
	for _, tt := range []struct {
		name     string
		claim    screening.Claim
		readings []screening.Reading
		want     []string
	}{
		{
			"gain at the sheet's current, leakage at 20 V", words("type=2N3904"),
			[]screening.Reading{read(HFE, 180, at(ic, 10e-3, vce, 1.0)), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			[]string{"collector to emitter not tested above 20 V (rated 40 V)"},
		},
		{
			"a gain that fails was tested", words("type=BC547C"),
			[]screening.Reading{read(HFE, 300, at(ic, 2e-3, vce, 5.0))},
			nil,
		},
		{
			"gain elsewhere", words("type=2N2222"),
			[]screening.Reading{read(HFE, 70, at(ic, 1e-3, vce, 5.0))},
			[]string{"gain not tested at IC 150 mA, VCE 10 V"},
		},
		{
			"blocks to its rating", words("type=2N3904"), []screening.Reading{atLeast(read(screening.VBR, 40, none))}, nil,
		},
		{
			"no rating known", words("polarity=npn"),
			[]screening.Reading{atMost(read(ICEO, 1e-6, at(vce, 9.0)))},
			[]string{"collector to emitter not tested above 9 V (no rating known)"},
		},
		{
			"leakage that fails proves no blocking", words("type=2N3904"), []screening.Reading{read(ICEO, 1e-3, at(vce, 20.0))}, nil,
		},
	} {
		if got := judge(t, tt.claim, tt.readings...).Untested; !slices.Equal(got, tt.want) {
			t.Errorf("%s: %q, want %q", tt.name, got, tt.want)
		}
	}
}
