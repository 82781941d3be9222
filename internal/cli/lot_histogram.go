package cli

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"github.com/mattn/go-runewidth"

	"goodbin/screening/lot"
	"goodbin/screening/quantity"
)

const (
	// lotBars is how many bars a histogram has at most: with fewer a lot that is narrow for its limits would be one bar.
	lotBars = 24
	// lotEmpty is how many empty bars in a row are drawn as one line.
	lotEmpty = 3
	// lotColumns is how wide a histogram is at most.
	lotColumns = 80
)

// printHistogram draws the readings as bars of ASCII, and the limits where they stand among them.
func (a *app) printHistogram(g *lotGroup) error {
	for _, l := range histogramLines(g, min(a.env.width(), lotColumns), a.env.clean) {
		if err := a.env.line("%s", l); err != nil {
			return err
		}
	}
	return nil
}

// histogramLines draws in so many columns. A limit on the edge of a bar is a line between bars; one inside a bar stands under it, for the bar
// holds readings on both sides.
func histogramLines(g *lotGroup, columns int, spell func(string) string) []string {
	h := g.readings.Histogram(g.limits, lotBars)
	labels, widest, tallest := make([]string, len(h.Bins)), 0, 0
	for i, b := range h.Bins {
		labels[i] = spell("from " + quantity.Format(b.Low, g.unit, 0))
		widest, tallest = max(widest, runewidth.StringWidth(labels[i])), max(tallest, b.Count)
	}
	digits := len(strconv.Itoa(tallest))
	room := max(columns-2-widest-2-digits-2, 1)
	each := max((tallest+room-1)/room, 1) // parts that one sign stands for
	var out []string
	for i := 0; i < len(h.Bins); i++ {
		out = append(out, limitLines(g, h, i, false)...)
		if n := emptyFrom(g, h, i); n >= lotEmpty {
			out = append(out, fmt.Sprintf("  %s%s  %*d  (%d such bars)", strings.Repeat(" ", widest-runewidth.StringWidth(labels[i])), labels[i], digits, 0, n))
			i += n - 1
			continue
		}
		count := h.Bins[i].Count
		bar := strings.Repeat("#", (count+each-1)/each)
		pad := strings.Repeat(" ", widest-runewidth.StringWidth(labels[i]))
		out = append(out, strings.TrimRight(fmt.Sprintf("  %s%s  %*d  %s", pad, labels[i], digits, count, bar), " "))
		out = append(out, limitLines(g, h, i, true)...)
	}
	out = append(out, limitLines(g, h, len(h.Bins), false)...)
	if each > 1 {
		out = append(out, fmt.Sprintf("  each # is up to %d parts", each))
	}
	for _, m := range limitMarks(g, h) {
		if math.IsNaN(m.at) && !math.IsInf(m.limit, 0) {
			out = append(out, fmt.Sprintf("  the %s %s lies too far away to be drawn", m.name, quantity.Bound(m.limit, g.unit)))
		}
	}
	return out
}

// emptyFrom counts the empty bars from one on that no limit parts.
func emptyFrom(g *lotGroup, h lot.Histogram, from int) int {
	n := 0
	for i := from; i < len(h.Bins) && h.Bins[i].Count == 0 && limitLines(g, h, i, true) == nil; i++ {
		if n > 0 && limitLines(g, h, i, false) != nil {
			break
		}
		n++
	}
	return n
}

// limitMark is a limit and where it stands in a histogram.
type limitMark struct {
	name      string
	at, limit float64
}

func limitMarks(g *lotGroup, h lot.Histogram) [2]limitMark {
	return [2]limitMark{{"low limit", h.LowAt, g.limits.Low}, {"high limit", h.HighAt, g.limits.High}}
}

// limitLines are the lines that mark limits at a bar: before it, or, where they stand inside it, after it.
func limitLines(g *lotGroup, h lot.Histogram, bar int, inside bool) []string {
	var out []string
	for _, m := range limitMarks(g, h) {
		if head := limitLine(m.name, m.at, bar, inside); head != "" {
			out = append(out, head+quantity.Bound(m.limit, g.unit))
		}
	}
	return out
}

// limitLine begins the line that marks a limit at bar i: before it, or, where it stands inside the bar, after it. It is "" elsewhere.
func limitLine(name string, at float64, i int, inside bool) string {
	const slack = 1e-6
	edge := math.Round(at)
	switch onEdge := math.Abs(at-edge) < slack; {
	case math.IsNaN(at):
	case onEdge && !inside && int(edge) == i:
		return "  ------ " + name + " "
	case !onEdge && inside && int(math.Floor(at)) == i:
		return "  ------ inside the bar above: " + name + " "
	}
	return ""
}
