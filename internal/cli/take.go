package cli

import (
	"errors"
	"fmt"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/inventory"
)

const takeExamples = `  goodbin take 12-07                   one part out of the box
  goodbin take 12 3 --note "receiver"  three of lot 12
  goodbin return 12 1
  goodbin recount 12 about 40          or a number, or unknown
  goodbin history 12-07
  goodbin undo`

// stockCommands are the commands that change or tell what the Stock page does.
func (a *app) stockCommands() []*cobra.Command {
	return []*cobra.Command{
		a.moveCommand("take", "take a part, or some of a lot, out of the box", (*inventory.Workbook).Take),
		a.moveCommand("return", "put a part, or some of a lot, back", (*inventory.Workbook).Return),
		a.recountCommand(), a.historyCommand(),
		a.undoCommand("undo", "take the last action back", "took back", (*inventory.Workbook).Undo),
		a.undoCommand("redo", "do again what undo took back", "did again", (*inventory.Workbook).Redo),
	}
}

func (a *app) moveCommand(name, short string, move func(*inventory.Workbook, inventory.ID, int, string) error) *cobra.Command {
	note := ""
	cmd := &cobra.Command{
		Use: name + " ID [N]", Short: short, Example: takeExamples,
		RunE: func(cmd *cobra.Command, args []string) error {
			id, rest, err := idArgument(args, name+" 12-07")
			if err != nil {
				return err
			}
			n := 1
			if len(rest) > 0 {
				if n, err = strconv.Atoi(rest[0]); err != nil || n < 1 || len(rest) > 1 {
					return request(fmt.Errorf("%q is no number of parts", strings.Join(rest, " ")), "goodbin "+name+" 12 3")
				}
			}
			return a.withWorkbook(cmd.Context(), false, func(w *inventory.Workbook) error {
				if err := move(w, id, n, clean(note)); err != nil {
					return err
				}
				return a.env.line("%s %s: %d", name, id, n)
			})
		},
	}
	cmd.Flags().StringVar(&note, "note", "", "what for: `TEXT`")
	return cmd
}

// idArgument reads the id that comes first.
func idArgument(args []string, example string) (inventory.ID, []string, error) {
	if len(args) == 0 {
		return inventory.ID{}, nil, request(errors.New("name the part or lot by its id"), "goodbin "+example)
	}
	id, err := inventory.ParseID(args[0])
	if err != nil {
		return id, nil, request(err, "goodbin "+example)
	}
	return id, args[1:], nil
}

func (a *app) recountCommand() *cobra.Command {
	return &cobra.Command{
		Use: "recount ID COUNT", Short: "say how many there are now: 12, about 40, unknown", Example: takeExamples,
		RunE: func(cmd *cobra.Command, args []string) error {
			id, rest, err := idArgument(args, "recount 12 about 40")
			if err != nil {
				return err
			}
			count, err := countOf(rest)
			if err != nil {
				return err
			}
			return a.withWorkbook(cmd.Context(), false, func(w *inventory.Workbook) error {
				if err := w.Recount(id, count); err != nil {
					return err
				}
				return a.env.line("recount %s: %s", id, count)
			})
		},
	}
}

// countOf reads "12", "about 40" or "unknown".
func countOf(words []string) (inventory.Count, error) {
	words = strings.Fields(strings.Join(words, " ")) // "about 40" may come as one word
	count := inventory.Count{Level: inventory.Exact}
	if len(words) == 1 && strings.EqualFold(words[0], "unknown") {
		return inventory.Count{Level: inventory.Unknown}, nil
	}
	if len(words) == 2 && strings.EqualFold(words[0], "about") {
		count.Level, words = inventory.About, words[1:]
	}
	var err error
	if len(words) == 1 {
		count.N, err = strconv.Atoi(words[0])
	}
	if len(words) != 1 || err != nil || count.N < 0 {
		return count, request(fmt.Errorf("%q is no count", strings.Join(words, " ")), "a count is 12, about 40, or unknown")
	}
	return count, nil
}

func (a *app) historyCommand() *cobra.Command {
	return &cobra.Command{
		Use: "history ID", Short: "tell what was done with a part or lot, the oldest first", Example: takeExamples,
		RunE: func(cmd *cobra.Command, args []string) error {
			id, rest, err := idArgument(args, "history 12-07")
			if err == nil && len(rest) > 0 {
				err = request(errors.New("one id at a time"), "goodbin history 12-07")
			}
			if err != nil {
				return err
			}
			return a.withWorkbook(cmd.Context(), true, func(w *inventory.Workbook) error {
				events, err := w.History(id)
				if err != nil {
					return err
				}
				rows := make([][]string, 0, len(events))
				for _, e := range events {
					rows = append(rows, []string{e.At.Format("2006-01-02 15:04"), e.Action, e.Text})
				}
				if len(rows) == 0 {
					return silent(ExitNotAccepted)
				}
				return a.env.table(rows)
			})
		},
	}
}

func (a *app) undoCommand(name, short, said string, do func(*inventory.Workbook) (inventory.Done, error)) *cobra.Command {
	return &cobra.Command{
		Use: name, Short: short, Args: noArguments, Example: takeExamples,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return a.withWorkbook(cmd.Context(), false, func(w *inventory.Workbook) error {
				done, err := do(w)
				if errors.Is(err, inventory.ErrNoUndo) {
					a.env.note("goodbin: %s", err)
					return silent(ExitNotAccepted)
				}
				if err != nil {
					return err
				}
				return a.env.line("%s %s", said, done)
			})
		},
	}
}
