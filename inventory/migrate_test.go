package inventory

import (
	"compress/gzip"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"testing"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

func TestMigrationsRunInOrderEachOnceAfterACopy(t *testing.T) {
	w := newWorkbook(t)
	addLot(t, w)
	must0(t, w.Close())
	db, err := openBolt(w.Path(), Options{Timeout: DefaultTimeout})
	must0(t, err)
	var ran []uint32
	step := func(from uint32, err error) migration {
		return migration{from, fmt.Sprintf("step %d", from), func(tx *bolt.Tx) error { ran = append(ran, from); return err }}
	}
	failing := errors.New("no")
	const now = schemaVersion
	if err := migrate(db, w.Path(), now+3, []migration{step(now-1, nil), step(now, failing), step(now+1, nil)}); !errors.Is(err, failing) {
		t.Errorf("a step that fails: %v", err)
	}
	if err := migrate(db, w.Path(), now+3, []migration{step(now-1, nil), step(now+1, nil)}); !errors.Is(err, ErrCorrupt) {
		t.Errorf("a gap in the steps: %v", err)
	}
	if err := migrate(db, w.Path(), now+3, []migration{step(now, nil), step(now+1, nil), step(now+2, nil)}); err != nil {
		t.Error(err)
	}
	if want := []uint32{now, now, now + 1, now + 2}; !slices.Equal(ran, want) {
		t.Errorf("steps ran from %v, want %v", ran, want)
	}
	must0(t, db.Close())
	before := fmt.Sprintf("%s.schema-%d", w.Path(), now)
	if report, err := Verify(before); err != nil || report.Lots != 1 {
		t.Errorf("the copy from before: %+v, %v", report, err)
	}
	if _, err := Open(w.Path(), Options{}); !errors.Is(err, ErrNewer) {
		t.Errorf("a file brought to a newer schema: %v", err)
	}
	must0(t, os.Rename(before, w.Path()))
}

// testdata/schema-1.goodbin.gz was written when schema 1 was new: a lot and a part with every field filled. The file of schema 2 is that
// one brought to it, with a row of a house table.
func TestAWorkbookOfEverySchemaOpens(t *testing.T) {
	for schema := 1; schema <= schemaVersion; schema++ {
		packed, err := os.Open(fmt.Sprintf("testdata/schema-%d.goodbin.gz", schema))
		must0(t, err)
		defer packed.Close()
		unpacked, err := gzip.NewReader(packed)
		must0(t, err)
		file, err := io.ReadAll(unpacked)
		must0(t, err)
		path := filepath.Join(t.TempDir(), "old")
		must0(t, os.WriteFile(path, file, 0o600))
		if report, err := Verify(path); err != nil || report.Parts == 0 {
			t.Errorf("schema %d, before it is opened for writing: %+v, %v", schema, report, err)
		}
		if h, err := ReadHouse(path); err != nil || (schema > 1) != (len(h.Types) == 1 && h.Types[0].Claim.Trait(screening.TraitType) == "X100") {
			t.Errorf("schema %d: house tables %+v, %v", schema, h, err)
		}
		w := mustOpen(t, path, Options{})
		p, err := w.GetPart(ID{12, 7})
		if err != nil || len(p.Part.Readings) != 2 || len(p.Part.Claim.Ratings) != 2 {
			t.Fatalf("schema %d: %+v, %v", schema, p, err)
		}
		r := p.Part.Readings[1]
		vce, _ := r.At.Get(screening.VCE)
		got := fmt.Sprintf("%s, %s, %s of %.4g %s at VCE %.4g V, %d repeats, %s, %s, %s", p.Part.Claim.Ratings[0].Section, r.Of, r.Sense, r.Value,
			r.Unit.Symbol(), vce, len(r.Repeats), p.Outcome.Verdict, p.Outcome.AsClaim.Traits[0].Name, p.Count)
		if want := "text 11, text 70, at least of 24 F at VCE 11 V, 2 repeats, accept, text 129, about 146"; got != want {
			t.Errorf("schema %d: the part reads\n%s\nwant\n%s", schema, got, want)
		}
		if w.Position().Part != p.ID {
			t.Errorf("schema %d: position %+v", schema, w.Position())
		}
		if done, err := w.Redo(); err != nil || done.Action != "took 1: receiver" {
			t.Errorf("schema %d: redo %v, %v", schema, done, err)
		}
		closeAndVerify(t, w)
	}
}
