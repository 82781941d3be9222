package tui

import "strings"

// column is one column of a table.
type column struct {
	title string
	w     int
	right bool // numbers stand at the right
}

// rows is what a table shows; it is asked for the visible rows only.
type rows interface {
	count() int
	// cells writes the texts of row i, already cleaned, into dst, one per column.
	cells(i int, dst []string)
}

// table is a virtual list: it holds where it stands and knows nothing of what it shows.
type table struct {
	top int // first visible row
	at  int // selected row
}

// move selects another row, keeping it within n.
func (tb *table) move(by, n int) { tb.at = max(0, min(tb.at+by, n-1)) }

// show scrolls so that the selected row is among h visible ones.
func (tb *table) show(n, h int) {
	tb.at = max(0, min(tb.at, n-1))
	tb.top = max(0, min(tb.top, n-h))
	if tb.at < tb.top {
		tb.top = tb.at
	}
	if tb.at >= tb.top+h {
		tb.top = tb.at - h + 1
	}
	tb.top = max(0, tb.top)
}

// columnsFor drops columns from the right until the rest fits into w cells; the last of keep columns stays whatever happens.
func columnsFor(cols []column, w int) (fitting []column) {
	total := 0
	for i, c := range cols {
		total += c.w + 1
		if total > w+1 && i > 0 {
			return cols[:i]
		}
	}
	return cols
}

// draw shows the heading and h-1 rows in w cells. paint, where it is not nil, colours a whole row.
func (tb *table) draw(t *theme, cols []column, src rows, w, h int, paint func(i int, line string) string) []string {
	if h <= 0 {
		return nil
	}
	lines := make([]string, 0, h)
	var head strings.Builder
	head.WriteString("  ")
	for i := range cols {
		writeCell(&head, t, cols[i], cols[i].title)
	}
	lines = append(lines, t.label.paint(fit(head.String(), w, "")))
	n := src.count()
	tb.show(n, h-1)
	texts := make([]string, len(cols))
	for i := tb.top; i < n && len(lines) < h; i++ {
		src.cells(i, texts)
		var b strings.Builder
		if i == tb.at {
			b.WriteString(t.g.marker)
			b.WriteByte(' ')
		} else {
			b.WriteString("  ")
		}
		for k := range cols {
			writeCell(&b, t, cols[k], texts[k])
		}
		line := fit(b.String(), w, "")
		switch {
		case i == tb.at:
			line = t.row.paint(line)
		case paint != nil:
			line = paint(i, line)
		}
		lines = append(lines, line)
	}
	for len(lines) < h {
		lines = append(lines, spaces(w))
	}
	return lines
}

func writeCell(b *strings.Builder, t *theme, c column, text string) {
	if c.right {
		b.WriteString(fitRight(text, c.w, t.g.more))
	} else {
		b.WriteString(fit(text, c.w, t.g.more))
	}
	b.WriteByte(' ')
}
