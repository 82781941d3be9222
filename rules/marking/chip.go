package marking

import (
	"goodbin/rules/internal/series"
	"goodbin/screening"
)

// eia96 reads two digits and a letter: the number of a value of E96 and its multiplier, at 1 %.
func (d *decoder) eia96() {
	if !allDigits(d.text[:2]) {
		return
	}
	index := number(d.text[:2])
	c := d.text[2]
	if c >= 0x80 || d.tables.eia96[c] == nil || index < 1 || index > 96 {
		return
	}
	figures := float64(int(series.Value(96, index-1)*100 + 0.5))
	s := d.value(eia96, scaled(figures, *d.tables.eia96[c]))
	s.low, s.high, s.word = tidy(s.value*0.99), tidy(s.value*1.01), "1%"
	switch index {
	case 14, 15:
		s.note = "one printed table swaps the codes 14 and 15: 14 is 137 and 15 is 140"
	case 68:
		s.note = "one web page prints 487 for 68: it is 499"
	}
	if c == 'R' {
		s.rank = 6 // rather ohms: 47R
	}
	d.add(piece{role: asValue, from: 0, to: len(d.text)}, s)
}

// chipCapacitor reads a letter and a digit: figures and power of ten in pF (EIA-198).
func (d *decoder) chipCapacitor() {
	c, digit := d.text[0], d.text[1]
	if c >= 0x80 || !isDigit(digit) {
		return
	}
	start := len(d.sayings)
	for i := range d.tables.chip[c] {
		l := &d.tables.chip[c][i]
		e := int(digit - '0')
		s := d.value(chipFarad, 0)
		s.rank, s.note, s.source = disputed*l.order, l.note, &l.source
		if digit == '9' || digit == '8' {
			e -= 10
			s.rank += 5
			s.note = joinNotes(s.note, "the digits 8 and 9 as ×0.01 and ×0.1 are from memory")
			s.source = &screening.Source{Document: "chip capacitor code, digits 8 and 9", Status: screening.FromMemory}
		}
		s.value = scaled(float64(l.figures), e-1-12)
		d.sayings = append(d.sayings, s)
	}
	if n := len(d.sayings) - start; n > 0 {
		d.found = append(d.found, piece{role: asValue, from: 0, to: len(d.text), first: start, count: n})
	}
}
