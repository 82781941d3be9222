package rules_test

import (
	"math"
	"slices"
	"testing"

	"goodbin/rules"
	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

// grid returns claims, as typed, that reach every row of every table of a kind: those listed for it, and every type number.
func grid(t *testing.T, kind screening.Kind) []string {
	all := casesOf(t, kind).grid
	for _, name := range types.Builtin().Names(kind) {
		all = append(all, "type="+hyphenated(name))
	}
	return all
}

// hyphenated writes a type's name without the spaces that end a word.
func hyphenated(name string) string {
	text := []rune(name)
	for i, r := range text {
		if r == ' ' {
			text[i] = '-'
		}
	}
	return string(text)
}

// outside lists values beyond the bounds of a limit, from just outside to far away.
func outside(l screening.Limit) []float64 {
	var values []float64
	if !math.IsInf(l.Low, -1) && l.Low > 0 {
		values = append(values, l.Low*0.97, l.Low/2, l.Low/1000)
	}
	if !math.IsInf(l.High, 1) && l.High > 0 {
		values = append(values, l.High*1.03, l.High*2, l.High*1000)
	}
	return values
}

// The law of figures that were not read where they are printed: held against every limit of every kind, a reading outside its bounds, taken
// with a perfect meter, never fails a limit that is from memory, derived or second-hand, unless a figure that may reject fails too; and no
// part is rejected, regraded or sent to treatment without a limit that may reject.
func TestAFigureThatWasNotReadRejectsNothingByItself(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters = map[string]screening.Meter{"": screening.ExactMeter()}
	for _, b := range rules.All() {
		t.Run(string(b.Kind), func(t *testing.T) {
			weak := map[screening.Status]int{}
			for _, words := range grid(t, b.Kind) {
				part := booktest.Part(t, b, words)
				limits := booktest.JudgePart(t, b, part, policy)
				all, err := b.Limits(limits.Claim)
				if err != nil {
					t.Fatalf("%s: %v", words, err)
				}
				for _, l := range all {
					if l.Source.Status.MayReject() || !l.InUse {
						continue
					}
					weak[l.Source.Status]++
					for _, x := range outside(l) {
						p := part
						p.Readings = []screening.Reading{{Of: l.On, Section: l.Section, Unit: l.Unit, Value: x, At: l.At}}
						holdToTheLaw(t, b, booktest.JudgePart(t, b, p, policy), all, words)
					}
				}
			}
			t.Logf("limits in use that may not reject: %v", weak)
			for _, s := range casesOf(t, b.Kind).meets {
				if weak[s] == 0 {
					t.Errorf("no limit is %s: the grid misses what the tables hold", s)
				}
			}
		})
	}
}

func holdToTheLaw(t *testing.T, b *screening.Rulebook, j screening.Judgement, all []screening.Limit, words string) {
	t.Helper()
	grounds := false
	for i := range j.Findings {
		f := &j.Findings[i]
		if f.Outcome != screening.Fail {
			continue
		}
		r := f.Reading
		if f.Limit.Source.Status.MayReject() || slices.ContainsFunc(all, func(l screening.Limit) bool {
			return l.On == f.Limit.On && l.Section == f.Limit.Section && l.Source.Status.MayReject() && l.Grade != screening.WithinSpec &&
				(r.Value > l.High || r.Value < l.Low)
		}) {
			grounds = true
			continue
		}
		t.Errorf("%s %s: %s %v fails %v to %v, which is %s", b.Kind, words, f.Limit.On, r.Value, f.Limit.Low, f.Limit.High, f.Limit.Source)
	}
	switch j.Verdict {
	case screening.Reject, screening.Treat, screening.Regrade:
		if !grounds && !asMeasured(j) {
			t.Errorf("%s %s: %s on no figure that may reject\n%s", b.Kind, words, j.Verdict, booktest.Texts(j))
		}
	}
}

// asMeasured reports whether a verdict answers a missing claim, not a failure.
func asMeasured(j screening.Judgement) bool {
	return j.Verdict == screening.Regrade && j.RegradedAs != nil && j.RegradedAs.FromMissing
}
