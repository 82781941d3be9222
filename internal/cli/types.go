package cli

import (
	"context"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/rules"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

const typesExamples = `  goodbin types                        every type number that is known, with ratings in short
  goodbin types list bipolar npn       every word must match
  goodbin types show BC547             every figure with its condition and source, the pinout, and what misleads
  goodbin types add sheets.csv         your own data sheets; they win over the built-in table and are marked house
  goodbin types export > sheets.csv    what you added, to be read again
  goodbin types remove BC547           takes your row away; the built-in one counts again`

const typesAddExamples = `  goodbin types add sheets.csv
  goodbin types add - < sheets.csv     from standard input

  kind,type,alias,polarity,material,rated:vceo,"rated:hfe@ic=2mA,vce=5V",rated:icbo@30V [nA],pinout,case,source,note
  bipolar,BC547,,,,,200..450,,,,own sheet,measured twice
  bipolar,QX308B,X308,pnp,ge,30V,80..240,500,E-B-C,TO-5,maker's book 1969,

One row a type. The columns are the words of goodbin judge: kind and type; the traits of the kind (polarity, material, pinout, case ...);
rated:NAME for a figure, with its condition after @ where the sheet states one; alias (another name of the same part), source (the sheet it
is from) and note. A unit in brackets is that of the column's bare numbers. A cell is 30V, 80..240, ..15nA or 40.. and may carry a condition
of its own: "80..240@ic=2mA,vce=5V". Quote a cell or name that holds a comma. Delimiter: comma, semicolon or tab.
A row wins over the built-in one of the same kind and type figure by figure; what it leaves out stays. A bipolar row with a group states the
gain of that group. Every row is checked; one that is wrong keeps the whole file out.`

func (a *app) typesCommand() *cobra.Command {
	cmd := &cobra.Command{
		Use:     "types",
		Short:   "list type numbers, and add those of your own data sheets",
		Example: typesExamples,
		Args:    a.noSuchCommand,
		RunE:    func(*cobra.Command, []string) error { return a.listTypes(nil) },
	}
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON, one type a line: SI units, null where open or absent")
	cmd.AddCommand(a.typesAddCommand(), a.typesListCommand(), a.typesShowCommand(), a.typesExportCommand(), a.typesRemoveCommand())
	return cmd
}

func (a *app) typesAddCommand() *cobra.Command {
	return &cobra.Command{
		Use: "add FILE.csv", Short: "add the type numbers of your own data sheets", Example: typesAddExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) != 1 {
				return request(errors.New("name one CSV file"), "goodbin types add sheets.csv; - is standard input")
			}
			return a.keptBeyondDemo()
		},
		RunE: func(cmd *cobra.Command, args []string) error { return a.addTypes(cmd.Context(), args[0]) },
	}
}

// keptBeyondDemo refuses to change what a throwaway workbook would forget at once.
func (a *app) keptBeyondDemo() error {
	if a.demo {
		return request(errors.New("the demo's workbook is thrown away, and your types with it"), "leave out --demo")
	}
	return nil
}

func (a *app) addTypes(ctx context.Context, path string) error {
	in := io.Reader(nil)
	if path == "-" {
		in = interruptible(ctx, a.env.In)
	} else {
		f, err := openRegular(path)
		if err != nil {
			return request(err, "")
		}
		defer f.Close()
		in = f
	}
	name := displayName(path)
	rows, err := entry.ReadTypes(in, rules.All())
	if err != nil {
		return a.typesFileError(name, err)
	}
	return a.withWorkbook(ctx, false, func(w *inventory.Workbook) error {
		h, err := w.House()
		if err != nil {
			return err
		}
		add := typeAdding{app: a, name: name, house: h, rows: rows}
		if err := add.run(); err != nil {
			return err
		}
		action := fmt.Sprintf("added %d types from %s", len(rows), name)
		if err := w.PutHouse(add.house, clean(action)); err != nil {
			return err
		}
		if err := add.tell(); err != nil {
			return err
		}
		return a.tellStale(w, add.house)
	})
}

// typesFileError is what is wrong with the file as a whole.
func (a *app) typesFileError(name string, err error) error {
	hint := "goodbin types add --help shows a file"
	var e *entry.Error
	if errors.As(err, &e) && e.Hint != "" {
		hint = e.Hint
	}
	return request(fmt.Errorf("%s: %w", name, err), hint)
}

// typeAdding is one file of type numbers on its way into the house tables.
type typeAdding struct {
	*app
	name     string
	house    inventory.House // as it will be
	rows     []entry.TypeRow
	replaced int
	wrong    int
}

// run checks every row and puts it into the house tables; one that is wrong keeps all out.
func (t *typeAdding) run() error {
	if len(t.rows) == 0 {
		return request(fmt.Errorf("%s: no row stands under the header", t.name), "goodbin types add --help shows a file")
	}
	lines := map[string]int{}
	for i := range t.rows {
		r := &t.rows[i]
		for _, err := range r.Errors {
			t.tellWrong(err)
		}
		if len(r.Errors) > 0 {
			continue
		}
		key := typeKey(r.Book.Kind, r.Claim)
		if line, twice := lines[key]; twice {
			t.tellWrong(&entry.CellError{Line: r.Line, Err: fmt.Errorf("%s stands in line %d too", typeName(r.Claim), line)})
			continue
		}
		lines[key] = r.Line
		if err := checkType(r); err != nil {
			t.tellWrong(&entry.CellError{Line: r.Line, Err: err})
			continue
		}
		t.keep(r, key)
	}
	if t.wrong == 0 {
		t.judgeable()
	}
	if t.wrong > maxShownErrors {
		t.env.note("goodbin: %s: %d more errors", t.name, t.wrong-maxShownErrors)
	}
	if t.wrong > 0 {
		t.env.note("goodbin: %s: nothing was added", t.name)
		return silent(ExitRequest)
	}
	return nil
}

func (t *typeAdding) tellWrong(err error) {
	if t.wrong++; t.wrong > maxShownErrors {
		return
	}
	t.env.note("goodbin: %s: %s", t.name, err)
	var e *entry.Error
	if errors.As(err, &e) && e.Hint != "" {
		t.env.note("goodbin: hint: %s", e.Hint)
	}
}

// keep puts a row into the place of an earlier one of the same name, or at the end.
func (t *typeAdding) keep(r *entry.TypeRow, key string) {
	kept := inventory.HouseType{Kind: r.Book.Kind, Claim: r.Claim, Alias: r.Alias, Source: r.Source, Note: r.Note}
	i := slices.IndexFunc(t.house.Types, func(h inventory.HouseType) bool { return typeKey(h.Kind, h.Claim) == key })
	if i < 0 {
		t.house.Types = append(t.house.Types, kept)
		return
	}
	t.replaced++
	t.house.Types[i] = kept
}

// typeKey is what tells one row of a house table from another.
func typeKey(kind screening.Kind, c screening.Claim) string {
	return string(kind) + " " + types.Fold(c.Trait(screening.TraitType)) + " " + types.Fold(c.Trait(screening.TraitGroup))
}

// typeName is how a row is called: "BC547", "BC547 group B".
func typeName(c screening.Claim) string {
	if g := c.Trait(screening.TraitGroup); g != "" {
		return c.Trait(screening.TraitType) + " group " + g
	}
	return c.Trait(screening.TraitType)
}

// checkType finds what is wrong with a row by itself.
func checkType(r *entry.TypeRow) error {
	for _, x := range r.Claim.Ratings {
		if x.Low < 0 && !math.IsInf(x.Low, -1) && x.Unit != quantity.Ratio && x.Unit != quantity.Celsius {
			return fmt.Errorf("%s: %s is below zero; write it without its sign, the polarity says that", x.Of, x)
		}
	}
	_, hasGain := r.Claim.Rating("hfe", "")
	switch {
	case r.Book.Kind == types.Bipolar && r.Claim.Trait(screening.TraitGroup) != "" && !hasGain:
		return errors.New("a row of a gain group states the gain: rated:hfe is missing")
	case len(r.Claim.Ratings) == 0 && len(r.Claim.Traits) == 1:
		return fmt.Errorf("%s: the row says nothing but its name", typeName(r.Claim))
	case r.Alias == "":
		return nil
	}
	if row, known := types.Builtin().Lookup(r.Book.Kind, r.Alias); known && types.Fold(row.Type) != types.Fold(r.Claim.Trait(screening.TraitType)) {
		return fmt.Errorf("alias: %s is a type of its own", row.Type)
	}
	return nil
}

// judgeable completes a claim of every new type by its rulebook with the new table: what cannot be judged does not go in.
func (t *typeAdding) judgeable() {
	books := rules.With(rules.House{Types: houseRows(t.house)})
	for i := range t.rows {
		r := &t.rows[i]
		b, _ := books.Find(r.Book.Kind)
		claim := screening.Claim{}.WithTrait(screening.TraitType, r.Claim.Trait(screening.TraitType))
		claim = claim.WithTrait(screening.TraitGroup, r.Claim.Trait(screening.TraitGroup))
		completed, _, err := complete(b, claim)
		if err == nil {
			_, err = b.Limits(completed)
		}
		if err != nil {
			t.tellWrong(&entry.CellError{Line: r.Line, Err: fmt.Errorf("%s: %w", typeName(r.Claim), err)})
		}
	}
}

// tell says what was added.
func (t *typeAdding) tell() error {
	text := fmt.Sprintf("added %d %s", len(t.rows), plural(len(t.rows), "type"))
	if t.replaced > 0 {
		text += fmt.Sprintf(", %d of them in the place of an earlier row of yours", t.replaced)
	}
	if err := t.env.line("%s", text); err != nil {
		return err
	}
	for i := range t.rows {
		r := &t.rows[i]
		line := string(r.Book.Kind) + " " + typeName(r.Claim)
		if row, known := types.Builtin().Lookup(r.Book.Kind, r.Claim.Trait(screening.TraitType)); known {
			line += ": wins over the built-in row (" + row.Source.Status.String() + ")"
		}
		if err := t.env.wrapped("  ", line); err != nil {
			return err
		}
	}
	return nil
}

func plural(n int, noun string) string {
	if n == 1 {
		return noun
	}
	return noun + "s"
}

// tellStale says that verdicts were reached under other tables, where there are some.
func (a *app) tellStale(w *inventory.Workbook, h inventory.House) error {
	a.useHouse(h)
	for _, err := range w.StaleParts(a.tables()) {
		if err != nil {
			return err
		}
		a.env.note("goodbin: some parts were judged under other tables: goodbin verify --rejudge judges them again")
		return nil
	}
	return nil
}

func (a *app) typesRemoveCommand() *cobra.Command {
	var kind string
	cmd := &cobra.Command{
		Use: "remove TYPE", Short: "take rows of your own away; the built-in ones count again", Example: typesExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) == 0 {
				return request(errors.New("name the type"), "goodbin types remove BC547")
			}
			return a.keptBeyondDemo()
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			return a.removeType(cmd.Context(), strings.Join(args, " "), screening.Kind(strings.ToLower(kind)))
		},
	}
	cmd.Flags().StringVar(&kind, "kind", "", "only of a `KIND`")
	return cmd
}

func (a *app) removeType(ctx context.Context, word string, kind screening.Kind) error {
	return a.withWorkbook(ctx, false, func(w *inventory.Workbook) error {
		h, err := w.House()
		if err != nil {
			return err
		}
		var removed []string
		h.Types = slices.DeleteFunc(h.Types, func(t inventory.HouseType) bool {
			name := types.Fold(t.Claim.Trait(screening.TraitType))
			mine := name == types.Fold(word) || name+types.Fold(t.Claim.Trait(screening.TraitGroup)) == types.Fold(word)
			if mine = mine && (kind == "" || kind == t.Kind); mine {
				removed = append(removed, string(t.Kind)+" "+typeName(t.Claim))
			}
			return mine
		})
		switch {
		case len(removed) == 0 && len(types.Builtin().KindsOf(word)) > 0:
			return request(fmt.Errorf("%q is built in; only rows of your own are removed", word), "goodbin types add FILE.csv can overrule its figures")
		case len(removed) == 0:
			return request(fmt.Errorf("%q is no type of your own", word), "goodbin types list house")
		}
		if err := w.PutHouse(h, clean("removed "+strings.Join(removed, ", "))); err != nil {
			return err
		}
		if err := a.env.line("removed %s", strings.Join(removed, ", ")); err != nil {
			return err
		}
		return a.tellStale(w, h)
	})
}
