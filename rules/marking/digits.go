package marking

import (
	"math"

	"goodbin/rules/internal/series"
)

// digitCodes reads codes of three and four digits at i: two or three figures and a power of ten.
func (d *decoder) digitCodes(i int) {
	end := d.digits(i)
	if n := end - i; n != 3 && n != 4 || d.text[i] == '0' || d.decimalAt(end) {
		return
	}
	start := len(d.sayings)
	figures, power := float64(number(d.text[i:end-1])), int(d.text[end-1]-'0')
	if end-i == 3 {
		d.threeDigits(figures, power)
	} else {
		d.fourDigits(figures, power, i)
	}
	d.found = append(d.found, piece{role: asValue, shape: codeShape, from: i, to: end, first: start, count: len(d.sayings) - start})
}

// smallPower is the power of ten that the digits 8 and 9 stand for on small capacitors: ×0.01 and ×0.1.
func smallPower(power int) (e int, small bool) {
	if power >= 8 {
		return power - 10, true
	}
	return power, false
}

func (d *decoder) threeDigits(figures float64, power int) {
	e, small := smallPower(power)
	s := d.value(code3Farad, scaled(figures, e-12))
	if power == 7 {
		s = d.value(code3High, scaled(figures, power-12))
		s.note = "lists for small capacitors leave 7 unused; high values carry it"
	}
	d.say(s)
	if power == 8 {
		s := d.value(code3High, scaled(figures, power-12))
		s.rank, s.note = 10, "on small capacitors the digit 8 means ×0.01"
		d.say(s)
	}
	if small {
		d.say(d.value(lowOhm, scaled(figures, e)))
	}
	if power < 8 {
		d.say(d.value(code3Ohm, scaled(figures, power)))
		d.say(d.value(code3Henry, scaled(figures, power-6)))
		if s := d.value(code3Volt, scaled(figures, power)); s.value >= s.scheme.low && s.value <= s.scheme.high {
			d.say(s)
		}
	}
}

func (d *decoder) fourDigits(figures float64, power, i int) {
	e, small := smallPower(power)
	if small {
		d.say(d.value(lowOhm, scaled(figures, e)))
	} else {
		d.say(d.value(code4Ohm, scaled(figures, power)))
	}
	d.say(d.value(code4Farad, scaled(figures, e-12)))
	// The reversed form: the count of zeros, then three figures.
	if zeros, rest := int(d.text[i]-'0'), number(d.text[i+1:i+4]); rest >= 100 && zeros <= 6 {
		d.say(d.value(code4Reversed, scaled(float64(rest), zeros-12)))
	}
}

// decimalAt reports whether a decimal sign with a digit behind it stands at i.
func (d *decoder) decimalAt(i int) bool {
	return i+1 < len(d.text) && (d.text[i] == '.' || d.text[i] == ',') && isDigit(d.text[i+1])
}

// plain is a number as typed.
type plain struct {
	end     int
	figures float64
	places  int  // digits after the decimal sign
	whole   int  // digits before it
	grouped bool // a comma and three digits, which may separate thousands
}

// plainNumber reads digits with at most one decimal sign at i.
func (d *decoder) plainNumber(i int) (n plain, ok bool) {
	end := d.digits(i)
	n.whole = end - i
	if n.whole > 6 {
		return n, false
	}
	n.figures = float64(number(d.text[i:end]))
	if d.decimalAt(end) {
		last := d.digits(end + 1)
		n.places = last - end - 1
		if n.places > 6 || d.decimalAt(last) {
			return n, false
		}
		n.figures = n.figures*math.Pow10(n.places) + float64(number(d.text[end+1:last]))
		n.grouped = d.text[end] == ',' && n.places == 3 && n.whole > 0 && d.text[i] != '0'
		end = last
	}
	n.end = end
	return n, n.whole+n.places > 0
}

// bareNumber reads a number without a unit at i, as parts of old and small ones of today carry it.
func (d *decoder) bareNumber(i int) {
	n, ok := d.plainNumber(i)
	if !ok || n.figures == 0 || n.places == 0 && d.text[i] == '0' || n.whole > 5 {
		return
	}
	if !series.Contains(24, n.figures) && !d.isOld(n.figures) {
		return
	}
	start := len(d.sayings)
	shape := plainShape
	switch below := n.places > 0 && n.figures < math.Pow10(n.places); {
	case below:
		d.say(d.value(plainUF, scaled(n.figures, -n.places-6)))
		shape = codeShape
	case n.places > 0:
		s := d.value(plainUF, scaled(n.figures, -n.places-6))
		s.rank = 14
		d.say(s)
		d.say(d.value(plainPF, scaled(n.figures, -n.places-12)))
	default:
		d.say(d.value(plainPF, scaled(n.figures, -12)))
		if n.whole <= 4 {
			d.say(d.value(plainUFCan, scaled(n.figures, -6)))
		}
	}
	d.say(d.value(plainOhm, scaled(n.figures, -n.places)))
	d.found = append(d.found, piece{role: asValue, shape: shape, from: i, to: n.end, first: start, count: len(d.sayings) - start})
	d.thousands(i, n)
}

// thousands reads a K behind a plain number as thousands of picofarads, as old labels do.
func (d *decoder) thousands(i int, n plain) {
	if n.end < len(d.text) && d.text[n.end] == 'K' && (n.end+1 == len(d.text) || isSeparator(d.text[n.end+1])) && n.whole <= 3 {
		d.add(piece{role: asValue, shape: unitShape, from: i, to: n.end + 1}, d.value(thousandPF, scaled(n.figures, 3-n.places-12)))
	}
}

// isOld reports whether the figures are those of an old preferred value.
func (d *decoder) isOld(figures float64) bool {
	for figures >= 1000 {
		figures /= 10
	}
	for figures > 0 && figures < 100 {
		figures *= 10
	}
	return figures == math.Trunc(figures) && figures < 1000 && d.tables.old[int(figures)]
}

// bareVolts reads a rated voltage without its unit at i: 0.1/400, 104J630.
func (d *decoder) bareVolts(i int) {
	n, ok := d.plainNumber(i)
	if !ok || n.whole == 0 || n.grouped {
		return
	}
	source, rated := d.tables.rated[scaled(n.figures, -n.places)]
	if !rated || n.end < len(d.text) && !isSeparator(d.text[n.end]) {
		return
	}
	s := d.volts(scaled(n.figures, -n.places))
	s.source, s.rank = source, 2
	s.note = "the number behind the value is taken for the rated voltage"
	d.add(piece{role: asVoltage, shape: bareShape, from: i, to: n.end}, s)
}
