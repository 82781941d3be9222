package tui

import (
	"context"
	"errors"
	"fmt"
	"runtime/debug"
	"strconv"
	"strings"
	"sync"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
)

// desk is what every page works with: the workbook, the rulebooks, the theme, and the line for messages.
type desk struct {
	wb       *inventory.Workbook
	kinds    screening.Kinds
	policy   screening.Policy
	now      func() time.Time
	t        *theme
	messages *messages
	ring     func(times int) tea.Cmd // nil: no bell
	meanings func(string) []Meaning  // what a marking may mean; nil: markings are not read

	ctx     context.Context
	running sync.WaitGroup
}

// failed is the answer of a command that could not do its work.
type failed struct {
	doing string
	err   error
}

// do makes a command of work on the workbook. It runs beside the screen; a panic in it becomes a message instead of a lost stack.
func (d *desk) do(doing string, work func() tea.Msg) tea.Cmd {
	return func() (msg tea.Msg) {
		d.running.Add(1)
		defer d.running.Done()
		defer func() {
			if r := recover(); r != nil {
				msg = failed{doing, fmt.Errorf("a fault in the program: %v at %s", r, faultPlace(debug.Stack()))}
			}
		}()
		if d.ctx.Err() != nil {
			return nil
		}
		return work()
	}
}

// faultPlace returns the line of this program that a stack was caught in.
func faultPlace(stack []byte) string {
	_, after, _ := strings.Cut(string(stack), "panic(")
	for line := range strings.SplitSeq(after, "\n") {
		if strings.Contains(line, "goodbin/") && strings.Contains(line, ".go:") {
			return strings.TrimSpace(line)
		}
	}
	return "an unknown place"
}

// wait lets commands that still run end, for a while.
func (d *desk) wait(limit time.Duration) {
	ended := make(chan struct{})
	go func() { d.running.Wait(); close(ended) }()
	select {
	case <-ended:
	case <-time.After(limit):
	}
}

// lotOpened brings a lot with its parts.
type lotOpened struct {
	lot    inventory.Lot
	parts  []inventory.Part
	next   uint32       // number of the next part
	at     inventory.ID // where to land; the zero ID: the first part that is open
	column string       // the question to land on; "" the next one
}

// openLot reads a lot.
func (d *desk) openLot(id uint32, at inventory.ID, column string) tea.Cmd {
	return d.do("opening lot "+strconv.FormatUint(uint64(id), 10), func() tea.Msg { return d.readLot(id, at, column) })
}

func (d *desk) readLot(id uint32, at inventory.ID, column string) tea.Msg {
	opened := lotOpened{at: at, column: column}
	var err error
	if opened.lot, err = d.wb.Lot(id); err == nil {
		if opened.parts, err = d.wb.PartsOf(id); err == nil {
			opened.next, err = d.wb.NextNumber(id)
		}
	}
	if err != nil {
		return failed{"opening lot " + strconv.FormatUint(uint64(id), 10), err}
	}
	return opened
}

// resume opens the lot where the person was last, or lists the lots where there is none.
func (d *desk) resume() tea.Cmd {
	return d.do("going on where it was left", func() tea.Msg {
		at := d.wb.Position()
		if at.Lot != 0 {
			msg := d.readLot(at.Lot, at.Part, at.Column)
			if _, gone := msg.(failed); !gone {
				return msg
			}
		}
		return d.readLots()
	})
}

// lotsListed brings every lot, the last one first, and how many parts each holds.
type lotsListed struct {
	lots []inventory.Lot
	held map[uint32]lotCount
}

// lotCount counts the parts of a lot.
type lotCount struct{ parts, usable int }

func (d *desk) listLots() tea.Cmd {
	return d.do("listing the lots", d.readLots)
}

func (d *desk) readLots() tea.Msg {
	lots, err := d.wb.Lots()
	if err != nil {
		return failed{"listing the lots", err}
	}
	latest := make([]inventory.Lot, 0, len(lots))
	for i := range lots {
		latest = append(latest, lots[len(lots)-1-i])
	}
	page, err := d.wb.Find(inventory.Query{Order: inventory.ByID})
	if err != nil {
		return failed{"listing the lots", err}
	}
	held := map[uint32]lotCount{}
	for _, r := range page.Rows {
		c := held[r.ID.Lot]
		c.parts++
		if r.Verdict.Usable() {
			c.usable++
		}
		held[r.ID.Lot] = c
	}
	return lotsListed{latest, held}
}

// keepLot keeps a lot, new where it has no number yet, and opens it.
func (d *desk) keepLot(l inventory.Lot) tea.Cmd {
	return d.do("keeping the lot", func() tea.Msg {
		var err error
		if l.ID == 0 {
			l, err = d.wb.AddLot(l)
		} else {
			err = d.wb.PutLot(l)
		}
		if err != nil {
			return notKept{err}
		}
		return d.readLot(l.ID, inventory.ID{}, "")
	})
}

// notKept says that something was not kept; what was typed is still there.
type notKept struct{ err error }

// partSaved acknowledges that a part is on disk.
type partSaved struct {
	part inventory.Part
	next uint32 // number of the next part of the lot
}

// savePart keeps a part. The position goes to the disk with it.
func (d *desk) savePart(p inventory.Part, action, column string) tea.Cmd {
	return d.do("saving", func() tea.Msg {
		d.wb.SetPosition(inventory.Position{Page: pageBench.inPosition(), Lot: p.ID.Lot, Part: p.ID, Column: column})
		kept, err := d.wb.SavePart(p, action)
		if err != nil {
			return notKept{err}
		}
		next, err := d.wb.NextNumber(p.ID.Lot)
		if err != nil {
			return notKept{err}
		}
		return partSaved{kept, next}
	})
}

// wentBack says what was taken back or done again.
type wentBack struct {
	done inventory.Done
	redo bool
}

func (d *desk) goBack(redo bool) tea.Cmd {
	return d.do("undo", func() tea.Msg {
		act := d.wb.Undo
		if redo {
			act = d.wb.Redo
		}
		done, err := act()
		switch {
		case errors.Is(err, inventory.ErrNoUndo):
			return nothingToUndo{redo}
		case err != nil:
			return failed{"undo", err}
		}
		return wentBack{done, redo}
	})
}

type nothingToUndo struct{ redo bool }

// found brings a stretch of the list of parts.
type found struct {
	generation int
	offset     int
	page       inventory.Page
}

func (d *desk) find(q inventory.Query, generation int) tea.Cmd {
	return d.do("listing the parts", func() tea.Msg {
		page, err := d.wb.Find(q)
		if err != nil {
			return failed{"listing the parts", err}
		}
		return found{generation, q.Offset, page}
	})
}

// partOpened brings all of a part.
type partOpened struct {
	part    inventory.Part
	lot     inventory.Lot
	judged  screening.Judgement
	err     error // why it could not be judged
	history []inventory.Event
	renewed bool // its verdict was reached under older tables and was renewed
}

// openPart reads a part, judges it, and renews a verdict that was reached under older tables.
func (d *desk) openPart(id inventory.ID) tea.Cmd {
	return d.do("reading "+id.String(), func() tea.Msg {
		var o partOpened
		var err error
		if o.part, err = d.wb.GetPart(id); err == nil {
			if o.lot, err = d.wb.Lot(id.Lot); err == nil {
				o.history, err = d.wb.History(id)
			}
		}
		if err != nil {
			return failed{"reading " + id.String(), err}
		}
		claimed := inventory.Claimed(o.part, o.lot)
		book, ok := d.kinds.Find(claimed.Kind)
		if !ok {
			o.err = fmt.Errorf("this goodbin has no limits for %q", claimed.Kind)
			return o
		}
		o.judged, o.err = screening.Judge(book, claimed, d.policy)
		if o.err == nil && o.part.Outcome.Stale(book.Tables) && !d.wb.ReadOnly() {
			o.part.Outcome = inventory.Summarise(o.judged, claimed.Claim.String(), d.now())
			o.renewed = d.wb.PutOutcome(id, o.part.Outcome) == nil
		}
		return o
	})
}

// changed says that a part in stock was taken, returned, recounted or moved.
type changed struct {
	id   inventory.ID
	text string
}

// change does one thing to a part in stock.
func (d *desk) change(id inventory.ID, text string, act func() error) tea.Cmd {
	return d.do(text, func() tea.Msg {
		if err := act(); err != nil {
			return notKept{err}
		}
		return changed{id, text}
	})
}
