package types_test

import (
	"os"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
)

// sourced returns a table without the rows for which no text was seen and the page of sources has no figure.
func sourced(t *testing.T, kind string, recalled ...string) string {
	t.Helper()
	text, err := os.ReadFile(kind + ".csv")
	if err != nil {
		t.Fatal(err)
	}
	var kept []string
	for _, line := range strings.Split(string(text), "\n") {
		name, _, _ := strings.Cut(line, ",")
		keep := !strings.Contains(line, "no text seen; recalled")
		for _, r := range recalled {
			keep = keep || name == r
		}
		if keep {
			kept = append(kept, line)
		}
	}
	return strings.Join(kept, "\n")
}

// The figures once more, transcribed from semiconductors.md, sections 3, 5.2 and 10, and from the texts of the sheets named below. A row's
// status is that of all its figures but those in except.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// 3.1. BF244 drain currents, 2N5484 to MPF102 drain currents and the MPF102's 25 V are from memory; so are 2SK170 and 2SK30A.
	booktest.Figures(t, sourced(t, "jfet",
		"2SK170", "2SK170-GR", "2SK170-BL", "2SK170-V", "2SK30A", "2SK30A-R", "2SK30A-O", "2SK30A-Y", "2SK30A-GR"), `
BF245 n-channel - 30V 2mA..25mA@vds=15V 0.25V..8V@id=10nA - 300mW D-S-G published idss=derived
BF245A n-channel A 30V 2mA..6.5mA@vds=15V 0.25V..8V@id=10nA - 300mW D-S-G published -
BF245B n-channel B 30V 6mA..15mA@vds=15V 0.25V..8V@id=10nA - 300mW D-S-G published -
BF245C n-channel C 30V 12mA..25mA@vds=15V 0.25V..8V@id=10nA - 300mW D-S-G published -
BF244A n-channel A - 2mA..6.5mA@vds=15V 0.4V..2.2V - - - published idss=from-memory
BF244B n-channel B - 6mA..15mA@vds=15V 1.6V..3.8V - - - published idss=from-memory
BF244C n-channel C - 12mA..25mA@vds=15V 3.2V..7.5V - - - published idss=from-memory
BF256A n-channel A - 3mA..7mA@vds=15V - ..5nA@vgs=20V - - published -
2N3819 n-channel - 25V 2mA..20mA@vds=15V ..8V ..2nA@vgs=15V - - published -
2N5457 n-channel - 25V 1mA..5mA@vds=15V 0.5V..6V - 310mW - published -
2N5484 n-channel - - 1mA..5mA@vds=15V 0.3V..3V - - - published idss=from-memory
2N5485 n-channel - - 4mA..10mA@vds=15V 0.5V..4V - - - published idss=from-memory
2N4416A n-channel - - 5mA..15mA@vds=15V 2.5V..6V - - - published idss=from-memory
MPF102 n-channel - 25V 2mA..20mA@vds=15V ..8V - - - published idss=from-memory;vdss=from-memory
J201 n-channel - - 0.2mA..@vds=15V 0.3V..1.5V - - - published -
J202 n-channel - - 0.9mA..@vds=15V 0.8V..4V - - - published -
J204 n-channel - - - 0.3V..2V - - - published -
2N4117 n-channel - - 0.03mA..0.09mA@vds=15V - - - - published -
2N4118 n-channel - - 0.08mA..0.24mA@vds=15V - - - - published -
2N4119 n-channel - - 0.2mA..0.6mA@vds=15V - - - - published -
2SK2593 n-channel - - 1mA..20mA@vds=15V - - - - published idss=derived
2SK2593-P n-channel P - 1mA..3mA@vds=15V - - - - published -
2SK2593-Q n-channel Q - 2mA..6.5mA@vds=15V - - - - published -
2SK2593-R n-channel R - 5mA..12mA@vds=15V - - - - published -
2SK2593-S n-channel S - 10mA..20mA@vds=15V - - - - published -
2SK170 n-channel - 40V 2.6mA..20mA@vds=15V 0.2V..1.5V - - - from-memory -
2SK170-GR n-channel GR 40V 2.6mA..6.5mA@vds=15V 0.2V..1.5V - - - from-memory -
2SK170-BL n-channel BL 40V 6mA..12mA@vds=15V 0.2V..1.5V - - - from-memory -
2SK170-V n-channel V 40V 10mA..20mA@vds=15V 0.2V..1.5V - - - from-memory -
2SK30A n-channel - 50V 0.3mA..6.5mA@vds=15V 0.4V..5V - - - from-memory -
2SK30A-R n-channel R 50V 0.3mA..0.75mA@vds=15V 0.4V..5V - - - from-memory -
2SK30A-O n-channel O 50V 0.6mA..1.4mA@vds=15V 0.4V..5V - - - from-memory -
2SK30A-Y n-channel Y 50V 1.2mA..3mA@vds=15V 0.4V..5V - - - from-memory -
2SK30A-GR n-channel GR 50V 2.6mA..6.5mA@vds=15V 0.4V..5V - - - from-memory -
`, "type", "channel", "group", "rated:vdss", "rated:idss", "rated:vgs-off", "rated:igss", "rated:ptot", "pinout", "status", "except")

	// 3.2; test voltages and currents of BS170, IRF540 and IRF540N from their sheets' texts.
	booktest.Figures(t, sourced(t, "mosfet", "2N7002", "BSS138", "IRF3205", "IRF740", "IRF840", "IRFZ44N", "IRLZ44N"), `
2N7000 n-channel 60V 0.2A ..5ohm@vgs=10V 0.8V..3V@id=1mA ..10nA@vgs=15V ..1uA@vds=48V S-G-D published -
BS170 n-channel 60V 0.3A ..5ohm@vgs=10V 0.8V..3V@id=1mA ..10nA@vgs=15V ..0.5uA@vds=25V D-G-S published -
2N7002 n-channel 60V 0.115A ..7.5ohm@vgs=10V 1V..2.5V@id=0.25mA - - G-S-D from-memory -
BSS138 n-channel 50V 0.22A ..3.5ohm@vgs=10V 0.8V..1.5V@id=1mA - - G-S-D from-memory -
IRF540 n-channel 100V 28A ..77mohm@vgs=10V 2V..4V@id=0.25mA ..100nA@vgs=20V ..25uA@vds=100V G-D-S published -
IRF540N n-channel 100V 33A ..44mohm@vgs=10V 2V..4V@id=0.25mA ..100nA@vgs=20V ..25uA@vds=100V G-D-S published -
IRF3205 n-channel 55V 110A ..8mohm@vgs=10V 2V..4V@id=0.25mA - - G-D-S from-memory vdss=second-hand;id-max=second-hand
IRF9540 p-channel 100V 19A ..200mohm@vgs=10V 2V..4V@id=0.25mA ..100nA@vgs=20V - G-D-S published vgs-th=derived;igss=derived
IRF9540N p-channel 100V 23A ..117mohm@vgs=10V 2V..4V@id=0.25mA ..100nA@vgs=20V - G-D-S published vgs-th=derived;igss=derived
IRF740 n-channel 400V 10A ..550mohm@vgs=10V 2V..4V@id=0.25mA - - G-D-S from-memory -
IRF840 n-channel 500V 8A ..850mohm@vgs=10V 2V..4V@id=0.25mA - - G-D-S from-memory -
IRFZ44N n-channel 55V 49A ..17.5mohm@vgs=10V 2V..4V@id=0.25mA - - G-D-S from-memory -
IRLZ44N n-channel 55V 47A ..22mohm@vgs=10V 1V..2V@id=0.25mA - - G-D-S from-memory -
`, "type", "channel", "rated:vdss", "rated:id-max", "rated:rds-on", "rated:vgs-th", "rated:igss", "rated:idss", "pinout", "status", "except")

	// 3.3; 600 V of the IRG4BC10UD from its sheet's text.
	booktest.Figures(t, sourced(t, "igbt"), `
IRG4BC20U - 600V 13A 60W - ..100nA@vge=20V published iges=derived
IRG4BC10UD co-packed 600V - - 3V..6V@ic=0.25mA ..100nA@vge=20V published vge-th=derived;iges=derived
IRGB4B60K - 600V - - 3.5V..5.5V@ic=0.25mA ..100nA@vge=20V published vces=from-memory;vge-th=derived;iges=derived
`, "type", "diode", "rated:vces", "rated:ic-max", "rated:ptot", "rated:vge-th", "rated:iges", "status", "except")

	// 10. The BT151's gate from its sheet's text: 15 mA and 1.5 V at most; the 1.4 V of section 10 are from a page that sells it.
	booktest.Figures(t, sourced(t, "thyristor"), `
C106 200V 4A 20A ..200uA - published igt=from-memory
C106B 200V 4A 20A ..200uA - published vdrm=from-memory;igt=from-memory
C106D 400V 4A 20A ..200uA - published vdrm=from-memory;igt=from-memory
C106M 600V 4A 20A ..200uA - published vdrm=from-memory;igt=from-memory
BT151 500V 12A - ..15mA ..1.5V published -
`, "type", "rated:vdrm", "rated:it-rms", "rated:itsm", "rated:igt", "rated:vgt", "status", "except")
	booktest.Figures(t, sourced(t, "triac"), `
BT234 ..10mA ..25mA ..15mA ..1.5V@current=6A published igt=derived
`, "type", "rated:igt", "rated:igt-q4", "rated:ih", "rated:vt", "status", "except")

	// 10; currents and voltages of the 4N25 to 4N28 and of the 4N35 from their sheets' texts. PC817 from memory.
	booktest.Figures(t, sourced(t, "optocoupler", "PC817A", "PC817B", "PC817C", "PC817D"), `
4N25 20%..@current=10mA,vce=10V ..1.5V@current=10mA 3V ..50nA@vce=10V 30V published vrrm=from-memory
4N26 20%..@current=10mA,vce=10V ..1.5V@current=10mA 3V ..50nA@vce=10V 30V published vrrm=from-memory
4N27 10%..@current=10mA,vce=10V ..1.5V@current=10mA 3V ..100nA@vce=10V 30V published vrrm=from-memory
4N28 10%..@current=10mA,vce=10V ..1.5V@current=10mA 3V ..100nA@vce=10V 30V published vrrm=from-memory
4N35 100%..@current=10mA,vce=10V ..1.5V@current=10mA 6V ..50nA@vce=10V 30V published vrrm=from-memory
PC817A 80%..160%@current=5mA,vce=5V ..1.4V@current=20mA 6V ..100nA@vce=20V 35V from-memory -
PC817B 130%..260%@current=5mA,vce=5V ..1.4V@current=20mA 6V ..100nA@vce=20V 35V from-memory -
PC817C 200%..400%@current=5mA,vce=5V ..1.4V@current=20mA 6V ..100nA@vce=20V 35V from-memory -
PC817D 300%..600%@current=5mA,vce=5V ..1.4V@current=20mA 6V ..100nA@vce=20V 35V from-memory -
`, "type", "rated:ctr", "rated:vf", "rated:vrrm", "rated:iceo", "rated:vceo", "status", "except")

	// 10: 7805 read; LM317 and TL431 (2.495 V, up to ±2 %, 1 mA) from memory.
	booktest.Figures(t, sourced(t, "regulator", "LM317", "TL431"), `
7805 fixed positive 4.8V..5.2V@vin=10V - ..8mA - 1A published iout=from-memory;vin-max=from-memory
LM317 adjustable positive - 1.2V..1.3V@current=10mA - 10mA 1.5A from-memory -
TL431 shunt positive - 2.44V..2.55V@current=10mA - 1mA 100mA from-memory -
`, "type", "function", "sign", "rated:vout", "rated:vref", "rated:iq", "rated:min-load", "rated:iout", "status", "except")

	// 5.2, the last two rows: of one element; the KBP2xx's reverse current from memory.
	booktest.Figures(t, sourced(t, "bridge"), `
KBP208 800V 1.5A 50A ..1.1V@current=1.5A ..5uA@voltage=800V published ir=from-memory
KBP206 600V 1.5A 50A ..1.1V@current=1.5A ..5uA@voltage=600V published vrrm=from-memory;ir=from-memory
KBP204 400V 1.5A 50A ..1.1V@current=1.5A ..5uA@voltage=400V published vrrm=from-memory;ir=from-memory
GBPC2510 1000V 25A 300A ..1.1V@current=12.5A ..10uA@voltage=1000V published -
`, "type", "rated:vrrm", "rated:if-av", "rated:ifsm", "rated:vf", "rated:ir", "status", "except")
}

// Nothing that was only recalled may stand under another document or status: such a row says both.
func TestRecalledRowsSaySo(t *testing.T) {
	for _, kind := range []string{"jfet", "mosfet", "igbt", "thyristor", "triac", "optocoupler", "regulator", "bridge", "led"} {
		text, err := os.ReadFile(kind + ".csv")
		if err != nil {
			t.Fatal(err)
		}
		for _, line := range strings.Split(string(text), "\n") {
			recalled := strings.Contains(line, ",no text seen; recalled,")
			if recalled != strings.Contains(line, ",no text seen; recalled,from memory,") {
				t.Errorf("%s: %s", kind, line)
			}
			if !recalled && strings.Contains(line, " data sheet") && !strings.HasPrefix(line, "#") && !strings.Contains(line, ",published,") {
				t.Errorf("%s: %s", kind, line)
			}
		}
	}
}
