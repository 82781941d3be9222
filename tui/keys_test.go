package tui

import (
	"testing"

	tea "github.com/charmbracelet/bubbletea"
)

func allGroups() map[string][]keyGroup {
	return map[string][]keyGroup{
		"grid": newGridKeys().groups(), "form": newFormKeys().groups(), "lots": newHomeKeys().groups(), "stock": newStockKeys().groups(),
		"pager": newPagerKeys().groups(),
	}
}

func TestEveryKeyIsTakenOnceOnItsPageAndHasHelp(t *testing.T) {
	for page, groups := range allGroups() {
		seen := map[string]string{}
		for _, g := range append(groups, newGlobalKeys().groups()...) {
			for _, b := range g.keys {
				if b.Help().Key == "" || b.Help().Desc == "" {
					t.Errorf("%s: %v has no help", page, b.Keys())
				}
				for _, k := range b.Keys() {
					if other, taken := seen[k]; taken {
						t.Errorf("%s: %q does both %q and %q", page, k, other, b.Help().Desc)
					}
					seen[k] = b.Help().Desc
				}
			}
		}
	}
}

func TestFooterNamesHelpAndCloseAtEveryWidth(t *testing.T) {
	th := testTheme(false)
	for page, groups := range allGroups() {
		for w := minWidth; w <= 200; w += 7 {
			line := th.footer(groups, newGlobalKeys(), w)
			if width(line) != w || !contains(line, "F1 help") || !contains(line, "^C close") {
				t.Errorf("%s at %d: %q", page, w, line)
			}
		}
	}
}

func TestControlCAlwaysCloses(t *testing.T) {
	for name, reach := range states {
		d := newTestDesk(t, 80, 24)
		reach(d)
		cmd := d.m.take(tea.KeyMsg{Type: tea.KeyCtrlC})
		if cmd == nil {
			t.Errorf("%s: ctrl+c does nothing", name)
			continue
		}
		if _, quits := cmd().(tea.QuitMsg); !quits {
			t.Errorf("%s: ctrl+c does not close", name)
		}
	}
}

func TestEscapeLeavesEveryStateInTheEnd(t *testing.T) {
	for name, reach := range states {
		d := newTestDesk(t, 80, 24)
		reach(d)
		for range 8 {
			d.press("esc")
		}
		if d.m.overlay != nil || d.m.front != pageBench || d.m.bench.mode == benchGrid {
			t.Errorf("%s: after eight Esc the page is %v, mode %v", name, d.m.front, d.m.bench.mode)
		}
	}
}

func TestQuestionMarkIsHelpOnlyWhereNothingIsTyped(t *testing.T) {
	d := newTestDesk(t, 80, 24)
	d.press("?")
	d.mustShow("Help: Bench", "Everywhere")
	d.press("esc", "c?")
	d.mustShow("c?")
	if d.m.overlay != nil {
		t.Error("a typed question mark opened the help")
	}
}

func TestHelpListsEveryKeyOfThePage(t *testing.T) {
	d := newLot(t, "100uF 35V")
	d.send(tea.WindowSizeMsg{Width: 120, Height: 70})
	d.press("f1")
	for _, g := range append(newGridKeys().groups(), newGlobalKeys().groups()...) {
		for _, b := range g.keys {
			d.mustShow(b.Help().Key)
		}
	}
}
