package inventory

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/screening"
)

func TestWordsFindWhatIsPrinted(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	p := judged(l.ID, screening.Accept, 2200e-6)
	p.Outcome.Title, p.Outcome.Why, p.Outcome.As = "2200 µF 35 V ±20 % 1974", "ESR reads 2,4 Ω; at most 151 mΩ", "as measured"
	p.Place = "Shelf 2 / Tin 3"
	for range 12 {
		p.ID.Number = 0
		save(t, w, p, "saved")
	}
	for _, tt := range []struct {
		words string
		want  int
	}{
		{"", 12},
		{"2200uf", 12},
		{"2200 uF", 12},
		{"2200µF", 12},
		{"2200μF 35v", 12},
		{"35V 2200", 12},
		{"20%", 12},
		{"tin SHELF", 12},
		{"electro accept", 12},
		{"2.4ohm", 12},
		{"2,4ohm", 12},
		{"151mohm", 12},
		{"as measured", 12},
		{"1-", 12},
		{"1-0", 9},
		{"1-07", 1},
		{"1-12", 1},
		{"1-07 reject", 0},
		{"2-", 0},
		{"47uF", 0},
		{"reject", 0},
	} {
		page, err := w.Find(Query{Words: strings.Fields(tt.words)})
		if err != nil || page.Total != tt.want || len(page.Rows) != tt.want {
			t.Errorf("%q finds %d, %v; want %d", tt.words, page.Total, err, tt.want)
		}
	}
}

func TestFoldingIsStable(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.OneOf(rapid.String(), rapid.StringMatching(`[0-9,. ]{0,4}[µuμΩ%A-Za-z ]{0,6}`)).Draw(t, "text")
		if once := fold(text); fold(once) != once {
			t.Fatalf("%q folds to %q and then to %q", text, once, fold(once))
		}
	})
}

func TestUsableComesFirst(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	for _, v := range []screening.Verdict{
		screening.NoVerdict, screening.Reject, screening.Barred, screening.Undecided, screening.Treat, screening.Regrade, screening.Accept, screening.Accept,
	} {
		save(t, w, judged(l.ID, v, 2e-3), "saved")
	}
	must0(t, w.Take(ID{l.ID, 7}, 1, "a receiver"))
	page, err := w.Find(Query{})
	must0(t, err)
	var got []string
	for _, r := range page.Rows {
		got = append(got, fmt.Sprintf("%d %s", r.ID.Number, r.Verdict))
	}
	want := []string{"8 accept", "6 regrade", "5 treat", "4 undecided", "3 barred", "2 reject", "1 ", "7 accept"}
	if !slices.Equal(got, want) {
		t.Errorf("order is %q; want %q (the last is all taken)", got, want)
	}
	if n := page.Counts.Usable(); n != 3 {
		t.Errorf("%d count as usable", n)
	}
	if page, err = w.Find(Query{Usable: true}); err != nil || page.Total != 2 || page.Counts.All() != 8 {
		t.Errorf("%d of %d usable, %v; want 2 of 8", page.Total, page.Counts.All(), err)
	}
	if page, err = w.Find(Query{Verdicts: []screening.Verdict{screening.Treat, screening.Reject}}); err != nil || page.Total != 2 {
		t.Errorf("%d to treat or rejected, %v; want 2", page.Total, err)
	}
}

func TestStaleIsWhatOtherTablesJudged(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	fresh := save(t, w, judged(l.ID, screening.Accept, 2e-3), "saved")
	old := judged(l.ID, screening.Accept, 2e-3)
	old.Outcome.Tables = "t0"
	old = save(t, w, old, "saved")
	page, err := w.Find(Query{Stale: true})
	if err != nil || page.Total != 1 || page.Rows[0].ID != old.ID || !page.Rows[0].Stale {
		t.Fatalf("stale: %v, %v", page.Rows, err)
	}
	n := 0
	for p, err := range w.StaleParts(map[screening.Kind]string{"electrolytic": "t1"}) {
		must0(t, err)
		n++
		p.Outcome.Tables, p.Outcome.Verdict = "t1", screening.Reject
		must0(t, w.PutOutcome(p.ID, p.Outcome))
	}
	if got, _ := w.GetPart(old.ID); n != 1 || got.Outcome.Verdict != screening.Reject {
		t.Errorf("%d re-judged to %v", n, got.Outcome.Verdict)
	}
	l.Claim = farads(1e-3, 35)
	must0(t, w.PutLot(l))
	if page, err = w.Find(Query{Stale: true}); err != nil || page.Total != 2 {
		t.Errorf("%d stale after the lot's claim changed, %v; want both", page.Total, err)
	}
	if done, err := w.Undo(); err != nil || done.Action != "lot changed" {
		t.Fatalf("undo: %v, %v; re-judging is no action", done, err)
	}
	if got, _ := w.GetPart(fresh.ID); got.Outcome.Tables != "t1" {
		t.Errorf("after undo the verdict is of %q", got.Outcome.Tables)
	}
}

func TestAPartTakesPlaceAndClaimFromItsLot(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	p := judged(l.ID, screening.Accept, 2e-3)
	p.Outcome.Title = ""
	p = save(t, w, p, "saved")
	row, err := w.Row(p.ID)
	if err != nil || row.Place != "shelf 2" || !strings.Contains(row.Title, "35 V") {
		t.Errorf("row %+v, %v", row, err)
	}
	l.Place = "attic"
	must0(t, w.PutLot(l))
	if row, err = w.Row(p.ID); err != nil || row.Place != "attic" {
		t.Errorf("after the lot was moved: %q, %v", row.Place, err)
	}
	if _, err := w.Undo(); err != nil {
		t.Fatal(err)
	}
	if row, err = w.Row(p.ID); err != nil || row.Place != "shelf 2" {
		t.Errorf("after that was undone: %q, %v", row.Place, err)
	}
}

// plainFind is Find by looking at every row, without memory of the search before.
func plainFind(s *snapshot, q Query) []ID {
	fresh := *s
	fresh.last = nil
	var ids []ID
	for _, r := range fresh.find(q).Rows {
		ids = append(ids, r.ID)
	}
	return ids
}

func TestNarrowingFindsWhatAFreshSearchFinds(t *testing.T) {
	w := newWorkbook(t)
	w.db.NoSync = true // only what is found is the question here
	for range 12 {
		addLot(t, w)
	}
	for i := range 60 {
		p := judged(uint32(1+i%12), screening.Verdict(i%7), float64(i)*1e-6)
		p.Outcome.Title = fmt.Sprintf("%d µF %d V", i*11, i%5*16)
		p.Place = fmt.Sprintf("tin %d", i%4)
		save(t, w, p, "saved")
	}
	_, err := w.Find(Query{})
	must0(t, err)
	word := rapid.StringMatching(`(1-?[0-9]{0,2}|[0-9]{1,2}|tin|acc|v|uf|[0-9]v)`)
	rapid.Check(t, func(t *rapid.T) {
		var words []string
		for range rapid.IntRange(1, 6).Draw(t, "keystrokes") {
			switch {
			case len(words) == 0 || rapid.IntRange(0, 3).Draw(t, "new word") == 0:
				words = append(words, word.Draw(t, "word"))
			case rapid.IntRange(0, 3).Draw(t, "at the beginning") == 0:
				words = slices.Clone(words)
				words[len(words)-1] = "1" + words[len(words)-1]
			default:
				words = slices.Clone(words)
				words[len(words)-1] += rapid.SampledFrom([]string{"1", "0", "-", "v", " "}).Draw(t, "letter")
			}
			q := Query{Words: words, Order: Order(rapid.IntRange(0, 2).Draw(t, "order")), Usable: rapid.Bool().Draw(t, "usable")}
			page, err := w.Find(q)
			if err != nil {
				t.Fatal(err)
			}
			var got []ID
			for _, r := range page.Rows {
				got = append(got, r.ID)
			}
			if want := plainFind(w.rows, q); !slices.Equal(got, want) {
				t.Fatalf("%q narrowed finds %v, fresh %v", words, got, want)
			}
		}
	})
}

func TestPagesAreCutOutOfOneList(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	for range 10 {
		save(t, w, judged(l.ID, screening.Accept, 2e-3), "saved")
	}
	for _, tt := range []struct{ offset, limit, first, n int }{{0, 3, 1, 3}, {3, 3, 4, 3}, {9, 3, 10, 1}, {10, 3, 0, 0}, {99, 3, 0, 0}, {-1, 2, 1, 2}, {2, 0, 3, 8}} {
		page, err := w.Find(Query{Offset: tt.offset, Limit: tt.limit})
		if err != nil || page.Total != 10 || len(page.Rows) != tt.n || tt.n > 0 && page.Rows[0].ID.Number != uint32(tt.first) {
			t.Errorf("offset %d limit %d: %d rows %v", tt.offset, tt.limit, len(page.Rows), err)
		}
	}
}

func TestPlacesOrderTheList(t *testing.T) {
	w := newWorkbook(t)
	l, err := w.AddLot(Lot{Kind: "electrolytic"})
	must0(t, err)
	for _, place := range []string{"tin 3", "", "Attic", "tin 3", "box"} {
		p := judged(l.ID, screening.Accept, 2e-3)
		p.Place = place
		save(t, w, p, "saved")
	}
	page, err := w.Find(Query{Order: ByPlace})
	must0(t, err)
	var got []uint32
	for _, r := range page.Rows {
		got = append(got, r.ID.Number)
	}
	if want := []uint32{3, 5, 1, 4, 2}; !slices.Equal(got, want) {
		t.Errorf("order is %v, want %v: places in any case, without a place last", got, want)
	}
	if page, err = w.Find(Query{Place: "TIN"}); err != nil || page.Total != 2 {
		t.Errorf("%d in tins, %v", page.Total, err)
	}
}
