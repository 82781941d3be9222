package junction

import (
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var growsSource = screening.Source{Document: "forward voltage grows with current", Status: screening.CommonPractice}

// Currents is the range of currents, A, for which a limit on forward voltage holds as it stands, with the source that says so. The zero value
// is the limit's own current alone.
type Currents struct {
	From, To float64
	Source   screening.Source
}

// Forward brings a forward voltage to a limit's current. It grows with current, so a reading at another current bounds. keeps says that a
// limit is a maximum whose lower bound is one for any current above a tester's: what keeps the maximum even at more current, passes.
func Forward(r screening.Reading, l screening.Limit, holds Currents, keeps bool) screening.Conversion {
	i, stated := r.At.Get(screening.Current)
	want, _ := l.At.Get(screening.Current)
	if !stated || i <= 0 {
		return screening.Conversion{Why: "the current of the reading is not stated: " + string(l.On) + "@" + quantity.Format(want, quantity.Ampere, 0) + "=…"}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: growsSource}
	c.Reading.At = l.At
	from, to := want, want
	if holds.To > 0 {
		from, to, c.Source = holds.From, holds.To, holds.Source
	}
	amperes := quantity.Format(i, quantity.Ampere, 0)
	switch {
	case i >= from*0.999 && i <= to*1.001:
		c.Rule = "the band is taken for " + quantity.Format(from, quantity.Ampere, 0) + " to " + quantity.Format(to, quantity.Ampere, 0)
	case i > to && keeps && r.Sense == quantity.Exactly && r.Value <= l.High:
		c.Rule = "at " + amperes + " it keeps what is allowed at " + quantity.Format(want, quantity.Ampere, 0)
	case i < from && r.Sense != quantity.AtMost:
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at more current it drops no less than at "+amperes
	case i > to && r.Sense != quantity.AtLeast:
		c.Reading.Sense, c.Rule = quantity.AtMost, "at less current it drops no more than at "+amperes
	default:
		return screening.Conversion{Why: "taken at " + amperes + ", which says nothing of " + quantity.Format(want, quantity.Ampere, 0)}
	}
	c.Reading.Rule = c.Rule
	return c
}
