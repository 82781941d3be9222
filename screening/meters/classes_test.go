package meters_test

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"goodbin/rules"
	"goodbin/screening"
	"goodbin/screening/meters"
)

func TestAClassIsFoundByTheNamePeopleSay(t *testing.T) {
	for said, want := range map[string]string{
		"hand-held LCR": "hand-held LCR meter", "Hand held LCR Meter": "hand-held LCR meter", " bench  lcr": "bench LCR meter",
		"ESR": "ESR meter", "pocket multimeter": "pocket multimeter", "LCR": "", "multimeter": "", "": "", "meter": "",
	} {
		m, ok := meters.ClassNamed(said)
		if m.Name != want || ok != (want != "") {
			t.Errorf("%q is %q, %v; want %q", said, m.Name, ok, want)
		}
		if ok && !m.Assumed {
			t.Errorf("%q is not marked as assumed", said)
		}
	}
}

func TestEveryClassEntryHasASourceAndReadsBackFromItsWords(t *testing.T) {
	known := meters.Of(rules.All())
	n := 0
	for _, m := range meters.Classes() {
		n += len(m.Ranges)
	}
	entries := meters.ClassEntries()
	if len(entries) != n {
		t.Fatalf("%d entries, the classes have %d ranges", len(entries), n)
	}
	for _, e := range entries {
		if e.Source == "" || e.Status != screening.FromMemory.String() {
			t.Errorf("%s, %s: source %q, status %q; want one, from memory", e.Meter, e.Words, e.Source, e.Status)
		}
		m, err := meters.Parse(known, e.Meter, e.Words)
		if err != nil {
			t.Errorf("%s, %s: %v", e.Meter, e.Words, err)
			continue
		}
		want := screening.Meter{Name: e.Meter, Ranges: []screening.Range{e.Range}}
		if diff := cmp.Diff(meters.Describe(want), meters.Describe(m)); diff != "" || strings.TrimSpace(e.Words) != e.Words {
			t.Errorf("%s, %s: -want +got\n%s", e.Meter, e.Words, diff)
		}
	}
}
