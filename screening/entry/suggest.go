package entry

import (
	"cmp"
	"slices"
	"strings"

	"goodbin/screening"
)

// suggestions is how many nearest names an error offers.
const suggestions = 3

// Nearest returns up to three of the names that lie nearest to a mistyped one, best first: those that begin with it, and those within a
// third of its length in edits. It returns nil where none is near.
func Nearest(word string, names []string) []string {
	word = strings.ToLower(clip(word))
	type near struct {
		name     string
		distance int
	}
	var found []near
	for _, n := range names {
		low := strings.ToLower(n)
		d := editDistance(word, low)
		switch {
		case len(word) >= 2 && strings.HasPrefix(low, word):
			d = 0
		case d > max(1, len(word)/3):
			continue
		}
		if !slices.ContainsFunc(found, func(f near) bool { return f.name == n }) {
			found = append(found, near{n, d})
		}
	}
	slices.SortStableFunc(found, func(a, b near) int { return cmp.Compare(a.distance, b.distance) })
	var best []string
	for _, f := range found[:min(len(found), suggestions)] {
		best = append(best, f.name)
	}
	return best
}

// editDistance counts the insertions, deletions, replacements and swaps of neighbours between two short words (optimal string alignment).
func editDistance(a, b string) int {
	before, last, row := make([]int, len(b)+1), make([]int, len(b)+1), make([]int, len(b)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			row[j] = min(last[j]+1, row[j-1]+1, last[j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, last, row = last, row, before
	}
	return last[len(b)]
}

// orList writes names as "a, b or c".
func orList(names []string) string {
	switch len(names) {
	case 0:
		return ""
	case 1:
		return names[0]
	}
	return strings.Join(names[:len(names)-1], ", ") + " or " + names[len(names)-1]
}

// benchNames lists what a kind measures.
func benchNames(book *screening.Rulebook) []string { return fieldNames(book.Bench) }

// claimNames lists what a kind claims.
func claimNames(book *screening.Rulebook) []string { return fieldNames(book.Claims) }

func fieldNames(fields []screening.Field) []string {
	names := make([]string, len(fields))
	for i := range fields {
		names[i] = string(fields[i].Name)
	}
	return names
}
