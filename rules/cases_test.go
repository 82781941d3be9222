package rules_test

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"goodbin/rules"
	"goodbin/screening"
)

// kindCases is what testdata/kinds holds of one kind: a line each, as typed on the command line.
type kindCases struct {
	sample   []string           // claims that together reach every table
	measured []string           // parts whose readings make the rules across readings add limits of their own
	grid     []string           // claims that reach every row of every table
	meets    []screening.Status // statuses that the tables hold, so that the law of weak figures is not kept by meeting nothing
	verdicts map[screening.Verdict][]verdictCase
}

// verdictCase is a part that gets a verdict, or why no part of the kind does; words is then "".
type verdictCase struct{ words, why string }

// never lists the verdicts that the kind does not give.
func (c kindCases) never() []screening.Verdict {
	var all []screening.Verdict
	for _, v := range screening.Verdicts() {
		if slices.ContainsFunc(c.verdicts[v], func(k verdictCase) bool { return k.words == "" }) {
			all = append(all, v)
		}
	}
	return all
}

// casesOf reads what testdata/kinds holds of a kind.
func casesOf(t *testing.T, kind screening.Kind) kindCases {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", "kinds", string(kind)+".csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil || !slices.Equal(rows[0], []string{"use", "words", "why"}) {
		t.Fatalf("%s: want a CSV with the columns use, words, why; %v", kind, err)
	}
	cases := kindCases{verdicts: map[screening.Verdict][]verdictCase{}}
	for i, row := range rows[1:] {
		use, words, why := row[0], row[1], row[2]
		verdict, isVerdict := screening.VerdictNamed(use)
		switch {
		case isVerdict && (words == "") == (why == ""):
			t.Errorf("%s row %d: either a part that gets %s, or why none does", kind, i+2, use)
		case isVerdict:
			cases.verdicts[verdict] = append(cases.verdicts[verdict], verdictCase{words, why})
		case use == "sample":
			cases.sample = append(cases.sample, words)
		case use == "measured":
			cases.measured = append(cases.measured, words)
		case use == "grid":
			cases.grid = append(cases.grid, spread(words)...)
		case use == "meets":
			status, known := screening.StatusNamed(words)
			if !known {
				t.Errorf("%s row %d: there is no status %q", kind, i+2, words)
			}
			cases.meets = append(cases.meets, status)
		default:
			t.Errorf("%s row %d: use %q is not known", kind, i+2, use)
		}
	}
	return cases
}

// spread writes out the alternatives of a line: "{a|b} c" is "a c" and "b c".
func spread(line string) []string {
	before, rest, open := strings.Cut(line, "{")
	inside, after, closed := strings.Cut(rest, "}")
	if !open || !closed {
		return []string{line}
	}
	var all []string
	for alternative := range strings.SplitSeq(inside, "|") {
		all = append(all, spread(before+alternative+after)...)
	}
	return all
}

func TestEveryFileOfCasesBelongsToAKind(t *testing.T) {
	files, err := filepath.Glob("testdata/kinds/*.csv")
	if err != nil || len(files) == 0 {
		t.Fatal(files, err)
	}
	for _, name := range files {
		kind := screening.Kind(strings.TrimSuffix(filepath.Base(name), ".csv"))
		if _, ok := rules.All().Find(kind); !ok {
			t.Errorf("%s: there is no kind %s", name, kind)
		}
	}
}

// Whoever is asked for a reading is told how to take it.
func TestEveryRequiredReadingHasARecipe(t *testing.T) {
	for _, b := range rules.All() {
		for _, words := range casesOf(t, b.Kind).sample {
			j := judged(t, b, words)
			for i := range j.Findings {
				f := &j.Findings[i]
				if f.Need != screening.Required || f.Limit.Evidence == screening.ByRating {
					continue
				}
				if b.Recipes == nil || len(b.Recipes(j.Part, f.Limit)) == 0 {
					t.Errorf("%s %s: no recipe for %s %s", b.Kind, words, f.Limit.On, f.Limit.Section)
				}
			}
		}
	}
}
