package tui

import (
	"time"

	tea "github.com/charmbracelet/bubbletea"
)

// noteTime is how long a note stays; an error stays until it is answered by a key.
const noteTime = 5 * time.Second

// messages is the line above the footer.
type messages struct {
	text    string
	isError bool
	id      int
	keep    time.Duration // how long a note stays; 0: until the next one
}

// noteEnded clears the note that it belongs to, and no other.
type noteEnded struct{ id int }

// say shows a note for a while.
func (m *messages) say(text string) tea.Cmd {
	m.id++
	m.text, m.isError = text, false
	id := m.id
	if m.keep == 0 {
		return nil
	}
	return tea.Tick(m.keep, func(time.Time) tea.Msg { return noteEnded{id} })
}

// fail shows an error until the next key.
func (m *messages) fail(text string) {
	m.id++
	m.text, m.isError = text, true
}

// keyPressed clears an error: it was read.
func (m *messages) keyPressed() {
	if m.isError {
		m.text, m.isError = "", false
	}
}

func (m *messages) ended(msg noteEnded) {
	if msg.id == m.id {
		m.text, m.isError = "", false
	}
}

func (m *messages) draw(t *theme, w int) string {
	if m.isError {
		return t.error.paint(fit(" "+t.clean(m.text), w, t.g.more))
	}
	return t.note.paint(fit(" "+t.clean(m.text), w, t.g.more))
}
