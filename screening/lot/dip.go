package lot

// The dip of Hartigan and Hartigan (1985) is how far the distribution of some readings is from the nearest one with a single hump: the
// largest distance between their step function and a distribution function that is first convex, then concave. Two clearly parted groups of
// halves have a dip of nearly 1/4; of readings with one hump it shrinks as 1/√n. It depends on no mean and no sigma, so that skewed and
// long-tailed lots with one hump raise no alarm.
//
// Take the points (x_i, i) of the sorted readings. A distribution through the middle of each step has to miss them by some e; the dip is
// (e + 1/2)/n. The search narrows an interval around the hump. Left of it the best convex curve is the greatest convex minorant of the
// points, right of it the best concave one is the least concave majorant. Where the two are furthest apart inside the interval the hump
// must lie; outside the new interval the curves' own distance from the points counts. When minorant and majorant come as near each other
// as the curves outside are to the points, nothing more can be gained. Each round is linear in the number of readings and few are needed.

// dip returns the dip of sorted readings without ties: 1/(2n), the least there is, for fewer than four of them or all equal.
func dip(x []float64) float64 {
	n := len(x)
	if n < 4 || x[0] == x[n-1] {
		return 1 / (2 * float64(max(n, 1)))
	}
	convex, concave := make([]int, 0, n), make([]int, 0, n)
	low, high, worst := 0, n-1, 0.0
	for {
		convex = hull(convex[:0], x, low, high, +1)
		concave = hull(concave[:0], x, low, high, -1)
		apart, newLow, newHigh := furthestApart(x, convex, concave)
		if apart <= worst {
			break
		}
		worst = max(worst, distance(x, convex, low, newLow, +1), distance(x, concave, newHigh, high, -1))
		if newLow == low && newHigh == high {
			break
		}
		low, high = newLow, newHigh
		if high <= low {
			break
		}
	}
	return (worst + 1) / (2 * float64(n))
}

// hull returns the corners of the greatest convex minorant (sign +1) or least concave majorant (−1) of the points (x_i, i).
func hull(corners []int, x []float64, low, high int, sign float64) []int {
	for i := low; i <= high; i++ {
		for len(corners) >= 2 {
			a, b := corners[len(corners)-2], corners[len(corners)-1]
			// b stays where it lies below (above) the line from a to i.
			if sign*(float64(b-a)*(x[i]-x[a])-float64(i-a)*(x[b]-x[a])) < 0 {
				break
			}
			corners = corners[:len(corners)-1]
		}
		corners = append(corners, i)
	}
	return corners
}

// at returns the height at x_i of the line between two corners.
func at(x []float64, a, b, i int) float64 {
	if x[b] == x[a] {
		return float64(a)
	}
	return float64(a) + float64(b-a)*(x[i]-x[a])/(x[b]-x[a])
}

// furthestApart finds where the majorant is highest above the minorant. That is at a corner of either; the other side of the new interval is
// the other curve's corner beyond it.
func furthestApart(x []float64, convex, concave []int) (apart float64, low, high int) {
	low, high = convex[0], concave[len(concave)-1]
	j := 0
	for _, corner := range convex { // the majorant above a corner of the minorant
		for concave[j+1] < corner && j+2 < len(concave) {
			j++
		}
		if d := at(x, concave[j], concave[j+1], corner) - float64(corner); d > apart {
			apart, low, high = d, corner, concave[j+1]
		}
	}
	j = 0
	for _, corner := range concave { // the minorant below a corner of the majorant
		for convex[j+1] < corner && j+2 < len(convex) {
			j++
		}
		left := convex[j]
		if convex[j+1] == corner {
			left = corner
		}
		if d := float64(corner) - at(x, convex[j], convex[j+1], corner); d > apart {
			apart, low, high = d, left, corner
		}
	}
	return apart, low, high
}

// distance returns how far a curve is from the points of an interval at most.
func distance(x []float64, corners []int, low, high int, sign float64) float64 {
	worst := 0.0
	for k := 0; k+1 < len(corners); k++ {
		a, b := corners[k], corners[k+1]
		if b <= low || a >= high {
			continue
		}
		for i := max(a, low); i <= min(b, high); i++ {
			worst = max(worst, sign*(float64(i)-at(x, a, b, i)))
		}
	}
	return worst
}
