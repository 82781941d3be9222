package cli

import (
	"strings"

	"github.com/spf13/cobra"

	"goodbin/screening"
)

// completeWords completes the kind, then the names of readings and claims, the bare words, and the type numbers that the kind knows.
func (a *app) completeWords(_ *cobra.Command, args []string, typing string) ([]string, cobra.ShellCompDirective) {
	if len(args) == 0 {
		var kinds []string
		for _, b := range a.books {
			kinds = append(kinds, string(b.Kind)+"\t"+b.Label)
		}
		return kinds, cobra.ShellCompDirectiveNoFileComp
	}
	book, ok := a.books.Find(screening.Kind(args[0]))
	if !ok || strings.Contains(typing, "=") {
		return nil, cobra.ShellCompDirectiveNoFileComp
	}
	var words []string
	for _, f := range book.Bench {
		words = append(words, string(f.Name)+"=\t"+f.Label)
	}
	for _, f := range book.Claims {
		if !f.Trait {
			words = append(words, "rated:"+string(f.Name)+"=\t"+f.Label)
			continue
		}
		words = append(words, string(f.Name)+"=\t"+f.Label)
		for _, w := range f.Words {
			words = append(words, w.Word+"\t"+f.Label)
		}
	}
	words = append(words, "seen=\twhat was found by eye")
	for _, name := range a.types.Names(book.Kind) {
		words = append(words, name+"\ttype number")
	}
	var fitting []string
	for _, w := range words {
		if strings.HasPrefix(strings.ToLower(w), strings.ToLower(typing)) {
			fitting = append(fitting, w)
		}
	}
	return fitting, cobra.ShellCompDirectiveNoFileComp | cobra.ShellCompDirectiveNoSpace
}
