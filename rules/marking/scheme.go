package marking

import (
	_ "embed"
	"fmt"
	"math"
	"slices"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// schemeID names a row of schemes.csv.
type schemeID uint8

const (
	unitScheme schemeID = iota
	oldUnit
	rkmOhm
	rkmOhmOld
	rkmOhmLead
	rkmFarad
	rkmFaradCapital
	rkmFaradCyrillic
	pointPF
	pointUH
	rkmHenry
	code3Farad
	code3High
	code3Ohm
	code3Henry
	code3Volt
	code4Ohm
	code4Farad
	code4Reversed
	lowOhm
	eia96
	chipFarad
	plainUF
	plainUFCan
	plainPF
	plainOhm
	thousandPF
	zeroOhm
	voltageCode
	voltageLetter
	toleranceLetter
	class1
	class1Name
	class2
	dielectricLetters
	interference
	colourOhm
	colourOhmOld
	colourHenry
	colourBead
	colourMica6
	colourMicaOld
	colourMica3
	colourPaper
	colourCeramic
	colourCeramicDots
	colourPolyester
	dateYYWW
	dateWWYY
	dateYear
	dateTwo
	dateLetterWeek
	dateDigitMonth
	dateTenYear
	dateYWW
	dateOne
	dateSource
	dateSleeve
	schemeCount
)

// schemeNames are the ids of schemes.csv in the order of the constants.
var schemeNames = [schemeCount]string{
	"unit", "old-unit", "rkm-ohm", "rkm-ohm-old", "rkm-ohm-lead", "rkm-farad", "rkm-farad-capital", "rkm-farad-cyrillic", "point-pf",
	"point-uh", "rkm-henry", "code3-farad", "code3-high", "code3-ohm", "code3-henry", "code3-volt", "code4-ohm", "code4-farad",
	"code4-reversed", "low-ohm", "eia-96", "chip-farad", "plain-uf", "plain-uf-can", "plain-pf", "plain-ohm", "thousand-pf", "zero-ohm",
	"voltage-code", "voltage-letter", "tolerance-letter", "class-1", "class-1-name", "class-2", "dielectric", "interference", "colour-ohm",
	"colour-ohm-old", "colour-henry", "colour-bead", "colour-mica-6", "colour-mica-old", "colour-mica-3", "colour-paper", "colour-ceramic",
	"colour-ceramic-dots", "colour-polyester", "date-yyww", "date-wwyy", "date-year", "date-two", "date-letter-week", "date-digit-month",
	"date-ten-year", "date-yww", "date-one", "date-source", "date-sleeve",
}

// scheme is one way in which parts are marked.
type scheme struct {
	name      string
	of        screening.Characteristic
	unit      quantity.Unit
	kinds     kindSet // 0 for any
	rank      int     // lower is likelier
	low, high float64 // SI: the range of usual values; NaN where there is none
	why, note string
	source    screening.Source
}

// kindSet is a set of the kinds in kindOrder; 0 stands for any kind.
type kindSet uint16

// kindOrder lists the kinds of part whose markings are read here, in the order in which they are named.
var kindOrder = [...]screening.Kind{
	"electrolytic", "tantalum", "polymer", "film", "paper", "mica", "ceramic", "mains-capacitor", "variable-capacitor", "resistor",
	"potentiometer", "thermistor", "varistor", "inductor",
}

const (
	capacitorKinds kindSet = 1<<9 - 1
	resistorKinds  kindSet = 1<<9 | 1<<10 | 1<<11
	mainsKind      kindSet = 1 << 7
	variableKind   kindSet = 1 << 8
)

func kindBit(kind screening.Kind) kindSet {
	if i := slices.Index(kindOrder[:], kind); i >= 0 {
		return 1 << i
	}
	return 0
}

// names lists the kinds of a set; nil for any.
func (k kindSet) names() []screening.Kind {
	if k == 0 {
		return nil
	}
	names := make([]screening.Kind, 0, 4)
	for i, kind := range kindOrder {
		if k&(1<<i) != 0 {
			names = append(names, kind)
		}
	}
	return names
}

// both returns the kinds in both sets, where 0 stands for any; ok is false where there is none.
func both(a, b kindSet) (k kindSet, ok bool) {
	if a == 0 || b == 0 {
		return a | b, true
	}
	return a & b, a&b != 0
}

func readKinds(r book.Row) kindSet {
	var set kindSet
	for _, word := range strings.Fields(r.Text("kinds")) {
		switch bit := kindBit(screening.Kind(word)); {
		case word == "capacitors":
			set |= capacitorKinds
		case word == "resistors":
			set |= resistorKinds
		case bit == 0:
			r.Errorf("kinds", "%q is no kind whose markings are known here", word)
		default:
			set |= bit
		}
	}
	return set
}

// units of what a marking can be of.
var unitOf = map[screening.Characteristic]quantity.Unit{
	screening.Capacitance.Name: quantity.Farad, screening.Resistance.Name: quantity.Ohm, inductance: quantity.Henry,
	screening.RatedVoltage.Name: quantity.Volt, varistorVoltage: quantity.Volt, screening.Tolerance.Name: quantity.Ratio,
	screening.Power.Name: quantity.Watt, OfCapacitanceChange: quantity.Ratio, OfTemperatureCoefficient: quantity.One, OfDate: quantity.One,
	OfDielectric: quantity.One, OfClass: quantity.One,
}

//go:embed schemes.csv
var schemesCSV string

func readSchemes(text string) (*[schemeCount]scheme, error) {
	var all [schemeCount]scheme
	t := book.ReadTable("schemes.csv", text)
	for _, r := range t.Rows() {
		i := slices.Index(schemeNames[:], r.Required("id"))
		if i < 0 {
			r.Errorf("id", "%q is no scheme that the program reads", r.Text("id"))
			continue
		}
		if all[i].name != "" {
			r.Errorf("id", "%q stands twice", r.Text("id"))
		}
		s := scheme{
			name: r.Required("scheme"), of: screening.Characteristic(r.Required("of")), kinds: readKinds(r), rank: int(r.Number("rank")),
			low: r.NumberOr("low", math.NaN()), high: r.NumberOr("high", math.NaN()), why: r.Text("why"), note: r.Text("note"), source: r.Source(),
		}
		unit, known := unitOf[s.of]
		if !known {
			r.Errorf("of", "%q is nothing that a marking can be of", s.of)
		}
		s.unit = unit
		all[i] = s
	}
	for i, name := range schemeNames {
		if all[i].name == "" {
			return nil, fmt.Errorf("schemes.csv: no row for %s; %w", name, t.Err())
		}
	}
	return &all, t.Err()
}

// schemes returns the table of schemes.
var schemes = sync.OnceValue(func() *[schemeCount]scheme { return must(readSchemes(schemesCSV)) })

// must hands over an embedded table; that it can be read is tested.
func must[T any](table T, err error) T {
	if err != nil {
		panic("marking: embedded table: " + err.Error())
	}
	return table
}
