package tui

import (
	tea "github.com/charmbracelet/bubbletea"
)

// maxInput bounds what a field takes; nothing that is typed at a bench comes near it.
const maxInput = 400

// input is one line of text being typed, with its cursor.
type input struct {
	text []rune
	at   int // the cursor stands before text[at]
}

func newInput(text string) input {
	r := []rune(text)
	return input{text: r, at: len(r)}
}

// String returns the text as typed.
func (in *input) String() string { return string(in.text) }

func (in *input) set(text string) { *in = newInput(text) }

// insert puts a text at the cursor. Line breaks become spaces, so that a pasted one submits nothing; control characters are dropped.
func (in *input) insert(text []rune) {
	for _, r := range text {
		switch {
		case len(in.text) >= maxInput:
			return
		case r == '\n' || r == '\r' || r == '\t':
			r = ' '
		case r < ' ' || r == 0x7f || r >= 0x80 && r < 0xa0:
			continue
		}
		in.text = append(in.text[:in.at], append([]rune{r}, in.text[in.at:]...)...)
		in.at++
	}
}

// key takes a key press; it reports false for one that is none of a text field's.
func (in *input) key(k tea.KeyMsg) bool {
	switch k.Type {
	case tea.KeyRunes, tea.KeySpace:
		if k.Alt {
			return false
		}
		in.insert(k.Runes)
	case tea.KeyBackspace:
		if k.Alt {
			in.dropWord()
		} else if in.at > 0 {
			in.text = append(in.text[:in.at-1], in.text[in.at:]...)
			in.at--
		}
	case tea.KeyCtrlW:
		in.dropWord()
	case tea.KeyDelete:
		if in.at < len(in.text) {
			in.text = append(in.text[:in.at], in.text[in.at+1:]...)
		}
	case tea.KeyLeft:
		if in.at == 0 {
			return false
		}
		in.at--
	case tea.KeyRight:
		if in.at == len(in.text) {
			return false
		}
		in.at++
	case tea.KeyHome, tea.KeyCtrlA:
		in.at = 0
	case tea.KeyEnd, tea.KeyCtrlE:
		in.at = len(in.text)
	case tea.KeyCtrlU:
		in.text, in.at = in.text[in.at:], 0
	case tea.KeyCtrlK:
		in.text = in.text[:in.at]
	default:
		return false
	}
	return true
}

func (in *input) dropWord() {
	from := in.at
	for from > 0 && in.text[from-1] == ' ' {
		from--
	}
	for from > 0 && in.text[from-1] != ' ' {
		from--
	}
	in.text = append(in.text[:from], in.text[in.at:]...)
	in.at = from
}

// draw shows the text in exactly w cells, scrolled so that the cursor is among them, and returns the cursor's cell.
func (in *input) draw(t *theme, w int) (text string, cursor int) {
	if w <= 0 {
		return "", 0
	}
	from := 0
	for width(t.clean(string(in.text[from:in.at]))) >= w {
		from++
	}
	cursor = width(t.clean(string(in.text[from:in.at])))
	return fit(t.clean(string(in.text[from:])), w, t.g.more), cursor
}
