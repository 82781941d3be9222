package inventory

import (
	"bytes"
	"errors"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"testing"

	bolt "go.etcd.io/bbolt"
)

// usedPages lists the pages in use of a file, so that damage done to them must be found.
func usedPages(t *testing.T, file []byte) []int {
	t.Helper()
	p, err := openPages(bytes.NewReader(file), int64(len(file)))
	must0(t, err)
	w := &pageWalk{pages: p, ctx: t.Context(), seen: make([]bool, p.high), problems: &problems{}}
	w.seen[0], w.seen[1] = true, true
	root, err := w.visit(p.root)
	must0(t, err)
	must0(t, w.tree(root, nil, nil, 0))
	if len(w.problems.list) > 0 {
		t.Fatalf("an undamaged file: %v", w.problems.list)
	}
	var used []int
	for id, seen := range w.seen {
		if seen && id > 1 {
			used = append(used, id)
		}
	}
	return used
}

func TestAFlippedByteIsNeverAPanicAndSeldomUnseen(t *testing.T) {
	good := workbookFile(t, 100)
	used := usedPages(t, good)
	random := rand.New(rand.NewPCG(1, 2))
	path := filepath.Join(t.TempDir(), "damaged")
	const trials = 200
	unseen := 0
	for range trials {
		file := bytes.Clone(good)
		at := used[random.IntN(len(used))]*os.Getpagesize() + random.IntN(os.Getpagesize())
		file[at] ^= byte(1 + random.IntN(255))
		must0(t, os.WriteFile(path, file, 0o600))
		report, err := Verify(path)
		switch {
		case err == nil && report.OK():
			unseen++ // slack between the entries of a page, or a bucket's sequence
		case err == nil, !errors.Is(err, ErrCorrupt) && !errors.Is(err, ErrForeign) && !errors.Is(err, ErrNewer):
			t.Fatalf("byte %d: %v, %v", at, err, report.Problems)
		}
		if w, err := Open(path, Options{}); err == nil {
			w.Close()
		}
	}
	t.Logf("of %d flipped bytes in used pages, %d were in unused room", trials, unseen)
	if unseen > trials/2 {
		t.Errorf("%d of %d flipped bytes were not seen", unseen, trials)
	}
}

func TestEveryFlippedByteOfARecordIsFoundInTheFile(t *testing.T) {
	good := workbookFile(t, 3)
	var record []byte
	path := filepath.Join(t.TempDir(), "damaged")
	must0(t, os.WriteFile(path, good, 0o600))
	db, err := bolt.Open(path, 0o600, &bolt.Options{ReadOnly: true})
	must0(t, err)
	must0(t, db.View(func(tx *bolt.Tx) error {
		record = bytes.Clone(tx.Bucket(bucketPart).Get(idKey(ID{1, 2})))
		return nil
	}))
	must0(t, db.Close())
	at := bytes.Index(good, record)
	if at < 0 || len(record) < 40 {
		t.Fatal("the record is not in the file")
	}
	for i := range record {
		file := bytes.Clone(good)
		file[at+i] ^= 0x10
		must0(t, os.WriteFile(path, file, 0o600))
		report, err := Verify(path)
		if err == nil || !strings.Contains(fmt.Sprint(report.Problems), "1-02") {
			t.Errorf("byte %d of the record: %v, %v", i, err, report.Problems)
		}
	}
}

func TestPageHeadsThatLieAreFoundWithoutBolt(t *testing.T) {
	good := workbookFile(t, 40)
	used := usedPages(t, good)
	path := filepath.Join(t.TempDir(), "damaged")
	size := os.Getpagesize()
	for _, id := range used {
		for name, spoil := range map[string]func(head []byte){
			"another id": func(head []byte) { native.PutUint64(head, uint64(id)+1) },
			"no kind":    func(head []byte) { native.PutUint16(head[8:], 0) },
			"endless":    func(head []byte) { native.PutUint32(head[12:], 1<<31) },
			"too many":   func(head []byte) { native.PutUint16(head[10:], 0xFFFE) },
			"its own child": func(head []byte) {
				native.PutUint16(head[8:], flagBranch)
				native.PutUint64(head[pageHead+8:], uint64(id))
			},
			"outside": func(head []byte) {
				native.PutUint32(head[pageHead:], 1<<30)
				native.PutUint32(head[pageHead+4:], 1<<30)
			},
			"zeroed entirely": func(head []byte) { clear(head[:size]) },
		} {
			file := bytes.Clone(good)
			spoil(file[id*size:])
			must0(t, os.WriteFile(path, file, 0o600))
			if report, err := Verify(path); !errors.Is(err, ErrCorrupt) && !errors.Is(err, ErrForeign) {
				t.Errorf("page %d, %s: %v, %v", id, name, err, report.Problems)
			}
		}
	}
}

func TestTwoBucketsThatShareAPageAreFound(t *testing.T) {
	file := workbookFile(t, 40)
	p, err := openPages(bytes.NewReader(file), int64(len(file)))
	must0(t, err)
	root, err := p.page(p.root)
	must0(t, err)
	part, _, err := p.find(root, bucketPart)
	must0(t, err)
	row, _, err := p.find(root, bucketRow)
	must0(t, err)
	if len(row.value) != bucketHead {
		t.Fatal("the bucket of rows is inside the root page")
	}
	at := cap(root.data) - cap(row.value) // the value is a piece of the page
	copy(file[int(p.root)*int(p.pageSize)+at:], part.value[:8])
	found := &problems{}
	must0(t, p.walkAll(t.Context(), found))
	if !strings.Contains(fmt.Sprint(found.list), "reached twice") {
		t.Errorf("found %v", found.list)
	}
}
