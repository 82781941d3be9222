package bipolar

import (
	"strings"
	"testing"

	"goodbin/screening"
)

func TestGermanium(t *testing.T) {
	hot := read(ICEO, 320e-6, at(vce, 9.0, warm, 40.0))
	cold := read(ICEO, 75e-6, at(vce, 9.0, warm, 20.0))
	vbe := read(VBE, 0.14, none)
	gain := read(HFE, 95, at(ic, 5e-3, vce, 9.0, warm, 20.0))
	hotGain := read(HFE, 95, at(ic, 5e-3, vce, 9.0, warm, 40.0))
	pnpGe := words("polarity=pnp", "material=ge")
	for _, tt := range []struct {
		name     string
		claim    screening.Claim
		readings []screening.Reading
		verdict  screening.Verdict
		says     string
	}{
		// A builder saw 0.32 mA at about 40 °C fall to 75 µA at about 20 °C.
		{"75 µA at 20 °C is accepted", pnpGe, []screening.Reading{vbe, gain, cold}, screening.Accept, "not tested above"},
		{"320 µA at 40 °C alone never accepts", pnpGe, []screening.Reading{vbe, hotGain, hot}, screening.Undecided, "let it cool"},
		{"hot first, then cool: the cool reading decides", pnpGe, []screening.Reading{vbe, gain, hot, cold}, screening.Accept, ""},
		{"cool first, then hot: the cool reading decides", pnpGe, []screening.Reading{vbe, gain, cold, hot}, screening.Accept, ""},
		{
			"nor does 100 µA at 40 °C, which clears the limit as it stands", pnpGe,
			[]screening.Reading{vbe, hotGain, read(ICEO, 100e-6, at(vce, 9.0, warm, 40.0))},
			screening.Undecided, "let it cool",
		},
		{
			"2.5 mA at 35 °C is too much whatever the law", pnpGe,
			[]screening.Reading{vbe, read(HFE, 95, at(ic, 20e-3, vce, 9.0, warm, 35.0)), read(ICEO, 2.5e-3, at(vce, 9.0, warm, 35.0))},
			screening.Reject, "comes to",
		},
		{"900 µA at 25 °C", pnpGe, []screening.Reading{vbe, read(ICEO, 900e-6, at(vce, 9.0, warm, 25.0))}, screening.Reject, "at most 500 µA"},
		{
			"no temperature: nothing is judged", pnpGe,
			[]screening.Reading{vbe, read(HFE, 95, at(ic, 5e-3, vce, 9.0)), read(ICEO, 75e-6, at(vce, 9.0))},
			screening.Undecided, "let the part lie an hour indoors, do not touch it, and state its temperature",
		},
		{
			"the room's temperature serves", pnpGe,
			[]screening.Reading{vbe, read(HFE, 95, at(ic, 5e-3, vce, 9.0)), read(ICEO, 75e-6, at(vce, 9.0)), ambient(20)},
			screening.Accept, "",
		},
		{
			"60 °C is out of reach", pnpGe,
			[]screening.Reading{vbe, read(HFE, 95, at(ic, 5e-3, vce, 9.0, warm, 60.0)), read(ICEO, 1e-3, at(vce, 9.0, warm, 60.0))},
			screening.Undecided, "only from within 25 K",
		},
		{
			"400 µA is suspicious and still serviceable", pnpGe,
			[]screening.Reading{vbe, gain, read(ICEO, 400e-6, at(vce, 9.0, warm, 25.0)), read(HFE, 95, at(ic, 20e-3, vce, 9.0, warm, 25.0))},
			screening.Accept, "suspicious",
		},
		{
			"gain with the leakage at a lower voltage only is no net gain", pnpGe,
			[]screening.Reading{vbe, read(HFE, 95, at(ic, 5e-3, vce, 12.0, warm, 20.0)), cold},
			screening.Undecided, "needs iceo at the same temperature and the same VCE or more, 12 V",
		},
		{
			"the leakage at a higher voltage bounds the one at the gain's", pnpGe,
			[]screening.Reading{vbe, read(HFE, 95, at(ic, 5e-3, vce, 1.0, warm, 20.0)), cold},
			screening.Accept, "",
		},
		{
			"AC128: a gain below a second-hand figure cannot reject", words("type=AC128"),
			[]screening.Reading{vbe, read(HFE, 30, at(ic, 0.3, vce, 1.0, warm, 20.0)), read(ICEO, 75e-6, at(vce, 1.0, warm, 20.0)), cold},
			screening.Undecided, "second-hand",
		},
		{
			"AC128 that reads like silicon", words("type=AC128"),
			[]screening.Reading{read(VBE, 0.62, none)},
			screening.Reject, "it reads like silicon",
		},
	} {
		t.Run(tt.name, func(t *testing.T) {
			j := judge(t, tt.claim, tt.readings...)
			if j.Verdict != tt.verdict || !strings.Contains(texts(j), tt.says) {
				t.Errorf("verdict %s, want %s saying %q\n%s", j.Verdict, tt.verdict, tt.says, texts(j))
			}
		})
	}
}
