package screening

import (
	"math"

	"goodbin/screening/uncertainty"
)

// doubt is what makes a reading as taken uncertain, as standard uncertainties, SI: the cheap form of its budget, from which both the judge's
// one number and the list that people see are made.
type doubt struct {
	spec, digit, offset float64
	scatter             uncertainty.Scatter
	meanU               float64 // s/√n of the repeats
	prior               float64 // the spread that two or three repeats are not believed below
	a                   Accuracy
	exact               bool // an exact meter: nothing is uncertain
	covered             bool // the meter's own claim counts, not the assumed one's
}

// A meter that does not state the spread of its repeats is taken to repeat to a tenth of its specification, and to a digit (house).
const spreadOfSpec = 0.1

// doubt evaluates a reading.
func (m *Meter) doubt(r *Reading) doubt {
	x := r.shown()
	d := doubt{scatter: uncertainty.Scatter{Factor: 1, Freedom: math.Inf(1)}}
	d.a, _, d.covered = m.accuracy(r.Of, r.Unit, x, r.Step)
	if d.a == (Accuracy{}) {
		d.exact = true
		return d
	}
	claim, digit := d.a.claim(x, r.Step)
	d.spec, d.digit = uncertainty.Rectangular(claim), uncertainty.Rectangular(digit)
	if d.a.Confidence == Normal99 {
		d.spec = claim / uncertainty.Divisor99
	}
	_, d.offset, _ = m.Leads.offset(r)
	if n := len(r.Repeats); n > 1 {
		s := r.Spread()
		if d.prior = d.a.Spread; d.prior == 0 {
			d.prior = math.Max(spreadOfSpec*claim, uncertainty.Resolution(math.Max(r.Step, d.a.Resolution)))
		}
		d.scatter = uncertainty.OfRepeats(n, s, d.prior)
		d.meanU = s / math.Sqrt(float64(n))
	}
	return d
}

// plain is the combined standard uncertainty with s/√n as it stands (JCGM 100).
func (d *doubt) plain() float64 {
	return math.Sqrt(d.fixed() + d.meanU*d.meanU)
}

// judged is the combined standard uncertainty with the scatter of few repeats widened (JCGM 101).
func (d *doubt) judged() float64 {
	return math.Sqrt(d.fixed() + d.scatter.U*d.scatter.U)
}

// fixed is the variance that no repeats shrink.
func (d *doubt) fixed() float64 { return d.spec*d.spec + d.digit*d.digit + d.offset*d.offset }
