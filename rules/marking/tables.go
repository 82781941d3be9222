package marking

import (
	_ "embed"
	"errors"
	"math"
	"slices"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var (
	//go:embed tolerance.csv
	toleranceCSV string
	//go:embed voltage.csv
	voltageCSV string
	//go:embed ceramic.csv
	ceramicCSV string
	//go:embed ceramic-names.csv
	ceramicNamesCSV string
	//go:embed dielectrics.csv
	dielectricsCSV string
	//go:embed interference.csv
	interferenceCSV string
	//go:embed chip.csv
	chipCSV string
	//go:embed units.csv
	unitsCSV string
	//go:embed years.csv
	yearsCSV string
	//go:embed old-values.csv
	oldValuesCSV string
	//go:embed eia96.csv
	eia96CSV string
	//go:embed kind-ranges.csv
	kindRangesCSV string
)

// letterTolerance is one meaning of a tolerance letter.
type letterTolerance struct {
	kinds     kindSet // 0 for any
	low, high float64 // ratios; both 0 where only pf is meant
	pf        float64 // half-width in pF below 10 pF; 0 where the letter keeps to ratios
	order     int     // 0 where every list agrees
	says      string
	below     string // what it is below 10 pF, in words, where that differs
	note      string
	source    screening.Source
}

// volts is what a voltage code stands for.
type volts struct {
	volts  float64
	source screening.Source
}

// The positions of a character in a temperature code: three of class 1, three of class 2 and 3.
const (
	figurePosition = iota
	multiplierPosition
	tolerancePosition
	lowestPosition
	highestPosition
	changePosition
	positions
)

var positionNames = [positions]string{"figure", "multiplier", "tolerance", "lowest", "highest", "change"}

// ceramicLetter is one meaning of a character in a temperature code.
type ceramicLetter struct {
	low, high float64
	order     int
	note      string
	source    screening.Source
}

// ceramicName is a temperature characteristic with a name of its own.
type ceramicName struct {
	code      string // of class 1; "" where low and high count
	change    bool   // a change over temperature as ratios, else ppm/K
	low, high float64
	note      string
	source    screening.Source
}

type dielectricName struct {
	text, word, mains, note string
	kinds                   kindSet
	order                   int
	source                  screening.Source
}

type interferenceClass struct {
	says   string
	source screening.Source
}

type chipLetter struct {
	figures int // 10 to 99
	order   int
	note    string
	source  screening.Source
}

// unitWord is one meaning of a word behind a number.
type unitWord struct {
	of       screening.Characteristic // with acVoltage for alternating volts
	unit     quantity.Unit
	figure   float64
	exponent int
	scheme   schemeID
	order    int
	note     string
	source   screening.Source
}

const acVoltage screening.Characteristic = "ac-voltage"

// kindRange is the values that a kind is made in, SI.
type kindRange struct{ low, high float64 }

type yearLetter struct {
	year   int
	note   string
	source screening.Source
}

// tables are all tables of letters, codes and words.
type tables struct {
	tolerance [128][]letterTolerance
	codes     map[string]*volts // "2A"
	pattern   [128]volts        // the letter of a code that no list prints: the figure that 10^digit multiplies
	single    [128]volts        // a letter on solid tantalum
	rated     map[float64]*screening.Source

	ceramic      [positions][128][]ceramicLetter
	ceramicNames map[string]*ceramicName
	pairs        map[string]bool // codes of class 1 that have a name such as N750
	dielectrics  map[string][]dielectricName
	interference map[string]*interferenceClass
	chip         [128][]chipLetter
	eia96        [128]*int // powers of ten
	units        map[string][]unitWord
	years        [128]yearLetter
	ranges       [len(kindOrder)]kindRange // of capacitors, by their place in kindOrder
	old          [1000]bool                // by the three figures of an old preferred value
}

// load returns the tables.
var load = sync.OnceValue(func() *tables { return must(readTables()) })

func readTables() (*tables, error) {
	var t tables
	return &t, errors.Join(
		t.readTolerance(toleranceCSV), t.readVoltage(voltageCSV), t.readCeramic(ceramicCSV), t.readCeramicNames(ceramicNamesCSV),
		t.readDielectrics(dielectricsCSV), t.readInterference(interferenceCSV), t.readChip(chipCSV), t.readUnits(unitsCSV),
		t.readYears(yearsCSV), t.readOldValues(oldValuesCSV), t.readKindRanges(kindRangesCSV),
		t.readEIA96(eia96CSV),
	)
}

// character returns a cell of one ASCII character.
func character(r book.Row, column string) byte {
	s := r.Required(column)
	if len(s) != 1 || s[0] >= 128 {
		r.Errorf(column, "%q is no single character", s)
		return 0
	}
	return s[0]
}

func (t *tables) readTolerance(text string) error {
	csv := book.ReadTable("tolerance.csv", text)
	for _, r := range csv.Rows() {
		l := letterTolerance{
			low: r.NumberOr("low", 0), high: r.NumberOr("high", 0), pf: r.NumberOr("pf", 0), order: int(r.Number("order")),
			note: r.Text("note"), source: r.Source(),
		}
		switch r.Required("for") {
		case "any":
		case "capacitor":
			l.kinds = capacitorKinds
		case "resistor":
			l.kinds = resistorKinds
		default:
			r.Errorf("for", "%q is not any, capacitor or resistor", r.Text("for"))
		}
		if l.low >= l.high && l.pf <= 0 || l.low > 0 {
			r.Errorf("high", "is not above low, or low is above the nominal value")
		}
		if l.says = toleranceText(l.low, l.high); l.low == l.high {
			l.says = "±" + quantity.Short(l.pf*1e-12, quantity.Farad) + " below 10 pF"
		} else if l.pf > 0 {
			l.below = "below 10 pF it is ±" + quantity.Short(l.pf*1e-12, quantity.Farad)
		}
		c := character(r, "letter")
		t.tolerance[c] = append(t.tolerance[c], l)
	}
	return csv.Err()
}

func (t *tables) readVoltage(text string) error {
	csv := book.ReadTable("voltage.csv", text)
	t.codes, t.rated = map[string]*volts{}, map[float64]*screening.Source{}
	for _, r := range csv.Rows() {
		code, v := r.Required("code"), volts{r.Number("volts"), r.Source()}
		if !(v.volts > 0) {
			r.Errorf("volts", "is not above zero")
		}
		switch r.Required("use") {
		case "code":
			t.codes[code] = &v
		case "pattern":
			t.pattern[character(r, "code")] = v
		case "single":
			t.single[character(r, "code")] = v
		case "rated":
			t.rated[v.volts] = &v.source
		default:
			r.Errorf("use", "%q is not code, pattern, single or rated", r.Text("use"))
		}
	}
	return csv.Err()
}

func (t *tables) readCeramic(text string) error {
	csv := book.ReadTable("ceramic.csv", text)
	for _, r := range csv.Rows() {
		l := ceramicLetter{r.Number("low"), r.Number("high"), int(r.Number("order")), r.Text("note"), r.Source()}
		position := slices.Index(positionNames[:], r.Required("position"))
		if position < 0 {
			r.Errorf("position", "%q is no position in a code", r.Text("position"))
			continue
		}
		c := character(r, "character")
		t.ceramic[position][c] = append(t.ceramic[position][c], l)
	}
	return csv.Err()
}

func (t *tables) readCeramicNames(text string) error {
	csv := book.ReadTable("ceramic-names.csv", text)
	t.ceramicNames, t.pairs = map[string]*ceramicName{}, map[string]bool{"C0G": true}
	for _, r := range csv.Rows() {
		n := &ceramicName{
			code: r.Text("code"), change: r.Required("kind") == "change", low: r.NumberOr("low", 0), high: r.NumberOr("high", 0),
			note: r.Text("note"), source: r.Source(),
		}
		if n.code == "" && n.low >= n.high {
			r.Errorf("high", "is not above low, and there is no code")
		}
		name := r.Required("name")
		t.ceramicNames[name] = n
		if name[0] == 'P' || name[0] == 'N' {
			t.pairs[n.code] = isDigit(name[1]) || t.pairs[n.code]
		}
	}
	return csv.Err()
}

func (t *tables) readDielectrics(text string) error {
	csv := book.ReadTable("dielectrics.csv", text)
	t.dielectrics = map[string][]dielectricName{}
	for _, r := range csv.Rows() {
		letters, bit := r.Required("letters"), kindBit(screening.Kind(r.Required("kind")))
		if bit == 0 {
			r.Errorf("kind", "%q is no kind whose markings are known here", r.Text("kind"))
		}
		t.dielectrics[letters] = append(t.dielectrics[letters], dielectricName{
			text: r.Required("text"), word: r.Text("word"), mains: r.Text("mains"), note: r.Text("note"), kinds: bit | mainsKind, order: int(r.Number("order")),
			source: r.Source(),
		})
	}
	return csv.Err()
}

func (t *tables) readInterference(text string) error {
	csv := book.ReadTable("interference.csv", text)
	t.interference = map[string]*interferenceClass{}
	for _, r := range csv.Rows() {
		class := r.Required("class")
		says := "class " + class + ", " + r.Required("place") + "; impulse " + r.Required("impulse")
		t.interference[class] = &interferenceClass{says, r.Source()}
	}
	return csv.Err()
}

func (t *tables) readChip(text string) error {
	csv := book.ReadTable("chip.csv", text)
	for _, r := range csv.Rows() {
		l := chipLetter{int(r.Number("figures")*10 + 0.5), int(r.Number("order")), r.Text("note"), r.Source()}
		if l.figures < 10 || l.figures > 99 {
			r.Errorf("figures", "does not lie between 1.0 and 9.9")
		}
		c := character(r, "letter")
		t.chip[c] = append(t.chip[c], l)
	}
	return csv.Err()
}

func (t *tables) readEIA96(text string) error {
	csv := book.ReadTable("eia96.csv", text)
	for _, r := range csv.Rows() {
		r.Source()
		power := int(r.Number("power"))
		t.eia96[character(r, "letter")] = &power
	}
	return csv.Err()
}

func (t *tables) readUnits(text string) error {
	csv := book.ReadTable("units.csv", text)
	t.units = map[string][]unitWord{}
	for _, r := range csv.Rows() {
		w := unitWord{
			of: screening.Characteristic(r.Required("of")), figure: r.Number("figure"), exponent: int(r.Number("exponent")),
			order: int(r.Number("order")), note: r.Text("note"), source: r.Source(),
		}
		switch r.Required("scheme") {
		case "unit":
			w.scheme = unitScheme
		case "old-unit":
			w.scheme = oldUnit
		default:
			r.Errorf("scheme", "%q is not unit or old-unit", r.Text("scheme"))
		}
		unit, ok := unitOf[w.of]
		if w.of == acVoltage {
			unit, ok = quantity.Volt, true
		}
		if !ok || !(w.figure > 0) {
			r.Errorf("of", "%q is nothing that a marking can be of, or the figure is not above zero", w.of)
		}
		w.unit = unit
		word := r.Required("word")
		t.units[word] = append(t.units[word], w)
	}
	return csv.Err()
}

func (t *tables) readYears(text string) error {
	csv := book.ReadTable("years.csv", text)
	for _, r := range csv.Rows() {
		c := character(r, "letter")
		if t.years[c].year != 0 {
			r.Errorf("letter", "stands twice")
		}
		t.years[c] = yearLetter{int(r.Number("year")), r.Text("note"), r.Source()}
	}
	return csv.Err()
}

func (t *tables) readOldValues(text string) error {
	csv := book.ReadTable("old-values.csv", text)
	for _, r := range csv.Rows() {
		r.Source()
		figures := int(math.Round(100 * r.Number("figures")))
		if figures < 100 || figures > 999 {
			r.Errorf("figures", "does not lie between 1.00 and 9.99")
			continue
		}
		t.old[figures] = true
	}
	return csv.Err()
}

func (t *tables) readKindRanges(text string) error {
	csv := book.ReadTable("kind-ranges.csv", text)
	for _, r := range csv.Rows() {
		r.Source()
		i := slices.Index(kindOrder[:], screening.Kind(r.Required("kind")))
		if i < 0 || !(r.Number("low") < r.Number("high")) {
			r.Errorf("kind", "%q is no kind whose markings are known here, or its range is empty", r.Text("kind"))
			continue
		}
		t.ranges[i] = kindRange{r.Number("low"), r.Number("high")}
	}
	return csv.Err()
}
