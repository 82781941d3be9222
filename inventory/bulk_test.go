package inventory

import (
	"context"
	"errors"
	"fmt"
	"iter"
	"testing"

	"goodbin/screening"
)

// items makes n parts of a lot, numbered from the first on.
func items(lot uint32, first, n int) iter.Seq2[Item, error] {
	return func(yield func(Item, error) bool) {
		for i := range n {
			p := judged(lot, screening.Verdict(1+i%6), float64(1+i)*1e-9)
			p.ID.Number = uint32(first + i)
			if !yield(Item{Part: &p}, nil) {
				return
			}
		}
	}
}

func loadParts(t testing.TB, w *Workbook, lot uint32, n int) {
	t.Helper()
	done, err := w.Load(context.Background(), items(lot, 1, n), LoadOptions{Action: "loaded"})
	if err != nil || done.Parts != n {
		t.Fatalf("loaded %+v, %v", done, err)
	}
}

func TestLoadGivesNumbersAsItGoes(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	save(t, w, judged(l.ID, screening.Accept, 1e-3), "saved")
	var ids []string
	seq := func(yield func(Item, error) bool) {
		p := judged(l.ID, screening.Accept, 1e-6)
		yield(Item{Part: &p}, nil)
		ids = append(ids, p.ID.String())
		lot := Lot{Kind: "resistor"}
		yield(Item{Lot: &lot}, nil)
		for _, number := range []uint32{0, 5, 0} {
			p := judged(lot.ID, screening.Accept, 1e-6)
			p.ID.Number = number
			yield(Item{Part: &p}, nil)
			ids = append(ids, p.ID.String())
		}
	}
	done, err := w.Load(t.Context(), seq, LoadOptions{Action: "loaded"})
	if err != nil || done.Lots != 1 || done.Parts != 4 {
		t.Fatalf("loaded %+v, %v", done, err)
	}
	if got := fmt.Sprint(ids); got != "[1-02 2-01 2-05 2-06]" {
		t.Errorf("ids are %s", got)
	}
	mustCheck(t, w)
}

func TestLoadRefusesWhatIsHeldUnlessAgain(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	loadParts(t, w, l.ID, 10)
	if done, err := w.Load(t.Context(), items(l.ID, 10, 5), LoadOptions{}); !errors.Is(err, ErrHeld) || done.Parts != 0 {
		t.Errorf("loaded %+v, %v", done, err)
	}
	if has, _ := w.Has(l.ID, 11); has {
		t.Error("a refused stretch was half kept")
	}
	var held []ID
	done, err := w.Load(t.Context(), items(l.ID, 8, 5), LoadOptions{Held: func(id ID) error { held = append(held, id); return nil }})
	if err != nil || done.Parts != 2 || done.Held != 3 || len(held) != 3 {
		t.Errorf("loaded %+v, %v; held %v", done, err, held)
	}
	done, err = w.Load(t.Context(), items(l.ID, 1, 3), LoadOptions{Again: true, Action: "again"})
	if err != nil || done.Parts != 3 {
		t.Errorf("again: %+v, %v", done, err)
	}
	twice := func(yield func(Item, error) bool) {
		for _, v := range []screening.Verdict{screening.Accept, screening.Reject} {
			p := judged(l.ID, v, 1e-6)
			p.ID.Number = 1
			if !yield(Item{Part: &p}, nil) {
				return
			}
		}
	}
	if _, err := w.Load(t.Context(), twice, LoadOptions{Again: true}); err != nil {
		t.Error(err)
	}
	if p, _ := w.GetPart(ID{l.ID, 1}); p.Outcome.Verdict != screening.Reject {
		t.Errorf("of two rows for one part the first won: %v", p.Outcome.Verdict)
	}
	mustCheck(t, w)
}

func TestALoadIsUndoneAtOnce(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	loadParts(t, w, l.ID, 5)
	done, err := w.Load(t.Context(), items(l.ID, 1, redoLargest+5), LoadOptions{Again: true, Action: "screened box.csv"})
	must0(t, err)
	if done.Parts != redoLargest+5 {
		t.Errorf("loaded %+v", done)
	}
	undone, err := w.Undo()
	if err != nil || undone.String() != fmt.Sprintf("1-01 and %d more: screened box.csv", redoLargest+4) {
		t.Errorf("undone %q, %v", undone, err)
	}
	if r := mustCheck(t, w); r.Parts != 5 {
		t.Errorf("%d parts left", r.Parts)
	}
	if c, err := w.Counts(); err != nil || c.All() != 5 {
		t.Errorf("%d rows left, %v", c.All(), err)
	}
	if _, err := w.Redo(); !errors.Is(err, ErrNoUndo) {
		t.Errorf("a large load is not kept for redo: %v", err)
	}
	if _, err := w.Undo(); err != nil {
		t.Fatal(err)
	}
	if _, err := w.Redo(); err != nil {
		t.Errorf("a small load is: %v", err)
	}
	if r := mustCheck(t, w); r.Parts != 5 {
		t.Errorf("%d parts after redo", r.Parts)
	}
}

func TestAStoppedLoadKeepsWholeStretches(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	const stretch = 700
	stop := errors.New("line 7: unreadable")
	seq := func(yield func(Item, error) bool) {
		for item, err := range items(l.ID, 1, stretch+3) {
			if !yield(item, err) {
				return
			}
		}
		yield(Item{}, stop)
	}
	saved := 0
	done, err := w.Load(t.Context(), seq, LoadOptions{stretch: stretch, Saved: func(_, parts int) { saved = parts }})
	if !errors.Is(err, stop) || done.Parts != stretch || saved != stretch {
		t.Errorf("loaded %+v (%d said), %v", done, saved, err)
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := w.Load(ctx, items(l.ID, stretch+1, 3), LoadOptions{}); !errors.Is(err, context.Canceled) {
		t.Errorf("a load that was interrupted: %v", err)
	}
	if c, err := w.Counts(); err != nil || c.All() != stretch {
		t.Errorf("%d parts, %v", c.All(), err)
	}
}

func TestALotChangedDuringALoadIsFollowed(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	seq := func(yield func(Item, error) bool) {
		for item, err := range items(l.ID, 1, 50) {
			if item.Part.ID.Number == 25 {
				l.Place, l.Claim = "attic", farads(1e-6, 16)
				must0(t, w.PutLot(l))
			}
			if !yield(item, err) {
				return
			}
		}
	}
	if done, err := w.Load(t.Context(), seq, LoadOptions{stretch: 20}); err != nil || done.Parts != 50 {
		t.Fatalf("%+v, %v", done, err)
	}
	if page, err := w.Find(Query{Place: "attic"}); err != nil || page.Total != 50 {
		t.Errorf("%d in the new place, %v", page.Total, err)
	}
	mustCheck(t, w)
}

func TestAcrossStretchesNothingIsTakenTwice(t *testing.T) {
	w := newWorkbook(t)
	addLot(t, w)
	lot := Lot{Kind: "electrolytic"}
	seq := func(yield func(Item, error) bool) {
		if !yield(Item{Lot: &lot}, nil) {
			return
		}
		for i := range 30 {
			p := judged(lot.ID, screening.Accept, 1e-6)
			p.ID.Number = uint32(1 + i%20)
			if !yield(Item{Part: &p}, nil) {
				return
			}
		}
		again := Lot{ID: lot.ID, Kind: "electrolytic"}
		yield(Item{Lot: &again}, nil)
	}
	done, err := w.Load(t.Context(), seq, LoadOptions{stretch: 7, Held: func(ID) error { return nil }})
	if !errors.Is(err, ErrHeld) || done.Held != 10 || done.Parts != 14 {
		t.Errorf("%+v, %v; want the lot that comes twice refused after two whole stretches", done, err)
	}
}

func TestReindexRepairsTheIndexes(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	loadParts(t, w, l.ID, 50)
	save(t, w, judged(l.ID, screening.Accept, 1e-6), "saved")
	must0(t, w.update(func(c *change) error {
		return errors.Join(
			c.tx.Bucket(bucketRow).Delete(idKey(ID{l.ID, 3})), c.tx.Bucket(bucketRow).Put(idKey(ID{9, 9}), []byte("rubbish")),
			c.tx.Bucket(bucketValue).Put([]byte("rubbish"), nil), c.tx.DeleteBucket(bucketByPart), errOf(c.tx.CreateBucket(bucketByPart)),
		)
	}))
	report, err := w.Check(t.Context())
	if err != nil || report.OK() {
		t.Fatalf("spoilt indexes are not found: %v, %v", report, err)
	}
	report, err = w.Reindex(t.Context())
	if err != nil || !report.OK() || report.Parts != 51 {
		t.Errorf("reindexed %+v, %v", report, err)
	}
	mustCheck(t, w)
	if events, err := w.History(ID{l.ID, 51}); err != nil || len(events) != 1 {
		t.Errorf("history after the repair: %v, %v", events, err)
	}
}

func errOf[T any](_ T, err error) error { return err }
