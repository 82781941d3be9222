package lot

import (
	"fmt"
	"math"
	"slices"
)

const (
	// leastForSlip is the fewest parts of which the rest can show one wrong.
	leastForSlip = 5
	// mostSlipped is the share of readings that can have slipped; more are a second population (house).
	mostSlipped = 1. / 3
	// widestFamily is how many decades the family may span before a power of ten says nothing (house).
	widestFamily = 0.5
	// narrowestFamily is what a family spans at least: parts of a narrow lot differ by this though the readings so far do not.
	narrowestFamily = 0.02
	// familyFences is how many interquartile ranges beyond the quartiles the family still reaches: Tukey's outer fence.
	familyFences = 3
)

// unitSlips finds readings that are a power of ten off the rest and in the midst of it once that is taken out.
func (r *Readings) unitSlips() []Suspicion {
	logs, places := r.decades()
	if len(logs) < leastForSlip {
		return nil
	}
	centre := median(logs)
	var family []float64
	off := map[int]int{} // power of ten by place
	for k, x := range logs {
		if power := int(math.Round(x - centre)); power != 0 {
			off[places[k]] = power
		} else {
			family = append(family, x)
		}
	}
	if len(off) == 0 || float64(len(off)) > mostSlipped*float64(len(logs)) {
		return nil
	}
	low, high := familyOf(family)
	if high-low > widestFamily {
		return nil
	}
	found := map[int][]int{} // places by power
	for place, power := range off {
		if x := math.Log10(math.Abs(r.inOrder[place])) - float64(power); x >= low && x <= high {
			found[power] = append(found[power], place)
		}
	}
	var out []Suspicion
	for _, power := range sortedKeys(found) {
		parts := found[power]
		slices.Sort(parts)
		out = append(out, Suspicion{
			Kind: UnitSlip, Parts: parts, Chance: math.Min(1, high-low), Test: "power of ten off the family between Tukey's outer fences",
			Why: r.slipText(parts, power, median(family), high-low),
		})
	}
	return out
}

// decades returns the common logarithms of the readings that have the sign of most, and their places.
func (r *Readings) decades() (logs []float64, places []int) {
	if len(r.sorted) == 0 {
		return nil, nil
	}
	positive := quantile(r.sorted, 0.5, LotQuartiles) > 0
	for i, x := range r.inOrder {
		if x != 0 && (x > 0) == positive {
			logs, places = append(logs, math.Log10(math.Abs(x))), append(places, i)
		}
	}
	return logs, places
}

// familyOf returns the outer fences of the logarithms in the family.
func familyOf(logs []float64) (low, high float64) {
	slices.Sort(logs)
	q1, q3 := quantile(logs, 0.25, LotQuartiles), quantile(logs, 0.75, LotQuartiles)
	reach := math.Max(familyFences*(q3-q1), narrowestFamily/2)
	return q1 - reach, q3 + reach
}

func sortedKeys(m map[int][]int) []int {
	var keys []int
	for k := range m {
		keys = append(keys, k)
	}
	slices.Sort(keys)
	return keys
}

func (r *Readings) slipText(parts []int, power int, centre, width float64) string {
	rest := math.Copysign(math.Pow(10, centre), r.inOrder[parts[0]])
	ratio := fmt.Sprintf("%.0f times", math.Pow10(power))
	if power < 0 {
		ratio = fmt.Sprintf("1/%.0f of", math.Pow10(-power))
	}
	cause := "a decimal point or the meter's range"
	if power%3 == 0 {
		cause = "a unit prefix"
	}
	return fmt.Sprintf("%s is %s what the rest reads (%s): %s slipped, or this is another part; a stray reading fits so well in %s of cases",
		r.print(r.inOrder[parts[0]]), ratio, r.print(rest), cause, percent(math.Min(1, width)))
}
