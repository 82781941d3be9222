package tui

import (
	"fmt"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/exp/golden"
)

func contains(text, part string) bool { return strings.Contains(text, part) }

// TestViews holds what the pages look like. After a wanted change: go test ./tui -run TestViews -update
func TestViews(t *testing.T) {
	many := func(d *testDesk) {
		fillWorkbook(d.t, d.m.desk.wb, 250)
		d.run(d.m.desk.openLot(1, d.m.bench.grid.part.ID, ""))
	}
	for page, views := range map[string]map[string]func(d *testDesk){
		"bench": {
			"empty": states["empty form"], "working": states["first look"], "alarm": states["alarm"], "gate": states["gate"], "verdict": states["verdict"],
			"correcting": states["correcting"], "tin": states["tin"], "many": many, "help": states["help"], "findings": states["findings"], "lots": states["lots"],
		},
		"stock": {
			"empty": states["empty stock"], "verdict": states["stock"],
			"working": func(d *testDesk) { states["stock"](d); d.press("reject", "f5") },
			"many":    func(d *testDesk) { many(d); d.press("f3", "pgdown") },
		},
	} {
		for view, reach := range views {
			for _, size := range [][2]int{{80, 24}, {120, 40}, {60, 20}} {
				t.Run(fmt.Sprintf("%s-%s-%dx%d", page, view, size[0], size[1]), func(t *testing.T) {
					d := newTestDesk(t, size[0], size[1])
					reach(d)
					golden.RequireEqual(t, []byte(d.screen()))
				})
			}
		}
	}
}

func TestViewsInASCII(t *testing.T) {
	for _, view := range []string{"verdict", "stock", "gate"} {
		t.Run(strings.ReplaceAll(view, " ", "-"), func(t *testing.T) {
			d := newTestDesk(t, 120, 40)
			d.m.desk.t = testTheme(true)
			states[view](d)
			d.send(tea.WindowSizeMsg{Width: 120, Height: 40})
			golden.RequireEqual(t, []byte(d.screen()))
		})
	}
}
