package tui

import (
	"path/filepath"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// newLot starts a lot of test cans at the bench.
func newLot(t *testing.T, header string) *testDesk {
	t.Helper()
	d := newTestDesk(t, 120, 40)
	d.press("ca", "enter", header, "enter", "shelf B", "f8")
	d.mustShow("lot 1  can")
	return d
}

func (d *testDesk) part(number uint32) inventory.Part {
	d.t.Helper()
	p, err := d.m.desk.wb.GetPart(inventory.ID{Lot: 1, Number: number})
	if err != nil {
		d.t.Fatal(err)
	}
	return p
}

func (d *testDesk) reading(number uint32, of screening.Characteristic) string {
	d.t.Helper()
	r, ok := d.part(number).Part.Reading(of, "")
	if !ok {
		return ""
	}
	return entry.Value(r)
}

func TestNumbersAndEnterDoTheWholeMeasuringLoop(t *testing.T) {
	d := newLot(t, "100uF 35V 1986")
	d.mustShow("1-01", "look: the digits of what you see", "Is it cracked?")
	d.answer("0", "98", "0.5")
	if p := d.part(1); p.Outcome.Verdict != screening.Accept || len(p.Part.Readings) != 2 || len(p.Part.Look) != 2 {
		t.Fatalf("part 1: %+v", p)
	}
	d.mustShow("1-02  look: the digits of what you see", "1-01 accept, within-spec", "not tested: leakage current at 35 V")
	d.answer("00", "98", "5")
	if v := d.part(2).Outcome.Verdict; v != screening.Reject {
		t.Fatalf("part 2: %v", v)
	}
	d.answer("1")
	if v := d.part(3).Outcome.Verdict; v != screening.Barred {
		t.Fatalf("part 3: %v", v)
	}
	d.mustShow("1-04", "KEEP it apart")
}

func TestBenchKeepsTheClaimOfTheLotWithTheLot(t *testing.T) {
	d := newLot(t, "100uF 35V 1986")
	d.answer("00", "98", "0.5")
	if p := d.part(1); !p.Part.Claim.IsZero() || p.Header != "" {
		t.Errorf("part keeps a claim of its own: %v", p.Part.Claim)
	}
}

func TestBenchReadingIsCorrectedInItsCell(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "98", "5")
	d.press("up", "left", "left")
	d.mustShow("[98 µF]", "correcting")
	d.press("right")
	d.mustShow("[5 Ω]")
	d.answer("0.5")
	if p := d.part(1); len(p.Part.Readings) != 2 || p.Outcome.Verdict != screening.Accept {
		t.Fatalf("after the correction %d readings, %v", len(p.Part.Readings), p.Outcome.Verdict)
	}
	d.mustShow("1-02  look: the digits of what you see")
}

func TestBenchSignsAloneAreCommands(t *testing.T) {
	t.Run("+ skips, and the part stays undecided", func(t *testing.T) {
		d := newLot(t, "100uF 35V")
		d.answer("00", "+")
		d.mustShow("series resistance at 120 Hz")
		d.answer("0.5")
		if p := d.part(1); p.Outcome.Verdict != screening.Undecided || len(p.Skipped) != 1 {
			t.Fatalf("%v, skipped %v", p.Outcome.Verdict, p.Skipped)
		}
		d.mustShow("skipped", "1-02  look: the digits of what you see")
	})
	t.Run("* makes a series", func(t *testing.T) {
		d := newLot(t, "100uF 35V")
		d.answer("00", "98", "*")
		d.mustShow("capacitance, once more")
		d.answer("100")
		r, _ := d.part(1).Part.Reading("capacitance", "")
		if len(r.Repeats) != 2 || r.Value != 99e-6 || len(d.part(1).Part.Readings) != 1 {
			t.Fatalf("%+v", d.part(1).Part.Readings)
		}
	})
	t.Run("* after the last reading goes back to the part it was taken on", func(t *testing.T) {
		d := newLot(t, "100uF 35V")
		d.answer("00", "98", "0.5", "*")
		d.mustShow("1-01  series resistance at 120 Hz, once more")
		d.answer("0.7")
		if r, _ := d.part(1).Part.Reading("esr", ""); len(r.Repeats) != 2 || r.Value != 0.6 {
			t.Fatalf("series reads %+v", r)
		}
		d.mustShow("1-02  look: the digits of what you see")
	})
	t.Run("/ asks what is wanted", func(t *testing.T) {
		d := newLot(t, "100uF 35V")
		d.answer("00", "98", "0.5", "/")
		d.mustShow("1-01  leakage current at 35 V", "optional")
		d.answer("20u")
		if got := d.reading(1, "leakage"); got != "20 µA" {
			t.Fatalf("leakage %q", got)
		}
	})
	t.Run("/ goes on after a stop", func(t *testing.T) {
		d := newLot(t, "100uF 35V")
		d.answer("1", "/")
		d.mustShow("1-01  capacitance")
		d.answer("98")
		if p := d.part(1); !p.GoOn || p.Outcome.Verdict != screening.Barred {
			t.Fatalf("go on %v, %v", p.GoOn, p.Outcome.Verdict)
		}
	})
	t.Run("- takes the last answer back", func(t *testing.T) {
		d := newLot(t, "100uF 35V")
		d.answer("00", "98", "0.5", "-")
		d.mustShow("undone: 1-01", "1-01  series resistance")
		if got := d.reading(1, "esr"); got != "" {
			t.Fatalf("still reads %q", got)
		}
	})
}

func TestBenchUndoAndRedoReachManyLevels(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "98", "0.5", "00", "97")
	d.press("ctrl+z", "ctrl+z", "ctrl+z", "ctrl+z")
	if p := d.part(1); len(p.Part.Readings) != 0 || len(p.Part.Look) != 2 {
		t.Fatalf("after four undos: %+v", p.Part)
	}
	d.press("ctrl+y", "ctrl+y", "ctrl+y", "ctrl+y")
	if p := d.part(2); len(p.Part.Readings) != 1 {
		t.Fatalf("after four redos: %+v", p.Part)
	}
	d.press("ctrl+y")
	d.mustShow("nothing to do again")
}

func TestBenchAsksBeforeAPowerOfTenSlipIsKept(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "9.8")
	d.mustShow("9.8 µF would be far out of 70.0 µF to 150 µF", "98.0 µF meant?")
	if len(d.part(1).Part.Readings) != 0 {
		t.Fatal("the slip was kept unasked")
	}
	t.Run("typing replaces it", func(t *testing.T) {
		d.answer("98")
		if got := d.reading(1, "capacitance"); got != "98 µF" {
			t.Fatalf("capacitance %q", got)
		}
	})
	t.Run("Enter keeps it", func(t *testing.T) {
		d.press("-", "enter")
		d.answer("9.8", "")
		if got := d.reading(1, "capacitance"); got != "9.8 µF" {
			t.Fatalf("capacitance %q", got)
		}
	})
}

func TestBenchGateKeepsHandsOffAChargedPart(t *testing.T) {
	d := newLot(t, "100uF 450V")
	d.mustShow("volts across it now", "DANGER up to 23 J may be stored", "at most 10 V may remain")
	d.answer("+")
	d.mustShow("cannot be skipped")
	d.press("ctrl+u")
	d.answer("120")
	d.mustShow("DANGER: 120 V remain. Hands off", "across it now", "measuring begins with the volts that remain")
	d.answer("3")
	d.mustShow("look: the digits")
	if p := d.part(1); len(p.Part.Readings) != 2 {
		t.Errorf("the volts measured are not kept: %+v", p.Part.Readings)
	}
}

func TestBenchTinAsksEachPartWhatItClaims(t *testing.T) {
	d := newLot(t, "")
	d.mustShow("a tin of mixed parts", "1-01  what does it claim?")
	d.press("100/25 1974")
	d.mustShow("= 100 µF 25 V 1974")
	d.press("enter")
	d.answer("00", "98", "0.5")
	d.mustShow("1-02  what does it claim?")
	d.answer("*", "00", "98", "0.5")
	if a, b := d.part(1), d.part(2); a.Header != "100/25 1974" || b.Header != a.Header || b.Outcome.Verdict != screening.Accept {
		t.Fatalf("claims %q and %q, %v", a.Header, b.Header, b.Outcome.Verdict)
	}
}

func TestBenchClaimOfOnePartIsCorrected(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "48")
	d.press("up", "f9", "ctrl+u")
	d.answer("47uF 35V")
	if p := d.part(1); p.Header != "47uF 35V" || len(p.Part.Readings) != 1 {
		t.Fatalf("%+v", p)
	}
	d.mustShow("1-01  series resistance")
}

func TestBenchTakesReadingsThatWereNotAskedFor(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("temperature=24C")
	if got := d.reading(1, "temperature"); got != "24 °C" {
		t.Fatalf("temperature %q", got)
	}
}

func TestBenchTemperatureHoldsForThePartsThatFollow(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("temperature=24C", "00", "98", "0.5", "00", "97")
	if got := d.reading(2, "temperature"); got != "24 °C" {
		t.Fatalf("the second part's temperature is %q", got)
	}
	d.mustShow("24 °C, 2 parts")
}

func TestBenchSurvivesUndoingItsOwnLot(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.press("ctrl+z")
	d.mustShow("New lot")
	d.press("ctrl+y", "esc")
	if _, err := d.m.desk.wb.Lot(1); err != nil {
		t.Fatal(err)
	}
}

func TestBenchSaysWhatWouldBeRight(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("7")
	d.mustShow("there is no 7 to look for; 0 for nothing, or the digits 1 to 2")
	d.press("ctrl+u")
	d.answer("00", "45V")
	d.mustShow("capacitance:", "voltage")
	d.press("ctrl+u")
	d.answer("")
	d.mustShow("0 is an answer, and + skips the question")
}

func TestBenchReopensOnTheSamePart(t *testing.T) {
	path := filepath.Join(t.TempDir(), "book")
	wb := openWorkbook(t, path)
	d := &testDesk{t, newTestModel(t, wb, false)}
	d.run(d.m.Init())
	d.send(tea.WindowSizeMsg{Width: 100, Height: 30})
	d.press("ca", "enter", "100uF 35V", "f8")
	d.answer("00", "98", "0.5", "00", "97")
	if err := wb.Close(); err != nil {
		t.Fatal(err)
	}
	d = &testDesk{t, newTestModel(t, openWorkbook(t, path), false)}
	d.run(d.m.Init())
	d.send(tea.WindowSizeMsg{Width: 100, Height: 30})
	d.mustShow("1-02  series resistance at 120 Hz", "97 µF")
}

func TestBenchNextPromptWaitsForTheDisk(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00")
	for _, msg := range keyMsgs("98") {
		d.send(msg)
	}
	save := d.m.take(tea.KeyMsg{Type: tea.KeyEnter})
	d.mustShow("saving", "98")
	if cmd := d.m.take(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("0.5")}); cmd != nil {
		t.Fatal("a key was acted on before the reading was on the disk")
	}
	if cmd := d.m.take(tea.KeyMsg{Type: tea.KeyEnter}); cmd != nil {
		t.Fatal("a key was acted on before the reading was on the disk")
	}
	d.run(save)
	if got := d.reading(1, "esr"); got == "" {
		t.Fatalf("the keys that waited were lost:\n%s", d.screen())
	}
	d.mustShow("1-02  look: the digits of what you see")
}

func TestBenchGivesTheTextBackWhenNothingWasKept(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00")
	if err := d.m.desk.wb.Close(); err != nil {
		t.Fatal(err)
	}
	d.answer("98")
	d.mustShow("nothing was kept", "1-01  capacitance", "98")
	if d.m.bench.grid.saving() {
		t.Error("the page waits for ever")
	}
}

func TestBenchPastedLineBreaksSubmitNothing(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00")
	d.send(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("98\r\n0.5\n"), Paste: true})
	if len(d.part(1).Part.Readings) != 0 {
		t.Fatal("a pasted line break sent the answer")
	}
	d.mustShow("98")
}

func TestBenchBellTellsVerdictsApart(t *testing.T) {
	d := newLot(t, "100uF 35V")
	var rung []int
	d.m.desk.ring = func(n int) tea.Cmd { rung = append(rung, n); return nil }
	d.answer("00", "98", "0.5", "00", "98", "5", "1")
	if len(rung) != 3 || rung[0] != 1 || rung[1] != 6 || rung[2] != 5 {
		t.Errorf("rung %v; want 1 for accept, 6 for reject, 5 for barred", rung)
	}
}

func TestBenchShowsTheRecipeAndEveryFinding(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "98")
	d.press("f5")
	d.mustShow("With a supply and a resistor", "read the volts across 10 kΩ", "figures made up for tests (house)")
	d.press("esc", "f6")
	d.mustShow("All findings of 1-01", "0.7 to 1.5 of 100 µF")
	d.press("esc")
	d.mustShow("1-01  series resistance")
}

func TestBenchListsTheLotsAndOpensOne(t *testing.T) {
	d := newLot(t, "100uF 35V 1986")
	d.answer("00", "98")
	d.press("esc")
	d.mustShow("Lots", "100 µF 35 V 1986", "shelf B")
	d.press("enter")
	d.mustShow("1-01  series resistance")
	d.press("f8")
	d.mustShow("New lot")
	d.press("esc")
	d.mustShow("1-01  series resistance")
	d.press("esc", "f8")
	d.mustShow("New lot")
	d.press("esc")
	d.mustShow("Lots")
}

func TestBenchHeaderOfALotIsCorrectedForAllItsParts(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00", "48", "0.5")
	d.press("f7", "f9", "enter", "ctrl+u", "47uF 35V", "f8")
	d.mustShow("lot 1  can  47 µF 35 V")
	d.press("up")
	d.mustShow("capacitance  48 ±", "pass")
	d.press("f7", "f9", "shift+tab", "ctrl+u", "xx", "f8")
	d.mustShow("is no kind")
}

func TestNewLotFormSaysWhatItUnderstands(t *testing.T) {
	d := newTestDesk(t, 80, 24)
	d.press("cam", "enter")
	d.mustShow(`"cam" is no kind; did you mean can?`)
	d.press("backspace")
	d.mustShow("can: capacitor made up for tests")
	d.press("enter", "100uF 35V 1974")
	d.mustShow("100uF: capacitance 100 µF", "35V: rated voltage 35 V", "1974: maker's date 1974")
	d.press(" 99x9", "enter")
	if !strings.Contains(d.screen(), "99x9") || strings.Contains(d.screen(), "lot 1") {
		t.Fatalf("a word that nothing takes was taken:\n%s", d.screen())
	}
	d.press("backspace", "backspace", "backspace", "backspace", "backspace", "enter")
	d.press("f8")
	d.mustShow("lot 1  can  100 µF 35 V 1974")
}
