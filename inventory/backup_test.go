package inventory

import (
	"bytes"
	"context"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"goodbin/screening"
)

func TestABackupIsTakenWhileTheWorkbookIsOpen(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	loadParts(t, w, l.ID, 500)
	path := filepath.Join(t.TempDir(), "copy")
	stop := make(chan struct{})
	saved := make(chan error)
	go func() { // saving goes on meanwhile
		var err error
		for err == nil {
			select {
			case <-stop:
				saved <- nil
				return
			default:
				_, err = w.SavePart(judged(l.ID, screening.Accept, 1e-6), "saved")
			}
		}
		saved <- err
	}()
	for range 3 { // the second replaces the first
		must0(t, w.Backup(t.Context(), path))
	}
	close(stop)
	must0(t, <-saved)
	report, err := Verify(path)
	if err != nil || report.Parts < 500 || report.Lots != 1 {
		t.Errorf("the copy: %+v, %v", report, err)
	}
	if names, _ := os.ReadDir(filepath.Dir(path)); len(names) != 1 {
		t.Errorf("left beside the copy: %v", names)
	}
}

func TestABackupReplacesNothingOfValue(t *testing.T) {
	w := newWorkbook(t)
	addLot(t, w)
	folder := t.TempDir()
	text := filepath.Join(folder, "letter.txt")
	must0(t, os.WriteFile(text, []byte("dear aunt"), 0o600))
	link := filepath.Join(folder, "link")
	must0(t, os.Symlink(w.Path(), link))
	newer := filepath.Join(folder, "newer")
	must0(t, os.WriteFile(newer, newerWorkbook(t), 0o600))
	for _, tt := range []struct {
		name, path string
		want       error
	}{
		{"the workbook itself", w.Path(), ErrInvalid},
		{"the workbook by another name", link, ErrInvalid},
		{"somebody's file", text, ErrForeign},
		{"a folder", folder, ErrForeign},
		{"a newer workbook", newer, ErrNewer},
		{"a folder that is not there", folder + "/none/copy", ErrNotFound},
	} {
		if err := w.Backup(t.Context(), tt.path); !errors.Is(err, tt.want) {
			t.Errorf("%s: %v", tt.name, err)
		}
	}
	if got, err := os.ReadFile(text); err != nil || !bytes.Equal(got, []byte("dear aunt")) {
		t.Errorf("the letter is now %q, %v", got, err)
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if err := w.Backup(ctx, filepath.Join(folder, "copy")); !errors.Is(err, context.Canceled) {
		t.Errorf("interrupted: %v", err)
	}
	if names, _ := os.ReadDir(folder); len(names) != 3 {
		t.Errorf("left behind: %v", names)
	}
}

func TestABackupOfDamageIsRefusedAndTheOldOneStays(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	save(t, w, judged(l.ID, screening.Accept, 1e-6), "saved")
	path := filepath.Join(t.TempDir(), "copy")
	must0(t, w.Backup(t.Context(), path))
	before, err := os.ReadFile(path)
	must0(t, err)
	key := idKey(ID{l.ID, 1})
	var whole []byte
	put := func(value func([]byte) []byte) {
		must0(t, w.update(func(c *change) error {
			b := c.tx.Bucket(bucketPart)
			return b.Put(key, value(bytes.Clone(b.Get(key))))
		}))
	}
	put(func(b []byte) []byte { whole = bytes.Clone(b); b[20] ^= 1; return b })
	if err := w.Backup(t.Context(), path); !errors.Is(err, ErrCorrupt) {
		t.Errorf("backup of a damaged record: %v", err)
	}
	if after, err := os.ReadFile(path); err != nil || !bytes.Equal(before, after) {
		t.Errorf("the older backup was replaced, %v", err)
	}
	_, err = w.GetPart(ID{l.ID, 1})
	if !errors.Is(err, ErrCorrupt) || !strings.Contains(err.Error(), "part 1-01") || !strings.Contains(err.Error(), "backup") {
		t.Errorf("reading the damaged record: %v", err)
	}
	put(func([]byte) []byte { return whole })
}
