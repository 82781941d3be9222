package tui

import (
	"strconv"
	"strings"

	"github.com/charmbracelet/x/ansi"
)

// width returns how many cells a text takes, colour sequences aside.
func width(text string) int {
	if plain(text) {
		return len(text)
	}
	return ansi.StringWidth(text)
}

// fit makes a text exactly w cells wide: cut with the sign `more` where it is too long, filled with spaces where it is short.
func fit(text string, w int, more string) string {
	if w <= 0 {
		return ""
	}
	n := width(text)
	if n > w {
		text = ansi.Truncate(text, w, more)
		n = width(text)
	}
	return text + spaces(w-n)
}

// fitRight is fit for numbers: filled from the left.
func fitRight(text string, w int, more string) string {
	if n := width(text); n < w {
		return spaces(w-n) + text
	}
	return fit(text, w, more)
}

const blanks = "                                                                                                                                "

func spaces(n int) string {
	if n <= 0 {
		return ""
	}
	if n <= len(blanks) {
		return blanks[:n]
	}
	return strings.Repeat(" ", n)
}

// wrap breaks a text at spaces into lines of at most w cells; a word longer than a line is cut into pieces.
func wrap(text string, w int) []string {
	if w <= 0 || text == "" {
		return nil
	}
	return strings.Split(ansi.Wrap(text, w, ""), "\n")
}

// wrapHang wraps a text with a prefix before the first line and as many spaces before the others. At most limit lines are returned, the
// last one ending in more where something was left out; limit 0 means all.
func wrapHang(prefix, text string, w, limit int, more string) []string {
	indent := width(prefix)
	lines := wrap(text, w-indent)
	if limit > 0 && len(lines) > limit {
		lines = lines[:limit]
		lines[limit-1] = ansi.Truncate(lines[limit-1], max(0, w-indent-width(more)), "") + more
	}
	for i := range lines {
		if i == 0 {
			lines[i] = prefix + lines[i]
		} else {
			lines[i] = spaces(indent) + lines[i]
		}
	}
	return lines
}

// block makes lines exactly w cells wide and h lines high.
func block(lines []string, w, h int, more string) []string {
	out := make([]string, h)
	for i := range out {
		if i < len(lines) {
			out[i] = fit(lines[i], w, more)
		} else {
			out[i] = spaces(w)
		}
	}
	return out
}

// beside joins two blocks of the same height with a separator between them.
func beside(left, right []string, sep string) []string {
	out := make([]string, len(left))
	for i := range left {
		out[i] = left[i] + sep
		if i < len(right) {
			out[i] += right[i]
		}
	}
	return out
}

// between puts one text at the left and one at the right end of a line w cells wide; the left one is cut first.
func between(left, right string, w int, more string) string {
	n := width(right)
	if n >= w {
		return fit(right, w, more)
	}
	if n == 0 {
		return fit(left, w, more)
	}
	return fit(left, w-n-1, more) + " " + right
}

// plural writes a number of things.
func plural(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return strconv.Itoa(n) + " " + thing + "s"
}
