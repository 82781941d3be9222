package cli

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"os/exec"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/screening"
)

const verifyExamples = `  goodbin verify                       every page, checksum and index of the workbook
  goodbin verify --rejudge             and judge again what was judged under older tables
  goodbin verify --workbook COPY       a backup`

// verifyTime is how long checking a workbook may take before it counts as damaged: a damaged file can send its reader in circles.
const verifyTime = 5 * time.Minute

// verifyChild is the hidden command that checks a file in a process of its own, because a damaged one can take its reader down.
const verifyChild = "verify-file"

func (a *app) verifyCommand() *cobra.Command {
	var rejudge bool
	limit := verifyTime
	cmd := &cobra.Command{
		Use:     "verify",
		Short:   "check the workbook, and judge again under newer tables",
		Example: verifyExamples,
		Args:    noArguments,
		RunE: func(cmd *cobra.Command, _ []string) error {
			if a.demo {
				return a.withWorkbook(cmd.Context(), true, func(w *inventory.Workbook) error { return a.verifyOpen(cmd.Context(), w) })
			}
			return a.verify(cmd.Context(), rejudge, limit)
		},
	}
	cmd.Flags().BoolVar(&rejudge, "rejudge", false, "judge again every part whose verdict was reached under older tables")
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON")
	cmd.Flags().DurationVar(&limit, "time-limit", verifyTime, "how `LONG` the check may take")
	return cmd
}

func (a *app) verifyChildCommand() *cobra.Command {
	return &cobra.Command{
		Use: verifyChild, Hidden: true, Args: cobra.ExactArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			report, err := inventory.Verify(args[0])
			if err != nil && !errors.Is(err, inventory.ErrCorrupt) {
				return err
			}
			if err != nil && report.OK() {
				report.Problems = []string{err.Error()}
			}
			return a.writeJSON(report)
		},
	}
}

type jsonVerify struct {
	Schema   int      `json:"schema"`
	Workbook string   `json:"workbook"`
	OK       bool     `json:"ok"`
	Lots     int      `json:"lots"`
	Parts    int      `json:"parts"`
	Entries  int      `json:"entries"`
	Types    int      `json:"types"` // of the user's own table
	Problems []string `json:"problems"`
	Rejudged int      `json:"rejudged"`
	Changed  int      `json:"changed"`
}

func (a *app) verify(ctx context.Context, rejudge bool, limit time.Duration) error {
	path, err := a.workbookPath()
	if err != nil {
		return err
	}
	report, err := a.verifyInChild(ctx, path, limit)
	if err != nil {
		return err
	}
	out := verifyJSON(path, report)
	if rejudge && report.OK() {
		err := a.withWorkbook(ctx, false, func(w *inventory.Workbook) error {
			out.Rejudged, out.Changed, err = a.rejudge(ctx, w)
			return err
		})
		if err != nil {
			return err
		}
	}
	return a.tellVerified(out, rejudge)
}

func verifyJSON(path string, r inventory.Report) jsonVerify {
	return jsonVerify{
		Schema: schema, Workbook: path, OK: r.OK(), Lots: r.Lots, Parts: r.Parts, Entries: r.Entries, Types: r.Types, Problems: append([]string{}, r.Problems...),
	}
}

// verifyOpen checks a workbook that this process holds.
func (a *app) verifyOpen(ctx context.Context, w *inventory.Workbook) error {
	report, err := w.Check(ctx)
	if err != nil {
		return err
	}
	return a.tellVerified(verifyJSON(w.Path(), report), false)
}

func (a *app) tellVerified(out jsonVerify, rejudged bool) error {
	var err error
	switch {
	case a.json:
		err = a.writeJSON(out)
	case out.OK:
		own := ""
		if out.Types > 0 {
			own = fmt.Sprintf(", types of your own %d", out.Types)
		}
		err = a.env.line("%s: sound; lots %d, parts %d, entries of history %d%s", out.Workbook, out.Lots, out.Parts, out.Entries, own)
		if err == nil && rejudged {
			err = a.env.line("judged again under the present tables: %d, of which %d have another verdict now", out.Rejudged, out.Changed)
		}
	default:
		err = a.env.line("%s: damaged", out.Workbook)
		for _, p := range out.Problems {
			a.env.note("goodbin: %s", p)
		}
	}
	if err == nil && !out.OK {
		return silent(ExitWorkbook)
	}
	return err
}

// verifyInChild starts this program again to check the file, with a time limit.
func (a *app) verifyInChild(ctx context.Context, path string, limit time.Duration) (inventory.Report, error) {
	var report inventory.Report
	timed, cancel := context.WithTimeout(ctx, limit)
	defer cancel()
	var stdout, stderr bytes.Buffer
	child := exec.CommandContext(timed, a.env.Executable, verifyChild, path)
	child.Stdout, child.Stderr = &stdout, &stderr
	child.WaitDelay = time.Second
	err := child.Run()
	var ended *exec.ExitError
	switch {
	case ctx.Err() != nil:
		return report, ctx.Err()
	case timed.Err() != nil:
		return report, damaged(path, fmt.Sprintf("checking did not end within %s", limit))
	case err == nil:
		if err := json.NewDecoder(&stdout).Decode(&report); err != nil {
			return report, damaged(path, "the check told nothing")
		}
		return report, nil
	case errors.As(err, &ended) && (ended.ExitCode() == ExitRequest || ended.ExitCode() == ExitWorkbook) && stderr.Len() > 0 && !crashed(stderr.String()):
		io.Copy(a.env.Err, &stderr)
		return report, silent(ExitWorkbook)
	case errors.As(err, &ended):
		return report, damaged(path, "checking it brought the checking process down")
	}
	return report, &failure{status: ExitWorkbook, err: fmt.Errorf("the check could not be started: %w", err)}
}

// crashed reports whether what a process said last is the runtime's.
func crashed(said string) bool {
	return strings.Contains(said, "panic:") || strings.Contains(said, "fatal error:") || strings.Contains(said, "goroutine ")
}

func damaged(path, why string) error {
	return &failure{status: ExitWorkbook, err: fmt.Errorf("%s: %w: %s", path, inventory.ErrCorrupt, why), hint: workbookHint(inventory.ErrCorrupt)}
}

// rejudge judges again every part whose verdict was reached under other tables, and says how many changed.
func (a *app) rejudge(ctx context.Context, w *inventory.Workbook) (judged, changed int, err error) {
	policy := screening.DefaultPolicy()
	lots := map[uint32]inventory.Lot{}
	var failed error
	outcomes := func(yield func(inventory.ID, inventory.Outcome) bool) {
		for p, err := range w.StaleParts(a.tables()) {
			if err != nil {
				failed = err
				return
			}
			lot, known := lots[p.ID.Lot]
			if !known {
				if lot, failed = w.Lot(p.ID.Lot); failed != nil {
					return
				}
				lots[p.ID.Lot] = lot
			}
			book, ok := a.books.Find(lot.Kind)
			if !ok {
				continue
			}
			j, err := screening.Judge(book, inventory.Claimed(p, lot), policy)
			if err != nil {
				a.env.note("goodbin: %s cannot be judged again: %s", p.ID, err)
				continue
			}
			judged++
			if j.Verdict != p.Outcome.Verdict {
				changed++
				a.env.note("goodbin: %s: %s, was %s", p.ID, j.Verdict, p.Outcome.Verdict)
			}
			if !yield(p.ID, inventory.Summarise(j, p.Outcome.Title, a.env.Now())) {
				return
			}
		}
	}
	err = w.PutOutcomes(ctx, outcomes)
	if err == nil {
		err = failed
	}
	return judged, changed, err
}
