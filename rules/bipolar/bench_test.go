package bipolar

import (
	"math"
	"slices"
	"strings"
	"testing"

	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
)

func TestCautionsAndRecipes(t *testing.T) {
	book := Book(types.Builtin())
	codes := func(c screening.Claim) []string {
		completed, _, _ := builtin.complete(c)
		var codes []string
		for _, caution := range book.Cautions(screening.Part{Claim: completed}, screening.AtMeasure) {
			if caution.Text == "" || caution.Source.Status == screening.NoStatus {
				t.Errorf("caution %+v", caution)
			}
			codes = append(codes, caution.Code)
		}
		return codes
	}
	for name, want := range map[string][]string{
		"2N3904": {"reverse-base-emitter"},
		"AC128":  {"reverse-base-emitter", "warm-fingers"},
		"MPSA42": {"reverse-base-emitter", "test-voltage", "gain-test-heat"},
		"2N3055": {"reverse-base-emitter", "gain-test-heat"},
	} {
		if got := codes(words("type=" + name)); !slices.Equal(got, want) {
			t.Errorf("%s: cautions %v, want %v", name, got, want)
		}
	}
	for _, name := range types.Builtin().Names(Kind) {
		completed, _, _ := builtin.complete(words("type=" + name))
		part := screening.Part{Claim: completed}
		all, _ := builtin.limits(completed)
		for _, l := range all {
			found := book.Recipes(part, l)
			if len(found) == 0 && l.Evidence != screening.ByRating {
				t.Errorf("%s: no recipe for %s", name, l.On)
			}
			for _, r := range found {
				for what, x := range r.Values {
					if math.IsNaN(x) || math.IsInf(x, 0) || x <= 0 {
						t.Errorf("%s, %s: %s is %g", name, r.Title, what, x)
					}
				}
				if len(r.Lines) == 0 || r.Source.Status == screening.NoStatus {
					t.Errorf("%s: recipe %+v", name, r)
				}
			}
		}
	}
}

// The lamp test must turn on a power Darlington whose resistors hold it off below 70 to 100 µA (simulated TIP122: gain 20 at 70 µA, 376 at
// 100 µA), and prove more gain than its weak bound.
func TestLampRecipeTurnsADarlingtonOn(t *testing.T) {
	completed, _, _ := builtin.complete(words("type=TIP122"))
	r := lampRecipe(builtin.promiseOf(completed))
	ib, collector := r.Values["base-current"], r.Values["collector-current"]
	if ib < 5*turnOnCurrent {
		t.Errorf("base current %g A, turn-on %g A", ib, turnOnCurrent)
	}
	if got := (r.Values["supply"] - 1.4) / r.Values["base-resistance"]; !near(got, ib, 1e-9) {
		t.Errorf("R_B gives %g A, want %g A", got, ib)
	}
	lamp := figures()["gain-lamp"]
	want, _ := lamp.at.Get(screening.IC)
	if collector/ib < lamp.low || !near(collector, want, 0.5) {
		t.Errorf("the lamp proves a gain of %g at %g A; the bound is %g at %g A", collector/ib, collector, lamp.low, want)
	}
}

func TestGainRecipeMeetsItsCondition(t *testing.T) {
	completed, _, _ := builtin.complete(words("type=BC547B"))
	p := builtin.promiseOf(completed)
	promised, _ := completed.Rating(HFE.Name, "")
	r := gainRecipe(p, limitOf(&HFE, CriterionGain, &promised))
	// 9 V, 5 V across the part: 4 V over R_C at 2 mA is 2 kΩ; IB at the middle of 200 to 450 (300) is 6.67 µA from 9 − 0.65 V.
	if !near(r.Values["collector-resistance"], 2000, 1e-9) || !near(r.Values["base-resistance"], 8.35/(2e-3/300), 1e-9) {
		t.Errorf("recipe %+v", r.Values)
	}
}

func TestWalkAsksQuickReadingsFirst(t *testing.T) {
	for name, want := range map[string][]screening.Characteristic{
		"BC547": {"vbe", "hfe", "iceo"},
		"AC128": {"vbe", "temperature", "hfe", "iceo", "hfe-net"},
	} {
		w := screening.NewWalk(Book(types.Builtin()), screening.DefaultPolicy(), screening.Part{Claim: words("type=" + name)})
		var got []screening.Characteristic
		for _, q := range w.Questions() {
			if q.Ask == screening.AskReading && !slices.Contains(got, q.Field.Name) {
				got = append(got, q.Field.Name)
			}
			if q.Ask == screening.AskReading && q.At.Has(screening.PartTemperature) {
				t.Errorf("%s: the question for %s would write the limit's temperature into the reading", name, q.Field.Name)
			}
		}
		if !slices.Equal(got, want) {
			t.Errorf("%s: asks %v, want %v", name, got, want)
		}
	}
}

// A junction that reads open is turned before it is measured again; the walk asks for that and for nothing twice.
func TestWalkTurnsTheProbesOfAnOpenJunction(t *testing.T) {
	b := Book(types.Builtin())
	var look []screening.Observation
	for _, check := range b.Look {
		look = append(look, screening.Observation{Check: check.Name})
	}
	w := screening.NewWalk(b, screening.DefaultPolicy(), screening.Part{Claim: words("type=BC547B"), Look: look})
	if err := w.Record(open(VBE)); err != nil {
		t.Fatal(err)
	}
	if q := w.Next(); q.Field.Name != VEB.Name || w.Stopped() {
		t.Fatalf("asks %q, stopped %v; want veb", q.Field.Name, w.Stopped())
	}
	if err := w.Record(open(VEB)); err != nil {
		t.Fatal(err)
	}
	if j, _ := w.Judgement(); j.Verdict != screening.Reject || !w.Stopped() {
		t.Errorf("open both ways: %s", j.Verdict)
	}
	w.Retract()
	if err := w.Record(read(VBE, 0.66, none)); err != nil {
		t.Fatal(err)
	}
	if q := w.Next(); q.Field.Name != HFE.Name {
		t.Errorf("after the turned probes read 0.66 V it asks %q, want hfe", q.Field.Name)
	}
}

// What stands on the command line, read by the program's own grammar.
func TestCommandLineExamples(t *testing.T) {
	for _, tt := range []struct {
		name, line string
		verdict    screening.Verdict
	}{
		{"type and three readings", "type=2N3904 hfe@ic=10mA,vce=1V=180 vbe=0.68 iceo@20V=..0.1uA", screening.Accept},
		{"bare words", "BC337-25 hfe@100mA,1V=250 vbe=0.66 iceo@20V=..0.1uA", screening.Accept},
		{"type and group apart", "BC547 B hfe@2mA,5V=300 vbe=0.64 iceo@20V=..1uA", screening.Accept},
		{"regraded", "BC547C hfe@2mA,5V=300 vbe=0.64 iceo@20V=..1uA", screening.Regrade},
		{"unmarked", "pnp si hfe=150 vbe=0.65 iceo@9V=..1uA", screening.Accept},
		{"germanium with the room's temperature", "pnp ge vbe=0.14 hfe@5mA,9V=95 iceo@9V=75uA temperature=20C", screening.Accept},
		{"germanium without", "pnp ge vbe=0.14 hfe@5mA,9V=95 iceo@9V=75uA", screening.Undecided},
		{"open one way round", "2N3906 vbe=OL", screening.Undecided},
		{"open both ways round", "2N3906 vbe=OL veb=OL", screening.Reject},
		{"blocks what the supply has", "2N3904 hfe@10mA,1V=180 vbe=0.68 iceo@20V=..0.1uA vbr=30V..", screening.Accept},
	} {
		t.Run(tt.name, func(t *testing.T) {
			parsed, err := entry.Words(Book(types.Builtin()), strings.Fields(tt.line))
			if err != nil {
				t.Fatal(err)
			}
			j := judge(t, parsed.Claim, parsed.Readings...)
			if j.Verdict != tt.verdict {
				t.Errorf("%s: %s, want %s\n%s", tt.line, j.Verdict, tt.verdict, texts(j))
			}
		})
	}
}
