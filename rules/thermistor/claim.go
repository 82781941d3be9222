package thermistor

import (
	_ "embed"
	"fmt"
	"math"
	"strconv"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

//go:embed figures.csv
var figuresCSV string

// figure is a pair of bounds with its source.
type figure struct {
	low, high float64
	source    screening.Source
}

var figures = sync.OnceValue(func() map[string]figure {
	all, err := readFigures(figuresCSV)
	if err != nil {
		panic("thermistor: embedded table: " + err.Error())
	}
	return all
})

func readFigures(text string) (map[string]figure, error) {
	t := book.ReadTable("figures.csv", text)
	all := map[string]figure{}
	for _, r := range t.Rows() {
		f := figure{r.Number("low"), r.Number("high"), r.Source()}
		if f.low >= f.high {
			r.Errorf("high", "is not above low")
		}
		all[r.Required("name")] = f
	}
	return all, t.Err()
}

// bRange reads a printed B value with its tolerance: "B3977", "B3977±1%".
func bRange(word string) (low, high float64, ok bool) {
	digits, isB := strings.CutPrefix(word, "B")
	if !isB {
		digits, isB = strings.CutPrefix(word, "b")
	}
	if !isB {
		return 0, 0, false
	}
	number, tolerance, has := strings.Cut(strings.Replace(digits, "+-", "±", 1), "±")
	b, err := strconv.ParseFloat(strings.TrimSuffix(number, "K"), 64)
	if err != nil || !(b > 0) || math.IsInf(b, 1) {
		return 0, 0, false
	}
	if !has {
		return b, b, true
	}
	l, h, err := quantity.ParseTolerance("±" + tolerance)
	if err != nil {
		return 0, 0, false
	}
	return b * (1 + l), b * (1 + h), true
}

// complete adds the default tolerance, and refuses what no thermistor is.
func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	if r, ok := c.Rating(screening.Resistance.Name, ""); ok && !(r.High > 0) {
		return c, nil, fmt.Errorf("resistance: %s is no thermistor; it has ohms above zero at 25 °C, such as 10k", r)
	}
	if r, ok := c.Rating(B.Name, ""); ok {
		if r.Low == r.High {
			r.Nominal = r.Low
			c = c.WithRating(r)
		}
		limit := figures()["b-range"]
		switch {
		case isPTC(c):
			return c, nil, fmt.Errorf("b-value: a PTC has none; it belongs to an NTC")
		case r.Low < limit.low || r.High > limit.high || r.Low > r.High:
			return c, nil, fmt.Errorf("b-value: %s is no B of an NTC, which lies between %.0f and %.0f kelvin: type it without a letter, b-value=3977",
				r, limit.low, limit.high)
		}
	}
	t, claimed := c.Rating(screening.Tolerance.Name, "")
	switch _, named := c.Rating(screening.Resistance.Name, ""); {
	case claimed && (t.Low <= -1 || t.High >= 1 || t.Low > 0 || t.High < 0):
		return c, nil, fmt.Errorf("tolerance: %s is no tolerance of a thermistor; it is a band such as ±5 %%", t)
	case claimed || !named:
		return c, nil, nil
	}
	f := figures()["ntc-tolerance"]
	if isPTC(c) {
		f = figures()["ptc-tolerance"]
	}
	t = screening.RangeRating(screening.Tolerance, f.low, f.high)
	t.Source = f.source
	return c.WithRating(t), []screening.Reason{
		book.Note(screening.Tolerance.Name, "no tolerance claimed: taken as %s (%s)", t, f.source.Status),
	}, nil
}

// bOf returns the bounds of B in kelvin that a claim implies, and where they come from: as claimed, with the usual tolerance where none is, or
// what the usual slopes at 25 °C allow where no B is known, B = α·T².
func bOf(c screening.Claim) (low, high float64, source screening.Source) {
	r, ok := c.Rating(B.Name, "")
	if !ok {
		f, t := figures()["slope"], reference+kelvin
		return f.low * t * t, f.high * t * t, f.source
	}
	if r.Low < r.High {
		return r.Low, r.High, book.SourceOf(&r)
	}
	f := figures()["b-tolerance"]
	return r.Low * (1 + f.low), r.Low * (1 + f.high), f.source
}

func ohms(x float64) string { return quantity.Format(x, quantity.Ohm, 0) }

func percent(x float64) string { return quantity.Format(x, quantity.Ratio, 2) }
