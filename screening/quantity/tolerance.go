package quantity

import "strings"

// ParseTolerance reads an allowed deviation as ratios: "20%" and "±20%" give −0.2 and 0.2, "+80-20%" and "-20/+80%" give −0.2 and 0.8.
// Letters are for whoever knows the kind of part. The error is an [*Error].
func ParseTolerance(text string) (low, high float64, err error) {
	refuse := func(problem string) (float64, float64, error) {
		return 0, 0, &Error{Text: text, Unit: Ratio, Problem: problem}
	}
	t := strings.TrimSpace(text)
	body, ok := strings.CutSuffix(t, "%")
	if !ok || len(t) > maxText {
		return refuse("is not a tolerance such as 20%, +80-20% or -10/+50%")
	}
	body = strings.TrimSpace(strings.ReplaceAll(body, "−", "-"))
	for _, mark := range [...]string{"±", "+/-", "+-"} {
		if rest, ok := strings.CutPrefix(body, mark); ok {
			return symmetric(text, rest)
		}
	}
	if body == "" || body[0] != '+' && body[0] != '-' {
		return symmetric(text, body)
	}
	at := strings.IndexAny(body[1:], "+-")
	if at < 0 {
		return refuse("gives one side only; write both, as in +80-20%")
	}
	first := strings.TrimSpace(strings.TrimSuffix(strings.TrimSpace(body[:at+1]), "/"))
	first, second := strings.TrimSpace(strings.TrimSuffix(first, "%")), strings.TrimSpace(body[at+1:])
	a, errA := percent(first)
	b, errB := percent(second)
	if errA != nil || errB != nil {
		return refuse("is not a tolerance such as +80-20% or -10/+50%")
	}
	low, high = min(a, b), max(a, b)
	if low > 0 || high < 0 || low == high || first[0] == second[0] || low <= -1 {
		return refuse("is not a tolerance: one side lies below and one above the nominal")
	}
	return low, high, nil
}

func symmetric(text, body string) (low, high float64, err error) {
	x, err := percent(body)
	if err != nil {
		return 0, 0, &Error{Text: text, Unit: Ratio, Problem: "is not a tolerance such as 20%"}
	}
	if x <= 0 || x >= 1 {
		return 0, 0, &Error{Text: text, Unit: Ratio, Problem: "is not a tolerance between 0 and 100 %"}
	}
	return -x, x, nil
}

// percent reads one side of a tolerance, whose percent sign is already off.
func percent(text string) (float64, error) {
	x, s, _, err := parseExact(text, Ratio)
	if err == nil && s.suffix != "" {
		err = &Error{Text: text, Unit: Ratio, Problem: "has two percent signs"}
	}
	return x, err
}
