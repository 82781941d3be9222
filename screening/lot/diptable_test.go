package lot

import (
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strings"
	"testing"
)

// updateVariable makes TestDipTable write dip.csv anew; it takes a minute or two.
const updateVariable = "UPDATE_DIP_TABLE"

var (
	dipSizes  = []int{10, 12, 15, 20, 25, 30, 40, 50, 70, 100, 150, 200, 300, 500, 1000, 2000, 5000}
	dipLevels = []float64{0.10, 0.05, 0.01, 0.005, 0.001}
)

// uniformDips returns the dips of so many uniform samples of n, sorted.
func uniformDips(n, samples int, seed uint64) []float64 {
	r := rand.New(rand.NewPCG(seed, uint64(n)))
	out := make([]float64, samples)
	x := make([]float64, n)
	for i := range out {
		sum := 0.0
		for j := range x { // sums of exponential gaps are sorted uniform readings
			sum += r.ExpFloat64()
			x[j] = sum
		}
		out[i] = dip(x)
	}
	slices.Sort(out)
	return out
}

// TestDipTable computes some of the critical values anew with other random numbers, and holds the table to them within what so few samples
// scatter.
func TestDipTable(t *testing.T) {
	if os.Getenv(updateVariable) != "" {
		writeDipTable(t)
		return
	}
	table := dips()
	if !slices.Equal(table.n, dipSizes) || !slices.Equal(table.levels, dipLevels) {
		t.Fatalf("the table holds %v at %v", table.n, table.levels)
	}
	for _, n := range []int{10, 20, 50, 200} {
		const samples = 4000
		found := uniformDips(n, samples, 99)
		for k, level := range dipLevels[:4] {
			critical := table.root[slices.Index(dipSizes, n)][k] / math.Sqrt(float64(n))
			at, _ := slices.BinarySearch(found, critical)
			beyond := float64(samples-at) / samples
			if scatter := math.Sqrt(level * (1 - level) / samples); math.Abs(beyond-level) > 4*scatter {
				t.Errorf("n %d: %.4f of uniform samples dip more than %.5f, want %g ± %.4f", n, beyond, critical, level, 4*scatter)
			}
		}
	}
}

func writeDipTable(t *testing.T) {
	const samples = 40_000
	var b strings.Builder
	b.WriteString("n")
	for _, level := range dipLevels {
		fmt.Fprintf(&b, ",%g", level)
	}
	b.WriteString(",source,status\n")
	for _, n := range dipSizes {
		found := uniformDips(n, samples, 1)
		fmt.Fprint(&b, n)
		for _, level := range dipLevels {
			fmt.Fprintf(&b, ",%.5f", found[int(math.Ceil((1-level)*samples))-1])
		}
		fmt.Fprintf(&b, ",%d uniform samples of each size,derived\n", samples)
	}
	if err := os.WriteFile("dip.csv", []byte(b.String()), 0o600); err != nil {
		t.Fatal(err)
	}
}
