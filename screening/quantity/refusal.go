package quantity

// refusal says why letters do not fit the unit that was wanted, and what would be right.
func (s *scanned) refusal(text string, unit Unit) error {
	e := &Error{Text: text, Unit: unit}
	switch {
	case unit == Farad && s.refuseCapacitance(e):
		return e
	case unit == Celsius && s.letter == "" && s.suffix == "K":
		e.Problem = "is not a temperature such as " + unit.Example() + "; K is kilo, never kelvin"
		return e
	}
	for u := Farad; u < units; u++ {
		if u == unit {
			continue
		}
		if other := match(s.letter, s.suffix, u); other.ok && other.spelt {
			e.Problem = "is " + u.Noun() + "; want " + unit.Noun() + " such as " + unit.Example()
			return e
		}
	}
	e.Problem = "is not " + unit.Noun() + " such as " + unit.Example() + "; " + Quote(s.misfit()) + " is not understood"
	return e
}

// misfit is the part of the text that a refusal points at.
func (s *scanned) misfit() string {
	if s.suffix != "" {
		return s.suffix
	}
	return s.letter
}

// refuseCapacitance knows the letters that mean something else on a capacitor.
func (s *scanned) refuseCapacitance(e *Error) bool {
	if s.letter != "" {
		return s.suffix == "" && s.refuseCapacitorLetter(e)
	}
	n := s.typed
	switch s.suffix {
	case "MF", "mf", "Mf":
		e.Problem = "is ambiguous"
		e.Meanings = []string{n + " microfarad in old print (write " + n + "uF)", n + " millifarad (write " + n + "mF)"}
	case "K":
		e.Problem = "is ambiguous on a capacitor"
		e.Meanings = []string{
			n + " pF with the tolerance letter K, ±10 % (write " + n + "pF 10%)",
			n + " thousand pF, K being kilo (write " + n + "nF)",
		}
	case "k":
		e.Problem = "is not a capacitance: k is kilo; write " + n + "nF where " + n + " thousand pF are meant"
	case "M":
		e.Problem = "is not a capacitance: M after a capacitor's number is the tolerance letter ±20 %; write the unit, such as " + n + "uF"
	default:
		return false
	}
	return true
}

// refuseCapacitorLetter refuses 4k7 and 4M7 with the letter that may have been meant.
func (s *scanned) refuseCapacitorLetter(e *Error) bool {
	switch s.letter {
	case "k", "K":
		meant := s.typed + "n" + s.decimals
		e.Problem = "is not a capacitance: " + s.letter + " is kilo; write " + meant + " where thousands of pF are meant"
	case "M":
		meant := s.typed + "u" + s.decimals
		e.Problem = "is not a capacitance: M is mega, never micro; write " + meant + " where microfarads are meant"
	default:
		return false
	}
	return true
}

// refusalAny says why a text without a known unit has no meaning.
func (s *scanned) refusalAny(text string) error {
	if oldMicroOrMilli(s.suffix) && s.letter == "" {
		return s.refusal(text, Farad)
	}
	e := &Error{Text: text}
	_, isPrefix := prefix(s.suffix, One)
	switch {
	case isPrefix && s.letter == "":
		e.Problem = "does not say what it is: add a unit, as in 2200uF, 35V or 4k7"
	default:
		e.Problem = "is no value such as 2200uF, 35V or 4k7; " + Quote(s.misfit()) + " is not understood"
	}
	return e
}
