package capacitor

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// The marks that only parts for the mains carry: a class X1 to X3 or Y1 to Y4, and an AC voltage of a supply network.
const (
	TraitMainsClass = "mains-class"
	TraitMainsVolts = "mains-voltage"
)

// mainsVolts is the AC voltage from which a printed AC rating is taken for a mains rating: the lowest supply networks are of 100 V.
const mainsVolts = 100

var (
	classPattern = regexp.MustCompile(`^([xX][1-3]|[yY][1-4])(?:[/-]?([xX][1-3]|[yY][1-4]))?$`)
	acPattern    = regexp.MustCompile(`^~?(\d{2,4})(?:[vV]?~|[vV]\.?[aA]\.?[cC]\.?|[vV][rR][mM][sS]|[aA][cC])$`)
)

// MainsClaims takes the marks of mains parts, so that nobody gets one past the table by calling it a film, paper or ceramic capacitor.
func MainsClaims() []screening.Field {
	return []screening.Field{
		{
			Definition: book.Trait(TraitMainsClass, "mains class"), Trait: true, Example: "X2", AcceptText: acceptMainsClass,
			Help: "X1 to X3 or Y1 to Y4 as printed: such a part is of kind mains-capacitor",
		},
		{
			Definition: book.Trait(TraitMainsVolts, "mains voltage"), Trait: true, Example: "275VAC", AcceptText: acceptMainsVolts,
			Help: "an AC voltage from 100 V as printed: such a part is taken to be of kind mains-capacitor",
		},
	}
}

// acceptMainsClass takes "X2", "y1", "X1/Y2".
func acceptMainsClass(word string) (string, bool) {
	m := classPattern.FindStringSubmatch(strings.TrimSpace(word))
	if m == nil {
		return "", false
	}
	text := strings.ToUpper(m[1])
	if m[2] != "" {
		text += "/" + strings.ToUpper(m[2])
	}
	return text, true
}

// acceptMainsVolts takes "275VAC", "250V~".
func acceptMainsVolts(word string) (string, bool) {
	m := acPattern.FindStringSubmatch(strings.TrimSpace(word))
	if m == nil {
		return "", false
	}
	volts, err := strconv.Atoi(m[1])
	if err != nil || volts < mainsVolts {
		return "", false
	}
	return fmt.Sprintf("%d V AC", volts), true
}

// Bars is the stop of a part whose marking is a mains part's. It serves as [screening.Rulebook.Bars] of every kind that has [MainsClaims].
func Bars(claim screening.Claim) []screening.Stop {
	mark := strings.TrimSpace(claim.Trait(TraitMainsClass) + " " + claim.Trait(TraitMainsVolts))
	if mark == "" {
		return nil
	}
	return []screening.Stop{{
		Check: TraitMainsClass, Verdict: screening.Barred,
		Reason: mark + " is the mark of a part for the mains: its class is a type approval (impulse, endurance and flame tests) that no bench " +
			"reading shows",
		Do: "judge it as mains-capacitor, and never fit it across the mains; fit a new, approved part there",
		Source: screening.Source{
			Document: "IEC 60384-14 classes as component makers' safety pages describe them", Clause: "approved parts only; the rule against reuse is the house's",
			Status: screening.House,
		},
	}}
}
