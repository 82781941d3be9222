package lot

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"
	"strings"
	"sync"
)

//go:embed dixon.csv
var dixonCSV string

// dixonKey names one critical value.
type dixonKey struct {
	ratio string
	n     int
	alpha float64
}

// dixonTable holds the critical values of Dixon's ratios, one-sided.
var dixonTable = sync.OnceValue(func() map[dixonKey]float64 {
	table, err := readDixon(dixonCSV)
	if err != nil {
		panic("lot: embedded dixon.csv: " + err.Error())
	}
	return table
})

func readDixon(text string) (map[dixonKey]float64, error) {
	rows, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		return nil, err
	}
	out := map[dixonKey]float64{}
	for _, row := range rows[1:] {
		n, err1 := strconv.Atoi(row[1])
		alpha, err2 := strconv.ParseFloat(row[2], 64)
		critical, err3 := strconv.ParseFloat(row[3], 64)
		if err1 != nil || err2 != nil || err3 != nil {
			return nil, fmt.Errorf("%v is no row of it", row)
		}
		out[dixonKey{row[0], n, alpha}] = critical
	}
	return out, nil
}

// mostDixon is the largest number of parts that Dixon's ratios are tabled for.
const mostDixon = 30

// dixonRatio returns Dixon's ratio for n parts: how many suspects are left out at the near and at the far end.
func dixonRatio(n int) (name string, near, far int) {
	switch {
	case n <= 7:
		return "r10", 1, 0
	case n <= 10:
		return "r11", 1, 1
	case n <= 13:
		return "r21", 2, 1
	}
	return "r22", 2, 2
}

// DixonCritical returns the critical value of one of Dixon's ratios (r10, r11, r12, r20, r21, r22) for n parts at a one-sided level alpha,
// from the table (Dixon 1951, Rorabacher 1991); it reports false for what is not tabled. Alphas are 0.1, 0.05, 0.02, 0.01 and 0.005.
func DixonCritical(ratio string, n int, alpha float64) (float64, bool) {
	c, ok := dixonTable()[dixonKey{ratio, n, alpha}]
	return c, ok
}

// Dixon returns Dixon's ratio of the more suspect end for 3 to 30 parts: r10 to 7 parts, r11 to 10, r21 to 13 and r22 above, which looks
// past one or two suspects beside it. high tells the end. The ratio is NaN for other numbers of parts, 0 where all stand equal.
func (r *Readings) Dixon() (ratio string, value float64, high bool) {
	n := len(r.sorted)
	if n < 3 || n > mostDixon {
		return "", math.NaN(), false
	}
	name, near, far := dixonRatio(n)
	up := over(r.sorted[n-1]-r.sorted[n-1-near], r.sorted[n-1]-r.sorted[far])
	down := over(r.sorted[near]-r.sorted[0], r.sorted[n-1-far]-r.sorted[0])
	if up >= down {
		return name, up, true
	}
	return name, down, false
}

func over(gap, width float64) float64 {
	if width == 0 {
		return 0
	}
	return gap / width
}
