package tui

import (
	"bytes"
	"fmt"
	"io"
	"strconv"
	"sync"

	"github.com/charmbracelet/x/ansi"
)

// spot is a place on the screen, from 0,0 at the top left. Off is set where nothing has the focus.
type spot struct {
	x, y int
	off  bool
}

// Bubble Tea v1 hides the terminal's cursor and leaves it at the bottom. Screen readers and magnifiers follow the real one, so each frame
// ends in a private string naming the focused place (an application program command, which terminals ignore), and the writer below takes it
// out and puts the cursor there once the frame is on the screen.
const (
	cursorOpen = "\x1b_goodbin-cursor;"
	cursorEnd  = "\x1b\\"
)

// What Bubble Tea writes to put the alternate screen up and to take it down.
var (
	enterAlt = ansi.SetMode(ansi.ModeAltScreenSaveCursor)
	leaveAlt = ansi.ResetMode(ansi.ModeAltScreenSaveCursor)
)

// mark returns the string to be put at the end of a frame's last line.
func (s spot) mark() string {
	if s.off {
		return cursorOpen + "off" + cursorEnd
	}
	return fmt.Sprintf("%s%d;%d%s", cursorOpen, s.x, s.y, cursorEnd)
}

// cursorWriter stands between Bubble Tea and the terminal and keeps the real cursor on the focused place while the alternate screen is up.
type cursorWriter struct {
	mu    sync.Mutex
	out   io.Writer
	alt   bool // the alternate screen is up
	known bool // a frame has named a place
	at    spot
}

// terminal is what Bubble Tea wants of an output to ask it for its size.
type terminal interface {
	io.ReadWriteCloser
	Fd() uintptr
}

// cursorTerminal is a cursorWriter in front of a terminal.
type cursorTerminal struct {
	terminal
	w *cursorWriter
}

// Write passes a frame on and puts the cursor in its place.
func (t cursorTerminal) Write(p []byte) (int, error) { return t.w.Write(p) }

// withCursor wraps an output; what it returns is a terminal where out is one.
func withCursor(out io.Writer) io.Writer {
	w := &cursorWriter{out: out}
	if t, ok := out.(terminal); ok {
		return cursorTerminal{t, w}
	}
	return w
}

// Write passes a frame on and puts the cursor in its place.
func (w *cursorWriter) Write(p []byte) (int, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	data := w.takeMarks(p)
	for _, change := range []struct {
		sequence string
		up       bool
	}{{enterAlt, true}, {leaveAlt, false}} {
		if bytes.Contains(data, []byte(change.sequence)) {
			w.alt, w.known = change.up, w.known && change.up
		}
	}
	if w.alt && w.known {
		data = append([]byte(ansi.HideCursor), data...)
		if !w.at.off {
			data = append(data, ansi.CursorPosition(w.at.x+1, w.at.y+1)+ansi.ShowCursor...)
		}
	}
	if _, err := w.out.Write(data); err != nil {
		return 0, err
	}
	return len(p), nil
}

// takeMarks returns the data without the marks in it and keeps the place that the last one names.
func (w *cursorWriter) takeMarks(p []byte) []byte {
	var data []byte
	for {
		before, rest, found := bytes.Cut(p, []byte(cursorOpen))
		data = append(data, before...)
		if !found {
			return data
		}
		place, after, closed := bytes.Cut(rest, []byte(cursorEnd))
		if !closed {
			return data
		}
		w.known, w.at = true, spot{off: true}
		if x, y, ok := bytes.Cut(place, []byte(";")); ok {
			column, errX := strconv.Atoi(string(x))
			row, errY := strconv.Atoi(string(y))
			w.at = spot{x: column, y: row, off: errX != nil || errY != nil}
		}
		p = after
	}
}
