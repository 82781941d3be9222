package meters

import (
	"fmt"
	"math"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// Limits on a description.
const (
	MaxBytes   = 4000 // of a description in words
	MaxEntries = 60   // of one meter
	maxName    = 40   // runes of a meter's name
)

const example = "an entry is such as: capacitance@1kHz 0..20uF 2%+5"

// Error says which entry of a description cannot be understood, and why.
type Error struct {
	Entry   string // what it is of, or its text
	Problem string
}

// Error returns one line, fit for a screen.
func (e *Error) Error() string {
	if e.Entry == "" {
		return e.Problem
	}
	return strings.Trim(quantity.Quote(e.Entry), `"`) + ": " + e.Problem
}

func problem(of, format string, args ...any) *Error {
	return &Error{Entry: of, Problem: fmt.Sprintf(format, args...)}
}

// units are the words for every characteristic in one unit.
var units = [...]struct {
	word string
	unit quantity.Unit
}{
	{"volts", quantity.Volt},
	{"ohms", quantity.Ohm},
	{"farads", quantity.Farad},
	{"amperes", quantity.Ampere},
	{"henries", quantity.Henry},
	{"celsius", quantity.Celsius},
	{"numbers", quantity.One},
}

// Characteristics finds the definition of a name; [Of] makes one from the rulebooks.
type Characteristics func(name screening.Characteristic) (screening.Definition, bool)

// Of returns the characteristics that the kinds measure.
func Of(books screening.Kinds) Characteristics {
	known := map[screening.Characteristic]screening.Definition{}
	for _, b := range books {
		for i := range b.Bench {
			known[b.Bench[i].Name] = b.Bench[i].Definition
		}
	}
	return func(name screening.Characteristic) (screening.Definition, bool) {
		d, ok := known[name]
		return d, ok
	}
}

// Parse reads a meter's description in words. The error is an [*Error] and names the entry.
func Parse(known Characteristics, name, text string) (screening.Meter, error) {
	m := screening.Meter{Name: strings.TrimSpace(name)}
	if err := checkName(m.Name); err != nil {
		return m, err
	}
	if len(text) > MaxBytes {
		return m, problem("", "the description is longer than %d bytes", MaxBytes)
	}
	n := 0
	for one := range strings.SplitSeq(text, ";") {
		fields := strings.Fields(one)
		if len(fields) == 0 {
			continue
		}
		if n++; n > MaxEntries {
			return m, problem("", "a meter has at most %d entries", MaxEntries)
		}
		if err := addWords(&m, known, fields); err != nil {
			return m, err
		}
	}
	return m, whole(&m)
}

// whole refuses a meter that says nothing of any reading: it would be the assumed one under another name.
func whole(m *screening.Meter) error {
	if len(m.Ranges) == 0 {
		return problem(m.Name, "no accuracy is stated; %s", example)
	}
	return nil
}

func checkName(name string) error {
	switch {
	case name == "":
		return problem("", "a meter needs a name")
	case utf8.RuneCountInString(name) > maxName:
		return problem(name, "the name is longer than %d characters", maxName)
	case strings.ContainsFunc(name, func(r rune) bool { return !unicode.IsPrint(r) }) || !utf8.ValidString(name):
		return problem(name, "the name holds a control character")
	}
	return nil
}

// addWords understands one entry in words.
func addWords(m *screening.Meter, known Characteristics, fields []string) error {
	for _, of := range [...]string{"leads", "stray", "found"} {
		if value, ok := strings.CutPrefix(fields[0], of+"="); ok {
			return addLeads(m, of, value+strings.Join(fields[1:], ""))
		}
	}
	g, d, err := begin(known, fields[0])
	if err != nil {
		return err
	}
	var claim strings.Builder
	ranged := false
	for _, w := range fields[1:] {
		low, high, isRange := strings.Cut(w, "..")
		switch {
		case isRange && ranged:
			return problem(fields[0], "states its range twice")
		case isRange:
			ranged = true
			err = bounds(&g, d, low, high)
		case strings.Contains(w, "="):
			name, value, _ := strings.Cut(w, "=")
			err = setting(&g, d, name, value)
		case w == screening.Normal99.String():
			g.Confidence = screening.Normal99
		case w == "digit-apart":
			g.DigitApart = true
		default:
			claim.WriteString(w)
		}
		if err != nil {
			return err
		}
	}
	if err := accuracy(&g, d, claim.String()); err != nil {
		return err
	}
	m.Ranges = append(m.Ranges, g)
	return nil
}

// begin reads what an entry is of, and at which test signal.
func begin(known Characteristics, text string) (screening.Range, screening.Definition, error) {
	name, at, conditioned := strings.Cut(text, "@")
	name = strings.ToLower(name)
	var g screening.Range
	d, ok := known(screening.Characteristic(name))
	if ok {
		g.Of, g.Unit = d.Name, d.Unit
	} else {
		words := make([]string, len(units))
		for i, u := range units {
			words[i] = u.word
			if u.word == name {
				d, ok = screening.Definition{Name: screening.Characteristic(name), Label: name, Unit: u.unit}, true
				g.Unit = u.unit
			}
		}
		if !ok {
			return g, d, problem(text, "is neither a characteristic nor one of %s; %s", strings.Join(words, ", "), example)
		}
	}
	if conditioned {
		var err error
		if g.At, err = entry.Condition(d, at); err != nil {
			return g, d, &Error{Problem: err.Error()}
		}
	}
	return g, d, nil
}

// bounds reads the ends of a range; an end without a prefix or unit is in plain SI units.
func bounds(g *screening.Range, d screening.Definition, low, high string) error {
	for _, end := range [...]struct {
		text string
		to   *float64
	}{{low, &g.Low}, {high, &g.High}} {
		if end.text == "" {
			continue
		}
		x, err := value(d, end.text)
		if err != nil {
			return err
		}
		*end.to = x
	}
	switch {
	case g.Low < 0:
		return problem(string(d.Name), "a range is of magnitudes and begins at 0 or above")
	case high != "" && g.High <= g.Low:
		return problem(string(d.Name), "the range %s..%s ends no higher than it begins", low, high)
	}
	return nil
}

func value(d screening.Definition, text string) (float64, error) {
	v, err := quantity.Parse(text, d.Unit)
	switch {
	case err != nil:
		return 0, problem(string(d.Name), "%s", err)
	case v.Over || v.Sense != quantity.Exactly:
		return 0, problem(string(d.Name), "%s is a bound, and a value is wanted", quantity.Quote(text))
	}
	return v.Number, nil
}

// positive is value above zero.
func positive(d screening.Definition, name, text string) (float64, error) {
	x, err := value(d, text)
	if err == nil && !(x > 0) {
		err = problem(string(d.Name), "%s=%s: it is above zero", name, strings.Trim(quantity.Quote(text), `"`))
	}
	return x, err
}

// setting reads step=X and spread=X.
func setting(g *screening.Range, d screening.Definition, name, text string) (err error) {
	switch name {
	case "step":
		g.Resolution, err = positive(d, name, text)
	case "spread":
		g.Spread, err = positive(d, name, text)
	default:
		err = problem(string(d.Name), "%s is no setting; an entry has step=, spread=, 99%% and digit-apart", quantity.Quote(name))
	}
	return err
}

// accuracy reads what the maker claims: 0.5%+2, ±(1%+3counts+20mohm).
func accuracy(g *screening.Range, d screening.Definition, text string) error {
	if text == "" {
		return problem(string(d.Name), "no accuracy is stated; %s", example)
	}
	bare := strings.NewReplacer("±", "", "(", "", ")", "", " ", "").Replace(text)
	for term := range strings.SplitSeq(bare, "+") {
		to, x, err := claimTerm(g, d, term)
		switch {
		case err != nil:
			return err
		case !(x >= 0) || math.IsInf(x, 1):
			return problem(string(d.Name), "%s of an accuracy is below zero", quantity.Quote(term))
		case *to != 0:
			return problem(string(d.Name), "the accuracy %s states two terms of one kind", quantity.Quote(text))
		}
		*to = x
	}
	if g.Relative > 1 {
		return problem(string(d.Name), "%s of the reading is no accuracy", quantity.Format(g.Relative, quantity.Ratio, 0))
	}
	if g.Relative+g.Counts+g.Absolute == 0 {
		return problem(string(d.Name), "an accuracy of nothing is no meter's")
	}
	return nil
}

// claimTerm tells percent and ppm of the reading from counts and from a fixed part.
func claimTerm(g *screening.Range, d screening.Definition, term string) (to *float64, x float64, err error) {
	plain := func(text string, factor float64) (float64, error) {
		v, err := value(screening.Definition{Name: d.Name, Unit: quantity.One}, text)
		return v * factor, err
	}
	if share, ok := strings.CutSuffix(term, "%"); ok {
		x, err = plain(share, 0.01)
		return &g.Relative, x, err
	}
	if share, ok := strings.CutSuffix(term, "ppm"); ok {
		x, err = plain(share, 1e-6)
		return &g.Relative, x, err
	}
	if fixed, ok := strings.CutSuffix(term, "abs"); ok {
		x, err = value(d, fixed)
		return &g.Absolute, x, err
	}
	counts := strings.TrimSuffix(strings.TrimSuffix(term, "counts"), "count")
	if strings.Trim(counts, "0123456789.") == "" {
		x, err = plain(counts, 1)
		return &g.Counts, x, err
	}
	if x, err = value(d, term); err != nil {
		err = problem(string(d.Name), "%s is no term of an accuracy; it is such as 0.5%% of the reading, 2 counts, or a fixed part such as %s",
			quantity.Quote(term), d.Unit.Example())
	}
	return &g.Absolute, x, err
}

// addLeads reads what the leads add.
func addLeads(m *screening.Meter, of, text string) error {
	if of == "found" {
		if _, err := time.Parse(time.DateOnly, text); err != nil {
			return problem(of, "%s is no date; write it such as 2026-03-01", quantity.Quote(text))
		}
		m.Leads.Found = text
		return nil
	}
	d := screening.Definition{Name: screening.Characteristic(of), Unit: quantity.Ohm}
	x, u := &m.Leads.SeriesR, &m.Leads.SeriesRU
	if of == "stray" {
		d.Unit, x, u = quantity.Farad, &m.Leads.StrayC, &m.Leads.StrayCU
	}
	mean, doubt, stated := strings.Cut(text, "±")
	var err error
	if *x, err = positive(d, of, mean); err != nil {
		return err
	}
	*u = *x / 2 / math.Sqrt(3)
	if stated {
		*u, err = positive(d, of, doubt)
	}
	return err
}
