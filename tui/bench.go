package tui

import (
	"cmp"
	"errors"
	"slices"

	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
)

// benchMode is what the Bench page shows.
type benchMode uint8

const (
	benchOpening benchMode = iota // something is being read
	benchHome                     // the list of lots
	benchForm                     // a new lot
	benchGrid                     // parts being measured
)

// bench is the page where parts are measured: what is it, what does it claim, look, measure, verdict.
type bench struct {
	d    *desk
	mode benchMode

	homeKeys homeKeys
	formKeys formKeys
	gridKeys gridKeys

	lots     []inventory.Lot // the last one first
	held     map[uint32]lotCount
	lotTable table
	form     form
	editing  inventory.Lot // the lot that the form corrects; the zero Lot for a new one
	from     benchMode     // what the form was opened over; benchOpening where it is the first page

	grid grid
}

func newBench(d *desk) *bench {
	return &bench{d: d, homeKeys: newHomeKeys(), formKeys: newFormKeys(), gridKeys: newGridKeys(), grid: grid{d: d}}
}

func (b *bench) enter() tea.Cmd {
	if b.mode == benchHome {
		return b.d.listLots()
	}
	return nil
}

func (b *bench) paused() bool {
	return b.mode == benchOpening || b.mode == benchGrid && b.grid.saving()
}

func (b *bench) typing() bool {
	switch b.mode {
	case benchForm:
		return len(b.form.fields[b.form.at].in.text) > 0
	case benchGrid:
		return len(b.grid.in.text) > 0
	}
	return false
}

func (b *bench) keys() []keyGroup {
	switch b.mode {
	case benchForm:
		return b.formKeys.groups()
	case benchGrid:
		return b.gridKeys.groups()
	case benchHome:
		return b.homeKeys.groups()
	}
	return nil
}

func (b *bench) about() []string {
	switch b.mode {
	case benchForm:
		return []string{
			"A lot is parts that share marking and origin, such as a bag. Type once what is printed on them; then only readings are typed.",
			"A tin of mixed parts is a lot whose header stays empty: every part is then asked what it claims, such as 100/25 1974 or 8+8/450.",
		}
	case benchGrid:
		about := []string{
			"The line at the top asks, you answer: a number and Enter, on the numeric pad alone. A bare number counts in the unit that stands behind " +
				"the field; 2010u, 2,01m and 4k7 work as well, as do <0.1uA, >400V and OL. Several values separated by spaces are a series. " +
				"A condition follows an at sign: 61m@120Hz. NAME=VALUE gives a reading that was not asked for; temperature=24C holds for " +
				"the parts that follow as well, until another one is typed. treated=1 says that a part was re-formed or dried, once.",
			"A look is answered with the digits of what you see, 24 for the second and the fourth, or 0 for nothing; F5 says what each means.",
			"A sign alone and then Enter is a command, so that the numeric pad does everything. Every answer is on the disk before the next " +
				"question appears.",
		}
		if b.d.ring != nil {
			about = append(about, "The bell rings once for accept, twice for regrade, then three times for treat, four for undecided, five for barred, six for reject.")
		}
		return append(about, "Judged by the tables "+b.grid.book.Tables+".")
	}
	return []string{"Every lot of the workbook, the last one first."}
}

// leave goes one level up: from the grid to the list of lots, from the form to what it was opened over.
func (b *bench) leave() (tea.Cmd, bool) {
	switch {
	case b.mode == benchGrid && b.grid.leave():
		return nil, true
	case b.mode == benchForm && b.from == benchGrid:
		b.mode = benchOpening // read anew: the lot may have been undone meanwhile
		return b.d.openLot(b.grid.lot.ID, b.grid.part.ID, b.grid.column()), true
	case b.canLeave():
		return b.d.listLots(), true
	}
	return nil, false
}

func (b *bench) canLeave() bool {
	return b.mode == benchGrid || b.mode == benchForm && b.from != benchOpening
}

func (b *bench) receive(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case lotsListed:
		b.lots, b.held = msg.lots, msg.held
		if len(b.lots) == 0 {
			b.mode = benchOpening // nothing lies under the form
			b.startForm(inventory.Lot{})
			return nil
		}
		b.mode = benchHome
	case lotOpened:
		return b.open(msg)
	case partSaved:
		if b.mode == benchGrid {
			return b.grid.saved(msg)
		}
	case notKept:
		if b.mode == benchOpening {
			b.mode = benchForm
		}
		b.grid.notSaved(msg.err)
		b.d.messages.fail("nothing was kept: " + errorText(msg.err))
	case failed:
		b.grid.notSaved(msg.err)
		if (b.mode == benchGrid || b.mode == benchOpening) && errors.Is(msg.err, inventory.ErrNotFound) {
			return b.d.listLots() // the lot itself was undone
		}
		if b.mode == benchOpening {
			b.mode = benchHome
		}
	case wentBack:
		switch {
		case b.mode == benchGrid && msg.done.ID.Lot == b.grid.lot.ID:
			return b.d.openLot(b.grid.lot.ID, msg.done.ID, stayHere)
		case b.mode == benchHome:
			return b.d.listLots()
		}
	}
	return nil
}

// open shows a lot that was read, in its grid.
func (b *bench) open(msg lotOpened) tea.Cmd {
	book, ok := b.d.kinds.Find(msg.lot.Kind)
	if !ok {
		b.d.messages.fail("this goodbin has no limits for " + string(msg.lot.Kind))
		return b.d.listLots()
	}
	b.mode = benchGrid
	return b.grid.open(msg, book)
}

func (b *bench) key(msg tea.KeyMsg) tea.Cmd {
	switch b.mode {
	case benchHome:
		return b.homeKey(msg)
	case benchForm:
		return b.formKey(msg)
	case benchGrid:
		return b.gridKey(msg)
	}
	return nil
}

func (b *bench) draw(w, h int) ([]string, spot) {
	switch b.mode {
	case benchHome:
		return b.drawHome(w, h)
	case benchForm:
		return b.form.draw(b.d.t, w, h)
	case benchGrid:
		return b.grid.draw(w, h)
	}
	return block([]string{"", " reading the workbook" + b.d.t.g.more}, w, h, ""), spot{off: true}
}

// position is where the person is at the bench.
func (b *bench) position() inventory.Position {
	if b.mode != benchGrid {
		return b.d.wb.Position()
	}
	return inventory.Position{Lot: b.grid.lot.ID, Part: b.grid.part.ID, Column: b.grid.column()}
}

// column is the question in hand, as a position spells it.
func (g *grid) column() string { return cmp.Or(g.pin, stayHere) }

// stayHere, as the column of a position, lands on the very part, even where nothing is left to ask of it.
const stayHere = "."

// kindNames lists the kinds in the order in which they are offered.
func kindNames(kinds screening.Kinds) []string {
	var names []string
	for _, k := range kinds {
		names = append(names, string(k.Kind))
	}
	return slices.Clip(names)
}
