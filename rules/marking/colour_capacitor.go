package marking

import (
	"math"
	"strconv"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// layout is one way in which a capacitor's colours stand. order has a letter for every colour: d figure, * multiplier, % tolerance,
// V voltage, T temperature coefficient, C characteristic, F the dot that names the part.
type layout struct {
	scheme schemeID
	table  string // of capacitor-colours.csv
	order  string
	unit   int // exponent: -12 for pF
}

// layouts are the ways in which capacitors carry colours. Where the order of the dots is not sure, each order stands here.
var layouts = [...]layout{
	{colourBead, "bead", "dd*", -6},
	{colourBead, "bead", "dd*V", -6},
	{colourMica6, "mica", "FddC%*", -12},
	{colourMica6, "mica", "Fdd*%C", -12},
	{colourMicaOld, "mica", "dddV%*", -12},
	{colourMicaOld, "mica", "ddd*%V", -12},
	{colourMica3, "mica", "dd*", -12},
	{colourPaper, "mica", "dd*%V", -12},
	{colourCeramic, "ceramic", "Tdd*%", -12},
	{colourCeramicDots, "ceramic", "dd*", -12},
	{colourCeramicDots, "ceramic", "dd*%", -12},
	{colourPolyester, "polyester", "dd*%V", -12},
}

// dotNames are the columns of capacitor-colours.csv for the letters of a layout.
var dotNames = map[rune]string{
	'*': "multiplier", '%': "tolerance", 'V': "voltage", 'T': "tempco", 'C': "characteristic", 'F': "first",
}

// threeDotTolerance is what three mica dots leave out (from memory): ±20 %.
const threeDotTolerance = 0.2

// capacitorColours reads colours as those of capacitors, in every layout that they fit.
func (d *decoder) capacitorColours(t *colourTables, bands []*colour) {
	for i := range layouts {
		if len(layouts[i].order) == len(bands) {
			d.dotMeaning(t, &layouts[i], bands)
		}
	}
}

func (d *decoder) dotMeaning(t *colourTables, l *layout, bands []*colour) {
	figures, exponent := 0.0, l.unit
	for i, what := range l.order {
		switch c := bands[i]; what {
		case 'd':
			if c.digit < 0 {
				return
			}
			figures = figures*10 + float64(c.digit)
		case '%':
		default:
			said := t.capacitor[dotKey{l.table, dotNames[what], c.name}]
			if said == nil {
				return
			}
			if what == '*' {
				exponent += int(said.number)
			}
		}
	}
	if figures == 0 {
		return
	}
	s := d.value(l.scheme, scaled(figures, exponent))
	var parts []Part
	for i, what := range l.order {
		said := t.capacitor[dotKey{l.table, dotNames[what], bands[i].name}]
		switch what {
		case '%':
			if !t.dotTolerance(&s, l.table, bands[i].name) {
				return
			}
		case 'V':
			parts = append(parts, Part{bands[i].name, short(said.number, quantity.Volt), screening.RatedVoltage.Name, s.scheme.name, said.source})
		case 'T':
			parts = append(parts, Part{bands[i].name, signed(said.number) + " ppm/K", OfTemperatureCoefficient, s.scheme.name, said.source})
		case 'C':
			s.note = joinNotes(s.note, "characteristic "+said.text)
		case 'F':
			s.note = joinNotes(s.note, "the first dot says "+said.text)
			s.kinds = kindBit(screening.Kind(strings.TrimSuffix(said.text, ", military")))
		}
	}
	if l.scheme == colourMica3 {
		s.note = joinNotes(s.note, "500 V by that scheme")
		d.spreadBy(&s, threeDotTolerance)
	}
	d.colourMeaning(s, parts, strconv.Itoa(len(bands))+" colours: "+s.scheme.why)
}

func (d *decoder) spreadBy(s *saying, ratio float64) {
	s.low, s.high, s.word = tidy(s.value*(1-ratio)), tidy(s.value*(1+ratio)), toleranceWord(-ratio, ratio)
}

// dotTolerance reads the tolerance dot: picofarads on ceramics of 10 pF and below, ratios elsewhere. It reports false where the colour
// means nothing there.
func (t *colourTables) dotTolerance(s *saying, table, colour string) bool {
	pf, ratio := t.capacitor[dotKey{table, "tolerance-pf", colour}], t.capacitor[dotKey{table, "tolerance", colour}]
	small := table == "ceramic" && s.value <= 10e-12
	switch {
	case small && pf != nil:
		half := scaled(pf.number, -12)
		s.low, s.high = tidy(math.Max(0, s.value-half)), tidy(s.value+half)
		if share := math.Round(1e5*half/s.value) / 1e5; share < 1 {
			s.word = toleranceWord(-share, share)
		}
		s.note = joinNotes(s.note, "±"+short(half, quantity.Farad))
	case !small && ratio != nil:
		s.low, s.high = tidy(s.value*(1-ratio.number)), tidy(s.value*(1+ratio.number))
		s.word = toleranceWord(-ratio.number, ratio.number)
	default:
		return false
	}
	return true
}

// voltsOf reads back the volts of a part that a colour said.
func voltsOf(p Part) float64 {
	v, err := quantity.Parse(p.Says, quantity.Volt)
	if err != nil {
		return math.NaN()
	}
	return v.Number
}
