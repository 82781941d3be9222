package cli

import (
	"math"
	"strconv"

	"goodbin/screening"
	"goodbin/screening/conformity"
	"goodbin/screening/quantity"
	"goodbin/screening/uncertainty"
)

// coverage is the probability of a normal distribution within the two standard uncertainties that readings are printed with and guard bands are
// stated in, so that the coverage factor is 2 where nothing limits the degrees of freedom.
var coverage = math.Erf(conformity.Coverage / math.Sqrt2)

// printBudget prints under a finding what it states, its risk, and what makes its reading uncertain, the largest contribution first.
func (a *app) printBudget(f *screening.Finding, policy *screening.Policy) error {
	r := f.Evidence()
	if r == nil {
		return nil
	}
	if text := statementText(f, policy.Rule); text != "" {
		if err := a.env.wrapped(ruleIndent, text); err != nil {
			return err
		}
	}
	if f.By == screening.ByRating && f.Outcome == screening.Pass { // the reading was not what answered
		return nil
	}
	b := f.Budget(*policy)
	u := b.Combined()
	if u == 0 {
		return a.env.wrapped(ruleIndent, "budget: nothing is uncertain")
	}
	for _, c := range b.BySize() {
		if c.Part() == 0 {
			continue
		}
		if err := a.env.wrapped(ruleIndent+"  ", contributionText(c, u, r.Unit)); err != nil {
			return err
		}
	}
	return a.env.wrapped(ruleIndent+"  ", combinedText(b, r.Unit))
}

// contributionText words one line of a budget: "46 mΩ (98 %): ±(5 % + 20 mΩ); the ESR meter, rectangular".
func contributionText(c uncertainty.Contribution, combined float64, unit quantity.Unit) string {
	share := c.Part() / combined
	text := quantity.Format(c.Part(), unit, 2) + " (" + shareText(share*share) + ", " + c.Kind.String() + ")"
	for i, more := range []string{c.Name, c.Source} {
		switch {
		case more == "" || i > 0 && more == c.Name:
		case i == 0:
			text += ": " + more
		default:
			text += "; " + more
		}
	}
	if countsFreedom(c.Freedom) {
		text += "; " + freedomText(c.Freedom)
	}
	return text
}

// shareText prints a share of the variance in whole percent, and a small one as less than one.
func shareText(share float64) string {
	if share < 0.01 {
		return "< 1 %"
	}
	return strconv.Itoa(int(math.Round(100*share))) + " %"
}

func countsFreedom(freedom float64) bool { return freedom > 0 && !math.IsInf(freedom, 0) }

func freedomText(freedom float64) string {
	n := int(math.Floor(freedom))
	if n == 1 {
		return "1 degree of freedom"
	}
	return strconv.Itoa(n) + " degrees of freedom"
}

// combinedText is the last line of a budget: u, the coverage factor and U. The expanded uncertainty of few repeats takes Student's factor in
// the place of the widening that u holds, which is said.
func combinedText(b uncertainty.Budget, unit quantity.Unit) string {
	expanded, k := b.Expanded(coverage)
	text := "u = " + quantity.Format(b.Combined(), unit, 2) + ", k = " + strconv.FormatFloat(k, 'f', 2, 64) + ", U = " +
		quantity.Format(expanded, unit, 2) + " (" + strconv.FormatFloat(100*coverage, 'f', 1, 64) + " %)"
	if freedom := b.Freedom(); countsFreedom(freedom) {
		text += " with " + freedomText(freedom)
	}
	for _, c := range b.Contributions {
		if c.Factor > 1 {
			return text + "; k stands there for the widening of few repeats in u"
		}
	}
	return text
}

// statementText words the ILAC-G8 statement of a finding and the risk of deciding on it.
func statementText(f *screening.Finding, rule screening.DecisionRule) string {
	word := f.Statement(rule)
	if word == conformity.NoWord {
		return ""
	}
	text := "states: " + word.String() + " (ILAC-G8, "
	switch g := rule.Guard(); g {
	case 0:
		text += "no guard band)"
	case 1:
		text += "guard band U)"
	default:
		text += "guard band " + strconv.FormatFloat(g, 'g', -1, 64) + "·U)"
	}
	consumer, producer := f.Risk()
	if math.IsNaN(consumer) {
		return text
	}
	switch f.Outcome {
	case screening.Pass:
		return text + "; risk that it is outside nevertheless: " + riskText(consumer)
	case screening.Fail:
		return text + "; risk that it is inside nevertheless: " + riskText(producer)
	}
	return text + "; accepted, the risk that it is outside: " + riskText(consumer) + "; rejected, that it is inside: " + riskText(producer)
}

// riskText prints a probability in percent.
func riskText(p float64) string {
	switch {
	case p < 0.0001:
		return "< 0.01 %"
	case p > 0.9999:
		return "> 99.99 %"
	}
	return quantity.Format(p, quantity.Ratio, 2)
}
