package screening

// Pinout says in which order the leads of a judged part are, with the advice that belongs to every pinout; "" where nobody says. Makers put
// one type into the same case with other leads, so it stands with every verdict. own is what the part itself claims: a pinout that it does
// not claim is from the type table.
func (j *Judgement) Pinout(own Claim) string {
	leads := j.Claim.Trait(TraitPinout)
	if leads == "" {
		return ""
	}
	if own.Trait(TraitPinout) == "" {
		leads += " from the type table"
	}
	return leads + "; " + PinoutAdvice
}

// PinoutAdvice belongs to every pinout that is shown.
const PinoutAdvice = "same case is not same pinout: check with a meter"
