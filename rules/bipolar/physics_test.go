package bipolar

import (
	"math"
	"strings"
	"testing"

	"goodbin/screening"
)

func near(got, want, relative float64) bool { return math.Abs(got-want) <= relative*math.Abs(want) }

func TestTablesLoadAndHoldEveryNameUsed(t *testing.T) {
	f, err := readFigures(limitsCSV)
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{
		"vbe-silicon", "vbe-silicon-power", "vbe-germanium", "vbe-darlington", "vbe-darlington-power", "conducts-vbe", "conducts-gain",
		"gain-informative", "gain-lamp", "iceo-silicon", "iceo-silicon-power", "iceo-germanium", "iceo-germanium-new",
	} {
		if _, ok := f[name]; !ok {
			t.Errorf("limits.csv has no row %q", name)
		}
		delete(f, name)
	}
	for name := range f {
		t.Errorf("row %q of limits.csv is not used", name)
	}
}

// Worked examples of the textbooks, recomputed; their statements were read in companion code (published), the last two are derived.
func TestTransistorIdentities(t *testing.T) {
	beta := func(alpha float64) float64 { return alpha / (1 - alpha) }
	collectorCurrent := func(beta, ib, icbo float64) float64 { return beta*ib + ICEOFrom(icbo, beta) }
	for _, tt := range []struct {
		name      string
		got, want float64
		relative  float64
	}{
		{"β 100, ICBO 4 µA, IB 40 µA: IC 4.404 mA (Nandi 5.11.5)", collectorCurrent(100, 40e-6, 4e-6), 4.404e-3, 1e-9},
		{"α .97, IB 50 µA, ICBO 10 µA: IC 1.95 mA (Kakani 5.1)", collectorCurrent(beta(0.97), 50e-6, 10e-6), 1.95e-3, 1e-9},
		{"the same: IE 2.00 mA (Kakani 5.1)", collectorCurrent(beta(0.97), 50e-6, 10e-6) + 50e-6, 2.00e-3, 1e-9},
		{"β 50, IB 100 µA, ICBO 5 µA: IC 5.255 mA (Kakani 5.2)", collectorCurrent(50, 100e-6, 5e-6), 5.255e-3, 1e-9},
		{"β 50 is α .9804 (Kakani 5.2)", 50.0 / 51, 0.9804, 1e-4},
		{"α .98, ICBO 5 µA, IB 100 µA: IC 5.15 mA (Bell 3.1)", collectorCurrent(beta(0.98), 100e-6, 5e-6), 5.15e-3, 1e-9},
		{"ICEO = (1 + 100)·5 nA = 0.505 µA", ICEOFrom(5e-9, 100), 0.505e-6, 1e-9},
	} {
		if !near(tt.got, tt.want, tt.relative) {
			t.Errorf("%s: got %g", tt.name, tt.got)
		}
	}
	// Kakani 5.2 backwards: the net gain of that reading is its β, although the gain as read is 52.55.
	ic, ib, icbo := 5.255e-3, 100e-6, 5e-6
	if net, _ := NetGain(ic/ib, 0, ic, ICEOFrom(icbo, 50), 0); !near(net, 50, 1e-9) {
		t.Errorf("net gain %g, want β = 50", net)
	}
}

// The worked germanium case: 110.1 corrected against 133.0 uncorrected. The page's inputs were not kept; 9 V, 2.2 MΩ, 2.472 kΩ, VBE 0.1 V
// and 0.229 V with the base open, 1.330 V with it driven, are reconstructed and give both figures.
func TestWorkedGermaniumGain(t *testing.T) {
	const rc, rb, supply, vbe, v1, v2 = 2472.0, 2.2e6, 9.0, 0.1, 0.229, 1.330
	iceo, icTotal, ib := v1/rc, v2/rc, (supply-vbe)/rb
	if asRead := icTotal / ib; !near(asRead, 133.0, 5e-4) {
		t.Errorf("gain as read %.2f, want 133.0", asRead)
	}
	net, _ := NetGain(icTotal/ib, 0, icTotal, iceo, 0)
	if !near(net, 110.1, 5e-4) {
		t.Errorf("net gain %.2f, want 110.1", net)
	}
	if direct := (v2 - v1) / rc / ((supply - vbe) / rb); !near(net, direct, 1e-12) {
		t.Errorf("net gain %.4f, two-reading formula %.4f", net, direct)
	}
	j := judge(t, words("polarity=pnp", "material=ge"),
		read(VBE, 0.1, none), read(HFE, icTotal/ib, at(ic, icTotal, vce, 7.7, warm, 20.0)), read(ICEO, iceo, at(vce, 8.8, warm, 20.0)))
	r, ok := findReading(j, HFENet.Name)
	if !ok || !near(r.Value, 110.1, 5e-4) {
		t.Errorf("the judge derived %v (%v), want 110.1", r.Value, ok)
	}
}

func findReading(j screening.Judgement, of screening.Characteristic) (screening.Reading, bool) {
	for _, r := range j.Part.Readings {
		if r.Of == of {
			return r, true
		}
	}
	return screening.Reading{}, false
}

// ICEO of 120 µA at 9 V lies between 0 and 120 µA at 1 V: 60 µA ± 60 µA rectangular, which of 300 mA is a share of 0.0002 and moves a gain of
// 110 by 0.022 (JCGM 100, 4.3.7).
func TestLeakageAtAHigherVoltageBoundsTheNetGain(t *testing.T) {
	j := judge(t, words("type=AC128"), read(VBE, 0.2, none), read(HFE, 110, at(ic, 0.3, vce, 1.0)), read(ICEO, 120e-6, at(vce, 9.0)), ambient(20))
	r, ok := findReading(j, HFENet.Name)
	gain, _ := findReading(j, HFE.Name)
	// ICEO's own uncertainty adds to that of its bound: hypot(60 µA/√3 …) as for any leakage known only to lie below a value.
	if !ok || !near(r.Value, 110*(1-0.0002), 1e-9) || !near(r.U, gain.U, 1e-3) || !strings.Contains(r.Rule, "the leakage lies between 0 and 120 µA") {
		t.Errorf("derived %v: %g ± %g by %q", ok, r.Value, r.U, r.Rule)
	}
	if j.Verdict != screening.Accept {
		t.Errorf("%s\n%s", j.Verdict, texts(j))
	}
	// Of two such readings the smaller bound counts, and one at the gain's own voltage before any.
	for _, tt := range []struct {
		name  string
		leaks []screening.Reading
		want  float64
	}{
		{"18 V after 9 V", []screening.Reading{read(ICEO, 120e-6, at(vce, 9.0)), read(ICEO, 300e-6, at(vce, 18.0))}, 60e-6},
		{"1 V before 9 V", []screening.Reading{read(ICEO, 90e-6, at(vce, 1.0)), read(ICEO, 120e-6, at(vce, 9.0))}, 90e-6},
	} {
		gain := read(HFE, 100, at(ic, 10e-3, vce, 1.0))
		part := screening.Part{Readings: append([]screening.Reading{gain}, tt.leaks...)}
		if net, why := netOf(part, gain); why != "" || !near(net.Value, 100*(1-tt.want/10e-3), 1e-9) {
			t.Errorf("%s: %g, %s", tt.name, net.Value, why)
		}
	}
}

func TestNetGainUncertainty(t *testing.T) {
	// By hand: hFE 100 ± 6, ICEO 30 µA ± 1 µA of IC 100 µA. Net 70; u² = (0.7·6)² + (100/100e-6·1e-6)² = 17.64 + 1 = 18.64.
	net, u := NetGain(100, 6, 100e-6, 30e-6, 1e-6)
	if !near(net, 70, 1e-12) || !near(u, math.Sqrt(18.64), 1e-12) {
		t.Errorf("net %g ± %g, want 70 ± %g", net, u, math.Sqrt(18.64))
	}
	ge := words("polarity=pnp", "material=ge")
	gain := func(collector float64) screening.Reading {
		return read(HFE, 100, at(ic, collector, vce, 9.0, warm, 20.0))
	}
	leak := read(ICEO, 75e-6, at(vce, 9.0, warm, 20.0))
	for _, tt := range []struct {
		name    string
		gain    screening.Reading
		leak    screening.Reading
		derived bool
		says    string
	}{
		{"75 µA of 1 mA", gain(1e-3), leak, true, ""},
		{"75 µA of 100 µA: ±20 % is passed", gain(100e-6), read(ICEO, 75e-6, at(vce, 9.0, warm, 20.0)), true, ""},
		{"88 µA of 100 µA: ±22 % is too much", gain(100e-6), read(ICEO, 88e-6, at(vce, 9.0, warm, 20.0)), false, "more than 20 %"},
		{"85 µA of 90 µA: the difference drowns", gain(90e-6), read(ICEO, 85e-6, at(vce, 9.0, warm, 20.0)), false, "more than 20 %"},
		{"all of it is leakage", gain(70e-6), leak, false, "the base controls nothing"},
		{"the temperatures differ", gain(1e-3), read(ICEO, 75e-6, at(vce, 9.0, warm, 27.0)), false, "same temperature and the same VCE or more"},
		{"they differ by 3 K", gain(1e-3), read(ICEO, 75e-6, at(vce, 9.0, warm, 23.0)), false, "same temperature and the same VCE or more"},
		{"they differ by 2 K", gain(1e-3), read(ICEO, 75e-6, at(vce, 9.0, warm, 22.0)), true, ""},
		{"the leakage was read at a lower voltage", gain(1e-3), read(ICEO, 75e-6, at(vce, 4.5, warm, 20.0)), false, "same VCE or more"},
		{"at a higher voltage it bounds", gain(1e-3), read(ICEO, 75e-6, at(vce, 18.0, warm, 20.0)), true, ""},
		{"bounded too loosely", gain(100e-6), read(ICEO, 75e-6, at(vce, 18.0, warm, 20.0)), false, "more than 20 %"},
		{"at least so much at a higher voltage bounds nothing", gain(1e-3), atLeast(read(ICEO, 5e-6, at(vce, 18.0, warm, 20.0))), false, "same VCE or more"},
		{"no collector current", read(HFE, 100, at(vce, 9.0, warm, 20.0)), leak, false, "collector current of the gain is not stated"},
		{"base current instead", read(HFE, 100, at(screening.IB, 10e-6, vce, 9.0, warm, 20.0)), leak, true, ""},
		{"leakage only bounded from above", gain(1e-3), atMost(read(ICEO, 5e-6, at(vce, 9.0, warm, 20.0))), true, ""},
		{"leakage only bounded from below", gain(1e-3), atLeast(read(ICEO, 5e-6, at(vce, 9.0, warm, 20.0))), false, "only bounds"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			j := judge(t, ge, tt.gain, tt.leak)
			r, ok := findReading(j, HFENet.Name)
			if ok != tt.derived || !strings.Contains(texts(j), tt.says) {
				t.Errorf("derived %v (%+v), want %v saying %q\n%s", ok, r, tt.derived, tt.says, texts(j))
			}
			if ok && (r.U <= 0 || 2*r.U/r.Value > widestNet || r.Rule == "") {
				t.Errorf("net gain %g ± %g by %q", r.Value, r.U, r.Rule)
			}
			if ok && (r.Step > r.U || r.Step < r.U/10) {
				t.Errorf("net gain %g ± %g to the last digit of %g", r.Value, r.U, r.Step)
			}
		})
	}
}
