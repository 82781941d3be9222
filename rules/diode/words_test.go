package diode

import (
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// What a reason says beside a failure must be true: less than its material may, only where that limit passes.
func TestLeakageIsWordedAsItWasHeld(t *testing.T) {
	const more, less, close = "it leaks more than its sheet allows", "and less than its material may", "too near to call"
	for _, tt := range []struct {
		name, words      string
		more, less, near bool
	}{
		{"38 µA of a silicon diode's 10 µA", "1N4148 vf=0.62 ir@20V=38uA temperature=21C", false, false, false},
		{"1.6 mA of a germanium diode's 500 µA", "OA91 vf=0.24 ir@10V=1.6mA temperature=20C", false, false, false},
		{"0.9 µA, more than a sheet's nanoamperes", "1N4148 vf=0.62 ir@20V=0.9uA temperature=25C", true, true, false},
		{"10 µA, on the line of its material", "1N4148 vf=0.62 ir@20V=10uA temperature=25C", true, false, true},
		{"5 nA, less than its sheet allows", "1N4148 vf=0.62 ir@20V=0.005uA temperature=25C", false, false, false},
	} {
		said := booktest.Texts(judge(t, tt.words, screening.DefaultPolicy()))
		got := [3]bool{strings.Contains(said, more), strings.Contains(said, less), strings.Contains(said, close)}
		if want := [3]bool{tt.more, tt.less, tt.near}; got != want {
			t.Errorf("%s: says more, less, too near: %v, want %v\n%s", tt.name, got, want, said)
		}
	}
}

// What was not tested is said once: how far blocking was proved stands for the gap in the breakdown limit.
func TestWhatWasNotTestedIsSaidOnce(t *testing.T) {
	for _, words := range []string{"1N4007 vf=0.56 vbr=>30V", "1N4007 vf=0.56", "1N4148 vf=0.62 ir@20V=0.005uA temperature=25C", "MBR20100CT vf/1=0.21 vf/2=0.21 vbr/1=>60V vbr/2=>60V"} {
		j := judge(t, words, screening.DefaultPolicy())
		for _, g := range j.NotTested {
			if g.Of == screening.VBR.Name {
				t.Errorf("%s: not tested %+v beside %q", words, g, j.Untested)
			}
		}
		if blocks := strings.Contains(words, "vbr") || strings.Contains(words, "ir@"); blocks != strings.Contains(strings.Join(j.Untested, "\n"), "reverse blocking untested above") {
			t.Errorf("%s: untested %q", words, j.Untested)
		}
	}
	// Forward voltage that was not read at all is asked for, and not listed besides.
	for words, listed := range map[string]bool{"1N4007 vbr=OL": false, "1N4007 vbr=OL vf=0.56": true, "1N4007 vbr=OL vf@1A=0.95": false} {
		j := judge(t, words, screening.DefaultPolicy())
		if got := strings.Contains(strings.Join(j.Untested, "\n"), "forward voltage at 1 A"); got != listed {
			t.Errorf("%s: untested %q", words, j.Untested)
		}
	}
}

func TestTheLimitOfBlockingIsSaidAtTheReadingsVoltage(t *testing.T) {
	said := booktest.Texts(judge(t, "1N4148 vf=0.62 ir@20V=38uA temperature=25C", screening.DefaultPolicy()))
	if strings.Count(said, "at most 10 µA at 20 V") != 1 || strings.Contains(said, "30 V") {
		t.Errorf("%s", said)
	}
	said = booktest.Texts(judge(t, "MBR20100CT vf/1=0.22 vf/2=0.001 vbr/1=>60V vbr/2=0.00V", screening.DefaultPolicy()))
	if !strings.Contains(said, "reversed it reads shorted") || strings.Contains(said, "breaks down") {
		t.Errorf("%s", said)
	}
}
