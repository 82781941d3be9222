package tui

// helpPager lists every key of the page in front and of the program, generated from the key maps, after a few lines that say what the
// page is for.
func (t *theme) helpPager(title string, about []string, groups []keyGroup, global globalKeys) *pager {
	return &pager{title: title, lines: func(w int) []string {
		var lines []string
		for _, text := range about {
			lines = append(lines, wrap(t.clean(text), w)...)
			lines = append(lines, "")
		}
		for _, g := range append(groups, global.groups()...) {
			lines = append(lines, t.label.paint(g.title))
			for _, b := range g.keys {
				lines = append(lines, wrapHang("  "+fit(b.Help().Key, 11, ""), b.Help().Desc, w, 0, "")...)
			}
			lines = append(lines, "")
		}
		return lines
	}}
}
