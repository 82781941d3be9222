package resistor

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
	//go:embed drying.csv
	dryingCSV string
)

// technology is what a resistor is made of.
type technology struct {
	name       string
	words      []string
	tolerance  float64 // ratio, taken where none is printed
	source     screening.Source
	asMeasured float64 // ratio from the printed value within which a part may be kept at its measured value (house)
}

// drying is how long one size of carbon composition is dried.
type drying struct {
	style   string
	powerTo float64 // W
	hours   float64 // at 100 ± 5 °C
	source  screening.Source
}

type tables struct {
	technologies []technology
	dryings      []drying // by rising power
}

// unknown is the technology of a resistor that does not say.
const unknown = "unknown"

var load = sync.OnceValue(func() tables {
	t, err := readTables(technologiesCSV, dryingCSV)
	if err != nil {
		panic("resistor: embedded tables: " + err.Error())
	}
	return t
})

func readTables(technologies, dryings string) (tables, error) {
	var t tables
	techTable := book.ReadTable("technologies.csv", technologies)
	for _, r := range techTable.Rows() {
		tech := technology{
			name: r.Required("technology"), tolerance: r.Number("default"), asMeasured: r.Number("as-measured"), source: r.Source(),
		}
		if r.Has("words") {
			tech.words = strings.Split(r.Text("words"), "|")
		}
		t.technologies = append(t.technologies, tech)
	}
	if len(t.technologies) > 0 && t.technologies[len(t.technologies)-1].name != unknown {
		techTable.Rows()[len(t.technologies)-1].Errorf("technology", "the last row is for %q", unknown)
	}
	dryTable := book.ReadTable("drying.csv", dryings)
	for _, r := range dryTable.Rows() {
		d := drying{style: r.Required("style"), powerTo: r.Number("power-to"), hours: r.Number("hours"), source: r.Source()}
		if n := len(t.dryings); n > 0 && d.powerTo <= t.dryings[n-1].powerTo {
			r.Errorf("power-to", "is not above the row before")
		}
		t.dryings = append(t.dryings, d)
	}
	return t, errors.Join(techTable.Err(), dryTable.Err())
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

func technologyOf(c screening.Claim) technology {
	t, _ := technologyNamed(c.Trait(screening.TraitTechnology))
	return t
}

// technologyWords lists the bare words that a technology is known by.
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

// dryingFor returns how long a rated power in watts is dried; where the power is not known (0), the time of the middle sizes.
func dryingFor(power float64) drying {
	all := load().dryings
	if power <= 0 {
		return all[len(all)/2]
	}
	for _, d := range all {
		if power <= d.powerTo {
			return d
		}
	}
	return all[len(all)-1]
}
