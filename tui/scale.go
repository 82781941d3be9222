package tui

import (
	"math"
	"strings"

	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// axis is the stretch of values that a scale shows, with the cells it is drawn on.
type axis struct {
	from, to float64
	cells    int
}

// axisFor chooses a stretch that shows the limit's bounds with room beside them, and the reading where it is not too far away.
func axisFor(low, high float64, value float64, cells int) axis {
	a := axis{from: low, to: high, cells: cells}
	openLow, openHigh := math.IsInf(low, -1), math.IsInf(high, 1)
	switch {
	case openLow && openHigh:
		return axis{from: math.NaN(), to: math.NaN(), cells: cells}
	case openLow:
		room := stretch(high)
		a.from, a.to = high-room, high+room/2
	case openHigh:
		room := stretch(low)
		a.from, a.to = low-room/2, low+room
	default:
		room := (high - low) * 0.3
		if room == 0 {
			room = stretch(low) / 2
		}
		a.from, a.to = low-room, high+room
	}
	reach := a.to - a.from
	if value > a.to && value < a.to+2*reach {
		a.to = value + 0.1*reach
	}
	if value < a.from && value > a.from-2*reach {
		a.from = value - 0.1*reach
	}
	return a
}

func stretch(bound float64) float64 {
	if bound == 0 {
		return 1
	}
	return math.Abs(bound)
}

// cell returns the cell of a value; it may lie outside the drawn ones.
func (a axis) cell(x float64) int {
	at := (x - a.from) / (a.to - a.from) * float64(a.cells-1)
	return int(math.Round(math.Max(-1, math.Min(at, float64(a.cells)))))
}

// scale draws one limit as a line of w cells: the stretch it allows between its bounds, and on it the reading with its uncertainty in
// parentheses. A reading that only bounds the value spreads to the end it leaves open. A reading beyond the ends is an arrow.
func (t *theme) scale(l screening.Limit, r *screening.Reading, w int) string {
	if w < 3 {
		return spaces(w)
	}
	value := math.NaN()
	if r != nil {
		value = r.Value
	}
	a := axisFor(l.Low, l.High, value, w)
	cells := make([]string, w)
	for i := range cells {
		cells[i] = t.g.inside
		if math.IsNaN(a.from) || i < a.cell(l.Low) || i > a.cell(l.High) {
			cells[i] = t.g.outside
		}
	}
	put := func(i int, sign string) {
		if i >= 0 && i < w {
			cells[i] = sign
		}
	}
	if !math.IsNaN(a.from) {
		put(a.cell(l.Low), t.g.bound)
		put(a.cell(l.High), t.g.bound)
		if r != nil {
			t.drawReading(cells, a, *r)
		}
	}
	return strings.Join(cells, "")
}

// drawReading lays a reading and its spread over the cells of a scale.
func (t *theme) drawReading(cells []string, a axis, r screening.Reading) {
	last := len(cells) - 1
	from, to := a.cell(r.Value-entry.Coverage*r.U), a.cell(r.Value+entry.Coverage*r.U)
	opened, closed := t.g.opened, t.g.closed
	switch r.Sense {
	case quantity.AtLeast:
		to, closed = last, t.g.offHigh
	case quantity.AtMost:
		from, opened = 0, t.g.offLow
	}
	for i := max(from, 0); i <= min(to, last); i++ {
		if cells[i] != t.g.bound {
			cells[i] = t.g.spread
		}
	}
	at := a.cell(r.Value)
	if from >= 0 && from <= last && from < at {
		cells[from] = opened
	}
	if to >= 0 && to <= last && to > at {
		cells[to] = closed
	}
	switch {
	case at < 0:
		cells[0] = t.g.offLow
	case at > last:
		cells[last] = t.g.offHigh
	default:
		cells[at] = t.g.dot
	}
}

// bounds returns the texts of a limit's ends: "1.54 mF" and "2.64 mF"; an open end is "".
func (t *theme) bounds(l screening.Limit) (low, high string) {
	if !math.IsInf(l.Low, -1) {
		low = t.clean(quantity.Bound(l.Low, l.Unit))
	}
	if !math.IsInf(l.High, 1) {
		high = t.clean(quantity.Bound(l.High, l.Unit))
	}
	return low, high
}

// labelledScale draws a scale with its bounds written at its ends, w cells wide.
func (t *theme) labelledScale(l screening.Limit, r *screening.Reading, w int) string {
	low, high := t.bounds(l)
	const label = 9
	return fitRight(low, label, t.g.more) + " " + t.scale(l, r, w-2*label-2) + " " + fit(high, label, t.g.more)
}
