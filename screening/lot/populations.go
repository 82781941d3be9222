package lot

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"sync"
)

//go:embed dip.csv
var dipCSV string

// dipTable is the critical values of √n·dip under a uniform distribution, the single hump that is hardest to tell from two.
type dipTable struct {
	levels []float64 // chances of a larger dip, descending
	n      []int     // ascending
	root   [][]float64
}

var dips = sync.OnceValue(func() *dipTable {
	t, err := readDips(dipCSV)
	if err != nil {
		panic("lot: embedded dip.csv: " + err.Error())
	}
	return t
})

func readDips(text string) (*dipTable, error) {
	rows, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		return nil, err
	}
	t := &dipTable{}
	for _, name := range rows[0][1 : len(rows[0])-2] {
		level, err := strconv.ParseFloat(name, 64)
		if err != nil {
			return nil, err
		}
		t.levels = append(t.levels, level)
	}
	for _, row := range rows[1:] {
		n, err := strconv.Atoi(row[0])
		if err != nil {
			return nil, err
		}
		var values []float64
		for _, text := range row[1 : len(row)-2] {
			d, err := strconv.ParseFloat(text, 64)
			if err != nil {
				return nil, err
			}
			values = append(values, d*math.Sqrt(float64(n)))
		}
		t.n, t.root = append(t.n, n), append(t.root, values)
	}
	return t, nil
}

// chance returns the smallest tabled chance that readings with one hump have a dip as large as this; 1 where it is not rare at all. Between
// two numbers of parts the larger critical value counts, beyond the last its √n·dip.
func (t *dipTable) chance(d float64, n int) float64 {
	i, _ := slices.BinarySearch(t.n, n)
	if n < t.n[0] {
		return 1
	}
	out := 1.0
	for k, level := range t.levels {
		critical := t.root[min(i, len(t.n)-1)][k]
		if i > 0 && i < len(t.n) {
			critical = math.Max(critical, t.root[i-1][k])
		}
		if d*math.Sqrt(float64(n)) > critical {
			out = level
		}
	}
	return out
}

// Split is a bag that looks like two.
type Split struct {
	Boundary    float64 // between the two groups, SI
	Low, High   Group
	Dip         float64
	Chance      float64 // that one population alone shows such a dip, at most
	lowIndexes  []int
	highIndexes []int
}

// Group is one of two populations.
type Group struct {
	N      int
	Median float64
}

// Smaller returns the parts of the smaller group, in the order of measuring.
func (s Split) Smaller() []int {
	if len(s.highIndexes) <= len(s.lowIndexes) {
		return s.highIndexes
	}
	return s.lowIndexes
}

// leastForSplit is the fewest parts that can show two populations.
const leastForSplit = 10

// Split tests for two populations by Hartigan's dip, and tells them apart where the squared distances from the two groups' means are least.
// It reports false where one population explains the readings: a dip as large is not rarer than [FalseAlarm] among bags of one, whatever
// their shape, so long as it has one hump. Fewer than about a fifth of the parts make no second hump; they show as outliers.
func (r *Readings) Split() (Split, bool) {
	n := len(r.sorted)
	if n < leastForSplit {
		return Split{}, false
	}
	s := Split{Dip: dip(r.spread())}
	s.Chance = dips().chance(s.Dip, n)
	if s.Chance > FalseAlarm {
		return s, false
	}
	at := bestSplit(r.sorted)
	s.Boundary = r.sorted[at-1] + (r.sorted[at]-r.sorted[at-1])/2
	low, high := r.sorted[:at], r.sorted[at:]
	s.Low = Group{len(low), quantile(low, 0.5, LotQuartiles)}
	s.High = Group{len(high), quantile(high, 0.5, LotQuartiles)}
	for i, x := range r.inOrder {
		if x < r.sorted[at] {
			s.lowIndexes = append(s.lowIndexes, i)
		} else {
			s.highIndexes = append(s.highIndexes, i)
		}
	}
	return s, true
}

// spread returns the sorted readings with equal ones laid evenly over their last digit, since ties alone would make a dip.
func (r *Readings) spread() []float64 {
	step := r.Step
	if step == 0 {
		step = smallestGap(r.sorted)
	}
	out := slices.Clone(r.sorted)
	for i := 0; i < len(out); {
		j := i
		for j < len(out) && r.sorted[j] == r.sorted[i] {
			j++
		}
		for k := i; k < j && j-i > 1; k++ {
			out[k] += step * ((float64(k-i)+0.5)/float64(j-i) - 0.5)
		}
		i = j
	}
	slices.Sort(out) // a step wider than the gaps lets neighbours overlap
	return out
}

// smallestGap is the least distance between two different readings; 0 where all are equal.
func smallestGap(sorted []float64) float64 {
	gap := math.Inf(1)
	for i := 1; i < len(sorted); i++ {
		if d := sorted[i] - sorted[i-1]; d > 0 {
			gap = math.Min(gap, d)
		}
	}
	if math.IsInf(gap, 1) {
		return 0
	}
	return gap
}

// bestSplit returns where to cut the sorted readings so that the two parts' squared distances from their means are least; the cut is never
// between equal readings.
func bestSplit(sorted []float64) int {
	n := len(sorted)
	middle := sorted[n/2]
	total := 0.0
	for _, x := range sorted {
		total += x - middle
	}
	best, at, sum := -1.0, n/2, 0.0
	for i := 1; i < n; i++ {
		sum += sorted[i-1] - middle
		if sorted[i] == sorted[i-1] {
			continue
		}
		left, right := float64(i), float64(n-i)
		between := sum*sum/left + (total-sum)*(total-sum)/right
		if between > best {
			best, at = between, i
		}
	}
	return at
}

// suspicion words a split.
func (r *Readings) splitSuspicion() (Suspicion, bool) {
	s, found := r.Split()
	if !found {
		return Suspicion{}, false
	}
	return Suspicion{
		Kind: TwoPopulations, Parts: s.Smaller(), Test: "Hartigan's dip", Chance: s.Chance,
		Why: fmt.Sprintf("two populations: %d parts round %s and %d round %s, parted at %s; one population dips so deeply in at most %s of bags. "+
			"Look at the marking, maker and date of the smaller group",
			s.Low.N, r.print(s.Low.Median), s.High.N, r.print(s.High.Median), r.print(s.Boundary), percent(s.Chance)),
	}, true
}
