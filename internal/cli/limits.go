package cli

import (
	"errors"
	"fmt"
	"slices"

	"github.com/spf13/cobra"

	"goodbin/screening"
	"goodbin/screening/entry"
)

const limitsExamples = `  goodbin limits electrolytic 2200uF 35V M
  goodbin limits zener BZX79-C5V1
  goodbin limits electrolytic 20uF 450V 1962 --all      where published limits disagree: every set side by side`

func (a *app) limitsCommand() *cobra.Command {
	cmd := &cobra.Command{
		Use:               "limits KIND WORD...",
		Short:             "list every limit for what a part claims, with formula and source",
		Example:           limitsExamples,
		Args:              a.kindArgs,
		ValidArgsFunction: a.completeWords,
		RunE:              func(_ *cobra.Command, args []string) error { return a.limits(args[0], args[1:]) },
	}
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON: SI units, null where open or absent")
	cmd.Flags().BoolVar(&a.all, "all", false, "also the limit sets that are not in use for this claim, and limits that only roles ask")
	return cmd
}

func (a *app) limits(kind string, words []string) error {
	book, err := a.book(kind)
	if err != nil {
		return err
	}
	parsed, err := entry.Words(book, words)
	if err != nil {
		return err
	}
	claim, notes, err := complete(book, parsed.Claim)
	if err != nil {
		return request(err, "")
	}
	limits, err := book.Limits(claim)
	if err != nil {
		return request(err, "")
	}
	var shown []screening.Limit
	for _, l := range limits {
		if a.all || l.InUse && l.Need != screening.RoleOnly {
			shown = append(shown, l)
		}
	}
	if a.json {
		return a.writeJSON(limitsJSON(book, claim, shown))
	}
	if err := a.printLimits(book, parsed.Claim, claim, notes, shown); err != nil {
		return err
	}
	if len(shown) == 0 {
		return silent(ExitNotAccepted)
	}
	if hidden := len(limits) - len(shown); hidden > 0 {
		a.env.note("goodbin: %d more limits of other sets: --all shows them", hidden)
	}
	return nil
}

// complete adds to a claim what it implies, and refuses one that lacks what nothing can be judged without.
func complete(book *screening.Rulebook, claim screening.Claim) (screening.Claim, []screening.Reason, error) {
	var notes []screening.Reason
	if book.Complete != nil {
		var err error
		if claim, notes, err = book.Complete(claim); err != nil {
			return claim, nil, err
		}
	}
	if book.Bars != nil && len(book.Bars(claim)) > 0 { // what bars a part needs no rating that nobody can read any more
		return claim, notes, nil
	}
	if book.Limits == nil {
		return claim, nil, errors.New("no limits are known for this kind")
	}
	for _, f := range book.Claims {
		if !f.Required {
			continue
		}
		claimed := claim.Trait(string(f.Name)) != ""
		if !f.Trait {
			_, claimed = claim.Rating(f.Name, claim.Sections()[0])
		}
		if !claimed {
			return claim, nil, fmt.Errorf("%s: none is claimed; type it as printed, such as %s", f.Name, f.Example)
		}
	}
	return claim, notes, nil
}

func limitsJSON(book *screening.Rulebook, claim screening.Claim, limits []screening.Limit) jsonLimits {
	out := jsonLimits{Schema: schema, Kind: string(book.Kind), Claim: claimJSON(claim), Tables: book.Tables, Limits: []jsonLimit{}}
	for i := range limits {
		out.Limits = append(out.Limits, limitJSON(&limits[i]))
	}
	return out
}

func (a *app) printLimits(book *screening.Rulebook, typed, claim screening.Claim, notes []screening.Reason, limits []screening.Limit) error {
	e := a.env
	if err := e.strong(book.Label + ": " + typed.String()); err != nil {
		return err
	}
	if err := a.printImplied(book, typed, claim); err != nil {
		return err
	}
	for _, n := range notes {
		if err := e.wrapped("note  ", n.Text); err != nil {
			return err
		}
	}
	for i := range limits {
		if err := a.printLimit(book, &limits[i]); err != nil {
			return err
		}
	}
	return nil
}

// printImplied prints what the claim implies beyond what was typed: the type table's row, the default tolerance.
func (a *app) printImplied(book *screening.Rulebook, typed, claim screening.Claim) error {
	for _, r := range claim.Ratings {
		if slices.ContainsFunc(typed.Ratings, func(t screening.Rating) bool {
			return t.Of == r.Of && t.Section == r.Section && t.At == r.At
		}) {
			continue
		}
		text := book.Definition(r.Of).Label + " " + r.String()
		if !r.At.IsZero() {
			text += " at " + r.At.String()
		}
		if r.Source.Status != screening.NoStatus {
			text += "; " + r.Source.String()
		}
		if err := a.env.wrapped("so    ", text); err != nil {
			return err
		}
	}
	return nil
}

func (a *app) printLimit(book *screening.Rulebook, l *screening.Limit) error {
	e := a.env
	name := book.Definition(l.On).Label
	if l.Section != "" {
		name += " of section " + l.Section
	}
	use := l.Need.String()
	if !l.InUse {
		use = "not in use"
	}
	head := fmt.Sprintf("%s: %s  (%s", name, screening.Allowed(*l), use)
	for _, more := range []string{l.Grade.String(), string(l.Set)} {
		if more != "" {
			head += ", " + more
		}
	}
	if err := e.wrapped("", head+")"); err != nil {
		return err
	}
	for _, row := range []struct{ label, text string }{
		{"    formula  ", l.FormulaText()},
		{"    source   ", l.Source.String()},
		{"    note     ", l.Note},
		{"    treat    ", treatText(l)},
	} {
		if row.text == "" {
			continue
		}
		if err := e.wrapped(row.label, row.text); err != nil {
			return err
		}
	}
	return nil
}

func treatText(l *screening.Limit) string {
	switch {
	case l.TreatHigh != "" && l.TreatLow != "" && l.TreatHigh != l.TreatLow:
		return "too high: " + string(l.TreatHigh) + "; too low: " + string(l.TreatLow)
	case l.TreatHigh != "":
		return "too high: " + string(l.TreatHigh)
	case l.TreatLow != "":
		return "too low: " + string(l.TreatLow)
	}
	return ""
}
