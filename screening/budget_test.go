package screening_test

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/screening"
	"goodbin/screening/quantity"
	"goodbin/screening/uncertainty"
)

func TestABudgetListsEveryContribution(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters["shed"] = shed()
	b := withLimits(quickLimit(0, 1))
	b.Bench = append(b.Bench, screening.Field{Definition: screening.Capacitance})
	r := screening.Reading{
		Of: "capacitance", Unit: quantity.Farad, Value: 10.1e-6, Step: 100e-9, Meter: "shed", Repeats: []float64{10.0e-6, 10.1e-6, 10.2e-6, 10.1e-6, 10.1e-6},
	}
	r = judged(t, b, policy, r).Part.Readings[0]
	budget := screening.BudgetOf(r, policy)
	want := []struct {
		kind    uncertainty.Kind
		u       float64
		freedom float64
		says    string
	}{
		{uncertainty.Specification, (0.02*10.1e-6 + 5*10e-9) / math.Sqrt(3), inf, "±(2 % + 5 counts)"},
		{uncertainty.Digit, 100e-9 / math.Sqrt(12), inf, "last digit, 100 nF"},
		{uncertainty.Offset, 1e-12, inf, "the leads' capacitance"},
		{uncertainty.Repeats, math.Sqrt(2) * 70.71067811865e-9 / math.Sqrt(5), 4, "spread 70.7 nF over √5, ×1.41 for few repeats"},
	}
	if len(budget.Contributions) != len(want) {
		t.Fatalf("%+v", budget.Contributions)
	}
	for i, w := range want {
		c := budget.Contributions[i]
		if c.Kind != w.kind || !near(c.U, w.u, 1e-9) || c.Freedom != w.freedom || c.Name != w.says || c.Source == "" {
			t.Errorf("%+v, want %+v", c, w)
		}
	}
	if !near(budget.Combined(), r.U, 1e-12) || !near(budget.Value, 10.1e-6-3e-12, 1e-12) {
		t.Errorf("combined %g, the reading's u %g, value %g", budget.Combined(), r.U, budget.Value)
	}
	if largest := budget.BySize()[0]; largest.Kind != uncertainty.Specification {
		t.Errorf("the largest is %s", largest.Kind)
	}
}

// The conversion's own uncertainty is a line of its own, and the reading's lines carry its sensitivity.
func TestABudgetOfAConvertedReading(t *testing.T) {
	l := quickLimit(0.5, 0.8)
	l.At = screening.At(screening.Frequency, 120)
	b := withLimits(l)
	b.Convert = func(_ screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
		c := screening.Conversion{OK: true, Reading: r, Rule: "a tenth", U: 0.003, Source: test}
		c.Reading.Value, c.Reading.U, c.Reading.At = r.Value/10, math.Hypot(r.U/10, c.U), l.At
		return c
	}
	r := exactly("quick", quantity.Volt, 7)
	r.At = screening.At(screening.Frequency, 1000)
	policy := relative(0.01)
	f := judged(t, b, policy, r).Findings[0]
	budget := f.Budget(policy)
	if len(budget.Contributions) != 2 || !near(budget.Contributions[0].Sensitivity, 0.1, 1e-9) || budget.Contributions[1].Kind != uncertainty.Conversion || budget.Contributions[1].Name != "a tenth" {
		t.Fatalf("%+v", budget.Contributions)
	}
	if !near(budget.Combined(), f.Evidence().U, 1e-12) || budget.Value != 0.7 {
		t.Errorf("combined %g of %g", budget.Combined(), f.Evidence().U)
	}
}

// Whatever the meter and the repeats, the budget combines to the reading's own uncertainty, and no repeat makes the meter's claim smaller.
func TestABudgetCombinesToTheReadingsUncertainty(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		policy := screening.DefaultPolicy()
		a := screening.Accuracy{
			Relative: rapid.Float64Range(1e-4, 0.1).Draw(t, "relative"), Counts: float64(rapid.IntRange(0, 9).Draw(t, "counts")),
			DigitApart: rapid.Bool().Draw(t, "apart"), Resolution: rapid.SampledFrom([]float64{0, 1e-3, 1e-2}).Draw(t, "resolution"),
			Confidence: rapid.SampledFrom([]screening.Confidence{screening.WithinIt, screening.Normal99}).Draw(t, "confidence"),
		}
		policy.Meters["m"] = screening.Meter{Name: "m", Ranges: []screening.Range{{Unit: quantity.Volt, Accuracy: a}}}
		var readings []screening.Reading
		for range rapid.IntRange(1, 8).Draw(t, "n") {
			readings = append(readings, screening.Reading{
				Of: "quick", Unit: quantity.Volt, Value: rapid.Float64Range(0.6, 0.7).Draw(t, "x"), Step: rapid.SampledFrom([]float64{0, 1e-3, 1e-2}).Draw(t, "step"), Meter: "m",
			})
		}
		r := judgedBy(t, withLimits(quickLimit(0.5, 0.8)), policy, screening.Series(readings...)).Part.Readings[0]
		b := screening.BudgetOf(r, policy)
		if !near(b.Combined(), r.U, 1e-9) {
			t.Fatalf("combined %g, u %g", b.Combined(), r.U)
		}
		m := policy.Meters["m"]
		if plain := m.Uncertainty(r); r.U < plain*(1-1e-12) {
			t.Fatalf("u %g is below JCGM 100's %g", r.U, plain)
		}
	})
}

// Two parts on one meter and range: its gain cancels in the ratio, and in the difference all but the share of the difference remains of it.
func TestMatchingAsksLessOfAMeterThanGrading(t *testing.T) {
	policy := screening.DefaultPolicy()
	m := screening.Meter{Name: "m", Ranges: []screening.Range{
		{Of: "resistance", Unit: quantity.Ohm, High: 2000, Accuracy: screening.Accuracy{Relative: 0.01, Counts: 1}},
		{Of: "resistance", Unit: quantity.Ohm, Low: 2000, Accuracy: screening.Accuracy{Relative: 0.01, Counts: 1}},
	}, Leads: screening.Leads{SeriesR: 0.5, SeriesRU: 0.2}}
	policy.Meters["m"], policy.Meters["n"] = m, m
	bench := withLimits(quickLimit(0, 1))
	bench.Bench = append(bench.Bench, screening.Field{Definition: screening.Resistance})
	read := func(ohms float64, meter string) screening.Reading {
		return judged(t, bench, policy, screening.Reading{Of: "resistance", Unit: quantity.Ohm, Value: ohms, Step: 0.1, Meter: meter}).Part.Readings[0]
	}
	a, b := read(1000.5, "m"), read(990.5, "m")
	digit := 0.1 / math.Sqrt(3)
	// Leads of both alike: their error moves a ratio of 1.01 by 1/990 − 1000/990².
	leads := 0.2 * math.Abs(1.0/990-1000.0/(990*990))
	gain := 0.01 / math.Sqrt(3) * math.Abs(1000.5/990-1000*990.5/(990*990)) // the leads' half ohm is no gain's
	want := math.Sqrt(leads*leads + gain*gain + math.Pow(digit/990, 2) + math.Pow(digit*1000/(990*990), 2))
	ratio := screening.Ratio(a, b, policy)
	if !near(ratio.Value, 1000.0/990, 1e-12) || !near(ratio.Combined(), want, 1e-6) {
		t.Errorf("ratio %g ± %g, want u = %g", ratio.Value, ratio.Combined(), want)
	}
	difference := screening.Difference(a, b, policy)
	if !near(difference.Value, 10, 1e-9) || !near(difference.Combined(), math.Sqrt(math.Pow(0.01*10/math.Sqrt(3), 2)+2*digit*digit), 1e-6) {
		t.Errorf("difference %g ± %g", difference.Value, difference.Combined())
	}
	for name, other := range map[string]screening.Reading{"another meter": read(990.5, "n"), "another range": read(2500, "m")} {
		r := screening.Ratio(a, other, policy)
		if r.Combined()/r.Value < 0.008 {
			t.Errorf("%s: u = %g of the ratio; both gains count", name, r.Combined()/r.Value)
		}
	}
}

// More repeats are offered only where they can decide, and that many do: the mean and spread stay.
func TestMoreRepeatsAreOfferedOnlyWhereTheyDecide(t *testing.T) {
	offered, refused := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		policy := under(rapid.SampledFrom([]screening.DecisionRule{screening.ByProbability, screening.GuardBand}).Draw(t, "rule"), rapid.Float64Range(1e-4, 0.02).Draw(t, "u"))
		mean, s := rapid.Float64Range(0.77, 0.83).Draw(t, "mean"), rapid.Float64Range(0.001, 0.05).Draw(t, "s")
		n := rapid.IntRange(2, 8).Draw(t, "n")
		b := withLimits(quickLimit(0.5, 0.8))
		at := func(n int) screening.Finding {
			return judgedBy(t, b, policy, screening.Reading{Of: "quick", Unit: quantity.Volt, Value: mean, Repeats: spreadSeries(mean, s, n)}).Findings[0]
		}
		f := at(n)
		if f.Outcome != screening.Close {
			return
		}
		more := f.Wants.Repeats
		if more > 0 {
			offered++
			if got := at(n + more); got.Outcome == screening.Close {
				t.Fatalf("%d + %d repeats: still close", n, more)
			}
			if got := at(n + more - 1); got.Outcome != screening.Close {
				t.Fatalf("%d + %d repeats would do", n, more-1)
			}
		} else {
			refused++
			if got := at(n + screening.MaxMoreRepeats); got.Outcome != screening.Close {
				t.Fatalf("%d more repeats would decide, and were not offered", screening.MaxMoreRepeats)
			}
		}
	})
	if offered == 0 || refused == 0 {
		t.Errorf("offered %d times, refused %d times", offered, refused)
	}
}

// spreadSeries returns n values with this mean and sample standard deviation.
func spreadSeries(mean, s float64, n int) []float64 {
	xs := make([]float64, n)
	for i := range xs {
		xs[i] = float64(i%2*2 - 1)
		if n%2 == 1 && i == n-1 {
			xs[i] = 0
		}
	}
	unit := uncertainty.Spread(xs)
	for i := range xs {
		xs[i] = mean + xs[i]*s/unit
	}
	return xs
}

func TestTheStepSaysHowManyRepeats(t *testing.T) {
	r := screening.Reading{Of: "quick", Unit: quantity.Volt, Value: 0.79, Repeats: spreadSeries(0.79, 0.012, 4)}
	j := judged(t, withLimits(quickLimit(0.5, 0.8)), relative(0.001), r)
	if got := j.Next[0].Text; !strings.HasSuffix(got, " more readings like these") || j.Next[0].Gap.Repeats == 0 {
		t.Errorf("next %q, %d", got, j.Next[0].Gap.Repeats)
	}
}

func TestRepeatsThatDoNotStandStillAreNoted(t *testing.T) {
	for name, tt := range map[string]struct {
		xs   []float64
		code string
	}{
		"drifting":  {[]float64{0.70, 0.69, 0.679, 0.67, 0.66}, screening.CodeDrifting},
		"unsettled": {[]float64{0.6, 0.75, 0.58, 0.74, 0.6, 0.77}, screening.CodeUnsettled},
		"steady":    {[]float64{0.70, 0.701, 0.70, 0.701}, ""},
	} {
		var readings []screening.Reading
		for _, x := range tt.xs {
			readings = append(readings, screening.Reading{Of: "quick", Unit: quantity.Volt, Value: x, Step: 0.001})
		}
		j := judged(t, withLimits(quickLimit(0.5, 0.8)), relative(0.01), screening.Series(readings...))
		got := ""
		for _, r := range j.Reasons {
			if r.Code == screening.CodeDrifting || r.Code == screening.CodeUnsettled {
				got = r.Code
			}
		}
		if got != tt.code {
			t.Errorf("%s: noted as %q: %v", name, got, j.Reasons)
		}
	}
}

func BenchmarkJudgeWithBudgets(b *testing.B) {
	policy := screening.DefaultPolicy()
	policy.Meters["shed"] = shed()
	part := toyPart(100, 1e-4, 0.79)
	for i := range part.Readings {
		r := &part.Readings[i]
		r.Meter, r.Step = "shed", r.Value/1000
		r.Repeats = spreadSeries(r.Value, r.Value/200, 5)
	}
	findings := 0
	b.ReportAllocs()
	for b.Loop() {
		j, _ := screening.Judge(toy(), part, policy)
		for i := range j.Findings {
			_ = j.Findings[i].Budget(policy).Combined()
		}
		findings += len(j.Findings)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(findings), "ns/finding")
}
