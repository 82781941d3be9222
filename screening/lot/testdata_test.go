package lot

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"testing"

	"goodbin/screening/quantity"
)

// table reads a CSV of testdata by column name.
func table(t testing.TB, name string) []map[string]string {
	t.Helper()
	f, err := os.Open("testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	rows := make([]map[string]string, 0, len(all))
	for _, record := range all[1:] {
		row := map[string]string{}
		for i, name := range all[0] {
			row[name] = record[i]
		}
		rows = append(rows, row)
	}
	return rows
}

func number(t testing.TB, text string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

func near(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %.12g, want %.12g ± %g", what, got, want, tolerance)
	}
}

func of(t testing.TB, values ...float64) *Readings {
	t.Helper()
	r, err := New(quantity.One, 0, values...)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// normal draws n readings from a normal distribution, rounded to a step if it is not 0.
func normal(r *rand.Rand, n int, mean, sigma, step float64) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = mean + sigma*r.NormFloat64()
		if step > 0 {
			out[i] = math.Round(out[i]/step) * step
		}
	}
	return out
}

// NIST's Statistical Reference Datasets (published): certified mean, standard deviation and lag-1 autocorrelation.
var (
	// michelso is Michelson's speed of light in air, 299000 km/s taken off; in 1000 km/s above 299.
	michelso = thousandths(299,
		850, 740, 900, 1070, 930, 850, 950, 980, 980, 880, 1000, 980, 930, 650, 760, 810, 1000, 1000, 960, 960,
		960, 940, 960, 940, 880, 800, 850, 880, 900, 840, 830, 790, 810, 880, 880, 830, 800, 790, 760, 800,
		880, 880, 880, 860, 720, 720, 620, 860, 970, 950, 880, 910, 850, 870, 840, 840, 850, 840, 840, 840,
		890, 810, 810, 820, 800, 770, 760, 740, 750, 760, 910, 920, 890, 860, 880, 720, 840, 850, 850, 780,
		890, 840, 780, 810, 760, 810, 790, 810, 820, 850, 870, 870, 810, 740, 810, 940, 950, 800, 810, 870)
	numAcc1 = []float64{10000001, 10000003, 10000002}
	numAcc2 = numAcc(1)
	numAcc3 = numAcc(1000000)
	numAcc4 = numAcc(10000000)
	// siRstv is five instruments reading the resistance of one silicon wafer, five readings each.
	siRstv = [][]float64{
		{196.3052, 196.1240, 196.1890, 196.2569, 196.3403},
		{196.3042, 196.3825, 196.1669, 196.3257, 196.0422},
		{196.1303, 196.2005, 196.2889, 196.0343, 196.1811},
		{196.2795, 196.1748, 196.1494, 196.1485, 195.9885},
		{196.2119, 196.1051, 196.1850, 196.0052, 196.2090},
	}
	// uranium is the example of NIST/SEMATECH 1.3.5.17 (from memory; recomputes).
	uranium = []float64{199.31, 199.53, 200.19, 200.82, 201.92, 201.95, 202.18, 245.57}
)

func thousandths(base float64, values ...float64) []float64 {
	out := make([]float64, len(values))
	for i, v := range values {
		out[i] = base + v/1000
	}
	return out
}

// numAcc is b+0.2 followed by 500 pairs of b+0.1 and b+0.3.
func numAcc(b float64) []float64 {
	out := []float64{b + 0.2}
	for range 500 {
		out = append(out, b+0.1, b+0.3)
	}
	return out
}
