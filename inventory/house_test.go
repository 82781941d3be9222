package inventory

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"goodbin/screening"
)

func houseType(name string, gain float64) HouseType {
	r := screening.RangeRating(screening.Definition{Name: "hfe"}, gain, 2*gain)
	r.Typed = fmt.Sprintf("%g..%g", gain, 2*gain)
	return HouseType{
		Kind: "bipolar", Source: "a sheet",
		Claim: screening.Claim{Ratings: []screening.Rating{r}, Traits: []screening.Trait{{Name: screening.TraitType, Text: name}}},
	}
}

func TestHouseTablesComeBackAsTheyWereKept(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var h House
		h.Families = rapid.String().Draw(t, "families")
		for range rapid.IntRange(0, 3).Draw(t, "types") {
			h.Types = append(h.Types, HouseType{
				Kind: screening.Kind(rapid.String().Draw(t, "kind")), Claim: drawClaim(t), Alias: rapid.String().Draw(t, "alias"),
				Source: rapid.String().Draw(t, "source"), Note: rapid.String().Draw(t, "note"),
				Added: time.Unix(rapid.Int64Range(1, 1e9).Draw(t, "added"), 0).UTC(),
			})
		}
		sealed, err := encodeHouse(h)
		if err != nil {
			t.Fatal(err)
		}
		back, err := decodeHouse(sealed)
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(h, back, same); diff != "" {
			t.Fatalf("(-kept +read):\n%s", diff)
		}
	})
}

func TestHouseTablesAreUndoneAndDoneAgain(t *testing.T) {
	w := newWorkbook(t)
	addLot(t, w)
	must0(t, w.PutHouse(House{Types: []HouseType{houseType("X1", 100)}}, "added 1 type"))
	must0(t, w.PutHouse(House{Types: []HouseType{houseType("X1", 200), houseType("X2", 50)}}, "added 2 types"))
	gains := func() string {
		h, err := w.House()
		must0(t, err)
		text := ""
		for _, x := range h.Types {
			if x.Added.IsZero() {
				t.Errorf("%v has no time", x)
			}
			text += fmt.Sprintf("%s %g ", x.Claim.Trait(screening.TraitType), x.Claim.Ratings[0].Low)
		}
		return text
	}
	for _, step := range []struct {
		name string
		do   func() (Done, error)
		want string
	}{
		{"as kept", nil, "X1 200 X2 50 "},
		{"undo brings the first back", w.Undo, "X1 100 "},
		{"undo leaves none", w.Undo, ""},
		{"redo", w.Redo, "X1 100 "},
		{"redo again", w.Redo, "X1 200 X2 50 "},
	} {
		if step.do != nil {
			done, err := step.do()
			if err != nil || done.ID != houseID || done.String() == "" {
				t.Fatalf("%s: %v, %v", step.name, done, err)
			}
		}
		if got := gains(); got != step.want {
			t.Errorf("%s: %q, want %q", step.name, got, step.want)
		}
		if report := mustCheck(t, w); report.Types != strings.Count(step.want, "X") {
			t.Errorf("%s: the check counts %d types", step.name, report.Types)
		}
	}
	events, err := w.History(houseID)
	if err != nil || len(events) != 2 || events[1].Action != "added 2 types" {
		t.Errorf("history %v, %v", events, err)
	}
	must0(t, w.PutHouse(House{}, "removed all"))
	if got := gains(); got != "" {
		t.Errorf("after removal %q", got)
	}
	// A lot's undo is not touched by any of it.
	for range 3 {
		if _, err := w.Undo(); err != nil {
			t.Fatal(err)
		}
	}
	if done, err := w.Undo(); err != nil || done.ID != (ID{Lot: 1}) || done.String() != "1: new lot" {
		t.Errorf("%v, %v", done, err)
	}
}

func TestHouseTablesAreReadWhileAnotherHoldsTheWorkbook(t *testing.T) {
	w := newWorkbook(t)
	addLot(t, w)
	const many = 3000 // so large that the record spans many pages
	large := House{Families: "id,kinds\n"}
	for i := range many {
		large.Types = append(large.Types, houseType(fmt.Sprintf("X%d", i), float64(i)))
	}
	must0(t, w.PutHouse(large, "added many"))
	if _, err := Open(w.Path(), Options{ReadOnly: true}); !errors.Is(err, ErrBusy) {
		t.Fatalf("the workbook is not held: %v", err)
	}
	h, err := ReadHouse(w.Path())
	if err != nil || len(h.Types) != many || h.Types[many-1].Claim.Ratings[0].Low != many-1 || h.Families != "id,kinds\n" {
		t.Fatalf("%d types, %v", len(h.Types), err)
	}
	// And while it is written.
	stop := make(chan struct{})
	var writing sync.WaitGroup
	writing.Go(func() {
		for i := 0; ; i++ {
			select {
			case <-stop:
				return
			default:
			}
			p := judged(1, screening.Accept, 1e-6)
			if _, err := w.SavePart(p, "saved"); err != nil {
				t.Error(err)
				return
			}
			time.Sleep(2 * time.Millisecond)
		}
	})
	for range 50 {
		if h, err := ReadHouse(w.Path()); err != nil || len(h.Types) != many {
			t.Errorf("%d types, %v", len(h.Types), err)
		}
	}
	close(stop)
	writing.Wait()
}

func TestHouseTablesTravelWithABackup(t *testing.T) {
	w := newWorkbook(t)
	must0(t, w.PutHouse(House{Types: []HouseType{houseType("X1", 100)}}, "added 1 type"))
	copied := filepath.Join(t.TempDir(), "copy")
	must0(t, w.Backup(context.Background(), copied))
	if h, err := ReadHouse(copied); err != nil || len(h.Types) != 1 {
		t.Errorf("%v, %v", h, err)
	}
	if report, err := Verify(copied); err != nil || report.Types != 1 {
		t.Errorf("%+v, %v", report, err)
	}
}

func TestDamagedHouseTablesAreFoundAndRefused(t *testing.T) {
	w := newWorkbook(t)
	must0(t, w.PutHouse(House{Types: []HouseType{houseType("X1", 100)}}, "added 1 type"))
	var key, value []byte
	must0(t, w.update(func(c *change) error {
		key = keyHouse
		value = append(value, c.tx.Bucket(bucketHouse).Get(key)...)
		bad := append([]byte(nil), value...)
		bad[len(bad)-1] ^= 1
		return c.tx.Bucket(bucketHouse).Put(key, bad)
	}))
	if _, err := ReadHouse(w.Path()); !errors.Is(err, ErrCorrupt) {
		t.Errorf("read: %v", err)
	}
	if _, err := w.House(); !errors.Is(err, ErrCorrupt) {
		t.Errorf("open: %v", err)
	}
	if report, err := w.Check(context.Background()); err != nil || report.OK() {
		t.Errorf("check: %+v, %v", report, err)
	}
	must0(t, w.update(func(c *change) error { return c.tx.Bucket(bucketHouse).Put(key, value) }))
}

func TestNoWorkbookHasNoHouseTables(t *testing.T) {
	dir := t.TempDir()
	if _, err := ReadHouse(filepath.Join(dir, "absent")); !errors.Is(err, ErrNotFound) {
		t.Errorf("absent: %v", err)
	}
	text := filepath.Join(dir, "text")
	must0(t, os.WriteFile(text, []byte("kind,type\n"), 0o600))
	if _, err := ReadHouse(text); !errors.Is(err, ErrForeign) {
		t.Errorf("a text: %v", err)
	}
	empty := newWorkbook(t)
	if h, err := ReadHouse(empty.Path()); err != nil || !h.IsZero() {
		t.Errorf("empty: %v, %v", h, err)
	}
}

// Whatever is in a file, reading the house tables of it ends with tables or an error.
func TestHouseTablesOfAFileDamagedByteByByte(t *testing.T) {
	w := newWorkbook(t)
	must0(t, w.PutHouse(House{Types: []HouseType{houseType("X1", 100)}}, "added 1 type"))
	copied := filepath.Join(t.TempDir(), "copy")
	must0(t, w.Backup(context.Background(), copied))
	good, err := os.ReadFile(copied)
	must0(t, err)
	wrong := 0
	for at := 0; at < len(good); at += 97 {
		bad := append([]byte(nil), good...)
		bad[at] ^= 0x55
		must0(t, os.WriteFile(copied, bad, 0o600))
		h, err := ReadHouse(copied)
		switch {
		case err != nil:
			wrong++
		case len(h.Types) != 1 || h.Types[0].Claim.Ratings[0].Low != 100:
			t.Fatalf("byte %d: %+v", at, h)
		}
	}
	if wrong == 0 {
		t.Error("no damage was noticed at all")
	}
}
