package diode

import (
	_ "embed"
	"errors"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

var (
	//go:embed expected.csv
	expectedCSV string
	//go:embed sound.csv
	soundCSV string
	//go:embed leakage.csv
	leakageCSV string
	//go:embed variants.csv
	variantsCSV string
)

// span is a band of forward voltage that holds for a range of currents.
type span struct {
	low, high float64 // V
	from, to  float64 // A
	source    screening.Source
}

// technology is one sort of diode.
type technology struct {
	name     string
	words    []string
	material string // silicon, schottky, germanium or unknown: what its leakage goes by
	expected *span  // nil where nothing is expected
	sound    span
}

// most is an upper bound with its source.
type most struct {
	value  float64
	source screening.Source
}

// variant is what one type's row leaves out.
type variant struct {
	least  float64 // V, the lowest VRRM printed for it; 0 where there is only one
	dual   string
	source screening.Source
}

type tables struct {
	technologies []technology
	leakage      map[string]most
	variants     map[string]variant
}

var load = sync.OnceValue(func() tables {
	t, err := readTables(expectedCSV, soundCSV, leakageCSV, variantsCSV)
	if err != nil {
		panic("diode: embedded tables: " + err.Error())
	}
	return t
})

func readTables(expected, sound, leakage, variants string) (tables, error) {
	t := tables{leakage: map[string]most{}, variants: map[string]variant{}}
	soundTable := book.ReadTable("sound.csv", sound)
	for _, r := range soundTable.Rows() {
		tech := technology{name: r.Required("technology"), sound: readSpan(r)}
		tech.material = materialOf(tech.name)
		if r.Has("words") {
			tech.words = strings.Split(r.Text("words"), "|")
		}
		t.technologies = append(t.technologies, tech)
	}
	expectedTable := book.ReadTable("expected.csv", expected)
	for _, r := range expectedTable.Rows() {
		band := readSpan(r)
		found := false
		for i := range t.technologies {
			if tech := &t.technologies[i]; tech.name == r.Text("technology") {
				tech.expected, found = &band, true
				if band.low < tech.sound.low || band.high > tech.sound.high {
					r.Errorf("low", "is expected outside what is sound")
				}
			}
		}
		if !found {
			r.Errorf("technology", "%q is not in sound.csv", r.Text("technology"))
		}
	}
	leakageTable := book.ReadTable("leakage.csv", leakage)
	for _, r := range leakageTable.Rows() {
		t.leakage[r.Required("of")] = most{r.Number("most"), r.Source()}
	}
	variantTable := book.ReadTable("variants.csv", variants)
	for _, r := range variantTable.Rows() {
		t.variants[r.Required("type")] = variant{least: r.NumberOr("vrrm", 0), dual: r.Text("dual"), source: r.Source()}
	}
	return t, errors.Join(soundTable.Err(), expectedTable.Err(), leakageTable.Err(), variantTable.Err())
}

func readSpan(r book.Row) span {
	s := span{low: r.Number("low"), high: r.Number("high"), from: r.Number("from"), to: r.Number("to"), source: r.Source()}
	if s.low >= s.high || s.from >= s.to {
		r.Errorf("high", "bounds are upside down")
	}
	return s
}

// The materials by which leakage goes.
const (
	silicon   = "silicon"
	schottky  = "schottky"
	germanium = "germanium"
	unknown   = "unknown"
)

func materialOf(technology string) string {
	switch technology {
	case schottky, unknown, germanium:
		return technology
	case "point-contact", "gold-bonded":
		return germanium
	}
	return silicon
}

// technologyNamed finds a technology by name or word.
func technologyNamed(text string) (*technology, bool) {
	all := load().technologies
	for i := range all {
		if strings.EqualFold(all[i].name, text) {
			return &all[i], true
		}
		for _, w := range all[i].words {
			if strings.EqualFold(w, text) {
				return &all[i], true
			}
		}
	}
	return &all[len(all)-1], false
}

// technologyOf returns what a claim says the diode is: its technology, else what its material allows, else unknown.
func technologyOf(c screening.Claim) *technology {
	text := c.Trait(screening.TraitTechnology)
	if text == "" {
		switch c.Trait(screening.TraitMaterial) {
		case "ge":
			text = germanium
		case "si":
			text = silicon
		default:
			text = unknown
		}
	}
	t, _ := technologyNamed(text)
	return t
}

func technologyWords() []screening.Word {
	var words []screening.Word
	for _, t := range load().technologies {
		if t.name == silicon || t.name == germanium {
			continue // these bare words claim the material
		}
		words = append(words, screening.Word{Word: t.name, Text: t.name})
		for _, w := range t.words {
			words = append(words, screening.Word{Word: w, Text: t.name})
		}
	}
	return words
}
