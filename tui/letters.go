package tui

import (
	"strings"

	"goodbin/screening"
)

// The letters of the six verdicts, five dots high.
var largeLetters = map[rune][5]string{
	'A': {"###", "#.#", "###", "#.#", "#.#"},
	'B': {"##.", "#.#", "##.", "#.#", "##."},
	'C': {"###", "#..", "#..", "#..", "###"},
	'D': {"##.", "#.#", "#.#", "#.#", "##."},
	'E': {"###", "#..", "##.", "#..", "###"},
	'G': {"####", "#...", "#.##", "#..#", "####"},
	'I': {"#", "#", "#", "#", "#"},
	'J': {"..#", "..#", "..#", "#.#", "###"},
	'N': {"#..#", "##.#", "#.##", "#..#", "#..#"},
	'P': {"###", "#.#", "###", "#..", "#.."},
	'R': {"###", "#.#", "##.", "#.#", "#.#"},
	'T': {"###", ".#.", ".#.", ".#.", ".#."},
	'U': {"#.#", "#.#", "#.#", "#.#", "###"},
}

// large writes a word in letters several lines high: three lines of half blocks, or five lines of # in ASCII. It returns nil for a word
// with a letter it has not.
func (t *theme) large(word string) []string {
	var dots [6]string
	for _, r := range strings.ToUpper(word) {
		letter, ok := largeLetters[r]
		if !ok {
			return nil
		}
		for i := range letter {
			dots[i] += letter[i] + "."
		}
		dots[5] += strings.Repeat(".", len(letter[0])+1)
	}
	if t.ascii {
		lines := make([]string, 5)
		for i := range lines {
			lines[i] = strings.ReplaceAll(dots[i], ".", " ")
		}
		return lines
	}
	lines := make([]string, 3)
	for i := range lines {
		var b strings.Builder
		for k := range dots[2*i] {
			upper, lower := dots[2*i][k] == '#', dots[2*i+1][k] == '#'
			switch {
			case upper && lower:
				b.WriteString(t.g.full)
			case upper:
				b.WriteString(t.g.upper)
			case lower:
				b.WriteString(t.g.lower)
			default:
				b.WriteByte(' ')
			}
		}
		lines[i] = b.String()
	}
	return lines
}

// verdictWord returns a verdict as the grid shows it: its sign and its word.
func (t *theme) verdictWord(v screening.Verdict) string { return t.verdictSign(v) + " " + v.String() }

// banner writes a verdict over the whole width, in large letters where there is room for them.
func (t *theme) banner(v screening.Verdict, beside string, w int, large bool) []string {
	paint := t.verdictInk(v).paint
	if large {
		if lines := t.large(v.String()); lines != nil && width(lines[0])+4 <= w {
			for i := range lines {
				lines[i] = paint(fit("  "+lines[i], w, ""))
			}
			return append(lines, paint(fit("  "+t.verdictSign(v)+" "+beside, w, t.g.more)))
		}
	}
	word := strings.ToUpper(v.String())
	return []string{paint(fit(" "+t.verdictSign(v)+" "+strings.Join(strings.Split(word, ""), " ")+"   "+beside, w, t.g.more))}
}
