package tui

import (
	"bytes"
	"context"
	"io"
	"path/filepath"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/exp/teatest"

	"goodbin/inventory"
	"goodbin/screening"
)

func TestProgramSavesThenAsksTheNext(t *testing.T) {
	wb := openWorkbook(t, filepath.Join(t.TempDir(), "book"))
	tm := teatest.NewTestModel(t, newTestModel(t, wb, false), teatest.WithInitialTermSize(100, 30))
	waitFor := func(text string) {
		t.Helper()
		teatest.WaitFor(t, tm.Output(), func(b []byte) bool { return bytes.Contains(b, []byte(text)) }, teatest.WithDuration(10*time.Second))
	}
	waitFor("New lot")
	tm.Type("ca")
	tm.Send(tea.KeyMsg{Type: tea.KeyEnter})
	tm.Type("100uF 35V")
	tm.Send(tea.KeyMsg{Type: tea.KeyF8})
	waitFor("Is it cracked?")
	for _, answer := range []string{"00", "98", "0.5"} {
		tm.Type(answer)
		tm.Send(tea.KeyMsg{Type: tea.KeyEnter})
	}
	waitFor("1-01 accept, within-spec")
	p, err := wb.GetPart(inventory.ID{Lot: 1, Number: 1})
	if err != nil || p.Outcome.Verdict != screening.Accept {
		t.Errorf("what the screen said is not on the disk: %v %v", p.Outcome.Verdict, err)
	}
	tm.Send(tea.KeyMsg{Type: tea.KeyCtrlC})
	tm.WaitFinished(t, teatest.WithFinalTimeout(5*time.Second))
}

func TestRunEndsWhenItsContextDoesAndKeepsThePosition(t *testing.T) {
	wb := openWorkbook(t, filepath.Join(t.TempDir(), "book"))
	in, typed := io.Pipe()
	defer typed.Close()
	ctx, cancel := context.WithCancel(context.Background())
	ended := make(chan error, 1)
	go func() {
		ended <- Run(ctx, Options{
			Workbook: wb, Kinds: screening.Kinds{can()}, Policy: screening.DefaultPolicy(), Now: newClock().now, ASCII: true, NoColor: true, In: in,
			Out: io.Discard,
		})
	}()
	time.AfterFunc(50*time.Millisecond, cancel)
	select {
	case err := <-ended:
		if err != context.Canceled {
			t.Errorf("ended with %v", err)
		}
	case <-time.After(10 * time.Second):
		t.Fatal("it does not end")
	}
	if page := wb.Position().Page; page != "bench" {
		t.Errorf("position %q", page)
	}
}

func TestFaultInACommandBecomesAMessage(t *testing.T) {
	d := newTestDesk(t, 80, 24)
	d.run(d.m.desk.do("testing", func() tea.Msg { panic("oops") }))
	d.mustShow("testing: a fault in the program: oops")
}
