package inventory

import (
	"bytes"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

// workbookFile returns the bytes of a small closed workbook.
func workbookFile(t testing.TB, parts int) []byte {
	t.Helper()
	w := mustOpen(t, filepath.Join(t.TempDir(), "w"), Options{Create: true})
	l := addLot(t, w)
	loadParts(t, w, l.ID, parts)
	save(t, w, judged(l.ID, screening.Accept, 1e-6), "saved")
	must0(t, w.Close())
	file, err := os.ReadFile(w.Path())
	must0(t, err)
	return file
}

func otherDatabase(t testing.TB) []byte {
	t.Helper()
	path := filepath.Join(t.TempDir(), "other")
	db, err := bolt.Open(path, 0o600, nil)
	must0(t, err)
	must0(t, db.Update(func(tx *bolt.Tx) error {
		b, err := tx.CreateBucket([]byte("meta"))
		return errors.Join(err, b.Put([]byte("format"), []byte("somebody's")))
	}))
	must0(t, db.Close())
	file, err := os.ReadFile(path)
	must0(t, err)
	return file
}

func newerWorkbook(t testing.TB) []byte {
	t.Helper()
	w := mustOpen(t, filepath.Join(t.TempDir(), "newer"), Options{Create: true})
	must0(t, w.update(func(c *change) error {
		return c.tx.Bucket(bucketMeta).Put(keySchema, []byte{0, 0, 0, schemaVersion + 1})
	}))
	must0(t, w.Close())
	file, err := os.ReadFile(w.Path())
	must0(t, err)
	return file
}

// usedBytes is the end of the last page that a file has ever used.
func usedBytes(t testing.TB, file []byte) int {
	t.Helper()
	p, err := openPages(bytes.NewReader(file), int64(len(file)))
	must0(t, err)
	return int(p.high) * int(p.pageSize)
}

func TestWhatIsNoWorkbookIsSaidAndLeftAlone(t *testing.T) {
	good := workbookFile(t, 300)
	metas := bytes.Clone(good)
	clear(metas[:2*os.Getpagesize()])
	badMetas := bytes.Clone(good)
	badMetas[pageHead+20] ^= 1
	badMetas[os.Getpagesize()+pageHead+20] ^= 1
	for _, tt := range []struct {
		name string
		file []byte
		want error
		says string
	}{
		{"an empty file", nil, ErrForeign, "an empty file"},
		{"one byte", []byte("x"), ErrForeign, "a text file"},
		{"a text", []byte("part,value\n1,4k7 Ω\n"), ErrForeign, "a text file"},
		{"an executable", []byte("\x7fELF\x02\x01\x01\x00"), ErrForeign, "a binary file"},
		{"zeros", make([]byte, 100_000), ErrForeign, "a binary file"},
		{"another program's database", otherDatabase(t), ErrForeign, "another program"},
		{"a newer schema", newerWorkbook(t), ErrNewer, fmt.Sprintf("schema %d", schemaVersion+1)},
		{"head pages wiped", metas, ErrForeign, "a binary file"},
		{"both head pages with a flipped bit", badMetas, ErrCorrupt, "damaged"},
		{"cut to a page", good[:os.Getpagesize()], ErrCorrupt, "shorter"},
		{"cut within its last page in use", good[:usedBytes(t, good)-1], ErrCorrupt, "shorter"},
		{"cut to four pages", good[:4*os.Getpagesize()], ErrCorrupt, "shorter"},
	} {
		path := filepath.Join(t.TempDir(), "file")
		must0(t, os.WriteFile(path, tt.file, 0o600))
		for _, opts := range []Options{{}, {Create: true}, {ReadOnly: true}} {
			w, err := Open(path, opts)
			if err == nil {
				w.Close()
			}
			if !errors.Is(err, tt.want) || !strings.Contains(fmt.Sprint(err), tt.says) || !strings.Contains(fmt.Sprint(err), path) {
				t.Errorf("%s, %+v: %v", tt.name, opts, err)
			}
		}
		if _, err := Verify(path); !errors.Is(err, tt.want) {
			t.Errorf("verify %s: %v", tt.name, err)
		}
		if after, err := os.ReadFile(path); err != nil || !bytes.Equal(after, tt.file) {
			t.Errorf("%s was changed, %v", tt.name, err)
		}
		if names, err := os.ReadDir(filepath.Dir(path)); err != nil || len(names) != 1 {
			t.Errorf("%s: something was left beside it: %v", tt.name, names)
		}
	}
}

func TestWhatIsNotThereIsSaid(t *testing.T) {
	folder := t.TempDir()
	for _, tt := range []struct {
		name, path string
		opts       Options
		want       error
	}{
		{"no file, not to be made", folder + "/none", Options{}, ErrNotFound},
		{"no file to read", folder + "/none", Options{Create: true, ReadOnly: true}, ErrNotFound},
		{"no folder", folder + "/none/parts", Options{Create: true}, ErrNotFound},
		{"a folder", folder, Options{Create: true}, ErrForeign},
	} {
		if _, err := Open(tt.path, tt.opts); !errors.Is(err, tt.want) {
			t.Errorf("%s: %v", tt.name, err)
		}
	}
	if left, _ := os.ReadDir(folder); len(left) != 0 {
		t.Errorf("left behind: %v", left)
	}
}

func TestASecondProcessIsToldWhoHasIt(t *testing.T) {
	w := newWorkbook(t)
	addLot(t, w)
	for _, opts := range []Options{{}, {ReadOnly: true}} {
		opts.Timeout = 20 * time.Millisecond
		_, err := Open(w.Path(), opts)
		if !errors.Is(err, ErrBusy) || !strings.Contains(err.Error(), fmt.Sprintf("process %d on ", os.Getpid())) ||
			!strings.Contains(err.Error(), "backup copy") {
			t.Errorf("%+v: %v", opts, err)
		}
	}
	copied := filepath.Join(t.TempDir(), "copy")
	must0(t, w.Backup(t.Context(), copied))
	for range 2 {
		r := mustOpen(t, copied, Options{ReadOnly: true})
		defer r.Close()
		if lots, err := r.Lots(); err != nil || len(lots) != 1 {
			t.Errorf("the copy holds %v, %v", lots, err)
		}
		if _, err := r.AddLot(Lot{Kind: "resistor"}); !errors.Is(err, ErrReadOnly) {
			t.Errorf("writing to what was opened for reading: %v", err)
		}
	}
	must0(t, w.Close())
	if _, err := os.Stat(sidecarPath(w.Path())); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("the sidecar stays after closing: %v", err)
	}
}

func TestASidecarLeftOverDoesNoHarm(t *testing.T) {
	w := newWorkbook(t)
	must0(t, w.Close())
	must0(t, os.WriteFile(sidecarPath(w.Path()), []byte(`{"pid":1,"host":"\u001b[2Jelsewhere","since":"2020-01-01T00:00:00Z"}`), 0o600))
	if text := busyText(w.Path()); strings.ContainsRune(text, '\x1b') {
		t.Errorf("an escape sequence reaches the screen: %q", text)
	}
	w2 := mustOpen(t, w.Path(), Options{})
	must0(t, w2.Close())
	for _, text := range []string{"not ours", "", "[]"} {
		must0(t, os.WriteFile(sidecarPath(w.Path()), []byte(text), 0o600))
		w2 := mustOpen(t, w.Path(), Options{})
		must0(t, w2.Close())
		if got, err := os.ReadFile(sidecarPath(w.Path())); err != nil || string(got) != text {
			t.Errorf("somebody's file %q is now %q, %v", text, got, err)
		}
	}
}

func TestAMapThatTurnsOutDamagedIsAnError(t *testing.T) {
	err := guard("parts.goodbin", func() error { panic("page 7 already freed") })
	if !errors.Is(err, ErrCorrupt) || !strings.Contains(err.Error(), "backup") {
		t.Errorf("a panic of the file's reader: %v", err)
	}
}

func FuzzOpen(f *testing.F) {
	good := workbookFile(f, 2)
	f.Add([]byte(nil), uint32(0), byte(0))
	f.Add(otherDatabase(f)[:16<<10], uint32(16), byte(1))
	f.Add(good, uint32(4096*3+8), byte(2))
	f.Add(good, uint32(4096*2), byte(0xFF))
	f.Add(good[:len(good)/2], uint32(100), byte(7))
	dir := f.TempDir()
	f.Fuzz(func(t *testing.T, file []byte, at uint32, flip byte) {
		if len(file) > 0 {
			file = bytes.Clone(file)
			file[int(at)%len(file)] ^= flip
		}
		file = healMetas(file)
		path := filepath.Join(dir, fmt.Sprint(os.Getpid()))
		must0(t, os.WriteFile(path, file, 0o600))
		defer os.Remove(path)
		w, err := Open(path, Options{})
		if err == nil {
			must0(t, w.Close())
			// What Open lets pass, the whole walk looks at before anything else is read.
			report, err := Verify(path)
			if err != nil && !errors.Is(err, ErrCorrupt) && !errors.Is(err, ErrNewer) || err == nil && !report.OK() {
				t.Errorf("verify: %v, %v", err, report.Problems)
			}
			return
		}
		for _, known := range []error{ErrForeign, ErrNewer, ErrCorrupt} {
			if errors.Is(err, known) {
				return
			}
		}
		t.Errorf("an error that says nothing: %v", err)
	})
}

// healMetas makes the checksums of the head pages right, so that the fuzzer gets past them.
func healMetas(file []byte) []byte {
	for _, at := range []int{0, 4096} {
		if len(file) >= at+pageHead+metaSize {
			meta := file[at+pageHead:]
			native.PutUint64(meta[metaBeforeSum:], metaSum(meta))
		}
	}
	return file
}
