// Package thyristor is the rulebook of thyristors and of triacs.
//
// Both block until the gate is driven and then hold themselves on until the current falls below the holding current: a thyristor one way, a
// triac both ways. So one is proved by blocking both ways, by the gate current that turns it on, and by the drop that is left when the gate
// was let go. A battery, a lamp and two resistors do all of it.
package thyristor

import (
	_ "embed"
	"strings"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/rules/internal/sheet"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The kinds' words.
const (
	Kind      screening.Kind = "thyristor"
	KindTriac screening.Kind = "triac"
)

// The criteria.
const (
	gate       screening.Criterion = "gate"
	blocks     screening.Criterion = "blocks"
	breakover  screening.Criterion = "breakover"
	blocksBack screening.Criterion = "blocks-reverse"
	breakdown  screening.Criterion = "breakdown"
	triggers   screening.Criterion = "triggers"
	latches    screening.Criterion = "latches"
	gateVolts  screening.Criterion = "gate-voltage"
	holding    screening.Criterion = "holding"
	onDrop     screening.Criterion = "on-voltage"
)

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

var (
	// VBO is the voltage at which it breaks over from anode to cathode, or with T2 positive, the gate open. OL on a diode test shows that it
	// blocks at the tester's own voltage.
	VBO = screening.Definition{
		Name: "vbo", Symbol: "V(BO)", Label: "forward breakover voltage", Unit: quantity.Volt, Over: screening.VBR.Over,
	}
	// IDRM is what leaks in that direction.
	IDRM = screening.Definition{Name: "idrm", Symbol: "IDRM", Label: "forward leakage when off", Unit: quantity.Ampere}
	// RGK is what an ohmmeter shows from gate to cathode, or to T1.
	RGK = semi.OpenGate("rgk", "RGK", "gate-cathode resistance")
	// IGT is the gate current that turns it on.
	IGT = screening.Definition{Name: "igt", Symbol: "IGT", Label: "gate trigger current", Unit: quantity.Ampere}
	// IGTQ4 is a rating: the gate trigger current of a triac in quadrant IV.
	IGTQ4 = screening.Definition{Name: "igt-q4", Symbol: "IGT (IV)", Label: "gate trigger current in quadrant IV", Unit: quantity.Ampere}
	// VGT is the gate voltage at that current.
	VGT = screening.Definition{Name: "vgt", Symbol: "VGT", Label: "gate trigger voltage", Unit: quantity.Volt}
	// IH is the current below which it lets go.
	IH = screening.Definition{Name: "ih", Symbol: "IH", Label: "holding current", Unit: quantity.Ampere}
	// VT is the drop when it is on.
	VT = screening.Definition{Name: "vt", Symbol: "VT", Label: "on-state voltage", Unit: quantity.Volt, Over: screening.VF.Over}
	// VDRM is a rating: the voltage that it claims to block again and again, both ways.
	VDRM = screening.Definition{Name: "vdrm", Symbol: "VDRM", Label: "rated off-state voltage", Unit: quantity.Volt}
	// ITRMS and ITSM are ratings: the current that it claims to carry, and the surge of one half-wave.
	ITRMS = screening.Definition{Name: "it-rms", Symbol: "IT(RMS)", Label: "rated on-state current", Unit: quantity.Ampere}
	// ITSM is the surge of one half-wave.
	ITSM = screening.Definition{Name: "itsm", Symbol: "ITSM", Label: "rated surge current", Unit: quantity.Ampere}
)

//go:embed limits.csv
var limitsCSV string

var figures = sync.OnceValue(func() semi.Figures { return semi.MustFigures("thyristor limits.csv", limitsCSV) })

// rulebook is that of one of the two kinds.
type rulebook struct {
	table *types.Table
	kind  screening.Kind
}

// Book returns the rulebook of thyristors, with the type numbers of a table.
func Book(t *types.Table) *screening.Rulebook { return rulebook{t, Kind}.book("thyristor") }

// TriacBook returns the rulebook of triacs, with the type numbers of a table.
func TriacBook(t *types.Table) *screening.Rulebook { return rulebook{t, KindTriac}.book("triac") }

func (b rulebook) book(label string) *screening.Rulebook {
	return &screening.Rulebook{
		Kind: b.kind, Label: label, Tables: book.Version(b.kind, edition, limitsCSV) + ", " + b.table.Version(b.kind),
		Claims: b.claims(), Bench: b.bench(), Look: book.Look(), Complete: b.complete, Limits: b.limits, Derive: driven, Convert: b.convert, Adjust: b.adjust,
		Untested: b.untested, Cautions: b.cautions, Recipes: b.recipes,
	}
}

func (b rulebook) triac() bool { return b.kind == KindTriac }

func (b rulebook) claims() []screening.Field {
	example, pinout := "BT151", "K-A-G"
	if b.triac() {
		example, pinout = "BT234", "T1-T2-G"
	}
	fields := []screening.Field{
		sheet.Field(b.table, b.kind, example),
		{
			Definition: VDRM, Example: "500V", AcceptRange: semi.StandsIn(quantity.Volt), Help: "the voltage it claims to block, both ways",
		},
		{
			Definition: ITRMS, Example: "12A", AcceptRange: semi.StandsIn(quantity.Ampere), Help: "the current it claims to carry; not tested",
		},
		{Definition: ITSM, Example: "rated:itsm=20A", Help: "the surge of one half-wave that its sheet allows; not tested"},
		{Definition: IGT, Example: "rated:igt=..15mA", Help: "the gate current that its sheet says turns every part on"},
		{Definition: VGT, Example: "rated:vgt=..1.5V", Help: "the gate voltage at that current"},
		{Definition: IH, Example: "rated:ih=..15mA", Help: "the holding current its sheet allows"},
		{Definition: VT, Example: "rated:vt@6A=..1.5V", Help: "the drop its sheet allows when on, at a current"},
		semi.PinoutField(pinout), book.CaseField("case=TO-220"), book.DatedField(),
	}
	if b.triac() {
		fields = append(fields, screening.Field{
			Definition: IGTQ4, Example: "rated:igt-q4=..25mA", Help: "the same in quadrant IV: T2 minus, gate plus",
		})
	}
	if own := fields[0].AcceptText; own != nil {
		fields[0].AcceptText = func(word string) (string, bool) {
			if text, ok := own(word); ok {
				return text, true
			}
			base, grade, ok := splitGrade(word)
			if !ok {
				return "", false
			}
			text, ok := own(base)
			return text + "-" + grade, ok
		}
	}
	return fields
}

// splitGrade parts a type from the voltage grade that many makers print after it: BT151-500R is BT151 of 500 V, BT234-600 one of 600 V.
func splitGrade(word string) (base, grade string, ok bool) {
	i := strings.LastIndexByte(word, '-')
	if i <= 0 {
		return "", "", false
	}
	base, grade = word[:i], strings.TrimRight(word[i+1:], "RFDErfde")
	if len(grade) < 3 || len(grade) > 4 || strings.Trim(grade, "0123456789") != "" {
		return "", "", false
	}
	return base, grade, true
}

func (b rulebook) bench() []screening.Field {
	anode, cathode, sections := "anode", "cathode", ""
	if b.triac() {
		anode, cathode, sections = "T2", "T1", "/1"
	}
	return []screening.Field{
		{
			Definition: VBO, Example: "vbo=OL", Effort: 5 * time.Second,
			Help: "gate open; diode test, red on " + anode + ", black on " + cathode + ": OL is what a sound one shows",
		},
		{
			Definition: screening.VBR, Example: "vbr=OL", Effort: 6 * time.Second,
			Ask:  "TURN THE PROBES and read " + cathode + " to " + anode + ": OL shows that it blocks (vbr=OL)",
			Help: "the same with the probes turned: OL again",
		},
		{
			Definition: screening.VF, Example: "vf=0.62", Effort: 7 * time.Second,
			Ask:  "READ gate to " + cathode + " with the diode test (vf=…), or trigger it at once, which answers for the gate too",
			Help: "diode test, red on the gate, black on the " + cathode + "; not needed where the trigger test is made",
		},
		{
			Definition: RGK, Example: "rgk=120", Effort: 8 * time.Second,
			Help: "ohms from gate to " + cathode + ", the lower of both ways; where the diode test shows no junction",
		},
		{
			Definition: IGT, Example: "igt" + sections + "=..13mA", Effort: 30 * time.Second,
			Ask:  "TRIGGER it through a lamp and the gate resistor that its recipe computes (igt" + sections + "=..13mA where it lights)",
			Help: b.ways("the gate current at which it latched: ..13mA where it did at that current; 13mA.. where it did not"),
		},
		{
			Definition: VT, Example: "vt" + sections + "@0.4A=0.9", Effort: 31 * time.Second,
			Ask:  "LET the gate go and read the volts across it with the lamp lit (vt" + sections + "@0.4A=…)",
			Help: b.ways("volts across it with the gate let go and the lamp lit; state the current"),
		},
		{Definition: VGT, Example: "vgt=0.8", Effort: time.Minute, Help: "gate to " + cathode + " at the moment it latches"},
		{Definition: IH, Example: "ih=8mA", Effort: 2 * time.Minute, Help: "the current just before it lets go, turned down slowly"},
		{Definition: IDRM, Example: "idrm@30V=0.1uA", Effort: time.Minute, Help: "gate open, " + anode + " to plus through a resistor; state the voltage"},
		{Definition: screening.IR, Example: "ir@30V=0.1uA", Effort: 61 * time.Second, Help: "the same the other way round"},
		semi.TemperatureField(),
	}
}

// ways adds to a help text how a triac's directions are told apart.
func (b rulebook) ways(help string) string {
	if !b.triac() {
		return help
	}
	return help + "; /1 T2 and gate plus, /3 both minus"
}
