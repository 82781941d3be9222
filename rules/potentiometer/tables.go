package potentiometer

import (
	_ "embed"
	"errors"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

var (
	//go:embed technologies.csv
	technologiesCSV string
	//go:embed limits.csv
	limitsCSV string
	//go:embed tapers.csv
	tapersCSV string
	//go:embed letters.csv
	lettersCSV string
)

// technology is what a track is made of, and the tolerance taken where none is printed.
type technology struct {
	name      string
	words     []string
	tolerance float64 // ratio
	source    screening.Source
}

// most is an upper limit as a share of the total or in ohms, whichever is greater.
type most struct {
	on, technology, form string // on is "end" or "crv"; the others are "" for any
	grade                screening.Grade
	share, ohms          float64
	source               screening.Source
}

// of returns the limit in ohms for a total resistance.
func (m most) of(total float64) float64 { return max(m.share*total, m.ohms) }

// taper is a curve by what it has in mid-travel, as shares of the total.
type taper struct {
	name      string
	words     []string
	low, high float64
	formula   string
	source    screening.Source
}

type tables struct {
	technologies []technology
	most         []most
	tapers       []taper
	letters      map[string][]string // the meanings of a taper letter
}

var load = sync.OnceValue(func() tables {
	t, err := readTables(technologiesCSV, limitsCSV, tapersCSV, lettersCSV)
	if err != nil {
		panic("potentiometer: embedded tables: " + err.Error())
	}
	return t
})

func words(r book.Row, column string) []string {
	if !r.Has(column) {
		return nil
	}
	return strings.Split(r.Text(column), "|")
}

func readTables(technologies, limits, tapers, letters string) (tables, error) {
	t := tables{letters: map[string][]string{}}
	techTable := book.ReadTable("technologies.csv", technologies)
	for _, r := range techTable.Rows() {
		t.technologies = append(t.technologies, technology{
			name: r.Required("technology"), words: words(r, "words"), tolerance: r.Number("tolerance"), source: r.Source(),
		})
	}
	limitTable := book.ReadTable("limits.csv", limits)
	for _, r := range limitTable.Rows() {
		m := most{
			on: r.Required("on"), technology: r.Text("technology"), form: r.Text("form"), share: r.Number("share"), ohms: r.Number("ohms"),
			grade: screening.WithinSpec, source: r.Source(),
		}
		switch grade := r.Required("grade"); grade {
		case screening.WithinSpec.String():
		case screening.Serviceable.String():
			m.grade = screening.Serviceable
		default:
			r.Errorf("grade", "%q is no grade", grade)
		}
		t.most = append(t.most, m)
	}
	taperTable := book.ReadTable("tapers.csv", tapers)
	for _, r := range taperTable.Rows() {
		p := taper{
			name: r.Required("taper"), words: words(r, "words"), low: r.Number("low"), high: r.Number("high"),
			formula: r.Required("formula"), source: r.Source(),
		}
		if p.low >= p.high {
			r.Errorf("high", "is not above low")
		}
		t.tapers = append(t.tapers, p)
	}
	letterTable := book.ReadTable("letters.csv", letters)
	for _, r := range letterTable.Rows() {
		t.letters[r.Required("letter")] = words(r, "meanings")
		_ = r.Source() // held to have one
	}
	return t, errors.Join(techTable.Err(), limitTable.Err(), taperTable.Err(), letterTable.Err())
}

func technologyOf(c screening.Claim) technology {
	all := load().technologies
	for _, t := range all {
		if t.name == c.Trait(screening.TraitTechnology) {
			return t
		}
	}
	return all[len(all)-1]
}

func technologyWords() []screening.Word {
	var list []screening.Word
	for _, t := range load().technologies {
		list = append(list, screening.Word{Word: t.name, Text: t.name})
		for _, w := range t.words {
			list = append(list, screening.Word{Word: w, Text: t.name})
		}
	}
	return list
}

// mostOf finds the limit of the first row that fits.
func mostOf(on string, c screening.Claim, grade screening.Grade) (most, bool) {
	tech, form := technologyOf(c).name, c.Trait(TraitForm)
	for _, m := range load().most {
		if m.on == on && m.grade == grade && (m.technology == "" || m.technology == tech) && (m.form == "" || m.form == form) {
			return m, true
		}
	}
	return most{}, false
}

func taperNamed(name string) (taper, bool) {
	for _, t := range load().tapers {
		if t.name == name {
			return t, true
		}
	}
	return taper{}, false
}

func taperWords() []screening.Word {
	var list []screening.Word
	for _, t := range load().tapers {
		list = append(list, screening.Word{Word: t.name, Text: t.name})
		for _, w := range t.words {
			list = append(list, screening.Word{Word: w, Text: t.name})
		}
	}
	return append(list, screening.Word{Word: otherTaper, Text: otherTaper})
}
