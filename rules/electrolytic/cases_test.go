package electrolytic

import (
	"math"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// Printed forms that are no limit set of the program; their check cases hold the arithmetic of the shapes to the sheets all the same
// (published but for the Radiospares form, whose temperature was not kept).
const otherForms = `set,over_volts,to_volts,after_s,over_cv,to_cv,shape,factor,plus_ua,floor_ua,cap_ua,source,clause,status,note
vishay-038,,,120,,,linear,0.01,,3,,Vishay BCcomponents 038 RSU,leakage current after 2 min,published,
vishay-038,,,300,,,linear,0.002,3,,,Vishay BCcomponents 038 RSU,leakage current after 5 min,published,
bipolar,,,300,,,linear,0.03,8,,,NIC NNR,leakage current after 5 min,published,
radiospares,,100,600,,,linear,0.08,100,,,Radiospares 1968,leakage current after 10 min,published,
radiospares,100,,600,,,linear,0.05,250,,,Radiospares 1968,leakage current after 10 min,published,
kemet,,,300,,,linear,0.003,,,6000,KEMET ALC80 snap-in,leakage current after 5 min,published,
`

func TestPrintedFormsThatAreNoSet(t *testing.T) {
	rows, err := readLeakage(otherForms)
	if err != nil {
		t.Fatal(err)
	}
	for _, tt := range []struct {
		name              string
		set               screening.LimitSet
		uF, volts, after  float64
		wantMicroamperes  float64
		withinMicroampere float64
	}{
		{"33: 25 V 100 µF after 2 min", "vishay-038", 100, 25, 120, 25, 1e-9},
		{"33: the same after 5 min", "vishay-038", 100, 25, 300, 8, 1e-9},
		{"40: 50 V 100 µF bipolar", "bipolar", 100, 50, 300, 158, 1e-9},
		{"41: 100 µF 50 V of 1968", "radiospares", 100, 50, 600, 500, 1e-9},
		{"41: 32 µF 450 V of 1968", "radiospares", 32, 450, 600, 970, 1e-9},
		{"whichever is smaller: the cap of 6 mA", "kemet", 47000, 63, 300, 6000, 1e-9},
	} {
		u := unit{farad: tt.uF * 1e-6, volts: tt.volts}
		found := false
		for i := range rows {
			if r := &rows[i]; r.set == tt.set && r.after == tt.after && r.covers(u) {
				found = true
				if got := r.amperes(u) * 1e6; math.Abs(got-tt.wantMicroamperes) > tt.withinMicroampere {
					t.Errorf("%s: %g µA, want %g", tt.name, got, tt.wantMicroamperes)
				}
			}
		}
		if !found {
			t.Errorf("%s: no row covers it", tt.name)
		}
	}
}

// Cases 18, 19, 21 and the named rows beside them: the impedance at 100 kHz that a low-impedance series prints as its maximum (published,
// Chemi-Con catalogue rows). A part that just meets it is accepted as serviceable on a 100 kHz meter, and needs no reading at 120 Hz.
func TestPrintedImpedancesAreEvidence(t *testing.T) {
	for _, tt := range []struct {
		name      string
		uF, volts float64
		ohms      float64
	}{
		{"18: KY 35 V 470 µF", 470, 35, 0.046},
		{"19: LXZ 25 V 1000 µF", 1000, 25, 0.038},
		{"21: KZN 25 V 470 µF", 470, 25, 0.053},
		{"KY 10 V 1000 µF", 1000, 10, 0.060},
		{"KY 35 V 1000 µF", 1000, 35, 0.027},
		{"KY 25 V 3300 µF", 3300, 25, 0.019},
		{"LXY 10 V 1000 µF", 1000, 10, 0.062},
	} {
		part := screening.Part{Claim: claimed(t, tt.uF, tt.volts), Readings: []screening.Reading{capacitance(tt.uF), esr100k(tt.ohms)}}
		j := booktest.JudgePart(t, Book(), part, booktest.Exactly())
		if j.Verdict != screening.Accept || j.Grade != screening.Serviceable {
			t.Errorf("%s: %s %s\n%s", tt.name, j.Verdict, j.Grade, booktest.Texts(j))
		}
	}
}

// Case 22 and its table: EPCOS B41456 screw-terminal cans, typical and largest ESR at 100 Hz (published). A part at its typical value and one
// at its largest are within what is asked of a new part; no part that meets its own sheet is rejected.
func TestScrewTerminalCansMeetTheirOwnSheet(t *testing.T) {
	for _, tt := range []struct{ volts, uF, typical, largest float64 }{
		{16, 100000, 5.0e-3, 10e-3},
		{16, 150000, 4.2e-3, 8.4e-3},
		{25, 68000, 6.0e-3, 12e-3},
		{40, 47000, 6.0e-3, 12e-3},
		{63, 22000, 8.0e-3, 16e-3},
		{63, 47000, 5.0e-3, 10e-3},
		{100, 10000, 9.0e-3, 18e-3},
	} {
		for _, ohms := range []float64{tt.typical, tt.largest} {
			part := screening.Part{Claim: claimed(t, tt.uF, tt.volts, "case", "screw", "dated", "1995"), Readings: []screening.Reading{
				capacitance(tt.uF), read(screening.ESR, ohms, freq, 100.0), leakage(1, tt.volts, 5),
			}}
			j := booktest.JudgePart(t, Book(), part, booktest.Exactly())
			if j.Verdict != screening.Accept || j.Grade != screening.WithinSpec {
				t.Errorf("%g V %g µF at %g Ω: %s %s\n%s", tt.volts, tt.uF, ohms, j.Verdict, j.Grade, booktest.Texts(j))
			}
		}
		// What no series allows is rejected although the ladder in use is derived.
		part := screening.Part{Claim: claimed(t, tt.uF, tt.volts, "case", "screw", "dated", "1995"), Readings: []screening.Reading{
			capacitance(tt.uF), read(screening.ESR, 20*tt.largest, freq, 100.0), leakage(1, tt.volts, 5),
		}}
		if j := booktest.JudgePart(t, Book(), part, screening.DefaultPolicy()); j.Verdict != screening.Reject {
			t.Errorf("%g V %g µF at twenty times its ESR: %s\n%s", tt.volts, tt.uF, j.Verdict, booktest.Texts(j))
		}
	}
}

// A series is not known, so the larger of two readings of "add 0.02 for every 1000 µF" counts; and a base that the ladder does not print is
// derived, whatever its rows are.
func TestTheLimitOfLossIsLenientAndHonest(t *testing.T) {
	for _, tt := range []struct {
		name      string
		uF, volts float64
		tanDelta  float64
		status    screening.Status
	}{
		{"1000 µF: the base", 1000, 6.3, 0.28, screening.Published},
		{"1500 µF: half a step, where whole steps add none", 1500, 6.3, 0.29, screening.Published},
		{"3000 µF: two steps, read either way", 3000, 6.3, 0.32, screening.Published},
		{"4 V: below the ladder", 100, 4, 0.28, screening.Derived},
		{"525 V: above the ladder", 10, 525, 0.25, screening.Derived},
	} {
		l := limitOf(t, claimed(t, tt.uF, tt.volts), screening.TanDelta.Name, screening.GeneralSet, 0)
		if math.Abs(l.High-tt.tanDelta) > 1e-9 || l.Source.Status != tt.status {
			t.Errorf("%s: %v, %s; want %v, %s", tt.name, l.High, l.Source.Status, tt.tanDelta, tt.status)
		}
	}
}

// A bound is passed for sure only beyond the meter's own specification, and by 1.645 standard uncertainties where scatter adds to it.
func TestSurelyAbove(t *testing.T) {
	for _, tt := range []struct {
		name           string
		value, u, spec float64
		want           bool
	}{
		{"an exact reading", 1.001, 0, 0, true},
		{"on the bound", 1, 0, 0, false},
		{"inside the specification, beyond 1.645 u", 1.0169, 0.01, 0.0173, false},
		{"beyond the specification", 1.0174, 0.01, 0.0173, true},
		{"scatter beside it", 1.03, 0.02, 0.0173, false},
		{"beyond both", 1.034, 0.02, 0.0173, true},
	} {
		r := screening.Reading{Value: tt.value, U: tt.u, Spec: tt.spec}
		if got := surelyAbove(&r, 1); got != tt.want {
			t.Errorf("%s: %v", tt.name, got)
		}
	}
}
