package tui

import (
	"bytes"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"
)

func TestCursorStandsInTheField(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.answer("00")
	d.press("98.5", "left")
	lines, at := d.m.draw()
	runes := []rune(ansi.Strip(lines[at.y]))
	if at.off || string(runes[at.x-3:at.x]) != "98." || runes[at.x] != '5' {
		t.Errorf("cursor at %d,%d in %q", at.x, at.y, lines[at.y])
	}
}

func TestCursorWriterPutsTheCursorAfterEachFrame(t *testing.T) {
	var out bytes.Buffer
	w := withCursor(&out)
	write := func(text string) string {
		t.Helper()
		out.Reset()
		if n, err := w.Write([]byte(text)); err != nil || n != len(text) {
			t.Fatalf("wrote %d, %v", n, err)
		}
		return out.String()
	}
	if got := write("before" + spot{x: 1, y: 2}.mark()); got != "before" {
		t.Errorf("outside the alternate screen: %q", got)
	}
	write(enterAlt)
	frame := write("frame" + spot{x: 4, y: 6}.mark() + "end")
	if !strings.HasPrefix(frame, ansi.HideCursor+"frameend") || !strings.HasSuffix(frame, ansi.CursorPosition(5, 7)+ansi.ShowCursor) {
		t.Errorf("frame: %q", frame)
	}
	if next := write("part of a frame"); !strings.HasSuffix(next, ansi.CursorPosition(5, 7)+ansi.ShowCursor) {
		t.Errorf("a frame whose last line did not change: %q", next)
	}
	if off := write(spot{off: true}.mark()); strings.Contains(off, ansi.ShowCursor) {
		t.Errorf("no focus: %q", off)
	}
	if after := write(leaveAlt); after != leaveAlt {
		t.Errorf("the restored screen is written to: %q", after)
	}
}

func TestInputEdits(t *testing.T) {
	for _, c := range []struct {
		name  string
		keys  []string
		text  string
		after int
	}{
		{"types at the cursor", []string{"ac", "left", "b"}, "abc", 2},
		{"backspace takes the letter before", []string{"abc", "left", "backspace"}, "ac", 1},
		{"ctrl+u clears what stands before", []string{"abc", "left", "ctrl+u"}, "c", 0},
		{"backspace at the begin does nothing", []string{"backspace", "a"}, "a", 1},
	} {
		var in input
		for _, k := range c.keys {
			for _, msg := range keyMsgs(k) {
				in.key(msg)
			}
		}
		if in.String() != c.text || in.at != c.after {
			t.Errorf("%s: %q, cursor %d", c.name, in.String(), in.at)
		}
	}
}

func TestInputIsBoundedAndDropsControlCharacters(t *testing.T) {
	var in input
	in.key(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("a\x1b[31mb\nc\x00\u009bd"), Paste: true})
	if got := in.String(); got != "a[31mb cd" {
		t.Errorf("%q", got)
	}
	in.insert([]rune(strings.Repeat("x", 2*maxInput)))
	if len(in.text) != maxInput {
		t.Errorf("%d runes", len(in.text))
	}
}

func TestInputScrollsToItsCursor(t *testing.T) {
	in := newInput(strings.Repeat("0123456789", 5))
	text, at := in.draw(testTheme(false), 8)
	if width(text) != 8 || at != 7 || !strings.HasPrefix(text, "3456789") {
		t.Errorf("%q, cursor %d", text, at)
	}
}

func FuzzClean(f *testing.F) {
	for _, s := range []string{"2200 µF", "\x1b[2J", "a\u202eb", "\xff\xfe", "日本", "é\u0301", "\u009b1m"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		for _, r := range clean(s, false) {
			if r < ' ' || r == 0x7f || r >= 0x80 && r < 0xa0 || r >= 0x202a && r <= 0x202e {
				t.Fatalf("%q lets %U through", s, r)
			}
		}
		if !plain(clean(s, true)) {
			t.Fatalf("%q is not ASCII: %q", s, clean(s, true))
		}
	})
}
