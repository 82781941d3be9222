package cli

import (
	"context"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/rules"
	"goodbin/rules/family"
	"goodbin/screening/entry"
)

const familiesExamples = `  goodbin families                     part families that are refused whatever they read, and those kept whatever their age
  goodbin families relay               of one kind; every word must match
  goodbin families add list.csv        what your group never keeps, and what it always keeps
  goodbin families export > list.csv   your group's list, to be read again
  goodbin families remove no-paper     takes a row of yours away`

const familiesAddExamples = `  goodbin families add list.csv
  goodbin families add - < list.csv    from standard input

  id,kinds,list,types,traits,before,undated,roles,dispose,reason,do
  no-carbon-film,resistor,never-keep,,technology=carbon-film,1970,yes,,scrap,cheaper new than our time,
  no-coupling-mica,mica,never-keep,,,,,coupling,,noisy ones fooled us twice,
  our-ac128,bipolar,always-keep,AC128|AC176,,,,,,the club's radios need them,

One row a family; id, kinds, list and reason must be there, any other column may be missing. kinds, roles and types take several with bars
between; in types ? is a digit and * anything, and letters may follow. traits is TRAIT=TEXT|TEXT; TRAIT=TEXT, all must be met. before is the
first day of making that is no longer meant (1979-07-02, 1979-07 or 1979); undated=yes counts a part without a date as made before. roles
refuses only in these positions. dispose is scrap, hazardous or exhibit; do says what to do instead.
always-keep goes before your group's never-keep. It lifts nothing of the built-in table. A row takes the place of an earlier one of the same
id. Every row is checked; one that is wrong keeps the whole file out.`

func (a *app) familiesCommand() *cobra.Command {
	cmd := &cobra.Command{
		Use:     "families [WORD...]",
		Short:   "list part families that are refused or kept for what they are, and add your group's own",
		Example: familiesExamples,
		Args:    cobra.ArbitraryArgs,
		RunE:    func(_ *cobra.Command, words []string) error { return a.listFamilies(words) },
	}
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON, one family a line; null where open or absent")
	cmd.AddCommand(a.familiesAddCommand(), a.familiesRemoveCommand(), a.familiesExportCommand())
	return cmd
}

// families are the built-in families and the workbook's own.
func (a *app) families() ([]family.Family, error) {
	own, err := a.ownFamilies(a.house)
	return append(family.Builtin(), own...), err
}

const ownList = "your group's list of families"

func (a *app) ownFamilies(h inventory.House) ([]family.Family, error) {
	if h.Families == "" {
		return nil, nil
	}
	return family.ReadHouse(ownList, h.Families, rules.All())
}

func (a *app) familiesAddCommand() *cobra.Command {
	return &cobra.Command{
		Use: "add FILE.csv", Short: "add what your group never keeps, and what it always keeps", Example: familiesAddExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) != 1 {
				return request(errors.New("name one CSV file"), "goodbin families add list.csv; - is standard input")
			}
			return a.keptBeyondDemo()
		},
		RunE: func(cmd *cobra.Command, args []string) error { return a.addFamilies(cmd.Context(), args[0]) },
	}
}

func (a *app) addFamilies(ctx context.Context, path string) error {
	name := displayName(path)
	text, err := a.readFamilies(ctx, path)
	if err != nil {
		return err
	}
	added, err := family.ReadHouse(name, text, rules.All())
	if err != nil {
		return a.refuseFamilies(name, err)
	}
	return a.withWorkbook(ctx, false, func(w *inventory.Workbook) error {
		h, err := w.House()
		if err != nil {
			return err
		}
		own, err := a.ownFamilies(h)
		if err != nil {
			return request(err, "goodbin families export writes the list; mend it, goodbin families remove its rows, and add it again")
		}
		replaced := 0
		for _, f := range added {
			if i := slices.IndexFunc(own, func(o family.Family) bool { return o.ID == f.ID }); i >= 0 {
				own[i] = f
				replaced++
			} else {
				own = append(own, f)
			}
		}
		if err := a.putFamilies(w, h, own, fmt.Sprintf("added %d families from %s", len(added), name)); err != nil {
			return err
		}
		return a.tellAdded(added, replaced)
	})
}

// readFamilies reads a file whole; one that is larger than any list of families is refused.
func (a *app) readFamilies(ctx context.Context, path string) (string, error) {
	in := io.Reader(nil)
	if path == "-" {
		in = interruptible(ctx, a.env.In)
	} else {
		f, err := openRegular(path)
		if err != nil {
			return "", request(err, "")
		}
		defer f.Close()
		in = f
	}
	text, err := io.ReadAll(io.LimitReader(in, family.MaxHouseBytes+1))
	if err != nil {
		return "", request(fmt.Errorf("%s: %w", displayName(path), err), "")
	}
	return string(text), nil
}

// refuseFamilies prints what is wrong with a file, a line each.
func (a *app) refuseFamilies(name string, err error) error {
	lines := strings.Split(err.Error(), "\n")
	for _, l := range lines[:min(len(lines), maxShownErrors)] {
		a.env.note("goodbin: %s", l)
	}
	if more := len(lines) - maxShownErrors; more > 0 {
		a.env.note("goodbin: %s: %d more errors", name, more)
	}
	a.env.note("goodbin: %s: nothing was added", name)
	a.env.note("goodbin: hint: goodbin families add --help shows a file")
	return silent(ExitRequest)
}

// putFamilies keeps the group's list and makes the rulebooks anew.
func (a *app) putFamilies(w *inventory.Workbook, h inventory.House, own []family.Family, action string) error {
	h.Families = ""
	if len(own) > 0 {
		var b strings.Builder
		if err := family.WriteHouse(&b, own); err != nil {
			return err
		}
		h.Families = b.String()
	}
	if err := w.PutHouse(h, clean(action)); err != nil {
		return err
	}
	return a.tellStale(w, h)
}

// tellAdded says what was added, and what an always-keep row does not lift.
func (a *app) tellAdded(added []family.Family, replaced int) error {
	text := fmt.Sprintf("added %d of your group's families", len(added))
	if replaced > 0 {
		text += fmt.Sprintf(", %d of them in the place of an earlier row", replaced)
	}
	if err := a.env.line("%s", text); err != nil {
		return err
	}
	for i := range added {
		f := &added[i]
		line := f.List.String() + " " + f.ID
		var still []string
		for _, s := range family.StillBarred(*f) {
			still = append(still, s.ID)
		}
		if len(still) > 0 {
			line += ": it does not lift what is always refused: " + strings.Join(still, ", ")
		}
		if err := a.env.wrapped("  ", line); err != nil {
			return err
		}
	}
	return nil
}

func (a *app) familiesRemoveCommand() *cobra.Command {
	return &cobra.Command{
		Use: "remove ID...", Short: "take rows of your group's list away", Example: familiesExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) == 0 {
				return request(errors.New("name the family by its id"), "goodbin families remove no-paper")
			}
			return a.keptBeyondDemo()
		},
		RunE: func(cmd *cobra.Command, args []string) error { return a.removeFamilies(cmd.Context(), args) },
	}
}

func (a *app) removeFamilies(ctx context.Context, ids []string) error {
	return a.withWorkbook(ctx, false, func(w *inventory.Workbook) error {
		h, err := w.House()
		if err != nil {
			return err
		}
		own, err := a.ownFamilies(h)
		if err != nil {
			return request(err, "")
		}
		var names []string
		for _, f := range own {
			names = append(names, f.ID)
		}
		for _, id := range ids {
			id = strings.ToLower(id)
			i := slices.IndexFunc(own, func(f family.Family) bool { return f.ID == id })
			switch {
			case i >= 0:
				own = slices.Delete(own, i, i+1)
			case slices.ContainsFunc(family.Builtin(), func(f family.Family) bool { return f.ID == id }):
				return request(fmt.Errorf("%q is built in and stays; only rows of your group's list are removed", id), "")
			default:
				hint := "goodbin families lists them"
				if near := entry.Nearest(id, names); near != nil {
					hint = "did you mean " + strings.Join(near, " or ") + "?"
				}
				return request(fmt.Errorf("%q is no family of your group's list", id), hint)
			}
		}
		text := "removed " + strings.Join(ids, ", ")
		if err := a.putFamilies(w, h, own, text); err != nil {
			return err
		}
		return a.env.line("%s", text)
	})
}

func (a *app) familiesExportCommand() *cobra.Command {
	out := ""
	cmd := &cobra.Command{
		Use: "export", Short: "write your group's list as CSV, which families add reads again", Args: noArguments, Example: familiesExamples,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return a.withWorkbook(cmd.Context(), true, func(w *inventory.Workbook) error {
				h, err := w.House()
				if err != nil {
					return err
				}
				text := h.Families
				if text == "" {
					text = strings.Join(family.HouseColumns[:], ",") + "\n"
				}
				return a.toFile(out, w.Path(), func(to io.Writer) error {
					_, err := io.WriteString(to, text)
					return err
				})
			})
		},
	}
	cmd.Flags().StringVarP(&out, "output", "o", "", "write to `FILE` instead of standard output")
	return cmd
}
