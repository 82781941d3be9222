package bipolar

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// words builds a claim of traits: "type=BC547B", "polarity=npn".
func words(traits ...string) screening.Claim {
	var c screening.Claim
	for _, t := range traits {
		name, text, _ := strings.Cut(t, "=")
		c = c.WithTrait(name, text)
	}
	return c
}

// read is a reading as the bench takes it: one unit in the third digit is its step.
func read(d screening.Definition, x float64, at screening.Condition) screening.Reading {
	step := 0.0
	if x > 0 {
		step = math.Pow(10, math.Floor(math.Log10(x))-2)
	}
	return screening.Reading{Of: d.Name, Unit: d.Unit, Value: x, At: at, Step: step}
}

func atMost(r screening.Reading) screening.Reading {
	r.Sense = quantity.AtMost
	return r
}

func atLeast(r screening.Reading) screening.Reading {
	r.Sense = quantity.AtLeast
	return r
}

func open(d screening.Definition) screening.Reading {
	return screening.Reading{Of: d.Name, Unit: d.Unit, Value: d.Over.Value, Sense: d.Over.Sense, Over: true}
}

func at(pairs ...any) screening.Condition {
	var c screening.Condition
	for i := 0; i < len(pairs); i += 2 {
		c = c.With(pairs[i].(screening.Variable), pairs[i+1].(float64))
	}
	return c
}

var none screening.Condition

const (
	ic, vce, vcb, warm = screening.IC, screening.VCE, screening.VCB, screening.PartTemperature
)

func judge(t *testing.T, claim screening.Claim, readings ...screening.Reading) screening.Judgement {
	t.Helper()
	j, err := screening.Judge(Book(types.Builtin()), screening.Part{Claim: claim, Readings: readings}, screening.DefaultPolicy())
	if err != nil {
		t.Fatal(err)
	}
	return j
}

// texts joins everything that the judgement says in words.
func texts(j screening.Judgement) string {
	var b strings.Builder
	for _, r := range j.Reasons {
		b.WriteString(r.Text + "\n")
	}
	for _, s := range j.Next {
		b.WriteString(s.Text + "\n")
	}
	for _, u := range j.Untested {
		b.WriteString(u + "\n")
	}
	for _, f := range j.Findings {
		if f.Why != "" {
			b.WriteString(string(f.Limit.On) + ": " + f.Why + "\n")
		}
	}
	return b.String()
}

func ambient(celsius float64) screening.Reading { return read(screening.Temperature, celsius, none) }

type verdictCase struct {
	name     string
	claim    screening.Claim
	readings []screening.Reading
	look     []screening.Observation
	verdict  screening.Verdict
	grade    screening.Grade // AnyGrade where it does not matter
	says     string          // must stand in what the judgement says
	as       string          // of a regrade: what it is regraded as
}

func verdictCases() []verdictCase {
	sound2N3904 := []screening.Reading{
		read(HFE, 180, at(ic, 10e-3, vce, 1.0)), read(VBE, 0.68, none), atMost(read(ICEO, 0.1e-6, at(vce, 20.0))),
	}
	return []verdictCase{
		{
			name: "sound 2N3904 with a meter, a supply and a transistor tester", claim: words("type=2N3904"), readings: sound2N3904,
			verdict: screening.Accept, grade: screening.WithinSpec, says: "not tested above 20 V (rated 40 V)",
		},
		{
			name:     "unmarked npn: accepted as serviceable, since what a new one must have is not known",
			claim:    words("polarity=npn"),
			readings: []screening.Reading{read(HFE, 220, none), read(VBE, 0.66, none), atMost(read(ICEO, 1e-6, at(vce, 9.0)))},
			verdict:  screening.Accept, grade: screening.Serviceable, says: "taken as silicon",
		},
		{
			name:     "2N2222 at a tester's 1 mA: informative gain, not within-spec",
			claim:    words("type=2N2222"),
			readings: []screening.Reading{read(HFE, 70, at(ic, 1e-3, vce, 5.0)), read(VBE, 0.64, none), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			verdict:  screening.Accept, grade: screening.Serviceable, says: "gain not tested at IC 150 mA",
		},
		{
			name:     "BC547B that reads 150 is a BC547A",
			claim:    words("type=BC547B"),
			readings: []screening.Reading{read(HFE, 150, at(ic, 2e-3, vce, 5.0)), read(VBE, 0.65, none), atMost(read(ICEO, 0.1e-6, at(vce, 20.0)))},
			verdict:  screening.Regrade, as: "BC547 group A",
		},
		{
			name:     "BC547C that reads 320 is a BC547B",
			claim:    words("type=BC547", "group=C"),
			readings: []screening.Reading{read(HFE, 320, at(ic, 2e-3, vce, 5.0)), read(VBE, 0.65, none), atMost(read(ICEO, 0.1e-6, at(vce, 20.0)))},
			verdict:  screening.Regrade, as: "BC547 group B",
		},
		{
			name:     "2N3904 that reads 450 keeps its minimum and drops its maximum",
			claim:    words("type=2N3904"),
			readings: []screening.Reading{read(HFE, 450, at(ic, 10e-3, vce, 1.0)), read(VBE, 0.65, none), atMost(read(ICEO, 0.1e-6, at(vce, 20.0)))},
			verdict:  screening.Regrade, as: "as measured",
		},
		{
			name:     "BC547B that reads 60 lies below every group and the type: nothing looser is offered",
			claim:    words("type=BC547B"),
			readings: []screening.Reading{read(HFE, 60, at(ic, 2e-3, vce, 5.0)), read(VBE, 0.65, none), atMost(read(ICEO, 0.1e-6, at(vce, 20.0)))},
			verdict:  screening.Reject, says: "current gain reads 60",
		},
		{
			name:     "collector to emitter leaks 80 µA",
			claim:    words("type=2N3904"),
			readings: []screening.Reading{read(HFE, 180, at(ic, 10e-3, vce, 1.0)), read(VBE, 0.68, none), read(ICEO, 80e-6, at(vce, 20.0))},
			verdict:  screening.Reject, says: "leakage, base open comes to 80",
		},
		{
			name:     "base to emitter reads open: perhaps the wrong way round, so it is turned first",
			claim:    words("type=2N3906"),
			readings: []screening.Reading{open(VBE)},
			verdict:  screening.Undecided, says: "\nTURN THE PROBES and read base to emitter again",
		},
		{
			name:     "base to emitter reads open both ways round",
			claim:    words("type=2N3906"),
			readings: []screening.Reading{open(VBE), open(VEB)},
			verdict:  screening.Reject, says: "or an open junction",
		},
		{
			name:     "it conducts the other way round: the polarity or the leads are others",
			claim:    words("type=2N3906"),
			readings: []screening.Reading{open(VBE), read(VEB, 0.66, none)},
			verdict:  screening.Undecided, says: "it conducts with the probes turned, at 660 mV",
		},
		{
			name:     "turned, it reads as it should",
			claim:    words("type=2N3904"),
			readings: append([]screening.Reading{open(VBE)}, sound2N3904...),
			verdict:  screening.Accept, grade: screening.WithinSpec,
		},
		{
			name:     "breaks down at 30 V of a rated 40 V",
			claim:    words("type=2N3904"),
			readings: append([]screening.Reading{read(screening.VBR, 30, none)}, sound2N3904...),
			verdict:  screening.Reject, says: "breakdown",
		},
		{
			name:  "breakdown below a voltage from memory cannot reject on its own",
			claim: words("type=2N5401"),
			readings: []screening.Reading{
				read(screening.VBR, 100, none), read(HFE, 120, at(ic, 10e-3, vce, 5.0)), read(VBE, 0.66, none), atMost(read(ICEO, 1e-6, at(vce, 20.0))),
			},
			verdict: screening.Accept,
		},
		{
			name:     "breaks down above its rating: normal",
			claim:    words("type=2N3904"),
			readings: append([]screening.Reading{read(screening.VBR, 75, none)}, sound2N3904...),
			verdict:  screening.Accept, grade: screening.WithinSpec,
		},
		{
			name:     "blocks all the supply has, 30 V: proven that far",
			claim:    words("type=2N3904"),
			readings: append([]screening.Reading{atLeast(read(screening.VBR, 30, none))}, sound2N3904...),
			verdict:  screening.Accept, says: "not tested above 30 V (rated 40 V)",
		},
		{
			name:     "gain not measured",
			claim:    words("type=BC547"),
			readings: []screening.Reading{read(VBE, 0.65, none), atMost(read(ICEO, 0.1e-6, at(vce, 20.0)))},
			verdict:  screening.Undecided, says: "MEASURE current gain at IC 2 mA",
		},
		{
			name:     "no polarity claimed",
			claim:    words("material=si"),
			readings: []screening.Reading{read(HFE, 220, none), read(VBE, 0.66, none), atMost(read(ICEO, 1e-6, at(vce, 9.0)))},
			verdict:  screening.Undecided, says: "\nSAY whether it is npn or pnp: polarity=npn or polarity=pnp",
		},
		{
			name:     "type in no table: its name does not say what it is made of",
			claim:    words("type=GT308", "polarity=pnp"),
			readings: []screening.Reading{read(VBE, 0.2, none)},
			verdict:  screening.Undecided, says: "\nSAY whether it is silicon or germanium: material=si or material=ge",
		},
		{
			name:     "unmarked part that reads 1.3 V looks like a Darlington and is asked",
			claim:    words("polarity=npn", "material=si"),
			readings: []screening.Reading{read(HFE, 9000, none), read(VBE, 1.3, none), atMost(read(ICEO, 1e-6, at(vce, 9.0)))},
			verdict:  screening.Undecided, says: "looks like a Darlington",
		},
		{
			name:     "BC547 that reads 1.3 V is no BC547",
			claim:    words("type=BC547"),
			readings: []screening.Reading{read(VBE, 1.3, none)},
			verdict:  screening.Reject, says: "two junctions in series",
		},
		{
			name:     "MPSA13 that reads one junction",
			claim:    words("type=MPSA13"),
			readings: []screening.Reading{read(VBE, 0.66, none)},
			verdict:  screening.Reject, says: "does not look like a Darlington",
		},
		{
			name:     "sound MPSA13",
			claim:    words("type=MPSA13"),
			readings: []screening.Reading{read(VBE, 1.25, none), read(HFE, 14000, at(ic, 10e-3, vce, 5.0)), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			verdict:  screening.Accept, grade: screening.WithinSpec,
		},
		{
			name:     "TIP122 on a small tester reads no gain: not dead, a lamp test is asked",
			claim:    words("type=TIP122"),
			readings: []screening.Reading{read(VBE, 0.78, none), read(HFE, 0.5, at(screening.IB, 20e-6, vce, 5.0)), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			verdict:  screening.Undecided, says: "That is not a fault; test it with a lamp",
		},
		{
			name:     "its step is the sheet's current, not to state one",
			claim:    words("type=TIP122"),
			readings: []screening.Reading{read(VBE, 0.78, none), read(HFE, 3, at(screening.IB, 10e-6, vce, 5.0)), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			verdict:  screening.Undecided, says: "\nMEASURE current gain at IC 500 mA, VCE 3 V (taken at a base current of 10 µA, a collector current of 30 µA)",
		},
		{
			name:  "TIP122 that lights the lamp",
			claim: words("type=TIP122"),
			readings: []screening.Reading{
				read(VBE, 0.78, none), atLeast(read(HFE, 416, at(ic, 0.42, vce, 0.9))), atMost(read(ICEO, 1e-6, at(vce, 20.0))),
			},
			verdict: screening.Accept, grade: screening.Serviceable, says: "gain not tested at IC 500 mA",
		},
		{
			name:  "TIP122 that does not light it",
			claim: words("type=TIP122"),
			readings: []screening.Reading{
				read(VBE, 0.78, none), read(HFE, 2, at(ic, 0.4, vce, 3.0)), atMost(read(ICEO, 1e-6, at(vce, 20.0))),
			},
			verdict: screening.Reject,
		},
		{
			name:     "2N3055 at milliamperes reads low: no evidence against it",
			claim:    words("type=2N3055"),
			readings: []screening.Reading{read(VBE, 0.52, none), read(HFE, 0.8, at(ic, 1e-3, vce, 5.0)), atMost(read(ICEO, 10e-6, at(vce, 20.0)))},
			verdict:  screening.Undecided, says: "measure at the sheet's",
		},
		{
			name:     "2N3904 with 40 at 100 mA, where its sheet asks 30: not held to the 60 of 50 mA",
			claim:    words("type=2N3904"),
			readings: []screening.Reading{read(VBE, 0.66, none), read(HFE, 40, at(ic, 0.1, vce, 1.0)), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			verdict:  screening.Accept, grade: screening.WithinSpec,
		},
		{
			name:     "2N3904 with 80 at 20 mA, between 100 at 10 mA and 60 at 50 mA",
			claim:    words("type=2N3904"),
			readings: []screening.Reading{read(VBE, 0.66, none), read(HFE, 80, at(ic, 20e-3, vce, 1.0)), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			verdict:  screening.Accept, grade: screening.Serviceable,
		},
		{
			name:     "2N3904 with 30 at 20 mA lies below both",
			claim:    words("type=2N3904"),
			readings: []screening.Reading{read(VBE, 0.66, none), read(HFE, 30, at(ic, 20e-3, vce, 1.0)), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			verdict:  screening.Reject,
		},
		{
			name:     "dead 2N3904 on a tester without a stated current",
			claim:    words("type=2N3904"),
			readings: []screening.Reading{read(VBE, 0.66, none), read(HFE, 0.1, none), atMost(read(ICEO, 1e-6, at(vce, 20.0)))},
			verdict:  screening.Reject,
		},
		{
			name:     "leakage is a third of the collector current: the gain is refused (ASTM F528)",
			claim:    words("type=TIP31C"),
			readings: []screening.Reading{read(VBE, 0.55, none), read(HFE, 60, at(ic, 0.6e-3, vce, 9.0)), read(ICEO, 0.2e-3, at(vce, 9.0))},
			verdict:  screening.Undecided, says: "gain reading is not valid",
		},
		{
			name:     "leakage is 11 % of the collector current: refused too",
			claim:    words("type=TIP31C"),
			readings: []screening.Reading{read(VBE, 0.55, none), read(HFE, 60, at(ic, 1.8e-3, vce, 9.0)), read(ICEO, 0.2e-3, at(vce, 9.0))},
			verdict:  screening.Undecided, says: "gain reading is not valid",
		},
		{
			name:     "leakage is 9 % of the collector current: the gain stands, as far as it says anything",
			claim:    words("type=TIP31C"),
			readings: []screening.Reading{read(VBE, 0.55, none), read(HFE, 60, at(ic, 2.2e-3, vce, 9.0)), read(ICEO, 0.2e-3, at(vce, 9.0))},
			verdict:  screening.Accept, says: "informative only",
		},
		{
			name:     "below the whole type's range no group of it is offered",
			claim:    words("type=S8050", "group=C"),
			readings: []screening.Reading{read(VBE, 0.68, none), read(HFE, 97, at(ic, 50e-3, vce, 1.0)), atMost(read(ICEO, 0.1e-6, at(vce, 20.0)))},
			verdict:  screening.Reject,
		},
		{
			name:  "across the mains",
			claim: words("type=2N3904"), readings: sound2N3904, look: []screening.Observation{{Check: "mains-or-cracked", Fault: true}},
			verdict: screening.Barred,
		},
	}
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases() {
		t.Run(tt.name, func(t *testing.T) {
			part := screening.Part{Claim: tt.claim, Readings: tt.readings, Look: tt.look}
			j, err := screening.Judge(Book(types.Builtin()), part, screening.DefaultPolicy())
			if err != nil {
				t.Fatal(err)
			}
			seen[j.Verdict]++
			if j.Verdict != tt.verdict {
				t.Fatalf("verdict %s, want %s\n%s", j.Verdict, tt.verdict, texts(j))
			}
			if tt.grade != screening.AnyGrade && j.Grade != tt.grade {
				t.Errorf("grade %s, want %s\n%s", j.Grade, tt.grade, texts(j))
			}
			if !strings.Contains(texts(j), tt.says) {
				t.Errorf("does not say %q:\n%s", tt.says, texts(j))
			}
			if tt.as != "" && (j.RegradedAs == nil || !strings.Contains(j.RegradedAs.Text, tt.as)) {
				t.Errorf("regraded as %+v, want %q", j.RegradedAs, tt.as)
			}
		})
	}
	// There is no treatment for a transistor.
	booktest.EveryVerdict(t, seen, screening.Treat)
}
