package types

import (
	"regexp"
	"slices"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// Guess is what a type number suggests that stands in no table: a question, never a fact, and never a rating.
type Guess struct {
	Scheme   string           // "JEDEC", "Pro Electron", "JIS", "the code before Pro Electron", "a brand's prefix", "a suffix"
	Name     string           // the number that the guess takes it for: "2SD965"
	Is       string           // what that would be, in words: "silicon transistor, low power, audio"
	Suffix   string           // what its ending would say, in words; "" where it has none that says anything
	Kinds    []screening.Kind // the kinds that it may be, the likeliest first; nil where no kind here takes it
	Polarity string           // npn, pnp, or the channel n or p; "" where the number does not say
	Material string           // si, ge; "" where the number does not say
	Doubt    string           // why it is no more than a question
	Source   screening.Source
}

// String words the guess: "looks like a silicon transistor, low power, audio (Pro Electron); no ratings known".
func (g Guess) String() string {
	text := "looks like " + article(g.Is) + g.Is + " (" + g.Scheme + ")"
	if g.Suffix != "" {
		text += ", " + g.Suffix
	}
	return text + "; no ratings known"
}

func article(noun string) string {
	switch {
	case strings.HasPrefix(noun, "a ") || strings.HasPrefix(noun, "several "):
		return ""
	case strings.ContainsRune("aeiou", rune(noun[0])), strings.HasPrefix(noun, "NPN"), strings.HasPrefix(noun, "N-"):
		return "an "
	}
	return "a "
}

// code is one row of grammar.csv.
type code struct {
	words              string
	kinds              []screening.Kind
	polarity, material string
	source             screening.Source
}

// codes are the rows of grammar.csv by scheme and code.
var codes = sync.OnceValue(func() map[string]code {
	all, err := readCodes()
	if err != nil {
		panic("types: embedded grammar: " + err.Error())
	}
	return all
})

func readCodes() (map[string]code, error) {
	text, err := files.ReadFile("grammar.csv")
	if err != nil {
		return nil, err
	}
	t := book.ReadTable("grammar.csv", string(text))
	all := map[string]code{}
	for _, r := range t.Rows() {
		c := code{words: r.Required("words"), polarity: r.Text("polarity"), material: r.Text("material"), source: r.Source()}
		for _, k := range strings.Fields(r.Text("kinds")) {
			c.kinds = append(c.kinds, screening.Kind(k))
		}
		key := r.Required("scheme") + " " + r.Required("code")
		if _, twice := all[key]; twice {
			r.Errorf("code", "%q stands twice", key)
		}
		all[key] = c
	}
	return all, t.Err()
}

// The shapes of type numbers. A Pro Electron serial is three digits (consumer) or a letter and two digits (professional), and what follows does
// not begin with a digit: AN7805 and CA3046 are no such numbers.
var (
	jedecShape = regexp.MustCompile(`^([123]N)\d+[A-Z]*$`)
	jisShape   = regexp.MustCompile(`^([123])S([A-Z])(\d{2,5})([A-Z]*)(-.*)?$`)
	jisDigits  = regexp.MustCompile(`^1S\d+[A-Z]*$`)
	bareShape  = regexp.MustCompile(`^([ABCDJK])(\d{2,4})([A-Z]{0,2})(-.*)?$`)
	proShape   = regexp.MustCompile(`^([ABCR])([A-HLMNP-UW-Z])(\d{3}|[A-Z]\d{2})(\D.*)?$`)
	oldShape   = regexp.MustCompile(`^(O[AC])(\d{1,3})[A-Z]*$`)
	zenerTail  = regexp.MustCompile(`^-?([A-Z])(\d+)V(\d*)$`)
	groupTail  = regexp.MustCompile(`^-?([A-C])$`)
	rankTail   = regexp.MustCompile(`^-(\d\d)$`)
	voltTail   = regexp.MustCompile(`^-(\d{2,4})(R?)$`)
)

// longestNumber bounds what is looked at; no type number is longer.
const longestNumber = 32

// Grammar says what a type number suggests by its shape alone: the JEDEC, Pro Electron and JIS schemes and the code before them. It knows no
// table: ask [Table.Lookup] first, and [Table.Guess] for both. Nothing is returned for a shape that no scheme has: a house number.
func Grammar(text string) []Guess {
	if len(text) > longestNumber {
		return nil
	}
	s := spell(text)
	var all []Guess
	add := func(g Guess, ok bool) {
		if ok {
			all = append(all, g)
		}
	}
	add(jedec(s))
	add(jis(s))
	add(bareJIS(s))
	add(cut(s))
	add(proElectron(s))
	add(oldCode(s))
	return all
}

// spell brings a marking to capitals without spaces; hyphens stay, since they begin a suffix.
func spell(text string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == ' ' || r == '\t' || r == '\u00a0':
			return -1
		case r == '\u2010' || r == '\u2011' || r == '\u2012' || r == '\u2013' || r == '\u2212':
			return '-'
		case r >= 'a' && r <= 'z':
			return r - 'a' + 'A'
		}
		return r
	}, text)
}

// guess makes a guess of one row of the grammar.
func guess(scheme, key, name, doubt string) (Guess, bool) {
	c, ok := codes()[key]
	if !ok {
		return Guess{}, false
	}
	return Guess{
		Scheme: scheme, Name: name, Is: c.words, Kinds: slices.Clone(c.kinds), Polarity: c.polarity, Material: c.material, Doubt: doubt, Source: c.source,
	}, true
}

func jedec(s string) (Guess, bool) {
	m := jedecShape.FindStringSubmatch(s)
	if m == nil {
		return Guess{}, false
	}
	return guess("JEDEC", "jedec "+m[1], s, "a JEDEC number carries neither function nor material")
}

const jisDoubt = "the letter says neither material nor what it is good for"

func jis(s string) (Guess, bool) {
	if jisDigits.MatchString(s) {
		return Guess{
			Scheme: "JIS", Name: s, Is: "diode", Kinds: []screening.Kind{Diode, Zener}, Doubt: "the number says one junction and no more",
			Source: codes()["jis S"].source,
		}, true
	}
	m := jisShape.FindStringSubmatch(s)
	if m == nil {
		return Guess{}, false
	}
	g, ok := guess("JIS", "jis "+m[2], s, jisDoubt)
	if m[1] == "3" {
		g.Is += " with four terminals"
	}
	return g, ok
}

// bareJIS takes a marking that leaves out 2S, as most do.
func bareJIS(s string) (Guess, bool) {
	m := bareShape.FindStringSubmatch(s)
	if m == nil {
		return Guess{}, false
	}
	return guess("JIS", "jis "+m[1], "2S"+s, "JIS markings leave out 2S, but other makers' numbers begin with the same letter: C106 is a thyristor, J201 an N-channel JFET")
}

// cut takes a marking as a Pro Electron number that lost its first letter: D965 as BD965.
func cut(s string) (Guess, bool) {
	m := bareShape.FindStringSubmatch(s)
	if m == nil || len(m[2]) != 3 || m[1] != "C" && m[1] != "D" {
		return Guess{}, false
	}
	g, ok := proElectron("B" + s)
	g.Doubt = "only if the letter B is cut off the marking"
	return g, ok
}

func proElectron(s string) (Guess, bool) {
	m := proShape.FindStringSubmatch(s)
	if m == nil {
		return Guess{}, false
	}
	material, ok := codes()["pro-material "+m[1]]
	g, found := guess("Pro Electron", "pro-function "+m[2], s,
		"the second letter is a class and no technology (BF245 is a JFET, BS170 a MOSFET), and integrated circuits have names of the same shape (AD811)")
	if !ok || !found {
		return Guess{}, false
	}
	g.Is, g.Material, g.Suffix = material.words+" "+g.Is, material.material, suffixOf(m[2], m[4])
	return g, true
}

// suffixOf words what the end of a Pro Electron number says.
func suffixOf(function, tail string) string {
	switch m := zenerTail.FindStringSubmatch(tail); {
	case m != nil && function == "Z" && m[3] != "":
		return "its suffix reads as " + m[2] + "." + m[3] + " V"
	case m != nil && function == "Z":
		return "its suffix reads as " + m[2] + " V"
	}
	if m := voltTail.FindStringSubmatch(tail); m != nil && function == "Y" {
		text := "its suffix reads as " + m[1] + " V reverse voltage"
		if m[2] != "" {
			text += ", polarity reversed"
		}
		return text
	}
	if m := groupTail.FindStringSubmatch(tail); m != nil && strings.Contains("CDF", function) {
		return "its suffix reads as group " + m[1]
	}
	if m := rankTail.FindStringSubmatch(tail); m != nil && strings.Contains("CD", function) {
		return "its suffix reads as gain group " + m[1]
	}
	return ""
}

// oldCode takes the code that European makers used before Pro Electron: O for no heater, then A or C.
func oldCode(s string) (Guess, bool) {
	m := oldShape.FindStringSubmatch(s)
	if m == nil {
		return Guess{}, false
	}
	key := "old " + m[1]
	if len(m[2]) == 3 && m[2][0] == '2' {
		key += "2" // OA200 and OC200 and their like are silicon
	}
	return guess("the code before Pro Electron", key, s, "germanium almost always; OA200, OC200 and their like are silicon")
}
