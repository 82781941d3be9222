package series

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"

	"pgregory.net/rapid"
)

// reference reads testdata/e-series.csv: published lists, checked against a public one.
func reference(t *testing.T) [][]string {
	t.Helper()
	f, err := os.Open("testdata/e-series.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	r := csv.NewReader(f)
	r.Comment = '#'
	rows, err := r.ReadAll()
	if want := 1 + 3 + 6 + 12 + 24 + 48 + 96 + 192; err != nil || len(rows) != want {
		t.Fatalf("%d rows, want a header and %d; %v", len(rows), want-1, err)
	}
	return rows[1:]
}

func TestEveryListedValue(t *testing.T) {
	count := map[int]int{}
	for _, row := range reference(t) {
		n, errN := strconv.Atoi(row[0][1:])
		i, errI := strconv.Atoi(row[1])
		want, errV := strconv.ParseFloat(row[2], 64)
		if errN != nil || errI != nil || errV != nil {
			t.Fatalf("row %q", row)
		}
		count[n]++
		if got := Value(n, i); got != want {
			t.Errorf("E%d[%d] = %v, want %v", n, i, got, want)
		}
		for decade := -12; decade <= 9; decade++ {
			x := want * math.Pow10(decade)
			if !Contains(n, x) {
				t.Errorf("%v is not found in E%d", x, n)
			}
			if c := Coarsest(x); c == 0 || c > n {
				t.Errorf("the coarsest series of %v is E%d, and E%d has it", x, c, n)
			}
		}
	}
	for _, n := range All {
		if count[n] != n {
			t.Errorf("the list has %d values of E%d", count[n], n)
		}
	}
}

// E24 departs from rounding in exactly eight places (Wikipedia, E series; derived).
func TestE24DepartsFromRoundingInEightPlaces(t *testing.T) {
	rule := map[float64]float64{2.7: 2.6, 3.0: 2.9, 3.3: 3.2, 3.6: 3.5, 3.9: 3.8, 4.3: 4.2, 4.7: 4.6, 8.2: 8.3}
	departs := 0
	for i := range 24 {
		v, rounded := Value(24, i), math.Round(10*math.Pow(10, float64(i)/24))/10
		if v == rounded {
			continue
		}
		departs++
		if rule[v] != rounded || Contains(24, rounded) {
			t.Errorf("E24[%d] = %v where rounding gives %v", i, v, rounded)
		}
	}
	if departs != 8 {
		t.Errorf("%d departures, want 8", departs)
	}
}

func TestMembership(t *testing.T) {
	for _, tt := range []struct {
		name string
		x    float64
		want int
	}{
		{"4.7 kΩ", 4700, 3},
		{"68 nF", 68e-9, 6},
		{"8.2 Ω, not 8.3", 8.2, 12},
		{"8.3 Ω is in none but E192 has no 8.30", 8.3, 0},
		{"4.64 kΩ", 4640, 48},
		{"4.75 kΩ", 4750, 96},
		{"4.99 kΩ, which one page prints as 487", 4990, 96},
		{"9.20 kΩ: the exception of E192", 9200, 192},
		{"9.19 kΩ: what the rule alone would give", 9190, 0},
		{"0.05 µF", 50e-9, 0},
		{"250 kΩ of before the series", 250e3, 0},
		{"four figures", 4.7003e3, 0},
		{"zero", 0, 0},
		{"less than zero", -4.7, 0},
		{"not a number", math.NaN(), 0},
		{"without end", math.Inf(1), 0},
	} {
		if got := Coarsest(tt.x); got != tt.want {
			t.Errorf("%s: E%d, want E%d", tt.name, got, tt.want)
		}
	}
	if Contains(7, 1) || !math.IsNaN(Value(24, 24)) || !math.IsNaN(Value(7, 0)) || !math.IsNaN(Value(24, -1)) {
		t.Error("there is no E7, and no value beyond the decade")
	}
}

func TestNeighbours(t *testing.T) {
	for _, tt := range []struct {
		name            string
		n               int
		x, below, above float64
	}{
		{"0.05 µF in E6", 6, 50e-9, 47e-9, 68e-9},
		{"250 kΩ in E12", 12, 250e3, 220e3, 270e3},
		{"8 µF in E12", 12, 8e-6, 6.8e-6, 8.2e-6},
		{"a value of the series is not its own neighbour", 12, 4700, 3900, 5600},
		{"over the end of the decade", 6, 0.95, 0.68, 1},
		{"1000 has neighbours in two decades", 3, 1000, 470, 2200},
	} {
		if below, above := Neighbours(tt.n, tt.x); below != tt.below || above != tt.above {
			t.Errorf("%s: %v and %v, want %v and %v", tt.name, below, above, tt.below, tt.above)
		}
	}
	if a, b := Neighbours(12, math.NaN()); !math.IsNaN(a) || !math.IsNaN(b) {
		t.Error("nothing lies beside what is no number")
	}
}

func TestCoarserSeriesArePartsOfFinerOnes(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64Range(1e-13, 1e13).Draw(t, "x")
		for _, pair := range [][2]int{{3, 6}, {6, 12}, {12, 24}, {48, 96}, {96, 192}} {
			if Contains(pair[0], x) && !Contains(pair[1], x) {
				t.Fatalf("%v is in E%d and not in E%d", x, pair[0], pair[1])
			}
		}
		below, above := Neighbours(24, x)
		if !(below < x && x < above) || !Contains(24, below) || !Contains(24, above) {
			t.Fatalf("%v lies between %v and %v", x, below, above)
		}
	})
}
