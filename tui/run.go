package tui

import (
	"context"
	"errors"
	"io"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
)

// Options are what the interface needs from the program that starts it.
type Options struct {
	Workbook     *inventory.Workbook // opened, and closed by the caller after Run has returned
	WorkbookName string              // shown in the header
	Kinds        screening.Kinds     // the table of all rulebooks
	Policy       screening.Policy
	Now          func() time.Time // the clock; nil is time.Now

	// Meanings lists what a marking may mean, the likeliest first; nil: markings are not read.
	Meanings func(marking string) []Meaning

	Width, Height int // of the terminal in cells, until it tells its own size; 0 where unknown

	ASCII   bool // spell every sign in ASCII
	NoColor bool // no colour and no bold
	Bell    bool // tell verdicts apart by ear, see [Bells]
	Demo    bool // the workbook is throwaway and its data invented; the header says so

	In  io.Reader // the terminal
	Out io.Writer // the terminal
}

// Meaning is one thing that a marking may say: a kind of part, and what it then claims.
type Meaning struct {
	Kind   screening.Kind
	Header string // the claim in words that the kind reads: "100nF 10%"
	Text   string // the same for people: "100 nF ±10 %"
	Source string // the scheme, and how well it is known
}

// endTime is how long Run waits for what is being written when the program is closed.
const endTime = 2 * time.Second

// Run shows the pages until the person closes them. It returns nil then, context.Canceled where it was interrupted from outside, and an
// error where the terminal could not be used. Everything that was acknowledged on the screen is in the workbook by then.
func Run(ctx context.Context, o Options) error {
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	out := withCursor(o.Out)
	d := &desk{
		wb: o.Workbook, kinds: o.Kinds, policy: o.Policy, now: o.Now, ctx: ctx, t: newTheme(o.Out, o.ASCII, o.NoColor), meanings: o.Meanings,
	}
	if d.now == nil {
		d.now = time.Now
	}
	if o.Bell {
		d.ring = bell(out)
	}
	m := newModel(d, o.WorkbookName, o.Demo)
	m.w, m.h = o.Width, o.Height
	_, err := tea.NewProgram(m, tea.WithContext(ctx), tea.WithInput(o.In), tea.WithOutput(out), tea.WithAltScreen()).Run()
	d.wait(endTime)
	cancel()
	o.Workbook.SetPosition(m.position())
	if errors.Is(err, tea.ErrInterrupted) || errors.Is(err, tea.ErrProgramKilled) && ctx.Err() != nil {
		return context.Canceled
	}
	return err
}

// position is where the person is, so that reopening lands there.
func (m *model) position() inventory.Position {
	at := m.bench.position()
	at.Page = m.front.inPosition()
	return at
}

// Bells is how often the bell rings for a verdict: the better the news, the shorter.
func Bells(v screening.Verdict) int { return int(v) }

// bellGap separates the strokes of the bell; terminals swallow those that come faster.
const bellGap = 220 * time.Millisecond

func bell(out io.Writer) func(int) tea.Cmd {
	return func(times int) tea.Cmd {
		return func() tea.Msg {
			for i := range times {
				if i > 0 {
					time.Sleep(bellGap)
				}
				if _, err := io.WriteString(out, "\a"); err != nil {
					return nil
				}
			}
			return nil
		}
	}
}
