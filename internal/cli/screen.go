package cli

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime/debug"
	"time"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

const screenExamples = `  goodbin screen box.csv
  goodbin screen box.csv --json                 one JSON object a line
  goodbin screen - < box.csv                    from standard input
  goodbin screen box.csv --keep=false           judge only; the workbook is not touched
  goodbin screen box.csv --meter "hand-held LCR"

  kind,lot,part,place,claim,capacitance,esr@120Hz,"leakage@35V,2min [uA]",seen
  electrolytic,12,1,drawer 3,2200uF 35V M,2010uF,61m,45,nothing

The columns are the words of goodbin judge: claim holds bare words separated by spaces; a unit in brackets is that of the column's bare
numbers. Delimiter: comma, semicolon (then 1,5 is a decimal) or tab. A row without a lot goes into a new lot of its kind.`

// maxShownErrors is how many wrong rows are told one by one on standard error.
const maxShownErrors = 50

func (a *app) screenCommand() *cobra.Command {
	var again, asTyped, keep bool
	cmd := &cobra.Command{
		Use:     "screen FILE.csv",
		Short:   "judge a box of parts from a CSV file and keep every one with its state",
		Example: screenExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) != 1 {
				return request(errors.New("name one CSV file"), "goodbin screen box.csv; - is standard input")
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			s := a.newScreening(displayName(args[0]))
			s.again, s.asTyped = again, asTyped
			return a.screenFile(cmd.Context(), args[0], s, keep)
		},
	}
	a.judgeFlags(cmd)
	cmd.Flags().BoolVar(&again, "again", false, "replace parts that the workbook holds already")
	cmd.Flags().BoolVar(&asTyped, "as-typed", false, "take readings that look like a slip of the decimal point or prefix as they are")
	cmd.Flags().BoolVar(&keep, "keep", true, "keep the parts in the workbook")
	return cmd
}

// displayName is how errors name the file.
func displayName(path string) string {
	if path == "-" {
		return "standard input"
	}
	return filepath.Base(path)
}

func (a *app) screenFile(ctx context.Context, path string, s *screeningRun, keep bool) error {
	var err error
	if s.policy, err = a.policy(); err != nil {
		return err
	}
	if s.policy.Rule != screening.ByProbability && !a.json {
		a.env.note("goodbin: decision rule: %s", s.policy.Rule.Words())
	}
	var in io.Reader
	if path == "-" {
		in = interruptible(ctx, a.env.In)
	} else {
		f, err := openRegular(path)
		if err != nil {
			return request(err, "")
		}
		defer f.Close()
		in = f
	}
	if !keep {
		err = s.run(ctx, in)
	} else {
		err = a.withWorkbook(ctx, false, func(w *inventory.Workbook) error {
			s.w = w
			return s.run(ctx, in)
		})
	}
	if err != nil {
		return err
	}
	return s.finish()
}

// interruptible returns a reader that ends when the context does, though whoever feeds in is still waited for.
func interruptible(ctx context.Context, in io.Reader) io.Reader {
	out, feed := io.Pipe()
	context.AfterFunc(ctx, func() { feed.CloseWithError(ctx.Err()) })
	go func() {
		_, err := io.Copy(feed, in)
		feed.CloseWithError(err)
	}()
	return out
}

// openRegular opens a file to be read; a folder is refused before reading gives an odd error.
func openRegular(path string) (*os.File, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	info, err := f.Stat()
	if err == nil && info.IsDir() {
		err = fmt.Errorf("%q is a folder", path)
	}
	if err != nil {
		f.Close()
		return nil, err
	}
	return f, nil
}

// bulkGCPercent is how far the memory may grow between collections while a file is screened.
const bulkGCPercent = 200

// screeningRun is one screening of a file.
type screeningRun struct {
	*app
	name    string
	policy  screening.Policy
	w       *inventory.Workbook // nil: judge only
	again   bool
	asTyped bool
	quiet   bool // print nothing: the demo

	now      time.Time // of the run: parts judged together carry one time
	fast     map[screening.Kind]*screening.Rulebook
	lots     map[uint32]screening.Kind // known lots and their kinds
	newLots  map[screening.Kind]*inventory.Lot
	headers  map[uint32]string // of lots made in this run: the claim that their parts take
	rows     map[inventory.ID]int
	counts   map[screening.Verdict]int
	parts    int
	wrong    int
	progress progress
}

func (a *app) newScreening(name string) *screeningRun {
	fast := make(map[screening.Kind]*screening.Rulebook, len(a.books))
	for _, b := range a.books {
		fast[b.Kind] = remembering(b)
	}
	return &screeningRun{
		app: a, name: name, policy: screening.DefaultPolicy(), now: a.env.Now(), fast: fast, lots: map[uint32]screening.Kind{},
		newLots: map[screening.Kind]*inventory.Lot{}, headers: map[uint32]string{}, rows: map[inventory.ID]int{},
		counts: map[screening.Verdict]int{}, progress: progress{env: a.env},
	}
}

// run reads, judges, prints and keeps the whole file. What is wrong with a row is told and counted; the error is what ended the run.
func (s *screeningRun) run(ctx context.Context, in io.Reader) (err error) {
	// Judging makes much short-lived memory; collecting it less often is worth a third of the time and some megabytes.
	defer debug.SetGCPercent(debug.SetGCPercent(bulkGCPercent))
	if !s.env.OutTerminal {
		out := s.env.Out
		buffered := bufio.NewWriterSize(out, 1<<16)
		s.env.Out = buffered
		defer func() {
			s.env.Out = out
			if flushErr := buffered.Flush(); err == nil {
				err = flushErr
			}
		}()
	}
	file, err := entry.NewCSV(in, s.books)
	if err != nil {
		return s.fileError(err)
	}
	running, cancel := context.WithCancel(ctx)
	defer cancel()
	results := s.judgeAll(running, file)
	if s.w == nil {
		for r := range results {
			if r.end != nil {
				return r.end
			}
			if err := s.judged(r, nil); err != nil {
				return err
			}
		}
		return ctx.Err()
	}
	_, err = s.w.Load(ctx, s.items(results), inventory.LoadOptions{Action: "screened " + s.name, Again: s.again})
	if err == nil {
		err = ctx.Err()
	}
	return err
}

// fileError places what is wrong with the file as a whole.
func (s *screeningRun) fileError(err error) error {
	hint := ""
	var e *entry.Error
	if errors.As(err, &e) {
		hint = e.Hint
	}
	return request(fmt.Errorf("%s: %w", s.name, err), hint)
}

// items turns results into what the workbook loads, in the order of the file. A result is printed once it has its number.
func (s *screeningRun) items(results <-chan judgedRow) func(func(inventory.Item, error) bool) {
	return func(yield func(inventory.Item, error) bool) {
		for r := range results {
			if r.end != nil {
				yield(inventory.Item{}, r.end)
				return
			}
			if r.failed() {
				if err := s.judged(r, nil); err != nil {
					yield(inventory.Item{}, err)
					return
				}
				continue
			}
			lot, part, err := s.place(r)
			if err == nil && lot != nil && !yield(inventory.Item{Lot: lot}, nil) {
				return
			}
			var wrong *entry.CellError
			switch {
			case errors.As(err, &wrong):
				r.row.Errors = append(r.row.Errors, wrong)
			case err != nil:
				yield(inventory.Item{}, err)
				return
			default:
				s.enter(part, lot, r.row)
				if !yield(inventory.Item{Part: part}, nil) {
					return
				}
			}
			if err := s.judged(r, part); err != nil {
				yield(inventory.Item{}, err)
				return
			}
		}
	}
}

// finish prints the counts and returns the exit status.
func (s *screeningRun) finish() error {
	s.progress.end()
	if s.wrong > maxShownErrors {
		s.env.note("goodbin: %s: %d more rows with errors", s.name, s.wrong-maxShownErrors)
	}
	if err := s.printCounts(); err != nil {
		return err
	}
	switch {
	case s.wrong > 0:
		return silent(ExitRequest)
	case s.parts == 0 || s.counts[screening.Accept]+s.counts[screening.Regrade] < s.parts:
		return silent(ExitNotAccepted)
	}
	return nil
}
