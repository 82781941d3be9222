package screening

// Policy is the workbook's choices.
type Policy struct {
	Lowest Grade // the lowest grade that may be accepted
	Rule   DecisionRule
	Accept float64 // conformance probability needed to pass
	Soft   float64 // the same for serviceable soft limits
	Reject float64 // probability of lying outside on one side needed to fail
	// Sets chooses a limit set per kind and criterion over the rulebook's default.
	Sets map[Kind]map[Criterion]LimitSet
	// Meters are the instruments by name; readings that name none use the assumed meter, under "".
	Meters map[string]Meter
}

// DefaultPolicy is what design and README state: serviceable parts are accepted, 0.95 to pass and to fail, 0.5 for serviceable soft limits,
// general limit sets, the assumed meter.
func DefaultPolicy() Policy {
	return Policy{
		Lowest: Serviceable, Rule: ByProbability, Accept: 0.95, Soft: 0.5, Reject: 0.95,
		Meters: map[string]Meter{"": AssumedMeter()},
	}
}

// meter returns the instrument of a name; one that the policy does not know is the assumed one.
func (p *Policy) meter(name string) Meter {
	if m, ok := p.Meters[name]; ok {
		return m
	}
	return AssumedMeter()
}

// counts reports whether a limit takes part in the verdict under this policy.
func (p *Policy) counts(kind Kind, l *Limit) bool {
	if l.Need == RoleOnly {
		return false
	}
	if set, chosen := p.Sets[kind][l.Criterion]; chosen {
		return l.Set == set
	}
	return l.InUse
}

// threshold returns the conformance probability that a limit needs to pass.
func (p *Policy) threshold(l *Limit) float64 {
	if l.soft() {
		return p.Soft
	}
	return p.Accept
}
