package marking

import (
	_ "embed"
	"errors"
	"math"
	"strconv"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/series"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var (
	//go:embed colours.csv
	coloursCSV string
	//go:embed colour-tolerance.csv
	colourToleranceCSV string
	//go:embed capacitor-colours.csv
	capacitorColoursCSV string
)

// colour is one colour of IEC 60062.
type colour struct {
	name       string
	digit      int // -1 where it is none
	multiplier int // a power of ten
	multiplies bool
	tcr        float64 // ppm/K; 0 where it is none
	tolerances []colourTolerance
	source     screening.Source
}

// colourTolerance is one meaning of a tolerance band.
type colourTolerance struct {
	bands     int // 0 for any number of bands
	tolerance float64
	order     int
	note      string
	source    screening.Source
}

// capacitorColour is what a colour means in one place of one scheme of capacitors.
type capacitorColour struct {
	number float64 // NaN where it is a text
	text   string
	source screening.Source
}

// dotKey names what a colour may mean on a capacitor.
type dotKey struct{ table, what, colour string }

type colourTables struct {
	colours   []colour
	words     map[string]int // a colour's name, code or alias in small letters to its place in colours
	capacitor map[dotKey]*capacitorColour
}

var loadColours = sync.OnceValue(func() *colourTables { return must(readColours(coloursCSV, colourToleranceCSV, capacitorColoursCSV)) })

func readColours(colours, tolerances, capacitors string) (*colourTables, error) {
	t := &colourTables{words: map[string]int{}, capacitor: map[dotKey]*capacitorColour{}}
	named := book.ReadTable("colours.csv", colours)
	for _, r := range named.Rows() {
		c := colour{
			name: r.Required("colour"), digit: int(r.NumberOr("digit", -1)), multiplier: int(r.NumberOr("multiplier", 0)),
			multiplies: r.Has("multiplier"), tcr: r.NumberOr("tcr", 0), source: r.Source(),
		}
		for _, word := range append(strings.Split(r.Text("aliases"), "|"), c.name, r.Text("code")) {
			if word != "" {
				t.words[strings.ToLower(word)] = len(t.colours)
			}
		}
		t.colours = append(t.colours, c)
	}
	bands := book.ReadTable("colour-tolerance.csv", tolerances)
	for _, r := range bands.Rows() {
		i, ok := t.words[r.Required("colour")]
		if !ok {
			r.Errorf("colour", "%q is no colour", r.Text("colour"))
			continue
		}
		t.colours[i].tolerances = append(t.colours[i].tolerances, colourTolerance{
			int(r.Number("bands")), r.Number("tolerance"), int(r.Number("order")), r.Text("note"), r.Source(),
		})
	}
	dots := book.ReadTable("capacitor-colours.csv", capacitors)
	for _, r := range dots.Rows() {
		if _, ok := t.words[r.Required("colour")]; !ok {
			r.Errorf("colour", "%q is no colour", r.Text("colour"))
		}
		key := dotKey{r.Required("scheme"), r.Required("what"), r.Text("colour")}
		if t.capacitor[key] != nil {
			r.Errorf("colour", "stands twice")
		}
		t.capacitor[key] = &capacitorColour{r.NumberOr("number", math.NaN()), r.Text("text"), r.Source()}
	}
	return t, errors.Join(named.Err(), bands.Err(), dots.Err())
}

// maxBands is the most bands or dots that any scheme has.
const maxBands = 6

// colours reads the text as colours; it reports false where it is none.
func (d *decoder) colours() bool {
	t := loadColours()
	if c := d.text[0]; !isLetter(c) {
		return false
	}
	bands, ok := d.bandsOf(t)
	if d.areColours = ok; !ok {
		return false
	}
	d.resistorColours(bands)
	d.capacitorColours(t, bands)
	return true
}

// bandsOf splits the text into colours: words, or codes of two letters that may be joined (BNBKRDGD).
func (d *decoder) bandsOf(t *colourTables) (bands []*colour, ok bool) {
	bands = make([]*colour, 0, maxBands)
	words := strings.FieldsFunc(d.text, func(r rune) bool { return r == ' ' || r == '-' || r == ',' || r == '/' || r == ';' || r == '|' })
	if len(words) == 1 && len(d.text)%2 == 0 && len(d.text) >= 6 {
		if _, ok := t.words[strings.ToLower(d.text)]; !ok {
			words = words[:0]
			for i := 0; i < len(d.text); i += 2 {
				words = append(words, d.text[i:i+2])
			}
		}
	}
	if len(words) == 0 || len(words) > maxBands || len(words) == 1 && len(words[0]) <= 2 {
		return nil, false
	}
	for _, w := range words {
		i, ok := t.words[strings.ToLower(w)]
		if !ok {
			return nil, false
		}
		bands = append(bands, &t.colours[i])
	}
	return bands, true
}

// bandValue is what bands of figures and a multiplier say: figures·10^exponent.
func bandValue(figures []*colour, multiplier *colour) (n float64, exponent int, ok bool) {
	for _, c := range figures {
		if c.digit < 0 {
			return 0, 0, false
		}
		n = n*10 + float64(c.digit)
	}
	return n, multiplier.multiplier, multiplier.multiplies
}

// resistorColours reads bands as a resistor's, in both directions, and the same bands as a choke's.
func (d *decoder) resistorColours(bands []*colour) {
	if len(bands) == 1 && bands[0].name == "black" {
		s := d.value(zeroOhm, 0)
		s.note = "a single black band"
		d.colourMeaning(s, nil, "")
		return
	}
	if len(bands) < 3 {
		return
	}
	d.bandsOneWay(bands, false)
	var buf [maxBands]*colour
	backwards := buf[:len(bands)]
	for i, c := range bands {
		backwards[len(bands)-1-i] = c
	}
	d.bandsOneWay(backwards, true)
}

func (d *decoder) bandsOneWay(bands []*colour, backwards bool) {
	noBand := loadColours().words["none"]
	tolerance, tcr := &loadColours().colours[noBand], (*colour)(nil)
	figures := 2
	switch n := len(bands); {
	case n == 3 || bands[n-1].name == "none" && n == 4:
	case n == 4:
		tolerance = bands[3]
	default:
		figures, tolerance = 3, bands[4]
		if n == 6 {
			tcr = bands[5]
		}
	}
	if n, e, ok := bandValue(bands[:figures], bands[figures]); ok && n > 0 {
		d.bandMeanings(colourOhm, n, e, bands, tolerance, tcr, backwards)
		if len(bands) <= 4 {
			d.bandMeanings(colourHenry, n, e-6, bands, tolerance, nil, backwards)
		}
	}
	if len(bands) != 5 {
		return
	}
	rate, ok := loadColours().capacitor[dotKey{"failure", "rate", bands[4].name}]
	if n, e, fits := bandValue(bands[:2], bands[2]); ok && fits && n > 0 && (bands[3].name == "gold" || bands[3].name == "silver") {
		before := len(d.meanings)
		d.bandMeanings(colourOhmOld, n, e, bands, bands[3], nil, backwards)
		for i := range d.meanings[before:] {
			m := &d.meanings[before+i]
			m.Note = joinNotes("failure rate "+strconv.FormatFloat(rate.number, 'g', -1, 64)+" % per 1000 h", m.Note)
		}
	}
}

// bandMeanings adds a meaning for everything that the tolerance band may mean.
func (d *decoder) bandMeanings(id schemeID, figures float64, e int, bands []*colour, tolerance, tcr *colour, backwards bool) {
	if tcr != nil && tcr.tcr == 0 {
		return
	}
	for i := range tolerance.tolerances {
		t := &tolerance.tolerances[i]
		if t.bands != 0 && t.bands != len(bands) || id == colourHenry && (t.bands != 0 || t.order != 0) {
			continue
		}
		s := d.value(id, scaled(figures, e))
		s.low, s.high = tidy(s.value*(1-t.tolerance)), tidy(s.value*(1+t.tolerance))
		s.note = t.note
		if weaker(t.source.Status, s.source.Status) {
			s.source = &t.source
		}
		var why string
		s.rank, why = bandRank(id, bands, s.value, t, backwards)
		var parts []Part
		if tcr != nil {
			parts = []Part{{
				Text: tcr.name, Says: "±" + strconv.FormatFloat(tcr.tcr, 'g', -1, 64) + " ppm/K", Of: OfTemperatureCoefficient,
				Scheme: s.scheme.name, Source: tcr.source,
			}}
		}
		s.word = toleranceWord(-t.tolerance, t.tolerance)
		d.colourMeaning(s, parts, why)
	}
}

// bandRank says how far a reading of bands stands behind, and why: a tolerance that is disputed with so many bands, the other direction, a
// first band that hardly any part has, and above all a value of no series that its tolerance goes with.
func bandRank(id schemeID, bands []*colour, value float64, t *colourTolerance, backwards bool) (rank int, why string) {
	const (
		otherEnd    = 4
		rareWidth   = 8
		noSuch      = 20
		blackFirst  = 30
		fewDisputed = disputed / 2 // with four bands the older meanings are nearly as likely
	)
	n := len(bands)
	why = strconv.Itoa(n) + " bands, read as typed"
	if rank = fewDisputed * t.order; n >= 5 {
		rank = disputed * t.order
	}
	if backwards {
		rank += otherEnd
		why = strconv.Itoa(n) + " bands, read from the other end"
	}
	if bands[0].digit == 0 {
		rank += blackFirst
		why += "; black as the first band is unusual"
	}
	if n >= 5 && id == colourOhm && t.tolerance > 0.02 {
		rank += rareWidth
		why += "; 5 bands with a wide tolerance are rare"
	}
	if coarsest := series.Coarsest(value); coarsest == 0 || coarsest > 24 && (t.tolerance > 0.02 || n < 5) {
		rank += noSuch
	}
	return rank, why
}

// colourMeaning adds one meaning of colours.
func (d *decoder) colourMeaning(s saying, parts []Part, why string) {
	if beyond(&s) {
		return
	}
	m := Meaning{
		Of: s.of, Value: s.value, Low: s.low, High: s.high, Unit: s.unit, Scheme: s.scheme.name, Source: *s.source,
		Why: why, Note: s.note, Parts: parts, rank: s.scheme.rank + s.rank,
	}
	if why == "" {
		m.Why = s.scheme.why
	}
	if s.value > 0 {
		m.Words = append(m.Words, valueWord(s.value, s.unit))
		if s.word != "" {
			m.Words = append(m.Words, s.word)
		}
	}
	for _, p := range parts {
		if p.Of == screening.RatedVoltage.Name {
			m.Words = append(m.Words, valueWord(voltsOf(p), quantity.Volt))
		}
	}
	d.rankValue(&m, &s)
	kinds := d.made(&m, s.kinds, &s)
	m.Kinds = kinds.names()
	if d.hint != 0 && kinds&d.hint == 0 {
		m.rank += notOfThisKind
		m.Why = "not on the kind of part that was named; " + m.Why
	}
	d.keep(m)
}
