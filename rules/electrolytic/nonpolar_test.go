package electrolytic

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

func TestNonPolarVerdicts(t *testing.T) {
	for _, tc := range []struct {
		name, words string
		want        screening.Verdict
		says        string
	}{
		{
			"sound both ways round", "47uF 100V np capacitance=48uF esr@120Hz=2 leakage@100V,5min=30uA leakage-reversed@100V,5min=28uA",
			screening.Accept, "",
		},
		{
			"one reading proves one way only", "47uF 100V np capacitance=48uF esr@120Hz=2 leakage@100V,5min=30uA",
			screening.Undecided, "MEASURE leakage current the other way round at 100 V",
		},
		{
			"up to 63 V both ways are wanted, not needed", "47uF 50V bp capacitance=48uF esr@120Hz=2", screening.Accept, "",
		},
		{
			"a failure the other way round counts as much", "47uF 50V np capacitance=48uF esr@120Hz=2 leakage@50V,5min=30uA leakage-reversed@50V,5min=3mA",
			screening.Treat, "RE-FORM",
		},
		{
			"a lower voltage needs a reading each way there",
			"47uF 100V np treated=2 capacitance=48uF esr@120Hz=2 leakage@100V,5min=30uA leakage-reversed@100V,5min=3mA leakage@63V,5min=20uA",
			screening.Reject, "",
		},
		{
			"with both it is kept for less",
			"47uF 100V np treated=2 capacitance=48uF esr@120Hz=2 leakage@100V,5min=30uA leakage-reversed@100V,5min=3mA leakage@63V,5min=20uA " +
				"leakage-reversed@63V,5min=25uA",
			screening.Regrade, "up to 63 V",
		},
		{
			"reads high: good one way only still asks for the other", "47uF 50V np capacitance=70uF esr@120Hz=2 leakage@50V,5min=30uA",
			screening.Treat, "MEASURE leakage current the other way round at 50 V",
		},
		{
			"above 100 V the limit is carried over, so it rejects nothing", "47uF 250V np treated=2 capacitance=48uF esr@120Hz=2 " +
				"leakage@250V,5min=30uA leakage-reversed@250V,5min=8mA", screening.Undecided, "CONFIRM the figure",
		},
		{
			"of a polar part the other way round is no evidence", "47uF 50V capacitance=48uF esr@120Hz=2 leakage-reversed@50V,5min=30uA",
			screening.Accept, "counts for non-polar parts only",
		},
	} {
		t.Run(tc.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tc.words, screening.DefaultPolicy())
			if j.Verdict != tc.want || !strings.Contains(booktest.Texts(j), tc.says) {
				t.Errorf("%s, want %s saying %q\n%s", j.Verdict, tc.want, tc.says, booktest.Texts(j))
			}
		})
	}
}

// NIC NNR 50 V 100 µF after 5 min: 0.03·CV + 8 = 158 µA (formula published, number computed from it); both ways round.
func TestNonPolarLimitsHoldBothWays(t *testing.T) {
	c := claimed(t, 100, 50, screening.TraitTechnology, techNonPolar)
	for _, on := range []screening.Characteristic{screening.Leakage.Name, LeakageReversed.Name} {
		l := limitOf(t, c, on, nonPolarSet, 300)
		if math.Abs(l.High-158e-6) > 1e-12 || !l.InUse || l.Source.Status != screening.Published {
			t.Errorf("%s: %v A, in use %v, %s", on, l.High, l.InUse, l.Source)
		}
	}
	for _, l := range mustLimits(t, claimed(t, 100, 50)) {
		if l.Set == nonPolarSet || l.On == LeakageReversed.Name {
			t.Errorf("a polar part has %s of set %s", l.On, l.Set)
		}
	}
}

func mustLimits(t *testing.T, c screening.Claim) []screening.Limit {
	t.Helper()
	all, err := limits(c)
	if err != nil {
		t.Fatal(err)
	}
	return all
}

func TestNonPolarIsNeverTold(t *testing.T) {
	part := booktest.Part(t, Book(), "47uF 100V np capacitance=48uF esr@120Hz=2 leakage@100V,5min=3mA")
	j := booktest.JudgePart(t, Book(), part, screening.DefaultPolicy())
	var text strings.Builder
	for _, at := range []screening.Moment{screening.AtLook, screening.AtMeasure, screening.AtVerdict} {
		for _, c := range cautions(j.Part, at) {
			text.WriteString(c.Text + "\n")
		}
	}
	for _, l := range mustLimits(t, j.Claim) {
		for _, r := range recipes(j.Part, l) {
			text.WriteString(strings.Join(r.Lines, "\n") + "\n")
		}
	}
	if strings.Contains(text.String(), "plus to plus") {
		t.Errorf("a part without polarity is told plus to plus:\n%s", text.String())
	}
	for _, words := range []string{"either way round", "leads swapped", "one way round, then discharged, then the other"} {
		if !strings.Contains(text.String(), words) {
			t.Errorf("nothing says %q", words)
		}
	}
}

func TestTechnologyWords(t *testing.T) {
	for _, word := range []string{"np", "NP", "bp", "non-polar", "bipolar", "technology=np"} {
		if c := booktest.Part(t, Book(), "47uF 50V "+word).Claim; !nonPolar(c) {
			t.Errorf("%q claims %v", word, c.Traits)
		}
	}
	c := screening.Claim{}.WithTrait(screening.TraitTechnology, "wet")
	if _, _, err := complete(c); err == nil || !strings.Contains(err.Error(), `"wet" is neither polar nor non-polar`) {
		t.Errorf("wet: %v", err)
	}
}

// A ceiling stands in both directions alike: no published series confirms a reading beyond it.
func TestBothDirectionsHaveTheirCeiling(t *testing.T) {
	found := map[screening.Characteristic]int{}
	for _, l := range mustLimits(t, claimed(t, 47, 100, screening.TraitTechnology, techNonPolar)) {
		if isCeiling(l.Criterion) {
			found[l.On]++
		}
	}
	if found[screening.Leakage.Name] == 0 || found[screening.Leakage.Name] != found[LeakageReversed.Name] || len(found) != 2 {
		t.Errorf("ceilings: %v", found)
	}
}
