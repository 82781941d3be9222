// Package semi holds what the rulebooks of field-effect transistors, bipolar ones with an insulated gate, thyristors and triacs share: limits
// of named figures, claims completed from a type's row, signs that a channel or a direction implies, and the proof that two leads block.
package semi

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

var inf, nan = math.Inf(1), math.NaN()

// Figure is one row of a kind's limits.csv: a bound that belongs to no single type.
type Figure struct {
	Low, High float64 // SI; ±Inf where open
	At        screening.Condition
	Source    screening.Source
	Note      string
}

// Figures are a kind's figures by name.
type Figures map[string]Figure

// ReadFigures reads a table with the columns name, low, high, at, source, clause, status, note. Conditions are written as on the command
// line, by name. It returns everything that is wrong with the table.
func ReadFigures(file, text string) (Figures, error) {
	t := book.ReadTable(file, text)
	figures := make(Figures, len(t.Rows()))
	for _, row := range t.Rows() {
		f := Figure{Low: row.NumberOr("low", -inf), High: row.NumberOr("high", inf), Source: row.Source(), Note: row.Text("note")}
		if f.Low >= f.High {
			row.Errorf("high", "is not above low")
		}
		if row.Has("at") {
			at, err := entry.Condition(screening.Definition{NamedOnly: true}, row.Text("at"))
			if err != nil {
				row.Errorf("at", "%v", err)
			}
			f.At = at
		}
		figures[row.Required("name")] = f
	}
	return figures, t.Err()
}

// MustFigures is ReadFigures for an embedded table, which a test holds to load.
func MustFigures(file, text string) Figures {
	f, err := ReadFigures(file, text)
	if err != nil {
		panic(file + ": embedded table: " + err.Error())
	}
	return f
}

// Limit makes a limit of a named figure.
func (f Figures) Limit(on screening.Definition, criterion screening.Criterion, name string) screening.Limit {
	x := f[name]
	l := Open(on, criterion)
	l.Low, l.High, l.At, l.Source, l.Note = x.Low, x.High, x.At, x.Source, x.Note
	return l
}

// LimitOf makes a limit of what a sheet or a marking claims.
func LimitOf(on screening.Definition, criterion screening.Criterion, r *screening.Rating) screening.Limit {
	l := Open(on, criterion)
	l.Low, l.High, l.At, l.Source = r.Low, r.High, r.At, book.SourceOf(r)
	return l
}

// Open makes a limit without bounds or source.
func Open(on screening.Definition, criterion screening.Criterion) screening.Limit {
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Criterion: criterion, Low: -inf, High: inf, Set: screening.GeneralSet, InUse: true,
	}
}

// MustBeClaimed makes a criterion that only a claim answers.
func MustBeClaimed(of screening.Definition, criterion screening.Criterion, why string) screening.Limit {
	l := Open(of, criterion)
	l.Evidence, l.Source, l.Note = screening.ByRating, screening.Source{Document: "house rule", Status: screening.House}, why
	return l
}

// Graded adds a limit that any part must meet whatever it is called: it makes the part serviceable, and as good as new only where more is
// proved, which the note says and AsNew answers.
func Graded(all []screening.Limit, l screening.Limit, note string) []screening.Limit {
	fresh := Open(screening.Definition{Name: l.On, Unit: l.Unit}, l.Criterion)
	fresh.Section, fresh.Grade, fresh.Evidence, fresh.Note = l.Section, screening.WithinSpec, screening.ByRating, note
	fresh.Source = screening.Source{Document: "house rule", Status: screening.House}
	l.Grade = screening.Serviceable
	return append(all, fresh, l)
}

// AsNew answers what Graded left open: a part is as good as new where it passes as serviceable and a criterion that holds it against its sheet
// passes too.
func AsNew(findings []screening.Finding, graded, proved screening.Criterion) {
	passes := func(c screening.Criterion, bySheet bool) bool {
		return slices.ContainsFunc(findings, func(f screening.Finding) bool {
			return f.Limit.Criterion == c && f.By == screening.ByReading && f.Outcome == screening.Pass &&
				(!bySheet || f.Limit.Source.Status != screening.House)
		})
	}
	proven := passes(graded, false) && passes(proved, true)
	for i := range findings {
		f := &findings[i]
		switch {
		case f.Limit.Criterion != graded || f.Limit.Evidence != screening.ByRating:
		case proven:
			f.Outcome, f.Probability, f.Why = screening.Pass, 1, ""
		default:
			Unanswer(f, "not proved")
		}
	}
}

// Unanswer takes a reading back as evidence for a limit, and says why.
func Unanswer(f *screening.Finding, why string) {
	f.Outcome, f.Why = screening.Missing, why
	f.Probability, f.Margin, f.NearLimit, f.Unconfirmed = nan, nan, false, false
}

// Complete adds a type's row to a claim. What the part itself claims stays; what an earlier completion added from a table is replaced, so
// that it can be done again. A rating that counts as a promise of endurance (stands) may be claimed lower than the row's, never higher, and
// the traits in agree must not differ. Magnitudes are kept: a sign says only which channel it is.
func Complete(c screening.Claim, row *types.Row, stands screening.Definition, agree ...string) (screening.Claim, error) {
	c.Ratings = slices.Clone(c.Ratings)
	c.Ratings = slices.DeleteFunc(c.Ratings, func(r screening.Rating) bool { return r.Typed == "" && r.Source != (screening.Source{}) })
	claimed, own := c.Rating(stands.Name, "")
	if promised, ok := row.Rating(stands.Name); ok && own && claimed.Low > promised.Low {
		return c, fmt.Errorf("%s: %s is claimed, but %s is rated %s", stands.Name, quantity.Format(claimed.Low, stands.Unit, 0), row.Type,
			quantity.Format(promised.Low, stands.Unit, 0))
	}
	n := len(c.Ratings)
	for i := range row.Ratings {
		r := row.Ratings[i]
		if !slices.ContainsFunc(c.Ratings[:n], func(x screening.Rating) bool { return x.Of == r.Of }) {
			c.Ratings = append(c.Ratings, r)
		}
	}
	c.Traits = slices.Clone(c.Traits)
	for _, t := range row.Traits {
		switch old := c.Trait(t.Name); {
		case t.Name == screening.TraitType || old == "":
			c = c.WithTrait(t.Name, t.Text)
		case old != t.Text && slices.Contains(agree, t.Name):
			return c, fmt.Errorf("%s: %q is claimed, but %s is %s", t.Name, old, row.Type, t.Text)
		}
	}
	return c, nil
}

// Unsigned drops the signs of a claim's ratings and of their conditions: -8 V to -0.25 V is 0.25 V to 8 V.
func Unsigned(c screening.Claim) screening.Claim {
	for i := range c.Ratings {
		if r := c.Ratings[i]; r.High < 0 || signed(r.At) {
			c.Ratings = slices.Clone(c.Ratings)
			if r.High < 0 {
				r.Low, r.High, r.Nominal = -r.High, -r.Low, math.Abs(r.Nominal)
			}
			r.At = withoutSigns(r.At)
			c.Ratings[i] = r
		}
	}
	return c
}

// Magnitudes returns, of every reading that was typed with a sign, or at a condition with one, the same without: a p-channel part at -10 V
// is judged as at 10 V.
func Magnitudes(part screening.Part) ([]screening.Reading, []screening.Reason) {
	var all []screening.Reading
	for _, r := range part.Readings {
		if r.Of == screening.Temperature.Name || r.Value >= 0 && !signed(r.At) {
			continue
		}
		if r.Value < 0 {
			r.Value = -r.Value
			switch r.Sense {
			case quantity.AtLeast:
				r.Sense = quantity.AtMost
			case quantity.AtMost:
				r.Sense = quantity.AtLeast
			}
		}
		r.At, r.Repeats, r.Rule = withoutSigns(r.At), nil, "without its sign"
		all = append(all, r)
	}
	return all, nil
}

func signed(c screening.Condition) bool {
	for _, v := range screening.Variables() {
		if x, ok := c.Get(v); ok && x < 0 && v != screening.PartTemperature {
			return true
		}
	}
	return false
}

func withoutSigns(c screening.Condition) screening.Condition {
	for _, v := range screening.Variables() {
		if x, ok := c.Get(v); ok && x < 0 && v != screening.PartTemperature {
			c = c.With(v, -x)
		}
	}
	return c
}

// StandsIn takes a bare value that states its unit as "at least so much": what stands on a part is what it claims to bear.
func StandsIn(unit quantity.Unit) func(string) (low, high float64, ok bool) {
	return func(word string) (low, high float64, ok bool) {
		if !strings.HasSuffix(word, unit.Symbol()) {
			return 0, 0, false
		}
		v, err := quantity.Parse(strings.TrimPrefix(word, "-"), unit)
		if err != nil || v.Sense != quantity.Exactly || v.Over || v.Number <= 0 {
			return 0, 0, false
		}
		return v.Number, inf, true
	}
}

// PinoutField is the order of the leads, which makers of one type do not agree on.
func PinoutField(example string) screening.Field {
	return screening.Field{
		Definition: book.Trait(screening.TraitPinout, "pinout"), Trait: true, Example: "pinout=" + example,
		Help: "the leads in order; check with a meter",
	}
}

// TemperatureField is the reading of the part's temperature.
func TemperatureField() screening.Field {
	return screening.Field{
		Definition: screening.Temperature, PerPart: true, Example: "temperature=22C", Effort: 10 * time.Second,
		Help: "of the part, lying in the room",
	}
}

// Say adds notes, each once.
type Say struct{ Reasons []screening.Reason }

// Note adds a note.
func (s *Say) Note(of screening.Characteristic, text string) {
	if text != "" && !slices.ContainsFunc(s.Reasons, func(r screening.Reason) bool { return r.Text == text }) {
		s.Reasons = append(s.Reasons, book.Note(of, "%s", text))
	}
}

// Volts prints a voltage for sentences.
func Volts(x float64) string { return quantity.Format(x, quantity.Volt, 0) }

// Amps prints a current.
func Amps(x float64) string { return quantity.Format(x, quantity.Ampere, 0) }

// Ohms prints a resistance in two figures.
func Ohms(x float64) string { return book.About(x, quantity.Ohm) }

// Watts prints a power in two figures.
func Watts(x float64) string { return book.About(x, quantity.Watt) }

// Typed prints a value as it is typed: "12V", "0.5mA".
func Typed(x float64, unit quantity.Unit) string {
	text := quantity.Format(x, unit, 0)
	return strings.NewReplacer(" ", "", "µ", "u", "Ω", "").Replace(text)
}
