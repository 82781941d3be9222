package cli

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/tui"
)

const benchExamples = `  goodbin bench                    the pages
  goodbin bench --lines            the same walk as plain prompts and answers, one a line: for screen readers, serial lines and scripts
  goodbin bench --lines --bell     the bell rings once for accept, twice for regrade, up to six times for reject
  goodbin bench --lines < answers.txt`

// linesHelp says what can be typed at any prompt of the linear mode.
const linesHelp = `An answer is a value in the unit that the prompt names, such as 2010 or 2010u or 61m@120Hz; >400V, <0.1uA and OL work too; several
values separated by spaces are repeats of one reading. NAME=VALUE gives a reading that was not asked for, such as temperature=24C;
treated=1 says that the part was re-formed or dried, once. Looks take y and n, or 1 and 0; 00 says no to every look that is left.
At any prompt:
  (empty) or +     skip this question
  b  back  -       take the last answer back
  r  repeat  *     measure the last reading again
  ?                how to measure or answer what is asked
  h  help          this help
  n  next          go to the next part (where a question takes yes or no, n is no: type next)
  1-03             go to that part of the lot, to correct it: NAME=VALUE replaces a reading
  w  wanted        ask for the readings that are wanted and not needed, too
  g  go on         go on after a stop, and ask skipped questions again
  /                whichever of these two there is
  l  lot           begin another lot
  q  quit          leave; every answer is kept`

// linesKeys is the help in one line; it follows the answer to "?".
const linesKeys = "Enter skips, b back, r repeat, n next part, w wanted, g go on, l lot, q quit; h explains them"

func (a *app) benchCommand() *cobra.Command {
	var lines, bell bool
	cmd := &cobra.Command{
		Use:     "bench",
		Short:   "measure and judge part by part",
		Example: benchExamples,
		Args:    noArguments,
		RunE: func(cmd *cobra.Command, _ []string) error {
			if lines || a.env.dumb() {
				return a.benchLines(cmd.Context(), bell)
			}
			return a.showPages(cmd.Context(), bell)
		},
	}
	cmd.Flags().BoolVar(&lines, "lines", false, "print lines instead of painting a page; by itself where TERM is dumb")
	cmd.Flags().BoolVar(&bell, "bell", false, "tell verdicts apart by ear")
	return cmd
}

func noArguments(_ *cobra.Command, args []string) error {
	if len(args) > 0 {
		return request(fmt.Errorf("%q is one word too many", args[0]), "")
	}
	return nil
}

// pages is goodbin without a command: the pages on a terminal, the linear mode on a dumb one, help where there is none.
func (a *app) pages(cmd *cobra.Command) error {
	switch {
	case !a.env.InTerminal || !a.env.OutTerminal:
		cmd.SetOut(a.env.Err)
		_ = cmd.Help()
		return request(errNoTerminal, "name a command, or goodbin bench --lines")
	case a.env.dumb():
		return a.benchLines(cmd.Context(), false)
	}
	return a.showPages(cmd.Context(), false)
}

var errNoTerminal = errors.New("the pages need a terminal")

func (a *app) showPages(ctx context.Context, bell bool) error {
	if !a.env.InTerminal || !a.env.OutTerminal {
		return request(errNoTerminal, "goodbin bench --lines works without one")
	}
	return a.withWorkbook(ctx, false, func(w *inventory.Workbook) error {
		name := w.Path()
		if a.demo {
			name = "demo"
		}
		return tui.Run(ctx, tui.Options{
			Workbook: w, WorkbookName: name, Kinds: a.books, Policy: screening.DefaultPolicy(), Now: a.env.Now, Meanings: a.meanings,
			ASCII: a.env.ascii, NoColor: a.env.plain, Bell: bell, Demo: a.demo, In: a.env.In, Out: a.env.Out,
			Width: a.env.Width, Height: a.env.Height,
		})
	})
}

// maxAnswer bounds one line that is typed.
const maxAnswer = 1 << 16

var (
	errEnd  = errors.New("end of input")
	errQuit = errors.New("quit")
	errLot  = errors.New("another lot")
	errNext = errors.New("next part")
	errGoTo = errors.New("the part in hand was changed")
)

func (a *app) benchLines(ctx context.Context, bell bool) error {
	return a.withWorkbook(ctx, false, func(w *inventory.Workbook) error {
		l := &lines{app: a, w: w, typed: readLines(ctx, a.env.In), bell: bell, policy: screening.DefaultPolicy()}
		err := l.run(ctx)
		if errors.Is(err, errQuit) || errors.Is(err, errEnd) {
			return l.say("%s", l.farewell())
		}
		return err
	})
}

// lines is the linear mode: plain prompts and answers, one a line, nothing repainted. It drives one [screening.Walk] a part, as the page does.
type lines struct {
	*app
	w      *inventory.Workbook
	typed  <-chan typedLine
	bell   bool
	policy screening.Policy
	saved  int // answers kept in this run

	lot       inventory.Lot
	book      *screening.Rulebook
	part      inventory.Part
	walk      *screening.Walk
	last      screening.Question // answered last, for repeat
	repeating bool               // the next reading joins the one before
	warn      map[string]bool    // cautions said for this part
	treat     int                // of the header: treated before
	lookTold  screening.Kind     // whose look was listed in full
}

func (l *lines) say(format string, args ...any) error { return l.env.line(format, args...) }

// ask prints a prompt and reads one line. On a terminal the cursor stays behind the prompt; otherwise the prompt is a line of its own.
func (l *lines) ask(ctx context.Context, prompt string) (string, error) {
	end := "\n"
	if l.env.InTerminal && l.env.OutTerminal {
		end = " "
	}
	if _, err := io.WriteString(l.env.Out, l.env.clean(prompt)+":"+end); err != nil {
		return "", err
	}
	select {
	case <-ctx.Done():
		return "", ctx.Err()
	case got, ok := <-l.typed:
		if err := ctx.Err(); err != nil {
			return "", err // the reader ends with the context too, and either may be seen first
		}
		if !ok {
			return "", errEnd
		}
		return got.text, got.err
	}
}

// typedLine is one line of input.
type typedLine struct {
	text string
	err  error
}

// readLines reads lines beside the walk, so that ctrl+c ends a prompt that nobody answers. The reading goroutine ends with the input, or with
// the program where it waits for a terminal.
func readLines(ctx context.Context, in io.Reader) <-chan typedLine {
	lines := make(chan typedLine)
	go func() {
		defer close(lines)
		reader := bufio.NewReaderSize(in, maxAnswer)
		for {
			line, more := nextTyped(reader)
			if line != (typedLine{}) || more {
				select {
				case lines <- line:
				case <-ctx.Done():
					return
				}
			}
			if !more {
				return
			}
		}
	}()
	return lines
}

// nextTyped reads one line; more is false at the end of the input. A line that is too long is passed over and refused.
func nextTyped(in *bufio.Reader) (line typedLine, more bool) {
	text, err := in.ReadSlice('\n')
	switch {
	case errors.Is(err, bufio.ErrBufferFull):
		for errors.Is(err, bufio.ErrBufferFull) {
			_, err = in.ReadSlice('\n')
		}
		return typedLine{err: again("the line is longer than %d bytes and was not read", maxAnswer)}, err == nil
	case err != nil && !errors.Is(err, io.EOF):
		return typedLine{err: err}, false
	}
	return typedLine{text: strings.TrimSpace(string(text))}, err == nil
}

// retry is an answer that cannot be used; the question is asked again.
type retry struct{ text string }

func (r retry) Error() string { return r.text }

func again(format string, args ...any) error { return retry{fmt.Sprintf(format, args...)} }

// answer asks until the answer can be used. take returns nil to go on; an error that is no refusal ends the asking.
func (l *lines) answer(ctx context.Context, prompt string, take func(text string) error) error {
	for {
		text, err := l.ask(ctx, prompt)
		if err == nil {
			err = take(text)
		}
		var refused retry
		if !errors.As(err, &refused) {
			return err
		}
		if refused.text == "" {
			continue
		}
		if err := l.say("? %s", refused.text); err != nil {
			return err
		}
	}
}

// refusal makes what is wrong with an answer, and its hint, a retry.
func refusal(err error) error {
	if err == nil {
		return nil
	}
	text := err.Error()
	if hint := hintOf(err); hint != "" {
		text += "; " + hint
	}
	return retry{text}
}

// ring tells the verdict by the number of strokes.
func (l *lines) ring(v screening.Verdict) {
	if !l.bell {
		return
	}
	for i := range tui.Bells(v) {
		if i > 0 && l.env.OutTerminal {
			time.Sleep(bellGap) // terminals swallow strokes that come faster
		}
		io.WriteString(l.env.Out, "\a")
	}
}

const bellGap = 220 * time.Millisecond

func (l *lines) farewell() string {
	switch l.saved {
	case 0:
		return "nothing new was kept"
	case 1:
		return "1 answer is kept in the workbook"
	}
	return fmt.Sprintf("%d answers are kept in the workbook", l.saved)
}
