package tui

import (
	"errors"
	"strconv"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"goodbin/screening/entry"
)

// formField is one line of a form.
type formField struct {
	label string
	hint  string // shown while nothing is typed
	// hintFor is the hint where it depends on what other fields hold. It may be nil.
	hintFor func() string
	in      input
	// check says what a text was understood as, or what would be right. It may be nil: any text will do.
	check func(text string) (echo []string, err error)
	// choices lists what a text that is not understood may stand for; a digit key picks one. Both may be nil.
	choices func(text string) []string
	pick    func(text string, i int)
}

// form asks for a few lines of text. Each field is understood as it is typed.
type form struct {
	title  string
	fields []formField
	at     int
	tried  bool // Enter was pressed on the field as it stands
	picks  bool // the next digit picks one of the field's choices
	turned int  // how many of the choices stand on the leaves before this one
}

// formDone says what became of a key press in a form.
type formDone uint8

const (
	formStays  formDone = iota
	formFilled          // every field is understood and the form was sent
	formIgnored
)

func (f *form) key(k formKeys, msg tea.KeyMsg) formDone {
	if f.picks {
		f.picks = false
		if f.picked(msg) {
			return formStays
		}
	}
	switch {
	case key.Matches(msg, k.start.Binding):
		return f.send()
	case key.Matches(msg, k.next.Binding):
		f.tried = true
		if _, err := f.understood(f.at); err != nil {
			leaf, _ := f.offered()
			f.picks = len(leaf) > 0
			return formStays
		}
		if f.at == len(f.fields)-1 {
			return f.send()
		}
		f.focus(f.at + 1)
	case key.Matches(msg, k.forward.Binding):
		f.focus(f.at + 1)
	case key.Matches(msg, k.previous.Binding):
		f.focus(f.at - 1)
	default:
		f.tried, f.turned = false, 0
		if !f.fields[f.at].in.key(msg) {
			return formIgnored
		}
	}
	return formStays
}

// mostChoices is how many choices are offered: one digit key each.
const mostChoices = 9

// offered lists the choices for the text in the field that has the focus: a leaf of them, and whether there are more leaves.
func (f *form) offered() (leaf []string, more bool) {
	field := &f.fields[f.at]
	if field.choices == nil || len(field.in.text) == 0 {
		return nil, false
	}
	if _, err := f.understood(f.at); err == nil {
		return nil, false
	}
	all := field.choices(field.in.String())
	if f.turned >= len(all) {
		f.turned = 0
	}
	return all[f.turned:min(len(all), f.turned+mostChoices)], len(all) > mostChoices
}

// picked takes a digit key as the choice of that number.
func (f *form) picked(msg tea.KeyMsg) bool {
	if msg.Type != tea.KeyRunes || len(msg.Runes) != 1 {
		return false
	}
	leaf, more := f.offered()
	i := int(msg.Runes[0] - '1')
	switch {
	case msg.Runes[0] == '0' && more:
		f.turned, f.picks = f.turned+mostChoices, true
		return true
	case i < 0 || i >= len(leaf):
		return false
	}
	field := &f.fields[f.at]
	field.pick(field.in.String(), f.turned+i)
	f.tried = false
	return true
}

func (f *form) focus(i int) {
	f.at, f.tried = max(0, min(i, len(f.fields)-1)), false
}

// send goes to the first field that is not understood, or reports that all are.
func (f *form) send() formDone {
	for i := range f.fields {
		if _, err := f.understood(i); err != nil {
			f.focus(i)
			f.tried = true
			return formStays
		}
	}
	return formFilled
}

func (f *form) understood(i int) ([]string, error) {
	field := &f.fields[i]
	if field.check == nil {
		return nil, nil
	}
	return field.check(field.in.String())
}

func (f *form) text(i int) string { return f.fields[i].in.String() }

const formLabelW = 11

// draw shows the form in w by h cells. What was understood of the field in focus, or what would be right, stands under it.
func (f *form) draw(t *theme, w, h int) ([]string, spot) {
	lines := []string{t.title.paint(" " + f.title), ""}
	var at spot
	for i := range f.fields {
		field := &f.fields[i]
		marker := "  "
		label := fit(field.label, formLabelW, t.g.more)
		text, cursor := field.in.draw(t, max(1, w-formLabelW-4))
		if i != f.at {
			if len(field.in.text) == 0 {
				text = t.faint.paint(fit(t.clean(field.hinted()), max(1, w-formLabelW-4), t.g.more))
			}
			lines = append(lines, marker+t.label.paint(label)+" "+text)
			continue
		}
		at = spot{x: 2 + formLabelW + 1 + cursor, y: len(lines)}
		lines = append(lines, t.g.marker+" "+t.strong.paint(label)+" "+t.field.paint(text))
		lines = append(lines, f.under(t, w)...)
	}
	if over := at.y + 3 - h; over > 0 && over < len(lines) {
		lines, at.y = lines[over:], at.y-over
	}
	return block(lines, w, h, t.g.more), at
}

func (f *formField) hinted() string {
	if f.hintFor != nil {
		return f.hintFor()
	}
	return f.hint
}

// under says what the field in focus was understood as.
func (f *form) under(t *theme, w int) []string {
	indent := spaces(formLabelW + 3)
	field := &f.fields[f.at]
	echo, err := f.understood(f.at)
	if leaf, more := f.offered(); len(leaf) > 0 {
		return f.underChoices(t, leaf, more, indent, w)
	}
	if !f.tried && (err != nil || len(field.in.text) == 0) {
		return wrapHang(indent, t.clean(field.hinted()), w-1, 3, t.g.more)
	}
	if err != nil {
		var lines []string
		for _, l := range wrapHang(indent, t.clean(errorText(err)), w-1, 4, t.g.more) {
			lines = append(lines, t.error.paint(l))
		}
		return lines
	}
	var lines []string
	for _, e := range echo {
		for _, l := range wrapHang(indent, t.clean(e), w-1, 2, t.g.more) {
			lines = append(lines, t.note.paint(l))
		}
	}
	return lines
}

// underChoices lists what the text may stand for.
func (f *form) underChoices(t *theme, offered []string, more bool, indent string, w int) []string {
	head := "a marking? Enter, then the digit of what it is:"
	k := t.faint
	if f.picks {
		head, k = "press the digit of what it is, or go on typing:", t.strong
	}
	lines := []string{k.paint(fit(indent+head, w-1, t.g.more))}
	for i, o := range offered {
		lines = append(lines, t.note.paint(fit(indent+strconv.Itoa(i+1)+" "+t.clean(o), w-1, t.g.more)))
	}
	if more {
		lines = append(lines, t.note.paint(fit(indent+"0 more", w-1, t.g.more)))
	}
	return lines
}

// errorText words an error for the person, with what would be right where it knows.
func errorText(err error) string {
	text := err.Error()
	var e *entry.Error
	if errors.As(err, &e) && e.Hint != "" {
		text += "; " + e.Hint
	}
	return text
}
