package electrolytic

import (
	"slices"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	freq  = screening.Frequency
	volt  = screening.Voltage
	after = screening.After
)

// read builds a reading with pairs of condition variable and value.
func read(d screening.Definition, x float64, at ...any) screening.Reading {
	r := screening.Reading{Of: d.Name, Unit: d.Unit, Value: x}
	for i := 0; i+1 < len(at); i += 2 {
		r.At = r.At.With(at[i].(screening.Variable), at[i+1].(float64))
	}
	return r
}

func capacitance(microfarad float64) screening.Reading {
	return read(screening.Capacitance, microfarad*1e-6)
}

func esr(ohms float64) screening.Reading        { return read(screening.ESR, ohms, freq, 120.0) }
func esr100k(ohms float64) screening.Reading    { return read(screening.ESR, ohms, freq, 100e3) }
func ambient(celsius float64) screening.Reading { return read(screening.Temperature, celsius) }

func leakage(microampere, volts, minutes float64) screening.Reading {
	return read(screening.Leakage, microampere*1e-6, volt, volts, after, 60*minutes)
}

type verdictCase struct {
	name     string
	uF, v    float64
	traits   []string
	readings []screening.Reading
	treated  int
	seen     []string
	want     screening.Verdict
	grade    string
	as       float64 // rated voltage of the lesser claim; 0 for none
	says     string  // a code among the reasons, or words of a next step
}

var verdicts = []verdictCase{
	{
		name: "above 10 mA, which is second-hand and rejects nothing", uF: 2200, v: 50, traits: []string{"dated", "1975"}, want: screening.Accept,
		// K·C + 0.3 mA is 22.3 mA; a new part of today may leak 1.1 mA, but the limit in use passes.
		readings: []screening.Reading{capacitance(2300), esr(0.05), leakage(12000, 50, 5)}, says: codeUnconfirmed + ": leakage reads 12.0 mA",
	},
	{
		name: "a part with worn-out losses never comes back as a lower voltage", uF: 100, v: 100, treated: 2, want: screening.Reject,
		// tan δ 0.33: NIC NRGB, the laxest, allows 2·0.15 at 100 V, and twice 0.28 at 6.3 V.
		readings: []screening.Reading{capacitance(96), read(screening.TanDelta, 0.33, freq, 120.0), leakage(9000, 100, 2), leakage(1, 6.3, 2)},
	},
	{
		name: "losses in doubt are not answered by a lower voltage either", uF: 100, v: 100, treated: 2, want: screening.Reject,
		readings: []screening.Reading{capacitance(96), read(screening.TanDelta, 0.28, freq, 120.0), leakage(9000, 100, 2), leakage(1, 6.3, 2)},
	},
	{
		name: "sound losses are", uF: 100, v: 100, treated: 2, want: screening.Regrade, as: 6.3,
		readings: []screening.Reading{capacitance(96), read(screening.TanDelta, 0.05, freq, 120.0), leakage(9000, 100, 2), leakage(1, 6.3, 2)},
	},
	{
		name: "2007 is the last year of the electrolyte fault", uF: 470, v: 50, traits: []string{"dated", "2007"}, want: screening.Undecided, says: codeFaultEra,
		readings: []screening.Reading{capacitance(690), esr(0.34), leakage(3800, 50, 2)},
	},
	{
		name: "2008 is not", uF: 470, v: 50, traits: []string{"dated", "2008"}, want: screening.Treat,
		readings: []screening.Reading{capacitance(690), esr(0.34), leakage(3800, 50, 2)},
	},
	{
		name: "1998 is not", uF: 470, v: 50, traits: []string{"dated", "1998"}, want: screening.Treat,
		readings: []screening.Reading{capacitance(690), esr(0.34), leakage(3800, 50, 2)},
	},
	{
		name: "the first evening: a sound 2200 µF 35 V is accepted", uF: 2200, v: 35, want: screening.Accept, grade: "within-spec",
		readings: []screening.Reading{capacitance(2010), esr(0.061), leakage(45, 35, 2), ambient(24)},
	},
	{
		name: "leakage of a low-voltage radial is wanted, not needed", uF: 100, v: 25, want: screening.Accept,
		readings: []screening.Reading{capacitance(98), esr(0.7)},
	},
	{
		name: "worn but inside the makers' end of endurance: serviceable", uF: 100, v: 25, want: screening.Accept, grade: "serviceable",
		readings: []screening.Reading{capacitance(76), esr(3.0)}, // 0.16·1326/100 = 2.12 Ω as new, 4.24 Ω serviceable
	},
	{
		name: "tan δ answers for ESR", uF: 100, v: 25, want: screening.Accept,
		readings: []screening.Reading{capacitance(98), read(screening.TanDelta, 0.06)},
	},
	{
		name: "at half the 120 Hz limit an ESR at 100 kHz is evidence for serviceable", uF: 470, v: 25, want: screening.Accept, grade: "serviceable",
		readings: []screening.Reading{capacitance(450), esr100k(0.15)}, // limit 0.16·1326/470 = 0.451 Ω, half of it 0.226 Ω
	},
	{
		name: "an ESR at 100 kHz above half the 120 Hz limit proves nothing", uF: 470, v: 25, want: screening.Undecided, says: "MEASURE equivalent",
		readings: []screening.Reading{capacitance(450), esr100k(0.30)},
	},
	{
		name: "the 100 kHz rule ends above 50 V", uF: 100, v: 63, want: screening.Undecided, says: "at 100 kHz ESR is two to eight times less",
		readings: []screening.Reading{capacitance(98), esr100k(0.2)},
	},
	{
		name: "the 100 kHz rule ends at 33 µF", uF: 33, v: 25, want: screening.Undecided, says: "MEASURE equivalent",
		readings: []screening.Reading{capacitance(32), esr100k(0.5)},
	},
	{
		name: "an ESR without its frequency is not compared", uF: 100, v: 25, want: screening.Undecided, says: "say at which frequency",
		readings: []screening.Reading{capacitance(98), read(screening.ESR, 0.5)},
	},
	{
		name: "nothing measured: undecided", uF: 100, v: 25, want: screening.Undecided, says: "MEASURE capacitance",
	},
	{
		name: "above 63 V leakage must be measured", uF: 47, v: 450, want: screening.Undecided, says: "MEASURE leakage",
		readings: []screening.Reading{capacitance(46), esr(2)},
	},
	{
		name: "leakage at 10 V does not pass a 450 V part", uF: 47, v: 450, want: screening.Undecided, says: "MEASURE leakage",
		readings: []screening.Reading{capacitance(46), esr(2), leakage(1, 10, 5)},
	},
	{
		name: "leakage without voltage and time is not compared", uF: 47, v: 450, want: screening.Undecided, says: "say at which voltage",
		readings: []screening.Reading{capacitance(46), esr(2), read(screening.Leakage, 1e-6)},
	},
	{
		name: "leakage alone out of limits: re-form", uF: 47, v: 450, want: screening.Treat, says: "RE-FORM",
		readings: []screening.Reading{capacitance(46), esr(2), leakage(2000, 450, 5)}, // limit 0.02·21150 + 25 = 448 µA
	},
	{
		name: "re-formed once and still leaking: once more", uF: 47, v: 450, want: screening.Treat, treated: 1,
		readings: []screening.Reading{capacitance(46), esr(2), leakage(2000, 450, 5)},
	},
	{
		name: "waiting for treatment it meets 350 V today", uF: 47, v: 450, want: screening.Treat, as: 350,
		readings: []screening.Reading{capacitance(46), esr(2), leakage(60, 350, 5), leakage(2000, 450, 5)},
	},
	{
		name: "re-formed twice, leaking at 450 V, sound at 350 V: regraded to 350 V", uF: 47, v: 450, treated: 2, want: screening.Regrade, as: 350,
		readings: []screening.Reading{capacitance(46), esr(2), leakage(60, 350, 5), leakage(2000, 450, 5)},
	},
	{
		name: "re-formed twice and leaking: rejected", uF: 47, v: 450, treated: 2, want: screening.Reject, says: screening.CodeTreatedBefore,
		readings: []screening.Reading{capacitance(46), esr(2), leakage(2000, 450, 5)},
	},
	{
		name: "too much already at 50 V: leakage fails at 450 V", uF: 47, v: 450, want: screening.Treat,
		readings: []screening.Reading{capacitance(46), esr(2), leakage(2000, 50, 5)},
	},
	{
		name: "leaking and dry: the treatment cannot help, rejected", uF: 47, v: 450, want: screening.Reject,
		readings: []screening.Reading{capacitance(20), esr(40), leakage(2000, 450, 5)},
	},
	{
		name: "high capacitance is a leakage suspicion: treat, and leakage first", uF: 100, v: 25, want: screening.Treat, says: "MEASURE leakage",
		readings: []screening.Reading{capacitance(160), esr(0.7)},
	},
	{
		name: "high capacitance though leakage passes: undecided", uF: 100, v: 25, want: screening.Undecided, says: codeLeakageSuspected,
		readings: []screening.Reading{capacitance(160), esr(0.7), leakage(5, 25, 2)},
	},
	{
		name: "high capacitance and high leakage: treat", uF: 100, v: 25, want: screening.Treat, traits: []string{"dated", "1995"},
		readings: []screening.Reading{capacitance(160), esr(0.7), leakage(300, 25, 2)},
	},
	{
		name: "the same of 2003: undecided, the electrolyte fault", uF: 100, v: 25, want: screening.Undecided, says: codeFaultEra,
		traits: []string{"dated", "2003"}, readings: []screening.Reading{capacitance(160), esr(0.7), leakage(300, 25, 2)},
	},
	{
		name: "high after two treatments, leakage unknown: undecided", uF: 100, v: 25, treated: 2, want: screening.Undecided, says: "MEASURE leakage",
		readings: []screening.Reading{capacitance(160), esr(0.7)},
	},
	{
		name: "a dried-out 35 V part is rejected, never regraded to 16 V", uF: 470, v: 35, want: screening.Reject,
		readings: []screening.Reading{capacitance(180), esr(9), leakage(1, 16, 2)},
	},
	{
		name: "high ESR alone rejects, whatever a lower voltage would allow", uF: 470, v: 35, treated: 2, want: screening.Reject,
		readings: []screening.Reading{capacitance(450), esr(9), leakage(5, 16, 2), leakage(900, 35, 2)},
	},
	{
		name: "an ESR at 100 kHz above the serviceable 120 Hz limit rejects", uF: 470, v: 35, want: screening.Reject,
		readings: []screening.Reading{capacitance(450), esr100k(9)},
	},
	{
		name: "an ESR that only the laxest series allows: undecided", uF: 470, v: 25, want: screening.Undecided, says: codeSeriesUnknown,
		readings: []screening.Reading{capacitance(450), esr(1.3)}, // 2·0.16 = 0.90 Ω; 2·0.30 = 1.69 Ω
	},
	{
		name: "across the mains: barred", uF: 100, v: 25, want: screening.Barred, seen: []string{"mains-or-cracked"},
		readings: []screening.Reading{capacitance(98), esr(0.7)},
	},
	{
		name: "bulged: rejected, whatever it reads", uF: 100, v: 25, want: screening.Reject, seen: []string{bulged},
		readings: []screening.Reading{capacitance(98), esr(0.7)},
	},
	{
		name: "vintage: 1.0 mA on 20 µF 450 V of 1955 is inside 1.1 mA", uF: 20, v: 450, traits: []string{"dated", "1955"}, want: screening.Accept,
		readings: []screening.Reading{capacitance(22), esr(5), leakage(1000, 450, 5)},
	},
	{
		name: "vintage: 3 mA also fails what is asked of a new part: treat", uF: 20, v: 450, traits: []string{"dated", "1955"}, want: screening.Treat,
		says: codeConfirmed, readings: []screening.Reading{capacitance(22), esr(5), leakage(3000, 450, 5)},
	},
	{
		name: "vintage: a reading above an assumed tolerance rejects nothing", uF: 20, v: 450, traits: []string{"dated", "1955"},
		want: screening.Undecided, says: "CONFIRM",
		readings: []screening.Reading{capacitance(34), esr(5), leakage(300, 450, 5)},
	},
	{
		name: "vintage: dry is dry, whatever its tolerance", uF: 20, v: 450, traits: []string{"dated", "1955"}, want: screening.Reject,
		readings: []screening.Reading{capacitance(8), esr(5), leakage(300, 450, 5)},
	},
	{
		name: "snap-in at 63 V: wanted leakage above a derived limit holds nothing back, and is said", uF: 10000, v: 63,
		traits: []string{"case", "snap-in"}, says: codeUnconfirmed,
		want: screening.Accept, readings: []screening.Reading{capacitance(9800), esr(0.012), leakage(1600, 63, 5)},
	},
	{
		name: "snap-in at 100 V: required leakage above the derived limit and inside the published one: undecided", uF: 10000, v: 100,
		traits: []string{"case", "snap-in"}, want: screening.Undecided, says: "CONFIRM",
		readings: []screening.Reading{capacitance(9800), esr(0.008), leakage(1600, 100, 5)},
	},
	{
		name: "snap-in at 100 V: above the published limit too: treat", uF: 10000, v: 100,
		traits: []string{"case", "snap-in"}, want: screening.Treat, says: codeConfirmed,
		readings: []screening.Reading{capacitance(9800), esr(0.008), leakage(12000, 100, 5)},
	},
	{
		name: "more than its can may stand, inside its limit: accepted, and said", uF: 47, v: 450, traits: []string{"can-size", "10x20"},
		want: screening.Accept, says: codeUnconfirmed, // 0.11 W / 450 V = 245 µA; the limit is 448 µA
		readings: []screening.Reading{capacitance(46), esr(2), leakage(350, 450, 5)},
	},
	{
		name: "a hot reading scaled down alone does not accept", uF: 47, v: 450, want: screening.Undecided, says: "MEASURE leakage",
		readings: []screening.Reading{capacitance(46), esr(2), leakage(520, 450, 5), ambient(44)},
	},
	{
		name: "a hot reading under the limit as it stands does", uF: 47, v: 450, want: screening.Accept,
		readings: []screening.Reading{capacitance(46), esr(2), leakage(100, 450, 5), ambient(44)},
	},
	{
		name: "too hot to compare", uF: 47, v: 450, want: screening.Undecided, says: "can be compared between",
		readings: []screening.Reading{capacitance(46), esr(2), leakage(100, 450, 5), ambient(60)},
	},
}

func judge(t testing.TB, c verdictCase) screening.Judgement {
	t.Helper()
	part := screening.Part{Claim: claimed(t, c.uF, c.v, c.traits...), Readings: c.readings, Treated: c.treated}
	for _, s := range c.seen {
		part.Look = append(part.Look, screening.Observation{Check: s, Fault: true})
	}
	j, err := screening.Judge(Book(), part, screening.DefaultPolicy())
	if err != nil {
		t.Fatal(err)
	}
	return j
}

func TestVerdicts(t *testing.T) {
	given := map[screening.Verdict]int{}
	for _, c := range verdicts {
		t.Run(c.name, func(t *testing.T) {
			j := judge(t, c)
			given[j.Verdict]++
			said := booktest.Texts(j)
			if j.Verdict != c.want {
				t.Errorf("verdict %s, want %s\n%s", j.Verdict, c.want, said)
			}
			if c.grade != "" && j.Grade.String() != c.grade {
				t.Errorf("grade %s, want %s\n%s", j.Grade, c.grade, said)
			}
			if !strings.Contains(said, c.says) {
				t.Errorf("it does not say %q:\n%s", c.says, said)
			}
			as := 0.0
			if j.RegradedAs != nil {
				as, _ = j.RegradedAs.Claim.Nominal(screening.RatedVoltage.Name, "")
			}
			if as != c.as {
				t.Errorf("lesser claim %g V, want %g V", as, c.as)
			}
		})
	}
	booktest.EveryVerdict(t, given)
}

func TestSectionsAreJudgedOneByOne(t *testing.T) {
	c := screening.Claim{}.WithRating(screening.NominalRating(screening.RatedVoltage, 350)).WithTrait("case", "can")
	for _, s := range []string{"1", "2"} {
		r := screening.NominalRating(screening.Capacitance, 50e-6)
		r.Section = s
		c = c.WithRating(r)
	}
	section := func(s string, rs ...screening.Reading) []screening.Reading {
		for i := range rs {
			rs[i].Section = s
		}
		return rs
	}
	good := section("1", capacitance(55), esr(1.5), leakage(80, 350, 5))
	for _, tc := range []struct {
		name   string
		second []screening.Reading
		want   screening.Verdict
	}{
		{"both sound", section("2", capacitance(52), esr(1.4), leakage(90, 350, 5)), screening.Accept},
		{"the second dry", section("2", capacitance(10), esr(90), leakage(90, 350, 5)), screening.Reject},
		{"the second leaking", section("2", capacitance(52), esr(1.4), leakage(9000, 350, 5)), screening.Treat},
		{"the second not measured", nil, screening.Undecided},
	} {
		t.Run(tc.name, func(t *testing.T) {
			part := screening.Part{Claim: c, Readings: slices.Concat(good, tc.second)}
			j, err := screening.Judge(Book(), part, screening.DefaultPolicy())
			if err != nil {
				t.Fatal(err)
			}
			if j.Verdict != tc.want {
				t.Errorf("verdict %s, want %s\n%s", j.Verdict, tc.want, booktest.Texts(j))
			}
		})
	}
}

func TestBadClaimsAreSaid(t *testing.T) {
	full := claimed(t, 100, 25)
	ranged := screening.RangeRating(screening.Capacitance, 80e-6, 120e-6)
	for _, tc := range []struct {
		name  string
		claim screening.Claim
		want  string
	}{
		{"nothing claimed", screening.Claim{}, "capacitance: none is claimed"},
		{"no voltage", screening.Claim{}.WithRating(screening.NominalRating(screening.Capacitance, 1e-4)), "voltage: none is claimed"},
		{"a range of capacitance", full.WithRating(ranged), "is a range"},
		{"2200 F", full.WithRating(screening.NominalRating(screening.Capacitance, 2200)), "beyond any electrolytic"},
		{"25 mV", full.WithRating(screening.NominalRating(screening.RatedVoltage, 0.025)), "beyond any electrolytic"},
		{"a tolerance beside nominal", full.WithRating(screening.RangeRating(screening.Tolerance, 0.1, 0.2)), "does not enclose"},
		{"a date that is none", full.WithTrait("dated", "soon"), `dated: "soon" is no year`},
		{"a can size that is none", full.WithTrait("can-size", "big"), `can-size: "big"`},
	} {
		t.Run(tc.name, func(t *testing.T) {
			_, err := screening.Judge(Book(), screening.Part{Claim: tc.claim}, screening.DefaultPolicy())
			if err == nil || !strings.Contains(err.Error(), tc.want) {
				t.Errorf("got %v, want %q", err, tc.want)
			}
		})
	}
}

func TestReadingsWithSense(t *testing.T) {
	below := leakage(0.1, 450, 5)
	below.Sense = quantity.AtMost
	j := judge(t, verdictCase{uF: 47, v: 450, readings: []screening.Reading{capacitance(46), esr(2), below}})
	if j.Verdict != screening.Accept {
		t.Errorf("leakage below 0.1 µA: %s\n%s", j.Verdict, booktest.Texts(j))
	}
	below = leakage(0.1, 50, 5)
	below.Sense = quantity.AtMost
	j = judge(t, verdictCase{uF: 47, v: 450, readings: []screening.Reading{capacitance(46), esr(2), below}})
	if j.Verdict != screening.Undecided {
		t.Errorf("leakage below 0.1 µA at 50 V says nothing of 450 V: %s", j.Verdict)
	}
	open := read(screening.ESR, 100, freq, 120.0)
	open.Sense = quantity.AtLeast
	j = judge(t, verdictCase{uF: 47, v: 25, readings: []screening.Reading{capacitance(46), open}})
	if j.Verdict != screening.Reject {
		t.Errorf("ESR above 100 Ω: %s", j.Verdict)
	}
}
