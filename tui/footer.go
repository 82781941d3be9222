package tui

import "strings"

// footer writes the keys of a page that are marked short into one line; what does not fit is dropped from the right, help and close
// never.
func (t *theme) footer(groups []keyGroup, global globalKeys, w int) string {
	first := t.keyText(global.help)
	used := t.keyWidth(global.help)
	last := t.keyText(global.quit)
	room := w - used - t.keyWidth(global.quit) - 1
	line := first
	add := func(b binding) {
		if n := t.keyWidth(b); b.short && b.Enabled() && n <= room {
			line += t.keyText(b)
			room -= n
		}
	}
	for _, g := range groups {
		for _, b := range g.keys {
			add(b)
		}
	}
	for _, b := range []binding{global.leave, global.undo, global.bench, global.stock} {
		add(b)
	}
	return fit(" "+line+last, w, t.g.more)
}

// footerWords are the words of a key in the footer: its help up to the first punctuation.
func footerWords(b binding) string {
	help := b.Help().Desc
	for i, r := range help {
		if r == ':' || r == ',' {
			return help[:i]
		}
	}
	return help
}

// footerKey is the key in the footer. Of a sign that is typed Enter is left out: the prompt asks for it as soon as the sign stands there.
func footerKey(b binding) string { return strings.TrimSuffix(b.Help().Key, " Enter") }

func (t *theme) keyText(b binding) string {
	return t.key.paint(footerKey(b)) + " " + footerWords(b) + "  "
}

func (t *theme) keyWidth(b binding) int { return width(footerKey(b)) + 1 + width(footerWords(b)) + 2 }
