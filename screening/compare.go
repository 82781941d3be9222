package screening

import (
	"math"

	"goodbin/screening/uncertainty"
)

// Ratio returns a/b with its budget, for two readings as the judge prepared them. What they have in common cancels: the gain error of one
// meter on one range, and the leads. Matching two parts therefore asks much less of a meter than grading either.
func Ratio(a, b Reading, policy Policy) uncertainty.Budget {
	return together(a, b, policy, a.Value/b.Value, 1/b.Value, -a.Value/(b.Value*b.Value))
}

// Difference returns a − b with its budget; what the readings have in common cancels as in [Ratio].
func Difference(a, b Reading, policy Policy) uncertainty.Budget {
	return together(a, b, policy, a.Value-b.Value, 1, -1)
}

// together lists the contributions of two readings. Each specification is taken apart into the gain, which is wrong by the same share
// wherever one range is used (correlation 1; JCGM 100, F.1.2.3), and the rest, counts and absolute part, which is taken as each reading's own: it
// holds the digits, the noise and the range's curvature. Each is its own rectangular term. The leads are the same for both.
func together(a, b Reading, policy Policy, value, ca, cb float64) uncertainty.Budget {
	result := uncertainty.Budget{Value: value}
	var common [2][2]int // of each reading, the places of gain and offset, from 1
	for k, r := range [...]*Reading{&a, &b} {
		c := [...]float64{ca, cb}[k]
		for _, line := range apart(r, policy) {
			line.Sensitivity *= c
			result.Contributions = append(result.Contributions, line.Contribution)
			switch {
			case line.gain:
				common[k][0] = len(result.Contributions)
			case line.Kind == uncertainty.Offset:
				common[k][1] = len(result.Contributions)
			}
		}
	}
	for i, share := range [...]bool{sameRange(&a, &b, policy), a.Meter == b.Meter} {
		if share && common[0][i] > 0 && common[1][i] > 0 {
			result.Correlations = append(result.Correlations, uncertainty.Correlation{I: common[0][i] - 1, J: common[1][i] - 1, R: 1})
		}
	}
	return result
}

// line is a contribution, and whether it is a meter's gain.
type line struct {
	uncertainty.Contribution
	gain bool
}

// apart is BudgetOf with the specification taken apart into the gain and the rest.
func apart(r *Reading, policy Policy) []line {
	var lines []line
	m := policy.meter(r.Meter)
	for _, c := range BudgetOf(*r, policy).Contributions {
		if c.Kind != uncertainty.Specification {
			lines = append(lines, line{Contribution: c})
			continue
		}
		d := m.doubt(r)
		gain := d.a.Relative * math.Abs(r.shown())
		claim, _ := d.a.claim(r.shown(), r.Step)
		for _, part := range [...]struct {
			name string
			half float64
			gain bool
		}{{"gain of the range", gain, true}, {"counts and offset of the range", math.Max(0, claim-gain), false}} {
			if part.half > 0 {
				one := c
				one.Name, one.U = part.name, c.U*part.half/claim
				lines = append(lines, line{one, part.gain})
			}
		}
	}
	return lines
}

// sameRange reports whether two readings were taken with one meter on one range: of the same characteristic, in the same range of its entry.
func sameRange(a, b *Reading, policy Policy) bool {
	if a.Meter != b.Meter || a.Of != b.Of || a.Unit != b.Unit {
		return false
	}
	m := policy.meter(a.Meter)
	_, inA, okA := m.accuracy(a.Of, a.Unit, a.shown(), a.Step)
	_, inB, okB := m.accuracy(b.Of, b.Unit, b.shown(), b.Step)
	return okA == okB && inA == inB
}
