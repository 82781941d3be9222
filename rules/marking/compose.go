package marking

// maxMeanings bounds what a contrived text can have.
const maxMeanings = 64

// behindValue is how far a date behind a value stands behind other readings of the same characters.
const behindValue = 10

// cover reads the text from i on as pieces, each role once, and says what every complete reading means.
func (d *decoder) cover(i int, used uint) {
	separated := i == 0
	for i < len(d.text) && isSeparator(d.text[i]) {
		separated = true
		i++
	}
	if i == len(d.text) {
		d.emit()
		return
	}
	if len(d.meanings) >= maxMeanings {
		return
	}
	found, sayings := len(d.found), len(d.sayings)
	d.piecesAt(i, separated, used)
	for at, last := found, len(d.found); at < last; at++ {
		p := d.found[at]
		if used&(1<<p.role) != 0 || !separated && !mayTouch(d.stack[len(d.stack)-1], p, d.stack) {
			continue
		}
		d.stack = append(d.stack, p)
		d.cover(p.to, used|1<<p.role)
		d.stack = d.stack[:len(d.stack)-1]
	}
	d.found, d.sayings = d.found[:found], d.sayings[:sayings]
}

// piecesAt finds every piece that begins at i.
func (d *decoder) piecesAt(i int, separated bool, used uint) {
	c := d.text[i]
	digit := isDigit(c)
	if !digit && c != '.' {
		d.wordAt(i, separated)
		d.toleranceAt(i)
		d.letterDigits(i)
		d.voltageAt(i)
	} else {
		if digit {
			d.letterDigits(i)
			d.digitCodes(i)
			d.voltageAt(i)
		}
		d.bareNumber(i)
		d.withUnit(i)
		if d.percent {
			d.tolerancePercent(i)
		}
		if used&(1<<asValue) != 0 {
			d.bareVolts(i)
		}
	}
	if separated && i > 0 && used&(1<<asValue) != 0 {
		end := i
		for end < len(d.text) && !isSeparator(d.text[end]) {
			end++
		}
		if n := end - i; n >= 2 && n <= 4 {
			d.besides = behindValue
			d.dateToken(i, end, false)
			d.besides = 0
		}
	}
}

// mayTouch says which pieces stand together without a space: 2A474J, 4K7J, 104J630, X7R104K, 100uF16V, 5W10RJ.
func mayTouch(before, p piece, stack []piece) bool {
	switch before.role {
	case asValue:
		switch p.role {
		case asTolerance:
			return p.shape == letterShape
		case asVoltage:
			return p.shape == letterShape && before.shape == codeShape || p.shape == numberedUnit && before.shape == unitShape
		case asCeramic:
			return true
		case asPower:
			return before.shape == unitShape
		}
	case asTolerance:
		switch p.role {
		case asVoltage:
			coded := len(stack) > 1 && stack[len(stack)-2].shape != plainShape
			return p.shape == numberedUnit || coded && (p.shape == voltsShape || p.shape == bareShape && p.to-p.from >= 2)
		case asCeramic, asPower:
			return true
		}
	case asVoltage:
		switch before.shape {
		case voltsShape, letterShape:
			return p.role == asValue && p.shape == codeShape
		case numberedUnit:
			return p.role == asValue && p.shape != plainShape
		}
	case asPower, asCeramic, asDielectric:
		return p.role == asValue
	}
	return false
}

// emit says what the pieces on the stack mean together: every combination of what each of them may say.
func (d *decoder) emit() {
	var has uint
	for i := range d.stack {
		has |= 1 << d.stack[i].role
	}
	last := len(d.stack) - 1
	if last < 0 || last > 0 && has&(1<<asValue) == 0 && has&(1<<asTolerance|1<<asDate) != 0 {
		return
	}
	d.picks = d.picks[:0]
	d.pick(0, 0, 0)
}

// pick chooses one saying of every piece from n on, as long as a kind of part is left that carries all of them.
func (d *decoder) pick(n int, kinds kindSet, rank int) {
	if n == len(d.stack) {
		d.meaning(kinds, rank)
		return
	}
	p := &d.stack[n]
	for i := range d.sayingsOf(p) {
		s := &d.sayings[p.first+i]
		k, ok := both(kinds, s.kinds)
		if !ok || len(d.meanings) >= maxMeanings {
			continue
		}
		d.picks = append(d.picks, s)
		d.pick(n+1, k, rank+s.rank)
		d.picks = d.picks[:len(d.picks)-1]
	}
}
