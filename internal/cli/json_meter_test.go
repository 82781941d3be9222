package cli

import (
	"encoding/json"
	"math"
	"testing"
)

// TestABudgetAddsUpToTheReading computes by hand: mean 99.875 Ω, s = 1.62147 Ω, s/√4·√3 = 1.40424 Ω (JCGM 101, 6.4.9.4); (0.5 % of 99.875 Ω
// + 0.1 Ω)/√3 = 0.34605 Ω; the leads 0.05 Ω. k = 2.87 at 4 degrees of freedom and 95.45 % (JCGM 100, table G.2).
func TestABudgetAddsUpToTheReading(t *testing.T) {
	stdout, stderr, status := runHere(t, "", "judge", "resistor", "100R", "10%", "resistance=98.1, 101.9, 100.3, 99.2", "--json", "--budget",
		"--meter", "ohms 0..400 0.5%+1; leads=0.2ohm±0.05")
	if status != ExitDone {
		t.Fatalf("exit status %d: %s", status, stderr)
	}
	var j jsonJudgement
	if err := json.Unmarshal([]byte(stdout), &j); err != nil {
		t.Fatal(err)
	}
	near := func(what string, got *float64, want, within float64) {
		t.Helper()
		if got == nil || math.Abs(*got-want) > within {
			t.Errorf("%s is %v, want %g", what, got, want)
		}
	}
	found := 0
	for _, f := range j.Findings {
		if f.Limit.On != "resistance" || f.Reading == nil {
			continue
		}
		found++
		if len(f.Budget) != 3 {
			t.Fatalf("%d contributions, want 3", len(f.Budget))
		}
		var shares float64
		for i, want := range []struct {
			kind string
			part float64
		}{{"repeats", 1.40424}, {"specification", 0.34605}, {"offset", 0.05}} {
			c := f.Budget[i]
			if c.Kind != want.kind {
				t.Errorf("contribution %d is %s, want %s", i, c.Kind, want.kind)
			}
			near(c.Kind, c.Part, want.part, 1e-5)
			shares += *c.Share
		}
		near("the sum of the shares", &shares, 1, 1e-9)
		near("the value, leads taken out", f.Reading.Value, 99.675, 1e-9)
		near("the reading's u", f.Reading.U, 1.44711, 1e-5)
		near("the combined u", f.Uncertainty.Combined, *f.Reading.U, 1e-12)
		near("freedom of the repeats", f.Budget[0].Freedom, 3, 0)
		if f.Budget[1].Freedom != nil {
			t.Errorf("the specification has %g degrees of freedom, want no limit", *f.Budget[1].Freedom)
		}
		near("k", f.Uncertainty.Coverage, 2.87, 0.005)
		near("U", f.Uncertainty.Expanded, 2.5333, 1e-3)
	}
	if found == 0 {
		t.Error("no finding on the resistance")
	}
	if j.Meter.Name != describedMeter || j.Meter.Assumed || j.Assumed || len(j.Meter.NotCovered) != 0 {
		t.Errorf("meter %+v, verdict assumed %v; want the described one alone", j.Meter, j.Assumed)
	}
}
