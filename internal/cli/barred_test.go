package cli

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// barredParts read perfectly and are refused all the same: each is a kind, what it claims, its readings as words of the command line, and
// what is seen of it: cracked, or nothing where its claim bars it.
var barredParts = []struct {
	kind, claim string
	readings    []string
	seen        string
}{
	{"mains-capacitor", "0.1uF X2 275VAC 10% 2015", []string{"capacitance=100.0nF", "insulation-resistance=60G", "tan-delta@1kHz=0.001"}, "nothing"},
	{"mains-capacitor", "4n7 Y2 250VAC 20%", []string{"capacitance=4.70nF", "insulation-resistance=200G"}, "nothing"},
	{"mains-capacitor", "8uF run 400VAC 5%", []string{"capacitance=8.00uF"}, "nothing"},
	{"film", "0.1uF 630V 10% pp", []string{"capacitance=100.0nF", "insulation-resistance@500V,1min=200G"}, "cracked"},
	{"paper", "0.1uF 400V oil", []string{"capacitance=100.0nF", "insulation-resistance@400V,1min=50G"}, "nothing"},
	{"bipolar", "type=AF117 pnp ge", []string{"vbe=0.15", "hfe@ic=1mA,vce=6V=80", "iceo@6V=20uA", "temperature=21C"}, "nothing"},
	{"selenium", "", []string{"vf=1.00"}, "nothing"},
	{"relay", "12V technology=mercury-wetted", []string{"coil-resistance=400", "contact-resistance/1@1A=20m"}, "nothing"},
	{"resistor", "100R 5%", []string{"resistance=100.0"}, "cracked"},
}

// Neither the command line nor a box of parts nor the bench, going on after the stop, brings such a part into stock.
func TestNoFaceBringsABarredPartIntoStock(t *testing.T) {
	for _, p := range barredParts {
		t.Run(p.kind+" "+p.claim, func(t *testing.T) {
			dir := t.TempDir()
			workbook, box := filepath.Join(dir, "w.goodbin"), filepath.Join(dir, "box.csv")
			seen := p.seen
			words := append(append([]string{p.kind}, strings.Fields(p.claim)...), p.readings...)
			for _, rule := range []string{"by-probability", "simple"} {
				stdout, stderr, status := runHere(t, "", append(append([]string{"judge"}, words...), "seen="+seen, "--decision", rule)...)
				if status != ExitNotAccepted || !strings.Contains(stdout, "BARRED") {
					t.Errorf("judge, %s: exit status %d\n%s%s", rule, status, stdout, stderr)
				}
			}
			header, row := []string{"kind", "lot", "part", "claim", "seen"}, []string{p.kind, "1", "1", p.claim, seen}
			for _, r := range p.readings {
				at := strings.LastIndexByte(r, '=')
				header, row = append(header, `"`+r[:at]+`"`), append(row, `"`+r[at+1:]+`"`)
			}
			if err := os.WriteFile(box, []byte(strings.Join(header, ",")+"\n"+strings.Join(row, ",")+"\n"), 0o600); err != nil {
				t.Fatal(err)
			}
			if stdout, stderr, _ := runHere(t, "", "screen", box, "--workbook", workbook); !strings.Contains(stdout, "barred") {
				t.Errorf("screen:\n%s%s", stdout, stderr)
			}
			answers := append([]string{p.kind, p.claim, "", "", "g", "seen=" + seen, "g"}, p.readings...)
			runHere(t, strings.Join(answers, "\n")+"\nq\n", "bench", "--lines", "--workbook", workbook)
			stock, _, status := runHere(t, "", "stock", "--workbook", workbook)
			if status != ExitNotAccepted || strings.Contains(stock, "1-01") || strings.Contains(stock, "2-01") {
				t.Errorf("stock, exit status %d:\n%s", status, stock)
			}
			all, _, _ := runHere(t, "", "stock", "--all", "--workbook", workbook)
			if strings.Count(all, "\tbarred\t") != strings.Count(all, "\n") || all == "" {
				t.Errorf("not every part kept is barred:\n%s", all)
			}
		})
	}
}
