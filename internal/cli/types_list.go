package cli

import (
	"errors"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/rules/family"
	"goodbin/rules/types"
	"goodbin/screening"
)

// shownRatings is how many ratings a line of the list has room for.
const shownRatings = 4

func (a *app) typesListCommand() *cobra.Command {
	cmd := &cobra.Command{
		Use: "list [FILTER...]", Short: "list type numbers, built-in and your own, with ratings in short", Example: typesExamples,
		RunE: func(_ *cobra.Command, args []string) error { return a.listTypes(args) },
	}
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON, one type a line: SI units, null where open or absent")
	return cmd
}

// listTypes prints every row in which each word is found.
func (a *app) listTypes(words []string) error {
	var rows []types.Row
	for _, kind := range a.types.Kinds() {
		for _, r := range a.types.Rows(kind) {
			if matchesAll(typeText(r), words) {
				rows = append(rows, r)
			}
		}
	}
	if len(rows) == 0 {
		a.env.note("goodbin: no type matches")
		return silent(ExitNotAccepted)
	}
	if a.json {
		for _, r := range rows {
			if err := a.writeJSON(typeJSON(r)); err != nil {
				return err
			}
		}
		return nil
	}
	var lines [][]string
	if a.env.OutTerminal {
		lines = append(lines, []string{"kind", "type", "ratings", "pinout", "status", "source"})
	}
	for _, r := range rows {
		lines = append(lines, []string{
			string(r.Kind), typeTitle(r), a.shortRatings(r), r.Trait(screening.TraitPinout), r.Source.Status.String(), r.Source.Document,
		})
	}
	return a.env.table(lines)
}

func typeTitle(r types.Row) string {
	if r.Alias != "" {
		return r.Type + " (" + r.Alias + ")"
	}
	return r.Type
}

// typeText is what the words of a filter are looked for in.
func typeText(r types.Row) string {
	parts := []string{string(r.Kind), r.Type, r.Alias, r.Source.Document, r.Source.Status.String(), r.Note}
	for _, t := range r.Traits {
		parts = append(parts, t.Text)
	}
	return strings.ToLower(strings.Join(parts, "\n"))
}

func matchesAll(text string, words []string) bool {
	return !slices.ContainsFunc(words, func(w string) bool { return !strings.Contains(text, strings.ToLower(w)) })
}

// shortRatings is the first few ratings of a row without their conditions, each once.
func (a *app) shortRatings(r types.Row) string {
	book, _ := a.books.Find(r.Kind)
	var texts []string
	seen := map[screening.Characteristic]bool{}
	for _, x := range r.Ratings {
		if seen[x.Of] {
			continue
		}
		seen[x.Of] = true
		if len(texts) == shownRatings {
			return strings.Join(append(texts, "..."), ", ")
		}
		texts = append(texts, symbolOf(book, x.Of)+" "+x.String())
	}
	return strings.Join(texts, ", ")
}

func symbolOf(book *screening.Rulebook, of screening.Characteristic) string {
	if book == nil {
		return string(of)
	}
	return book.Definition(of).Symbol
}

func (a *app) typesShowCommand() *cobra.Command {
	cmd := &cobra.Command{
		Use: "show TYPE", Short: "show every figure of a type number with its source, the pinout, and what misleads", Example: typesExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) == 0 {
				return request(errors.New("name the type"), "goodbin types show BC547")
			}
			return nil
		},
		RunE: func(_ *cobra.Command, args []string) error { return a.showType(strings.Join(args, " ")) },
		ValidArgsFunction: func(_ *cobra.Command, _ []string, typing string) ([]string, cobra.ShellCompDirective) {
			var names []string
			for _, kind := range a.types.Kinds() {
				for _, name := range a.types.Names(kind) {
					if strings.HasPrefix(strings.ToLower(name), strings.ToLower(typing)) {
						names = append(names, name+"\t"+string(kind))
					}
				}
			}
			return names, cobra.ShellCompDirectiveNoFileComp
		},
	}
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON: SI units, null where open or absent")
	return cmd
}

func (a *app) showType(word string) error {
	kinds := a.types.KindsOf(word)
	if len(kinds) == 0 {
		return a.showGuess(word)
	}
	for i, kind := range kinds {
		row, _ := a.types.Lookup(kind, word)
		var err error
		switch {
		case a.json:
			err = a.writeJSON(typeJSON(row))
		case i > 0:
			err = a.env.line("")
		}
		if err == nil && !a.json {
			err = a.printType(row)
		}
		if err != nil {
			return err
		}
	}
	return nil
}

func (a *app) printType(r types.Row) error {
	e := a.env
	book, _ := a.books.Find(r.Kind)
	title := string(r.Kind) + " " + typeTitle(r)
	if r.Group != "" {
		title += ", group " + r.Group
	}
	if err := e.strong(title); err != nil {
		return err
	}
	lines := [][2]string{{"  ", traitWords(r)}}
	if pinout := r.Trait(screening.TraitPinout); pinout != "" {
		lines = append(lines, [2]string{"  pinout  ", pinout + "; " + screening.PinoutAdvice})
	}
	for _, x := range r.Ratings {
		lines = append(lines, [2]string{"  ", ratingLine(book, "", x)})
	}
	for _, x := range r.Points {
		lines = append(lines, [2]string{"  ", ratingLine(book, "", x)})
	}
	for _, g := range r.Groups {
		name := "group " + g.Name
		if g.Alias != "" {
			name += " (" + g.Alias + ")"
		}
		for _, x := range append([]screening.Rating{g.Gain}, g.Points...) {
			lines = append(lines, [2]string{"  ", ratingLine(book, name+": ", x)})
		}
	}
	lines = append(lines, [2]string{"  note    ", r.Note}, [2]string{"  source  ", r.Source.String()})
	for _, trap := range types.Traps(r.Type) {
		lines = append(lines, [2]string{"  trap    ", trap.Text + "; " + trap.Source.String()})
	}
	for _, l := range lines {
		if l[1] == "" {
			continue
		}
		if err := e.wrapped(l[0], l[1]); err != nil {
			return err
		}
	}
	return nil
}

// traitWords are a row's traits but its name and its pinout.
func traitWords(r types.Row) string {
	var words []string
	for _, t := range r.Traits {
		if t.Name != screening.TraitType && t.Name != screening.TraitPinout && t.Name != screening.TraitGroup {
			words = append(words, t.Text)
		}
	}
	return strings.Join(words, ", ")
}

// ratingLine prints one figure: "rated collector-emitter voltage VCEO 45 V; sheet (published)".
func ratingLine(book *screening.Rulebook, before string, r screening.Rating) string {
	name := string(r.Of)
	if book != nil {
		d := book.Definition(r.Of)
		if name = d.Label; d.Symbol != "" && d.Symbol != d.Label {
			name += " " + d.Symbol
		}
	}
	text := before + name + " " + r.String()
	if r.HasNominal() && r.Low < r.High {
		bounds := r
		bounds.Nominal = notANumber
		text += " (" + bounds.String() + ")"
	}
	if !r.At.IsZero() {
		text += " at " + r.At.String()
	}
	return text + "; " + r.Source.String()
}

// showGuess says what an unknown type number suggests.
func (a *app) showGuess(word string) error {
	guesses := a.types.Guess(word)
	if a.json {
		for _, g := range guesses {
			if err := a.writeJSON(guessJSON(word, g)); err != nil {
				return err
			}
		}
		return silent(ExitNotAccepted)
	}
	if len(guesses) == 0 {
		a.env.note("goodbin: %q is in no table, and no scheme of type numbers has its shape: nothing is known of it", word)
		return silent(ExitNotAccepted)
	}
	if err := a.env.line("%q is in no table", word); err != nil {
		return err
	}
	for _, g := range guesses {
		text := g.String()
		if g.Name != word {
			text = "as " + g.Name + " it " + text
		}
		for _, l := range [][2]string{{"  ", text}, {"  but     ", g.Doubt}, {"  source  ", g.Source.String()}} {
			if err := a.env.wrapped(l[0], l[1]); err != nil {
				return err
			}
		}
	}
	for _, trap := range types.Traps(word) {
		if err := a.env.wrapped("  trap    ", trap.Text+"; "+trap.Source.String()); err != nil {
			return err
		}
	}
	families, err := a.families()
	if err != nil {
		return err
	}
	for i := range families {
		if f := &families[i]; f.List == family.NeverKeep && f.NamesType(word) {
			if err := a.env.wrapped("  refused ", f.Label+": "+f.Reason+"; "+f.Source.String()); err != nil {
				return err
			}
		}
	}
	return silent(ExitNotAccepted)
}
