package bridge

import (
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

// four are the drops of a sound bridge's legs, both blocks that its legs block a diode test.
const (
	four  = " vf/ac1-plus=0.512 vf/ac2-plus=0.515 vf/minus-ac1=0.509 vf/minus-ac2=0.514"
	block = " vbr/ac1-ac2=OL vbr/ac2-ac1=OL"
)

func judge(t *testing.T, words string) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, Book(types.Builtin()), words, screening.DefaultPolicy())
}

func TestVerdictsOfBridges(t *testing.T) {
	given := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		want        screening.Verdict
		says        string
	}{
		{"four legs that conduct, and two readings that show all four block", "KBP208" + four + block, screening.Accept, "reverse blocking above 2 V (rated 800 V)"},
		{"an unmarked one is accepted with no rating known", strings.TrimSpace(four + block), screening.Accept, "no rating known"},
		{"blocking proved at 30 V is said", "KBP208" + four + " vbr/ac1-ac2=>30V vbr/ac2-ac1=>30V", screening.Accept, "reverse blocking above 30 V"},
		{"legs read one by one prove the same", "KBP208" + four + " vbr/ac1-plus=OL vbr/ac2-plus=OL vbr/minus-ac1=OL vbr/minus-ac2=OL", screening.Accept, ""},
		{"leakage at 30 V answers for blocking", "KBP208" + four + " ir/ac1-ac2@30V=0.2uA ir/ac2-ac1@30V=..0.1uA", screening.Accept, "reverse blocking above 30 V"},
		{"plus to minus in reverse shows nothing of each leg", "KBP208" + four + " vbr/plus-minus=OL", screening.Undecided, "from one AC lead to the other"},
		{"forward alone decides nothing", "KBP208" + four, screening.Undecided, "section ac1-ac2"},
		{"three legs decide nothing", "KBP208 vf/ac1-plus=0.512 vf/ac2-plus=0.515 vf/minus-ac1=0.509" + block, screening.Undecided, "minus-ac2"},
		{"across the mains", "KBP208" + four + block + " seen=mains", screening.Barred, ""},
		{"stacked plates", "seen=plates", screening.Barred, "selenium"},
		{"a shorted leg is named", "KBP208 vf/ac1-plus=0.512 vf/ac2-plus=0.001", screening.Reject, "leg ac2-plus reads shorted"},
		{"an open leg beside one that conducts is named", "KBP208 vf/ac1-plus=0.512 vf/minus-ac2=OL", screening.Reject, "leg minus-ac2 reads open"},
		{"a leg that leaks backwards is one of two", "KBP208" + four + " vbr/ac1-ac2=1.2", screening.Reject, "leg ac2-plus or minus-ac1 does not block"},
		{"read by itself it is named", "KBP208" + four + " vbr/ac1-ac2=1.2 vbr/minus-ac1=0.7", screening.Reject, "it is leg minus-ac1 that does not block"},
		{"a breakdown below the rating is damage", "KBP208" + four + " vbr/ac1-ac2=210V vbr/ac2-ac1=OL", screening.Reject, "210 V"},
		{"one below a rating that is only recalled holds it back", "KBPC3510" + four + " vbr/ac1-ac2=210V vbr/ac2-ac1=OL", screening.Undecided, "CONFIRM"},
		{"below a rating that its owner claims it is damage", "type=XB40 400V" + four + " vbr/ac1-ac2=210V vbr/ac2-ac1=OL", screening.Reject, ""},
		{"open at the first leg may be turned probes", "KBP208 vf/ac1-plus=OL", screening.Undecided, "wrong way round"},
		{"open at every leg too", "KBP208 vf/ac1-plus=OL vf/ac2-plus=OL vf/minus-ac1=OL vf/minus-ac2=OL" + block, screening.Undecided, "wrong way round"},
		{"open both ways is open", "KBP208 vf/ac1-plus=OL vbr/ac1-plus=OL", screening.Reject, "leg ac1-plus reads open"},
		{"a drop with the probes turned is no fault", "KBP208 vf/ac1-plus=OL vbr/ac1-plus=0.51", screening.Undecided, "type each reading as the other"},
		{"20 µA of two legs is the silicon rule's limit, 60 µA beyond it", "KBP208" + four + " ir/ac1-ac2@30V=60uA temperature=25C vbr/ac2-ac1=OL", screening.Reject, ""},
		{"a leg 0.2 V off its fellows", "KBP208 vf/ac1-plus=0.512 vf/ac2-plus=0.515 vf/minus-ac1=0.735 vf/minus-ac2=0.514" + block, screening.Reject, "difference between the legs"},
		{"a leg that drops 1.1 V is not silicon", "vf/ac1-plus=1.1V", screening.Reject, "selenium"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			j := judge(t, tt.words)
			given[j.Verdict]++
			if said := booktest.Texts(j); j.Verdict != tt.want || !strings.Contains(said, tt.says) {
				t.Errorf("%s, want %s saying %q\n%s", j.Verdict, tt.want, tt.says, said)
			}
		})
	}
	booktest.EveryVerdict(t, given, screening.Regrade, screening.Treat)
}

// The section of a limit is read at the case: each of the four legs, and both ways across; nothing else is required.
func TestSixReadingsAreRequired(t *testing.T) {
	all, err := limits(judge(t, "KBP208").Claim)
	if err != nil {
		t.Fatal(err)
	}
	required := map[string]bool{}
	for _, l := range all {
		if l.Need == screening.Required {
			required[string(l.Criterion)+" "+l.Section] = true
		}
	}
	if len(required) != 6 {
		t.Errorf("required: %v", required)
	}
}

// Every leg blocks on exactly one of the two ways across, and conducts on the other: that is why two readings prove four legs.
func TestTwoWaysAcrossTestEveryLegOnce(t *testing.T) {
	seen := map[string]int{}
	for _, w := range ways {
		red, black, _ := strings.Cut(w.section, "-")
		for _, leg := range w.legs {
			seen[leg]++
			// A leg named anode-cathode blocks when its cathode end is nearer the red probe.
			anode, cathode, _ := strings.Cut(leg, "-")
			if cathode != red && anode != black {
				t.Errorf("%s: leg %s is not turned by red on %s", w.section, leg, red)
			}
		}
	}
	for _, leg := range legs {
		if seen[leg] != 1 {
			t.Errorf("leg %s is tested %d times", leg, seen[leg])
		}
	}
}

func TestASlipBetweenLegsAndWholeIsSaid(t *testing.T) {
	if said := booktest.Texts(judge(t, "KBP208"+four+block+" vf/minus-plus=1.03")); strings.Contains(said, "slip") {
		t.Errorf("0.509 + 0.512 V is 1.02 V, near 1.03 V:\n%s", said)
	}
	if said := booktest.Texts(judge(t, "KBP208"+four+block+" vf/minus-plus=0.61")); !strings.Contains(said, "slip") {
		t.Errorf("0.61 V is not the sum of two legs:\n%s", said)
	}
}

// A meter that may be 10 % off rejects no sound bridge.
func TestAPoorMeterRejectsNoSoundBridge(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters = map[string]screening.Meter{"": {By: map[screening.Characteristic]screening.Accuracy{
		screening.VF.Name: {Relative: 0.1, Absolute: 0.02}, screening.VBR.Name: {Relative: 0.1},
	}}}
	for _, drops := range []string{"0.46 0.47 0.45 0.46", "0.56 0.58 0.57 0.55", "0.64 0.60 0.66 0.63"} {
		words := "KBP208" + block
		for i, v := range strings.Fields(drops) {
			words += " vf/" + legs[i] + "=" + v
		}
		if j := booktest.Judge(t, Book(types.Builtin()), words, policy); j.Verdict == screening.Reject {
			t.Errorf("%s: %s\n%s", drops, j.Verdict, booktest.Texts(j))
		}
	}
}

func TestClaimsThatContradictTheTableAreRefused(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]string{"KBP208 rated:vrrm=1000V": "KBP208 is rated 800 V", "rated:vrrm=0V": "no reverse voltage"} {
		_, err := screening.Judge(b, booktest.Part(t, b, words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

// The published figures of the two bridge sheets (KBP2xx, GBPC25): VRRM, IF(AV), IFSM, VF of one leg at its current.
func TestPublishedRatings(t *testing.T) {
	for _, tt := range []struct {
		words            string
		vrrm, ifav, ifsm float64
		vf, at           float64
	}{{"KBP208", 800, 1.5, 50, 1.1, 1.5}, {"GBPC25", 1000, 25, 300, 1.1, 12.5}} {
		c := judge(t, tt.words).Claim
		for of, want := range map[screening.Characteristic]float64{"vrrm": tt.vrrm, "if-av": tt.ifav, "ifsm": tt.ifsm} {
			if r, ok := c.Rating(of, ""); !ok || r.Low != want || r.Source.Status != screening.Published {
				t.Errorf("%s %s: %v %s, want %v", tt.words, of, r.Low, r.Source, want)
			}
		}
		r, _ := c.Rating(screening.VF.Name, "")
		if i, _ := r.At.Get(screening.Current); r.High != tt.vf || i != tt.at {
			t.Errorf("%s: vf %v at %v", tt.words, r.High, i)
		}
	}
}

func TestTablesAreChecked(t *testing.T) {
	if _, err := readBands("of,low,high,from,to,source,clause,status\nsound,0.9,0.3,0,1,x,,house\n"); err == nil ||
		!strings.Contains(err.Error(), "upside down") || !strings.Contains(err.Error(), "no row leakage") {
		t.Errorf("%v", err)
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "KBP208"+four+block)
}
