package tui

import (
	"strings"
	"testing"

	"goodbin/screening"
)

func TestBenchEscLeavesTheFormOfTheFirstSitting(t *testing.T) {
	d := newTestDesk(t, 120, 40)
	if strings.Contains(d.screen(), "Esc back") {
		t.Error("the footer names Esc where nothing lies above")
	}
	d.press("ca", "enter", "100uF 35V", "f8")
	d.answer("00")
	d.press("98", "f8")
	d.mustShow("New lot", "Esc back")
	d.press("esc")
	d.mustShow("1-01  capacitance", "98")
	d.press("f8", "ctrl+z", "ctrl+z", "esc")
	d.mustShow("New lot")
}

func TestBenchRefusedAnswerIsTypedAnew(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("7", "00")
	d.mustShow("1-01  capacitance")
	d.answer("98V")
	d.mustShow("is a voltage")
	d.answer("98")
	if got := d.reading(1, "capacitance"); got != "98 µF" {
		t.Fatalf("capacitance %q", got)
	}
	t.Run("a letter goes on with it", func(t *testing.T) {
		d.answer("0.5u", "")
		d.press("ctrl+u")
		d.answer("5@100", "kHz")
		if r, _ := d.part(1).Part.Reading("esr", ""); r.At.IsZero() {
			t.Fatalf("%+v\n%s", r, d.screen())
		}
	})
}

func TestCardOfAnAcceptedPartShowsTheLimitThatDecided(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "74", "0.5")
	d.mustShow("1-01 accept, serviceable", "0.7 to 1.5 of 100")
	if strings.Contains(d.screen(), "fail") {
		t.Errorf("an accepted part reads as failed:\n%s", d.screen())
	}
}

func TestCardKeepsTheInstructionOfAStopWhole(t *testing.T) {
	for _, size := range [][2]int{{80, 24}, {60, 20}} {
		d := newTestDesk(t, size[0], size[1])
		d.press("ca", "enter", "100uF 35V", "f8")
		d.answer("1")
		d.mustShow("KEEP it apart", "it is cracked")
		if strings.Contains(d.screen(), "missing") {
			t.Errorf("%v: readings are missed that nobody needs:\n%s", size, d.screen())
		}
	}
}

func TestBenchRecordsThatAPartWasTreated(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "98", "0.5", "/", "900")
	d.mustShow("1-01 treat")
	d.press("up")
	d.mustShow("type treated=1")
	d.answer("treated=1")
	if p := d.part(1); p.Part.Treated != 1 || len(p.Part.Readings) != 3 {
		t.Fatalf("%+v", p.Part)
	}
}

func TestBenchClaimIsCompletedByName(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "dated=1986")
	if p := d.part(1); p.Header != "100uF 35V dated=1986" || len(p.Part.Look) != 2 {
		t.Fatalf("%q %+v", p.Header, p.Part)
	}
	d.answer("rated:voltage=50V")
	d.mustShow("is claimed twice")
}

func TestBenchReadingByNameHoldsWhereItIsAsked(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "98", "0.5")
	d.press("up")
	d.answer("esr=5")
	if p := d.part(1); p.Outcome.Verdict != screening.Reject {
		t.Fatalf("a correction by name changed nothing: %v", p.Part.Readings)
	}
}

func TestGridPutsTheSectionsOfAPartIntoOneCell(t *testing.T) {
	for _, tt := range []struct {
		values []string
		want   string
	}{
		{[]string{"8.4 µF"}, "8.4 µF"},
		{[]string{"8.4 µF", "9.1 µF"}, "8.4+9.1 µF"},
		{[]string{"900 µA", "2 mA"}, "900 µA+2 mA"},
	} {
		sections := []string{"1", "2"}[:len(tt.values)]
		if got := joinSections(sections, tt.values); got != tt.want {
			t.Errorf("%v: %q, want %q", tt.values, got, tt.want)
		}
	}
	if got := joinSections([]string{"2", "1"}, []string{"9.1 µF", "8.4 µF"}); got != "8.4+9.1 µF" {
		t.Errorf("sections out of order: %q", got)
	}
}

func TestCardNamesHowWellAFigureIsKnownBeforeItsDocument(t *testing.T) {
	l := screening.Limit{Grade: screening.Serviceable, Source: screening.Source{Document: "a long list of data sheets", Clause: "endurance", Status: screening.Published}}
	if got := sourceText(l); got != "serviceable, published: a long list of data sheets, endurance" {
		t.Error(got)
	}
	if got := sourceText(screening.Limit{Source: screening.Source{Status: screening.House}}); got != "house" {
		t.Error(got)
	}
}

func TestCardDropsTheWarningThatTheGateHasSeenTo(t *testing.T) {
	told := []screening.Caution{{Code: "stored-charge"}, {Code: "re-form"}}
	if left := untold(told, []string{"stored-charge"}); len(left) != 1 || left[0].Code != "re-form" {
		t.Errorf("left %v", left)
	}
	d := newLot(t, "100uF 450V")
	d.answer("3", "00", "98", "0.5", "/")
	d.mustShow("1-01  leakage current at 450 V")
	if strings.Contains(d.screen(), "DANGER up to 23 J") {
		t.Error("the stored charge is told again although the part was found discharged")
	}
	d.answer("20u")
	d.mustShow("volts that remain across it now", "DANGER up to 23 J", "the verdict waits for the volts that remain")
}

func TestBenchTinPartTakesTheWholeClaimWhereSomethingLacked(t *testing.T) {
	d := newLot(t, "")
	d.answer("+")
	d.mustShow("the claim lacks the capacitance")
	d.answer("100/25 1974")
	if p := d.part(1); p.Header != "100/25 1974" {
		t.Fatalf("claims %q\n%s", p.Header, d.screen())
	}
}

// A lot whose claim bars its parts keeps one with each Enter: they are there, and somebody has to hand them in.
func TestPartsBarredByTheirClaimAreKept(t *testing.T) {
	d := newTestDesk(t, 80, 24)
	d.m.bench.d.kinds[0].Bars = func(screening.Claim) []screening.Stop {
		return []screening.Stop{{Check: "family", Verdict: screening.Barred, Reason: "it grows whiskers", Do: "KEEP it apart"}}
	}
	d.press("ca", "enter", "100uF 35V", "f8")
	d.mustShow("1-01  is barred by what it claims. Enter keeps it so", "KEEP it apart")
	d.press("enter", "enter")
	d.mustShow("2 parts", "1-03  is barred")
	if v := d.part(2).Outcome.Verdict; v != screening.Barred {
		t.Errorf("1-02 is kept as %s", v)
	}
}
