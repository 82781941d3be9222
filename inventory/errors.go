package inventory

import (
	"errors"
	"io/fs"
	"syscall"

	berrors "go.etcd.io/bbolt/errors"
)

// What a caller decides by. Every error that wraps one of these says in its text what to do.
var (
	ErrBusy     = errors.New("the workbook is in use")              // another process has it open
	ErrForeign  = errors.New("not a goodbin workbook")              // the file is something else; it was not touched
	ErrNewer    = errors.New("the workbook is of a newer goodbin")  // its schema is newer than this program knows
	ErrCorrupt  = errors.New("the workbook is damaged")             // truncated, overwritten or bit-flipped
	ErrFull     = errors.New("the disk is full")                    // nothing of the change was kept
	ErrReadOnly = errors.New("the workbook cannot be written")      // file, folder or this opening is read-only
	ErrNotFound = errors.New("not in the workbook")                 // no such lot or part, or no such file
	ErrHeld     = errors.New("already in the workbook")             // that lot or part number is taken
	ErrCount    = errors.New("the count does not allow this")       // more taken than there is
	ErrNoUndo   = errors.New("nothing to undo")                     // or nothing to redo
	ErrInvalid  = errors.New("this cannot be kept in the workbook") // a lot without kind, a number out of range
)

// failure is an error whose text stands alone and that is one of the sentinels.
type failure struct {
	text  string
	kind  error
	cause error
}

func (f *failure) Error() string { return f.text }

func (f *failure) Unwrap() []error {
	if f.cause == nil {
		return []error{f.kind}
	}
	return []error{f.kind, f.cause}
}

func fail(kind error, text string) error { return &failure{text: text, kind: kind} }

func failFrom(kind, cause error, text string) error {
	return &failure{text: text, kind: kind, cause: cause}
}

// isFull reports whether an error of the file system means that there is no room: a full disk, a used-up quota, a size limit.
func isFull(err error) bool {
	return errors.Is(err, syscall.ENOSPC) || errors.Is(err, syscall.EDQUOT) || errors.Is(err, syscall.EFBIG) ||
		errors.Is(err, berrors.ErrMaxSizeReached)
}

func isReadOnly(err error) bool {
	return errors.Is(err, fs.ErrPermission) || errors.Is(err, syscall.EROFS) || errors.Is(err, berrors.ErrDatabaseReadOnly)
}

// explainWrite says what a failed write means to the person at the bench.
func explainWrite(path string, err error) error {
	switch {
	case err == nil:
		return nil
	case isFull(err):
		return failFrom(ErrFull, err, "no room left to write "+quote(path)+"; nothing of this change was kept: free some space and do it again")
	case isReadOnly(err):
		return failFrom(ErrReadOnly, err, quote(path)+" cannot be written; check the permissions of the file and of its folder")
	}
	return err
}
