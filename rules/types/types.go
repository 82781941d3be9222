// Package types is the table of type numbers: what a part's name promises. Its rows stand in CSV files whose headers are the command
// line's names, each with its source and status; this package reads them and finds the row that a marking means.
//
// A type number is looked up, never guessed from its grammar: "2N" says three terminals and nothing else, AD811 has the shape of a
// germanium power transistor and is an amplifier. What the table does not hold is unknown.
package types

import (
	"math"
	"slices"
	"strings"
	"unicode"

	"goodbin/screening"
)

// The kinds of part that the table serves.
const (
	Bipolar screening.Kind = "bipolar"
	Diode   screening.Kind = "diode"
	Zener   screening.Kind = "zener"
)

// Row is what one type number promises.
type Row struct {
	Kind  screening.Kind
	Alias string // another name of the same row; "" for none
	Type  string // as the sheet prints it: "BC547", "BZX79-C5V1"
	Group string // the gain group that the word looked up ended in; "" for none

	// Ratings are the numbers by their command-line names, each with its own source. A rating that a sheet states at several conditions
	// stands there several times, the test condition first.
	//
	// Bipolar: vceo vcbo vebo ic-max ptot hfe ft icbo. Diode: vrrm if-av ifsm vf ir trr. Zener: vz (nominal with its printed bounds, at
	// current izt), zz (at izt, then at the knee current), ir, izm, ptot.
	Ratings []screening.Rating
	// Traits are type, and where the sheet says so polarity, material, technology, case, pinout, group.
	Traits []screening.Trait
	// Points are further figures that the sheet prints: gain at other currents, open-base leakage, base-emitter voltage.
	Points []screening.Rating
	// Groups are the gain groups of this type, lowest first.
	Groups []Group

	Darlington bool
	// LeakageAs says how the sheet states the collector cut-off current: "icbo" (emitter open), "icex" (base reverse-biased), or "".
	LeakageAs string
	// TempCoLow and TempCoHigh bound the relative change of a Zener's voltage per kelvin; NaN where the sheet was not kept.
	TempCoLow, TempCoHigh float64

	Note   string
	Source screening.Source // of the row as a whole; single figures may differ
	// House marks a row of the user's own table, or a built-in row that one of those changes.
	House bool
}

// Group is one gain group of one type. The same letter means another range on another type.
type Group struct {
	Name  string // as printed, without its hyphen: "B", "25", "GR"
	Alias string // another print of the same group; "" for none
	Gain  screening.Rating
	// Points are the group's own minima at other currents.
	Points []screening.Rating
	Note   string
}

// Rating returns the first rating of a name, the one at the sheet's test condition.
func (r Row) Rating(of screening.Characteristic) (screening.Rating, bool) {
	i := slices.IndexFunc(r.Ratings, func(x screening.Rating) bool { return x.Of == of })
	if i < 0 {
		return screening.Rating{}, false
	}
	return r.Ratings[i], true
}

// Trait returns the text of a trait, "" where the row has none.
func (r Row) Trait(name string) string { return screening.Claim{Traits: r.Traits}.Trait(name) }

// FindGroup finds one of the type's gain groups by its name or alias; case and a leading hyphen do not count.
func (r Row) FindGroup(name string) (Group, bool) {
	want := fold(name)
	for _, g := range r.Groups {
		if want != "" && (want == fold(g.Name) || want == fold(g.Alias)) {
			return g, true
		}
	}
	return Group{}, false
}

// shortestType is the length of the shortest name that may carry a suffix; the built-in ones have four letters and more (OC71).
const shortestType = 3

// Fold brings a type number to the form in which two are compared: capitals, without spaces and hyphens.
func Fold(name string) string { return fold(name) }

// fold brings a name to the form in which names are compared: capitals, without spaces and hyphens of any sort.
func fold(name string) string {
	if isFolded(name) {
		return name
	}
	return strings.Map(func(r rune) rune {
		if unicode.IsSpace(r) || unicode.Is(unicode.Pd, r) {
			return -1
		}
		return unicode.ToUpper(r)
	}, name)
}

func isFolded(name string) bool {
	for i := range len(name) {
		if c := name[i]; (c < 'A' || c > 'Z') && (c < '0' || c > '9') {
			return false
		}
	}
	return true
}

// otherTolerance serves the tolerance letters for which a sheet prints a rule rather than a table. The bounds are the nominal and the
// printed tolerance; everything else is the row's.
func (t *content) otherTolerance(folded string) (Row, bool) {
	for _, s := range toleranceSuffixes {
		base, ok := s.base(folded)
		if !ok {
			continue
		}
		i, ok := t.byName[Zener][fold(base)]
		if !ok {
			continue
		}
		row := t.rows[Zener][i]
		row.Ratings = slices.Clone(row.Ratings)
		row.Type = s.name(row.Type)
		row.Traits = screening.Claim{Traits: row.Traits}.WithTrait(screening.TraitType, row.Type).Traits
		for j, r := range row.Ratings {
			if r.Of == "vz" {
				r.Low, r.High = r.Nominal*(1-s.tolerance), r.Nominal*(1+s.tolerance)
				r.Source = s.source
				row.Ratings[j] = r
			}
		}
		row.Note = s.source.Clause
		return row, true
	}
	return Row{}, false
}

// toleranceSuffix is one letter of a Zener family and what it promises.
type toleranceSuffix struct {
	prefix    string // of the family, folded
	letter    string // "" for none
	after     bool   // the letter ends the number (1N4733C) rather than standing before the voltage (BZX79-B5V1)
	tolerance float64
	source    screening.Source
}

var toleranceSuffixes = []toleranceSuffix{
	{"1N47", "", true, 0.10, oneN47("no suffix is ±10 %")},
	{"1N47", "C", true, 0.02, oneN47("suffix C is ±2 %")},
	{"1N47", "D", true, 0.01, oneN47("suffix D is ±1 %")},
	// The printed tables of these letters are rounded, as that of C is, so the bounds are near and not the sheet's own.
	{"BZX79", "B", false, 0.02, bzx("letter B is ±2 %; the sheet rounds its table")},
	{"BZX79", "F", false, 0.03, bzx("letter F is ±3 %; the sheet rounds its table")},
	{"BZX55", "B", false, 0.02, bzx("letter B is ±2 %; the sheet rounds its table")},
}

func oneN47(clause string) screening.Source {
	return screening.Source{Document: "Fairchild 1N4728A-1N4764A data sheet", Clause: clause, Status: screening.Published}
}

func bzx(clause string) screening.Source {
	return screening.Source{Document: "BZX79 and BZX55 data sheets", Clause: clause, Status: screening.Derived}
}

// base returns the table's name for a folded word that carries this suffix: suffix A after a number, letter C before a voltage.
func (s toleranceSuffix) base(folded string) (string, bool) {
	rest, ok := strings.CutPrefix(folded, s.prefix)
	if !ok {
		return "", false
	}
	if s.after {
		rest, ok = strings.CutSuffix(rest, s.letter)
		return s.prefix + rest + "A", ok && rest != "" && rest[len(rest)-1] >= '0' && rest[len(rest)-1] <= '9'
	}
	rest, ok = strings.CutPrefix(rest, s.letter)
	return s.prefix + "C" + rest, ok
}

// name turns the table's type into the suffixed one.
func (s toleranceSuffix) name(tabled string) string {
	if s.after {
		return strings.TrimSuffix(tabled, "A") + s.letter
	}
	return strings.Replace(tabled, "-C", "-"+s.letter, 1)
}

// notGiven is an empty cell of a table.
var notGiven = math.NaN()
