package inventory

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"

	bolt "go.etcd.io/bbolt"
)

// Backup writes a copy of the workbook to path while it is open: under a temporary name, synced, verified, then renamed. An older backup
// there is replaced; anything that is not a goodbin workbook is not, nor the workbook itself.
func (w *Workbook) Backup(ctx context.Context, path string) error {
	if same, err := sameFile(w.path, path); err != nil || same {
		if same {
			return fail(ErrInvalid, quote(path)+" is the workbook itself; name another file for the copy")
		}
		return err
	}
	if err := recognise(path); errors.Is(err, ErrForeign) || errors.Is(err, ErrNewer) {
		return err
	}
	return guard(w.path, func() error {
		return copyTo(ctx, path, committed(w.db))
	})
}

// committed writes the state of an open file.
func committed(db *bolt.DB) func(io.Writer) error {
	return func(to io.Writer) error {
		return db.View(func(tx *bolt.Tx) error {
			_, err := tx.WriteTo(to)
			return err
		})
	}
}

func sameFile(a, b string) (bool, error) {
	first, err := os.Stat(a)
	if err != nil {
		return false, fmt.Errorf("backup: %w", err)
	}
	second, err := os.Stat(b)
	if err != nil {
		return false, nil // not there yet, or an error that the copy will meet
	}
	return os.SameFile(first, second), nil
}

// copyTo writes what fill writes to a file, verified before it takes the name.
func copyTo(ctx context.Context, path string, fill func(io.Writer) error) error {
	folder := filepath.Dir(path)
	temp, err := os.CreateTemp(folder, "."+filepath.Base(path)+".part-*")
	if err != nil {
		return explainCopy(path, err)
	}
	defer os.Remove(temp.Name())
	to := &stoppable{ctx: ctx, to: temp}
	err = fill(to)
	if to.failed != nil {
		err = to.failed // bbolt words it, but does not wrap it
	}
	if err == nil {
		err = temp.Sync()
	}
	if closing := temp.Close(); err == nil {
		err = closing
	}
	if err != nil {
		return explainCopy(path, err)
	}
	report, err := VerifyContext(ctx, temp.Name())
	if err != nil {
		problem := err.Error()
		if len(report.Problems) > 0 {
			problem = report.Problems[0]
		}
		if ctx.Err() != nil {
			return ctx.Err()
		}
		return failFrom(ErrCorrupt, err, "the copy of the workbook does not verify ("+problem+"), so "+quote(path)+
			" was left as it was: run `goodbin verify` on the workbook")
	}
	if err := os.Rename(temp.Name(), path); err != nil {
		return explainCopy(path, err)
	}
	return syncFolder(folder)
}

func explainCopy(path string, err error) error {
	switch {
	case errors.Is(err, context.Canceled), errors.Is(err, context.DeadlineExceeded):
		return err
	case isFull(err):
		return failFrom(ErrFull, err, "no room left for the copy "+quote(path)+"; nothing was replaced: free some space, or copy to another disk")
	case isReadOnly(err):
		return failFrom(ErrReadOnly, err, "the copy "+quote(path)+" cannot be written; check the permissions of its folder")
	case errors.Is(err, os.ErrNotExist):
		return failFrom(ErrNotFound, err, "there is no folder "+quote(filepath.Dir(path))+" for the copy; make it first")
	}
	return fmt.Errorf("copy the workbook to %s: %w", quote(path), err)
}

// stoppable is a writer that stops with its context and remembers why it failed.
type stoppable struct {
	ctx    context.Context
	to     io.Writer
	failed error
}

func (s *stoppable) Write(b []byte) (n int, err error) {
	if err = s.ctx.Err(); err == nil {
		n, err = s.to.Write(b)
	}
	if err != nil {
		s.failed = err
	}
	return n, err
}
