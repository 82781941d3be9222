package inductor

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
	//go:embed figures.csv
	figuresCSV string
)

// technology is what an inductor is wound on.
type technology struct {
	name      string
	words     []string
	low, high float64 // ratios, taken where no tolerance is printed
	source    screening.Source
}

// figure is one number with where it comes from.
type figure struct {
	value  float64
	source screening.Source
}

type tables struct {
	technologies []technology // the last is for what nobody can tell
	twin         figure       // the share of a claimed Q that must be left
}

// unknown is the technology of an inductor that does not say.
const unknown, laminated = "unknown", "laminated"

var load = sync.OnceValue(func() tables {
	t, err := readTables(technologiesCSV, figuresCSV)
	if err != nil {
		panic("inductor: embedded tables: " + err.Error())
	}
	return t
})

func readTables(technologies, figures string) (tables, error) {
	var t tables
	techTable := book.ReadTable("technologies.csv", technologies)
	for _, r := range techTable.Rows() {
		tech := technology{name: r.Required("technology"), low: r.Number("low"), high: r.Number("high"), source: r.Source()}
		if r.Has("words") {
			tech.words = strings.Split(r.Text("words"), "|")
		}
		if tech.low > 0 || tech.high < 0 {
			r.Errorf("low", "a tolerance holds its nominal value")
		}
		t.technologies = append(t.technologies, tech)
	}
	if n := len(t.technologies); n > 0 && t.technologies[n-1].name != unknown {
		techTable.Rows()[n-1].Errorf("technology", "the last row is for %q", unknown)
	}
	figureTable := book.ReadTable("figures.csv", figures)
	for _, r := range figureTable.Rows() {
		if r.Required("name") == "twin" {
			t.twin = figure{r.Number("value"), r.Source()}
		}
	}
	if t.twin.value <= 0 {
		return t, errors.Join(figureTable.Err(), errors.New("figures.csv: there is no twin"))
	}
	return t, errors.Join(techTable.Err(), figureTable.Err())
}

// technologyNamed finds a technology by its name or one of its words; none at all is unknown.
func technologyNamed(text string) (technology, bool) {
	all := load().technologies
	text = strings.ToLower(strings.TrimSpace(text))
	if text == "" {
		text = unknown
	}
	for _, t := range all {
		if t.name == text {
			return t, true
		}
		for _, w := range t.words {
			if w == text {
				return t, true
			}
		}
	}
	return all[len(all)-1], false
}

func technologyNames() string {
	var names []string
	for _, t := range load().technologies {
		names = append(names, t.name)
	}
	return strings.Join(names, ", ")
}

func technologyWords() []screening.Word {
	var words []screening.Word
	for _, t := range load().technologies {
		words = append(words, screening.Word{Word: t.name, Text: t.name})
		for _, w := range t.words {
			words = append(words, screening.Word{Word: w, Text: t.name})
		}
	}
	return words
}
