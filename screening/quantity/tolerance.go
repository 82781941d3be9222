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
	first, second := strings.TrimRight(body[:at+1], "/ %"), strings.TrimSpace(body[at+1:])
	a, _, _, errA := parseExact(first, Ratio)
	b, _, _, errB := parseExact(second, Ratio)
	if errA != nil || errB != nil {
		return refuse("is not a tolerance such as +80-20% or -10/+50%")
	}
	low, high = min(a, b), max(a, b)
	if low > 0 || high < 0 || first[0] == second[0] || low <= -1 {
		return refuse("is not a tolerance: one side lies below and one above the nominal")
	}
	return low, high, nil
}

func symmetric(text, body string) (low, high float64, err error) {
	x, _, _, err := parseExact(body, Ratio)
	if err != nil {
		return 0, 0, &Error{Text: text, Unit: Ratio, Problem: "is not a tolerance such as 20%"}
	}
	if x <= 0 || x >= 1 {
		return 0, 0, &Error{Text: text, Unit: Ratio, Problem: "is not a tolerance between 0 and 100 %"}
	}
	return -x, x, nil
}
