package tui

import (
	"fmt"
	"strconv"
	"strings"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// The fields of the form for a new lot.
const (
	fieldKind = iota
	fieldHeader
	fieldPlace
	fieldSource
	fieldStorage
	fieldNote
)

// startForm begins a new lot, or the correction of one.
func (b *bench) startForm(lot inventory.Lot) {
	b.from, b.mode, b.editing = b.mode, benchForm, lot
	b.form = form{title: "New lot", fields: []formField{
		fieldKind: {
			label: "what is it", hint: "a kind, its first letters will do, or what is printed on it such as 104K: " + strings.Join(kindNames(b.d.kinds), ", "),
			check: func(text string) ([]string, error) {
				book, err := kindFor(b.d.kinds, text)
				if err != nil {
					return nil, err
				}
				if k := b.editing.Kind; k != "" && k != book.Kind {
					return nil, fmt.Errorf("the lot's parts were measured as %s; start a new lot for another kind", k)
				}
				return []string{string(book.Kind) + ": " + book.Label}, nil
			},
			choices: b.markingChoices, pick: b.pickMarking,
		},
		fieldHeader: {
			label: "it claims", hintFor: b.headerHint, check: b.understandHeader,
		},
		fieldPlace:   {label: "place", hint: "where it will lie: shelf B, drawer 12"},
		fieldSource:  {label: "source", hint: "where it comes from: bequest, biscuit tin 3"},
		fieldStorage: {label: "stored", hint: "how it was kept: damp cellar, 20 years"},
		fieldNote:    {label: "note", hint: "anything else"},
	}}
	if lot.ID == 0 {
		return
	}
	b.form.title = "Lot " + inventory.ID{Lot: lot.ID}.String()
	for i, text := range []string{string(lot.Kind), lot.Header, lot.Place, lot.Source, lot.Storage, lot.Note} {
		b.form.fields[i].in.set(text)
	}
}

// markingChoices lists what a marking may mean, as kinds of part and what they then claim.
func (b *bench) markingChoices(text string) []string {
	if b.d.meanings == nil || b.editing.ID != 0 {
		return nil
	}
	var texts []string
	for _, m := range b.d.meanings(text) {
		texts = append(texts, string(m.Kind)+"  "+m.Text+"  ("+m.Source+")")
	}
	return texts
}

// pickMarking starts the lot from one meaning of a marking: its kind, and what it claims, open for more.
func (b *bench) pickMarking(text string, i int) {
	m := b.d.meanings(text)[i]
	b.form.fields[fieldKind].in.set(string(m.Kind))
	b.form.fields[fieldHeader].in.set(m.Header)
	b.form.focus(fieldHeader)
}

// headerHint shows what is printed on parts of the kind that was typed.
func (b *bench) headerHint() string {
	example := "2200uF 35V"
	if book, err := kindFor(b.d.kinds, b.form.text(fieldKind)); err == nil {
		example = book.ExampleClaim()
	}
	return "as printed, such as " + example + "; empty: a tin of mixed parts"
}

// kindFor finds the kind of a word or of its first letters.
func kindFor(kinds screening.Kinds, text string) (*screening.Rulebook, error) {
	word := strings.ToLower(strings.TrimSpace(text))
	if book, ok := kinds.Find(screening.Kind(word)); ok {
		return book, nil
	}
	var begin []string
	var first *screening.Rulebook
	for _, k := range kinds {
		if word != "" && strings.HasPrefix(string(k.Kind), word) {
			begin = append(begin, string(k.Kind))
			first = k
		}
	}
	names := kindNames(kinds)
	switch {
	case len(begin) == 1:
		return first, nil
	case len(begin) > 1:
		return nil, fmt.Errorf("%q begins several kinds: %s", word, strings.Join(begin, ", "))
	case word == "":
		return nil, fmt.Errorf("what sort of part is it? %s", strings.Join(names, ", "))
	}
	if near := entry.Nearest(word, names); near != nil {
		return nil, fmt.Errorf("%q is no kind; did you mean %s?", word, strings.Join(near, " or "))
	}
	return nil, fmt.Errorf("%q is no kind; the kinds are %s", word, strings.Join(names, ", "))
}

// understandHeader reads the lot's header as it is typed.
func (b *bench) understandHeader(text string) ([]string, error) {
	book, err := kindFor(b.d.kinds, b.form.text(fieldKind))
	if err != nil {
		return nil, err
	}
	words := strings.Fields(text)
	if len(words) == 0 {
		return []string{"a tin: every part says what it claims"}, nil
	}
	parsed, err := entry.Words(book, words)
	if err != nil {
		return nil, err
	}
	if len(parsed.Readings)+len(parsed.Look) > 0 || parsed.Treated > 0 {
		return nil, fmt.Errorf("a lot's header is what is printed on the parts; readings, looks and treated= are typed for each part")
	}
	if _, err := screening.Judge(book, screening.Part{Kind: book.Kind, Claim: parsed.Claim}, b.d.policy); err != nil {
		return nil, err
	}
	return parsed.Echo, nil
}

func (b *bench) formKey(msg tea.KeyMsg) tea.Cmd {
	if b.form.key(b.formKeys, msg) != formFilled {
		return nil
	}
	book, err := kindFor(b.d.kinds, b.form.text(fieldKind))
	if err != nil {
		return nil
	}
	trimmed := func(i int) string { return strings.TrimSpace(b.form.text(i)) }
	lot := b.editing
	lot.Kind, lot.Header, lot.Place = book.Kind, trimmed(fieldHeader), trimmed(fieldPlace)
	lot.Source, lot.Storage, lot.Note = trimmed(fieldSource), trimmed(fieldStorage), trimmed(fieldNote)
	lot.Mixed, lot.Claim = lot.Header == "", screening.Claim{}
	if parsed, err := entry.Words(book, strings.Fields(lot.Header)); err == nil {
		lot.Claim = parsed.Claim
	}
	b.mode = benchOpening
	return b.d.keepLot(lot)
}

func (b *bench) homeKey(msg tea.KeyMsg) tea.Cmd {
	const page = 10
	n := len(b.lots)
	switch k := b.homeKeys; {
	case key.Matches(msg, k.open.Binding) && n > 0:
		b.mode = benchOpening
		return b.d.openLot(b.lots[b.lotTable.at].ID, inventory.ID{}, "")
	case key.Matches(msg, k.correct.Binding) && n > 0:
		b.startForm(b.lots[b.lotTable.at])
	case key.Matches(msg, k.newLot.Binding):
		b.startForm(inventory.Lot{})
	case key.Matches(msg, k.up.Binding):
		b.lotTable.move(-1, n)
	case key.Matches(msg, k.down.Binding):
		b.lotTable.move(1, n)
	case key.Matches(msg, k.pageUp.Binding):
		b.lotTable.move(-page, n)
	case key.Matches(msg, k.pageDown.Binding):
		b.lotTable.move(page, n)
	}
	return nil
}

// lotRows are the lots as a table shows them.
type lotRows struct {
	t    *theme
	lots []inventory.Lot
	held map[uint32]lotCount
}

func (r lotRows) count() int { return len(r.lots) }

func (r lotRows) cells(i int, dst []string) {
	l := r.lots[i]
	claim := l.Claim.String()
	switch {
	case l.Mixed:
		claim = "mixed"
	case claim == "":
		claim = l.Header
	}
	texts := [...]string{
		inventory.ID{Lot: l.ID}.String(), string(l.Kind), claim, strconv.Itoa(r.held[l.ID].parts),
		strconv.Itoa(r.held[l.ID].usable), l.Place, l.Source, l.Made.Format("2006-01-02"),
	}
	for k := range dst {
		dst[k] = r.t.clean(texts[k])
	}
}

func (b *bench) drawHome(w, h int) ([]string, spot) {
	t := b.d.t
	cols := columnsFor([]column{
		{title: "lot", w: 5, right: true},
		{title: "kind", w: 18},
		{title: "claims", w: max(20, min(40, w-81))},
		{title: "parts", w: 6, right: true},
		{title: "usable", w: 6, right: true},
		{title: "place", w: 16},
		{title: "source", w: 20},
		{title: "entered", w: 10},
	}, w-2)
	lines := []string{t.title.paint(" Lots"), ""}
	lines = append(lines, b.lotTable.draw(t, cols, lotRows{t, b.lots, b.held}, w, max(0, h-2), nil)...)
	return block(lines, w, h, t.g.more), spot{x: 0, y: min(h-1, 3+b.lotTable.at-b.lotTable.top)}
}
