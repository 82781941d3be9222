package screening_test

import (
	"math"
	"strings"
	"testing"
	"time"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

var inf = math.Inf(1)

// toy is a rulebook with one criterion of each sort, so that the judge's own rules can be tested without any kind's figures.
func toy() *screening.Rulebook {
	house := screening.Source{Document: "test rulebook", Status: screening.House}
	memory := screening.Source{Document: "test rulebook", Status: screening.FromMemory}
	value := func(grade screening.Grade, low, high float64) screening.Limit {
		return screening.Limit{
			On: "value", Unit: quantity.Ohm, Criterion: "value", Low: low, High: high, InUse: true, Grade: grade,
			Soft: grade == screening.Serviceable, Source: house, Set: screening.GeneralSet,
		}
	}
	return &screening.Rulebook{
		Kind: "toy", Label: "toy part",
		Claims: []screening.Field{
			{Definition: screening.Definition{Name: "value", Label: "value", Unit: quantity.Ohm}, Required: true},
		},
		Bench: []screening.Field{
			{Definition: screening.Definition{Name: "value", Label: "value", Unit: quantity.Ohm}, Effort: 2 * time.Second, FollowsNominal: true},
			{Definition: screening.Definition{Name: "slow", Label: "slow value", Unit: quantity.Ampere}, Effort: 2 * time.Minute},
			{Definition: screening.Definition{Name: "quick", Label: "quick value", Unit: quantity.Volt}, Effort: time.Second},
			{Definition: screening.Definition{Name: "unsure", Label: "unsure value", Unit: quantity.One}},
		},
		Look: []screening.Check{
			{Name: "cracked", Question: "cracked?", Verdict: screening.Barred, Reason: "cracked", Do: "bag it", Source: house},
			{Name: "burnt", Question: "burnt?", Verdict: screening.Reject, Reason: "burnt", Source: house},
			{Name: "in-circuit", Question: "in circuit?", Verdict: screening.Undecided, Reason: "in circuit", Do: "LIFT one lead", Source: house},
			{Name: "short-leads", Question: "short leads?", Source: house},
		},
		Limits: func(c screening.Claim) ([]screening.Limit, error) {
			nominal, _ := c.Nominal("value", "")
			within := 0.05
			if r, ok := c.Rating("tolerance", ""); ok {
				within = r.High
			}
			return []screening.Limit{
				value(screening.WithinSpec, nominal*(1-within), nominal*(1+within)),
				value(screening.Serviceable, nominal*(1-2*within), nominal*(1+2*within)),
				{On: "slow", Unit: quantity.Ampere, Criterion: "slow", Low: -inf, High: 1e-3, InUse: true, TreatHigh: screening.Reform, Source: house},
				{On: "quick", Unit: quantity.Volt, Criterion: "quick", Low: 0.5, High: 0.8, InUse: true, Source: house},
				{On: "unsure", Unit: quantity.One, Criterion: "unsure", Low: 0, High: 1, InUse: true, Need: screening.Wanted, Source: memory},
				{On: "quick", Unit: quantity.Volt, Criterion: "quick", Low: 0.6, High: 0.61, Set: "other", Source: house},
			}, nil
		},
		Lesser: func(p screening.Part, _ []screening.Finding) []screening.Lesser {
			r, ok := p.Reading("value", "")
			if !ok {
				return nil
			}
			wide := p.Claim.WithRating(screening.RangeRating(screening.Tolerance, -0.2, 0.2))
			measured := p.Claim.WithRating(screening.NominalRating(screening.Definition{Name: "value", Unit: quantity.Ohm}, r.Value))
			return []screening.Lesser{
				{Claim: wide, Answers: "value", Text: "±20 %", Tolerance: true},
				{Claim: measured, Answers: "value", Text: "as measured"},
			}
		},
	}
}

func exactly(of screening.Characteristic, unit quantity.Unit, x float64) screening.Reading {
	return screening.Reading{Of: of, Unit: unit, Value: x}
}

func toyPart(value, slow, quick float64, more ...screening.Reading) screening.Part {
	p := screening.Part{
		Kind:  "toy",
		Claim: screening.Claim{}.WithRating(screening.NominalRating(screening.Definition{Name: "value", Unit: quantity.Ohm}, 100)),
	}
	for _, r := range []screening.Reading{exactly("value", quantity.Ohm, value), exactly("slow", quantity.Ampere, slow), exactly("quick", quantity.Volt, quick)} {
		if !math.IsNaN(r.Value) {
			p.Readings = append(p.Readings, r)
		}
	}
	p.Readings = append(p.Readings, more...)
	return p
}

// withU gives the part's readings one relative standard uncertainty.
func relative(u float64) screening.Policy {
	p := screening.DefaultPolicy()
	a := screening.Accuracy{Relative: u * math.Sqrt(3)}
	p.Meters[""] = screening.Meter{ByUnit: map[quantity.Unit]screening.Accuracy{
		quantity.Ohm: a, quantity.Ampere: a, quantity.Volt: a, quantity.One: a,
	}}
	return p
}

func TestVerdict(t *testing.T) {
	none := math.NaN()
	cases := []struct {
		name    string
		part    screening.Part
		u       float64
		verdict screening.Verdict
		grade   screening.Grade
		as      string
	}{
		{"everything inside is accepted within spec", toyPart(100, 1e-4, 0.7), 0.001, screening.Accept, screening.WithinSpec, ""},
		{"inside the wider band only is serviceable", toyPart(108, 1e-4, 0.7), 0.001, screening.Accept, screening.Serviceable, ""},
		{"a wanted reading that is missing does not hold it back", toyPart(100, 1e-4, 0.7), 0, screening.Accept, screening.WithinSpec, ""},
		{"a failure against a figure from memory counts as close and does not hold it back when only wanted", toyPart(100, 1e-4, 0.7, exactly("unsure", quantity.One, 7)), 0.001, screening.Accept, screening.WithinSpec, ""},
		{"a soft limit passes at half probability", toyPart(109, 1e-4, 0.7), 0.02, screening.Accept, screening.Serviceable, ""},
		{"too near for the meter, a wider tolerance passes: accepted at it", toyPart(111, 1e-4, 0.7), 0.02, screening.Accept, screening.WithinSpec, "±20 %"},
		{"out of band with a lesser claim is regraded", toyPart(150, 1e-4, 0.7), 0.001, screening.Regrade, screening.WithinSpec, "as measured"},
		{"a failure that a treatment can undo is treated", toyPart(100, 5e-3, 0.7), 0.001, screening.Treat, screening.AnyGrade, ""},
		{"a failure that nothing answers is rejected", toyPart(100, 1e-4, 0.2), 0.001, screening.Reject, screening.AnyGrade, ""},
		{"an irrecoverable failure beside a treatable one is rejected", toyPart(100, 5e-3, 0.2), 0.001, screening.Reject, screening.AnyGrade, ""},
		{"a required reading that is missing leaves it undecided", toyPart(100, none, 0.7), 0.001, screening.Undecided, screening.AnyGrade, ""},
		{"a poor meter never rejects a perfect part", toyPart(100, 1e-4, 0.65), 0.5, screening.Undecided, screening.AnyGrade, ""},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			j, err := screening.Judge(toy(), c.part, relative(c.u))
			if err != nil {
				t.Fatal(err)
			}
			as := ""
			if j.RegradedAs != nil {
				as = j.RegradedAs.Text
			}
			if j.Verdict != c.verdict || j.Grade != c.grade || as != c.as {
				t.Errorf("verdict %v, grade %q, as %q; want %v, %q, %q\nreasons: %v", j.Verdict, j.Grade, as, c.verdict, c.grade, c.as, j.Reasons)
			}
			if len(j.Next) == 0 {
				t.Error("no next step is given")
			}
		})
	}
}

func TestStopsDecideWhateverTheReadingsSay(t *testing.T) {
	for _, c := range []struct {
		name string
		look []screening.Observation
		want screening.Verdict
	}{
		{"looked at and sound", []screening.Observation{{Check: "cracked"}}, screening.Accept},
		{"cracked bars a perfect part", []screening.Observation{{Check: "cracked", Fault: true}}, screening.Barred},
		{"burnt rejects a perfect part", []screening.Observation{{Check: "burnt", Fault: true}}, screening.Reject},
		{"barred outweighs rejected", []screening.Observation{{Check: "burnt", Fault: true}, {Check: "cracked", Fault: true}}, screening.Barred},
		{"in circuit holds the verdict on a perfect part", []screening.Observation{{Check: "in-circuit", Fault: true}}, screening.Undecided},
		{"a stop outweighs a hold", []screening.Observation{{Check: "in-circuit", Fault: true}, {Check: "burnt", Fault: true}}, screening.Reject},
		{"what is only kept decides nothing", []screening.Observation{{Check: "short-leads", Fault: true}}, screening.Accept},
		{"the last look counts", []screening.Observation{{Check: "cracked", Fault: true}, {Check: "cracked"}}, screening.Accept},
	} {
		t.Run(c.name, func(t *testing.T) {
			p := toyPart(100, 1e-4, 0.7)
			p.Look = c.look
			j, err := screening.Judge(toy(), p, relative(0.001))
			if err != nil || j.Verdict != c.want {
				t.Errorf("verdict %v, %v; want %v", j.Verdict, err, c.want)
			}
		})
	}
}

func TestAHoldKeepsABadPartFromBeingRejected(t *testing.T) {
	p := toyPart(100, 1e-4, 5)
	p.Look = []screening.Observation{{Check: "in-circuit", Fault: true}}
	j, err := screening.Judge(toy(), p, relative(0.001))
	if err != nil || j.Verdict != screening.Undecided {
		t.Errorf("verdict %v, %v; what was measured in circuit rejects nothing", j.Verdict, err)
	}
	if len(j.Next) == 0 || j.Next[0].Code != screening.CodeHold || j.Next[0].Text != "LIFT one lead" {
		t.Errorf("the next step is %+v", j.Next)
	}
	if j.Reasons[0].Code != screening.CodeHold {
		t.Errorf("the first reason is %+v", j.Reasons[0])
	}
}

func TestWhatIsKeptIsSaidWithTheVerdict(t *testing.T) {
	p := toyPart(100, 1e-4, 0.7)
	p.Look = []screening.Observation{{Check: "short-leads", Fault: true}}
	j, _ := screening.Judge(toy(), p, relative(0.001))
	if last := j.Reasons[len(j.Reasons)-1]; last.Code != screening.CodeSeen || last.Text != "short leads seen" {
		t.Errorf("the last reason is %+v", last)
	}
}

// A figure from memory only comes close where a reading is beyond it; the house's laxer one, which may reject, still counts.
func TestWhatFailsTheLowestGradeIsAcceptedAtNoBetterOne(t *testing.T) {
	book := toy()
	inner := book.Limits
	book.Limits = func(c screening.Claim) ([]screening.Limit, error) {
		limits, err := inner(c)
		return append(limits, screening.Limit{
			On: "unsure", Unit: quantity.One, Criterion: "worn", Low: 0, High: 1, InUse: true, Need: screening.Wanted, Grade: screening.WithinSpec,
			Source: screening.Source{Document: "recalled", Status: screening.FromMemory},
		}, screening.Limit{
			On: "unsure", Unit: quantity.One, Criterion: "worn", Low: 0, High: 2, InUse: true, Need: screening.Wanted, Grade: screening.Serviceable,
			Source: screening.Source{Document: "house", Status: screening.House},
		}), err
	}
	for value, want := range map[float64]screening.Verdict{0.5: screening.Accept, 1.5: screening.Accept, 3: screening.Reject} {
		j, err := screening.Judge(book, toyPart(100, 1e-4, 0.7, exactly("unsure", quantity.One, value)), relative(0.001))
		if err != nil || j.Verdict != want {
			t.Errorf("%v: %v, %v; want %v", value, j.Verdict, err, want)
		}
	}
}

func TestAClaimCanBarAPartBeforeAnyNumber(t *testing.T) {
	book := toy()
	book.Bars = func(c screening.Claim) []screening.Stop {
		if c.Trait(screening.TraitTechnology) != "selenium" {
			return nil
		}
		return []screening.Stop{{Check: "selenium", Verdict: screening.Barred, Reason: "selenium", Do: "bag it"}}
	}
	p := toyPart(100, 1e-4, 0.7)
	if j, _ := screening.Judge(book, p, relative(0.001)); j.Verdict != screening.Accept {
		t.Errorf("verdict %v without the trait", j.Verdict)
	}
	p.Claim = p.Claim.WithTrait(screening.TraitTechnology, "selenium")
	j, _ := screening.Judge(book, p, relative(0.001))
	if j.Verdict != screening.Barred || len(j.Stops) != 1 {
		t.Errorf("verdict %v, stops %v", j.Verdict, j.Stops)
	}
	none := math.NaN()
	p = toyPart(none, none, none)
	p.Claim = p.Claim.WithTrait(screening.TraitTechnology, "selenium")
	if q := screening.NewWalk(book, relative(0.001), p).Next(); q.Ask != screening.AskNothing {
		t.Errorf("a part that its claim bars is asked %+v", q)
	}
}

func TestTheLimitSetOfThePolicyCounts(t *testing.T) {
	policy := relative(0.001)
	policy.Sets = map[screening.Kind]map[screening.Criterion]screening.LimitSet{"toy": {"quick": "other"}}
	j, err := screening.Judge(toy(), toyPart(100, 1e-4, 0.7), policy)
	if err != nil || j.Verdict != screening.Reject {
		t.Errorf("verdict %v, %v; want reject under the other set", j.Verdict, err)
	}
}

func TestUndecidedNamesTheReadingAndTheAccuracy(t *testing.T) {
	none := math.NaN()
	j, _ := screening.Judge(toy(), toyPart(100, none, none), relative(0.001))
	if got := j.Next[0].Text; got != "MEASURE quick value" {
		t.Errorf("the first step is %q; the quick reading comes first", got)
	}
	near := toyPart(100, 1e-4, 0.79)
	j, _ = screening.Judge(toy(), near, relative(0.02))
	// distance 0.01 V, quantile 1.6449 (JCGM 106, table 1), half-width √3·0.01/1.6449/0.79 = 1.33 %
	if got := j.Next[0].Text; got != "REPEAT quick value: needs ±1.3 %" {
		t.Errorf("the step is %q", got)
	}
	if math.Abs(j.Next[0].Gap.Accuracy-0.01333) > 1e-4 {
		t.Errorf("accuracy needed %v; want 0.0133", j.Next[0].Gap.Accuracy)
	}
}

func TestTooFewDigitsAreNamedAsTheCause(t *testing.T) {
	coarse := toyPart(100, 1e-4, math.NaN(), screening.Reading{Of: "quick", Unit: quantity.Volt, Value: 0.7, Step: 0.1})
	j, err := screening.Judge(toy(), coarse, screening.DefaultPolicy())
	if err != nil || j.Next[0].Text != "REPEAT quick value with every digit that the meter shows, on its lowest range" {
		t.Errorf("the step is %q, %v", j.Next[0].Text, err)
	}
	if j.Reasons[0].Text != "quick value: read to too few digits: the last one is worth 100 mV" {
		t.Errorf("the reason is %q", j.Reasons[0].Text)
	}
}

// JCGM 106:2012 as recomputed from memory of its printed figures (status: from memory, recomputes), and the normal table.
func TestConformanceProbability(t *testing.T) {
	cases := []struct {
		name            string
		x, u, low, high float64
		want, tolerance float64
	}{
		{"7.3 Zener breakdown voltage −5.47 V against −5.40 V: 0.92", -5.47, 0.05, -inf, -5.40, 0.919243, 5e-7},
		{"7.4 oil viscosity 13.6 in 12.5 to 16.3: 0.66", 13.6, 1.8, 12.5, 16.3, 0.662630, 5e-7},
		{"reading on the limit: one half", -5.40, 0.05, -inf, -5.40, 0.5, 1e-12},
		{"−5.60 V", -5.60, 0.05, -inf, -5.40, 0.999968, 5e-7},
		{"−5.55 V", -5.55, 0.05, -inf, -5.40, 0.998650, 5e-7},
		{"−5.50 V", -5.50, 0.05, -inf, -5.40, 0.977250, 5e-7},
		{"−5.45 V", -5.45, 0.05, -inf, -5.40, 0.841345, 5e-7},
		{"−5.42 V", -5.42, 0.05, -inf, -5.40, 0.655422, 5e-7},
		{"−5.38 V", -5.38, 0.05, -inf, -5.40, 0.344578, 5e-7},
		{"−5.35 V", -5.35, 0.05, -inf, -5.40, 0.158655, 5e-7},
		{"−5.32 V", -5.32, 0.05, -inf, -5.40, 0.054799, 5e-7},
		{"−5.30 V", -5.30, 0.05, -inf, -5.40, 0.022750, 5e-7},
		{"an exact reading on the bound is inside", 5.4, 0, 4.8, 5.4, 1, 0},
		{"an exact reading beyond the bound is outside", 5.41, 0, 4.8, 5.4, 0, 0},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			below, above := screening.ConformanceProbability(c.x, c.u, c.low, c.high)
			if got := 1 - below - above; math.Abs(got-c.want) > c.tolerance {
				t.Errorf("p = %.7f; want %.7f", got, c.want)
			}
		})
	}
}

// JCGM 100 (GUM) worked figures, from memory, recomputed.
func TestUncertaintyOfAMeter(t *testing.T) {
	volts := func(a screening.Accuracy) screening.Meter {
		return screening.Meter{ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Volt: a}}
	}
	cases := []struct {
		name    string
		meter   screening.Meter
		reading screening.Reading
		want    float64
	}{
		{"4.3.7 example 2: 14e-6 of reading and 2e-6 of a 1 V range: u = 8.7 µV", volts(screening.Accuracy{Relative: 14e-6, Absolute: 2e-6}), screening.Reading{Unit: quantity.Volt, Value: 0.928571}, 8.660251e-6},
		{"two counts of 10 mV", volts(screening.Accuracy{Counts: 2}), screening.Reading{Unit: quantity.Volt, Value: 5.1, Step: 0.01}, 0.02 / math.Sqrt(3)},
		{"F.2.2.1: never less than the digit, 0.29 of the step", volts(screening.Accuracy{Relative: 1e-12}), screening.Reading{Unit: quantity.Volt, Value: 5, Step: 1}, 0.288675},
		{"4.2.3: repeats add s/√n", volts(screening.Accuracy{Relative: 1e-12}), screening.Reading{Unit: quantity.Volt, Value: 5, Repeats: []float64{4.9, 5.0, 5.1}}, 0.1 / math.Sqrt(3)},
		{"an exact meter has none", screening.ExactMeter(), screening.Reading{Unit: quantity.Volt, Value: 5, Step: 1}, 0},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if got := c.meter.Uncertainty(c.reading); math.Abs(got-c.want) > 1e-6*math.Max(c.want, 1e-3) {
				t.Errorf("u = %g; want %g", got, c.want)
			}
		})
	}
}

// The defaults that the design states for the assumed meter.
func TestAssumedMeter(t *testing.T) {
	m := screening.AssumedMeter()
	for _, c := range []struct {
		name      string
		reading   screening.Reading
		halfwidth float64
	}{
		{"volts ±(1 % + 2 counts)", screening.Reading{Of: "vf", Unit: quantity.Volt, Value: 0.7, Step: 0.001}, 0.009},
		{"resistance ±(1 % + 0.3 Ω)", screening.Reading{Of: "resistance", Unit: quantity.Ohm, Value: 1000}, 10.3},
		{"capacitance ±3 %", screening.Reading{Of: "capacitance", Unit: quantity.Farad, Value: 100e-6}, 3e-6},
		{"ESR ±(10 % + 20 mΩ)", screening.Reading{Of: "esr", Unit: quantity.Ohm, Value: 0.1}, 0.03},
		{"currents ±(2 % + 2 counts)", screening.Reading{Of: "leakage", Unit: quantity.Ampere, Value: 45e-6, Step: 1e-6}, 2.9e-6},
		{"hFE ±10 %", screening.Reading{Of: "hfe", Unit: quantity.One, Value: 180, Step: 1}, 18},
		{"temperature ±3 K", screening.Reading{Of: "temperature", Unit: quantity.Celsius, Value: 24, Step: 1}, 3},
	} {
		t.Run(c.name, func(t *testing.T) {
			if got := m.Uncertainty(c.reading) * math.Sqrt(3); math.Abs(got-c.halfwidth) > 1e-9*c.halfwidth+1e-15 {
				t.Errorf("half-width %g; want %g", got, c.halfwidth)
			}
		})
	}
}

func TestOneSidedReadings(t *testing.T) {
	book := toy()
	quick := func(sense quantity.Sense, x float64) screening.Part {
		p := toyPart(100, 1e-4, math.NaN())
		p.Readings = append(p.Readings, screening.Reading{Of: "quick", Unit: quantity.Volt, Value: x, Sense: sense})
		return p
	}
	slow := func(sense quantity.Sense, x float64) screening.Part {
		p := toyPart(100, math.NaN(), 0.7)
		p.Readings = append(p.Readings, screening.Reading{Of: "slow", Unit: quantity.Ampere, Value: x, Sense: sense})
		return p
	}
	for _, c := range []struct {
		name string
		part screening.Part
		want screening.Verdict
	}{
		{"at most 1 µA clears a limit of 1 mA", slow(quantity.AtMost, 1e-6), screening.Accept},
		{"at most 2 mA says nothing of a limit of 1 mA", slow(quantity.AtMost, 2e-3), screening.Undecided},
		{"at least 2 mA refutes a limit of 1 mA", slow(quantity.AtLeast, 2e-3), screening.Treat},
		{"at least 0.6 V cannot prove 0.5 to 0.8 V", quick(quantity.AtLeast, 0.6), screening.Undecided},
		{"at least 2 V refutes 0.5 to 0.8 V", quick(quantity.AtLeast, 2), screening.Reject},
		{"at most 0.2 V refutes 0.5 to 0.8 V", quick(quantity.AtMost, 0.2), screening.Reject},
	} {
		t.Run(c.name, func(t *testing.T) {
			j, err := screening.Judge(book, c.part, relative(0.001))
			if err != nil || j.Verdict != c.want {
				t.Errorf("verdict %v, %v; want %v", j.Verdict, err, c.want)
			}
		})
	}
}

func TestALaterReadingSupersedesAndARepeatedOneIsASeries(t *testing.T) {
	p := toyPart(100, 1e-4, 0.2)
	p.Readings = append(p.Readings, exactly("quick", quantity.Volt, 0.7))
	if j, _ := screening.Judge(toy(), p, relative(0.001)); j.Verdict != screening.Accept {
		t.Errorf("verdict %v; the later reading counts", j.Verdict)
	}
	s := screening.Series(
		screening.Reading{Of: "quick", Value: 0.69, Step: 0.01, Typed: "0.69"},
		screening.Reading{Of: "quick", Value: 0.71, Step: 0.01, Typed: "0.71"},
	)
	if math.Abs(s.Value-0.70) > 1e-12 || len(s.Repeats) != 2 || s.Typed != "0.69,0.71" || math.Abs(s.Spread()-0.0141421) > 1e-6 {
		t.Errorf("series is %+v with spread %v", s, s.Spread())
	}
}

func TestPowerOfTen(t *testing.T) {
	part := toyPart(math.NaN(), math.NaN(), math.NaN())
	for _, c := range []struct {
		name  string
		x     float64
		k     int
		alarm bool
	}{
		{"the nominal raises none", 100, 0, false},
		{"a tenth", 10, 1, true},
		{"ten times", 1000, -1, true},
		{"a thousandth: mΩ for Ω", 0.1, 3, true},
		{"a million times", 100e6, -6, true},
		{"a trillionth", 100e-12, 12, true},
		{"10^4 is no usual slip", 0.01, 0, false},
		{"plainly out of band is a bad part, not a slip", 150, 0, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			a, ok := screening.PowerOfTen(toy(), part, exactly("value", quantity.Ohm, c.x))
			if ok != c.alarm || a.Exponent != c.k {
				t.Errorf("alarm %v with exponent %d; want %v, %d", ok, a.Exponent, c.alarm, c.k)
			}
		})
	}
	unclaimed := screening.Part{Kind: "toy"}
	if _, ok := screening.PowerOfTen(toy(), unclaimed, exactly("value", quantity.Ohm, 10)); ok {
		t.Error("an alarm without a nominal")
	}
}

func TestPlausible(t *testing.T) {
	ampere := screening.Field{Definition: screening.Definition{Name: "slow", Label: "leakage current", Unit: quantity.Ampere}}
	celsius := screening.Field{Definition: screening.Temperature}
	for _, c := range []struct {
		name  string
		field screening.Field
		x     float64
		step  float64
		want  float64
		fault string
	}{
		{"within two digits of zero is zero", ampere, -2e-7, 1e-7, 0, ""},
		{"negative beyond the last digits is refused", ampere, -3e-7, 1e-7, 0, "cannot be negative"},
		{"NaN is refused", ampere, math.NaN(), 0, 0, "not a finite number"},
		{"infinity is refused", ampere, inf, 0, 0, "not a finite number"},
		{"−5 °C is a temperature", celsius, -5, 1, -5, ""},
		{"1000 °C is not the temperature of a part", celsius, 1000, 1, 0, "lies between"},
	} {
		t.Run(c.name, func(t *testing.T) {
			r, err := screening.Plausible(c.field, screening.Reading{Of: c.field.Name, Unit: c.field.Unit, Value: c.x, Step: c.step})
			switch {
			case c.fault == "" && (err != nil || r.Value != c.want):
				t.Errorf("%v, %v; want %v", r.Value, err, c.want)
			case c.fault != "" && (err == nil || !strings.Contains(err.Error(), c.fault)):
				t.Errorf("error %v; want one that says %q", err, c.fault)
			}
		})
	}
}

func BenchmarkJudge(b *testing.B) {
	book, part, policy := toy(), toyPart(100, 1e-4, 0.7), relative(0.001)
	j, _ := screening.Judge(book, part, policy)
	b.ReportAllocs()
	for b.Loop() {
		_, _ = screening.Judge(book, part, policy)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(j.Findings)), "ns/finding")
}
