package types

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

func TestLookup(t *testing.T) {
	for _, tt := range []struct {
		name       string
		kind       screening.Kind
		word       string
		typ, group string // typ "" where unknown
	}{
		{"exact", Bipolar, "BC547", "BC547", ""},
		{"small letters", Bipolar, "bc547", "BC547", ""},
		{"group letter after the number", Bipolar, "BC547B", "BC547", "B"},
		{"group after a space", Bipolar, "BC547 b", "BC547", "B"},
		{"group after a hyphen", Bipolar, "BC337-25", "BC337", "25"},
		{"hyphen left out", Bipolar, "BC33725", "BC337", "25"},
		{"en dash", Bipolar, "BC337–40", "BC337", "40"},
		{"two-letter group", Bipolar, "2SC1815-GR", "2SC1815", "GR"},
		{"JIS name without 2S, listed as an alias", Bipolar, "C1815", "2SC1815", ""},
		{"the alias with its group", Bipolar, "c1815 gr", "2SC1815", "GR"},
		{"Roman group", Bipolar, "BCY58-VIII", "BCY58", "VIII"},
		{"the other print of a Roman group", Bipolar, "BCY58B", "BCY58", "VIII"},
		{"a letter that ends the type is no group", Bipolar, "TIP31C", "TIP31C", ""},
		{"group that the type does not have", Bipolar, "BC546C", "", ""},
		{"longer number than any type", Bipolar, "BC5470", "", ""},
		{"packing suffix is not known", Bipolar, "2N3904TA", "", ""},
		{"JIS name not in the table", Bipolar, "C106", "", ""},
		{"JFET with a 2N number", Bipolar, "2N3819", "", ""},
		{"integrated circuit shaped like germanium", Bipolar, "AD811", "", ""},
		{"empty", Bipolar, "", "", ""},
		{"only hyphens", Bipolar, "--", "", ""},
		{"diode is a diode", Diode, "1N4148", "1N4148", ""},
		{"and never a transistor", Bipolar, "1N4148", "", ""},
		{"and never a Zener", Zener, "1N4148", "", ""},
		{"suffix that belongs to the type", Diode, "byv27-200", "BYV27-200", ""},
		{"Zener", Zener, "BZX79-C5V1", "BZX79-C5V1", ""},
		{"Zener without its hyphen", Zener, "bzx79c5v1", "BZX79-C5V1", ""},
		{"Zener of the other series", Zener, "BZX55C2V4", "BZX55-C2V4", ""},
		{"Zener above what was compared", Zener, "BZX55-C27", "", ""},
		{"1 W Zener", Zener, "1n4733a", "1N4733A", ""},
		{"no suffix", Zener, "1N4733", "1N4733", ""},
		{"suffix D", Zener, "1N4733D", "1N4733D", ""},
		{"suffix that no rule names", Zener, "1N4733X", "", ""},
		{"letter B", Zener, "BZX79-B5V1", "BZX79-B5V1", ""},
	} {
		t.Run(tt.name, func(t *testing.T) {
			row, ok := Builtin().Lookup(tt.kind, tt.word)
			if ok != (tt.typ != "") || row.Type != tt.typ || row.Group != tt.group {
				t.Errorf("Builtin().Lookup(%s, %q) = %q group %q, %v; want %q group %q", tt.kind, tt.word, row.Type, row.Group, ok, tt.typ, tt.group)
			}
		})
	}
}

func TestZenerToleranceLetters(t *testing.T) {
	for _, tt := range []struct {
		word      string
		low, high float64
		status    screening.Status
	}{
		{"BZX79-C5V1", 4.8, 5.4, screening.Published},   // BZX79-C sheet
		{"BZX55-C5V1", 4.8, 5.4, screening.Published},   // Vishay BZX55
		{"BZX55-C2V4", 2.28, 2.56, screening.Published}, // Vishay BZX55, where it differs from BZX79
		{"1N4733A", 4.845, 5.355, screening.Published},  // Fairchild 1N47xx
		{"1N4733", 4.59, 5.61, screening.Published},     // no suffix is ±10 %
		{"1N4733C", 4.998, 5.202, screening.Published},  // suffix C is ±2 %
		{"1N4733D", 5.049, 5.151, screening.Published},  // suffix D is ±1 %
		{"BZX79-B5V1", 4.998, 5.202, screening.Derived}, // ±2 %; printed as 5.0 to 5.2 on BZX55-B
		{"BZX55-C18", 16.8, 19.1, screening.Derived},    // compared row by row up to 15 V only
		{"1N4764A", 95, 105, screening.Published},       // nominal seen, ±5 % computed as printed
		{"BZX79-C13", 12.4, 14.1, screening.Published},  // rounded: −4.6/+8.5 %
		{"1N4728A", 3.135, 3.465, screening.Published},  // the sheet's 3.315 is a slip
		{"BZX79-C75", 70, 79, screening.Published},      // last row
		{"BZX55-C2V0", 1.9, 2.1, screening.Published},   // Vishay BZX55
		{"BZX55-C15", 13.8, 15.6, screening.Published},  // last row compared
	} {
		row, ok := Builtin().Lookup(Zener, tt.word)
		vz, _ := row.Rating("vz")
		if !ok || math.Abs(vz.Low-tt.low) > 1e-9 || math.Abs(vz.High-tt.high) > 1e-9 || vz.Source.Status != tt.status {
			t.Errorf("%s: %g to %g (%s), want %g to %g (%s)", tt.word, vz.Low, vz.High, vz.Source.Status, tt.low, tt.high, tt.status)
		}
	}
	own, _ := Builtin().Lookup(Zener, "BZX55-C5V1")
	other, _ := Builtin().Lookup(Zener, "BZX79-C5V1")
	if a, _ := own.most("zz"); a != 35 { // Vishay BZX55
		t.Errorf("BZX55-C5V1 rz %g, want 35", a)
	}
	if a, _ := other.most("zz"); a != 60 { // BZX79-C sheet
		t.Errorf("BZX79-C5V1 rz %g, want 60", a)
	}
}

func TestGainGroups(t *testing.T) {
	for _, tt := range []struct {
		word      string
		low, high float64
		ic, vce   float64
		status    screening.Status
	}{
		{"BC547A", 110, 220, 2e-3, 5, screening.Published},
		{"BC547B", 200, 450, 2e-3, 5, screening.Published},
		{"BC557C", 420, 800, 2e-3, 5, screening.Published},
		{"BC107B", 180, 460, 2e-3, 5, screening.Published},
		{"BC109C", 380, 800, 2e-3, 5, screening.Published},
		{"BC337-16", 100, 250, 0.1, 1, screening.Published},
		{"BC328-40", 250, 630, 0.1, 1, screening.Published},
		{"BD139-10", 63, 160, 0.15, 2, screening.Published},
		{"BCY58-X", 380, 630, 2e-3, 5, screening.Published},
		{"2SC1815Y", 120, 240, 2e-3, 6, screening.Published},
		{"2SA1015GR", 200, 400, 2e-3, 6, screening.Published},
		{"2SC2655-O", 70, 140, 0.5, 2, screening.SecondHand},
		{"S9013H", 200, 350, 0.05, 1, screening.Published},
		{"S8550D", 160, 300, 0.05, 1, screening.Published},
		{"C945Q", 135, 270, 1e-3, 6, screening.Published},
		{"2SC5200-O", 80, 160, 1, 5, screening.FromMemory},
	} {
		row, ok := Builtin().Lookup(Bipolar, tt.word)
		g, found := row.FindGroup(row.Group)
		ic, _ := g.Gain.At.Get(screening.IC)
		vce, _ := g.Gain.At.Get(screening.VCE)
		if !ok || !found || g.Gain.Low != tt.low || g.Gain.High != tt.high || ic != tt.ic || vce != tt.vce || g.Gain.Source.Status != tt.status {
			t.Errorf("%s: %g to %g at %g A, %g V (%s)", tt.word, g.Gain.Low, g.Gain.High, ic, vce, g.Gain.Source.Status)
		}
	}
}

// The sheets' minima at other currents (semiconductor notes, gain against current: published).
func TestGainPoints(t *testing.T) {
	want := map[string][][2]float64{
		"2N3904": {{1e-4, 40}, {1e-3, 70}, {0.05, 60}, {0.1, 30}}, "2N3906": {{1e-4, 60}, {1e-3, 80}, {0.05, 60}, {0.1, 30}},
		"P2N2222A": {{1e-4, 35}, {1e-3, 50}, {0.01, 75}, {0.5, 40}}, "2N2907A": {{1e-4, 75}, {1e-3, 100}, {0.01, 100}, {0.5, 50}},
		"2N5551": {{1e-3, 80}, {0.05, 30}}, "MPSA13": {{0.1, 10000}}, "MPSA14": {{0.1, 20000}}, "2N3055": {{10, 5}},
		"TIP120": {{3, 1000}}, "MJE13005": {{0.5, 15}, {2, 8}},
	}
	for name, points := range want {
		row, _ := Builtin().Lookup(Bipolar, name)
		var got [][2]float64
		for _, p := range row.Points {
			if ic, ok := p.At.Get(screening.IC); ok && p.Of == "hfe" {
				got = append(got, [2]float64{ic, p.Low})
			}
		}
		if diff := cmp.Diff(points, got); diff != "" {
			t.Errorf("%s (-want +got):\n%s", name, diff)
		}
	}
	row, _ := Builtin().Lookup(Bipolar, "BC337-40")
	g, _ := row.FindGroup("40")
	if len(g.Points) != 1 || g.Points[0].Low != 170 {
		t.Errorf("BC337-40 at 300 mA: %v, want a minimum of 170", g.Points)
	}
}

func TestSingleFiguresFromMemoryKeepTheirStatus(t *testing.T) {
	for _, tt := range []struct {
		kind screening.Kind
		word string
		of   screening.Characteristic
		want screening.Status
	}{
		{Bipolar, "BC517", "hfe", screening.Published}, // gain limit seen, ratings from memory
		{Bipolar, "BC517", "vceo", screening.FromMemory},
		{Bipolar, "TIP41C", "hfe", screening.FromMemory},
		{Bipolar, "TIP41C", "vceo", screening.Published},
		{Bipolar, "MJE13005", "ptot", screening.FromMemory},
		{Bipolar, "TIP120", "icbo", screening.FromMemory},
		{Diode, "BA159", "vf", screening.FromMemory},
		{Diode, "BA159", "vrrm", screening.Published},
		{Diode, "1N4148", "ifsm", screening.FromMemory},
		{Zener, "BZX55-C5V1", "ptot", screening.FromMemory},
	} {
		row, _ := Builtin().Lookup(tt.kind, tt.word)
		r, ok := row.Rating(tt.of)
		if !ok || r.Source.Status != tt.want {
			t.Errorf("%s %s: %s, want %s", tt.word, tt.of, r.Source.Status, tt.want)
		}
	}
}

func TestAppendingToARowDoesNotReachTheTable(t *testing.T) {
	row, _ := Builtin().Lookup(Bipolar, "BC547B")
	_ = append(row.Ratings, screening.Rating{Of: "spoilt"})
	_ = append(row.Traits, screening.Trait{Name: "spoilt"})
	again, _ := Builtin().Lookup(Bipolar, "BC547C")
	if again.Group != "C" || again.Trait("spoilt") != "" || again.Trait(screening.TraitGroup) != "C" || row.Trait(screening.TraitGroup) != "B" {
		t.Errorf("BC547C after BC547B: group %s, traits %v; BC547B: %v", again.Group, again.Traits, row.Traits)
	}
}

func TestTablesRefuseWhatIsWrong(t *testing.T) {
	head := "type,group,alias,min,max,ic,vce,vcb,source,status,note\n"
	tab := &content{rows: map[screening.Kind][]Row{Bipolar: {{Type: "X1"}}}, byName: map[screening.Kind]map[string]int{Bipolar: {"X1": 0}}}
	for name, text := range map[string]string{
		"min above max":            head + "X1,A,,200,100,1,5,,sheet,published,\n",
		"unknown type":             head + "X2,A,,100,200,1,5,,sheet,published,\n",
		"unknown status":           head + "X1,B,,100,200,1,5,,sheet,certain,\n",
		"no source":                head + "X1,C,,100,200,1,5,,,published,\n",
		"number that is no number": head + "X1,D,,lots,200,1,5,,sheet,published,\n",
	} {
		groups := book.ReadTable("groups.csv", text)
		for _, r := range groups.Rows() {
			tab.addGroup(r)
		}
		if groups.Err() == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

func FuzzLookup(f *testing.F) {
	for _, s := range []string{"BC547B", "bzx79-c5v1", "1N47", "1N4733", "–", "2SC1815-GR", "BZX79-B", "\x00"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, word string) {
		for _, kind := range []screening.Kind{Bipolar, Diode, Zener, "other"} {
			row, ok := Builtin().Lookup(kind, word)
			if !ok {
				continue
			}
			again, found := Builtin().Lookup(kind, row.Type+row.Group)
			if !found || again.Type != row.Type || again.Group != row.Group {
				t.Errorf("%q is %s group %q, which is then %s group %q (%v)", word, row.Type, row.Group, again.Type, again.Group, found)
			}
		}
	})
}

func BenchmarkLookup(b *testing.B) {
	for b.Loop() {
		Builtin().Lookup(Bipolar, "BC547B")
	}
}
