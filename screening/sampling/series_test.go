package sampling

import (
	"math/rand/v2"
	"strings"
	"testing"

	"goodbin/screening"
)

func nist(t *testing.T) Sequential {
	t.Helper()
	q, err := NewSequential(.01, .10, .05, .10)
	if err != nil {
		t.Fatal(err)
	}
	return q
}

// TestSequentialPlanOfNIST holds the acceptance and rejection numbers for 1 to 60 parts (NIST/SEMATECH 6.2.6).
func TestSequentialPlanOfNIST(t *testing.T) {
	q := nist(t)
	h1, h2, s := q.Lines()
	near(t, "h1", h1, .9388616, 5e-8)
	near(t, "h2", h2, 1.2053786, 5e-8)
	near(t, "s", s, .0397474, 5e-8)
	for _, row := range table(t, "sequential.csv") {
		n := whole(t, row["n"])
		near(t, "acceptance line", -h1+s*float64(n), number(t, row["accept_line"]), 6e-5)
		near(t, "rejection line", h2+s*float64(n), number(t, row["reject_line"]), 6e-5)
		ac, re := -1, -1
		if row["ac"] != "x" {
			ac = whole(t, row["ac"])
		}
		if row["re"] != "x" {
			re = whole(t, row["re"])
		}
		if q.AcceptAt(n) != ac || q.RefuseAt(n) != re {
			t.Errorf("after %d: accept %d, refuse %d, want %s and %s", n, q.AcceptAt(n), q.RefuseAt(n), row["ac"], row["re"])
		}
	}
	if q.FirstAcceptance() != 24 || q.AcceptAt(24) != 0 || q.RefuseAt(24) != 3 {
		t.Errorf("first acceptance after %d; at 24 accept %d, refuse %d; want 24, 0, 3 (published)", q.FirstAcceptance(), q.AcceptAt(24), q.RefuseAt(24))
	}
	good, bad := q.AverageNumber()
	near(t, "average number at p1", good, 27.96, .006)
	near(t, "average number at p2", bad, 16.45, .006)
}

func TestPartByPart(t *testing.T) {
	q := nist(t)
	for _, tt := range []struct {
		fact             string
		lot, tested, bad int
		want             Step
	}{
		{"nothing tested", 500, 0, 0, GoOn},
		{"one bad of one: more are needed to refuse", 500, 1, 1, GoOn},
		{"two bad of the first two", 500, 2, 2, StopAndRefuse},
		{"23 good", 500, 23, 0, GoOn},
		{"24 good", 500, 24, 0, AcceptLot},
		{"one bad of 24", 500, 24, 1, GoOn},
		{"three bad of 24", 500, 24, 3, StopAndRefuse},
		{"at the truncation the nearer line decides", 5000, q.Truncation(), q.AcceptAt(q.Truncation()) + 1, AcceptLot},
		{"and the other way", 5000, q.Truncation(), q.RefuseAt(q.Truncation()) - 1, StopAndRefuse},
		{"a small lot, all tested, one bad of 20 is under 10 %", 20, 20, 1, AcceptLot},
		{"a small lot: two bad of 20 are 10 %", 20, 12, 2, StopAndRefuse},
		{"a small lot: what is left cannot make it too bad", 20, 19, 0, AcceptLot},
	} {
		if got := q.AfterInLot(tt.lot, tt.tested, tt.bad); got != tt.want {
			t.Errorf("%s: %s, want %s", tt.fact, got, tt.want)
		}
	}
	if _, err := NewSequential(.1, .01, .05, .1); err == nil {
		t.Error("good worse than bad is taken")
	}
	if _, err := NewSequential(.01, .1, .6, .5); err == nil {
		t.Error("risks beyond 100 % are taken")
	}
}

// TestSequentialKeepsItsRisks runs 20 000 lots of each quality: the truncated test refuses no more than α of the good and accepts no more
// than β of the bad, within three standard errors.
func TestSequentialKeepsItsRisks(t *testing.T) {
	q := nist(t)
	r := rand.New(rand.NewPCG(1, 2))
	const runs = 20_000
	wrong := func(fraction float64, mistake Step) float64 {
		n := 0
		for range runs {
			tested, bad, step := 0, 0, GoOn
			for step == GoOn {
				tested++
				if r.Float64() < fraction {
					bad++
				}
				step = q.After(tested, bad)
			}
			if step == mistake {
				n++
			}
		}
		return float64(n) / runs
	}
	if got := wrong(q.Good, StopAndRefuse); got > .05+.005 {
		t.Errorf("%.3f of the good lots are refused, want at most .05", got)
	}
	if got := wrong(q.Bad, AcceptLot); got > .10+.007 {
		t.Errorf("%.3f of the bad lots are accepted, want at most .10", got)
	}
}

func TestSwitching(t *testing.T) {
	for _, tt := range []struct {
		fact, history string
		want          Inspection
		stopped, may  bool
	}{
		{"begins normal", "", Normal, false, false},
		{"one refused of five", "aaara", Normal, false, false},
		{"two refused of five", "araar", Tightened, false, false},
		{"two refused, six apart", "raaaaar", Normal, false, false},
		{"two refused at once", "rr", Tightened, false, false},
		{"five accepted on tightened", "rraaaaa", Normal, false, false},
		{"four accepted on tightened", "rraaaa", Tightened, false, false},
		{"a refusal begins the five anew", "rraaaaraaaa", Tightened, false, false},
		{"what was refused before the switch is forgotten", "rraaaaaraaaa", Normal, false, false},
		{"five refused on tightened", "rrrarararar", Tightened, true, false},
		{"after the stop nothing counts", "rrrararararaaaaaaa", Tightened, true, false},
		{"ten accepted may be reduced", "aaaaaaaaaa", Normal, false, true},
		{"nine may not", "aaaaaaaaa", Normal, false, false},
		{"ten with a refusal may not", "aaaaaraaaaa", Normal, false, false},
	} {
		t.Run(tt.fact, func(t *testing.T) {
			outcomes, err := History(tt.history)
			if err != nil {
				t.Fatal(err)
			}
			var s Switching
			for _, o := range outcomes {
				before := s
				var why string
				if s, why = s.Next(o); (why == "") != (s.Inspection == before.Inspection && s.Stopped == before.Stopped) {
					t.Errorf("from %+v to %+v says %q", before, s, why)
				}
			}
			if s.Inspection != tt.want || s.Stopped != tt.stopped || s.MayReduce != tt.may {
				t.Errorf("%s ends in %+v", tt.history, s)
			}
		})
	}
}

func TestReducedInspection(t *testing.T) {
	var s Switching
	if _, err := s.Reduce(); err == nil || !strings.Contains(err.Error(), "reduced needs 10") {
		t.Errorf("reduced at the start: %v", err)
	}
	for range 10 {
		s, _ = s.Next(Accepted)
	}
	reduced, err := s.Reduce()
	if err != nil || reduced.Inspection != Reduced {
		t.Fatalf("%+v, %v", reduced, err)
	}
	for o, want := range map[Outcome]Inspection{Accepted: Reduced, Between: Normal, Refused: Normal} {
		if got, _ := reduced.Next(o); got.Inspection != want {
			t.Errorf("%s: %s, want %s", o, got.Inspection, want)
		}
	}
	if got := reduced.Irregular(); got.Inspection != Normal {
		t.Errorf("irregular: %s", got.Inspection)
	}
	stopped := Switching{Inspection: Tightened, Stopped: true}
	if got := stopped.Resume(); got.Stopped || got.Inspection != Tightened {
		t.Errorf("resumed: %+v", got)
	}
	p := mustLookup(t, "G", 4, Reduced) // 1/4
	for bad, want := range []Outcome{Accepted, Accepted, Between, Between, Refused} {
		if got := p.Outcome(bad); got != want {
			t.Errorf("%d bad under Ac %d Re %d: %s, want %s", bad, p.Accept, p.Reject, got, want)
		}
	}
}

func TestSwitchingScore(t *testing.T) {
	two, one := plan(80, 2), plan(80, 1)
	for _, tt := range []struct {
		fact string
		got  int
		want int
	}{
		{"passes one step tighter: 3", Score(9, two, one, 1), 12},
		{"passes, not one step tighter: back to 0", Score(9, two, one, 2), 0},
		{"Ac 1, accepted: 2", Score(9, one, plan(80, 0), 1), 11},
		{"refused: back to 0", Score(29, one, plan(80, 0), 2), 0},
	} {
		if tt.got != tt.want {
			t.Errorf("%s: %d, want %d", tt.fact, tt.got, tt.want)
		}
	}
}

func TestSwitchingRulesHaveSources(t *testing.T) {
	rules := SwitchingRules()
	if len(rules) != 8 {
		t.Errorf("%d rules, want 8", len(rules))
	}
	for _, r := range rules {
		if r.Source.Status == screening.NoStatus || r.Source.Document == "" || r.Rule == "" {
			t.Errorf("%+v has no source", r)
		}
	}
}
