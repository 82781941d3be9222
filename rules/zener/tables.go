package zener

import (
	_ "embed"
	"errors"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

var (
	//go:embed figures.csv
	figuresCSV string
	//go:embed letters.csv
	lettersCSV string
)

// figure is a pair of bounds with its source.
type figure struct {
	low, high float64
	source    screening.Source
}

// letter is what a tolerance letter means on a Zener.
type letter struct {
	figure
	meanings []string // where it means two things
}

type tables struct {
	figures map[string]figure
	letters map[string]letter
}

var load = sync.OnceValue(func() tables {
	t, err := readTables(figuresCSV, lettersCSV)
	if err != nil {
		panic("zener: embedded tables: " + err.Error())
	}
	return t
})

func readTables(figures, letters string) (tables, error) {
	t := tables{figures: map[string]figure{}, letters: map[string]letter{}}
	figureTable := book.ReadTable("figures.csv", figures)
	for _, r := range figureTable.Rows() {
		t.figures[r.Required("name")] = readFigure(r)
	}
	letterTable := book.ReadTable("letters.csv", letters)
	for _, r := range letterTable.Rows() {
		l := letter{figure: figure{source: r.Source()}}
		if r.Has("meanings") {
			l.meanings = strings.Split(r.Text("meanings"), "|")
		} else {
			l.figure = readFigure(r)
		}
		t.letters[r.Required("letter")] = l
	}
	return t, errors.Join(figureTable.Err(), letterTable.Err())
}

func readFigure(r book.Row) figure {
	f := figure{low: r.Number("low"), high: r.Number("high"), source: r.Source()}
	if f.low >= f.high {
		r.Errorf("high", "is not above low")
	}
	return f
}

// toleranceLetter reads a letter that means one thing on every Zener.
func toleranceLetter(word string) (low, high float64, ok bool) {
	l, known := load().letters[word]
	return l.low, l.high, known && l.meanings == nil
}

// toleranceMeanings lists the meanings of a letter that two families read differently.
func toleranceMeanings(word string) []string { return load().letters[word].meanings }
