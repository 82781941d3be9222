package rules_test

import (
	"strings"
	"testing"

	"goodbin/rules"
	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

func TestEveryKindGivesEveryVerdictItCan(t *testing.T) {
	for _, b := range rules.All() {
		cases := casesOf(t, b.Kind).verdicts
		for _, v := range screening.Verdicts() {
			if len(cases[v]) == 0 {
				t.Errorf("%s: no part that gives %s is listed, and no reason why it never does", b.Kind, v)
			}
		}
		for verdict, parts := range cases {
			for _, c := range parts {
				if c.words == "" {
					t.Logf("%-13s %-10s never: %s", b.Kind, verdict, c.why)
					continue
				}
				t.Run(string(b.Kind)+" "+verdict.String(), func(t *testing.T) {
					j := booktest.Judge(t, b, c.words, screening.DefaultPolicy())
					t.Logf("%-13s %-10s %s", b.Kind, j.Verdict, c.words)
					if j.Verdict != verdict {
						t.Errorf("%s, want %s\n%s", j.Verdict, verdict, booktest.Texts(j))
					}
					if len(j.Reasons) == 0 || len(j.Next) == 0 {
						t.Errorf("no reason or no next step:\n%s", booktest.Texts(j))
					}
				})
			}
		}
	}
}

// What a kind never gives it gives under no reading: held against every word of the table's other rows and of the grid, with readings far
// outside each limit.
func TestWhatAKindNeverGives(t *testing.T) {
	for _, b := range rules.All() {
		never := casesOf(t, b.Kind).never()
		for _, words := range grid(t, b.Kind) {
			part := booktest.Part(t, b, words)
			all, err := b.Limits(booktest.JudgePart(t, b, part, screening.DefaultPolicy()).Claim)
			if err != nil || len(never) == 0 {
				continue
			}
			for _, l := range all {
				for _, x := range outside(l) {
					p := part
					p.Readings = []screening.Reading{{Of: l.On, Section: l.Section, Unit: l.Unit, Value: x, At: l.At}}
					j := booktest.JudgePart(t, b, p, screening.DefaultPolicy())
					for _, v := range never {
						if j.Verdict == v {
							t.Errorf("%s %s with %s %v: %s", b.Kind, strings.TrimSpace(words), l.On, x, v)
						}
					}
				}
			}
		}
	}
}
