package tui

import "github.com/charmbracelet/bubbles/key"

// keyGroup is a heading of the help page and the keys under it. The footer shows those marked short, in this order.
type keyGroup struct {
	title string
	keys  []binding
}

// binding is a key with its words; short ones stand in the footer.
type binding struct {
	key.Binding
	short bool
}

func bind(short bool, keys []string, shown, help string) binding {
	return binding{key.NewBinding(key.WithKeys(keys...), key.WithHelp(shown, help)), short}
}

// typed is a sign that is typed into the field and sent with Enter: no key press of its own, but it belongs in the help.
func typed(short bool, sign, help string) binding {
	return binding{key.NewBinding(key.WithKeys("typed "+sign), key.WithHelp(sign+" Enter", help)), short}
}

// globalKeys work on every page.
type globalKeys struct{ help, bench, stock, undo, redo, leave, quit binding }

func newGlobalKeys() globalKeys {
	return globalKeys{
		help:  bind(true, []string{"f1"}, "F1", "help"),
		bench: bind(true, []string{"f2", "ctrl+b"}, "F2", "Bench"),
		stock: bind(true, []string{"f3", "ctrl+s"}, "F3", "Stock"),
		undo:  bind(true, []string{"ctrl+z"}, "^Z", "undo"),
		redo:  bind(false, []string{"ctrl+y"}, "^Y", "redo"),
		leave: bind(true, []string{"esc"}, "Esc", "back"),
		quit:  bind(true, []string{"ctrl+c"}, "^C", "close"),
	}
}

func (k globalKeys) groups() []keyGroup {
	return []keyGroup{{"Everywhere", []binding{k.help, k.bench, k.stock, k.undo, k.redo, k.leave, k.quit}}}
}

// gridKeys are those of the Bench page while parts are measured.
type gridKeys struct {
	answer, up, down, left, right, next, previous, first, last binding
	skip, again, more, back                                    binding
	recipe, findings, lots, newLot, claim                      binding
}

func newGridKeys() gridKeys {
	return gridKeys{
		answer:   bind(true, []string{"enter"}, "Enter", "save: the answer, and on to the next question"),
		skip:     typed(true, "+", "skip: the question is left for later"),
		again:    typed(true, "*", "again: the last reading once more, the values become a series"),
		more:     typed(true, "/", "more: go on after a stop, or with what could be tested beside it"),
		back:     typed(true, "-", "undo: take the last answer back"),
		recipe:   bind(true, []string{"f5", "ctrl+r"}, "F5", "recipe: how to measure it with what people own; what to look for"),
		findings: bind(true, []string{"f6", "ctrl+f"}, "F6", "all: every finding with formula and source"),
		lots:     bind(true, []string{"f7", "ctrl+o"}, "F7", "lots: the list of them"),
		newLot:   bind(false, []string{"f8", "ctrl+n"}, "F8", "new lot"),
		claim:    bind(false, []string{"f9", "ctrl+t"}, "F9", "correct what this part claims"),
		up:       bind(false, []string{"up"}, "Up", "part above"),
		down:     bind(false, []string{"down"}, "Down", "part below"),
		left:     bind(false, []string{"left"}, "Left", "reading to the left, where nothing is typed"),
		right:    bind(false, []string{"right"}, "Right", "reading to the right, where nothing is typed"),
		next:     bind(false, []string{"tab"}, "Tab", "next reading"),
		previous: bind(false, []string{"shift+tab"}, "Shift+Tab", "reading before"),
		first:    bind(false, []string{"pgup"}, "PgUp", "a screenful up"),
		last:     bind(false, []string{"pgdown"}, "PgDn", "a screenful down"),
	}
}

func (k gridKeys) groups() []keyGroup {
	return []keyGroup{
		{"Answering", []binding{k.answer, k.skip, k.again, k.more, k.back}},
		{"Looking closer", []binding{k.recipe, k.findings}},
		{"Correcting: go to a cell and type", []binding{k.up, k.down, k.left, k.right, k.next, k.previous, k.first, k.last, k.claim}},
		{"Lots", []binding{k.lots, k.newLot}},
	}
}

// formKeys are those of a form.
type formKeys struct{ next, forward, previous, start binding }

func newFormKeys() formKeys {
	return formKeys{
		next:     bind(true, []string{"enter"}, "Enter", "next line"),
		forward:  bind(false, []string{"tab", "down"}, "Tab", "next line, whatever stands in this one"),
		previous: bind(true, []string{"shift+tab", "up"}, "Up", "line before"),
		start:    bind(true, []string{"f8", "ctrl+n"}, "F8", "start: keep the lot and measure"),
	}
}

func (k formKeys) groups() []keyGroup {
	return []keyGroup{{"New lot", []binding{k.next, k.forward, k.previous, k.start}}}
}

// homeKeys are those of the list of lots.
type homeKeys struct{ open, up, down, pageUp, pageDown, newLot, correct binding }

func newHomeKeys() homeKeys {
	return homeKeys{
		open:     bind(true, []string{"enter"}, "Enter", "open: go on with this lot"),
		newLot:   bind(true, []string{"f8", "ctrl+n"}, "F8", "new lot"),
		correct:  bind(true, []string{"f9", "ctrl+t"}, "F9", "correct: what the lot claims, its place, its notes"),
		up:       bind(false, []string{"up"}, "Up", "lot above"),
		down:     bind(false, []string{"down"}, "Down", "lot below"),
		pageUp:   bind(false, []string{"pgup"}, "PgUp", "a screenful up"),
		pageDown: bind(false, []string{"pgdown"}, "PgDn", "a screenful down"),
	}
}

func (k homeKeys) groups() []keyGroup {
	return []keyGroup{{"Lots", []binding{k.open, k.newLot, k.correct, k.up, k.down, k.pageUp, k.pageDown}}}
}

// stockKeys are those of the Stock page.
type stockKeys struct {
	filter, usable, open, take, giveBack, recount, move, bench binding
	up, down, pageUp, pageDown, top, bottom                    binding
}

func newStockKeys() stockKeys {
	return stockKeys{
		filter:   bind(false, []string{"typed letters"}, "letters", "filter as you type"),
		usable:   bind(true, []string{"f4", "ctrl+g"}, "F4", "usable only"),
		open:     bind(true, []string{"enter"}, "Enter", "all: everything that is known of this part"),
		take:     bind(true, []string{"f5", "ctrl+t"}, "F5", "take"),
		giveBack: bind(true, []string{"f6", "ctrl+r"}, "F6", "return"),
		recount:  bind(true, []string{"f7", "ctrl+n"}, "F7", "recount"),
		move:     bind(true, []string{"f8", "ctrl+p"}, "F8", "place"),
		bench:    bind(true, []string{"f9", "ctrl+o"}, "F9", "to the bench"),
		up:       bind(false, []string{"up"}, "Up", "part above"),
		down:     bind(false, []string{"down"}, "Down", "part below"),
		pageUp:   bind(false, []string{"pgup"}, "PgUp", "a screenful up"),
		pageDown: bind(false, []string{"pgdown"}, "PgDn", "a screenful down"),
		top:      bind(false, []string{"ctrl+home"}, "^Home", "first part"),
		bottom:   bind(false, []string{"ctrl+end"}, "^End", "last part"),
	}
}

func (k stockKeys) groups() []keyGroup {
	return []keyGroup{
		{"Finding", []binding{k.filter, k.usable, k.up, k.down, k.pageUp, k.pageDown, k.top, k.bottom}},
		{"The selected part", []binding{k.open, k.take, k.giveBack, k.recount, k.move, k.bench}},
	}
}

// pagerKeys are those of a page of text laid over another one.
type pagerKeys struct{ up, down, pageUp, pageDown, top, bottom binding }

func newPagerKeys() pagerKeys {
	return pagerKeys{
		up:       bind(true, []string{"up", "k"}, "Up", "line up"),
		down:     bind(true, []string{"down", "j", "enter"}, "Down", "line down"),
		pageUp:   bind(true, []string{"pgup"}, "PgUp", "screenful up"),
		pageDown: bind(true, []string{"pgdown", " "}, "PgDn", "screenful down"),
		top:      bind(false, []string{"home"}, "Home", "begin"),
		bottom:   bind(false, []string{"end"}, "End", "end"),
	}
}

func (k pagerKeys) groups() []keyGroup {
	return []keyGroup{{"Reading", []binding{k.up, k.down, k.pageUp, k.pageDown, k.top, k.bottom}}}
}
