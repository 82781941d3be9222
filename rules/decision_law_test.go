package rules_test

import (
	"math"
	"slices"
	"testing"

	"goodbin/rules"
	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// measuredParts are the parts of every kind's table of verdicts, judged under a decision rule.
func measuredParts(t *testing.T, rule screening.DecisionRule, with func(*screening.Rulebook, screening.Policy, screening.Part, screening.Judgement)) {
	for _, b := range rules.All() {
		policy := screening.DefaultPolicy()
		policy.Rule = rule
		cases := casesOf(t, b.Kind)
		words := slices.Clone(cases.measured)
		for _, parts := range cases.verdicts {
			for _, c := range parts {
				words = append(words, c.words)
			}
		}
		for _, w := range words {
			if w == "" {
				continue
			}
			part := booktest.Part(t, b, w)
			with(b, policy, part, booktest.JudgePart(t, b, part, policy))
		}
	}
}

func without(part screening.Part, gone func(screening.Reading) bool) screening.Part {
	part.Readings = slices.DeleteFunc(slices.Clone(part.Readings), gone)
	return part
}

// answeredOtherwise are the required criteria that another criterion's passing reading answers: what leaks microamperes at half its voltage is no
// dead short.
var answeredOtherwise = map[screening.Kind]screening.Criterion{"varistor": "short"}

// A part whose required criterion nothing answers is never accepted, whatever else was read.
func TestRemovingARequiredCriterionsReadingsNeverAccepts(t *testing.T) {
	removed := 0
	for _, rule := range screening.DecisionRules() {
		measuredParts(t, rule, func(b *screening.Rulebook, policy screening.Policy, part screening.Part, j screening.Judgement) {
			for i := range j.Findings {
				f := &j.Findings[i]
				if f.Need != screening.Required || f.By != screening.ByReading || f.Reading == nil {
					continue
				}
				of := map[screening.Characteristic]bool{f.Limit.On: true, f.Reading.Of: true}
				for k := range j.Findings {
					if j.Findings[k].Limit.Criterion == f.Limit.Criterion {
						of[j.Findings[k].Limit.On] = true
					}
				}
				for _, in := range f.Reading.From {
					of[in.Of] = true
				}
				less := booktest.JudgePart(t, b, without(part, func(r screening.Reading) bool { return of[r.Of] }), policy)
				answered := slices.ContainsFunc(less.Findings, func(g screening.Finding) bool {
					return g.Limit.Criterion == f.Limit.Criterion && g.Outcome == screening.Pass
				})
				removed++
				if less.Verdict == screening.Accept && !answered && answeredOtherwise[b.Kind] != f.Limit.Criterion {
					t.Errorf("%s by %s: accepted without any reading of %s\n%s", b.Kind, rule, f.Limit.Criterion, booktest.Texts(less))
				}
			}
		})
	}
	if removed < 500 {
		t.Errorf("only %d readings were removed", removed)
	}
}

// rank orders what a verdict is worth: accepted as new, accepted, regraded, and everything else alike, for a reading that passes may be what
// convicts another.
func rank(j screening.Judgement) int {
	switch {
	case j.Verdict == screening.Accept && j.Grade == screening.WithinSpec:
		return 0
	case j.Verdict == screening.Accept:
		return 1
	case j.Verdict == screening.Regrade:
		return 2
	}
	return 3
}

func TestRemovingAPassingReadingImprovesNothing(t *testing.T) {
	removed := 0
	for _, rule := range screening.DecisionRules() {
		measuredParts(t, rule, func(b *screening.Rulebook, policy screening.Policy, part screening.Part, j screening.Judgement) {
			for i, r := range part.Readings {
				passing := false
				onlyPasses := !slices.ContainsFunc(j.Findings, func(f screening.Finding) bool {
					mine := f.Reading != nil && f.Reading.Of == r.Of && f.Reading.Section == r.Section
					passing = passing || mine && f.Outcome == screening.Pass
					return mine && f.Outcome != screening.Pass
				})
				if !passing || !onlyPasses {
					continue
				}
				removed++
				less := part
				less.Readings = slices.Delete(slices.Clone(part.Readings), i, i+1)
				if after := booktest.JudgePart(t, b, less, policy); rank(after) < rank(j) {
					t.Errorf("%s by %s: without its passing %s %g it goes from %s %s to %s %s\nbefore\n%safter\n%s", b.Kind, rule, r.Of, r.Value,
						j.Verdict, j.Grade, after.Verdict, after.Grade, booktest.Texts(j), booktest.Texts(after))
				}
			}
		})
	}
	if removed < 500 {
		t.Errorf("only %d readings were removed", removed)
	}
}

// In every kind a budget combines to the uncertainty that the judge used, and each line has a name and a source.
func TestBudgetsOfEveryKindCombine(t *testing.T) {
	budgets := 0
	measuredParts(t, screening.ByProbability, func(b *screening.Rulebook, policy screening.Policy, _ screening.Part, j screening.Judgement) {
		for i := range j.Findings {
			f := &j.Findings[i]
			e := f.Evidence()
			if e == nil || f.By != screening.ByReading {
				continue
			}
			budget := f.Budget(policy)
			budgets++
			if got := budget.Combined(); math.Abs(got-e.U) > 1e-6*e.U {
				t.Errorf("%s %s: the budget combines to %g, u is %g\n%+v", b.Kind, f.Limit.On, got, e.U, budget.Contributions)
			}
			for _, c := range budget.Contributions {
				if c.Name == "" || c.Source == "" {
					t.Errorf("%s %s: a line without name or source: %+v", b.Kind, f.Limit.On, c)
				}
			}
		}
	})
	if budgets < 200 {
		t.Errorf("only %d budgets", budgets)
	}
}
