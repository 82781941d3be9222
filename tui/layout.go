package tui

// The smallest window in which the pages are drawn; below it they say so.
const (
	minWidth  = 40
	minHeight = 12
	fullWidth = 60 // what the pages are made for and up
	besideAt  = 100
)

// rect is a part of the screen.
type rect struct{ x, y, w, h int }

// frame is how a window is divided among the header, the page, the message line and the footer.
type frame struct {
	header, body, message, footer rect
	tooSmall                      bool
}

// frameFor divides a window of w by h cells.
func frameFor(w, h int) frame {
	f := frame{tooSmall: w < minWidth || h < minHeight}
	f.header = rect{0, 0, w, 1}
	f.body = rect{0, 1, w, h - 3}
	f.message = rect{0, h - 2, w, 1}
	f.footer = rect{0, h - 1, w, 1}
	return f
}

// benchFrame is how the Bench page divides its body: the lot's line, the prompt, then the grid with the part's findings beside or below.
type benchFrame struct {
	lot, prompt, grid, card rect
	beside                  bool
}

// benchFrameFor divides a body for a grid that would like to be gridW cells wide.
func benchFrameFor(w, h, promptH, gridW, gridRows int) benchFrame {
	var f benchFrame
	f.lot = rect{0, 0, w, 1}
	f.prompt = rect{0, 1, w, promptH}
	top := 1 + promptH + 1 // and a rule
	rest := max(0, h-top)
	if w >= besideAt {
		f.beside = true
		left := min(gridW, w-46)
		f.grid = rect{0, top, left, rest}
		f.card = rect{left + 3, top, w - left - 3, rest}
		return f
	}
	gridH := max(3, min(gridRows+1, rest/3))
	gridH = min(gridH, rest)
	f.grid = rect{0, top, w, gridH}
	f.card = rect{0, top + gridH + 1, w, max(0, rest-gridH-1)}
	return f
}

// stockFrame is how the Stock page divides its body: filter and counts, the list, the details beside or below.
type stockFrame struct {
	filter, list, detail rect
	beside               bool
}

// stockFrameFor divides a body.
func stockFrameFor(w, h int) stockFrame {
	f := stockFrame{filter: rect{0, 0, w, 2}}
	rest := max(0, h-3)
	if w >= besideAt {
		f.beside = true
		left := w - max(46, w*2/5) - 3
		f.list = rect{0, 3, left, rest}
		f.detail = rect{left + 3, 3, w - left - 3, rest}
		return f
	}
	listH := max(min(rest, 3), rest*3/5)
	f.list = rect{0, 3, w, listH}
	f.detail = rect{0, 3 + listH + 1, w, max(0, rest-listH-1)}
	return f
}
