package marking

import (
	"strings"

	"goodbin/rules/internal/series"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// maxFigures is how many significant figures a letter-and-digit value has (IEC 60062).
const maxFigures = 3

// letterDigits reads a letter-and-digit value of IEC 60062 at i: 4K7, R47, 470R, 4n7, and 6V3.
func (d *decoder) letterDigits(i int) {
	j := d.digits(i)
	letter, size := d.valueLetter(j)
	if letter == 0 {
		return
	}
	k := j + size
	end := d.digits(k)
	left, right := d.text[i:j], d.text[k:end]
	if !fitsLetterDigits(left, right, letter) || right == "" && !d.mayTrail(letter, k) {
		return
	}
	var buf [8]byte
	figures := number(string(append(append(buf[:0], left...), right...)))
	v := letterValue{float64(figures), -len(right), left == "", right == "", letter, len(left)}
	if letter == 'V' {
		if right != "" && left != "" && v.figures > 0 {
			d.add(piece{role: asVoltage, shape: numberedUnit, from: i, to: end}, d.volts(scaled(v.figures, v.exponent)))
		}
		return
	}
	start := len(d.sayings)
	d.letterSayings(v)
	if n := len(d.sayings) - start; n > 0 {
		if right != "" && len(left)+len(right) == maxFigures && right[len(right)-1] == '0' {
			for s := range d.sayings[start:] {
				d.sayings[start+s].note = joinNotes(d.sayings[start+s].note, "the extra zero hints at a close tolerance")
			}
		}
		d.found = append(d.found, piece{role: asValue, shape: unitShape, from: i, to: end, first: start, count: n})
		if right != "" {
			d.unitAfter(start, n, i, end, letter)
		}
	}
}

// valueLetter returns the letter at j that may stand for a decimal sign, and its size; the ohm sign counts as R.
func (d *decoder) valueLetter(j int) (letter byte, size int) {
	if strings.HasPrefix(d.text[j:], "Ω") {
		return 'R', len("Ω")
	}
	if j < len(d.text) && strings.IndexByte("RKkMGTLEmpnuPNUV", d.text[j]) >= 0 {
		return d.text[j], 1
	}
	return 0, 0
}

// fitsLetterDigits holds the digits to the three figures of the standard; zeros after R, as in 0R005, are seen on current sensors.
func fitsLetterDigits(left, right string, letter byte) bool {
	total := len(left) + len(right)
	if total == 0 || len(left) > 5 || len(right) > 4 {
		return false
	}
	if right == "" { // the letter trails: 4700p
		return (left == "0" || left[0] != '0') && significant(left) <= maxFigures
	}
	if len(left) > 1 && left[0] == '0' {
		return false
	}
	if letter == 'R' && (left == "" || left == "0") {
		return significant(strings.TrimLeft(right, "0")) <= maxFigures
	}
	return total <= maxFigures
}

// significant counts the figures before trailing zeros.
func significant(digits string) int { return len(strings.TrimRight(digits, "0")) }

// mayTrail reports whether a letter at the end of a number is a value's: not where it begins a unit (uF, kohm), and not T, L and V, which
// are a tolerance or a unit there.
func (d *decoder) mayTrail(letter byte, after int) bool {
	if strings.IndexByte("TLV", letter) >= 0 {
		return false
	}
	if after == len(d.text) {
		return true
	}
	next := d.text[after]
	if next >= 'a' && next <= 'z' || next >= 0x80 {
		return false
	}
	return strings.IndexByte("mpnuPNU", letter) < 0 || next != 'F' && next != 'H'
}

// letterValue is a letter-and-digit value taken apart.
type letterValue struct {
	figures  float64
	exponent int  // of the figures, before the letter's
	leads    bool // the letter stands first
	trails   bool // the letter stands last
	letter   byte
	digits   int // before the letter
}

func (v letterValue) times(e int) float64 { return scaled(v.figures, v.exponent+e) }

// letterSayings appends what a letter-and-digit value may say.
func (d *decoder) letterSayings(v letterValue) {
	switch v.letter {
	case 'R':
		d.say(d.value(rkmOhm, v.times(0)))
		if !v.trails && v.figures > 0 {
			d.say(d.value(pointPF, v.times(-12)))
			d.say(d.value(pointUH, v.times(-6)))
		}
	case 'E':
		d.trailing(v, d.value(rkmOhmOld, v.times(0)))
	case 'L':
		d.ohms(v, -3, 15)
	case 'K', 'k':
		d.ohms(v, 3, 0)
	case 'M':
		d.ohms(v, 6, 0)
		if d.cyrillic {
			d.say(d.value(rkmFaradCyrillic, v.times(-6)))
		}
	case 'G':
		d.ohms(v, 9, 0)
	case 'T':
		d.ohms(v, 12, 0)
	case 'm':
		d.say(d.value(rkmFarad, v.times(-3)))
		d.say(d.value(rkmHenry, v.times(-3)))
	case 'p':
		d.say(d.value(rkmFarad, v.times(-12)))
	case 'n', 'u':
		e := map[byte]int{'n': -9, 'u': -6}[v.letter]
		d.say(d.value(rkmFarad, v.times(e)))
		d.say(d.value(rkmHenry, v.times(e)))
	case 'P':
		d.trailing(v, d.value(rkmFaradCapital, v.times(-12)))
	case 'U':
		d.trailing(v, d.value(rkmFaradCapital, v.times(-6)))
	case 'N':
		d.trailing(v, d.value(rkmFaradCapital, v.times(-9)))
		d.trailing(v, d.value(rkmHenry, v.times(-9)))
	}
}

// say appends a saying unless it is a value of zero, which only a link has.
func (d *decoder) say(s saying) {
	if s.value == 0 {
		if s.of != screening.Resistance.Name {
			return
		}
		s = d.value(zeroOhm, 0)
	}
	d.sayings = append(d.sayings, s)
}

// ohms appends a resistance.
func (d *decoder) ohms(v letterValue, e, rank int) {
	id := rkmOhm
	if v.leads {
		id = rkmOhmLead
	}
	s := d.value(id, v.times(e))
	s.rank = rank
	d.trailing(v, s)
}

// trailing says a value. Three figures with the letter behind and no value of E24, such as 104K, are rather a code and a tolerance.
func (d *decoder) trailing(v letterValue, s saying) {
	if v.trails && v.digits == maxFigures && !series.Contains(24, v.figures) {
		s.rank += 15
		s.note = joinNotes(s.note, "rather a three-digit code with a tolerance letter")
	}
	d.say(s)
}

// unitAfter adds the same piece with its unit's letter behind it: 4n7F, 4u7H, 4K7Ω.
func (d *decoder) unitAfter(first, count, from, to int, letter byte) {
	rest := d.text[to:]
	var of screening.Characteristic
	size := 1
	switch {
	case strings.HasPrefix(rest, "F") && letter != 'R':
		of = screening.Capacitance.Name
	case strings.HasPrefix(rest, "H") && letter != 'R':
		of = inductance
	case strings.HasPrefix(rest, "Ω"):
		of, size = screening.Resistance.Name, len("Ω")
	default:
		return
	}
	start := len(d.sayings)
	for _, s := range d.sayings[first : first+count] {
		if s.of == of {
			s.rank -= 3
			d.sayings = append(d.sayings, s)
		}
	}
	if n := len(d.sayings) - start; n > 0 {
		d.found = append(d.found, piece{role: asValue, shape: unitShape, from: from, to: to + size, first: start, count: n})
	}
}

// Characteristics of kinds whose packages this one does not know.
const (
	inductance      screening.Characteristic = "inductance"
	varistorVoltage screening.Characteristic = "vv"
)

// volts makes a saying of a printed voltage.
func (d *decoder) volts(x float64) saying {
	s := d.value(unitScheme, x)
	s.of, s.unit, s.kinds = screening.RatedVoltage.Name, quantity.Volt, capacitorKinds
	return s
}
