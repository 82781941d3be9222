package types

import (
	"slices"
	"strings"
	"testing"
	"unicode/utf8"

	"goodbin/screening"
)

func TestEmbeddedGrammarLoads(t *testing.T) {
	all, err := readCodes()
	if err != nil || len(all) < 40 {
		t.Errorf("%d codes, %v", len(all), err)
	}
	for key, c := range all {
		if c.words == "" || c.source.Status == screening.NoStatus {
			t.Errorf("%s: %+v", key, c)
		}
	}
	found, err := readTraps()
	if err != nil || len(found) < 20 {
		t.Errorf("%d traps, %v", len(found), err)
	}
}

// The grammars are sections 4.1 to 4.4 of the semiconductor notes: JEDEC, Pro Electron and JIS as encyclopedias quote them, and a recipe.
func TestGrammarSaysWhatTheSchemesSay(t *testing.T) {
	for _, tt := range []struct {
		word  string
		names string // of the guesses
		is    string // of the first
		kind  screening.Kind
		pol   string
		mat   string
		tail  string
	}{
		{"1N5817", "1N5817", "diode family", Diode, "", "", ""},
		{"2N6027", "2N6027", "three terminals", Bipolar, "", "", ""},
		{"2N1234A", "2N1234A", "three terminals", Bipolar, "", "", ""},
		{"3N201", "3N201", "four terminals", "mosfet", "", "", ""},
		{"BC999", "BC999", "silicon transistor, low power, audio", Bipolar, "", "si", ""},
		{"BC999C", "BC999C", "silicon transistor", Bipolar, "", "si", "group C"},
		{"BD999-16", "BD999-16", "silicon transistor, power", Bipolar, "", "si", "gain group 16"},
		{"AF999", "AF999", "germanium transistor, low power, high frequency", Bipolar, "", "ge", ""},
		{"AA999", "AA999", "germanium diode", Diode, "", "ge", ""},
		{"BZX99-C5V1", "BZX99-C5V1", "silicon Zener", Zener, "", "si", "5.1 V"},
		{"BZY99C12V", "BZY99C12V", "silicon Zener", Zener, "", "si", "12 V"},
		{"BYX99-600R", "BYX99-600R", "silicon rectifier", Diode, "", "si", "600 V reverse voltage, polarity reversed"},
		{"RPY99", "RPY99", "compound", "", "", "", ""},
		{"CQY99", "CQY99", "gallium arsenide emitter", "led", "", "", ""},
		{"2SA999", "2SA999", "PNP transistor, high frequency", Bipolar, "pnp", "", ""},
		{"2SD999-Y", "2SD999-Y", "NPN transistor, audio", Bipolar, "npn", "", ""},
		{"2SJ999", "2SJ999", "P-channel", "jfet", "p", "", ""},
		{"3SK999", "3SK999", "N-channel field-effect transistor with four terminals", "jfet", "n", "", ""},
		{"1SS999", "1SS999", "signal diode", Diode, "", "", ""},
		{"1S9999", "1S9999", "diode", Diode, "", "", ""},
		{"K999", "2SK999", "N-channel", "jfet", "n", "", ""},
		{"OA99", "OA99", "germanium diode", Diode, "", "ge", ""},
	} {
		guesses := Grammar(tt.word)
		var names []string
		for _, g := range guesses {
			names = append(names, g.Name)
			if g.Source.Status == screening.NoStatus || g.Source.Status == screening.Published || g.Doubt == "" || !strings.HasSuffix(g.String(), "no ratings known") {
				t.Errorf("%s: %+v is more than a question", tt.word, g)
			}
		}
		if got := strings.Join(names, " "); got != tt.names {
			t.Errorf("%s: guesses %q, want %q", tt.word, got, tt.names)
			continue
		}
		g := guesses[0]
		if !strings.Contains(g.Is, tt.is) || g.Polarity != tt.pol || g.Material != tt.mat || !strings.Contains(g.Suffix, tt.tail) || tt.tail == "" && g.Suffix != "" {
			t.Errorf("%s: %+v", tt.word, g)
		}
		if tt.kind == "" && len(g.Kinds) > 0 || tt.kind != "" && (len(g.Kinds) == 0 || g.Kinds[0] != tt.kind) {
			t.Errorf("%s: kinds %v, want %q first", tt.word, g.Kinds, tt.kind)
		}
	}
}

// Traps of section 4: numbers whose shape says one thing and which are another. Each must be caught by the table, or asked as a question.
func TestTrapsOfTheGrammar(t *testing.T) {
	table := Builtin()
	for _, tt := range []struct {
		word  string
		kinds []screening.Kind // whose tables hold it
		names string           // else of the guesses
		says  string           // in the first
	}{
		{"2N3819", []screening.Kind{"jfet"}, "", ""},    // a JFET with a 2N number
		{"2N6027", nil, "2N6027", "unijunction"},        // a programmable unijunction transistor
		{"AD811", nil, "AD811", "germanium transistor"}, // an amplifier; asked, with the doubt
		{"CA3046", nil, "", ""},                         // an integrated circuit: four digits, so no guess
		{"AN7805", nil, "", ""},                         // the same
		{"C106", []screening.Kind{"thyristor"}, "", ""}, // a thyristor and no 2SC106
		{"J201", []screening.Kind{"jfet"}, "", ""},      // an N-channel JFET and no 2SJ201
		{"BF245", []screening.Kind{"jfet"}, "", ""},     // a JFET, though F is a class of transistors
		{"BS170", []screening.Kind{"mosfet"}, "", ""},   // a MOSFET
		{"D965", nil, "2SD965 BD965", "NPN"},            // 2SD965, or a cut BD965
		{"C945", []screening.Kind{Bipolar}, "", ""},     // C945 is in the table by that name
		{"C999", nil, "2SC999 BC999", "NPN"},            // its like is not
		{"OA91", []screening.Kind{Diode}, "", ""},       // germanium by the table
		{"OC71", []screening.Kind{Bipolar}, "", ""},     // germanium by the table
		{"OA200", nil, "OA200", "silicon diode"},        // the exception
		{"OC201", nil, "OC201", "silicon transistor"},   // the exception
		{"OC45", nil, "OC45", "germanium transistor"},   // the rule
		{"P2N2222A", []screening.Kind{Bipolar}, "", ""}, // in the table with its prefix
		{"MPS2222A", nil, "PN2222A", "prefix"},          // a brand's prefix
		{"KSP2222A", nil, "PN2222A", "prefix"},          // a brand's prefix
		{"PN3904", nil, "2N3904", "prefix"},             // a brand's prefix
		{"SS9013", nil, "S9013", "prefix"},              // a brand's prefix
		{"SS9013H", nil, "S9013 group H", "prefix"},     // with its group
		{"2N3904TA", nil, "2N3904", "suffix"},           // packing
		{"1N4148-TAP", nil, "1N4148", "suffix"},         // packing
		{"BC5470", nil, "", ""},                         // a digit more is another number, and has no shape
		{"XR2206", nil, "", ""},                         // a house number
		{strings.Repeat("2N", 40), nil, "", ""},         // nonsense
		{"2N3904", []screening.Kind{Bipolar}, "", ""},   // the table is over the grammar
		{"BZX79-C5V1", []screening.Kind{Zener}, "", ""}, // the same
		{"bc 547 b", []screening.Kind{Bipolar}, "", ""}, // the same, typed anyhow
		{"", nil, "", ""},                               // nothing
	} {
		if kinds := table.KindsOf(tt.word); !slices.Equal(kinds, tt.kinds) {
			t.Errorf("%s: in the tables of %v, want %v", tt.word, kinds, tt.kinds)
		}
		var names []string
		guesses := table.Guess(tt.word)
		for _, g := range guesses {
			names = append(names, g.Name)
		}
		if got := strings.Join(names, " "); got != tt.names {
			t.Errorf("%s: guesses %q, want %q", tt.word, got, tt.names)
			continue
		}
		if len(guesses) > 0 && !strings.Contains(guesses[0].Is, tt.says) {
			t.Errorf("%s: %q does not say %q", tt.word, guesses[0].Is, tt.says)
		}
	}
	for word, want := range map[string]string{
		"2N6027": "programmable unijunction", "AD811": "amplifier", "D965": "cut BD965", "OA202": "silicon", "BF245B": "JFET", "C106D": "no 2SC106",
		"BC108": "20 V on one sheet", "1N4728A": "3.135 V", "2N7000": "60 V",
	} {
		if !slices.ContainsFunc(Traps(word), func(trap Trap) bool { return strings.Contains(trap.Text, want) }) {
			t.Errorf("%s: no trap says %q: %v", word, want, Traps(word))
		}
	}
	if got := Traps("BC547"); got != nil {
		t.Errorf("BC547: %v", got)
	}
}

func TestWhatThereIsToAskOfAClaim(t *testing.T) {
	claim := func(typ, polarity, material string) screening.Claim {
		return screening.Claim{}.WithTrait(screening.TraitType, typ).WithTrait(screening.TraitPolarity, polarity).WithTrait(screening.TraitMaterial, material)
	}
	for _, tt := range []struct {
		name  string
		kind  screening.Kind
		claim screening.Claim
		want  string // "" where nothing is to be said
	}{
		{"a known type", Bipolar, claim("BC547", "", ""), ""},
		{"no type", Bipolar, claim("", "npn", ""), ""},
		{"a house number", Bipolar, claim("XR2206", "npn", "si"), ""},
		{"another kind's table has it", Bipolar, claim("2N3819", "npn", "si"), "it stands there as jfet, not as bipolar: is the kind right?"},
		{
			"the grammar fits the claim", Bipolar, claim("BC999", "npn", "si"),
			"it looks like a silicon transistor, low power, audio (Pro Electron); no ratings known",
		},
		{
			"another polarity", Bipolar, claim("2SA999", "npn", "si"),
			"it looks like a PNP transistor, high frequency (JIS); no ratings known; it would be pnp, and npn is claimed: which is it?",
		},
		{
			"another material", Bipolar, claim("OC45", "pnp", "si"),
			"it looks like a germanium transistor (the code before Pro Electron); no ratings known; it would be ge, and si is claimed: which is it?",
		},
		{
			"another kind", Diode, claim("BC999", "", ""),
			"it looks like a silicon transistor, low power, audio (Pro Electron); no ratings known; is diode the right kind?",
		},
		{
			"two meanings", Bipolar, claim("D965", "npn", "si"),
			"as 2SD965 it looks like an NPN transistor, audio (JIS), or as BD965 it looks like a silicon transistor, power, audio (Pro Electron); no ratings known",
		},
	} {
		if got := Builtin().Question(tt.kind, tt.claim); got != tt.want {
			t.Errorf("%s:\n got %q\nwant %q", tt.name, got, tt.want)
		}
	}
	channel := screening.Claim{}.WithTrait(screening.TraitType, "2SJ999").WithTrait("channel", "n")
	if got := Builtin().Question("mosfet", channel); !strings.Contains(got, "it would be p, and n is claimed") {
		t.Errorf("channel: %q", got)
	}
}

func FuzzGrammar(f *testing.F) {
	for _, word := range []string{"2N3819", "BZX79-C5V1", "D965", "OA200", "1SS133", "P2N2222A", "2SK170-GR", "BYV27-200R", "Ω", "\xff", "- -", "AD811"} {
		f.Add(word)
	}
	table := Builtin()
	f.Fuzz(func(t *testing.T, word string) {
		for _, g := range slices.Concat(Grammar(word), table.Guess(word)) {
			if g.Is == "" || g.Name == "" || g.Source.Status.MayReject() && g.Source.Status != screening.House {
				t.Fatalf("%q: %+v", word, g)
			}
			if utf8.ValidString(word) && !utf8.ValidString(g.String()) {
				t.Fatalf("%q: %q", word, g.String())
			}
		}
		if len(table.KindsOf(word)) > 0 && table.Guess(word) != nil {
			t.Fatalf("%q is in a table and guessed at", word)
		}
		Traps(word)
	})
}

func BenchmarkGuess(b *testing.B) {
	table := Builtin()
	for b.Loop() {
		table.Guess("D965")
	}
}
