package booktest

import (
	"encoding/csv"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// Figures holds an embedded table to a second transcription of its figures from the page of sources: one line a row, the named columns
// separated by blanks, "-" for an empty cell. What it catches is a slip of the pen in either.
func Figures(t testing.TB, table, want string, columns ...string) {
	t.Helper()
	r := csv.NewReader(strings.NewReader(table))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var at []int
	for _, c := range columns {
		i := slices.Index(rows[0], c)
		if i < 0 {
			t.Fatalf("there is no column %s", c)
		}
		at = append(at, i)
	}
	var got []string
	for _, row := range rows[1:] {
		var cells []string
		for _, i := range at {
			cells = append(cells, strings.ReplaceAll(row[i], " ", "-"))
			if row[i] == "" {
				cells[len(cells)-1] = "-"
			}
		}
		got = append(got, strings.Join(cells, " "))
	}
	if diff := cmp.Diff(strings.Split(strings.TrimSpace(want), "\n"), got); diff != "" {
		t.Errorf("the table differs from its sources (-sources +table):\n%s", diff)
	}
}
