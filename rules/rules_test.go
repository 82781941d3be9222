package rules_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"goodbin/rules"
	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/entry"
)

func TestEveryRulebookIsWhole(t *testing.T) {
	for _, b := range rules.All() {
		t.Run(string(b.Kind), func(t *testing.T) {
			if b.Kind == "" || b.Label == "" || b.Tables == "" || b.Limits == nil {
				t.Errorf("kind %q, label %q, tables %q, limits %v", b.Kind, b.Label, b.Tables, b.Limits != nil)
			}
			for group, fields := range map[string][]screening.Field{"claims": b.Claims, "bench": b.Bench} {
				if len(fields) == 0 {
					t.Errorf("no %s", group)
				}
				names := map[screening.Characteristic]bool{}
				for _, f := range fields {
					if f.Name == "" || f.Label == "" || f.Help == "" || f.Example == "" || !f.Trait && f.Symbol == "" {
						t.Errorf("%s: field %q lacks a label, symbol, help or example: %+v", group, f.Name, f.Definition)
					}
					if names[f.Name] {
						t.Errorf("%s: %q stands twice", group, f.Name)
					}
					if verb, _, _ := strings.Cut(f.Ask, " "); verb != strings.ToUpper(verb) || strings.HasSuffix(f.Ask, ".") {
						t.Errorf("%s: %q asks %q, which does not begin with what to DO, or ends in a stop", group, f.Name, f.Ask)
					}
					names[f.Name] = true
				}
			}
		})
	}
}

func TestEveryKindIsBarredFromTheMains(t *testing.T) {
	for _, b := range rules.All() {
		i := slices.IndexFunc(b.Look, func(c screening.Check) bool { return c.Name == "mains-or-cracked" })
		if i < 0 || b.Look[i].Verdict != screening.Barred || !slices.Contains(b.Look[i].Words, "mains") || !slices.Contains(b.Look[i].Words, "cracked") {
			t.Errorf("%s: no stop for mains and cracks", b.Kind)
		}
		if len(b.Look) > screening.MaxLook {
			t.Errorf("%s: %d things to look for, and a digit key for %d", b.Kind, len(b.Look), screening.MaxLook)
		}
		reported := map[string]string{}
		for _, c := range b.Look {
			if len(c.Question) > 60 || !strings.HasSuffix(c.Question, "?") {
				t.Errorf("%s: %q is no short question", b.Kind, c.Question)
			}
			for _, w := range c.Words {
				if reported[w] != "" {
					t.Errorf("%s: seen=%s reports %s and %s", b.Kind, w, reported[w], c.Name)
				}
				reported[w] = c.Name
			}
			if c.Question == "" || len(c.Words) == 0 || c.Verdict != screening.NoVerdict && (c.Reason == "" || c.Do == "" || c.Source.Status == screening.NoStatus) {
				t.Errorf("%s: check %q lacks a question, words, or of a stop its reason, what to do, or status", b.Kind, c.Name)
			}
		}
	}
}

func TestACharacteristicMeansTheSameEverywhere(t *testing.T) {
	type home struct {
		kind screening.Kind
		def  screening.Definition
	}
	first := map[screening.Characteristic]home{}
	for _, b := range rules.All() {
		for _, f := range slices.Concat(b.Claims, b.Bench) {
			h, known := first[f.Name]
			switch {
			case !known:
				first[f.Name] = home{b.Kind, f.Definition}
			case !f.Trait && h.def != f.Definition: // a trait's label may name the words that the kind takes
				t.Errorf("%q is %+v in %s and %+v in %s", f.Name, h.def, h.kind, f.Definition, b.Kind)
			}
		}
	}
}

func TestEveryExampleReads(t *testing.T) {
	for _, b := range rules.All() {
		for _, f := range b.Claims {
			words := strings.Fields(f.Example)
			if _, err := entry.Words(b, words); err != nil {
				if _, err := entry.Words(b, []string{string(f.Name) + "=" + f.Example}); err != nil {
					if _, err := entry.Words(b, []string{"rated:" + string(f.Name) + "=" + f.Example}); err != nil {
						t.Errorf("%s %s: example %q: %v", b.Kind, f.Name, f.Example, err)
					}
				}
			}
		}
		for _, f := range b.Bench {
			word := f.Example
			if !strings.Contains(word, "=") {
				word = string(f.Name) + "=" + word
			}
			p, err := entry.Words(b, []string{word})
			if err != nil {
				t.Errorf("%s %s: example %q: %v", b.Kind, f.Name, f.Example, err)
				continue
			}
			if len(p.Readings) == 0 || p.Readings[0].Of != f.Name {
				t.Errorf("%s %s: example %q is no reading of it: %+v", b.Kind, f.Name, f.Example, p.Readings)
			}
		}
	}
}

func TestEveryLimitHasItsSource(t *testing.T) {
	for _, b := range rules.All() {
		samples := casesOf(t, b.Kind).sample
		if len(samples) == 0 {
			t.Errorf("%s has no sample claims", b.Kind)
		}
		for _, text := range samples {
			t.Run(string(b.Kind)+" "+text, func(t *testing.T) {
				j := judged(t, b, text)
				limits, err := b.Limits(j.Claim)
				if err != nil || len(limits) == 0 {
					t.Fatalf("%d limits, %v", len(limits), err)
				}
				for _, l := range limits {
					checkLimit(t, b, j.Part, l)
				}
				if !slices.ContainsFunc(limits, func(l screening.Limit) bool { return l.InUse }) {
					t.Error("no limit is in use")
				}
			})
		}
	}
}

func TestEveryFindingHasItsSource(t *testing.T) {
	for _, b := range rules.All() {
		for _, text := range casesOf(t, b.Kind).measured {
			j := judged(t, b, text)
			limits, err := b.Limits(j.Claim)
			if err != nil {
				t.Fatal(err)
			}
			added := 0
			for i := range j.Findings {
				l := j.Findings[i].Limit
				checkLimit(t, b, j.Part, l)
				if !slices.ContainsFunc(limits, func(k screening.Limit) bool { return k.On == l.On && k.High == l.High && k.Criterion == l.Criterion }) {
					added++
				}
			}
			if added == 0 {
				t.Errorf("%s %s: no rule across readings changed anything", b.Kind, text)
			}
			for _, s := range j.Next {
				if s.Text == "" || s.Text != strings.TrimSpace(s.Text) {
					t.Errorf("%s %s: next step %q", b.Kind, text, s.Text)
				}
			}
		}
	}
}

// judged judges a part from words as typed.
func judged(t *testing.T, b *screening.Rulebook, words string) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, b, words, screening.DefaultPolicy())
}

func checkLimit(t *testing.T, b *screening.Rulebook, part screening.Part, l screening.Limit) {
	t.Helper()
	name := string(l.On) + " " + string(l.Set) + " " + l.Grade.String()
	f, ok := b.Find(l.On)
	switch {
	case !ok:
		t.Errorf("%s: no field of this name", name)
	case f.Unit != l.Unit:
		t.Errorf("%s: in %s, the field in %s", name, l.Unit.Symbol(), f.Unit.Symbol())
	}
	if l.Source.Status == screening.NoStatus || l.Source.Document == "" {
		t.Errorf("%s: source %q", name, l.Source)
	}
	if math.IsNaN(l.Low) || math.IsNaN(l.High) || l.Low > l.High {
		t.Errorf("%s: bounds %v to %v", name, l.Low, l.High)
	}
	if math.IsInf(l.Low, -1) && math.IsInf(l.High, 1) && l.FormulaText() == "" && l.Note == "" {
		t.Errorf("%s: asks for any value without saying why", name)
	}
	if l.Criterion == "" || l.Set == "" {
		t.Errorf("%s: criterion %q, set %q", name, l.Criterion, l.Set)
	}
	for _, v := range screening.Variables() {
		if x, ok := l.At.Get(v); ok && (math.IsNaN(x) || math.IsInf(x, 0)) {
			t.Errorf("%s: %s is %v", name, v, x)
		}
	}
	if text := l.FormulaText(); l.Formula != nil && (text == "" || strings.Contains(text, "NaN") || strings.Contains(text, "%!")) {
		t.Errorf("%s: formula %q", name, text)
	}
	if b.Recipes == nil {
		return
	}
	for _, r := range b.Recipes(part, l) {
		text := strings.Join(r.Lines, "\n")
		if r.Title == "" || text == "" || r.Source.Status == screening.NoStatus || strings.Contains(text, "NaN") || strings.Contains(text, "%!") {
			t.Errorf("%s: recipe %+v", name, r)
		}
		for k, x := range r.Values {
			if math.IsNaN(x) || math.IsInf(x, 0) || x < 0 {
				t.Errorf("%s: recipe value %s is %v", name, k, x)
			}
		}
	}
}

func TestEveryKindHasAVersionOfItsOwn(t *testing.T) {
	seen := map[string]bool{}
	for _, b := range rules.All() {
		if seen[b.Tables] {
			t.Errorf("%s: %q names another kind's tables too", b.Kind, b.Tables)
		}
		seen[b.Tables] = true
	}
}
