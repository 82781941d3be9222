package screening

import (
	"math"

	"goodbin/screening/conformity"
	"goodbin/screening/quantity"
)

// DecisionRule says how a reading with its uncertainty is held against a limit.
type DecisionRule uint8

// The decision rules. Under every rule but simple acceptance a reading fails a part only where the bound lies beyond the meter's
// specification too, and what neither passes nor fails is close.
const (
	ByProbability    DecisionRule = iota // JCGM 106:2012 conformance probability against the policy's thresholds
	SimpleAcceptance                     // the reading against the closed interval; shared risk
	GuardBand                            // limits narrowed, to fail widened, by w = U, U = 2·u (ILAC-G8:09/2019)
	GuardBand83                          // the same by w = 0.83·U (ISO 14253-1:2017)
)

var decisionNames = [...]string{"by-probability", "simple-acceptance", "guard-band", "guard-band-0.83"}

var decisionWords = [...]string{
	"by probability of conformance (JCGM 106)",
	"simple acceptance: the reading inside the limits, its uncertainty left aside",
	"guard band as wide as the expanded uncertainty, U = 2·u (ILAC-G8)",
	"guard band of 0.83 of the expanded uncertainty, U = 2·u (ISO 14253-1:2017)",
}

// DecisionRules lists the decision rules, the default first.
func DecisionRules() []DecisionRule {
	return []DecisionRule{ByProbability, GuardBand, GuardBand83, SimpleAcceptance}
}

// String returns the rule's name, as JSON spells it.
func (d DecisionRule) String() string { return decisionNames[min(int(d), len(decisionNames)-1)] }

// Flag returns the rule's name as the command line spells it: [DecisionRule.String], but "simple" for short.
func (d DecisionRule) Flag() string {
	if d == SimpleAcceptance {
		return "simple"
	}
	return d.String()
}

// Words says what the rule does, to be shown with a verdict.
func (d DecisionRule) Words() string { return decisionWords[min(int(d), len(decisionWords)-1)] }

// DecisionRuleNamed finds a rule by its name or its flag; it reports false for an unknown one.
func DecisionRuleNamed(name string) (DecisionRule, bool) {
	for _, d := range DecisionRules() {
		if name == d.String() || name == d.Flag() {
			return d, true
		}
	}
	return ByProbability, false
}

// Guard returns the guard band's width w/U. By probability has none of its own; its statements of conformity are made with w = U.
func (d DecisionRule) Guard() float64 {
	switch d {
	case SimpleAcceptance:
		return 0
	case GuardBand83:
		return 0.83
	}
	return 1
}

// interval returns a limit's bounds.
func (l *Limit) interval() conformity.Interval { return conformity.Interval{Low: l.Low, High: l.High} }

// soft reports whether a limit is a convention vaguer than the meter, which passes without a guard band and at the policy's soft probability.
func (l *Limit) soft() bool { return l.Soft && l.Grade == Serviceable }

// weighed is what a decision rule makes of a value.
type weighed struct {
	outcome Outcome // Pass, Close or Fail
	side    Side
	near    bool // passes only because the limit is soft
}

// weigh decides one value with standard uncertainty u against a limit. A meter that keeps its specification is never further off than spec, so
// a value fails only where the bound lies beyond that too: a poor meter never rejects a perfect part.
func (p *Policy) weigh(l *Limit, x, u, spec, below, above float64) weighed {
	w := weighed{outcome: Close}
	if below > above {
		w.side = Below
	} else if above > 0 {
		w.side = Above
	}
	var fails [2]bool
	if p.Rule == ByProbability {
		conforms := math.Max(0, 1-below-above)
		if conforms >= p.threshold(l) {
			w.outcome, w.near = Pass, conforms < p.Accept
			return w
		}
		fails = [2]bool{below >= p.Reject, above >= p.Reject}
	} else {
		accept, keep := p.zones(l, u)
		if accept.Contains(x) {
			w.outcome, w.near = Pass, !l.interval().Guarded(l.guard(p.Rule, u)).Contains(x)
			return w
		}
		fails = [2]bool{x < keep.Low, x > keep.High}
	}
	if p.Rule == SimpleAcceptance {
		spec = 0
	}
	switch {
	case fails[0] && l.Low-x > spec:
		w.outcome, w.side = Fail, Below
	case fails[1] && x-l.High > spec:
		w.outcome, w.side = Fail, Above
	}
	return w
}

// guard is the guard band's width, SI.
func (l *Limit) guard(rule DecisionRule, u float64) float64 {
	return rule.Guard() * conformity.Coverage * u
}

// zones returns the values that a rule with a guard band accepts, and those outside which it rejects.
func (p *Policy) zones(l *Limit, u float64) (accept, keep conformity.Interval) {
	w := l.guard(p.Rule, u)
	keep = l.interval().Guarded(-w)
	if l.soft() {
		return l.interval(), keep
	}
	return l.interval().Guarded(w), keep
}

// hold decides one limit by one reading that fits it.
func (j *judging) hold(f *Finding, r *Reading) {
	l := &f.Limit
	f.By = ByReading
	f.Outcome, f.Why = Missing, ""
	below, above := conformity.Outside(r.Value, r.U, l.interval())
	f.Margin = margin(r.Value, l.Low, l.High)
	f.Side = Inside
	switch r.Sense {
	case quantity.Exactly:
		f.Probability = math.Max(0, 1-below-above)
		w := j.policy.weigh(l, r.Value, r.U, specOf(f, r), below, above)
		f.Outcome, f.Side, f.NearLimit = w.outcome, w.side, w.near
		if j.policy.Rule == SimpleAcceptance && w.outcome == Pass {
			f.Side = Inside
		}
	case quantity.AtMost:
		// The true value is no more than x: it can clear the upper bound and refute the lower one.
		j.holdOneSided(f, r, 1-above, below, Below, math.IsInf(l.Low, -1) || l.Low <= 0 && j.nonNegative(l))
	case quantity.AtLeast:
		j.holdOneSided(f, r, 1-below, above, Above, math.IsInf(l.High, 1))
	}
	if f.Outcome == Fail && !l.Source.Status.MayReject() {
		f.Outcome, f.Unconfirmed = Close, true
		f.Why = "out of limits, but the figure is " + l.Source.Status.String()
	}
	if f.Outcome == Close && !f.Unconfirmed {
		j.tooNear(f, r)
	}
}

// specOf returns how far the meter may be off at a reading; the specification says nothing of a converted value.
func specOf(f *Finding, r *Reading) float64 {
	if f.Converted != nil {
		return 0
	}
	return r.Spec
}

// holdOneSided settles a limit by a reading that only bounds: clear is the probability that the bound itself clears the side it speaks
// for, refuted that it lies beyond the other one, and open whether there is nothing on the side it cannot speak for.
func (j *judging) holdOneSided(f *Finding, r *Reading, clear, refuted float64, side Side, open bool) {
	l := &f.Limit
	clears, refutes := clear >= j.policy.threshold(l), refuted >= j.policy.Reject
	if j.policy.Rule != ByProbability {
		accept, keep := j.policy.zones(l, r.U)
		clears, refutes = r.Value <= accept.High, r.Value < keep.Low
		if side == Above {
			clears, refutes = r.Value >= accept.Low, r.Value > keep.High
		}
	}
	switch {
	case refutes:
		f.Outcome, f.Side, f.Probability = Fail, side, 1-refuted
	case open && clears:
		f.Outcome, f.Probability = Pass, clear
		f.NearLimit = clear < j.policy.Accept && j.policy.Rule != SimpleAcceptance
	default:
		f.Why = "the reading only bounds the value and does not settle this limit"
	}
}

// nonNegative reports whether the limit's characteristic cannot be negative, so that a lower bound at or below zero is no bound.
func (j *judging) nonNegative(l *Limit) bool { return l.Unit != quantity.Celsius }

// Statement returns one of the four words of ILAC-G8 for a finding, with the guard band of the rule: pass, conditional pass, conditional
// fail, fail; NoWord where nothing was held against the limit. What only bounds, and a rating, passes or fails without conditions. By
// probability the guard band is U; under simple acceptance there is none, and no condition either.
func (f *Finding) Statement(rule DecisionRule) conformity.Word {
	e := f.Evidence()
	switch {
	case f.Outcome == Missing:
		return conformity.NoWord
	case e != nil && f.By == ByReading && e.Sense == quantity.Exactly:
		return conformity.Statement(e.Value, f.Limit.interval(), f.Limit.guard(rule, e.U))
	case f.Outcome == Pass:
		return conformity.Pass
	case f.Outcome == Fail || f.Unconfirmed:
		return conformity.Fail
	}
	return conformity.NoWord
}

// Risk returns the specific risk of deciding this finding either way (JCGM 106, 9.3): that a part which is accepted on it does not conform,
// and that one which is rejected on it does. They are NaN where no probability is known.
func (f *Finding) Risk() (consumer, producer float64) { return 1 - f.Probability, f.Probability }

// TestRatio returns the test uncertainty ratio of a finding's reading against its limit, U = 2·u; NaN where there is none. Near or below 1 the
// meter cannot decide this limit.
func (f *Finding) TestRatio() float64 {
	e := f.Evidence()
	if e == nil {
		return math.NaN()
	}
	return conformity.TestRatio(f.Limit.interval(), e.U)
}
