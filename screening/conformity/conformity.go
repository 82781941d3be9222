// Package conformity holds a measured value with its uncertainty against tolerance limits: conformance probability and risks of JCGM 106:2012,
// guard bands of ILAC-G8:09/2019 and ISO 14253-1:2017. The value is taken as normally distributed about the reading with standard uncertainty
// u. Limits are one [Interval]; an open side is ±Inf.
package conformity

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Coverage is the k of the expanded uncertainty U = k·u that guard bands and test ratios are stated in: 2, about 95 % (JCGM 106, 7.6;
// ILAC-G8, 4.2).
const Coverage = 2

// Interval is a closed interval of tolerated or accepted values; an open side is ±Inf.
type Interval struct{ Low, High float64 }

// Guarded returns the interval narrowed by w on both sides; a negative w widens it. What is left may be empty: its Low then exceeds its High.
func (i Interval) Guarded(w float64) Interval { return Interval{i.Low + w, i.High - w} }

// Contains reports whether x lies in the interval, its ends included.
func (i Interval) Contains(x float64) bool { return x >= i.Low && x <= i.High }

// Outside returns the probabilities that the true value lies below and above an interval, given a reading x with standard uncertainty u:
// Φ((low−x)/u) and Φ((x−high)/u); what is left is the conformance probability (JCGM 106:2012, 7). With u = 0 they are 0 or 1.
func Outside(x, u float64, in Interval) (below, above float64) {
	if u == 0 {
		switch {
		case x < in.Low:
			return 1, 0
		case x > in.High:
			return 0, 1
		}
		return 0, 0
	}
	if !math.IsInf(in.Low, -1) {
		below = distuv.UnitNormal.CDF((in.Low - x) / u)
	}
	if !math.IsInf(in.High, 1) {
		above = distuv.UnitNormal.CDF((x - in.High) / u)
	}
	return below, above
}

// Probability returns the conformance probability pc of a reading. The specific risk of an item that is accepted is 1−pc, the consumer's; of
// one that is rejected it is pc, the producer's (JCGM 106, 9.3).
func Probability(x, u float64, in Interval) float64 {
	below, above := Outside(x, u, in)
	return math.Max(0, 1-below-above)
}

// Capability returns the measurement capability index Cm = (TU−TL)/(4·u) (JCGM 106, 7.6.1); NaN for an open interval, +Inf for u = 0.
func Capability(in Interval, u float64) float64 {
	width := in.High - in.Low
	if math.IsInf(width, 1) {
		return math.NaN()
	}
	return width / (4 * u)
}

// TestRatio returns the test uncertainty ratio: half the tolerance over U = 2·u; with one bound only that bound's magnitude over U, which is
// what a limit without a nominal value has. NaN where nothing bounds or the one bound is zero.
func TestRatio(in Interval, u float64) float64 {
	low, high := !math.IsInf(in.Low, 0), !math.IsInf(in.High, 0)
	var room float64
	switch {
	case low && high:
		room = (in.High - in.Low) / 2
	case low:
		room = math.Abs(in.Low)
	case high:
		room = math.Abs(in.High)
	}
	if room == 0 {
		return math.NaN()
	}
	return room / (Coverage * u)
}

// RiskAtLimit returns the largest probability of a false acceptance against one limit under a guard band of w = r·U: that of a reading exactly
// on the acceptance limit, Φ(−2·r). It is 2.3 % for w = U, 4.8 % for 0.83·U and 50 % for none (ILAC-G8:09/2019, table 1).
func RiskAtLimit(r float64) float64 { return distuv.UnitNormal.CDF(-Coverage * r) }

// GuardFor returns the r of a guard band w = r·U whose false acceptance against one limit is at most this risk: the quantile over 2. For
// 5 % it is 0.82, which ISO 14253-1:2017 rounds up to 0.83.
func GuardFor(risk float64) float64 { return -distuv.UnitNormal.Quantile(risk) / Coverage }

// Word is one of the four words of a statement of conformity that is not binary (ILAC-G8:09/2019, 4.2.3).
type Word uint8

// The words, and NoWord where there is nothing to state.
const (
	NoWord Word = iota
	Pass
	ConditionalPass
	ConditionalFail
	Fail
)

// String returns the word.
func (w Word) String() string {
	return [...]string{"", "pass", "conditional pass", "conditional fail", "fail"}[min(int(w), 4)]
}

// Statement returns the word for a reading under a guard band of w: pass to the acceptance limit TL−w, conditional pass from there to the
// limit, conditional fail to w beyond it, fail further out. With w = 0 it is pass or fail.
func Statement(x float64, in Interval, w float64) Word {
	switch {
	case in.Guarded(w).Contains(x):
		return Pass
	case in.Contains(x):
		return ConditionalPass
	case in.Guarded(-w).Contains(x):
		return ConditionalFail
	}
	return Fail
}
