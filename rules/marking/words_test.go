package marking_test

import (
	"strings"
	"testing"
	"time"

	"goodbin/rules"
	"goodbin/rules/marking"
	"goodbin/screening/entry"
)

// prints are markings of every scheme.
var prints = []string{
	"4K7", "R47", "470R", "k10", "4E7", "4n7", "33pK", "4p7C", "9p1D", "p33", "47K", "104", "104K", "107", "107A", "338", "479", "220", "1002", "9090B", "1274",
	"14A", "68X", "S3", "b0", "471K", "2A474J", "104Z", "102P", "102A", "102N", "0.1/400", ".1K400", "104J630", "100/25", "8/450", "2200uF 25V",
	".003 MFD", "80 mmf", "8 MF", "500 cm", "2 jars", "X7R", "X7R 104K 50V", "NP0 101J", "CH 22p", "SL", "BX", "P3K", "MKT 100n 63V", "MKP 0,47 63-", "MKS", "FKC",
	"MP 1uF", "KP 1n0", "X2 0.1uF 275V~", "Y2", "X1/Y2 472M Y5U 250VAC", "MKC X2 0.1", "MKP X2 0.22uF 275VAC", "63V~ 1uF", "10mH", "4R7", "101K", "5W10RJ", "J", "K", "2A", "6V3", "1208", "1974", "C5", "104K 9408", "30R1F", "4K7J", "000",
	"brown black red gold", "brown black black brown brown red", "yellow violet black green", "brown black yellow white red", "violet brown black brown green",
	"white brown black red red brown", "brown black yellow silver gold", "brown black grey",
}

// What a meaning claims is accepted as typed by every kind of part that can carry it, so that a claim can start from it.
func TestWordsStartAClaim(t *testing.T) {
	books := rules.All()
	taken := map[string]int{}
	for _, text := range prints {
		meanings, err := marking.Decode(text, marking.Options{Now: time.Date(2026, 3, 1, 0, 0, 0, 0, time.UTC)})
		if err != nil {
			t.Errorf("%s: %v", text, err)
			continue
		}
		for _, m := range meanings {
			for _, kind := range m.Kinds {
				book, ok := books.Find(kind)
				if !ok {
					t.Errorf("%s: %s is no kind of the program", text, kind)
					continue
				}
				if len(m.Words) == 0 {
					continue
				}
				if _, err := entry.Words(book, m.Words); err != nil {
					t.Errorf("%s on %s as %q: %v", text, kind, strings.Join(m.Words, " "), err)
					continue
				}
				taken[string(kind)]++
			}
		}
	}
	for _, kind := range []string{"electrolytic", "tantalum", "film", "ceramic", "mica", "paper", "resistor", "inductor", "varistor", "potentiometer", "thermistor"} {
		if taken[kind] < 3 {
			t.Errorf("%s takes %d claims; the prints reach it too seldom", kind, taken[kind])
		}
	}
}
