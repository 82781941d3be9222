package tui

import (
	"strings"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
)

// stretch is how many rows of the list are read at a time.
const listStretch = 400

// stock is the page where parts are found again: every part kept, those that can be used first.
type stock struct {
	d     *desk
	k     stockKeys
	in    input
	table table

	usable     bool // only what is in stock
	generation int  // of the query; answers to older ones are dropped
	busy       bool // a query is on its way
	dirty      bool // and another one is wanted after it
	rows       []inventory.Row
	offset     int // of rows in the whole list
	total      int
	counts     inventory.Counts
	known      bool // an answer came

	detail  *partOpened
	reading inventory.ID // the part whose details are on their way
	visible int          // rows of the list that were drawn last

	act    *stockAct
	acting bool // a change is on its way to the disk
}

func newStock(d *desk) *stock { return &stock{d: d, k: newStockKeys()} }

func (s *stock) enter() tea.Cmd {
	s.detail = nil
	return s.refresh()
}

func (s *stock) paused() bool { return s.acting }

func (s *stock) typing() bool {
	if s.act != nil {
		return len(s.act.in.text) > 0
	}
	return len(s.in.text) > 0
}

func (s *stock) keys() []keyGroup { return s.k.groups() }

func (s *stock) about() []string {
	return []string{
		"Every part that was measured, those that can be used first. Letters filter: several words must all match, anywhere in id, kind, value, " +
			"place, verdict or reason. 12- lists lot 12.",
		"A part marked old was judged by older tables; it is judged again as soon as it is looked at.",
	}
}

// refresh asks for the stretch of the list around the selected row. One query is on its way at a time: while letters are typed faster
// than the workbook answers, only the last of them is looked up.
func (s *stock) refresh() tea.Cmd {
	s.generation++
	return s.query()
}

func (s *stock) query() tea.Cmd {
	if s.busy {
		s.dirty = true
		return nil
	}
	s.busy, s.dirty = true, false
	return s.d.find(inventory.Query{
		Words: strings.Fields(strings.TrimPrefix(s.in.String(), "/")), Usable: s.usable,
		Offset: max(0, s.table.at-listStretch/2), Limit: listStretch,
	}, s.generation)
}

func (s *stock) receive(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case found:
		s.busy = false
		if msg.generation == s.generation {
			s.rows, s.offset, s.total, s.counts, s.known = msg.page.Rows, msg.offset, msg.page.Total, msg.page.Counts, true
			s.table.move(0, s.total)
		}
		if s.dirty {
			return s.query()
		}
		return s.openSelected()
	case partOpened:
		s.reading = inventory.ID{}
		s.detail = &msg
		if msg.renewed {
			return tea.Batch(s.refresh(), s.openSelected())
		}
		return s.openSelected()
	case changed:
		s.acting, s.act, s.detail = false, nil, nil
		return tea.Batch(s.d.messages.say(msg.text), s.refresh())
	case notKept:
		s.acting = false
		if s.act != nil {
			s.act.problem = msg.err
		}
	case failed:
		s.busy, s.acting, s.reading = false, false, inventory.ID{}
	case wentBack:
		s.detail = nil
		if s.known {
			return s.refresh()
		}
	}
	return nil
}

// selected returns the row in hand; false where there is none, or it is not read yet.
func (s *stock) selected() (inventory.Row, bool) {
	i := s.table.at - s.offset
	if s.total == 0 || i < 0 || i >= len(s.rows) {
		return inventory.Row{}, false
	}
	return s.rows[i], true
}

// openSelected reads the details of the row in hand, unless they are there or on their way.
func (s *stock) openSelected() tea.Cmd {
	row, ok := s.selected()
	if !ok || s.reading != (inventory.ID{}) || s.detail != nil && s.detail.part.ID == row.ID {
		return nil
	}
	s.reading = row.ID
	return s.d.openPart(row.ID)
}

func (s *stock) key(msg tea.KeyMsg) tea.Cmd {
	if s.act != nil {
		return s.actKey(msg)
	}
	switch k := s.k; {
	case key.Matches(msg, k.open.Binding):
		return s.showAll()
	case key.Matches(msg, k.take.Binding):
		return s.begin(actTake)
	case key.Matches(msg, k.giveBack.Binding):
		return s.begin(actReturn)
	case key.Matches(msg, k.recount.Binding):
		return s.begin(actRecount)
	case key.Matches(msg, k.move.Binding):
		return s.begin(actMove)
	case key.Matches(msg, k.usable.Binding):
		s.usable = !s.usable
		s.table.at = 0
		return s.refresh()
	case key.Matches(msg, k.bench.Binding):
		if row, ok := s.selected(); ok {
			return func() tea.Msg { return openAtBench{row.ID} }
		}
	case key.Matches(msg, k.up.Binding):
		return s.move(-1)
	case key.Matches(msg, k.down.Binding):
		return s.move(1)
	case key.Matches(msg, k.pageUp.Binding):
		return s.move(-max(1, s.visible-1))
	case key.Matches(msg, k.pageDown.Binding):
		return s.move(max(1, s.visible-1))
	case key.Matches(msg, k.top.Binding):
		return s.move(-s.total)
	case key.Matches(msg, k.bottom.Binding):
		return s.move(s.total)
	default:
		before := s.in.String()
		if s.in.key(msg) && s.in.String() != before {
			s.table.at = 0
			return s.refresh()
		}
	}
	return nil
}

func (s *stock) move(by int) tea.Cmd {
	s.table.move(by, s.total)
	if at := s.table.at - s.offset; at < s.visible && s.offset > 0 || at >= len(s.rows)-s.visible && s.offset+len(s.rows) < s.total {
		return tea.Batch(s.refresh(), s.openSelected())
	}
	return s.openSelected()
}

// canLeave: under the stock lies the bench.
func (s *stock) canLeave() bool { return true }

// leave ends what was begun, then the filter.
func (s *stock) leave() (tea.Cmd, bool) {
	switch {
	case s.act != nil:
		s.act = nil
	case len(s.in.text) > 0:
		s.in = input{}
		s.table.at = 0
		return s.refresh(), true
	case s.usable:
		s.usable = false
		s.table.at = 0
		return s.refresh(), true
	default:
		return nil, false
	}
	return nil, true
}
