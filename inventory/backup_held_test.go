package inventory

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"testing"
	"time"

	"goodbin/screening"
)

// A copy is taken of a workbook whose lock is held, while parts are saved into it: every copy verifies and holds all that was acknowledged
// before it began.
func TestABackupOfAWorkbookThatIsHeldElsewhere(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	loadParts(t, w, l.ID, 500)
	stop, saved, acknowledged := make(chan struct{}), make(chan error), make(chan int, 1)
	go func() {
		n := 500
		var err error
		for err == nil {
			select {
			case <-stop:
				saved <- nil
				return
			case acknowledged <- n:
			default:
				if _, err = w.SavePart(judged(l.ID, screening.Accept, 1e-6), "saved"); err == nil {
					n++
				}
				time.Sleep(20 * time.Millisecond) // faster than any hand, slower than a copy
			}
		}
		saved <- err
	}()
	path := filepath.Join(t.TempDir(), "copy")
	for range 5 {
		<-acknowledged // an old count
		least := <-acknowledged
		must0(t, BackupHeld(t.Context(), w.Path(), path))
		report, err := Verify(path)
		if err != nil || report.Parts < least {
			t.Errorf("the copy: %+v, %v; %d parts were acknowledged before it", report, err, least)
		}
	}
	close(stop)
	must0(t, <-saved)
}

func TestABackupOfAHeldWorkbookReplacesNothingOfValue(t *testing.T) {
	w := newWorkbook(t)
	text := filepath.Join(t.TempDir(), "letter.txt")
	must0(t, os.WriteFile(text, []byte("dear aunt"), 0o600))
	if err := BackupHeld(t.Context(), w.Path(), text); !errors.Is(err, ErrForeign) {
		t.Errorf("over a letter: %v", err)
	}
	if err := BackupHeld(t.Context(), w.Path(), w.Path()); !errors.Is(err, ErrInvalid) {
		t.Errorf("over itself: %v", err)
	}
	if err := BackupHeld(t.Context(), text, filepath.Join(t.TempDir(), "copy")); !errors.Is(err, ErrForeign) {
		t.Errorf("of a letter: %v", err)
	}
}

// meddler commits to the workbook while a copy of it is being written.
type meddler func()

func (m meddler) Write(b []byte) (int, error) {
	m()
	return len(b), nil
}

func TestACopyDuringWhichSomethingIsSavedIsNotTaken(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	if err := copyState(w.Path(), meddler(func() {})); err != nil {
		t.Errorf("nothing was saved meanwhile: %v", err)
	}
	save := meddler(func() {
		_, err := w.SavePart(judged(l.ID, screening.Accept, 1e-6), "saved")
		must0(t, err)
	})
	if err := copyState(w.Path(), save); !errors.Is(err, errCommitted) {
		t.Errorf("a part was saved meanwhile: %v", err)
	}
	busy := filepath.Join(t.TempDir(), "copy")
	err := copyTo(t.Context(), busy, func(to io.Writer) error { return copyState(w.Path(), io.MultiWriter(to, save)) })
	if !errors.Is(err, errCommitted) {
		t.Errorf("the copy is taken all the same: %v", err)
	}
	if _, err := os.Stat(busy); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("a copy that was not taken is there: %v", err)
	}
}
