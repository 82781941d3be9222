package marking

// highestCode is the highest voltage in V that a code computed from the pattern is believed.
const highestCode = 10000

// voltageAt reads a voltage code at i: a digit and a letter, or the single letter of solid tantalum.
func (d *decoder) voltageAt(i int) {
	c := d.text[i]
	if c < 0x80 && d.tables.single[c].volts > 0 {
		v := &d.tables.single[c]
		s := d.value(voltageLetter, v.volts)
		s.source, s.rank = &v.source, 10
		d.add(piece{role: asVoltage, shape: letterShape, from: i, to: i + 1}, s)
	}
	if !isDigit(c) || i+1 == len(d.text) || d.text[i+1] >= 0x80 {
		return
	}
	p := piece{role: asVoltage, shape: voltsShape, from: i, to: i + 2}
	s := d.value(voltageCode, 0)
	if v, ok := d.tables.codes[d.text[i:i+2]]; ok {
		s.value, s.source = v.volts, &v.source
	} else if v := &d.tables.pattern[d.text[i+1]]; v.volts > 0 {
		s.value, s.source, s.rank = scaled(v.volts*100, int(c-'0')-2), &v.source, 15
		s.note = "no list prints this code; it follows from the pattern"
	}
	if s.value > 0 && s.value <= highestCode {
		d.add(p, s)
	}
}
