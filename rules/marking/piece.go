package marking

import (
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// role is the part that a piece plays in a print; a print has one of each at most.
type role uint8

const (
	asValue role = iota
	asTolerance
	asVoltage
	asPower
	asCeramic
	asDielectric
	asClass
	asDate
)

// shape says how a piece is written, which decides what may touch it without a space between.
type shape uint8

const (
	plainShape   shape = iota
	codeShape          // three or four digits
	unitShape          // ends in a letter or a unit
	letterShape        // one letter
	voltsShape         // a voltage code of two characters
	bareShape          // a voltage without its unit
	numberedUnit       // a number with V or W behind
	wordShape          // X7R, MKT, NP0
)

// piece is a stretch of the print with everything that it may say.
type piece struct {
	role     role
	shape    shape
	from, to int
	letter   byte // of a tolerance letter
	first    int  // the first of its sayings in decoder.sayings
	count    int
}

// saying is one thing that a piece may say.
type saying struct {
	scheme    *scheme
	of        screening.Characteristic
	unit      quantity.Unit
	value     float64 // SI; NaN where only bounds are said
	low, high float64 // SI; NaN where not said; of a tolerance ratios
	pf        float64 // of a tolerance: the half-width in farads below 10 pF, 0 where there is none
	kinds     kindSet
	rank      int // added to the scheme's, or to the whole where it is not the value
	says      string
	note      string
	word      string // of the command line, where it is not made of the value
	mainsWord string // the same for a mains capacitor
	source    *screening.Source
	dates     []Date
}

// value makes a saying of a scheme with a value in SI.
func (d *decoder) value(id schemeID, x float64) saying {
	s := &d.schemes[id]
	return saying{
		scheme: s, of: s.of, unit: s.unit, value: x, low: math.NaN(), high: math.NaN(), kinds: s.kinds, note: s.note, source: &s.source,
	}
}

// words makes a saying of a scheme that says something in words.
func (d *decoder) words(id schemeID, says string) saying {
	s := d.value(id, math.NaN())
	s.says = says
	return s
}

// add appends a piece with its sayings to the pieces found; without any it is none.
func (d *decoder) add(p piece, says ...saying) {
	if len(says) == 0 {
		return
	}
	p.first, p.count = len(d.sayings), len(says)
	d.sayings = append(d.sayings, says...)
	d.found = append(d.found, p)
}

// sayingsOf returns what a piece may say.
func (d *decoder) sayingsOf(p *piece) []saying { return d.sayings[p.first : p.first+p.count] }

func isDigit(c byte) bool  { return c >= '0' && c <= '9' }
func isLetter(c byte) bool { return c >= 'A' && c <= 'Z' || c >= 'a' && c <= 'z' }

// digits returns the end of the run of digits at i.
func (d *decoder) digits(i int) int {
	for i < len(d.text) && isDigit(d.text[i]) {
		i++
	}
	return i
}

// number reads digits as an integer; the run is short enough to be one.
func number(s string) int {
	n := 0
	for i := range len(s) {
		n = n*10 + int(s[i]-'0')
	}
	return n
}
