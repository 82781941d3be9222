package lot

import (
	"math"
	"slices"
)

// Bin is one bar of a histogram: Count readings from Low up to but without High.
type Bin struct {
	Low, High float64
	Count     int
}

// Histogram is the readings in bins of one width, which is 1, 2 or 5 times a power of ten. LowAt and HighAt are where the limits stand in
// bins from the left edge, so that 2.5 is the middle of the third bar; NaN where a limit is open or too far away to be drawn.
type Histogram struct {
	Bins          []Bin
	Width         float64
	LowAt, HighAt float64
}

// reach is how far beyond the readings a limit may lie and still be drawn, in widths of what the readings cover (house).
const reach = 2

// Histogram returns the readings in at most this many bins. The width is Freedman and Diaconis's 2·IQR/∛n, rounded up to 1, 2 or 5 times a
// power of ten, never finer than the step, and wider where the bins would not suffice. Without readings, or with fewer than two bins
// allowed, it is empty.
func (r *Readings) Histogram(l Limits, most int) Histogram {
	h := Histogram{LowAt: math.NaN(), HighAt: math.NaN()}
	n := len(r.sorted)
	if n == 0 || most < 2 {
		return h
	}
	first, last := r.sorted[0], r.sorted[n-1]
	span := last - first
	if span == 0 {
		span = math.Max(r.Step, math.Abs(first)*1e-3)
	}
	near := func(limit float64) bool { return limit >= r.sorted[0]-reach*span && limit <= r.sorted[n-1]+reach*span }
	for _, limit := range []float64{l.Low, l.High} {
		if near(limit) {
			first, last = math.Min(first, limit), math.Max(last, limit)
		}
	}
	h.Width = r.binWidth(first, last, most)
	start, end := binOf(first, h.Width), binOf(last, h.Width)
	for i := start; i <= end; i++ {
		h.Bins = append(h.Bins, Bin{Low: i * h.Width, High: (i + 1) * h.Width})
	}
	for _, x := range r.sorted {
		h.Bins[int(binOf(x, h.Width)-start)].Count++
	}
	if near(l.Low) {
		h.LowAt = l.Low/h.Width - start
	}
	if near(l.High) {
		h.HighAt = l.High/h.Width - start
	}
	return h
}

// binOf returns the number of the bin that holds x, counted from the one that begins at 0.
func binOf(x, width float64) float64 {
	const slack = 1e-9 // 0.3/0.1 is 2.9999…
	return math.Floor(x/width + slack)
}

// binWidth chooses the width for what is to be drawn from first to last.
func (r *Readings) binWidth(first, last float64, most int) float64 {
	const (
		finest   = 1e-10 // of the largest value: beyond it bins are noise of the arithmetic
		smallest = 1e-300
	)
	iqr := quantile(r.sorted, 0.75, LotQuartiles) - quantile(r.sorted, 0.25, LotQuartiles)
	width := roundWidth(max(2*iqr/math.Cbrt(float64(len(r.sorted))), r.Step, (last-first)/float64(most),
		finest*math.Max(math.Abs(first), math.Abs(last)), smallest))
	for binOf(last, width)-binOf(first, width) >= float64(most) {
		width = roundWidth(width * 1.5)
	}
	return width
}

// roundWidth rounds up to 1, 2 or 5 times a power of ten.
func roundWidth(x float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(x)))
	steps := []float64{1, 2, 5, 10}
	i := slices.IndexFunc(steps, func(s float64) bool { return s*power >= x*(1-1e-9) })
	return steps[max(i, 0)] * power
}
