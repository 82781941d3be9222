package tui

import (
	"strconv"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"
)

// pager is a page of text laid over another page.
type pager struct {
	title string
	lines func(w int) []string // wrapped to a width; already cleaned
	top   int

	w     int // what the lines were wrapped for
	cache []string
	h     int
}

// key scrolls; it reports false for a key that is none of a pager's.
func (p *pager) key(k pagerKeys, msg tea.KeyMsg) bool {
	page := max(1, p.h-2)
	switch {
	case key.Matches(msg, k.up.Binding):
		p.top--
	case key.Matches(msg, k.down.Binding):
		p.top++
	case key.Matches(msg, k.pageUp.Binding):
		p.top -= page
	case key.Matches(msg, k.pageDown.Binding):
		p.top += page
	case key.Matches(msg, k.top.Binding):
		p.top = 0
	case key.Matches(msg, k.bottom.Binding):
		p.top = len(p.cache)
	default:
		return false
	}
	p.top = max(0, min(p.top, len(p.cache)-p.h))
	return true
}

// draw shows the page in w by h cells: its title, then as much of the text as fits.
func (p *pager) draw(t *theme, w, h int) ([]string, spot) {
	if p.w != w || p.cache == nil {
		p.w, p.cache = w, p.lines(w-4)
	}
	p.h = max(1, h-2)
	p.top = max(0, min(p.top, len(p.cache)-p.h))
	more := ""
	if len(p.cache) > p.h {
		more = " line " + strconv.Itoa(p.top+1) + " of " + strconv.Itoa(len(p.cache)) + " "
	}
	lines := []string{t.title.paint(between(" "+p.title, more, w, t.g.more)), ""}
	for i := p.top; i < min(p.top+p.h, len(p.cache)); i++ {
		lines = append(lines, "  "+p.cache[i])
	}
	return block(lines, w, h, t.g.more), spot{x: 0, y: 2}
}
