package marking

import (
	"strings"
	"time"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// What a meaning can be of besides a characteristic of the part.
const (
	// OfDate is the date of manufacture: the candidates are in Dates.
	OfDate screening.Characteristic = "date"
	// OfDielectric is what the part is made of, in words.
	OfDielectric screening.Characteristic = "dielectric"
	// OfClass is the interference class of a mains capacitor, in words.
	OfClass screening.Characteristic = "class"
	// OfTemperatureCoefficient is relative change per kelvin.
	OfTemperatureCoefficient screening.Characteristic = "temperature-coefficient"
	// OfCapacitanceChange is the change over the temperature range of a class 2 or 3 ceramic, as a ratio.
	OfCapacitanceChange screening.Characteristic = "capacitance-change"
)

// Meaning is one thing that a marking may say.
type Meaning struct {
	Of    screening.Characteristic // capacitance, resistance, inductance, voltage, tolerance…, or one of the Of constants
	Value float64                  // SI; NaN where only bounds or only words are meant
	Low   float64                  // SI, the least that the tolerance allows; NaN where open or unknown
	High  float64                  // SI; NaN where open or unknown
	Unit  quantity.Unit
	Text  string // in words, where numbers do not say it: "PET film, metallised"

	Dates []Date           // every candidate, the latest first; with OfDate, or where a date stands beside a value
	Kinds []screening.Kind // the kinds of part that carry this; nil for any
	Words []string         // what it claims, as words of the command line for any of Kinds; nil where it claims nothing definite

	Scheme string           // the name of the scheme: "three-digit code"
	Source screening.Source // where the scheme is described; of several pieces, the one known least well
	Why    string           // why it stands where it does in the order
	Note   string           // traps and conflicts; "" where there are none
	Parts  []Part           // the pieces of the print, where there are several

	rank int // lower is likelier
}

// Part is one piece of a print, and what it says by itself.
type Part struct {
	Text   string // as printed: "J"
	Says   string // in words: "±5 %"
	Of     screening.Characteristic
	Scheme string
	Source screening.Source
}

// Date is a date of manufacture as far as a code tells it.
type Date struct {
	Year  int
	Month int // 1 to 12; 0 where the code has none
	Week  int // 1 to 53; 0 where the code has none
}

// Options are what is known besides the print.
type Options struct {
	Now  time.Time      // no date after it is a candidate; it must be set
	Kind screening.Kind // what the part seems to be: meanings that it can carry stand first; "" where unknown
}

// Decode returns every meaning of what is printed on a part, the likeliest first. Colours are words ("brown black red gold"). The error
// is an [*Error]: the text has no meaning in any scheme, or it is no print at all. It is a pure function of its arguments.
func Decode(text string, opt Options) ([]Meaning, error) {
	folded, refused, cyrillic := fold(text)
	if refused != "" {
		return nil, &Error{Text: text, Problem: refused}
	}
	d := newDecoder(folded, cyrillic, opt)
	if meanings := d.read(); len(meanings) > 0 {
		return meanings, nil
	}
	if capitals := strings.ToUpper(folded); capitals != folded {
		if meanings := newDecoder(capitals, cyrillic, opt).read(); len(meanings) > 0 {
			for i := range meanings {
				meanings[i].Note = joinNotes("read in capitals", meanings[i].Note)
			}
			return meanings, nil
		}
	}
	return nil, &Error{Text: text, Problem: "is no marking that is known here", Tried: d.tried()}
}
