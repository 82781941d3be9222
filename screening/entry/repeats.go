package entry

import (
	"strconv"
	"strings"
	"unicode"
)

// repeatsAgree is how far repeats of one reading may lie apart for a list written without spaces to be taken as repeats: 180,182,181 is
// three readings, 1,000,000 is not.
const repeatsAgree = 3.0

// splitRepeats cuts a list of repeats into its values. ";" always separates, and leaves the comma to be a decimal comma. Without it a comma
// separates where it stands beside anything but digits, or a space follows it; between digits one comma alone is a decimal comma, and
// several separate where the values agree with each other as repeats do.
func splitRepeats(name, text string) ([]string, error) {
	if strings.ContainsRune(text, ';') {
		return nonEmpty(name, text, strings.Split(text, ";"))
	}
	var items []string
	var doubtful []int // commas between two digits
	from := 0
	for i := range len(text) {
		if text[i] != ',' {
			continue
		}
		if i > 0 && i+1 < len(text) && isDigit(text[i-1]) && isDigit(text[i+1]) {
			doubtful = append(doubtful, i)
			continue
		}
		items = append(items, text[from:i])
		from = i + 1
	}
	items = append(items, text[from:])
	if len(doubtful) == 0 || len(items) > 1 || len(doubtful) == 1 && !looksRepeated(text, doubtful[0]) {
		return nonEmpty(name, text, items)
	}
	if len(doubtful) == 1 {
		i := doubtful[0]
		return nil, &Error{
			Of: name, Problem: shown(text) + " could be", Meanings: []string{
				"one value with a decimal comma: write " + text[:i] + "." + text[i+1:],
				"two readings: write \"" + text[:i] + ", " + text[i+1:] + "\"",
			},
		}
	}
	items = strings.Split(text, ",")
	if !agree(items) {
		return nil, problem(name, "%s is ambiguous: the commas may separate thousands, decimals or repeats", shown(text)).
			hint("write repeats as \"180, 182, 181\", and a decimal as 1.5")
	}
	return nonEmpty(name, text, items)
}

// looksRepeated reports whether what stands on both sides of a lone comma reads as two like values: "2010,2015".
func looksRepeated(text string, comma int) bool {
	after := strings.TrimRightFunc(text[comma+1:], unicode.IsLetter)
	return comma >= 2 && len(after) == comma && len(after) != 3 && agree([]string{text[:comma], after})
}

// agree reports whether whole numbers lie as near to each other as repeats do. A number with a leading zero is a group of digits.
func agree(items []string) bool {
	low, high := 0.0, 0.0
	for i, item := range items {
		item = strings.TrimRightFunc(strings.TrimSpace(item), func(r rune) bool { return !unicode.IsDigit(r) })
		x, err := strconv.ParseFloat(item, 64)
		if err != nil || x <= 0 || len(item) > 1 && item[0] == '0' && item[1] != '.' {
			return false
		}
		if i == 0 || x < low {
			low = x
		}
		high = max(high, x)
	}
	return high <= repeatsAgree*low
}

func nonEmpty(name, text string, items []string) ([]string, error) {
	if len(items) > MaxRepeats {
		return nil, problem(name, "%d repeats are too many; at most %d", len(items), MaxRepeats)
	}
	for i := range items {
		if items[i] = strings.TrimSpace(items[i]); items[i] == "" {
			return nil, problem(name, "%s has an empty place", shown(text))
		}
	}
	return shareSuffix(items), nil
}

// shareSuffix gives a series written as "180, 182, 181 uA" the unit of its last value throughout.
func shareSuffix(items []string) []string {
	last := items[len(items)-1]
	digits := strings.TrimRightFunc(last, func(r rune) bool { return !unicode.IsDigit(r) })
	suffix := last[len(digits):]
	if suffix == "" || digits == "" {
		return items
	}
	for _, item := range items[:len(items)-1] {
		if !isDigit(item[len(item)-1]) || strings.ContainsFunc(item, unicode.IsLetter) {
			return items
		}
	}
	for i := range items[:len(items)-1] {
		items[i] += suffix
	}
	return items
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// isOver reports whether a text is what a meter shows above its range.
func isOver(text string) bool {
	switch strings.ToUpper(text) {
	case "OL", "O.L", "O.L.", "0L", "0.L", ".OL", "OVER", "OVLD", "OFL":
		return true
	}
	return false
}
