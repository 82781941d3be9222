package inventory

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"goodbin/screening"
)

func TestUndoTakesBackLevelByLevelAndSaysWhat(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	first := save(t, w, judged(l.ID, screening.Undecided, 2010e-6), "capacitance 2010uF")
	second := first
	second.Part.Readings = append(second.Part.Readings, reading(screening.ESR, 0.061, "61m"))
	second.Outcome.Verdict = screening.Accept
	second = save(t, w, second, "esr 61m")
	must0(t, w.Take(second.ID, 1, "receiver"))

	for _, want := range []struct {
		says    string
		verdict screening.Verdict
		taken   int
	}{
		{"1-01: took 1: receiver", screening.Accept, 0},
		{"1-01: esr 61m", screening.Undecided, 0},
	} {
		done, err := w.Undo()
		must0(t, err)
		p, err := w.GetPart(first.ID)
		must0(t, err)
		if done.String() != want.says || p.Outcome.Verdict != want.verdict || p.Taken != want.taken {
			t.Errorf("undo of %q leaves %v, %d taken; want %+v", done, p.Outcome.Verdict, p.Taken, want)
		}
	}
	got, err := w.GetPart(first.ID)
	must0(t, err)
	if diff := cmp.Diff(first, got, same); diff != "" {
		t.Errorf("after undo (-as first saved +now):\n%s", diff)
	}
	for range 2 {
		if _, err := w.Undo(); err != nil {
			t.Fatal(err)
		}
	}
	if lots, err := w.Lots(); err != nil || len(lots) != 0 {
		t.Errorf("after undoing all, %d lots, %v", len(lots), err)
	}
	if _, err := w.Undo(); !errors.Is(err, ErrNoUndo) {
		t.Errorf("undo in an empty workbook: %v", err)
	}
	mustCheck(t, w)
}

func TestUndoAndRedoSurviveARestart(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	p := save(t, w, judged(l.ID, screening.Accept, 2e-3), "capacitance 2000uF")
	must0(t, w.Recount(p.ID, Count{N: 4, Level: About}))
	if _, err := w.Undo(); err != nil {
		t.Fatal(err)
	}
	must0(t, w.Close())

	w2 := mustOpen(t, w.Path(), Options{})
	defer closeAndVerify(t, w2)
	done, err := w2.Redo()
	if err != nil || done.Action != "counted about 4" {
		t.Fatalf("redo after a restart: %q, %v", done, err)
	}
	if got, _ := w2.GetPart(p.ID); got.Count != (Count{N: 4, Level: About}) {
		t.Errorf("count after redo is %v", got.Count)
	}
	for range 3 {
		if _, err := w2.Undo(); err != nil {
			t.Fatalf("undo after a restart: %v", err)
		}
	}
	for range 3 {
		if _, err := w2.Redo(); err != nil {
			t.Fatalf("redo of everything: %v", err)
		}
	}
	if _, err := w2.Redo(); !errors.Is(err, ErrNoUndo) {
		t.Errorf("redo beyond the last: %v", err)
	}
	if got, _ := w2.GetPart(p.ID); got.Count.N != 4 || got.Outcome.Verdict != screening.Accept {
		t.Errorf("after all undone and redone: %+v", got)
	}
}

func TestANewActionForgetsWhatWasUndone(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	p := save(t, w, judged(l.ID, screening.Accept, 2e-3), "first")
	p.Note = "second"
	save(t, w, p, "second")
	if _, err := w.Undo(); err != nil {
		t.Fatal(err)
	}
	p.Note = "third"
	save(t, w, p, "third")
	if _, err := w.Redo(); !errors.Is(err, ErrNoUndo) {
		t.Errorf("redo after a new action: %v", err)
	}
	events, err := w.History(p.ID)
	must0(t, err)
	var actions []string
	for _, e := range events {
		actions = append(actions, e.Action)
	}
	if got := strings.Join(actions, " "); got != "first third" {
		t.Errorf("history is %q; what was undone and forgotten does not belong to it", got)
	}
}

func TestHistorySaysWhatCameOfIt(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	p := judged(l.ID, screening.Undecided, 2e-3)
	p.Outcome.Why = "esr is missing"
	p = save(t, w, p, "capacitance 2000uF")
	p.Outcome.Verdict, p.Outcome.Why = screening.Accept, "every required reading passes"
	p = save(t, w, p, "esr 61m")
	p.Place = "tin 3"
	save(t, w, p, "moved to tin 3")
	l.Place = "shelf 9"
	must0(t, w.PutLot(l))
	events, err := w.History(p.ID)
	must0(t, err)
	want := []string{
		"capacitance 2000uF | undecided: esr is missing", "esr 61m | undecided → accept: every required reading passes", "moved to tin 3 | ",
	}
	for i, e := range events {
		if got := e.Action + " | " + e.Text; i >= len(want) || got != want[i] {
			t.Errorf("event %d is %q", i, got)
		}
		if e.At.IsZero() || i > 0 && !e.At.After(events[i-1].At) {
			t.Errorf("event %d is of %v", i, e.At)
		}
	}
	if len(events) != len(want) {
		t.Errorf("%d events, want %d", len(events), len(want))
	}
	events, err = w.History(ID{Lot: l.ID})
	if err != nil || len(events) != 2 || events[1].Text != `place: "shelf 2" → "shelf 9"` {
		t.Errorf("history of the lot: %v, %v", events, err)
	}
}

func TestUndoGoesBackOnlySoManyLevels(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	p := save(t, w, judged(l.ID, screening.Accept, 2e-3), "first")
	w.db.NoSync = true // a thousand and one actions need not each be on the disk here
	for i := range UndoLevels {
		p.Note = fmt.Sprint(i)
		p = save(t, w, p, "note "+p.Note)
	}
	undone := 0
	for {
		_, err := w.Undo()
		if errors.Is(err, ErrNoUndo) {
			break
		}
		must0(t, err)
		undone++
	}
	if undone != UndoLevels {
		t.Errorf("%d actions undone, want %d", undone, UndoLevels)
	}
	if got, err := w.GetPart(p.ID); err != nil || got.Note != "" {
		t.Errorf("at the end of the way back: %q, %v", got.Note, err)
	}
	if events, err := w.History(p.ID); err != nil || len(events) != 1 {
		t.Errorf("%d events stay, %v; want the first", len(events), err)
	}
}
