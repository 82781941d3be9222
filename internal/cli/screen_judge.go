package cli

import (
	"context"
	"errors"
	"fmt"
	"io"
	"runtime"
	"strings"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// batchRows is how many rows a worker judges at a time: enough that handing them over costs nothing.
const batchRows = 256

// judgedRow is one row with its judgement.
type judgedRow struct {
	row       entry.Row
	part      screening.Part
	judgement screening.Judgement
	outcome   inventory.Outcome // its summary, as it is kept
	said      [3]string         // the verdict, what the part claims, and why, as they are printed
	end       error             // what ended the reading; nothing follows
}

func (r *judgedRow) failed() bool { return len(r.row.Errors) > 0 }

// job is one batch on its way: read, then judged by whichever worker is free, then waited for in the order of the file.
type job struct {
	records []entry.Record
	end     error
	done    chan []judgedRow
}

// judgeAll judges the rows of a file on every processor and returns them in the order of the file. The channel is closed at the end of the
// file, or when the context is cancelled.
func (s *screeningRun) judgeAll(ctx context.Context, file *entry.CSV) <-chan judgedRow {
	workers := max(1, runtime.GOMAXPROCS(0))
	jobs, order := make(chan job, workers), make(chan job, 4*workers)
	for range workers {
		go func() {
			for j := range jobs {
				j.done <- s.judgeBatch(file, j.records, j.end)
			}
		}()
	}
	go scanAll(ctx, file, order, jobs)
	out := make(chan judgedRow, batchRows)
	go func() {
		defer close(out)
		for {
			rows, more := nextBatch(ctx, order)
			for _, r := range rows {
				select {
				case out <- r:
				case <-ctx.Done():
					return
				}
			}
			if !more {
				return
			}
		}
	}()
	return out
}

// scanAll reads the file in batches and hands each to whoever keeps the order, then to the workers.
func scanAll(ctx context.Context, file *entry.CSV, order, jobs chan<- job) {
	defer close(jobs)
	defer close(order)
	for {
		j := job{done: make(chan []judgedRow, 1)}
		j.records, j.end = scanBatch(file)
		for _, to := range []chan<- job{order, jobs} {
			select {
			case to <- j:
			case <-ctx.Done():
				return
			}
		}
		if len(j.records) < batchRows || j.end != nil {
			return
		}
	}
}

// nextBatch waits for the batch whose turn it is; more is false after the last one and when the context is cancelled.
func nextBatch(ctx context.Context, order <-chan job) (rows []judgedRow, more bool) {
	select {
	case j, ok := <-order:
		if !ok {
			return nil, false
		}
		select {
		case rows = <-j.done:
			return rows, true
		case <-ctx.Done():
		}
	case <-ctx.Done():
	}
	return nil, false
}

// scanBatch reads the next rows. The error is nil at the end of the file.
func scanBatch(file *entry.CSV) ([]entry.Record, error) {
	records := make([]entry.Record, 0, batchRows)
	for len(records) < batchRows {
		r, err := file.Scan()
		if errors.Is(err, io.EOF) {
			return records, nil
		}
		if err != nil {
			return records, err
		}
		records = append(records, r)
	}
	return records, nil
}

func (s *screeningRun) judgeBatch(file *entry.CSV, records []entry.Record, end error) []judgedRow {
	rows := make([]judgedRow, 0, len(records)+1)
	for _, rec := range records {
		rows = append(rows, s.judgeRow(file.Row(rec)))
	}
	if end != nil {
		rows = append(rows, judgedRow{end: request(fmt.Errorf("%s: %w", s.name, end), "")})
	}
	return rows
}

// judgeRow judges one row. A reading that looks like a slip of a power of ten is an error of the row, since nobody can be asked.
func (s *screeningRun) judgeRow(row entry.Row) judgedRow {
	out := judgedRow{row: row}
	if len(row.Errors) > 0 {
		return out
	}
	out.part = row.Parsed.Part(row.Book)
	book := s.fast[row.Book.Kind]
	var err error
	if out.judgement, err = screening.Judge(book, out.part, s.policy); err != nil {
		out.row.Errors = append(out.row.Errors, &entry.CellError{Line: row.Line, Err: err})
		return out
	}
	title := out.part.Claim.String()
	out.outcome = inventory.Summarise(out.judgement, title, s.now)
	meter := s.policy.Meters[""]
	out.said = [3]string{verdictBy(&meter, out.judgement), string(book.Kind) + " " + title, whyText(book, &out.judgement)}
	if s.asTyped || !outside(out.judgement.Findings) {
		return out
	}
	for _, r := range out.part.Readings {
		if alarm, ok := screening.PowerOfTen(book, out.part, r); ok {
			out.row.Errors = append(out.row.Errors, &entry.CellError{
				Line: row.Line, Err: &entry.Error{Problem: alarmText(book, r, alarm), Hint: "if it is right, screen the row with --as-typed"},
			})
		}
	}
	return out
}

// whyText is the reason of a verdict, or what would settle it, and what was not tested, in one line.
func whyText(book *screening.Rulebook, j *screening.Judgement) string {
	why := ""
	switch {
	case j.Verdict.Usable():
	case len(j.Reasons) > 0:
		why = j.Reasons[0].Text
	case len(j.Next) > 0:
		why = j.Next[0].Text
	}
	if open := notTested(book, *j); len(open) > 0 {
		why = strings.TrimPrefix(why+"; not tested: "+strings.Join(open, "; "), "; ")
	}
	return why
}

// outside reports whether any reading lies outside a limit; one inside is no slip.
func outside(findings []screening.Finding) bool {
	for i := range findings {
		if o := findings[i].Outcome; o == screening.Fail || o == screening.Close {
			return true
		}
	}
	return false
}
