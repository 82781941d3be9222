package unknown

import (
	"slices"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func book0() *screening.Rulebook { return Book(nil) }

func TestTheTablesRead(t *testing.T) {
	tables, err := read()
	if err != nil {
		t.Fatal(err)
	}
	for of, classes := range tables.classes {
		for i, c := range classes {
			if c.low > c.high || i > 0 && c.low > classes[i-1].high {
				t.Errorf("%s %s: %v to %v leaves a gap after %v", of, c.name, c.low, c.high, classes[max(0, i-1)].high)
			}
		}
	}
}

// The figures of the readings are those of the sources: silicon signal diodes 0.638 V (1N914, published), germanium 0.233 V (1N34-type,
// published), BC547 0.68 V, LED red 1.8 V, Darlington pair 1.30 V (published), MPF102 166.7 Ω between drain and source (published).
func TestWhatRemainsPossible(t *testing.T) {
	for _, tt := range []struct {
		name, words string
		want        []string // part of the names of what remains, in order; exactly so many
	}{
		{"a silicon junction one way", "leads=2 vf/1-2=0.638 vf/2-1=OL capacitance=4p", []string{"a silicon diode or a Zener diode (anode is lead 1, cathode is lead 2)"}},
		{"the same with its leads the other way", "leads=2 vf/2-1=0.638 vf/1-2=OL capacitance=4p", []string{"a silicon diode or a Zener diode (anode is lead 2, cathode is lead 1)"}},
		{"a germanium junction", "leads=2 vf/1-2=0.233 vf/2-1=OL capacitance=1p", []string{"a germanium or Schottky diode"}},
		{"a red LED", "leads=2 vf/1-2=1.80 vf/2-1=OL resistance/1-2=OL capacitance=20p", []string{"a light-emitting diode", "several junctions"}},
		{"a resistor of 4.7 kΩ", "leads=2 vf/1-2=OL vf/2-1=OL resistance/1-2=4.7k capacitance=0", []string{"a resistance of kilohms"}},
		{"100 nF", "leads=2 vf/1-2=OL vf/2-1=OL resistance/1-2=OL capacitance=98n", []string{"a capacitor", "a varistor"}},
		{"2200 µF", "leads=2 vf/1-2=OL resistance/1-2=OL capacitance=2100u", []string{"a large capacitor"}},
		{"nothing at all", "leads=2 vf/1-2=OL vf/2-1=OL resistance/1-2=OL capacitance=0", []string{"a light-emitting diode", "several junctions", "nothing that a meter reads"}},
		{"an NPN transistor, base in the middle", "leads=3 vf/2-1=0.68 vf/2-3=0.67 vf/1-2=OL vf/3-2=OL vf/1-3=OL vf/3-1=OL resistance/1-3=OL", []string{"a silicon NPN transistor or two diodes with a common anode (base is lead 2)"}},
		{"a PNP transistor, base first", "leads=3 vf/2-1=0.68 vf/3-1=0.67 vf/1-2=OL vf/1-3=OL vf/2-3=OL vf/3-2=OL resistance/2-3=OL", []string{"a silicon PNP transistor or two diodes with a common cathode (base is lead 1)"}},
		{
			"an n-channel JFET", "leads=3 vf/3-1=0.65 vf/3-2=0.65 vf/1-3=OL vf/2-3=OL vf/1-2=0.17 vf/2-1=0.17 resistance/1-2=166.7",
			[]string{"an n-channel JFET (gate is lead 3)"},
		},
		{"a Darlington", "leads=3 vf/1-3=1.30 vf/1-2=0.65 vf/3-2=0.55 vf/2-3=OL vf/2-1=OL vf/3-1=OL", []string{
			"a silicon PNP transistor that leaks",
			"an NPN Darlington with its built-in diode (base is lead 1, collector is lead 2, emitter is lead 3)", "a three-legged regulator",
		}},
		{"a small Darlington without a diode", "leads=3 vf/2-1=1.25 vf/2-3=0.66 vf/1-2=OL vf/3-2=OL vf/1-3=OL vf/3-1=OL", []string{"an NPN Darlington without a built-in diode (base is lead 2, collector is lead 3, emitter is lead 1)"}},
		{"a JFET whose channel takes less than a tester's current reads as a transistor until its ohms are known", "leads=3 vf/3-1=0.70 vf/3-2=0.70 vf/1-3=OL vf/2-3=OL vf/1-2=OL vf/2-1=OL", []string{"a silicon NPN", "a silicon NPN transistor that leaks", "an n-channel JFET"}},
		{"and is one with 12 kΩ of channel", "leads=3 vf/3-1=0.70 vf/3-2=0.70 vf/1-3=OL vf/2-3=OL vf/1-2=OL vf/2-1=OL resistance/1-2=12k", []string{"a silicon NPN transistor that leaks", "an n-channel JFET (gate is lead 3)"}},
		{"a transistor that leaks between its outer leads", "leads=3 vf/2-1=0.68 vf/2-3=0.67 vf/1-2=OL vf/3-2=OL vf/1-3=1.20 vf/3-1=OL", []string{"a silicon NPN transistor that leaks", "a PNP Darlington", "a three-legged regulator"}},
		{"a transistor whose outer leads are shorted", "leads=3 vf/2-1=0.65 vf/2-3=0.65 vf/1-2=OL vf/3-2=OL vf/1-3=0.001 vf/3-1=0.001 resistance/1-3=0.3", []string{"a silicon NPN transistor that failed short (base is lead 2)"}},
		{
			"a bridge, its two drops in series too", "leads=4 vf/1-2=0.55 vf/3-2=0.55 vf/4-1=0.55 vf/4-3=0.55 vf/4-2=1.05 vf/2-4=OL vf/2-1=OL",
			[]string{"a bridge rectifier (plus is lead 2, minus is lead 4)"},
		},
		{"an optocoupler is no bridge", "leads=4 vf/1-2=1.08 vf/2-1=OL vf/1-3=OL vf/1-4=OL", []string{"an optocoupler"}},
		{"a leaky germanium PNP", "leads=3 vf/1-2=0.180 vf/3-2=0.170 vf/2-1=1.20 vf/2-3=1.30 vf/1-3=0.65 vf/3-1=0.90", []string{"a germanium PNP transistor (base is lead 2)"}},
		{"a line-output transistor: 50 Ω at its base and a damper diode", "leads=3 vf/1-3=0.050 vf/3-1=0.050 vf/1-2=0.50 vf/3-2=0.50 vf/2-1=OL vf/2-3=OL", []string{"a silicon PNP transistor that failed short", "an NPN transistor with a damper diode", "a p-channel JFET"}},
		{"a MOSFET that a charged gate holds on", "leads=3 vf/3-2=0.002 vf/2-3=0.002 vf/1-2=OL vf/2-1=OL vf/1-3=OL vf/3-1=OL resistance/2-3=0.3", []string{"a MOSFET with a charged gate", "a potentiometer"}},
		{"two LEDs, which a meter that stops at 1.5 V reads as nothing", "leads=3 vf/1-2=1.5V.. vf/3-2=1.5V.. vf/2-1=1.5V.. vf/2-3=1.5V.. vf/1-3=1.5V.. vf/3-1=1.5V.. resistance/1-2=OL resistance/1-3=OL resistance/2-3=OL", []string{"an IGBT without", "two light-emitting diodes with a common anode", "two light-emitting diodes with a common cathode"}},
		{"a regulator", "leads=3 vf/2-1=0.55 vf/2-3=0.60 vf/3-1=0.60 vf/1-2=OL vf/3-2=1.40 vf/1-3=1.60", []string{"an NPN Darlington with", "a PNP Darlington with", "a three-legged regulator"}},
		{"a red and a green LED back to back", "leads=2 vf/1-2=1.70 vf/2-1=1.85 resistance/1-2=OL capacitance=20p", []string{"two light-emitting diodes back to back"}},
		{"a silicon diode that leaks is no Zener diode for sure", "leads=2 vf/1-2=0.62 vf/2-1=1.20 capacitance=10p", []string{"a Zener diode of a low voltage or a silicon diode that leaks"}},
		{"a silicon diode on a meter that stops at 1.5 V", "leads=2 vf/1-2=0.62 vf/2-1=1.5V.. capacitance=4p", []string{"a silicon diode or a Zener diode (anode is lead 1", "a Zener diode of a low voltage or a silicon diode that leaks"}},
		{"a red LED on a meter that stops at 1.5 V", "leads=2 vf/1-2=1.5V.. vf/2-1=1.5V.. resistance/1-2=OL capacitance=20p", []string{"a light-emitting diode", "two light-emitting diodes back", "several junctions", "a small capacitor", "a varistor"}},
		{"680 Ω one way round only", "leads=2 vf/1-2=0.68 resistance/1-2=680 capacitance=0", []string{"a resistance of some hundred ohms", "a silicon diode", "a Zener diode of a low voltage"}},
		{"a reading that no sort gives", "leads=3 vf/1-2=0.6 vf/2-1=0.6 vf/1-3=0.6 vf/3-1=OL vf/2-3=1.2 vf/3-2=0.300", nil},
	} {
		t.Run(tt.name, func(t *testing.T) {
			part := booktest.Judge(t, book0(), tt.words, screening.DefaultPolicy()).Part
			left := possible(leadsOf(part.Claim), part.Readings)
			var names []string
			for _, f := range left {
				names = append(names, f.text())
			}
			if len(names) != len(tt.want) {
				t.Fatalf("%d remain, want %d:\n%s", len(names), len(tt.want), strings.Join(names, "\n"))
			}
			for i, want := range tt.want {
				if !strings.HasPrefix(names[i], want) {
					t.Errorf("%q, want %q", names[i], want)
				}
			}
		})
	}
}

// Every sort that the table holds is found again from its own readings, in every way in which its leads can be numbered, in the order in
// which the program asks; and what is asked always tells something.
func TestTheReadingsAskedForFindEverySort(t *testing.T) {
	most := 0
	for i := range load().candidates {
		c := &load().candidates[i]
		n := len(c.roles)
		for _, way := range permutations(n) {
			var readings []screening.Reading
			left := possible(n, nil)
			steps := 0
			for {
				m, tells := separating(n, readings, left)
				if !tells {
					break
				}
				if steps++; steps > len(measurements(n)) {
					t.Fatalf("%s: it asks for ever", c.name)
				}
				readings = append(readings, typical(m, c.expected(m, way, takenOf(n, readings))))
				left = possible(n, readings)
			}
			if !slices.ContainsFunc(left, func(f fit) bool { return f.candidate == c }) {
				t.Errorf("%s with its leads as %v is not among what remains", c.name, way)
			}
			if len(left) > mostNamed {
				t.Errorf("%s: %d sorts remain when nothing more tells them apart", c.name, len(left))
			}
			most = max(most, steps)
		}
	}
	t.Logf("at most %d readings", most)
}

// typical is a reading in the middle of the first class of a set.
func typical(m measurement, s set) screening.Reading {
	r := screening.Reading{Of: definitions[m.of].Name, Unit: definitions[m.of].Unit, Section: m.section}
	for k, c := range load().classes[m.of] {
		if s&(1<<k) == 0 {
			continue
		}
		if c.high == inf {
			r.Value, r.Sense = c.low*1.1, 1
			return r
		}
		r.Value = (c.low + c.high) / 2
		return r
	}
	return r
}

func TestAPartWithoutANameIsNeverUsable(t *testing.T) {
	for i := range load().candidates {
		c := &load().candidates[i]
		part := booktest.Part(t, book0(), "leads="+string(rune('0'+len(c.roles))))
		for _, m := range measurements(len(c.roles)) {
			part.Readings = append(part.Readings, typical(m, c.expected(m, permutations(len(c.roles))[0], nil)))
		}
		j := booktest.JudgePart(t, book0(), part, screening.DefaultPolicy())
		if j.Verdict != screening.Undecided {
			t.Errorf("%s: %s", c.name, j.Verdict)
		}
		if len(j.Next) == 0 || !strings.HasPrefix(j.Next[len(j.Next)-1].Text, "NAME it") {
			t.Errorf("%s: next steps %v", c.name, j.Next)
		}
	}
}

// The walk asks for one reading at a time until it can name what remains: an NPN transistor with its base in the middle.
func TestTheWalkAsksUntilItCanName(t *testing.T) {
	w := screening.NewWalk(book0(), screening.DefaultPolicy(), booktest.Part(t, book0(), "leads=3 seen=nothing"))
	answers := 0
	for q := w.Next(); q.Ask != screening.AskNothing; q = w.Next() {
		if q.Ask != screening.AskReading {
			t.Fatalf("it asks %+v", q)
		}
		r := screening.Reading{Of: q.Field.Name, Section: q.Section, Unit: q.Field.Unit, Value: 2, Sense: quantity.AtLeast}
		switch {
		case q.Field.Name == screening.Resistance.Name:
			r.Value = 2e6
		case q.Section == "2-1" || q.Section == "2-3":
			r.Value, r.Sense, r.Step = 0.68, quantity.Exactly, 0.001
		}
		if err := w.Record(r); err != nil {
			t.Fatal(err)
		}
		if answers++; answers > 9 {
			t.Fatal("it asks for ever")
		}
	}
	j, err := w.Judgement()
	if err != nil || j.Verdict != screening.Undecided {
		t.Fatal(j.Verdict, err)
	}
	if text := booktest.Texts(j); !strings.Contains(text, "it may be a silicon NPN transistor or two diodes with a common anode (base is lead 2)") {
		t.Error(text)
	}
	t.Logf("%d readings", answers)
}

// A leaky part, or one with a chip inside, reads like a sound one of another sort: what remains is never said without that.
func TestWhatRemainsIsNoIdentity(t *testing.T) {
	for words, want := range map[string]bool{"leads=2 vf/1-2=0.638 vf/2-1=OL capacitance=4p": true, "leads=3": false} {
		if said := booktest.Texts(booktest.Judge(t, book0(), words, screening.DefaultPolicy())); strings.Contains(said, doubt) != want {
			t.Errorf("%s:\n%s", words, said)
		}
	}
}

func TestTheMarkingIsSaidWithIt(t *testing.T) {
	decode := func(text string) []string {
		if text != "104" {
			return nil
		}
		return []string{"100 nF", "100 kΩ"}
	}
	j := booktest.Judge(t, Book(decode), "leads=2 marking=104", screening.DefaultPolicy())
	if text := booktest.Texts(j); !strings.Contains(text, "its marking can mean 100 nF") || !strings.Contains(text, "100 kΩ") {
		t.Error(text)
	}
	j = booktest.Judge(t, Book(decode), "leads=2 marking=zz", screening.DefaultPolicy())
	if text := booktest.Texts(j); !strings.Contains(text, `no scheme of marking fits "zz"`) {
		t.Error(text)
	}
}

func TestLeadsThatAMeterCannotTell(t *testing.T) {
	part := screening.Part{Claim: screening.Claim{}.WithTrait("leads", "16")}
	if _, err := screening.Judge(book0(), part, screening.DefaultPolicy()); err == nil || !strings.Contains(err.Error(), "2, 3 or 4 leads") {
		t.Errorf("16 leads: %v", err)
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, book0(), "leads=3 vf/2-1=0.68 vf/2-3=0.67 vf/1-2=OL vf/3-2=OL")
}

// A reading that tells more comes before the name that nobody knows yet.
func TestTheNameIsAskedForLast(t *testing.T) {
	j := booktest.Judge(t, book0(), "leads=3 vf/1-2=OL", screening.DefaultPolicy())
	if len(j.Next) < 2 || j.Next[0].Code != screening.CodeMeasure || strings.HasPrefix(j.Next[0].Text, "NAME it") ||
		!strings.HasPrefix(j.Next[len(j.Next)-1].Text, "NAME it") {
		t.Errorf("next steps %v", j.Next)
	}
}
