package film

import (
	_ "embed"
	"fmt"
	"math"
	"slices"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
)

var (
	//go:embed dielectrics.csv
	dielectricsCSV string
	//go:embed loss.csv
	lossCSV string
	//go:embed insulation.csv
	insulationCSV string
)

// unknown is the dielectric of a part that does not say.
const unknown = "unknown"

// dielectric is one film.
type dielectric struct {
	word, name string
	words      []string
	allowance  capacitor.Allowance
	heat       float64 // °C that it never stands; 0 where soldering and drying do not matter
	heatStatus screening.Status
}

// lossRow is one printed tan δ.
type lossRow struct {
	set      screening.LimitSet
	film     string
	hertz    float64
	over, to float64 // µF
	tan      float64
	source   screening.Source
}

// insulationRow is what is asked of a film's insulation, new and worn.
type insulationRow struct {
	film               string
	overVolts, toVolts float64
	fresh, worn        capacitor.Insulation
}

type tables struct {
	films      []dielectric
	loss       []lossRow
	insulation []insulationRow
}

var load = sync.OnceValue(func() tables {
	t, err := readTables(dielectricsCSV, lossCSV, insulationCSV)
	if err != nil {
		panic("film: embedded tables: " + err.Error())
	}
	return t
})

func readTables(films, loss, insulation string) (tables, error) {
	var t tables
	f := book.ReadTable("dielectrics.csv", films)
	for _, r := range f.Rows() {
		d := dielectric{
			word: r.Required("dielectric"), name: r.Required("name"), heat: r.NumberOr("heat", 0),
			allowance: capacitor.Allowance{Ratio: r.Number("allow"), Farad: r.Number("allow_pf") * 1e-12, Sum: true, Source: r.Source()},
		}
		if r.Has("words") {
			d.words = strings.Split(r.Text("words"), "|")
		}
		if status, ok := screening.StatusNamed(r.Text("heat_status")); ok != (d.heat > 0) {
			r.Errorf("heat_status", "a temperature and its status go together")
		} else {
			d.heatStatus = status
		}
		t.films = append(t.films, d)
	}
	l := book.ReadTable("loss.csv", loss)
	for _, r := range l.Rows() {
		x := lossRow{
			set: screening.LimitSet(r.Required("set")), film: t.film(r), hertz: r.Number("hz"), over: r.NumberOr("over", 0),
			to: r.NumberOr("to", math.Inf(1)), tan: r.Number("tan"), source: r.Source(),
		}
		if x.tan <= 0 || x.tan > 0.1 || x.over >= x.to {
			r.Errorf("tan", "is no tan δ of a film, or its range is empty")
		}
		t.loss = append(t.loss, x)
	}
	n := book.ReadTable("insulation.csv", insulation)
	for _, r := range n.Rows() {
		s := r.Source()
		x := insulationRow{
			film: t.film(r), overVolts: r.NumberOr("over_volts", 0), toVolts: r.NumberOr("to_volts", math.Inf(1)),
			fresh: capacitor.Insulation{Ohms: r.Number("new"), Seconds: r.Number("new_s"), Source: s},
			worn:  capacitor.Insulation{Ohms: r.Number("worn"), Seconds: r.Number("worn_s"), Source: s},
		}
		if x.worn.Ohms > x.fresh.Ohms || x.worn.Seconds > x.fresh.Seconds || x.overVolts >= x.toVolts {
			r.Errorf("worn", "is better than a new part's, or the range of volts is empty")
		}
		t.insulation = append(t.insulation, x)
	}
	for _, err := range []error{f.Err(), l.Err(), n.Err()} {
		if err != nil {
			return t, err
		}
	}
	for _, d := range t.films {
		if !slices.ContainsFunc(t.loss, func(x lossRow) bool { return x.film == d.word }) ||
			!slices.ContainsFunc(t.insulation, func(x insulationRow) bool { return x.film == d.word }) {
			return t, fmt.Errorf("loss.csv, insulation.csv: %s is missing", d.word)
		}
	}
	if _, ok := t.named(unknown); !ok {
		return t, fmt.Errorf("dielectrics.csv: %s is missing", unknown)
	}
	return t, nil
}

// film reads a row's dielectric, which must be listed.
func (t *tables) film(r book.Row) string {
	word := r.Required("dielectric")
	if !slices.ContainsFunc(t.films, func(d dielectric) bool { return d.word == word }) {
		r.Errorf("dielectric", "%q is not listed in dielectrics.csv", word)
	}
	return word
}

// named finds a dielectric by its word or another one for it.
func (t *tables) named(text string) (dielectric, bool) {
	for _, d := range t.films {
		if strings.EqualFold(d.word, text) || slices.ContainsFunc(d.words, func(w string) bool { return strings.EqualFold(w, text) }) {
			return d, true
		}
	}
	return dielectric{}, false
}

// dielectricOf returns what a claim's film is, and whether its text is a known one; none at all is the unknown one.
func dielectricOf(claim screening.Claim) (dielectric, bool) {
	t := load()
	text := claim.Trait(traitDielectric)
	if text == "" {
		text = unknown
	}
	if d, ok := t.named(text); ok {
		return d, true
	}
	d, _ := t.named(unknown)
	return d, false
}

// insulationFor returns the row that counts for a film at a rated voltage; without one the laxest.
func insulationFor(film string, volts float64) insulationRow {
	var found insulationRow
	for _, r := range load().insulation {
		if r.film != film || volts > 0 && (volts <= r.overVolts || volts > r.toVolts) {
			continue
		}
		if found.film == "" || r.fresh.Ohms < found.fresh.Ohms {
			found = r
		}
	}
	return found
}

func dielectricWords() []screening.Word {
	var words []screening.Word
	for _, d := range load().films {
		words = append(words, screening.Word{Word: d.word, Text: d.word})
		for _, w := range d.words {
			words = append(words, screening.Word{Word: w, Text: d.word})
		}
	}
	return words
}

func dielectricNames() string {
	var names []string
	for _, d := range load().films {
		names = append(names, d.word)
	}
	return strings.Join(names, ", ")
}
