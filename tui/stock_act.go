package tui

import (
	"errors"
	"fmt"
	"strconv"
	"strings"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
)

// actKind is one thing that can be done to a part in stock.
type actKind uint8

const (
	actTake actKind = iota
	actReturn
	actRecount
	actMove
)

// stockAct asks for what an act needs.
type stockAct struct {
	kind    actKind
	row     inventory.Row
	in      input
	offered bool // the text in the field is what the workbook holds: what is typed replaces it, an arrow key goes into it
	problem error
}

// begin asks for what an act on the selected part needs.
func (s *stock) begin(kind actKind) tea.Cmd {
	row, ok := s.selected()
	if !ok {
		return s.d.messages.say("no part is selected")
	}
	s.act = &stockAct{kind: kind, row: row, offered: kind == actMove || kind == actRecount}
	switch kind {
	case actMove:
		s.act.in.set(row.Place)
	case actRecount:
		s.act.in.set(row.Count.String())
	}
	return nil
}

// question words an act, and what to type for it.
func (a *stockAct) question() (text, hint string) {
	left := strconv.Itoa(a.row.Left)
	if a.row.Count.Level != inventory.Exact {
		left = a.row.Count.String()
	}
	switch a.kind {
	case actTake:
		return "take from " + a.row.ID.String() + " (" + left + " there)", "how many, and what for: 1 output stage. Empty is 1"
	case actReturn:
		return "return to " + a.row.ID.String(), "how many, and why: 1 not used. Empty is 1"
	case actRecount:
		return "how many of " + a.row.ID.String() + " are there now", "a number; about 40; unknown"
	}
	return "place of " + a.row.ID.String(), "where it lies; empty is the place of its lot"
}

func (s *stock) actKey(msg tea.KeyMsg) tea.Cmd {
	if !key.Matches(msg, s.k.open.Binding) {
		if s.act.offered && msg.Type == tea.KeyRunes {
			s.act.in = input{}
		}
		if s.act.in.key(msg) {
			s.act.problem, s.act.offered = nil, false
		}
		return nil
	}
	text, act, err := s.act.understood(s.d.wb)
	if err != nil {
		s.act.problem = err
		return nil
	}
	s.acting = true
	return s.d.change(s.act.row.ID, text, act)
}

// understood reads what was typed: what will be done in words, and how.
func (a *stockAct) understood(wb *inventory.Workbook) (text string, act func() error, err error) {
	id, typed := a.row.ID, strings.TrimSpace(a.in.String())
	switch a.kind {
	case actTake, actReturn:
		n, note, err := howMany(typed)
		if err != nil {
			return "", nil, err
		}
		if a.kind == actTake {
			return fmt.Sprintf("took %d of %s", n, id), func() error { return wb.Take(id, n, note) }, nil
		}
		return fmt.Sprintf("returned %d to %s", n, id), func() error { return wb.Return(id, n, note) }, nil
	case actRecount:
		count, err := countOf(typed)
		if err != nil {
			return "", nil, err
		}
		return id.String() + ": " + count.String() + " there", func() error { return wb.Recount(id, count) }, nil
	}
	where := typed
	if where == "" {
		where = "the place of its lot"
	}
	return id.String() + " lies in " + where, func() error { return moveTo(wb, id, typed) }, nil
}

// moveTo gives a part a place of its own.
func moveTo(wb *inventory.Workbook, id inventory.ID, place string) error {
	p, err := wb.GetPart(id)
	if err != nil {
		return err
	}
	p.Place = place
	_, err = wb.SavePart(p, "place "+place)
	return err
}

// howMany reads a number and what it is for; without a number it is one.
func howMany(text string) (n int, note string, err error) {
	first, rest, _ := strings.Cut(text, " ")
	if first == "" || first[0] < '0' || first[0] > '9' {
		return 1, text, nil
	}
	n, err = strconv.Atoi(first)
	if err != nil || n < 1 {
		return 0, "", fmt.Errorf("%q is no number of parts; type how many and what for, such as 1 output stage", first)
	}
	return n, strings.TrimSpace(rest), nil
}

// countOf reads a count with its honesty: "12", "about 40", "unknown".
func countOf(text string) (inventory.Count, error) {
	word := strings.ToLower(strings.TrimSpace(text))
	if word == "unknown" || word == "?" {
		return inventory.Count{Level: inventory.Unknown}, nil
	}
	number, about := strings.CutPrefix(word, "about ")
	if !about {
		number, about = strings.CutPrefix(word, "~")
	}
	n, err := strconv.Atoi(strings.TrimSpace(number))
	if err != nil || n < 0 {
		return inventory.Count{}, errors.New("type how many there are: 12, about 40, or unknown")
	}
	if about {
		return inventory.Count{N: n, Level: inventory.About}, nil
	}
	return inventory.Count{N: n, Level: inventory.Exact}, nil
}
