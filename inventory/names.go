package inventory

import (
	"fmt"
	"slices"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Enumerations are stored by the names below, never by their numbers in code. A name once written to a file stays.

var unitNames = map[quantity.Unit]string{
	quantity.One: "1", quantity.Ratio: "ratio", quantity.Farad: "F", quantity.Ohm: "ohm", quantity.Volt: "V", quantity.Ampere: "A",
	quantity.Hertz: "Hz", quantity.Celsius: "degC", quantity.Second: "s", quantity.Henry: "H", quantity.Watt: "W",
	quantity.Metre: "m", quantity.Coulomb: "C",
}

var senseNames = map[quantity.Sense]string{
	quantity.Exactly: "exactly", quantity.AtLeast: "at-least", quantity.AtMost: "at-most",
}

var gradeNames = map[screening.Grade]string{
	screening.AnyGrade: "", screening.Serviceable: "serviceable", screening.WithinSpec: "within-spec",
}

var honestyWords = map[Honesty]string{Exact: "", About: "about", Unknown: "unknown"}

// storedVerdicts gives verdicts the byte by which the indexes know them: the place in this list. Only ever append to it.
var storedVerdicts = [...]screening.Verdict{
	screening.NoVerdict, screening.Accept, screening.Regrade, screening.Treat, screening.Undecided, screening.Barred, screening.Reject,
}

func verdictByte(v screening.Verdict) byte { return place(storedVerdicts[:], v) }

func verdictOf(b byte) screening.Verdict { return at(storedVerdicts[:], b) }

// inverse turns a table of names round.
func inverse[T comparable](names map[T]string) map[string]T {
	back := make(map[string]T, len(names))
	for v, name := range names {
		back[name] = v
	}
	return back
}

var (
	unitsByName   = inverse(unitNames)
	sensesByName  = inverse(senseNames)
	gradesByName  = inverse(gradeNames)
	honestyByWord = inverse(honestyWords)
)

// named finds the value of a stored name; an unknown one comes from a newer program or from damage that the checksum missed.
func named[T any](table map[string]T, what, name string) (T, error) {
	v, ok := table[name]
	if !ok {
		return v, fmt.Errorf("%w: unknown %s %q", errVersion, what, name)
	}
	return v, nil
}

// The bytes of grade and honesty in a row: the place in these lists. Only ever append to them.
var (
	storedGrades  = [...]screening.Grade{screening.AnyGrade, screening.Serviceable, screening.WithinSpec}
	storedHonesty = [...]Honesty{Exact, About, Unknown}
)

func gradeByte(g screening.Grade) byte { return place(storedGrades[:], g) }

func gradeOf(b byte) screening.Grade { return at(storedGrades[:], b) }

func honestyByte(h Honesty) byte { return place(storedHonesty[:], h) }

func honestyOf(b byte) Honesty { return at(storedHonesty[:], b) }

func place[T comparable](list []T, x T) byte { return byte(max(0, slices.Index(list, x))) }

func at[T any](list []T, b byte) T { return list[min(int(b), len(list)-1)] }
