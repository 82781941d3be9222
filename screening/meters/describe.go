package meters

import (
	"strconv"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Describe writes a meter in the words that [Parse] reads back: to twelve digits the same ranges, leads and date. By and ByUnit have no words
// and are left out.
func Describe(m screening.Meter) string {
	var entries []string
	for i := range m.Ranges {
		entries = append(entries, describeRange(&m.Ranges[i]))
	}
	l := m.Leads
	if l.SeriesR != 0 {
		entries = append(entries, "leads="+plain(l.SeriesR, quantity.Ohm)+"±"+plain(l.SeriesRU, quantity.Ohm))
	}
	if l.StrayC != 0 {
		entries = append(entries, "stray="+plain(l.StrayC, quantity.Farad)+"±"+plain(l.StrayCU, quantity.Farad))
	}
	if l.Found != "" {
		entries = append(entries, "found="+l.Found)
	}
	return strings.Join(entries, "; ")
}

func describeRange(g *screening.Range) string {
	of := string(g.Of)
	for _, u := range units {
		if of == "" && u.unit == g.Unit {
			of = u.word
		}
	}
	for _, v := range screening.Variables() {
		if x, ok := g.At.Get(v); ok {
			sign := ","
			if !strings.Contains(of, "@") {
				sign = "@"
			}
			of += sign + v.String() + "=" + plain(x, v.Unit())
		}
	}
	words := []string{of}
	if g.Low > 0 || g.High > 0 {
		span := ".."
		if g.Low > 0 {
			span = plain(g.Low, g.Unit) + span
		}
		if g.High > 0 {
			span += plain(g.High, g.Unit)
		}
		words = append(words, span)
	}
	words = append(words, claimText(g))
	if g.Resolution > 0 {
		words = append(words, "step="+plain(g.Resolution, g.Unit))
	}
	if g.Spread > 0 {
		words = append(words, "spread="+plain(g.Spread, g.Unit))
	}
	if g.Confidence == screening.Normal99 {
		words = append(words, g.Confidence.String())
	}
	if g.DigitApart {
		words = append(words, "digit-apart")
	}
	return strings.Join(words, " ")
}

func claimText(g *screening.Range) string {
	var terms []string
	if g.Relative > 0 {
		terms = append(terms, number(100*g.Relative)+"%")
	}
	if g.Counts > 0 {
		terms = append(terms, number(g.Counts)+"counts")
	}
	if g.Absolute > 0 {
		terms = append(terms, plain(g.Absolute, g.Unit)+"abs")
	}
	return strings.Join(terms, "+")
}

// plain writes a value without spaces and with its unit in ASCII.
func plain(x float64, unit quantity.Unit) string {
	return number(x) + unit.ASCII()
}

// number writes the shortest decimal that reads back to twelve digits; a typed exponent is understood.
func number(x float64) string { return strconv.FormatFloat(x, 'g', 12, 64) }
