package cli

import (
	"fmt"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/screening"
)

const stockExamples = `  goodbin stock                        what can be used
  goodbin stock electrolytic 35V       every word must match: kind, claim, place, id, reason
  goodbin stock --all --verdict treat  parts waiting for treatment
  goodbin stock 12-                    the parts of lot 12
  goodbin stock --json | jq .          for scripts`

type stockFlags struct {
	all      bool
	kind     string
	verdicts []string
	place    string
	order    string
	limit    int
}

func (a *app) stockCommand() *cobra.Command {
	var f stockFlags
	cmd := &cobra.Command{
		Use:     "stock [FILTER...]",
		Short:   "find parts that can be used: accepted or regraded, and still there",
		Example: stockExamples,
		RunE:    func(cmd *cobra.Command, args []string) error { return a.stock(cmd, args, f) },
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return a.kindNames(), cobra.ShellCompDirectiveNoFileComp
		},
	}
	flags := cmd.Flags()
	flags.BoolVar(&a.json, "json", false, "print JSON")
	flags.BoolVar(&f.all, "all", false, "every part kept, with its state")
	flags.StringVar(&f.kind, "kind", "", "only parts of a `KIND`")
	flags.StringSliceVar(&f.verdicts, "verdict", nil, "only these `VERDICTS`, whatever their state: accept, regrade, treat, undecided, barred, reject")
	flags.StringVar(&f.place, "place", "", "only parts in a `PLACE` that begins so")
	flags.StringVar(&f.order, "by", "usable", "`ORDER`: usable, id or place")
	flags.IntVar(&f.limit, "limit", 0, "at most `N` parts; 0 is all")
	return cmd
}

// query turns words and flags into what the workbook is asked.
func (a *app) query(words []string, f stockFlags) (inventory.Query, error) {
	q := inventory.Query{Words: words, Usable: !f.all && len(f.verdicts) == 0, Place: f.place, Limit: f.limit}
	switch f.order {
	case "usable":
	case "id":
		q.Order = inventory.ByID
	case "place":
		q.Order = inventory.ByPlace
	default:
		return q, request(fmt.Errorf("--by %q is no order", f.order), "it is usable, id or place")
	}
	if f.limit < 0 {
		return q, request(fmt.Errorf("--limit %d is below zero", f.limit), "")
	}
	if f.kind != "" {
		book, err := a.book(f.kind)
		if err != nil {
			return q, err
		}
		q.Kinds = []screening.Kind{book.Kind}
	}
	for _, name := range f.verdicts {
		v, ok := screening.VerdictNamed(name)
		if !ok {
			return q, request(fmt.Errorf("--verdict %q is no verdict", name), "the verdicts are accept, regrade, treat, undecided, barred and reject")
		}
		q.Verdicts = append(q.Verdicts, v)
	}
	return q, nil
}

func (a *app) stock(cmd *cobra.Command, words []string, f stockFlags) error {
	q, err := a.query(words, f)
	if err != nil {
		return err
	}
	var page inventory.Page
	err = a.withWorkbook(cmd.Context(), true, func(w *inventory.Workbook) error {
		page, err = w.Find(q)
		return err
	})
	if err != nil {
		return err
	}
	if a.json {
		err = a.writeJSON(stockJSON(page))
	} else if len(page.Rows) > 0 {
		err = a.printStock(page)
	}
	switch {
	case err != nil:
		return err
	case len(page.Rows) == 0:
		if kept := page.Counts.All(); kept > 0 {
			a.env.note("goodbin: nothing usable matches; %s", countsText(kept, 0, page.Counts.Of))
		} else {
			a.env.note("goodbin: nothing matches")
		}
		return silent(ExitNotAccepted)
	}
	return nil
}

func (a *app) printStock(page inventory.Page) error {
	var rows [][]string
	if a.env.OutTerminal {
		rows = append(rows, []string{"id", "verdict", "part", "held as", "left", "place", "not tested"})
	}
	for _, r := range page.Rows {
		verdict := r.Verdict.String()
		if r.Grade != screening.AnyGrade {
			verdict += ", " + r.Grade.String()
		}
		if r.Stale {
			verdict += " (stale)"
		}
		last := r.NotTested
		if !r.Verdict.Usable() {
			last = r.Why
		}
		rows = append(rows, []string{r.ID.String(), verdict, string(r.Kind) + " " + r.Title, r.As, leftText(r), r.Place, last})
	}
	if err := a.env.table(rows); err != nil {
		return err
	}
	if len(page.Rows) < page.Total {
		a.env.note("goodbin: %d of %d shown", len(page.Rows), page.Total)
	}
	return nil
}

func leftText(r inventory.Row) string {
	if r.Count.Level == inventory.Unknown {
		return "unknown"
	}
	return inventory.Count{N: r.Left, Level: r.Count.Level}.String()
}

type jsonStockRow struct {
	ID        string  `json:"id"`
	Lot       uint32  `json:"lot"`
	Part      uint32  `json:"part"`
	Kind      string  `json:"kind"`
	Title     string  `json:"title"`
	Verdict   *string `json:"verdict"`
	Grade     *string `json:"grade"`
	HeldAs    *string `json:"held_as"`
	Place     *string `json:"place"`
	Why       *string `json:"why"`
	NotTested *string `json:"not_tested"`
	Count     *int    `json:"count"`
	Left      *int    `json:"left"`
	CountIs   string  `json:"count_is"`
	Stale     bool    `json:"stale"`
}

type jsonStock struct {
	Schema int            `json:"schema"`
	Total  int            `json:"total"`
	Counts map[string]int `json:"counts"`
	Parts  []jsonStockRow `json:"parts"`
}

func stockJSON(page inventory.Page) jsonStock {
	out := jsonStock{Schema: schema, Total: page.Total, Counts: map[string]int{}, Parts: []jsonStockRow{}}
	for _, v := range screening.Verdicts() {
		out.Counts[v.String()] = page.Counts.Of(v)
	}
	for _, r := range page.Rows {
		row := jsonStockRow{
			ID: r.ID.String(), Lot: r.ID.Lot, Part: r.ID.Number, Kind: string(r.Kind), Title: r.Title, Verdict: text(r.Verdict.String()),
			Grade: text(r.Grade.String()), HeldAs: text(r.As), Place: text(r.Place), Why: text(r.Why), NotTested: text(r.NotTested),
			CountIs: r.Count.Level.String(), Stale: r.Stale,
		}
		if r.Count.Level != inventory.Unknown {
			row.Count, row.Left = &r.Count.N, &r.Left
		}
		out.Parts = append(out.Parts, row)
	}
	return out
}
