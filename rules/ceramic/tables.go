package ceramic

import (
	_ "embed"
	"fmt"
	"math"
	"regexp"
	"slices"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

var (
	//go:embed classes.csv
	classesCSV string
	//go:embed limits.csv
	limitsCSV string
)

// unknown is the class of a part that does not say; class2 stands for codes of class 2 that have no row of their own.
const unknown, class2 = "unknown", "class2"

// dielectric is one code.
type dielectric struct {
	code   string
	words  []string
	class  int     // 1, 2, 3; 0 for unknown
	ageing float64 // ratio lost in a decade of time, at most
	worn   float64 // change after life, ratio
	source screening.Source
}

// ages reports whether the capacitance falls with time: everything but class 1 may.
func (d *dielectric) ages() bool { return d.class != 1 }

// row is one line of limits.csv.
type row struct {
	what               string
	set                screening.LimitSet
	class              int
	codes              []string // nil for every other code of the class
	overVolts, toVolts float64
	fresh, freshS      float64
	worn, wornS        float64 // NaN where nothing is printed
	source, wornSource screening.Source
}

type tables struct {
	dielectrics []dielectric
	rows        []row
}

var load = sync.OnceValue(func() tables {
	t, err := readTables(classesCSV, limitsCSV)
	if err != nil {
		panic("ceramic: embedded tables: " + err.Error())
	}
	return t
})

func readTables(classes, limits string) (tables, error) {
	var t tables
	c := book.ReadTable("classes.csv", classes)
	for _, r := range c.Rows() {
		d := dielectric{
			code: r.Required("code"), class: int(r.Number("class")), ageing: r.Number("ageing"), worn: r.Number("worn"), source: r.Source(),
		}
		if r.Has("words") {
			d.words = strings.Split(r.Text("words"), "|")
		}
		if d.class < 0 || d.class > 3 || d.ageing < 0 || d.ageing > 0.2 || d.ages() != (d.ageing > 0) {
			r.Errorf("class", "class %d with %g a decade", d.class, d.ageing)
		}
		t.dielectrics = append(t.dielectrics, d)
	}
	if err := c.Err(); err != nil {
		return t, err
	}
	for _, name := range []string{unknown, class2} {
		if _, ok := t.named(name); !ok {
			return t, fmt.Errorf("classes.csv: %s is missing", name)
		}
	}
	l := book.ReadTable("limits.csv", limits)
	for _, r := range l.Rows() {
		t.rows = append(t.rows, t.readRow(r))
	}
	return t, l.Err()
}

func (t *tables) readRow(r book.Row) row {
	x := row{
		what: r.Required("what"), set: screening.LimitSet(r.Required("set")), class: int(r.Number("class")),
		overVolts: r.NumberOr("over_volts", 0), toVolts: r.NumberOr("to_volts", math.Inf(1)),
		fresh: r.Number("new"), freshS: r.NumberOr("new_s", math.Inf(1)), worn: r.NumberOr("worn", math.NaN()), wornS: r.NumberOr("worn_s", math.Inf(1)),
		source: r.Source(),
	}
	x.wornSource = x.source
	if r.Has("worn_status") {
		var ok bool
		if x.wornSource.Status, ok = screening.StatusNamed(r.Text("worn_status")); !ok {
			r.Errorf("worn_status", "%q is no status", r.Text("worn_status"))
		}
	}
	if codes := r.Required("codes"); codes != "*" {
		x.codes = strings.Split(codes, "|")
		for _, code := range x.codes {
			if d, ok := t.named(code); !ok || d.class != x.class {
				r.Errorf("codes", "%q is no code of class %d", code, x.class)
			}
		}
	}
	switch {
	case x.what != "tan" && x.what != "ins":
		r.Errorf("what", "%q is neither tan nor ins", x.what)
	case x.what == "tan" && (x.fresh <= 0 || x.fresh > 0.2 || x.worn < x.fresh), x.what == "ins" && (x.worn > x.fresh || x.wornS > x.freshS && r.Has("worn_s")):
		r.Errorf("worn", "is better than what is asked of a new part, or no such figure")
	case x.overVolts >= x.toVolts:
		r.Errorf("to_volts", "an empty range")
	}
	return x
}

// named finds a code or one of its words, in any case of letters.
func (t *tables) named(text string) (dielectric, bool) {
	for _, d := range t.dielectrics {
		if strings.EqualFold(d.code, text) || slices.ContainsFunc(d.words, func(w string) bool { return strings.EqualFold(w, text) }) {
			return d, true
		}
	}
	return dielectric{}, false
}

// eia is a code of class 2 or 3 by EIA-198: low temperature, high temperature, change.
var eia = regexp.MustCompile(`^[XYZ][2-9][ABCDEFPRSTUV]$`)

// acceptClass takes a code that has no row of its own: X6S, Y5R.
func acceptClass(word string) (string, bool) {
	word = strings.ToUpper(word)
	return word, eia.MatchString(word)
}

// dielectricOf returns what is known of the dielectric that a claim states; reported is false for a text that is no code at all.
func dielectricOf(claim screening.Claim) (d dielectric, known bool) {
	t := load()
	text := claim.Trait(traitClass)
	if text == "" {
		text = unknown
	}
	if d, ok := t.named(text); ok {
		return d, true
	}
	if code, ok := acceptClass(text); ok {
		d, _ := t.named(class2)
		d.code = code
		return d, true
	}
	d, _ = t.named(unknown)
	return d, false
}

// rowsFor lists the rows of a figure that count for a dielectric at a rated voltage, one a set: of a part without a rated voltage the laxest.
func rowsFor(what string, d *dielectric, volts float64) []row {
	var found []row
	for _, r := range load().rows {
		if r.what != what || r.class != d.class || volts > 0 && (volts <= r.overVolts || volts > r.toVolts) || !r.counts(d) {
			continue
		}
		i := slices.IndexFunc(found, func(f row) bool { return f.set == r.set })
		switch {
		case i < 0:
			found = append(found, r)
		case found[i].codes == nil && r.codes != nil, (found[i].codes == nil) == (r.codes == nil) && r.laxerThan(&found[i]):
			found[i] = r
		}
	}
	return found
}

// counts reports whether a row's codes include a dielectric's.
func (r *row) counts(d *dielectric) bool { return r.codes == nil || slices.Contains(r.codes, d.code) }

func (r *row) laxerThan(o *row) bool {
	if r.what == "tan" {
		return r.fresh > o.fresh
	}
	return r.fresh < o.fresh || r.freshS < o.freshS
}

// classWords lists the bare words that a class is known by.
func classWords() []screening.Word {
	var words []screening.Word
	for _, d := range load().dielectrics {
		words = append(words, screening.Word{Word: strings.ToLower(d.code), Text: d.code})
		for _, w := range d.words {
			words = append(words, screening.Word{Word: w, Text: d.code})
		}
	}
	return words
}
