package tui

import (
	"fmt"
	"testing"

	"goodbin/inventory"
	"goodbin/screening"
)

// newStockDesk is a workbook with one part of each of three verdicts, at the Stock page.
func newStockDesk(t *testing.T) *testDesk {
	t.Helper()
	d := newLot(t, "100uF 35V 1986")
	d.answer("00", "98", "5", "00", "99", "0.5", "00", "61", "0.5")
	d.press("f3")
	d.mustShow("[F3 Stock]")
	return d
}

func TestStockListsTheUsableFirst(t *testing.T) {
	d := newStockDesk(t)
	d.mustShow("3 parts", "1 accept", "1 regrade", "1 reject", "as measured (marked")
	want := []screening.Verdict{screening.Accept, screening.Regrade, screening.Reject}
	for i, row := range d.m.stock.rows {
		if row.Verdict != want[i] {
			t.Errorf("row %d is %v; want %v", i, row.Verdict, want[i])
		}
	}
}

func TestStockFiltersAsYouType(t *testing.T) {
	d := newStockDesk(t)
	d.press("reject")
	d.mustShow(" 1 part\n", "1-01  100 µF 35 V 1986", "history")
	d.press("zzz")
	d.mustShow("No part matches")
	d.press("esc")
	d.mustShow("3 parts")
	d.press("f4")
	d.mustShow("2 usable of 3 parts")
	d.press("esc", "esc")
	d.mustShow("[F2 Bench]")
}

func TestStockShowsAllOfAPart(t *testing.T) {
	d := newStockDesk(t)
	d.mustShow("1-02  100 µF 35 V 1986", "place    shelf B", `typed "99"`, "esr "+d.reading(2, "esr")+" at 120 Hz", "not tested: leakage current at 35 V")
	d.press("enter")
	d.mustShow("All of 1-02", "every required reading passes", "0.7 to 1.5 of 100 µF")
}

func TestStockTakeReturnRecountAndPlace(t *testing.T) {
	d := newStockDesk(t)
	get := func() inventory.Part { return d.part(2) }
	d.press("f7") // what is typed replaces the count that stands there
	d.answer("about 40")
	if c := get().Count; c != (inventory.Count{N: 40, Level: inventory.About}) {
		t.Fatalf("count %v", c)
	}
	d.press("f5")
	d.mustShow("take from 1-02 (about 40 there)")
	d.answer("3 output stage")
	if p := get(); p.Taken != 3 {
		t.Fatalf("taken %d", p.Taken)
	}
	d.mustShow("took 3 of 1-02", "took 3: output stage")
	d.press("f6")
	d.answer("")
	if p := get(); p.Taken != 2 {
		t.Fatalf("taken %d after returning one", p.Taken)
	}
	d.press("f8")
	d.answer("drawer 12")
	if p := get(); p.Place != "drawer 12" {
		t.Fatalf("place %q", p.Place)
	}
	d.mustShow("drawer 12")
	d.press("ctrl+z")
	d.mustShow("undone: 1-02: place drawer 12")
	if p := get(); p.Place != "" {
		t.Fatalf("place %q after undo", p.Place)
	}
	d.press("f8", "right")
	d.answer("!") // an arrow key goes into the text that stands there
	if p := get(); p.Place != "shelf B!" && p.Place != "!" {
		t.Fatalf("place %q", p.Place)
	}
}

func TestStockSaysWhatIsWrongAndKeepsTheText(t *testing.T) {
	d := newStockDesk(t)
	d.press("f5")
	d.answer("7 for a lamp")
	d.mustShow("7 asked, 1 there", "7 for a lamp")
	d.press("esc", "f7", "ctrl+u")
	d.answer("many")
	d.mustShow("type how many there are: 12, about 40, or unknown")
}

func TestStockBringsAPartToTheBench(t *testing.T) {
	d := newStockDesk(t)
	d.press("down", "f9")
	d.mustShow("[F2 Bench]", "1-03  is done: regrade", "1-03 regrade")
}

func TestStockRenewsAnOldVerdictWhenItIsLookedAt(t *testing.T) {
	d := newStockDesk(t)
	p := d.part(2)
	p.Outcome.Tables, p.Outcome.Verdict = "tests 0", screening.Undecided
	if err := d.m.desk.wb.PutOutcome(p.ID, p.Outcome); err != nil {
		t.Fatal(err)
	}
	d.press("f2", "f3")
	d.mustShow("? undecided old")
	d.press("down", "1-02")
	if o := d.part(2).Outcome; o.Verdict != screening.Accept || o.Tables != "tests 1" {
		t.Fatalf("outcome %v under %q", o.Verdict, o.Tables)
	}
}

func TestStockScrollsThroughMoreThanItHasRead(t *testing.T) {
	d := newTestDesk(t, 80, 24)
	fillWorkbook(t, d.m.desk.wb, 3*listStretch)
	d.press("f3")
	d.mustShow(fmt.Sprintf("%d parts", 3*listStretch))
	d.press("ctrl+end")
	row, ok := d.m.stock.selected()
	if !ok || d.m.stock.table.at != 3*listStretch-1 {
		t.Fatalf("the last row is not there: %v %v", row, ok)
	}
	d.mustShow(row.ID.String())
	d.press("pgup", "pgup")
	if _, ok := d.m.stock.selected(); !ok {
		t.Fatal("a row above is not there")
	}
	d.press("ctrl+home")
	d.mustShow("1-01 ")
}
