package cli

import (
	"context"
	"errors"
	"io"
	"strings"
	"syscall"

	"goodbin/screening/entry"
)

// The exit statuses. They are part of the interface and stay.
const (
	ExitDone        = 0   // done, and every part accepted or regraded
	ExitNotAccepted = 1   // done, and some part is neither; or nothing was found
	ExitRequest     = 2   // the request or a row was wrong
	ExitWorkbook    = 3   // the workbook could not be read or written: busy, corrupt, disk full
	ExitInterrupted = 130 // ended by ctrl+c
)

// failure is an error with its exit status and a hint.
type failure struct {
	status int
	err    error
	hint   string
}

func (f *failure) Error() string { return f.err.Error() }
func (f *failure) Unwrap() error { return f.err }

// request makes err a wrong request.
func request(err error, hint string) error {
	return &failure{status: ExitRequest, err: err, hint: hint}
}

// silent ends a command with a status and nothing more to say.
type silent int

func (s silent) Error() string { return "" }

// statusOf returns the exit status of what a command returned.
func statusOf(err error) int {
	var f *failure
	var s silent
	switch {
	case err == nil:
		return ExitDone
	case errors.Is(err, context.Canceled):
		return ExitInterrupted
	case errors.As(err, &s):
		return int(s)
	case errors.As(err, &f):
		return f.status
	case isWorkbookError(err):
		return ExitWorkbook
	case isClosedPipe(err):
		return ExitDone
	}
	return ExitRequest
}

// isClosedPipe reports whether the reader of standard output went away, which is no error: goodbin stock | head.
func isClosedPipe(err error) bool {
	return errors.Is(err, syscall.EPIPE) || errors.Is(err, io.ErrClosedPipe)
}

// hintOf returns what the error advises.
func hintOf(err error) string {
	var f *failure
	if errors.As(err, &f) && f.hint != "" {
		return f.hint
	}
	var e *entry.Error
	if errors.As(err, &e) && e.Hint != "" {
		return e.Hint
	}
	return workbookHint(err)
}

// report prints an error and its hint.
func (e *Env) report(err error) {
	if err == nil {
		return
	}
	text := err.Error()
	if text == "" || isClosedPipe(err) || errors.Is(err, context.Canceled) {
		return
	}
	var b strings.Builder
	b.WriteString("goodbin: " + e.clean(text) + "\n")
	if hint := hintOf(err); hint != "" {
		b.WriteString("goodbin: hint: " + e.clean(hint) + "\n")
	}
	io.WriteString(e.Err, b.String())
}
