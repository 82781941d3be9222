package tui

import (
	"fmt"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
)

// states bring a fresh workbook into every state that a window can show.
var states = map[string]func(d *testDesk){
	"empty form":       func(*testDesk) {},
	"form with errors": func(d *testDesk) { d.press("ca", "enter", "99q", "enter") },
	"first look":       func(d *testDesk) { d.press("ca", "enter", "100uF 35V", "f8") },
	"gate": func(d *testDesk) {
		d.press("ca", "enter", "100uF 450V", "f8")
		d.answer("120")
	},
	"alarm": func(d *testDesk) {
		d.press("ca", "enter", "100uF 35V", "f8")
		d.answer("00", "9.8")
	},
	"verdict": func(d *testDesk) {
		d.press("ca", "enter", "100uF 35V 1986", "enter", "shelf B", "f8")
		d.answer("00", "98", "0.5", "00", "98", "5", "1")
	},
	"correcting": func(d *testDesk) {
		d.press("ca", "enter", "100uF 35V 1986", "f8")
		d.answer("00", "98", "0.5")
		d.press("up", "left")
	},
	"tin": func(d *testDesk) {
		d.press("ca", "enter", "f8")
		d.answer("100/25 1974", "00", "98", "0.5")
	},
	"help":     func(d *testDesk) { d.press("ca", "enter", "100uF 35V", "f8", "f1") },
	"findings": func(d *testDesk) { d.press("ca", "enter", "100uF 35V", "f8"); d.answer("00", "98"); d.press("f6") },
	"lots":     func(d *testDesk) { d.press("ca", "enter", "100uF 35V", "f8", "f7") },
	"stock": func(d *testDesk) {
		d.press("ca", "enter", "100uF 35V 1986", "f8")
		d.answer("00", "98", "0.5", "00", "98", "5", "1")
		d.press("f3")
	},
	"stock act": func(d *testDesk) {
		d.press("ca", "enter", "100uF 35V 1986", "f8")
		d.answer("1")
		d.press("f3", "f5", "9 x", "enter")
	},
	"empty stock": func(d *testDesk) { d.press("f3") },
	"long texts": func(d *testDesk) {
		d.press("ca", "enter", "100uF 35V 1986", "enter", strings.Repeat("далеко 棚 ", 20), "f8")
		d.answer("00", "98.1 98.2 98.3@1kHz")
	},
}

func TestEveryWindowIsFilledExactly(t *testing.T) {
	for name, reach := range states {
		for _, ascii := range []bool{false, true} {
			t.Run(fmt.Sprintf("%s ascii=%v", name, ascii), func(t *testing.T) {
				t.Parallel()
				d := newTestDesk(t, 120, 40)
				d.m.desk.t = testTheme(ascii)
				reach(d)
				for w := 1; w <= 220; w++ {
					for _, h := range []int{1, 12, 24, 70} {
						checkWindow(t, d.m, w, h)
					}
				}
				for h := 1; h <= 70; h++ {
					for _, w := range []int{1, 40, 80, 120} {
						checkWindow(t, d.m, w, h)
					}
				}
			})
		}
	}
}

// checkWindow holds a window to its size: h lines of w cells, and a cursor inside it.
func checkWindow(t *testing.T, m *model, w, h int) {
	t.Helper()
	m.take(tea.WindowSizeMsg{Width: w, Height: h})
	lines, at := m.draw()
	if len(lines) != h {
		t.Fatalf("%d by %d: %d lines", w, h, len(lines))
	}
	for i, l := range lines {
		if n := width(l); n != w {
			t.Fatalf("%d by %d: line %d takes %d cells: %q", w, h, i, n, l)
		}
		if m.desk.t.ascii && !plain(l) {
			t.Fatalf("%d by %d: line %d is not ASCII: %q", w, h, i, l)
		}
	}
	if !at.off && (at.x < 0 || at.x >= w || at.y < 0 || at.y >= h) {
		t.Fatalf("%d by %d: the cursor stands at %d,%d", w, h, at.x, at.y)
	}
}

func TestTooSmallAWindowSaysSo(t *testing.T) {
	d := newTestDesk(t, 38, 11)
	d.mustShow("Nothing is lost: make it larger")
	d.send(tea.WindowSizeMsg{Width: 60, Height: 20})
	d.mustShow("New lot")
}

func TestNothingThatWasTypedReachesTheTerminalAsACommand(t *testing.T) {
	const hostile = "\x1b]0;owned\x07\x1b[2J\u009b31m\u202e"
	d := newTestDesk(t, 120, 40)
	d.press("ca", "enter", "100uF 35V", "enter")
	for range 4 {
		d.send(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("x" + hostile), Paste: true})
		d.press("tab")
	}
	d.press("f8")
	d.send(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(hostile), Paste: true})
	d.press("enter", "ctrl+u")
	d.answer("00", "98", "0.5")
	lot, err := d.m.desk.wb.Lot(1)
	if err != nil {
		t.Fatal(err)
	}
	lot.Place, lot.Source, lot.Note, lot.Header = hostile, hostile, hostile, hostile
	if err := d.m.desk.wb.PutLot(lot); err != nil {
		t.Fatal(err)
	}
	p := d.part(1)
	p.Note, p.Place, p.Outcome.Why, p.Part.Readings[0].Typed = hostile, hostile, hostile, hostile
	if _, err := d.m.desk.wb.SavePart(p, hostile); err != nil {
		t.Fatal(err)
	}
	for _, keys := range [][]string{{"f7", "enter"}, {"f6"}, {"esc", "f7"}, {"f9"}, {"f3"}, {"enter"}, {"esc", "f8"}, {"enter"}, {"ctrl+z"}} {
		d.press(keys...)
		if i := strings.IndexFunc(d.screen(), func(r rune) bool { return r < ' ' && r != '\n' || r >= 0x7f && r < 0xa0 || r == 0x202e }); i >= 0 {
			t.Fatalf("after %v a control character stands on the screen: %q", keys, d.screen()[max(0, i-40):min(len(d.screen()), i+40)])
		}
	}
}
