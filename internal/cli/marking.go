package cli

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"github.com/mattn/go-runewidth"
	"github.com/spf13/cobra"

	"goodbin/rules/marking"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const markingExamples = `  goodbin marking 2A474J                     value, tolerance, voltage
  goodbin marking brown black red gold       colour bands, read from both ends
  goodbin marking 47K --kind ceramic         what a part of that kind can carry stands first
  goodbin marking 1208 --all                 every piece, with its source and why it stands where it does`

func (a *app) markingCommand() *cobra.Command {
	var kind string
	cmd := &cobra.Command{
		Use:     "marking TEXT...",
		Short:   "say what a marking means, every possible reading of it",
		Example: markingExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) == 0 {
				return request(errNoMarking, "goodbin marking 2A474J; colours are words: goodbin marking brown black red gold")
			}
			return nil
		},
		ValidArgsFunction: cobra.NoFileCompletions,
		RunE:              func(_ *cobra.Command, args []string) error { return a.marking(strings.Join(args, " "), kind) },
	}
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON: SI units, null where open or absent")
	cmd.Flags().BoolVar(&a.all, "all", false, "also the pieces of the print, the sources, and why each meaning stands where it does")
	cmd.Flags().StringVar(&kind, "kind", "", "the `KIND` of part it stands on: what that kind can carry stands first")
	_ = cmd.RegisterFlagCompletionFunc("kind", func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
		return a.kindNames(), cobra.ShellCompDirectiveNoFileComp
	})
	return cmd
}

var errNoMarking = errors.New("say what is printed on the part")

func (a *app) marking(printed, kind string) error {
	opt := marking.Options{Now: a.env.Now()}
	if kind != "" {
		book, err := a.book(kind)
		if err != nil {
			return err
		}
		opt.Kind = book.Kind
	}
	meanings, err := marking.Decode(printed, opt)
	if a.json && (err == nil || unknownMarking(err)) {
		if err := a.writeJSON(markingJSON(printed, meanings)); err != nil {
			return err
		}
	}
	switch {
	case unknownMarking(err):
		return &failure{status: ExitNotAccepted, err: err, hint: a.typeNumberHint(printed)}
	case err != nil:
		return request(err, "")
	case a.json:
		return nil
	}
	if err := a.printMeanings(printed, meanings); err != nil {
		return err
	}
	if hint := a.typeNumberHint(printed); hint != "" {
		a.env.note("goodbin: hint: %s", hint)
	}
	return nil
}

// unknownMarking reports that a text was readable and has no meaning.
func unknownMarking(err error) bool {
	var e *marking.Error
	return errors.As(err, &e) && e.Unknown()
}

// typeNumberHint names the kinds that know a text as a type number, which is no marking code.
func (a *app) typeNumberHint(text string) string {
	for _, kind := range a.kindNames() {
		if row, ok := a.types.Lookup(screening.Kind(kind), text); ok {
			return row.Type + " is a type number: goodbin judge " + kind + " " + strings.TrimSpace(text)
		}
	}
	if ohms, letter, ok := trackOhms(text); ok {
		return "a potentiometer of " + ohms + " with the taper letter " + letter + ", which differs by country: goodbin judge potentiometer " + ohms
	}
	return ""
}

// printMeanings prints a table of the meanings, then what is to be known of them by their numbers.
func (a *app) printMeanings(printed string, meanings []marking.Meaning) error {
	e := a.env
	if err := e.strong(printed); err != nil {
		return err
	}
	rows := [][]string{{"", "meaning", "on", "scheme", "status"}}
	for i := range meanings {
		m := &meanings[i]
		rows = append(rows, []string{strconv.Itoa(i + 1), m.String(), onKinds(m.Kinds), m.Scheme, m.Source.Status.String()})
	}
	if err := a.meaningTable(rows); err != nil {
		return err
	}
	for i := range meanings {
		if err := a.printMeaning(i, &meanings[i]); err != nil {
			return err
		}
	}
	return nil
}

// meaningTable prints the rows as a table, or each as a paragraph where the terminal has no room for one.
func (a *app) meaningTable(rows [][]string) error {
	e := a.env
	if !e.OutTerminal {
		return e.table(rows)
	}
	lines := e.columns(rows)
	if !slices.ContainsFunc(lines, func(l string) bool { return runewidth.StringWidth(l) > e.width() }) {
		for _, l := range lines {
			if err := e.line("%s", l); err != nil {
				return err
			}
		}
		return nil
	}
	for _, r := range rows[1:] {
		if err := e.wrapped(r[0]+" ", strings.Join(r[1:], " · ")); err != nil {
			return err
		}
	}
	return nil
}

func (a *app) printMeaning(i int, m *marking.Meaning) error {
	number := strconv.Itoa(i + 1)
	lines := []struct {
		label, text string
		always      bool
	}{
		{"why    ", m.Why, i == 0},
		{"note   ", m.Note, true},
		{"range  ", rangeText(m), i == 0},
		{"claim  ", strings.Join(m.Words, " "), i == 0},
		{"source ", m.Source.String(), false},
	}
	for _, l := range lines {
		if l.text == "" || !l.always && !a.all {
			continue
		}
		if err := a.env.wrapped(number+" "+l.label, l.text); err != nil {
			return err
		}
	}
	for _, p := range m.Parts {
		if !a.all {
			break
		}
		if err := a.env.wrapped(number+" piece  ", fmt.Sprintf("%s is %s: %s; %s", p.Text, p.Says, p.Scheme, p.Source)); err != nil {
			return err
		}
	}
	return nil
}

// rangeText prints the bounds that the tolerance implies.
func rangeText(m *marking.Meaning) string {
	if m.Of == marking.OfDate || m.Text != "" || number(m.Low) == nil || number(m.High) == nil {
		return ""
	}
	return quantity.Bound(m.Low, m.Unit) + " to " + quantity.Bound(m.High, m.Unit)
}

// shownKinds is how many kinds stand in a row of the table.
const shownKinds = 3

// onKinds words the kinds that carry a marking.
func onKinds(kinds []screening.Kind) string {
	if len(kinds) == 0 {
		return "any"
	}
	names := make([]string, len(kinds))
	for i, k := range kinds {
		names[i] = string(k)
	}
	if len(names) > shownKinds {
		return strings.Join(names[:shownKinds], ", ") + ", …"
	}
	return strings.Join(names, ", ")
}

type jsonDate struct {
	Year  int  `json:"year"`
	Month *int `json:"month"`
	Week  *int `json:"week"`
}

type jsonPiece struct {
	Text   string     `json:"text"`
	Says   string     `json:"says"`
	Of     string     `json:"of"`
	Scheme string     `json:"scheme"`
	Source jsonSource `json:"source"`
}

type jsonMeaning struct {
	Of     string      `json:"of"`
	Value  *float64    `json:"value"`
	Unit   string      `json:"unit"`
	Low    *float64    `json:"low"`
	High   *float64    `json:"high"`
	Scheme string      `json:"scheme"`
	Status string      `json:"status"`
	Note   *string     `json:"note"`
	Says   string      `json:"says"`
	Why    string      `json:"why"`
	Kinds  []string    `json:"kinds"`
	Words  []string    `json:"words"`
	Dates  []jsonDate  `json:"dates"`
	Parts  []jsonPiece `json:"parts"`
	Source jsonSource  `json:"source"`
}

type jsonMarking struct {
	Schema   int           `json:"schema"`
	Text     string        `json:"text"`
	Meanings []jsonMeaning `json:"meanings"`
}

func markingJSON(printed string, meanings []marking.Meaning) jsonMarking {
	out := jsonMarking{Schema: schema, Text: printed, Meanings: []jsonMeaning{}}
	for i := range meanings {
		m := &meanings[i]
		j := jsonMeaning{
			Of: string(m.Of), Value: number(m.Value), Unit: meaningUnit(m), Low: number(m.Low), High: number(m.High), Scheme: m.Scheme,
			Status: m.Source.Status.String(), Note: text(m.Note), Says: m.String(), Why: m.Why, Kinds: []string{}, Words: []string{},
			Dates: []jsonDate{}, Parts: []jsonPiece{}, Source: sourceJSON(m.Source),
		}
		for _, k := range m.Kinds {
			j.Kinds = append(j.Kinds, string(k))
		}
		j.Words = append(j.Words, m.Words...)
		for _, d := range m.Dates {
			j.Dates = append(j.Dates, jsonDate{d.Year, positive(d.Month), positive(d.Week)})
		}
		for _, p := range m.Parts {
			j.Parts = append(j.Parts, jsonPiece{p.Text, p.Says, string(p.Of), p.Scheme, sourceJSON(p.Source)})
		}
		out.Meanings = append(out.Meanings, j)
	}
	return out
}

// meaningUnit is the unit of a meaning's numbers: a date's are years.
func meaningUnit(m *marking.Meaning) string {
	switch m.Of {
	case marking.OfDate:
		return "year"
	case marking.OfTemperatureCoefficient:
		return "1/K"
	}
	return unitName(m.Unit)
}

// positive is a number that counts from one; null where there is none.
func positive(n int) *int {
	if n <= 0 {
		return nil
	}
	return &n
}
