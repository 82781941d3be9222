package entry

import (
	"strings"

	"goodbin/screening"
)

// AnswerLook reads the answer to a look: the digit keys of what is seen ("24" is the second and the fourth), 0 or "no" for nothing, or the
// words that report it ("cracked", "bulged, poor-leads"). It returns the names of the checks that show a fault, in their order.
func AnswerLook(q screening.Question, text string) ([]string, error) {
	folded := strings.ToLower(strings.TrimSpace(text))
	if folded == "n" || folded == "no" || folded == "nothing" || folded != "" && strings.Trim(folded, "0") == "" {
		return nil, nil
	}
	seen := make([]bool, len(q.Checks))
	for word := range strings.FieldsFuncSeq(folded, func(r rune) bool { return r == ',' || r == ';' || r == ' ' || r == '+' }) {
		if strings.Trim(word, "0123456789") == "" {
			for _, digit := range word {
				i := int(digit-'0') - 1
				if i < 0 || i >= len(q.Checks) {
					return nil, problem("", "%s: there is no %c to look for", shown(text), digit).hint(lookHint, len(q.Checks))
				}
				seen[i] = true
			}
			continue
		}
		i := checkNamed(q.Checks, word)
		if i < 0 {
			return nil, problem("", "%s is no answer to a look", shown(text)).hint(lookHint, len(q.Checks))
		}
		seen[i] = true
	}
	if folded == "" {
		return nil, problem("", "nothing typed").hint(lookHint, len(q.Checks))
	}
	var faults []string
	for i, c := range q.Checks {
		if seen[i] {
			faults = append(faults, c.Name)
		}
	}
	return faults, nil
}

const lookHint = "0 for nothing, or the digits 1 to %d of what is seen"

func checkNamed(checks []screening.Check, word string) int {
	for i, c := range checks {
		if c.Name == word {
			return i
		}
		for _, w := range c.Words {
			if strings.EqualFold(w, word) {
				return i
			}
		}
	}
	return -1
}
