package inventory

import (
	"errors"
	"os"
	"path/filepath"
	"testing"

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
			}
		}
		saved <- err
	}()
	path := filepath.Join(t.TempDir(), "copy")
	for range 5 {
		<-acknowledged // an old count
		least := <-acknowledged
		err := BackupHeld(t.Context(), w.Path(), path)
		if errors.Is(err, ErrBusy) {
			t.Skip("this machine commits faster than it copies; nothing was copied, which is what is promised")
		}
		must0(t, err)
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
