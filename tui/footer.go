package tui

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

func (t *theme) keyText(b binding) string {
	return t.key.paint(b.Help().Key) + " " + footerWords(b) + "  "
}

func (t *theme) keyWidth(b binding) int { return width(b.Help().Key) + 1 + width(footerWords(b)) + 2 }
