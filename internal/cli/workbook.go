package cli

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"runtime"

	"goodbin/inventory"
	"goodbin/screening"
)

// workbookVariable is the environment variable that names the workbook's file.
const workbookVariable = "GOODBIN_WORKBOOK"

// workbookPath returns the workbook's file: the flag's, else the environment's, else the default in the user's data directory.
func (a *app) workbookPath() (string, error) {
	if a.workbook != "" {
		return a.workbook, nil
	}
	if path := a.env.Getenv(workbookVariable); path != "" {
		return path, nil
	}
	dir := dataDirectory(runtime.GOOS, a.env.Getenv)
	if dir == "" {
		return "", request(errors.New("no home directory is known to keep the workbook in"), "name the file: --workbook FILE")
	}
	return filepath.Join(dir, "goodbin", "workbook.goodbin"), nil
}

// dataDirectory is where the system keeps the data of a user's programs; "" where the environment does not say.
func dataDirectory(system string, getenv func(string) string) string {
	home := getenv("HOME")
	switch system {
	case "windows":
		return getenv("LOCALAPPDATA")
	case "darwin":
		if home != "" {
			return filepath.Join(home, "Library", "Application Support")
		}
		return ""
	}
	if dir := getenv("XDG_DATA_HOME"); filepath.IsAbs(dir) {
		return dir
	}
	if home == "" {
		return ""
	}
	return filepath.Join(home, ".local", "share")
}

// tables are the versions of the rulebooks' tables by kind.
func (a *app) tables() map[screening.Kind]string {
	tables := make(map[screening.Kind]string, len(a.books))
	for _, b := range a.books {
		tables[b.Kind] = b.Tables
	}
	return tables
}

// withWorkbook opens the workbook, runs f and closes it. Under --demo it is a throwaway one filled from the demo box. A workbook opened for
// reading only must be there already.
func (a *app) withWorkbook(ctx context.Context, readOnly bool, f func(*inventory.Workbook) error) (err error) {
	if a.demo {
		return a.withDemo(ctx, f)
	}
	path, err := a.workbookPath()
	if err != nil {
		return err
	}
	if !readOnly {
		if err := os.MkdirAll(filepath.Dir(path), 0o700); err != nil {
			return &failure{status: ExitWorkbook, err: fmt.Errorf("the folder of the workbook cannot be made: %w", err)}
		}
	}
	return a.withFile(path, inventory.Options{ReadOnly: readOnly, Create: !readOnly, Now: a.env.Now, Tables: a.tables()}, f)
}

func (a *app) withFile(path string, opts inventory.Options, f func(*inventory.Workbook) error) (err error) {
	w, err := inventory.Open(path, opts)
	if err != nil {
		return &failure{status: ExitWorkbook, err: err, hint: workbookHint(err)}
	}
	defer func() {
		if closed := w.Close(); err == nil && closed != nil {
			err = &failure{status: ExitWorkbook, err: closed}
		}
	}()
	return f(w)
}

// withDemo fills a throwaway workbook from the demo box.
func (a *app) withDemo(ctx context.Context, f func(*inventory.Workbook) error) error {
	dir, err := os.MkdirTemp("", "goodbin-demo-")
	if err != nil {
		return &failure{status: ExitWorkbook, err: err}
	}
	defer os.RemoveAll(dir)
	opts := inventory.Options{Create: true, Now: a.env.Now, Tables: a.tables()}
	return a.withFile(filepath.Join(dir, "demo.goodbin"), opts, func(w *inventory.Workbook) error {
		s := a.newScreening("the demo box")
		s.asTyped, s.quiet, s.w = true, true, w
		if err := s.run(ctx, bytes.NewReader(a.env.DemoBox)); err != nil {
			return err
		}
		if s.wrong > 0 {
			return fmt.Errorf("%d rows of the demo box cannot be read", s.wrong)
		}
		return f(w)
	})
}

var workbookErrors = []error{
	inventory.ErrBusy, inventory.ErrForeign, inventory.ErrNewer, inventory.ErrCorrupt, inventory.ErrFull, inventory.ErrReadOnly,
}

// isWorkbookError reports whether the workbook could not be read or written.
func isWorkbookError(err error) bool {
	for _, e := range workbookErrors {
		if errors.Is(err, e) {
			return true
		}
	}
	return false
}

// workbookHint advises what to do about a workbook that cannot be used.
func workbookHint(err error) string {
	switch {
	case errors.Is(err, inventory.ErrBusy):
		return "goodbin backup COPY works all the same; then goodbin stock --workbook COPY"
	case errors.Is(err, inventory.ErrForeign):
		return "name another file with --workbook"
	case errors.Is(err, inventory.ErrNewer):
		return "use the newer goodbin that wrote it"
	case errors.Is(err, inventory.ErrCorrupt):
		return "goodbin verify says what is damaged; a backup can be used with --workbook COPY"
	case errors.Is(err, inventory.ErrFull), errors.Is(err, inventory.ErrReadOnly):
		return "nothing acknowledged before is lost"
	case errors.Is(err, inventory.ErrNotFound):
		return "goodbin screen FILE.csv or goodbin bench begins a workbook; goodbin --demo shows one"
	}
	return ""
}
