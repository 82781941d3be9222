package marking

import (
	"strings"

	"goodbin/screening"
)

// maxUnitWord is the length of the longest word in units.csv.
const maxUnitWord = 8

// withUnit reads a number and its unit at i: 0.1 MFD, 4.7 kΩ, 35V, 5W. A comma before three digits gives both readings.
func (d *decoder) withUnit(i int) {
	n, ok := d.plainNumber(i)
	if !ok || n.whole > 1 && d.text[i] == '0' {
		return
	}
	at := n.end
	if at < len(d.text) && d.text[at] == ' ' {
		at++
	}
	end := d.unitRun(at)
	for ; end > at; end-- {
		meanings := d.tables.units[d.text[at:end]]
		if meanings == nil || !d.endsUnit(end) || !unitFits(d.text[at:end], n, at > n.end) {
			continue
		}
		d.unitPiece(i, end, n, meanings)
		return
	}
}

// unitRun returns the end of the characters at i that a unit's word may be made of.
func (d *decoder) unitRun(i int) int {
	end := i
	for end < len(d.text) && end-i < maxUnitWord {
		switch c := d.text[end]; {
		case isLetter(c), c == '.', c == '~', c == '-', c == '=':
			end++
		case strings.HasPrefix(d.text[end:], "Ω"):
			end += len("Ω")
		default:
			return end
		}
	}
	return end
}

// endsUnit reports whether a word may end at i: not inside the ohm sign, not before a small letter.
func (d *decoder) endsUnit(i int) bool {
	return i == len(d.text) || d.text[i] < 0x80 && !(d.text[i] >= 'a' && d.text[i] <= 'z')
}

// unitFits keeps single letters apart from letter-and-digit values (470K, read there) and from tolerance letters (104 K).
func unitFits(word string, n plain, space bool) bool {
	if len(word) > 1 || strings.Contains("VvWwFH~-=", word) {
		return true
	}
	return n.places > 0 && !space || space && strings.Contains("kpnu", word)
}

func (d *decoder) unitPiece(from, to int, n plain, meanings []unitWord) {
	p := piece{role: asValue, shape: unitShape, from: from, to: to}
	start := len(d.sayings)
	for i := range meanings {
		w := &meanings[i]
		s := d.value(w.scheme, scaled(n.figures*w.figure, w.exponent-n.places))
		s.of, s.unit, s.source, s.note, s.rank = w.of, w.unit, &w.source, w.note, w.order
		switch w.of {
		case screening.Capacitance.Name:
			s.kinds = capacitorKinds
		case screening.Resistance.Name:
			s.kinds = resistorKinds
		case inductance:
			s.kinds = kindBit("inductor")
		case screening.RatedVoltage.Name, acVoltage:
			p.role, p.shape, s.kinds = asVoltage, numberedUnit, capacitorKinds
			if w.of == acVoltage {
				s.kinds = alternatingKinds
			}
			if d.tables.rated[s.value] == nil {
				if last := d.text[to-1]; last == '-' || last == '=' || last == '~' {
					continue
				}
				s.rank += 20
			}
		case screening.Power.Name:
			p.role, p.shape, s.kinds = asPower, numberedUnit, resistorKinds&^kindBit("thermistor")
		}
		d.bothCommas(s, n)
	}
	if p.count = len(d.sayings) - start; p.count > 0 {
		p.first = start
		d.found = append(d.found, p)
	}
}

// bothCommas appends a saying, and where its comma may separate thousands the one with them.
func (d *decoder) bothCommas(s saying, n plain) {
	if s.value == 0 {
		return
	}
	if n.grouped {
		s.note = joinNotes(s.note, "the comma may be the decimal sign or separate thousands")
	}
	d.sayings = append(d.sayings, s)
	if n.grouped {
		s.value, s.rank = tidy(s.value*1000), s.rank+1
		d.sayings = append(d.sayings, s)
	}
}

// alternatingKinds are the capacitors that are rated for alternating voltage: film, paper, ceramic, and those for the mains.
const alternatingKinds kindSet = 1<<3 | 1<<4 | 1<<6 | mainsKind

func joinNotes(a, b string) string {
	switch {
	case a == "":
		return b
	case b == "" || a == b:
		return a
	}
	return a + "; " + b
}
