// Package booktest serves the tests of the rulebooks: it judges parts from the words that a person types, collects all that a judgement
// says, and reads the reference tables.
package booktest

import (
	"encoding/csv"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"goodbin/screening"
	"goodbin/screening/entry"
)

// Part reads a part of a rulebook's kind from words as typed: claim, what was seen, readings, treatments.
func Part(t testing.TB, book *screening.Rulebook, words string) screening.Part {
	t.Helper()
	p, err := entry.Words(book, strings.Fields(words))
	if err != nil {
		t.Fatalf("%s: %v", words, err)
	}
	return screening.Part{Claim: p.Claim, Look: p.Look, Readings: p.Readings, Treated: p.Treated}
}

// Judge judges a part from words as typed.
func Judge(t testing.TB, book *screening.Rulebook, words string, policy screening.Policy) screening.Judgement {
	t.Helper()
	return JudgePart(t, book, Part(t, book, words), policy)
}

// JudgePart judges a part.
func JudgePart(t testing.TB, book *screening.Rulebook, part screening.Part, policy screening.Policy) screening.Judgement {
	t.Helper()
	j, err := screening.Judge(book, part, policy)
	if err != nil {
		t.Fatal(err)
	}
	return j
}

// Exactly is simple acceptance with an exact meter: how published boundary cases are tested.
func Exactly() screening.Policy {
	p := screening.DefaultPolicy()
	p.Rule = screening.SimpleAcceptance
	p.Meters = map[string]screening.Meter{"": screening.ExactMeter()}
	return p
}

// Texts is all that a judgement says, a line each, after its code: reasons, next steps, what is untested.
func Texts(j screening.Judgement) string {
	var b strings.Builder
	for _, r := range j.Reasons {
		b.WriteString(r.Code + ": " + r.Text + "\n")
	}
	for _, s := range j.Next {
		b.WriteString(s.Code + ": " + s.Text + "\n")
	}
	for _, u := range j.Untested {
		b.WriteString("untested: " + u + "\n")
	}
	return b.String()
}

// As is the text of the lesser claim that a judgement names, "" where it names none.
func As(j screening.Judgement) string {
	if j.RegradedAs == nil {
		return ""
	}
	return j.RegradedAs.Text
}

// NotSoAs reports whether a judgement names another lesser claim than wanted: want is part of its text, or "" for none at all.
func NotSoAs(j screening.Judgement, want string) bool {
	as := As(j)
	return want == "" && as != "" || !strings.Contains(as, want)
}

// Case judges one part from words as typed and holds it against the verdict wanted, the lesser claim that it names ("" for none at all) and a
// text that it says; given counts the verdict for [EveryVerdict].
func Case(t *testing.T, book *screening.Rulebook, given map[screening.Verdict]int, name, words string, want screening.Verdict, as, says string) {
	t.Helper()
	t.Run(name, func(t *testing.T) {
		j := Judge(t, book, words, screening.DefaultPolicy())
		given[j.Verdict]++
		if text := Texts(j); j.Verdict != want || !strings.Contains(text, says) || NotSoAs(j, as) {
			t.Errorf("%s: %s as %q, want %s as %q, saying %q\n%s", words, j.Verdict, As(j), want, as, says, text)
		}
	})
}

// Refuses holds that words as typed, or the claim that they make, are refused with a text.
func Refuses(t testing.TB, book *screening.Rulebook, words, want string) {
	t.Helper()
	p, err := entry.Words(book, strings.Fields(words))
	if err == nil {
		_, err = screening.Judge(book, screening.Part{Claim: p.Claim}, screening.DefaultPolicy())
	}
	if err == nil || !strings.Contains(err.Error(), want) {
		t.Errorf("%s: %v, want %q", words, err, want)
	}
}

// EveryVerdict holds what a table of cases gave against the verdicts that a kind can give: each at least once, and never one of those that
// it cannot.
func EveryVerdict(t *testing.T, given map[screening.Verdict]int, never ...screening.Verdict) {
	t.Helper()
	for _, v := range screening.Verdicts() {
		if cannot := slices.Contains(never, v); cannot != (given[v] == 0) {
			t.Errorf("%d cases give %s", given[v], v)
		}
	}
}

// Reference reads a table of figures as they were collected, kept apart from the program's own tables so that a slip in either shows: one
// map from column to cell a row, and exactly so many rows.
func Reference(t testing.TB, path string, rows int) []map[string]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	lines, err := csv.NewReader(f).ReadAll()
	if err != nil || len(lines) != rows+1 {
		t.Fatalf("%s: %d lines, want a header and %d rows; %v", path, len(lines), rows, err)
	}
	all := make([]map[string]string, rows)
	for i, line := range lines[1:] {
		all[i] = map[string]string{}
		for k, cell := range line {
			all[i][lines[0][k]] = cell
		}
	}
	return all
}

// Number reads a cell of a reference table; an empty one is what stands for nothing.
func Number(t testing.TB, cell string, empty float64) float64 {
	t.Helper()
	if cell == "" {
		return empty
	}
	x, err := strconv.ParseFloat(cell, 64)
	if err != nil {
		t.Fatalf("reference holds %q", cell)
	}
	return x
}

// Benchmark measures the judging of one part, and reports it per finding.
func Benchmark(b *testing.B, book *screening.Rulebook, words string) {
	part, policy := Part(b, book, words), screening.DefaultPolicy()
	findings := 0
	b.ReportAllocs()
	for b.Loop() {
		j, err := screening.Judge(book, part, policy)
		if err != nil {
			b.Fatal(err)
		}
		findings += len(j.Findings)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(findings), "ns/finding")
}
