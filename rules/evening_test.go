package rules_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"goodbin/rules"
	"goodbin/screening"
)

// The first evening: what becomes of parts that are measured once, by whoever walks through the questions with one pocket meter. The populations
// are invented; each states its spreads. Sound parts must mostly be accepted, with what the bench did not see said; what is not sound must not be.

// evening is one population.
type evening struct {
	kind  screening.Kind
	name  string // with its spreads
	with  string // what is on the bench besides the pocket meter; "" is nothing
	sound func(*bench) *specimen
	least float64 // share of the sound ones that must be accepted, where why says so; else it is usualShare. At 0 none may be
	why   string
	ill   []fault
	// unseen is a word of what such a bench does not see: it must stand with every part that is accepted.
	unseen string
	// most is how many answers a sound part may take, where ask says why so many; else it is usualAnswers.
	most int
	ask  string
}

// fault is what befalls parts of a population.
type fault struct {
	name    string
	strike  func(*bench, *specimen)
	most    float64 // share that may be accepted all the same, where why says so; else none
	why     string
	further bool // the person goes on to the questions that are wanted, not required
}

const (
	soundParts, illParts = 120, 30
	usualShare           = 0.95
	usualAnswers         = 6
)

// notWalked are the kinds without an evening, and why.
var notWalked = map[screening.Kind]string{
	"mains-capacitor": "barred from the mains on any reading",
	"selenium":        "barred on any reading",
	"unknown":         "it is kept as measured, whatever it reads",
}

func evenings() []evening {
	return slices.Concat(oxideEvenings(), dryEvenings(), ceramicEvenings(), filmEvenings(), trackEvenings(), thermistorEvenings(), windingEvenings(),
		diodeEvenings(), lightEvenings(), transistorEvenings(), switchEvenings(), circuitEvenings())
}

func TestFirstEvening(t *testing.T) {
	var table strings.Builder
	table.WriteString("accepted in %, of sound parts by the walk and as a row without conditions; mean and most answers; accepted in %, of parts with a fault")
	met, books := map[screening.Kind]bool{}, rules.All()
	all := evenings()
	lines := make([]string, len(all))
	t.Run("kinds", func(t *testing.T) {
		for i, e := range all {
			met[e.kind] = true
			book, ok := books.Find(e.kind)
			if !ok {
				t.Fatalf("no rulebook %q", e.kind)
			}
			t.Run(string(e.kind)+" "+e.name, func(t *testing.T) {
				t.Parallel()
				b := newBench(uint64(i + 1))
				lines[i] = soundEvening(t, b, book, e)
				for _, f := range e.ill {
					lines[i] += fmt.Sprintf(" | %s %.0f", f.name, 100*illEvening(t, b, book, e, f))
				}
			})
		}
	})
	for i, e := range all {
		name := e.name
		if e.with != "" {
			name += "; " + e.with
		}
		fmt.Fprintf(&table, "\n%-18s %s\n%18s %s", e.kind, name, "", lines[i])
	}
	for _, book := range books {
		if met[book.Kind] == (notWalked[book.Kind] != "") {
			t.Errorf("%s: has an evening: %v; why it has none: %q", book.Kind, met[book.Kind], notWalked[book.Kind])
		}
	}
	t.Log("\n" + table.String())
}

// soundEvening walks a population through, holds it to its floor and its number of answers, and words what became of it.
func soundEvening(t *testing.T, b *bench, book *screening.Rulebook, e evening) string {
	accepted, rows, typed, longest := 0, 0, 0, 0
	rest := map[string]int{}
	for range soundParts {
		s := e.sound(b)
		o := b.evening(t, book, s, false)
		typed += o.answers
		longest = max(longest, o.answers)
		if o.row == screening.Accept {
			rows++
		}
		if o.Verdict != screening.Accept {
			rest[fmt.Sprintf("%s: %s (%s)", o.Verdict, lastWords(o.Judgement), s.claim)]++
			continue
		}
		accepted++
		if text := notTested(book, o.Judgement); !strings.Contains(text, e.unseen) || text == "" {
			t.Errorf("%s %s: accepted, and of what was not tested it says %q, not %q", e.kind, s.claim, text, e.unseen)
		}
	}
	least, most := usualShare, usualAnswers
	if e.why != "" {
		least = e.least
	}
	if e.ask != "" {
		most = e.most
	}
	share := float64(accepted) / soundParts
	switch {
	case least == 0 && accepted > 0:
		t.Errorf("%s, %s: %d are accepted; none can be: %s", e.kind, e.name, accepted, e.why)
	case share < least:
		t.Errorf("%s, %s: %.1f %% are accepted; at least %.0f %% must be\n%s", e.kind, e.name, 100*share, 100*least, listed(rest))
	}
	if longest > most {
		t.Errorf("%s, %s: %d answers for a sound part; %d are enough", e.kind, e.name, longest, most)
	}
	return fmt.Sprintf("%.1f (%.0f); %.1f (%d)", 100*share, 100*float64(rows)/soundParts, float64(typed)/soundParts, longest)
}

// illEvening does the same with a fault, and returns the share that is accepted, by the walk or as a row.
func illEvening(t *testing.T, b *bench, book *screening.Rulebook, e evening, f fault) float64 {
	accepted, as := 0, map[string]int{}
	for range illParts {
		s := e.sound(b)
		f.strike(b, s)
		if o := b.evening(t, book, s, f.further); o.Verdict == screening.Accept || o.row == screening.Accept {
			accepted++
			as[fmt.Sprintf("%s %v: %s", s.claim, s.reads, lastWords(o.Judgement))]++
		}
	}
	most, share := 0.0, float64(accepted)/illParts
	if f.why != "" {
		most = f.most
	}
	if share > most {
		t.Errorf("%s, %s, %s: %.0f %% are accepted; at most %.0f %% may be\n%s", e.kind, e.name, f.name, 100*share, 100*most, listed(as))
	}
	return share
}

// notTested is all that a judgement says of what was not tested.
func notTested(book *screening.Rulebook, j screening.Judgement) string {
	said := slices.Clone(j.Untested)
	for _, g := range j.NotTested {
		said = append(said, book.Definition(g.Of).Label)
	}
	return strings.Join(said, "; ")
}

func lastWords(j screening.Judgement) string {
	text := "no reason"
	if len(j.Reasons) > 0 {
		text = j.Reasons[len(j.Reasons)-1].Text
	}
	if len(j.Next) > 0 {
		text += "; " + j.Next[0].Text
	}
	return text
}

func listed(what map[string]int) string {
	lines := make([]string, 0, len(what))
	for text, n := range what {
		lines = append(lines, fmt.Sprintf("  %d× %s", n, text))
	}
	slices.Sort(lines)
	return strings.Join(lines[:min(len(lines), 12)], "\n")
}
