package family

import (
	"math"
	"slices"
	"strings"
	"unicode"

	"goodbin/screening"
)

// List says what a family stands on.
type List uint8

// The lists.
const (
	NeverKeep  List = iota // refused whatever it reads, always or in its roles
	NotForAge              // not refused for its age alone
	AlwaysKeep             // the group's own: lifts what the group never keeps, and nothing of the built-in table
)

// String returns the list as CSV files and JSON spell it.
func (l List) String() string {
	return [...]string{"never-keep", "not-for-age", "always-keep"}[min(int(l), 2)]
}

// Dispose says what to do with a part of a refused family.
type Dispose string

// What can be done with a refused part.
const (
	Scrap     Dispose = "scrap"
	Hazardous Dispose = "hazardous" // bag it whole, local rules
	Exhibit   Dispose = "exhibit"   // keep it apart, marked so that it is not used
)

// Family is a set of parts that is refused, or kept, for what it is.
type Family struct {
	ID    string // "oil-filled"
	Label string // "oil-filled capacitors made before July 1979, or of unknown date"
	List  List
	Kinds []screening.Kind

	// Types are patterns of type numbers, folded: ? is a digit, * anything; letters may follow. Traits must all be met, and one of
	// Unless lifts the bar.
	Types  []string
	Traits []TraitMatch
	Unless []TraitMatch
	// Before is the first day of making that is no longer meant; zero where the date does not matter. Undated says that a part without a
	// date that can be read counts as made before.
	Before  Day
	Undated bool
	// Check is what tells the family by eye; its name may be that of a check that the kind has itself, and it then has no question.
	Check screening.Check

	Roles    []string // the positions where it is refused; nil: everywhere
	Position string   // those positions in words, after "not for"
	// Margin, OhmPerVolt and LeastOhm are what must all be met at a position for it not to be refused there: rated over working voltage,
	// and the series resistance in ohms per volt of the rail, at least so many ohms. Zero Margin: nothing lifts it.
	Margin, OhmPerVolt, LeastOhm float64

	Dispose Dispose
	Reason  string
	Do      string
	Source  screening.Source
	House   bool // the user's own

	row string // as read: the family's part of the version
}

// TraitMatch is a trait and the texts that it may have; * in a text stands for anything.
type TraitMatch struct {
	Name  string
	Texts []string
}

// Always reports whether the family is refused everywhere.
func (f *Family) Always() bool { return f.List == NeverKeep && f.Roles == nil }

// Scope says where the family holds: "always", or its roles.
func (f *Family) Scope() string {
	if f.Roles == nil {
		return "always"
	}
	return strings.Join(f.Roles, ", ")
}

// byClaim reports whether the claim alone may tell the family: one told by eye only names no type and no trait.
func (f *Family) byClaim() bool { return f.Types != nil || f.Traits != nil || f.Check.Name == "" }

// Holds reports whether a claim of a kind says that the part is of this family. Of a family that is told by eye alone it is always false.
func (f *Family) Holds(kind screening.Kind, c screening.Claim) bool {
	if !f.byClaim() || !slices.Contains(f.Kinds, kind) {
		return false
	}
	if f.Types != nil && !f.NamesType(c.Trait(screening.TraitType)) {
		return false
	}
	for i := range f.Traits {
		if !f.Traits[i].holds(c) {
			return false
		}
	}
	for i := range f.Unless {
		if f.Unless[i].holds(c) {
			return false
		}
	}
	return f.oldEnough(c)
}

// NamesType reports whether a type number is among those that tell the family; false where it is told by something else.
func (f *Family) NamesType(name string) bool {
	folded := fold(name)
	return folded != "" && slices.ContainsFunc(f.Types, func(pattern string) bool { return matchType(pattern, folded) })
}

func (f *Family) oldEnough(c screening.Claim) bool {
	if f.Before == 0 {
		return true
	}
	made, ok := earliest(c.Trait(screening.TraitDated))
	if !ok {
		return f.Undated
	}
	return made < f.Before
}

func (m *TraitMatch) holds(c screening.Claim) bool {
	text := strings.ToLower(c.Trait(m.Name))
	return text != "" && slices.ContainsFunc(m.Texts, func(pattern string) bool { return glob(pattern, text) })
}

// Position is where a part is to go.
type Position struct {
	Role             string  // its name; "" for nowhere in particular, where only families that are always refused count
	Voltage          float64 // V that stand there; 0 where not stated
	SeriesResistance float64 // Ω between the part and its source; 0 where not stated
}

// meets reports whether a position grants what a family needs; what is not stated is not granted.
func (f *Family) meets(c screening.Claim, at Position) bool {
	rated, ok := c.Nominal(screening.RatedVoltage.Name, "")
	if !ok || f.Margin == 0 || at.Voltage <= 0 {
		return false
	}
	// A rail of exactly half the rated voltage is meant to pass; the factor is for rounding alone.
	return rated >= f.Margin*at.Voltage*(1-1e-9) && at.SeriesResistance >= math.Max(f.LeastOhm, f.OhmPerVolt*at.Voltage)*(1-1e-9)
}

// Barred lists the stops that families give a claimed part at a position, those that hold everywhere included. The group's always-keep
// rows lift the group's never-keep rows and nothing else.
func Barred(families []Family, kind screening.Kind, c screening.Claim, at Position) []screening.Stop {
	var stops []screening.Stop
	kept := groupKeeps(families, kind, c)
	for i := range families {
		f := &families[i]
		if f.List != NeverKeep || f.House && kept || f.Roles != nil && !slices.Contains(f.Roles, at.Role) || !f.Holds(kind, c) {
			continue
		}
		if f.Roles == nil || !f.meets(c, at) {
			stops = append(stops, f.stop())
		}
	}
	return stops
}

// groupKeeps reports whether a row of the group says that it always keeps such a part.
func groupKeeps(families []Family, kind screening.Kind, c screening.Claim) bool {
	return slices.ContainsFunc(families, func(f Family) bool { return f.List == AlwaysKeep && f.Holds(kind, c) })
}

func (f *Family) stop() screening.Stop {
	return screening.Stop{
		Check: "family-" + f.ID, Verdict: screening.Barred, Reason: f.Label + ": " + f.Reason, Do: f.Do, Source: f.Source,
	}
}

// Day is a day as yyyymmdd, so that later days are larger.
type Day int

// String prints the day as 1979-07-02; "" for none.
func (d Day) String() string {
	if d == 0 {
		return ""
	}
	n := int(d)
	digits := [10]byte{4: '-', 7: '-'}
	for _, i := range [...]int{9, 8, 6, 5, 3, 2, 1, 0} {
		digits[i] = byte('0' + n%10)
		n /= 10
	}
	return string(digits[:])
}

// earliest returns the first day on which a part so dated can have been made: "1979-08" is 1 August, "1979" 1 January, "197x" that of 1970.
// It reports false where the text is no such date.
func earliest(text string) (Day, bool) {
	parts := strings.Split(strings.ToLower(strings.TrimSpace(text)), "-")
	if len(parts) > 3 || len(parts[0]) != 4 {
		return 0, false
	}
	year, ok := digitsOf(strings.Replace(parts[0], "x", "0", 1))
	if !ok || year < 1850 || year > 2199 || strings.Contains(parts[0][:3], "x") {
		return 0, false
	}
	month, day := 1, 1
	if len(parts) > 1 {
		if month, ok = digitsOf(parts[1]); !ok || month < 1 || month > 12 {
			return 0, false
		}
	}
	if len(parts) > 2 {
		if day, ok = digitsOf(parts[2]); !ok || day < 1 || day > 31 {
			return 0, false
		}
	}
	return Day(year*10000 + month*100 + day), true
}

func digitsOf(text string) (int, bool) {
	n := 0
	for _, r := range text {
		if r < '0' || r > '9' {
			return 0, false
		}
		n = n*10 + int(r-'0')
	}
	return n, text != "" && len(text) <= 4
}

// fold brings a type number to the form in which it is compared: capitals, without spaces and hyphens of any sort.
func fold(name string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsSpace(r) || unicode.Is(unicode.Pd, r) {
			return -1
		}
		return unicode.ToUpper(r)
	}, name)
}

// matchType reports whether a folded type number is the pattern's, letters after it (a maker's suffix, a gain group) not counting.
func matchType(pattern, folded string) bool {
	for end := len(folded); ; end-- {
		if globWith(pattern, folded[:end], isDigit) {
			return true
		}
		if end == 0 || !isLetter(folded[end-1]) {
			return false
		}
	}
}

func isDigit(c byte) bool  { return c >= '0' && c <= '9' }
func isLetter(c byte) bool { return c >= 'A' && c <= 'Z' }

func glob(pattern, text string) bool { return globWith(pattern, text, nil) }

// globWith matches a text as a whole: * stands for anything; ? for one byte that one accepts, or for itself where one is nil. Its time is
// bounded by the product of the two lengths.
func globWith(pattern, text string, one func(byte) bool) bool {
	p, t, star, from := 0, 0, -1, 0
	for t < len(text) {
		switch {
		case p < len(pattern) && pattern[p] == '*':
			star, from = p, t
			p++
		case p < len(pattern) && (pattern[p] == text[t] || pattern[p] == '?' && one != nil && one(text[t])):
			p++
			t++
		case star >= 0:
			from++
			p, t = star+1, from
		default:
			return false
		}
	}
	return strings.Trim(pattern[p:], "*") == ""
}
