package inventory

import (
	"context"
	"errors"
	"io"
)

// heldTries is how often a copy is begun again because the other process committed meanwhile. A person at the bench commits once in
// seconds; a copy takes a fraction of one.
const heldTries = 20

var errCommitted = errors.New("the workbook changed while it was copied")

// BackupHeld writes a verified copy of a workbook that another process has open, and is otherwise as [Workbook.Backup].
//
// It takes no lock, and needs none: a commit writes only to pages that the state before it does not use, and only then the head page that
// makes them the state. A copy during which the newest head page stayed the same therefore holds that state whole; where it changed, the
// copy is begun again.
func BackupHeld(ctx context.Context, source, path string) error {
	if same, err := sameFile(source, path); err != nil || same {
		if same {
			return fail(ErrInvalid, quote(path)+" is the workbook itself; name another file for the copy")
		}
		return err
	}
	if err := recognise(source); err != nil {
		return err
	}
	if err := recognise(path); errors.Is(err, ErrForeign) || errors.Is(err, ErrNewer) {
		return err
	}
	err := errCommitted
	for try := 0; try < heldTries && errors.Is(err, errCommitted) && ctx.Err() == nil; try++ {
		err = copyTo(ctx, path, func(to io.Writer) error { return copyState(source, to) })
	}
	if errors.Is(err, errCommitted) {
		return failFrom(ErrBusy, err, quote(source)+" is being written all the time by another process; try again when that has ended")
	}
	return err
}

// copyState copies the pages in use of a file that another process may be writing, or fails with errCommitted.
func copyState(source string, to io.Writer) error {
	file, size, err := openRegular(source)
	if err != nil {
		return err
	}
	defer file.Close()
	before, err := openPages(file, size)
	if err != nil {
		return corrupt(source, err)
	}
	if _, err := io.Copy(to, io.NewSectionReader(file, 0, int64(before.high)*before.pageSize)); err != nil {
		return err
	}
	after, err := openPages(file, size)
	if err != nil || after.txid != before.txid {
		return errCommitted
	}
	return nil
}
