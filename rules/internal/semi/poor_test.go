package semi_test

import (
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/igbt"
	"goodbin/rules/internal/booktest"
	"goodbin/rules/jfet"
	"goodbin/rules/mosfet"
	"goodbin/rules/thyristor"
	"goodbin/rules/types"
	"goodbin/screening"
)

// sound are parts whose true values lie inside every limit, from edge to edge; the words give everything else.
var sound = []struct {
	book  *screening.Rulebook
	words string
	of    screening.Definition
	at    screening.Condition
	truth [2]float64
}{
	{jfet.Book(types.Builtin()), "2N3819 vbr=OL rds-on=310", screening.VF, screening.Condition{}, [2]float64{0.45, 1}},
	{jfet.Book(types.Builtin()), "2N3819 vbr=OL vf=0.67", screening.RDSOn, screening.At(screening.VGS, 0), [2]float64{3, 50e3}},
	{jfet.Book(types.Builtin()), "BF245B vbr=OL vf=0.67 rds-on=310", screening.IDSS, screening.At(screening.VDS, 15), [2]float64{6e-3, 15e-3}},
	{jfet.Book(types.Builtin()), "2N3819 vf=0.67 rds-on=310", screening.IGSS, screening.At(screening.VGS, 15), [2]float64{1e-10, 2e-9}},
	{jfet.Book(types.Builtin()), "2N5457 vbr=OL vf=0.67 rds-on=310", screening.VGSOff, screening.At(screening.ID, 10e-9), [2]float64{0.5, 6}},
	{mosfet.Book(types.Builtin()), "2N7000 rgs=OL vbr=OL rds-on@vgs=9V=2", mosfet.VSD, screening.Condition{}, [2]float64{0.3, 0.9}},
	{mosfet.Book(types.Builtin()), "2N7000 rgs=OL vbr=OL vsd=0.55", screening.RDSOn, screening.At(screening.VGS, 10), [2]float64{0.1, 5}},
	{mosfet.Book(types.Builtin()), "IRF540N rgs=OL vbr=OL vsd=0.55", screening.RDSOn, screening.At(screening.VGS, 10), [2]float64{10e-3, 44e-3}},
	{
		mosfet.Book(types.Builtin()), "IRF540N rgs=OL vbr=OL vsd=0.55", mosfet.VDSOn,
		screening.At(screening.VGS, 10).With(screening.ID, 1),
		[2]float64{10e-3, 44e-3},
	},
	{igbt.Book(types.Builtin()), "IRG4BC20U rge=OL vbr=OL vf=OL", igbt.VCEOn, screening.At(screening.IC, 0.4).With(screening.VGE, 12), [2]float64{0.4, 3}},
	{thyristor.Book(types.Builtin()), "BT151 vbo=OL vbr=OL vt@0.4A=0.9", thyristor.IGT, screening.Condition{}, [2]float64{0.5e-3, 15e-3}},
	{thyristor.Book(types.Builtin()), "BT151 vbo=OL vbr=OL igt=..13.5mA", thyristor.VT, screening.At(screening.Current, 0.4), [2]float64{0.5, 1.9}},
	{thyristor.TriacBook(types.Builtin()), "BT234 vbo=OL vbr=OL", thyristor.IH, screening.Condition{}, [2]float64{0.5e-3, 15e-3}},
}

// A meter that keeps its specification, however poor, never rejects a sound part.
func TestAPoorMeterNeverRejectsASoundPart(t *testing.T) {
	for _, tt := range sound {
		t.Run(string(tt.book.Kind)+" "+string(tt.of.Name), func(t *testing.T) {
			part := booktest.Part(t, tt.book, tt.words)
			rapid.Check(t, func(rt *rapid.T) {
				poor := screening.Accuracy{Relative: rapid.Float64Range(0.001, 0.3).Draw(rt, "meter")}
				policy := screening.DefaultPolicy()
				policy.Meters = map[string]screening.Meter{"": screening.AssumedMeter(), "poor": {By: map[screening.Characteristic]screening.Accuracy{tt.of.Name: poor}}}
				truth := rapid.Float64Range(tt.truth[0], tt.truth[1]).Draw(rt, "truth")
				// What it shows is off by what its specification allows of the reading itself.
				shown := truth / (1 - poor.Relative*rapid.Float64Range(-0.999, 0.999).Draw(rt, "error"))
				p := part
				p.Readings = append(p.Readings[:len(p.Readings):len(p.Readings)], screening.Reading{
					Of: tt.of.Name, Unit: tt.of.Unit, Value: shown, At: tt.at, Meter: "poor",
				})
				j, err := screening.Judge(tt.book, p, policy)
				if err != nil {
					rt.Fatal(err)
				}
				if j.Verdict == screening.Reject || j.Verdict == screening.Regrade {
					rt.Fatalf("%g shown for %g: %s\n%s", shown, truth, j.Verdict, booktest.Texts(j))
				}
			})
		})
	}
}
