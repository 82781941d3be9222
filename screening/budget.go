package screening

import (
	"cmp"
	"fmt"
	"math"
	"strings"

	"goodbin/screening/quantity"
	"goodbin/screening/uncertainty"
)

// BudgetOf lists what makes a reading uncertain, for a reading as the judge prepared it. Its combined uncertainty is the reading's U: of a
// reading as taken the meter's specification, the digit, the leads and the repeats; of a derived one the inputs that its rule lists, with
// their sensitivities.
func BudgetOf(r Reading, policy Policy) uncertainty.Budget {
	b := uncertainty.Budget{Value: r.Value}
	if r.Rule != "" || r.From != nil {
		b.Contributions = derivedFrom(&r)
		return b
	}
	m := policy.meter(r.Meter)
	d := m.doubt(&r)
	if d.exact {
		return b
	}
	b.Contributions = make([]uncertainty.Contribution, 0, 5) // with room for a conversion
	source := cmp.Or(m.Name, "the meter's entry")
	switch {
	case !d.covered || m.Assumed && m.Name == "":
		source = "assumed meter (house)"
	case m.Assumed:
		source += ", typical figures from memory"
	}
	add := func(kind uncertainty.Kind, name string, u float64, source string) {
		if u > 0 {
			b.Contributions = append(b.Contributions, uncertainty.Contribution{
				Kind: kind, Name: name, U: u, Sensitivity: 1, Freedom: math.Inf(1), Factor: 1, Source: source,
			})
		}
	}
	add(uncertainty.Specification, d.a.text(r.Unit), d.spec, source+", "+d.a.Confidence.String())
	add(uncertainty.Digit, "last digit, "+quantity.Format(math.Max(r.Step, d.a.Resolution), r.Unit, 0), d.digit, "JCGM 100, F.2.2.1")
	_, _, leads := m.Leads.offset(&r)
	add(uncertainty.Offset, leads, d.offset, strings.TrimSpace("found with the leads shorted or open "+m.Leads.Found))
	if d.scatter.U > 0 {
		n := len(r.Repeats)
		name, source := fmt.Sprintf("spread %s over √%d", quantity.Format(r.Spread(), r.Unit, 3), n), "JCGM 100, 4.2.3"
		switch {
		case d.scatter.Prior:
			name, source = fmt.Sprintf("prior spread %s over √%d: %d repeats do not show their own", quantity.Format(d.prior, r.Unit, 3), n, n), "house"
		case d.scatter.Factor > 1:
			name, source = fmt.Sprintf("%s, ×%.3g for few repeats", name, d.scatter.Factor), source+"; JCGM 101, 6.4.9"
		}
		b.Contributions = append(b.Contributions, uncertainty.Contribution{
			Kind: uncertainty.Repeats, Name: name, U: d.scatter.U, Sensitivity: 1, Freedom: d.scatter.Freedom, Factor: d.scatter.Factor, Source: source,
		})
	}
	return b
}

// derivedFrom lists the inputs of a derived reading. What they leave of its U, and all of it where the rule lists none, is the rule's own.
func derivedFrom(r *Reading) []uncertainty.Contribution {
	var lines []uncertainty.Contribution
	rest := r.U * r.U
	for _, in := range r.From {
		c := uncertainty.Contribution{
			Kind: uncertainty.Input, Name: cmp.Or(in.Name, string(in.Of)), U: in.U, Sensitivity: in.Sensitivity, Freedom: math.Inf(1), Factor: 1, Source: r.Rule,
		}
		rest -= c.Part() * c.Part()
		lines = append(lines, c)
	}
	if rest > 1e-9*r.U*r.U {
		kind := uncertainty.Conversion
		if r.From == nil {
			kind = uncertainty.Input
		}
		lines = append(lines, uncertainty.Contribution{
			Kind: kind, Name: r.Rule, U: math.Sqrt(rest), Sensitivity: 1, Freedom: math.Inf(1), Factor: 1, Source: r.Rule,
		})
	}
	return lines
}

// Budget lists what makes the evidence of a finding uncertain, conversion included: the contributions of the reading as taken times the
// sensitivity of the conversion, and the conversion's own. Its combined uncertainty is that of [Finding.Evidence]; it is empty where there is
// none.
func (f *Finding) Budget(policy Policy) uncertainty.Budget {
	if f.Reading == nil {
		return uncertainty.Budget{Value: math.NaN()}
	}
	b := BudgetOf(*f.Reading, policy)
	c := f.Converted
	if c == nil {
		return b
	}
	b.Value = c.Reading.Value
	// Whatever the rule does to the value, its sensitivity is what of the converted uncertainty is not the rule's own.
	sensitivity, left := 0.0, c.Reading.U*c.Reading.U-c.U*c.U
	if left > 0 && f.Reading.U > 0 {
		sensitivity = math.Sqrt(left) / f.Reading.U
	}
	for i := range b.Contributions {
		b.Contributions[i].Sensitivity *= sensitivity
	}
	own := math.Min(c.U, c.Reading.U)
	if f.Reading.U == 0 {
		own = c.Reading.U
	}
	if own > 0 {
		b.Contributions = append(b.Contributions, uncertainty.Contribution{
			Kind: uncertainty.Conversion, Name: c.Rule, U: own, Sensitivity: 1, Freedom: math.Inf(1), Factor: 1, Source: c.Source.String(),
		})
	}
	return b
}

// text writes an accuracy as people do: "±(1 % + 2 counts + 20 mΩ)".
func (a Accuracy) text(unit quantity.Unit) string {
	var terms []string
	if a.Relative > 0 {
		terms = append(terms, quantity.Format(a.Relative, quantity.Ratio, 0))
	}
	if a.Counts > 0 {
		terms = append(terms, quantity.Format(a.Counts, quantity.One, 0)+" counts")
	}
	if a.Absolute > 0 {
		terms = append(terms, quantity.Format(a.Absolute, unit, 0))
	}
	switch len(terms) {
	case 0:
		return "half a digit"
	case 1:
		return "±" + terms[0]
	}
	return "±(" + strings.Join(terms, " + ") + ")"
}
