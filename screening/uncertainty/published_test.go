package uncertainty_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"

	"goodbin/screening/uncertainty"
)

var inf = math.Inf(1)

func within(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %.10g, want %.10g ± %g", name, got, want, tolerance)
	}
}

// JCGM 100 (GUM). Unless a row says otherwise the printed figures are from memory and were recomputed.
func TestStandardUncertaintiesOfTheGUM(t *testing.T) {
	for _, tt := range []struct {
		name                 string
		got, want, tolerance float64
		printed, digit       float64 // as printed, and half of its last digit
	}{
		{"4.3.4: 10 Ω standard, ±129 µΩ at 99 %", 129 / uncertainty.Divisor99, 50, 1e-9, 50, 0.5},
		{"4.3.5 by three standard deviations: 240 µg", 240 / 3.0, 80, 1e-12, 80, 0.5},
		{"4.3.7 example 2: ±15 µV", uncertainty.Rectangular(14*0.928571 + 2), 8.660250573742772, 1e-12, 8.7, 0.05},
		{"4.4.5: 96 to 104 °C alike", uncertainty.Rectangular(4), 2.3094010767585034, 1e-12, 2.3, 0.05},
		{"4.4.6: 96 to 104 °C, triangular", uncertainty.Triangular(4), 1.6329931618554523, 1e-12, 1.6, 0.05},
		{"4.3.9: triangular ±1", uncertainty.Triangular(1), 0.4082482904638631, 1e-15, 0.408, 5e-4},
		{"JCGM 101, 6.4.6: U-shaped ±1", uncertainty.UShaped(1), 0.7071067811865476, 1e-15, 0.707, 5e-4},
		{"F.2.2.1: a digit of 1", uncertainty.Resolution(1), 0.2886751345948129, 1e-15, 0.29, 0.005},
	} {
		within(t, tt.name, tt.got, tt.want, tt.tolerance)
		within(t, tt.name+", as printed", tt.got, tt.printed, tt.digit)
	}
}

// A multimeter's ±(0.5 % + 2 counts) at 1.000 V, one count 1 mV (computed): 7 mV; alone, with the digit apart, and as 99 % of a normal
// distribution (the divisor 2.58 is published in a maker's slides; 2.576 is the quantile).
func TestAMultimetersClaim(t *testing.T) {
	u := uncertainty.Budget{Contributions: []uncertainty.Contribution{
		{U: uncertainty.Rectangular(0.007), Sensitivity: 1}, {U: uncertainty.Resolution(0.001), Sensitivity: 1},
	}}.Combined()
	within(t, "with its digit", u, 0.004051748593714407, 1e-15)
	within(t, "at 99 %", 0.007/uncertainty.CoverageFactor(0.99, inf), 0.0027175713819062503, 1e-15)
}

var temperatures = []float64{
	96.90, 98.18, 98.25, 98.61, 99.03, 99.49, 99.56, 99.74, 99.89, 100.07, 100.33, 100.42, 100.68, 100.95, 101.11, 101.20, 101.57, 101.84, 102.36, 102.72,
}

// JCGM 100, 4.4.3 (data and printed values from memory; they agree).
func TestTwentyTemperatures(t *testing.T) {
	within(t, "mean", stat.Mean(temperatures, nil), 100.145, 1e-9)
	within(t, "s", uncertainty.Spread(temperatures), 1.4888444830595435, 1e-12)
	within(t, "u of the mean", uncertainty.OfMean(temperatures), 0.332916, 5e-7)
	widened := uncertainty.OfRepeats(20, uncertainty.Spread(temperatures), 99)
	within(t, "with JCGM 101's factor √(19/17)", widened.U, 0.332916*math.Sqrt(19.0/17), 1e-6)
	if widened.Freedom != 19 || widened.Prior {
		t.Errorf("%+v", widened)
	}
}

// JCGM 100, table E.1 (printed values from memory, recomputed).
func TestHowRoughASpreadIs(t *testing.T) {
	for n, printed := range map[int]float64{2: 76, 3: 52, 4: 42, 5: 36, 10: 24, 20: 16, 30: 13, 50: 10} {
		within(t, "percent", 100*uncertainty.SpreadDoubt(n), printed, 0.5)
	}
	within(t, "n = 2", 100*uncertainty.SpreadDoubt(2), 75.55106397628666, 1e-9)
	within(t, "n = 4", 100*uncertainty.SpreadDoubt(4), 42.20156929501231, 1e-9)
	within(t, "n = 50", 100*uncertainty.SpreadDoubt(50), 10.126996384788749, 1e-9)
	if !math.IsNaN(uncertainty.SpreadDoubt(1)) {
		t.Error("one value has a spread")
	}
}

// JCGM 100, table G.2 at 95.45 % (printed values from memory, all reproduced).
func TestCoverageFactors(t *testing.T) {
	for nu, printed := range map[float64]float64{1: 13.97, 2: 4.53, 3: 3.31, 4: 2.87, 5: 2.65, 6: 2.52, 7: 2.43, 8: 2.37, 10: 2.28, 20: 2.13, 50: 2.05, inf: 2} {
		within(t, "k", uncertainty.CoverageFactor(0.9545, nu), printed, 0.005)
	}
	for nu, want := range map[float64]float64{1: 13.967811487756613, 3: 3.30682992072115, 6: 2.516528344704834, 8: 2.3664194994919296, 10: 2.28368161326801} {
		within(t, "k", uncertainty.CoverageFactor(0.9545, nu), want, 1e-8)
	}
	for _, bad := range [][2]float64{{0, 5}, {1, 5}, {0.95, 0.5}, {math.NaN(), 5}} {
		if k := uncertainty.CoverageFactor(bad[0], bad[1]); !math.IsNaN(k) {
			t.Errorf("p %v, ν %v: k = %v", bad[0], bad[1], k)
		}
	}
}

func line(u, c, nu float64) uncertainty.Contribution {
	return uncertainty.Contribution{U: u, Sensitivity: c, Freedom: nu}
}

// JCGM 100, H.1, end gauge: inputs and results published in the manual of a statistics package, which quotes them: u 25, 9.7, 2.9 and 16.6 nm
// with ν 18, 25.6, 50 and 2.
func TestEndGauge(t *testing.T) {
	b := uncertainty.Budget{Contributions: []uncertainty.Contribution{line(25, 1, 18), line(9.7, 1, 25.6), line(2.9, 1, 50), line(16.6, 1, 2)}}
	within(t, "uc", b.Combined(), 31.6711, 5e-5)
	within(t, "uc as printed", b.Combined(), 32, 0.5)
	within(t, "ν", b.Freedom(), 16.76455398091716, 1e-10)
	expanded, k := b.Expanded(0.99)
	within(t, "k·32 nm", 32*k, 93.4650119151999, 1e-6)
	within(t, "U99", expanded, k*b.Combined(), 1e-12)
	if got := b.BySize(); got[0].U != 25 || got[3].U != 2.9 {
		t.Errorf("by size %v", got)
	}
}

// Inputs of a package's example; the value is computed.
func TestSensitivitiesScaleContributions(t *testing.T) {
	b := uncertainty.Budget{Contributions: []uncertainty.Contribution{line(0.1, 1, inf), line(0.3, 2, 6), line(0.2, 3, 8), line(1.1, 0.5, 3)}}
	within(t, "uc", b.Combined(), 1.0161200716450787, 1e-12)
}

// JCGM 100, 5.2.2: ten 1 kΩ resistors calibrated against one standard, u = 0.1 Ω each: 1 Ω together; 0.32 Ω if the correlation is forgotten
// (from memory, recomputed). 5.1.5: 8.7 µV and 12 µV are 15 µV.
func TestCorrelatedResistors(t *testing.T) {
	var b uncertainty.Budget
	for i := range 10 {
		b.Contributions = append(b.Contributions, line(0.1, 1, 5))
		for k := range i {
			b.Correlations = append(b.Correlations, uncertainty.Correlation{I: k, J: i, R: 1})
		}
	}
	within(t, "correlated", b.Combined(), 1, 1e-12)
	within(t, "one standard's degrees of freedom", b.Freedom(), 5, 1e-9)
	b.Correlations = nil
	within(t, "forgotten", b.Combined(), 0.316227766016838, 1e-12)
	within(t, "independent degrees of freedom add", b.Freedom(), 50, 1e-9)
	volts := uncertainty.Budget{Contributions: []uncertainty.Contribution{line(uncertainty.Rectangular(15), 1, inf), line(12, 1, inf)}}
	within(t, "5.1.5", volts.Combined(), 14.7986, 5e-5)
}

// JCGM 100, H.2: five simultaneous sets of voltage, current and phase give resistance, reactance and impedance. The data are published in a
// statistics package and in a calculator's tests; the printed results are from memory and were recomputed. X's 0.295 is rounded on the way.
func TestImpedanceWithCorrelatedInputs(t *testing.T) {
	v := []float64{5.007, 4.994, 5.005, 4.990, 4.999}
	i := []float64{19.663e-3, 19.639e-3, 19.640e-3, 19.685e-3, 19.678e-3}
	phi := []float64{1.0456, 1.0438, 1.0468, 1.0428, 1.0433}
	at := []float64{stat.Mean(v, nil), stat.Mean(i, nil), stat.Mean(phi, nil)}
	u := []float64{uncertainty.OfMean(v), uncertainty.OfMean(i), uncertainty.OfMean(phi)}
	correlations := []uncertainty.Correlation{
		{I: 0, J: 1, R: uncertainty.CorrelationOf(v, i)}, {I: 0, J: 2, R: uncertainty.CorrelationOf(v, phi)}, {I: 1, J: 2, R: uncertainty.CorrelationOf(i, phi)},
	}
	budget := func(f func([]float64) float64) uncertainty.Budget {
		b := uncertainty.Budget{Value: f(at), Correlations: correlations}
		for k, c := range uncertainty.Sensitivities(f, at, u) {
			b.Contributions = append(b.Contributions, line(u[k], c, 4))
		}
		return b
	}
	r := budget(func(x []float64) float64 { return x[0] / x[1] * math.Cos(x[2]) })
	x := budget(func(x []float64) float64 { return x[0] / x[1] * math.Sin(x[2]) })
	z := budget(func(x []float64) float64 { return x[0] / x[1] })
	for _, tt := range []struct {
		name            string
		b               uncertainty.Budget
		value, u, alone float64
	}{
		{"R", r, 127.73217, 0.07107, 0.19454}, {"X", x, 219.84651, 0.29558, 0.20091}, {"Z", z, 254.25970, 0.23634, 0.20408},
	} {
		within(t, tt.name, tt.b.Value, tt.value, 5e-6)
		within(t, "u("+tt.name+")", tt.b.Combined(), tt.u, 5e-6)
		within(t, tt.name+" has the five sets' ν", tt.b.Freedom(), 4, 1e-9)
		tt.b.Correlations = nil
		within(t, "u("+tt.name+") without correlation", tt.b.Combined(), tt.alone, 5e-6)
	}
	r.Correlations, x.Correlations, z.Correlations = correlations, correlations, correlations
	within(t, "r(R,X)", uncertainty.Covariance(r, x)/r.Combined()/x.Combined(), -0.58843, 5e-6)
	within(t, "r(R,Z)", uncertainty.Covariance(r, z)/r.Combined()/z.Combined(), -0.48526, 5e-6)
	within(t, "r(X,Z)", uncertainty.Covariance(x, z)/x.Combined()/z.Combined(), 0.99251, 5e-6)
}

// JCGM 101, 9.2.2, 9.2.3 and 9.4 by its own method (printed values second-hand or from memory). So many trials find an end of the interval to
// about 0.01, and the mean and u of 9.4 to a part in a hundred.
func TestDistributionsPropagate(t *testing.T) {
	const trials = 400_000
	sum := func(x []float64) float64 { return x[0] + x[1] + x[2] + x[3] }
	normal := func(src *rand.Rand) []uncertainty.Rander {
		n := distuv.Normal{Sigma: 1, Src: src}
		return []uncertainty.Rander{n, n, n, n}
	}
	p, err := uncertainty.Propagate(sum, normal, trials, 1, 0.95)
	if err != nil {
		t.Fatal(err)
	}
	within(t, "9.2.2 u", p.U, 2, 0.01)
	within(t, "9.2.2 end", p.High, 3.92, 0.025)
	flat := func(src *rand.Rand) []uncertainty.Rander {
		n := distuv.Uniform{Min: -math.Sqrt(3), Max: math.Sqrt(3), Src: src}
		return []uncertainty.Rander{n, n, n, n}
	}
	if p, err = uncertainty.Propagate(sum, flat, trials, 1, 0.95); err != nil {
		t.Fatal(err)
	}
	within(t, "9.2.3 u", p.U, 2, 0.01)
	within(t, "9.2.3 end", p.High, 3.87940674134783, 0.02)
	within(t, "9.2.3 other end", p.Low, -3.87940674134783, 0.02)
	for x1, want := range map[float64][2]float64{0: {50e-6, 50e-6}, 0.010: {150e-6, 111.8e-6}, 0.050: {2550e-6, 502.4938e-6}} {
		loss := func(x []float64) float64 { return x[0]*x[0] + x[1]*x[1] }
		draw := func(src *rand.Rand) []uncertainty.Rander {
			return []uncertainty.Rander{distuv.Normal{Mu: x1, Sigma: 0.005, Src: src}, distuv.Normal{Sigma: 0.005, Src: src}}
		}
		p, err := uncertainty.Propagate(loss, draw, trials, 2, 0.95)
		if err != nil {
			t.Fatal(err)
		}
		within(t, "9.4 mean", p.Mean, want[0], want[0]/100)
		within(t, "9.4 u", p.U, want[1], want[1]/100)
	}
	if _, err := uncertainty.Propagate(sum, normal, uncertainty.MaxTrials+1, 1, 0.95); err == nil {
		t.Error("any number of trials is taken")
	}
}
