package electrolytic

import (
	"fmt"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// TestADryPartNeverComesBack: whatever else is read, a capacitance well below 0.70 of nominal is rejected, never regraded, never treated.
func TestADryPartNeverComesBack(t *testing.T) {
	book := Book()
	rapid.Check(t, func(t *rapid.T) {
		volts := rapid.SampledFrom(ladderVolts).Draw(t, "volts")
		uF := rapid.Float64Range(1, 10000).Draw(t, "microfarad")
		c := screening.Claim{}.WithRating(screening.NominalRating(screening.Capacitance, uF*1e-6)).WithRating(screening.NominalRating(screening.RatedVoltage, volts))
		if year := rapid.SampledFrom([]string{"", "1955", "1982", "1995", "2003"}).Draw(t, "dated"); year != "" {
			c = c.WithTrait("dated", year)
		}
		part := screening.Part{Claim: c, Treated: rapid.IntRange(0, 3).Draw(t, "treated"), Readings: []screening.Reading{
			capacitance(uF * rapid.Float64Range(0.01, 0.6).Draw(t, "of nominal")),
			esr(rapid.Float64Range(0, 100).Draw(t, "esr")),
			leakage(rapid.Float64Range(0, 1e5).Draw(t, "low leakage"), volts*rapid.Float64Range(0.1, 0.9).Draw(t, "at"), 5),
			leakage(rapid.Float64Range(0, 1e5).Draw(t, "leakage"), volts, 5),
		}}
		j, err := screening.Judge(book, part, screening.DefaultPolicy())
		if err != nil {
			t.Fatal(err)
		}
		if j.Verdict != screening.Reject || j.RegradedAs != nil {
			t.Fatalf("verdict %s as %v", j.Verdict, j.RegradedAs)
		}
	})
}

// TestLeakageBoundsSettleOneSideOnly: a reading at a lower voltage or later never passes, one at a higher voltage or earlier never fails.
func TestLeakageBoundsSettleOneSideOnly(t *testing.T) {
	book := Book()
	rapid.Check(t, func(t *rapid.T) {
		volts := rapid.SampledFrom([]float64{16, 35, 63, 250, 450}).Draw(t, "volts")
		c := claimed2(47, volts)
		ratio := rapid.SampledFrom([]float64{0.3, 0.9, 1, 1.1, 1.2}).Draw(t, "ratio")
		minutes := rapid.SampledFrom([]float64{0.25, 0.5, 1, 2, 5, 20}).Draw(t, "minutes")
		celsius := rapid.SampledFrom([]float64{2, 20, 40}).Draw(t, "celsius")
		r := leakage(rapid.Float64Range(0.01, 1e5).Draw(t, "leakage"), volts*ratio, minutes)
		j, err := screening.Judge(book, screening.Part{Claim: c, Readings: []screening.Reading{r, ambient(celsius)}}, screening.DefaultPolicy())
		if err != nil {
			t.Fatal(err)
		}
		for _, f := range j.Findings {
			if f.Limit.On != screening.Leakage.Name {
				continue
			}
			want, _ := f.Limit.At.Get(after)
			lower, higher := ratio < 1 || 60*minutes > 1.1*want || celsius < 10, ratio > 1.05 || 60*minutes < 0.9*want || celsius > 30
			if onlyTemperature := ratio == 1 && 60*minutes == want; onlyTemperature {
				continue
			}
			if lower && f.Outcome == screening.Pass {
				t.Fatalf("%s passes by %+v", f.Limit.At, f.Converted)
			}
			if higher && f.Outcome == screening.Fail {
				t.Fatalf("%s fails by %+v", f.Limit.At, f.Converted)
			}
		}
	})
}

func claimed2(uF, volts float64) screening.Claim {
	return screening.Claim{}.WithRating(screening.NominalRating(screening.Capacitance, uF*1e-6)).WithRating(screening.NominalRating(screening.RatedVoltage, volts))
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "2200uF 35V M capacitance=2010uF esr@120Hz=61m leakage@35V,2min=45uA temperature=24C")
}

func ExampleBook() {
	part := screening.Part{Claim: claimed2(2200, 35), Readings: []screening.Reading{capacitance(2010), esr(0.061)}}
	j, err := screening.Judge(Book(), part, screening.DefaultPolicy())
	fmt.Println(j.Verdict, err)
	// Output: accept <nil>
}
