package tui

import (
	"strconv"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
)

// withMeanings opens a new lot's form where "104" may mean two things.
func withMeanings(t *testing.T) *testDesk {
	d := newTestDesk(t, 80, 24)
	d.m.bench.d.meanings = func(text string) []Meaning {
		if text != "104" {
			return nil
		}
		return []Meaning{
			{Kind: "can", Header: "0.1uF 35V", Text: "100 nF", Source: "three-digit code, published"},
			{Kind: "can", Header: "104uF 35V", Text: "104 µF", Source: "as it stands, house"},
		}
	}
	d.send(tea.WindowSizeMsg{Width: 80, Height: 24})
	return d
}

func TestAMarkingStartsALotByOneDigit(t *testing.T) {
	d := withMeanings(t)
	d.press("104")
	d.mustShow("a marking? Enter, then the digit", "1 can  100 nF  (three-digit code, published)", "2 can  104 µF")
	d.press("enter")
	d.mustShow("press the digit of what it is")
	d.press("2")
	d.mustShow("104uF 35V")
	d.press("enter", "shelf B", "enter", "enter", "enter", "enter")
	d.mustShow("1-01  look: the digits")
	lot, err := d.m.bench.d.wb.Lot(1)
	if err != nil || lot.Kind != "can" || lot.Header != "104uF 35V" || lot.Place != "shelf B" {
		t.Errorf("%+v, %v", lot, err)
	}
}

func TestTypingOnAfterTheChoicesKeepsTheText(t *testing.T) {
	d := withMeanings(t)
	d.press("104", "enter", "9")
	if text := d.m.bench.form.text(fieldKind); text != "1049" {
		t.Errorf("the field holds %q; 9 is none of the choices", text)
	}
	d.press("backspace", "enter", "backspace")
	if text := d.m.bench.form.text(fieldKind); text != "10" {
		t.Errorf("the field holds %q", text)
	}
}

func TestAKindIsNotTakenForAMarking(t *testing.T) {
	d := withMeanings(t)
	d.press("can", "enter")
	d.mustShow("it claims")
	if at := d.m.bench.form.at; at != fieldHeader {
		t.Errorf("the focus is on field %d", at)
	}
}

func TestMoreChoicesThanDigitsTurnOverWithZero(t *testing.T) {
	d := newTestDesk(t, 80, 24)
	d.m.bench.d.meanings = func(string) []Meaning {
		var all []Meaning
		for i := range 11 {
			all = append(all, Meaning{Kind: "can", Header: strings.Repeat("1", i+1) + "uF 35V", Text: "choice " + strconv.Itoa(i+1), Source: "house"})
		}
		return all
	}
	d.press("x104", "enter")
	d.mustShow("9 can  choice 9", "0 more")
	d.press("0")
	d.mustShow("1 can  choice 10", "2 can  choice 11")
	d.press("2")
	if text := d.m.bench.form.text(fieldHeader); text != "11111111111uF 35V" {
		t.Errorf("it claims %q", text)
	}
	d.press("up")
	d.press("0")
}
