package tui

import (
	"fmt"
	"strings"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
)

// pageName says which page is in front.
type pageName uint8

const (
	pageBench pageName = iota
	pageStock
)

// String returns the page's name as the header spells it.
func (p pageName) String() string { return [...]string{"Bench", "Stock"}[min(int(p), 1)] }

// inPosition returns the page's name as the workbook's position spells it.
func (p pageName) inPosition() string { return strings.ToLower(p.String()) }

// page is what the root needs of a page. Draw returns exactly h lines of w cells and the place in focus, relative to the page.
type page interface {
	enter() tea.Cmd                  // the page comes to the front
	key(msg tea.KeyMsg) tea.Cmd      // a key that is none of the program's
	receive(msg tea.Msg) tea.Cmd     // the answer of a command
	draw(w, h int) ([]string, spot)  // called after every message
	keys() []keyGroup                // of its present state
	typing() bool                    // something is typed in the focused field, so a letter is a letter
	leave() (cmd tea.Cmd, left bool) // one level up; false: there is none
	canLeave() bool                  // whether there is one
	about() []string                 // what help says before the keys
	paused() bool                    // it waits for the disk: keys wait as well
}

// model is the root of the interface.
type model struct {
	desk     *desk
	messages messages
	global   globalKeys
	pagerKey pagerKeys

	w, h    int
	front   pageName
	bench   *bench
	stock   *stock
	overlay *pager
	pending []tea.KeyMsg // keys that came while the page waited for the disk

	name string // of the workbook
	demo bool
}

// maxPending bounds the keys that wait for the disk.
const maxPending = 1000

func newModel(d *desk, name string, demo bool) *model {
	m := &model{desk: d, global: newGlobalKeys(), pagerKey: newPagerKeys(), name: name, demo: demo, messages: messages{keep: noteTime}}
	d.messages = &m.messages
	m.bench, m.stock = newBench(d), newStock(d)
	return m
}

func (m *model) page() page {
	if m.front == pageStock {
		return m.stock
	}
	return m.bench
}

// Init asks for what was in front when the program was closed last.
func (m *model) Init() tea.Cmd {
	if m.desk.wb.Position().Page == pageStock.inPosition() {
		m.front = pageStock
		return tea.Batch(m.stock.enter(), m.desk.resume())
	}
	return m.desk.resume()
}

// Update takes one message: the window's size, the answer of a command, or a key.
func (m *model) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	cmd := m.take(msg)
	return m, cmd
}

func (m *model) take(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		m.w, m.h = msg.Width, msg.Height
		return nil
	case noteEnded:
		m.messages.ended(msg)
		return nil
	case failed:
		m.messages.fail(msg.doing + ": " + errorText(msg.err))
		m.pending = nil
		return tea.Batch(m.bench.receive(msg), m.stock.receive(msg))
	case notKept:
		m.pending = nil // they were meant for the next question
	case nothingToUndo:
		if msg.redo {
			return m.messages.say("nothing to do again")
		}
		return m.messages.say("nothing to undo")
	case wentBack:
		what := "undone: "
		if msg.redo {
			what = "done again: "
		}
		return tea.Batch(m.messages.say(what+msg.done.String()), m.bench.receive(msg), m.stock.receive(msg))
	case openAtBench:
		m.front = pageBench
		return m.desk.openLot(msg.id.Lot, msg.id, stayHere)
	case openPager:
		m.overlay = msg.pager
		return nil
	case tea.KeyMsg:
		return m.key(msg)
	}
	return tea.Batch(m.bench.receive(msg), m.stock.receive(msg), m.release())
}

// openAtBench asks to bring a part to the bench.
type openAtBench struct{ id inventory.ID }

// openPager asks to lay a text over the page.
type openPager struct{ pager *pager }

func showPager(p *pager) tea.Cmd { return func() tea.Msg { return openPager{p} } }

// key takes a key: those of the program first, then those of the overlay, then those of the page in front.
func (m *model) key(msg tea.KeyMsg) tea.Cmd {
	if key.Matches(msg, m.global.quit.Binding) {
		return tea.Quit
	}
	if m.page().paused() {
		if len(m.pending) < maxPending {
			m.pending = append(m.pending, msg)
		}
		return nil
	}
	m.messages.keyPressed()
	if m.overlay != nil {
		if key.Matches(msg, m.global.leave.Binding, m.global.help.Binding) || !m.overlay.key(m.pagerKey, msg) {
			m.overlay = nil
		}
		return nil
	}
	switch {
	case key.Matches(msg, m.global.help.Binding), msg.String() == "?" && !msg.Paste && !m.page().typing():
		m.overlay = m.desk.t.helpPager("Help: "+m.front.String(), m.page().about(), m.page().keys(), m.global)
		return nil
	case key.Matches(msg, m.global.bench.Binding):
		return m.turnTo(pageBench)
	case key.Matches(msg, m.global.stock.Binding):
		return m.turnTo(pageStock)
	case key.Matches(msg, m.global.undo.Binding):
		return m.desk.goBack(false)
	case key.Matches(msg, m.global.redo.Binding):
		return m.desk.goBack(true)
	case key.Matches(msg, m.global.leave.Binding):
		return m.leave()
	}
	return m.page().key(msg)
}

func (m *model) turnTo(p pageName) tea.Cmd {
	if m.front == p {
		return nil
	}
	m.front = p
	return m.page().enter()
}

func (m *model) leave() tea.Cmd {
	cmd, left := m.page().leave()
	if left {
		return cmd
	}
	if m.front == pageStock {
		return m.turnTo(pageBench)
	}
	return m.messages.say("nothing lies above this page; Ctrl+C closes goodbin, and everything is kept")
}

// release hands the keys that waited to the page, as long as it does not wait again.
func (m *model) release() tea.Cmd {
	var cmds []tea.Cmd
	for len(m.pending) > 0 && !m.page().paused() {
		msg := m.pending[0]
		m.pending = m.pending[1:]
		cmds = append(cmds, m.key(msg))
	}
	return tea.Batch(cmds...)
}

// View draws the window and says where its cursor belongs.
func (m *model) View() string {
	lines, at := m.draw()
	if len(lines) == 0 {
		return ""
	}
	return strings.Join(lines, "\n") + at.mark()
}

// draw returns the window's lines, and the place in focus.
func (m *model) draw() ([]string, spot) {
	if m.w <= 0 || m.h <= 0 {
		return nil, spot{off: true}
	}
	t := m.desk.t
	f := frameFor(m.w, m.h)
	if f.tooSmall {
		text := fmt.Sprintf("The window is %d by %d. goodbin needs %d by %d and is made for %d by 20 and up. Nothing is lost: make it larger.",
			m.w, m.h, minWidth, minHeight, fullWidth)
		return block(wrap(text, m.w), m.w, m.h, ""), spot{off: true}
	}
	global := m.global
	global.leave.SetEnabled(m.overlay != nil || m.page().canLeave())
	lines := []string{m.header(f.header.w)}
	var body []string
	var at spot
	groups := m.page().keys()
	if m.overlay != nil {
		body, at = m.overlay.draw(t, f.body.w, f.body.h)
		groups = m.pagerKey.groups()
	} else {
		body, at = m.page().draw(f.body.w, f.body.h)
	}
	at.y += f.body.y
	lines = append(lines, body...)
	lines = append(lines, m.messages.draw(t, f.message.w), t.footer(groups, global, f.footer.w))
	return lines, at
}

// header names the program, its pages, and the workbook.
func (m *model) header(w int) string {
	t := m.desk.t
	left := " goodbin  "
	used := width(left)
	left = t.title.paint(left)
	for _, p := range []pageName{pageBench, pageStock} {
		b := m.global.bench
		if p == pageStock {
			b = m.global.stock
		}
		text := " " + b.Help().Key + " " + p.String() + " "
		if p == m.front {
			text = "[" + b.Help().Key + " " + p.String() + "]"
			left += t.strong.paint(text)
		} else {
			left += t.faint.paint(text)
		}
		used += width(text)
	}
	if m.demo {
		const banner = " DEMO: invented data "
		if used+2+len(banner) <= w {
			left += "  " + t.demo.paint(banner)
			used += 2 + len(banner)
		}
	}
	name := t.clean(m.name)
	if m.desk.wb.ReadOnly() {
		name += " (read-only)"
	}
	room := w - used - 2
	if width(name) > room {
		name = ""
	}
	return left + spaces(w-used-width(name)-1) + t.faint.paint(name) + spaces(min(1, w-used))
}
