package screening_test

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/screening"
	"goodbin/screening/conformity"
	"goodbin/screening/quantity"
)

// under is a policy with one relative standard uncertainty and a decision rule.
func under(rule screening.DecisionRule, u float64) screening.Policy {
	p := relative(u)
	p.Rule = rule
	return p
}

// u is 0.02 of the reading, so U about 0.04: ILAC-G8 and ISO 14253-1 with their guard bands, against 0.5 to 1 V.
func TestEveryDecisionRuleDrawsItsLines(t *testing.T) {
	const pass, closeTo, fail = screening.Pass, screening.Close, screening.Fail
	for _, tt := range []struct {
		x    float64
		want map[screening.DecisionRule]screening.Outcome
		says [4]string // statement by probability, guard band, 0.83, simple
	}{
		{0.75, map[screening.DecisionRule]screening.Outcome{screening.ByProbability: pass, screening.GuardBand: pass, screening.GuardBand83: pass, screening.SimpleAcceptance: pass}, [4]string{"pass", "pass", "pass", "pass"}},
		{0.965, map[screening.DecisionRule]screening.Outcome{screening.ByProbability: pass, screening.GuardBand: closeTo, screening.GuardBand83: pass, screening.SimpleAcceptance: pass}, [4]string{"conditional pass", "conditional pass", "pass", "pass"}},
		{0.99, map[screening.DecisionRule]screening.Outcome{screening.ByProbability: closeTo, screening.GuardBand: closeTo, screening.GuardBand83: closeTo, screening.SimpleAcceptance: pass}, [4]string{"conditional pass", "conditional pass", "conditional pass", "pass"}},
		{1.001, map[screening.DecisionRule]screening.Outcome{screening.ByProbability: closeTo, screening.GuardBand: closeTo, screening.GuardBand83: closeTo, screening.SimpleAcceptance: fail}, [4]string{"conditional fail", "conditional fail", "conditional fail", "fail"}},
		{1.038, map[screening.DecisionRule]screening.Outcome{screening.ByProbability: fail, screening.GuardBand: closeTo, screening.GuardBand83: fail, screening.SimpleAcceptance: fail}, [4]string{"conditional fail", "conditional fail", "fail", "fail"}},
		{1.05, map[screening.DecisionRule]screening.Outcome{screening.ByProbability: fail, screening.GuardBand: fail, screening.GuardBand83: fail, screening.SimpleAcceptance: fail}, [4]string{"fail", "fail", "fail", "fail"}},
		{0.45, map[screening.DecisionRule]screening.Outcome{screening.ByProbability: fail, screening.GuardBand: fail, screening.GuardBand83: fail, screening.SimpleAcceptance: fail}, [4]string{"fail", "fail", "fail", "fail"}},
	} {
		for i, rule := range screening.DecisionRules() {
			j := judged(t, withLimits(quickLimit(0.5, 1)), under(rule, 0.02), exactly("quick", quantity.Volt, tt.x))
			f := &j.Findings[0]
			if f.Outcome != tt.want[rule] {
				t.Errorf("%v V, %s: %s, want %s (%s)", tt.x, rule, f.Outcome, tt.want[rule], f.Why)
			}
			if got := f.Statement(rule).String(); got != tt.says[i] {
				t.Errorf("%v V, %s: stated as %q, want %q", tt.x, rule, got, tt.says[i])
			}
			consumer, producer := f.Risk()
			if p := conformity.Probability(tt.x, f.Reading.U, conformity.Interval{Low: 0.5, High: 1}); math.Abs(producer-p) > 1e-12 || math.Abs(consumer+producer-1) > 1e-12 {
				t.Errorf("%v V: risks %g and %g, conformance probability %g", tt.x, consumer, producer, p)
			}
		}
	}
}

// A test ratio near 1: by the guard band nothing is left to pass, and the verdict says so instead of failing a part.
func TestAGuardBandThatFillsTheToleranceDecidesNothing(t *testing.T) {
	l := quickLimit(0.95, 1.05)
	j := judged(t, withLimits(l), under(screening.GuardBand, 0.03), exactly("quick", quantity.Volt, 1))
	f := &j.Findings[0]
	if j.Verdict != screening.Undecided || f.Why != "the guard band of this meter leaves nothing to accept" || f.Statement(screening.GuardBand) != conformity.ConditionalPass {
		t.Errorf("%s: %q, %s", j.Verdict, f.Why, f.Statement(screening.GuardBand))
	}
	if ratio := f.TestRatio(); math.Abs(ratio-0.05/0.06) > 1e-9 {
		t.Errorf("test ratio %g", ratio)
	}
	if !strings.HasPrefix(j.Next[0].Text, "REPEAT quick value: needs ±") {
		t.Errorf("next %q", j.Next[0].Text)
	}
}

// A limit softer than the meter passes without a guard band, near its limit, and fails only beyond one.
func TestASoftLimitHasNoGuardBandToPass(t *testing.T) {
	l := quickLimit(0.5, 1)
	l.Grade, l.Soft = screening.Serviceable, true
	for x, want := range map[float64]screening.Outcome{0.9: screening.Pass, 0.99: screening.Pass, 1.01: screening.Close, 1.05: screening.Fail} {
		f := judged(t, withLimits(l), under(screening.GuardBand, 0.02), exactly("quick", quantity.Volt, x)).Findings[0]
		if f.Outcome != want || f.Outcome == screening.Pass && f.NearLimit != (x == 0.99) {
			t.Errorf("%v: %s, near %v", x, f.Outcome, f.NearLimit)
		}
	}
}

// What only bounds passes or fails by the same lines.
func TestBoundsUnderEveryRule(t *testing.T) {
	reading := func(x float64, sense quantity.Sense) screening.Reading {
		r := exactly("quick", quantity.Volt, x)
		r.Sense = sense
		return r
	}
	low, high := quickLimit(0.5, math.Inf(1)), quickLimit(math.Inf(-1), 1)
	for _, tt := range []struct {
		name string
		l    screening.Limit
		r    screening.Reading
		want [4]screening.Outcome // by probability, guard band, 0.83, simple
	}{
		{"at most 0.9 clears 1", high, reading(0.9, quantity.AtMost), [4]screening.Outcome{screening.Pass, screening.Pass, screening.Pass, screening.Pass}},
		{"at most 0.965 clears 1 by 1.8 u", high, reading(0.965, quantity.AtMost), [4]screening.Outcome{screening.Pass, screening.Missing, screening.Pass, screening.Pass}},
		{"at most 0.99", high, reading(0.99, quantity.AtMost), [4]screening.Outcome{screening.Missing, screening.Missing, screening.Missing, screening.Pass}},
		{"at most 0.4 refutes 0.5", low, reading(0.4, quantity.AtMost), [4]screening.Outcome{screening.Fail, screening.Fail, screening.Fail, screening.Fail}},
		{"at most 0.9 says nothing of 0.5", low, reading(0.9, quantity.AtMost), [4]screening.Outcome{}},
		{"at least 0.6 clears 0.5", low, reading(0.6, quantity.AtLeast), [4]screening.Outcome{screening.Pass, screening.Pass, screening.Pass, screening.Pass}},
		{"at least 1.2 refutes 1", high, reading(1.2, quantity.AtLeast), [4]screening.Outcome{screening.Fail, screening.Fail, screening.Fail, screening.Fail}},
	} {
		for i, rule := range screening.DecisionRules() {
			f := judged(t, withLimits(tt.l), under(rule, 0.02), tt.r).Findings[0]
			if f.Outcome != tt.want[i] {
				t.Errorf("%s, %s: %s", tt.name, rule, f.Outcome)
			}
			word := f.Statement(rule)
			if f.Outcome == screening.Missing && word != conformity.NoWord || f.Outcome == screening.Pass && word != conformity.Pass || f.Outcome == screening.Fail && word != conformity.Fail {
				t.Errorf("%s, %s: %s is stated as %q", tt.name, rule, f.Outcome, word)
			}
		}
	}
}

func TestADecisionRuleIsFoundByItsNames(t *testing.T) {
	for _, rule := range screening.DecisionRules() {
		for _, name := range []string{rule.String(), rule.Flag()} {
			if got, ok := screening.DecisionRuleNamed(name); !ok || got != rule {
				t.Errorf("%q is %v, %v", name, got, ok)
			}
		}
		if rule.Words() == "" {
			t.Errorf("%s has no words", rule)
		}
	}
	if _, ok := screening.DecisionRuleNamed("coin"); ok {
		t.Error("a coin decides")
	}
}

// drawnLimit draws a limit about 1 V: two bounds, or one.
func drawnLimit(t *rapid.T) screening.Limit {
	l := quickLimit(rapid.Float64Range(0.2, 0.99).Draw(t, "low"), rapid.Float64Range(1.01, 5).Draw(t, "high"))
	switch rapid.IntRange(0, 2).Draw(t, "open") {
	case 1:
		l.Low = math.Inf(-1)
	case 2:
		l.High = math.Inf(1)
	}
	l.Soft, l.Grade = true, rapid.SampledFrom([]screening.Grade{screening.WithinSpec, screening.Serviceable}).Draw(t, "grade")
	return l
}

func judgedBy(t *rapid.T, b *screening.Rulebook, p screening.Policy, readings ...screening.Reading) screening.Judgement {
	j, err := screening.Judge(b, screening.Part{Readings: readings}, p)
	if err != nil {
		t.Fatal(err)
	}
	return j
}

func TestWideningUNeverDecidesWhatWasClose(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := withLimits(drawnLimit(t))
		rule := rapid.SampledFrom(screening.DecisionRules()).Draw(t, "rule")
		u := rapid.Float64Range(0, 0.3).Draw(t, "u")
		wider := u * rapid.Float64Range(1, 5).Draw(t, "wider")
		r := exactly("quick", quantity.Volt, rapid.Float64Range(0.1, 6).Draw(t, "x"))
		before := judgedBy(t, b, under(rule, u), r).Findings[0]
		after := judgedBy(t, b, under(rule, wider), r).Findings[0]
		if before.Outcome == screening.Close && after.Outcome != screening.Close || before.Outcome != after.Outcome && after.Outcome != screening.Close {
			t.Fatalf("%s: %s at u %g, %s at %g", rule, before.Outcome, u, after.Outcome, wider)
		}
	})
}

func TestOneSidedProbabilityFollowsTheReading(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		u := rapid.Float64Range(0, 1).Draw(t, "u")
		x := rapid.Float64Range(-5, 5).Draw(t, "x")
		y := x + rapid.Float64Range(0, 3).Draw(t, "more")
		bound := rapid.Float64Range(-3, 3).Draw(t, "bound")
		_, aboveX := screening.ConformanceProbability(x, u, math.Inf(-1), bound)
		_, aboveY := screening.ConformanceProbability(y, u, math.Inf(-1), bound)
		belowX, _ := screening.ConformanceProbability(x, u, bound, math.Inf(1))
		belowY, _ := screening.ConformanceProbability(y, u, bound, math.Inf(1))
		if aboveY < aboveX || belowY > belowX {
			t.Fatalf("from %g to %g: above %g to %g, below %g to %g", x, y, aboveX, aboveY, belowX, belowY)
		}
	})
}

// The accuracy that a close finding asks for decides it: with a meter of just that the same reading passes or fails, with a slightly worse one
// it does not.
func TestTheAccuracyAskedForDecides(t *testing.T) {
	asked := 0
	rapid.Check(t, func(t *rapid.T) {
		b := withLimits(drawnLimit(t))
		rule := rapid.SampledFrom(screening.DecisionRules()).Draw(t, "rule")
		r := exactly("quick", quantity.Volt, rapid.Float64Range(0.1, 6).Draw(t, "x"))
		f := judgedBy(t, b, under(rule, rapid.Float64Range(0.001, 0.5).Draw(t, "u")), r).Findings[0]
		if f.Outcome != screening.Close {
			return
		}
		a := f.Wants.Accuracy
		if a == 0 {
			if math.Min(math.Abs(r.Value-f.Limit.Low), math.Abs(r.Value-f.Limit.High)) > 1e-6 {
				t.Fatalf("%v in %v..%v is close and no accuracy would do", r.Value, f.Limit.Low, f.Limit.High)
			}
			return
		}
		asked++
		if got := judgedBy(t, b, under(rule, 0.999999*a/math.Sqrt(3)), r).Findings[0].Outcome; got == screening.Close {
			t.Fatalf("%v in %v..%v by %s: still close at ±%g", r.Value, f.Limit.Low, f.Limit.High, rule, a)
		}
		if got := judgedBy(t, b, under(rule, 1.0001*a/math.Sqrt(3)), r).Findings[0].Outcome; got != screening.Close {
			t.Fatalf("%v in %v..%v by %s: ±%g would do", r.Value, f.Limit.Low, f.Limit.High, rule, 1.0001*a)
		}
	})
	if asked == 0 {
		t.Error("nothing was ever close")
	}
}

// verdictRank orders verdicts from the best news to the worst as removing evidence may move them: undecided is worse than any usable one and
// better than none.
func TestRemovingEvidenceImprovesNothing(t *testing.T) {
	accepted := 0
	rapid.Check(t, func(t *rapid.T) {
		part := toyPart(
			rapid.Float64Range(70, 130).Draw(t, "value"), rapid.Float64Range(0, 1.5e-3).Draw(t, "slow"), rapid.Float64Range(0.4, 0.9).Draw(t, "quick"),
			exactly("unsure", quantity.One, rapid.Float64Range(0, 2).Draw(t, "unsure")),
		)
		policy := under(rapid.SampledFrom(screening.DecisionRules()).Draw(t, "rule"), rapid.Float64Range(0.0001, 0.1).Draw(t, "u"))
		full, err := screening.Judge(toy(), part, policy)
		if err != nil {
			t.Fatal(err)
		}
		if full.Verdict == screening.Accept {
			accepted++
		}
		for i, removed := range part.Readings {
			less := part
			less.Readings = append(append([]screening.Reading(nil), part.Readings[:i]...), part.Readings[i+1:]...)
			j, err := screening.Judge(toy(), less, policy)
			if err != nil {
				t.Fatal(err)
			}
			if removed.Of != "unsure" && j.Verdict.Usable() {
				t.Fatalf("without its %s it is %s", removed.Of, j.Verdict)
			}
			if passes(full, removed.Of) && (j.Verdict < full.Verdict || j.Grade > full.Grade) {
				t.Fatalf("without its passing %s it goes from %s %s to %s %s", removed.Of, full.Verdict, full.Grade, j.Verdict, j.Grade)
			}
		}
	})
	if accepted == 0 {
		t.Error("no drawn part was ever accepted")
	}
}

// passes reports whether every limit on a characteristic passes.
func passes(j screening.Judgement, of screening.Characteristic) bool {
	any := false
	for i := range j.Findings {
		f := &j.Findings[i]
		if f.Limit.On == of {
			if f.Outcome != screening.Pass {
				return false
			}
			any = true
		}
	}
	return any
}
