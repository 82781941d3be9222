package tui

import (
	"math"
	"testing"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestScaleShowsTheReadingAndItsUncertaintyOnTheLimit(t *testing.T) {
	band := func(low, high float64) screening.Limit {
		return screening.Limit{Low: low, High: high, Unit: quantity.Ohm}
	}
	reading := func(x, u float64, s quantity.Sense) *screening.Reading {
		return &screening.Reading{Value: x, U: u, Sense: s}
	}
	inf := math.Inf(1)
	// The band from 10 to 20 is drawn from 7 to 23, a bound of 100 from 0 to 150, a bound of 50 from 25 to 100; 30 cells, 2u either side.
	for _, c := range []struct {
		name  string
		limit screening.Limit
		read  *screening.Reading
		want  string
	}{
		{"nothing was read", band(10, 20), nil, ".....|------------------|....."},
		{"in the middle", band(10, 20), reading(15, 1, quantity.Exactly), ".....|-----(===o==)-----|....."},
		{"so exact that it takes one cell", band(10, 20), reading(15, 0, quantity.Exactly), ".....|---------o--------|....."},
		{"too near to call", band(10, 20), reading(20, 0.5, quantity.Exactly), ".....|----------------(=o)...."},
		{"far above is an arrow", band(10, 20), reading(200, 1, quantity.Exactly), ".....|------------------|....>"},
		{"far below is an arrow", band(100, 110), reading(2, 1, quantity.Exactly), "<....|------------------|....."},
		{"at most a bound", band(-inf, 100), reading(40, 1, quantity.Exactly), "-------(o----------|.........."},
		{"known only to be above", band(50, inf), reading(60, 0, quantity.AtLeast), "..........|---o==============>"},
		{"known only to be below", band(-inf, 100), reading(30, 0, quantity.AtMost), "<=====o------------|.........."},
		{"no bound at all", band(-inf, inf), reading(5, 1, quantity.Exactly), ".............................."},
	} {
		got := testTheme(true).scale(c.limit, c.read, 30)
		if len(got) != 30 {
			t.Errorf("%s: %d cells: %s", c.name, len(got), got)
		}
		if got != c.want {
			t.Errorf("%s:\n got %s\nwant %s", c.name, got, c.want)
		}
	}
}

func TestEveryVerdictIsWrittenLargeAndNoneLooksLikeAnother(t *testing.T) {
	seen := map[string]screening.Verdict{}
	for _, v := range screening.Verdicts() {
		for _, ascii := range []bool{false, true} {
			th := testTheme(ascii)
			lines := th.banner(v, "1-01 "+v.String(), 50, true)
			if len(lines) < 4 {
				t.Errorf("%v is not written large: %q", v, lines)
			}
			key := lines[0] + lines[1] + lines[2]
			if other, same := seen[key]; same {
				t.Errorf("%v looks like %v", v, other)
			}
			seen[key] = v
			sign := th.verdictSign(v)
			if width(sign) != 1 {
				t.Errorf("sign of %v takes %d cells", v, width(sign))
			}
		}
	}
}

func TestCountsAreReadAsPeopleSayThem(t *testing.T) {
	for text, want := range map[string]inventory.Count{
		"12": {N: 12}, "0": {}, "about 40": {N: 40, Level: inventory.About}, "~40": {N: 40, Level: inventory.About}, "unknown": {Level: inventory.Unknown},
		"?": {Level: inventory.Unknown},
	} {
		if got, err := countOf(text); err != nil || got != want {
			t.Errorf("%q: %v, %v; want %v", text, got, err, want)
		}
	}
	for _, text := range []string{"", "many", "-3", "about", "1e9"} {
		if got, err := countOf(text); err == nil {
			t.Errorf("%q was read as %v", text, got)
		}
	}
}

func TestHowManyAndWhatFor(t *testing.T) {
	for text, want := range map[string]struct {
		n    int
		note string
	}{"": {1, ""}, "2": {2, ""}, "2 output stage": {2, "output stage"}, "for a lamp": {1, "for a lamp"}} {
		if n, note, err := howMany(text); err != nil || n != want.n || note != want.note {
			t.Errorf("%q: %d %q %v", text, n, note, err)
		}
	}
	if _, _, err := howMany("0 none"); err == nil {
		t.Error("none at all was taken")
	}
}
