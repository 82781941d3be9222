package family

import (
	"slices"
	"strings"
	"testing"

	"goodbin/screening"
)

func claimOf(traits ...string) screening.Claim {
	var c screening.Claim
	for i := 0; i+1 < len(traits); i += 2 {
		c = c.WithTrait(traits[i], traits[i+1])
	}
	return c
}

func barredBy(stops []screening.Stop) string {
	var ids []string
	for _, s := range stops {
		ids = append(ids, strings.TrimPrefix(s.Check, "family-"))
	}
	return strings.Join(ids, " ")
}

// AF11x and OC17x: page on whiskers in germanium transistor cans (published). Oil-filled: 40 CFR 761.2(a)(4): before 2 July 1979 or unknown,
// unless marked "No PCBs" (published).
func TestFamiliesThatAreAlwaysBarred(t *testing.T) {
	for _, tt := range []struct {
		name  string
		kind  screening.Kind
		claim screening.Claim
		by    string
	}{
		{"AF117", "bipolar", claimOf("type", "AF117"), "whisker-germanium"},
		{"however it is written", "bipolar", claimOf("type", "af 114-n"), "whisker-germanium"},
		{"OC170", "bipolar", claimOf("type", "OC170"), "whisker-germanium"},
		{"OC71 is another family", "bipolar", claimOf("type", "OC71"), ""},
		{"AF139 is another family", "bipolar", claimOf("type", "AF139"), ""},
		{"AF1180 is no AF118", "bipolar", claimOf("type", "AF1180"), ""},
		{"SAF117 is no AF117", "bipolar", claimOf("type", "SAF117"), ""},
		{"no type", "bipolar", claimOf("material", "ge"), ""},
		{"a diode of that name", "diode", claimOf("type", "AF117"), ""},
		{"oil, no date", "paper", claimOf("technology", "oil-filled"), "oil-filled"},
		{"oil, a date that nobody can read", "paper", claimOf("technology", "oil", "dated", "KW"), "oil-filled"},
		{"oil, 1974", "paper", claimOf("technology", "oil", "dated", "1974"), "oil-filled"},
		{"oil, 1979: it may have been June", "paper", claimOf("technology", "oil", "dated", "1979"), "oil-filled"},
		{"oil, 1 July 1979", "paper", claimOf("technology", "oil", "dated", "1979-07-01"), "oil-filled"},
		{"oil, 2 July 1979", "paper", claimOf("technology", "oil", "dated", "1979-07-02"), ""},
		{"oil, August 1979", "paper", claimOf("technology", "oil", "dated", "1979-08"), ""},
		{"oil, the seventies", "film", claimOf("technology", "oil", "dated", "197x"), "oil-filled"},
		{"oil, the eighties", "paper", claimOf("technology", "oil", "dated", "198x"), ""},
		{"oil, no date, marked No PCBs", "paper", claimOf("technology", "oil", "no-pcb", "yes"), ""},
		{"mercury-wetted", "relay", claimOf("technology", "mercury-wetted"), "mercury-relay"},
		{"reed", "relay", claimOf("technology", "reed"), ""},
		{"78H05", "regulator", claimOf("type", "µA78H05KC"), "beryllia-regulator"},
		{"7805", "regulator", claimOf("type", "7805"), ""},
	} {
		t.Run(tt.name, func(t *testing.T) {
			stops := Barred(Builtin(), tt.kind, tt.claim, Position{})
			if got := barredBy(stops); got != tt.by {
				t.Errorf("barred by %q, want %q", got, tt.by)
			}
			for _, s := range stops {
				if s.Verdict != screening.Barred || s.Reason == "" || s.Do == "" || !s.Source.Status.MayReject() {
					t.Errorf("%+v", s)
				}
			}
		})
	}
}

// Half the rated voltage and max(1 Ω, 0.1 Ω/V) in series: NASA EEE-INST-002 for solid tantalum (published).
func TestFamiliesThatAreBarredByPosition(t *testing.T) {
	bead := claimOf("case", "bead").WithRating(screening.NominalRating(screening.RatedVoltage, 16))
	for _, tt := range []struct {
		name  string
		kind  screening.Kind
		claim screening.Claim
		at    Position
		by    string
	}{
		{"a bead, nowhere in particular", "tantalum", bead, Position{}, ""},
		{"at a timing position", "tantalum", bead, Position{Role: "timing", Voltage: 5}, ""},
		{"on a rail of which nothing is known", "tantalum", bead, Position{Role: "rail-decoupling"}, "dipped-tantalum"},
		{"on a rail at a third of its voltage, no resistance", "tantalum", bead, Position{Role: "rail-decoupling", Voltage: 5}, "dipped-tantalum"},
		{"with 1 Ω", "tantalum", bead, Position{Role: "rail-decoupling", Voltage: 5, SeriesResistance: 1}, ""},
		{"with 0.9 Ω", "tantalum", bead, Position{Role: "rail-decoupling", Voltage: 5, SeriesResistance: 0.9}, "dipped-tantalum"},
		{"at half its voltage", "tantalum", bead, Position{Role: "smoothing", Voltage: 8, SeriesResistance: 1}, ""},
		{"at more than half", "tantalum", bead, Position{Role: "smoothing", Voltage: 8.1, SeriesResistance: 100}, "dipped-tantalum"},
		{"its voltage not known", "tantalum", claimOf("case", "bead"), Position{Role: "smoothing", Voltage: 5, SeriesResistance: 10}, "dipped-tantalum"},
		{
			"35 V on 17 V: 0.1 Ω/V is 1.7 Ω", "tantalum", claimOf("case", "bead").WithRating(screening.NominalRating(screening.RatedVoltage, 35)),
			Position{Role: "smoothing", Voltage: 17, SeriesResistance: 1.5},
			"dipped-tantalum",
		},
		{"its case not said", "tantalum", claimOf(), Position{Role: "smoothing", Voltage: 5, SeriesResistance: 10}, "dipped-tantalum"},
		{"a chip", "tantalum", bead.WithTrait("case", "chip"), Position{Role: "smoothing"}, ""},
		{"made in 1995", "tantalum", bead.WithTrait("dated", "1995"), Position{Role: "smoothing"}, ""},
		{"waxed paper as coupling", "paper", claimOf("technology", "waxed"), Position{Role: "coupling", Voltage: 1, SeriesResistance: 1e6}, "waxed-paper-coupling"},
		{"waxed paper as a bypass", "paper", claimOf("technology", "waxed"), Position{Role: "bypass"}, ""},
		{"metallised paper as coupling", "paper", claimOf("technology", "metallised"), Position{Role: "coupling"}, ""},
		{"paper of which nothing is said", "paper", claimOf(), Position{Role: "coupling"}, "waxed-paper-coupling"},
		{"what is always barred is barred there too", "bipolar", claimOf("type", "AF115"), Position{Role: "amplifier"}, "whisker-germanium"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			if got := barredBy(Barred(Builtin(), tt.kind, tt.claim, tt.at)); got != tt.by {
				t.Errorf("barred by %q, want %q", got, tt.by)
			}
		})
	}
	said := NotFor(Builtin(), "tantalum", bead)
	if len(said) != 1 || !strings.HasPrefix(said[0], "not for: low-impedance rails without voltage margin and series resistance") {
		t.Errorf("an accepted bead says %q", said)
	}
}

func TestTheEmbeddedTablesAreWhole(t *testing.T) {
	if _, err := read(familiesCSV, keepCSV); err != nil {
		t.Fatal(err)
	}
	dangers := []string{"open", "drain", "heat", "grind"}
	for _, f := range Builtin() {
		if f.House || f.Reason == "" || f.Source.Status == screening.NoStatus || len(f.Kinds) == 0 {
			t.Errorf("%s: %+v", f.ID, f)
		}
		if f.List != NeverKeep {
			continue
		}
		if !f.Source.Status.MayReject() {
			t.Errorf("%s bars on a figure that may not reject: %s", f.ID, f.Source)
		}
		if n := len([]rune(f.Check.Question)); n > 60 {
			t.Errorf("%s: the question has %d letters; a line holds 60", f.ID, n)
		}
		if f.Dispose == Hazardous && (!strings.Contains(f.Do, "do not") || !strings.Contains(f.Do, "local rules")) {
			t.Errorf("%s: hazardous, but says only: %s", f.ID, f.Do)
		}
		before, _, _ := strings.Cut(f.Do, "do not ")
		if i := slices.IndexFunc(dangers, func(w string) bool { return strings.Contains(strings.ToLower(before), w+" it") }); i >= 0 {
			t.Errorf("%s advises to %s it: %s", f.ID, dangers[i], f.Do)
		}
	}
	head := "id,label,kinds,types,traits,unless,before,undated,check,words,question,help,roles,position,margin,ohm-per-volt,least-ohm,dispose,reason,do,source,clause,status\n"
	keep := "id,label,kinds,traits,before,reason,source,clause,status\nk,K,film,,,r,s,,published\n"
	for row, want := range map[string]string{
		"a,A,film,,,,,,,,,,,,,,,scrap,r,d,s,,published\n":                      "nothing tells this family",
		"a,A,film,,technology,,,,,,,,,,,,,scrap,r,d,s,,published\n":            "is not TRAIT=TEXT",
		"a,A,film,,technology=x,,1979-13,,,,,,,,,,,scrap,r,d,s,,published\n":   "is no day",
		"a,A,film,,technology=x,,,,,,,,coupling,,,,,scrap,r,d,s,,published\n":  "both or none",
		"a,A,film,,technology=x,,,,,,,,,,,,,bury,r,d,s,,published\n":           "none of scrap",
		"k,A,film,,technology=x,,,,,,,,,,,,,scrap,r,d,s,,published\n":          "stands twice",
		"a,A,film,,technology=x,,,,c,,Is it?,,,,,,,scrap,r,d,s,,published\n":   "a name, words and a question",
		"a,A,film,,technology=x,,,,,,,,,,,,,scrap,r,d,s,,everybody says so\n":  "is no status",
		"a,A,film,,technology=x,,,,,,,,,,two,,,scrap,r,d,s,,common practice\n": "is not a number",
	} {
		if _, err := read(head+row, keep); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", row, err, want)
		}
	}
}

func TestAttach(t *testing.T) {
	make := func() *screening.Rulebook {
		return &screening.Rulebook{
			Kind: "bipolar", Tables: "t",
			Look:     []screening.Check{{Name: "own", Words: []string{"own"}}, {Name: "in-circuit"}},
			Bars:     func(screening.Claim) []screening.Stop { return []screening.Stop{{Check: "own"}} },
			Untested: func(screening.Part, []screening.Finding) []string { return []string{"own"} },
			Complete: func(c screening.Claim) (screening.Claim, []screening.Reason, error) {
				return c.WithTrait("material", "ge"), []screening.Reason{{Code: "own"}}, nil
			},
		}
	}
	b := make()
	Attach(b, Builtin())
	var looks []string
	for _, c := range b.Look {
		looks = append(looks, c.Name)
	}
	if got := strings.Join(looks, " "); got != "own beryllia in-circuit" {
		t.Errorf("looks at %s", got)
	}
	if got := b.Bars(claimOf("type", "AF118")); len(got) != 2 || got[0].Check != "own" || got[1].Check != "family-whisker-germanium" {
		t.Errorf("bars %+v", got)
	}
	c, notes, err := b.Complete(claimOf("dated", "1958"))
	if err != nil || c.Trait("material") != "ge" || len(notes) != 2 || !strings.Contains(notes[1].Text, "age alone is no reason to refuse it") {
		t.Errorf("completed to %v, %+v, %v", c, notes, err)
	}
	if _, notes, _ := b.Complete(claimOf("dated", "1999")); len(notes) != 1 {
		t.Errorf("a part of 1999 is old: %+v", notes)
	}
	// A kind that bars for beryllia itself keeps its own check.
	own := make()
	own.Look = append(own.Look, screening.Check{Name: "ceramic", Words: []string{"beo"}, Verdict: screening.Barred})
	if Attach(own, Builtin()); len(own.Look) != 3 {
		t.Errorf("asked twice: %+v", own.Look)
	}
	// Verdicts are stale under other families, and only of the kinds that these are about.
	other, resistor := make(), &screening.Rulebook{Kind: "led", Tables: "t"}
	house := []Family{{ID: "x", List: NeverKeep, Kinds: []screening.Kind{"bipolar"}, House: true, row: "x"}}
	Attach(other, append(Builtin(), house...))
	Attach(resistor, append(Builtin(), house...))
	if other.Tables == b.Tables || b.Tables == "t" || resistor.Tables != "t" {
		t.Errorf("versions %q, %q, %q", b.Tables, other.Tables, resistor.Tables)
	}
}
