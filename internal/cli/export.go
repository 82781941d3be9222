package cli

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"goodbin/inventory"
)

const exportExamples = `  goodbin export > parts.csv                       every part with its readings as typed; goodbin screen reads it again
  goodbin export --delimiter semicolon --decimal-comma -o parts.csv
  goodbin export --json > parts.jsonl              one JSON object a part: lots, readings, history`

type exportFlags struct {
	out          string
	delimiter    string
	decimalComma bool
}

func (a *app) exportCommand() *cobra.Command {
	var f exportFlags
	cmd := &cobra.Command{
		Use:     "export",
		Short:   "write everything in the workbook as CSV or JSON",
		Example: exportExamples,
		Args:    noArguments,
		RunE:    func(cmd *cobra.Command, _ []string) error { return a.export(cmd.Context(), f) },
	}
	flags := cmd.Flags()
	flags.BoolVar(&a.json, "json", false, "JSON, one object a line: SI units, null where open or absent")
	flags.StringVarP(&f.out, "output", "o", "", "write to `FILE` instead of standard output")
	flags.StringVar(&f.delimiter, "delimiter", "comma", "`NAME` of the CSV delimiter: comma, semicolon or tab")
	flags.BoolVar(&f.decimalComma, "decimal-comma", false, "write decimals with a comma, for spreadsheets that expect it; not with the comma as delimiter")
	return cmd
}

// delimiters are the delimiters of CSV by name.
var delimiters = map[string]rune{"comma": ',', "semicolon": ';', "tab": '\t'}

func (a *app) export(ctx context.Context, f exportFlags) error {
	delimiter, ok := delimiters[f.delimiter]
	switch {
	case !ok:
		return request(fmt.Errorf("--delimiter %q is no delimiter", f.delimiter), "it is comma, semicolon or tab")
	case f.decimalComma && delimiter == ',':
		return request(errors.New("--decimal-comma needs another delimiter than the comma"), "add --delimiter semicolon")
	}
	return a.withWorkbook(ctx, true, func(w *inventory.Workbook) error {
		h, err := w.House()
		if err != nil {
			return err
		}
		if n := len(h.Types); n > 0 && !a.json {
			a.env.note("goodbin: %d %s of your own %s no part and not in this file: goodbin types export writes them", n, plural(n, "type"),
				map[bool]string{true: "is", false: "are"}[n == 1])
		}
		return a.toFile(f.out, w.Path(), func(out io.Writer) error {
			if a.json {
				return a.exportJSON(ctx, w, out)
			}
			return a.exportCSV(ctx, w, out, delimiter, f.decimalComma)
		})
	})
}

// toFile writes to standard output, or to a file that appears under its name only when it is complete.
func (a *app) toFile(path, workbook string, write func(io.Writer) error) error {
	if path == "" || path == "-" {
		out := bufio.NewWriterSize(a.env.Out, 1<<16)
		if err := write(out); err != nil {
			return err
		}
		return out.Flush()
	}
	if sameFile(path, workbook) {
		return request(fmt.Errorf("%q is the workbook itself", path), "name another file")
	}
	f, err := os.CreateTemp(filepath.Dir(path), ".goodbin-export-*")
	if err != nil {
		return request(fmt.Errorf("%q cannot be written: %w", path, err), "")
	}
	defer os.Remove(f.Name())
	out := bufio.NewWriterSize(f, 1<<16)
	err = write(out)
	for _, step := range []func() error{out.Flush, f.Sync, f.Close} {
		if stepErr := step(); err == nil {
			err = stepErr
		}
	}
	if err == nil {
		err = os.Chmod(f.Name(), 0o644)
	}
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	if err != nil {
		return fmt.Errorf("%q: %w", path, err)
	}
	a.env.note("goodbin: wrote %s", path)
	return nil
}

func sameFile(a, b string) bool {
	x, err1 := os.Stat(a)
	y, err2 := os.Stat(b)
	return err1 == nil && err2 == nil && os.SameFile(x, y)
}
