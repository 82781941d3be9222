package entry

import (
	"strconv"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// section is one part of a can as the trade writes it.
type section struct{ capacitance, voltage float64 }

// takenAsSections reads capacitance and voltage as they stand on a can, in microfarads and volts where no unit is written: "100/25",
// "8+8/450", "50/350+25/25", "2x50/300". ok reports that the word has this form and the kind claims both; err that it has the form with
// a value in it that cannot be read.
func (p *parser) takenAsSections(word string) (sections []section, ok bool, err error) {
	_, farads := p.book.ClaimField(screening.Capacitance.Name)
	_, volts := p.book.ClaimField(screening.RatedVoltage.Name)
	if !farads || !volts || !strings.Contains(word, "/") || strings.Contains(word, "%") || !startsLikeNumber(word) {
		return nil, false, nil
	}
	var waiting int // sections whose voltage follows later
	for item := range strings.SplitSeq(word, "+") {
		c, v, hasVolts := strings.Cut(item, "/")
		times := 1
		if n, each, ok := cutTimes(c); ok {
			times, c = n, each
		}
		s := section{}
		if s.capacitance, err = canValue(c, quantity.Farad, 1e-6); err != nil {
			return nil, false, problem("", "%s: %s", shown(word), err)
		}
		if len(sections)+times > MaxSections {
			return nil, false, problem("", "%s has more than %d sections", shown(word), MaxSections)
		}
		for range times {
			sections = append(sections, s)
		}
		waiting += times
		if !hasVolts {
			continue
		}
		if s.voltage, err = canValue(v, quantity.Volt, 1); err != nil {
			return nil, false, problem("", "%s: %s", shown(word), err)
		}
		for i := len(sections) - waiting; i < len(sections); i++ {
			sections[i].voltage = s.voltage
		}
		waiting = 0
	}
	if waiting > 0 {
		return nil, false, problem("", "%s: the last section has no voltage", shown(word)).hint("write 8+8/450, or 50/350+25/25")
	}
	return sections, true, nil
}

// cutTimes reads "2x50" as two of 50.
func cutTimes(text string) (n int, each string, ok bool) {
	for _, sign := range []string{"x", "×", "*"} {
		if before, after, found := strings.Cut(text, sign); found {
			n, err := strconv.Atoi(before)
			return n, after, err == nil && n >= 1 && n <= MaxSections
		}
	}
	return 0, "", false
}

// canValue reads a value as printed on a can: a bare number counts in the customary unit.
func canValue(text string, unit quantity.Unit, customary float64) (float64, error) {
	text = strings.TrimSpace(text)
	x, err := plain(text, unit)
	if err == nil && strings.Trim(text, "0123456789.,") == "" {
		x *= customary
	}
	if err == nil && x <= 0 {
		return 0, problem("", "%s is not above zero", shown(text))
	}
	return x, err
}

// addSections claims what a can says; a single section is the whole part.
func (p *parser) addSections(sections []section, word string, err error) error {
	if err != nil {
		return err
	}
	for i, s := range sections {
		name := ""
		if len(sections) > 1 {
			name = strconv.Itoa(i + 1)
		}
		c := screening.NominalRating(screening.Capacitance, s.capacitance)
		v := screening.NominalRating(screening.RatedVoltage, s.voltage)
		c.Section, v.Section, c.Typed, v.Typed = name, name, word, word
		if err := p.addRating(c, word); err != nil {
			return err
		}
		if err := p.addRating(v, word); err != nil {
			return err
		}
	}
	return nil
}
