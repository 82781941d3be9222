package marking

import (
	"math"
	"strconv"

	"goodbin/screening/quantity"
)

// wordAt reads what a part is made of at i: EIA temperature codes, temperature coefficients by name, film letters, interference classes.
func (d *decoder) wordAt(i int, separated bool) {
	end := i
	for end < len(d.text) && (isLetter(d.text[end]) || isDigit(d.text[end])) {
		end++
	}
	d.ceramicCode(i, end)
	d.ceramicName(i, end)
	d.dielectric(i, end)
	if class := d.tables.interference[d.text[i:end]]; class != nil && separated {
		d.interference(i, end, class)
	}
}

// interference adds an interference class at i, or two as in X1/Y2.
func (d *decoder) interference(i, end int, class *interferenceClass) {
	s := d.words(interference, class.says)
	if end+3 <= len(d.text) && d.text[end] == '/' {
		if second := d.tables.interference[d.text[end+1:end+3]]; second != nil {
			end += 3
			s.says += "; and " + second.says
		}
	}
	s.source, s.kinds, s.word = &class.source, mainsKind, d.text[i:end]
	s.note = "a mains interference capacitor is never passed for the mains on a reading"
	d.add(piece{role: asClass, shape: wordShape, from: i, to: end}, s)
}

// mayEnd reports whether a word that touches what follows may end at i: a value in digits may follow it, no letter.
func (d *decoder) mayEnd(i, end int) bool { return i == end || i < end && isDigit(d.text[i]) }

// ceramicCode reads the three characters of an EIA code of class 1, 2 or 3 at i.
func (d *decoder) ceramicCode(i, end int) {
	if end < i+3 || !d.mayEnd(i+3, end) || !isDigit(d.text[i+1]) {
		return
	}
	code := d.text[i : i+3]
	p := piece{role: asCeramic, shape: wordShape, from: i, to: i + 3}
	start := len(d.sayings)
	d.class1(code)
	d.class2(code)
	if p.first, p.count = start, len(d.sayings)-start; p.count > 0 {
		d.found = append(d.found, p)
	}
}

func (d *decoder) class1(code string) {
	letters := &d.tables.ceramic
	for f := range letters[figurePosition][code[0]] {
		figure := &letters[figurePosition][code[0]][f]
		for m := range letters[multiplierPosition][code[1]] {
			multiplier := &letters[multiplierPosition][code[1]][m]
			for t := range letters[tolerancePosition][code[2]] {
				tolerance := &letters[tolerancePosition][code[2]][t]
				ppm := tidy(figure.low * multiplier.low)
				s := d.value(class1, scaled(ppm, -6))
				s.low, s.high = scaled(tidy(ppm+tolerance.low), -6), scaled(tidy(ppm+tolerance.high), -6)
				s.says = coefficientText(ppm, tolerance.high)
				s.rank, s.note, s.source = disputed*multiplier.order, multiplier.note, &multiplier.source
				if s.word = code; !d.tables.pairs[code] {
					s.word = "class1"
				}
				if s.value == 0 {
					s.value = 0 // not minus zero
				}
				d.sayings = append(d.sayings, s)
			}
		}
	}
}

// coefficientText prints a coefficient and its tolerance, both in ppm/K: "−1500 ±250 ppm/K".
func coefficientText(ppm, tolerance float64) string {
	return signed(ppm) + " ±" + strconv.FormatFloat(tolerance, 'g', -1, 64) + " ppm/K"
}

func signed(x float64) string {
	x = tidy(x)
	sign := ""
	switch {
	case x < 0:
		sign = "−"
	case x > 0:
		sign = "+"
	}
	return sign + strconv.FormatFloat(math.Abs(x), 'f', -1, 64)
}

func (d *decoder) class2(code string) {
	letters := &d.tables.ceramic
	for l := range letters[lowestPosition][code[0]] {
		lowest := &letters[lowestPosition][code[0]][l]
		for h := range letters[highestPosition][code[1]] {
			highest := &letters[highestPosition][code[1]][h]
			for c := range letters[changePosition][code[2]] {
				change := &letters[changePosition][code[2]][c]
				s := d.value(class2, math.NaN())
				s.low, s.high, s.word, s.source = change.low, change.high, code, &change.source
				s.rank, s.note = disputed*highest.order, joinNotes(highest.note, change.note)
				s.says = toleranceText(change.low, change.high) + " from " + signed(lowest.low) + " to " + signed(highest.low) + " °C"
				d.sayings = append(d.sayings, s)
			}
		}
	}
}

// ceramicName reads a temperature characteristic that has a name: NP0, N750, SL, CH, BX.
func (d *decoder) ceramicName(i, end int) {
	for to := end; to > i+1; to-- {
		name, ok := d.tables.ceramicNames[d.text[i:to]]
		if !ok || !d.mayEnd(to, end) {
			continue
		}
		start := len(d.sayings)
		switch {
		case name.code != "":
			d.class1(name.code)
			for s := range d.sayings[start:] {
				d.renamed(&d.sayings[start+s], name, "")
			}
		case name.change:
			s := d.value(class2, math.NaN())
			s.low, s.high, s.word, s.says = name.low, name.high, d.text[i:to], toleranceText(name.low, name.high)
			d.renamed(&s, name, d.text[i:to])
			d.sayings = append(d.sayings, s)
		default:
			s := d.value(class1Name, math.NaN())
			s.low, s.high = tidy(name.low*1e-6), tidy(name.high*1e-6)
			s.says = signed(name.low) + " to " + signed(name.high) + " ppm/K"
			d.renamed(&s, name, d.text[i:to])
			d.sayings = append(d.sayings, s)
		}
		d.found = append(d.found, piece{role: asCeramic, shape: wordShape, from: i, to: to, first: start, count: len(d.sayings) - start})
		return
	}
}

func (d *decoder) renamed(s *saying, name *ceramicName, word string) {
	s.scheme, s.source = &d.schemes[class1Name], &name.source
	if name.change {
		s.scheme = &d.schemes[class2]
	}
	s.note = joinNotes(name.note, s.note)
	if name.code != "" {
		s.says = name.code + ": " + s.says
	} else {
		s.word = word
	}
}

// dielectric reads film and paper letters at i. A number of up to two digits behind them, as of a style (MKP10), belongs to them.
func (d *decoder) dielectric(i, end int) {
	to := i
	for to < end && isLetter(d.text[to]) {
		to++
	}
	names := d.tables.dielectrics[d.text[i:to]]
	if names == nil {
		return
	}
	start := len(d.sayings)
	for n := range names {
		name := &names[n]
		s := d.words(dielectricLetters, name.text)
		s.rank, s.note, s.kinds, s.source, s.word, s.mainsWord = disputed*name.order, name.note, name.kinds, &name.source, name.word, name.mains
		s.unit = quantity.One
		d.sayings = append(d.sayings, s)
	}
	p := piece{role: asDielectric, shape: wordShape, from: i, to: to, first: start, count: len(names)}
	d.found = append(d.found, p)
	if style := end - to; style == 1 || style == 2 {
		if digits := d.digits(to); digits == end {
			p.to = end
			d.found = append(d.found, p)
		}
	}
}
