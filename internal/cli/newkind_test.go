package cli

import (
	"bytes"
	"context"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// sundial is a kind that exists only in this test, with everything invented: a claim of an hour angle, a reading of its own by section, a
// look, a stop by claim, a lesser claim and a recipe.
func sundial() *screening.Rulebook {
	source := screening.Source{Document: "invented for this test", Status: screening.House}
	angle := screening.Definition{Name: "hour-angle", Symbol: "t", Label: "hour angle", Unit: quantity.Hertz}
	shadow := screening.Definition{Name: "shadow", Symbol: "s", Label: "shadow current", Unit: quantity.Ampere}
	return &screening.Rulebook{
		Kind: "sundial", Label: "sundial of an invented make", Tables: "sundial-1",
		Claims: []screening.Field{
			{Definition: angle, Required: true, Example: "150Hz", Help: "as engraved"},
			{
				Definition: screening.Definition{Name: "stone", Label: "stone"}, Trait: true, Example: "slate", Help: "what it is made of",
				Words: []screening.Word{{Word: "slate", Text: "slate"}, {Word: "chalk", Text: "chalk"}},
			},
		},
		Bench: []screening.Field{{Definition: shadow, Example: "shadow/am=1.000", Help: "at noon", FollowsNominal: true}},
		Look: []screening.Check{
			{Name: "mossy", Words: []string{"mossy"}, Question: "Is there moss on it?", Verdict: screening.Barred, Reason: "moss grows on", Do: "leave it outdoors", Source: source},
			{Name: "bent", Words: []string{"bent"}, Question: "Is the pointer bent?", Reason: "its pointer is bent", Source: source},
		},
		Bars: func(c screening.Claim) []screening.Stop {
			if c.Trait("stone") != "chalk" {
				return nil
			}
			return []screening.Stop{{Check: "chalk", Verdict: screening.Barred, Reason: "chalk washes away", Do: "keep it dry", Source: source}}
		},
		Limits: func(c screening.Claim) ([]screening.Limit, error) {
			r, ok := c.Rating("hour-angle", "")
			if !ok {
				return nil, nil
			}
			var all []screening.Limit
			for _, section := range []string{"am", "pm"} {
				all = append(all, screening.Limit{
					On: "shadow", Section: section, Unit: quantity.Ampere, Criterion: "shadow", Low: math.Inf(-1), High: r.Nominal / 100,
					Need: screening.Required, Set: screening.GeneralSet, InUse: true, Grade: screening.WithinSpec, Source: source,
					Formula: func() string { return "a hundredth of the hour angle" },
				})
			}
			return all, nil
		},
		Lesser: func(p screening.Part, _ []screening.Finding) []screening.Lesser {
			wider := screening.NominalRating(angle, 900)
			wider.Typed = "900Hz"
			return []screening.Lesser{{Claim: p.Claim.WithRating(wider), Answers: "shadow", Text: "as an ornament", Source: source}}
		},
		Untested: func(screening.Part, []screening.Finding) []string { return []string{"cloudy days"} },
		Recipes: func(screening.Part, screening.Limit) []screening.Recipe {
			return []screening.Recipe{{Title: "Read the shadow", Lines: []string{"wait for the sun"}, Source: source}}
		},
	}
}

// withSundial runs the program with the invented kind.
func withSundial(stdin string, args ...string) (stdout, stderr string, status int) {
	var out, errs bytes.Buffer
	status = Run(context.Background(), args, Env{
		In: strings.NewReader(stdin), Out: &out, Err: &errs, Now: func() time.Time { return testTime },
		Getenv: func(string) string { return "" }, Kinds: []*screening.Rulebook{sundial()},
	})
	return out.String(), errs.String(), status
}

// A kind that no other package has heard of goes through every face: what faces know of kinds is in the rulebook's fields.
func TestANewKindNeedsNoChangeElsewhere(t *testing.T) {
	dir := t.TempDir()
	workbook, box := filepath.Join(dir, "w.goodbin"), filepath.Join(dir, "box.csv")
	says := func(stdin string, want int, args []string, texts ...string) {
		t.Helper()
		stdout, stderr, status := withSundial(stdin, args...)
		if status != want {
			t.Errorf("%v: exit status %d, want %d\n%s%s", args, status, want, stdout, stderr)
		}
		for _, text := range texts {
			if !strings.Contains(stdout, text) {
				t.Errorf("%v does not say %q:\n%s%s", args, text, stdout, stderr)
			}
		}
	}
	judge := []string{"judge", "sundial", "150Hz", "slate"}
	says("", ExitDone, append(judge, "shadow/am=1.000", "shadow/pm=1.100"), "ACCEPT", "cloudy days")
	says("", ExitDone, append(judge, "shadow/am=1.000", "shadow/pm=5.000"), "REGRADE", "as an ornament", "section pm")
	says("", ExitNotAccepted, append(judge, "shadow/am=1.000", "seen=mossy"), "BARRED", "moss grows on")
	says("", ExitNotAccepted, []string{"judge", "sundial", "150Hz", "chalk"}, "BARRED", "chalk washes away")
	says("", ExitNotAccepted, append(judge, "shadow/am=1.000"), "UNDECIDED", "MEASURE shadow current of section pm")
	says("", ExitDone, []string{"limits", "sundial", "150Hz"}, "a hundredth of the hour angle", "invented for this test")

	csv := "kind,lot,part,claim,shadow/am,shadow/pm,seen\nsundial,1,1,150Hz slate,1.000,1.100,bent\nsundial,1,2,,1.000,50.00,nothing\nsundial,1,3,chalk 150Hz,1.000,1.000,nothing\n"
	if err := os.WriteFile(box, []byte(csv), 0o600); err != nil {
		t.Fatal(err)
	}
	says("", ExitNotAccepted, []string{"screen", box, "--workbook", workbook}, "accept", "reject", "barred")
	says("sundial\n150Hz slate\nporch\n\n2\n1.000\n1.100\n\n0\n1.000\n5.000\nq\n", ExitDone, []string{"bench", "--lines", "--workbook", workbook},
		"lot 2: sundial", "2 Is the pointer bent?", "seen: bent", "shadow current of section am", "2-01: ACCEPT", "2-02: REGRADE", "its pointer is bent")
	says("", ExitDone, []string{"stock", "--all", "--by", "id", "--workbook", workbook}, "1-01\taccept", "1-02\treject", "1-03\tbarred", "2-01\taccept", "2-02\tregrade")
	says("", ExitDone, []string{"stock", "sundial", "--workbook", workbook}, "2-02", "as an ornament")
	says("", ExitDone, []string{"export", "--workbook", workbook}, "shadow/am", "bent")
	if report, err := inventory.Verify(workbook); err != nil || !report.OK() {
		t.Errorf("the workbook: %v, %v", report.Problems, err)
	}
	onThePages(t, filepath.Join(dir, "pages.goodbin"))
}

// onThePages measures two sundials on the real Bench page.
func onThePages(t *testing.T, workbook string) {
	in, keys := io.Pipe()
	shown := &screenText{}
	ended := make(chan int, 1)
	go func() {
		ended <- Run(context.Background(), []string{"--workbook", workbook}, Env{
			In: in, Out: shown, Err: io.Discard, InTerminal: true, OutTerminal: true, Width: 120, Height: 40, Now: func() time.Time { return testTime },
			Getenv: func(string) string { return "" }, Kinds: []*screening.Rulebook{sundial()},
		})
	}()
	await := func(text string) {
		t.Helper()
		for end := time.Now().Add(20 * time.Second); !shown.contains(text); time.Sleep(10 * time.Millisecond) {
			if time.Now().After(end) {
				t.Fatalf("the page never shows %q:\n%s", text, shown.text())
			}
		}
		shown.forget()
	}
	press := func(text string) { _, _ = io.WriteString(keys, text) }
	await("New lot")
	for _, field := range []string{"sundial", "150Hz slate", "porch", "", "", ""} {
		for _, r := range field {
			press(string(r))
		}
		press("\r")
		time.Sleep(20 * time.Millisecond)
	}
	await("look: the digits")
	for _, answer := range []struct{ text, then string }{
		{"2", "section am"}, {"1.000", "section pm"}, {"1.100", "look: the digits"}, {"0", "section am"}, {"1.000", "section pm"}, {"5.000", "look: the digits"},
	} {
		for _, r := range answer.text {
			press(string(r))
		}
		press("\r")
		await(answer.then)
	}
	press("\x03")
	select {
	case status := <-ended:
		if status != ExitDone {
			t.Errorf("the pages leave with %d", status)
		}
	case <-time.After(20 * time.Second):
		t.Fatal("the pages do not end")
	}
	w, err := inventory.Open(workbook, inventory.Options{ReadOnly: true})
	if err != nil {
		t.Fatal(err)
	}
	defer w.Close()
	for number, want := range map[uint32]screening.Verdict{1: screening.Accept, 2: screening.Regrade} {
		p, err := w.GetPart(inventory.ID{Lot: 1, Number: number})
		if err != nil || p.Outcome.Verdict != want {
			t.Errorf("1-%02d: %v, %v; want %v", number, p.Outcome.Verdict, err, want)
		}
	}
}

// screenText collects what the pages write, for another goroutine to look at.
type screenText struct {
	mu  sync.Mutex
	all bytes.Buffer
}

func (s *screenText) Write(b []byte) (int, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.all.Write(b)
}

func (s *screenText) contains(text string) bool { return strings.Contains(s.text(), text) }

func (s *screenText) text() string {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.all.String()
}

func (s *screenText) forget() {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.all.Reset()
}
