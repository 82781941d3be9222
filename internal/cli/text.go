package cli

import (
	"fmt"
	"io"
	"strings"
	"unicode"
	"unicode/utf8"

	"github.com/mattn/go-runewidth"
)

// asciiSpelling spells the signs that goodbin prints where a terminal has nothing but ASCII.
var asciiSpelling = strings.NewReplacer(
	"µ", "u", "μ", "u", "Ω", "ohm", "\u2126", "ohm", "±", "+/-", "≤", "<=", "≥", ">=", "×", "x", "·", "*", "÷", "/", "−", "-", "–", "-", "—", "-",
	"δ", "delta", "Δ", "delta", "ϑ", "T", "°", "deg ", "…", "...", "√", "sqrt ", "²", "^2", "³", "^3", "½", "1/2", "β", "beta", "π", "pi",
	"≈", "~", "→", "->", "←", "<-", "∞", "inf", "\u00a0", " ", "\u202f", " ", "“", `"`, "”", `"`, "’", "'", "‘", "'", "ä", "ae", "ö", "oe", "ü", "ue",
	"Ä", "Ae", "Ö", "Oe", "Ü", "Ue", "ß", "ss", "é", "e", "è", "e",
)

// clean makes a text that was typed or read from a file fit for one line: control characters, terminal escapes, invalid bytes and
// characters that hide or reorder text become visible stand-ins; line breaks and tabs become spaces.
func clean(text string) string {
	if isPlain(text) {
		return text
	}
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n', r == '\r', r == '\t', r == '\v', r == '\f', r == '\u2028', r == '\u2029', r == '\u0085':
			return ' '
		case !unicode.IsGraphic(r):
			return utf8.RuneError
		}
		return r
	}, text)
}

func isPlain(text string) bool {
	for i := range len(text) {
		if text[i] < ' ' || text[i] > '~' {
			return false
		}
	}
	return true
}

// clean is the package's clean, spelt in ASCII where that is asked for.
func (e *Env) clean(text string) string {
	text = clean(text)
	if !e.ascii || isPlain(text) {
		return text
	}
	return strings.Map(func(r rune) rune {
		if r > '~' {
			return '?'
		}
		return r
	}, asciiSpelling.Replace(text))
}

// line prints one cleaned line.
func (e *Env) line(format string, args ...any) error {
	_, err := io.WriteString(e.Out, e.clean(fmt.Sprintf(format, args...))+"\n")
	return err
}

// note prints one cleaned line to standard error.
func (e *Env) note(format string, args ...any) {
	io.WriteString(e.Err, e.clean(fmt.Sprintf(format, args...))+"\n")
}

// strong prints one cleaned line in bold where the terminal has it.
func (e *Env) strong(text string) error {
	if e.plain {
		return e.line("%s", text)
	}
	_, err := io.WriteString(e.Out, "\x1b[1m"+e.clean(text)+"\x1b[0m\n")
	return err
}

// wrapped prints a text in lines that fit the terminal, the first after a label and the others under its end.
func (e *Env) wrapped(label, text string) error {
	text = e.clean(text)
	room := e.width() - len(label)
	indent := strings.Repeat(" ", len(label))
	for i, l := range wordWrap(text, max(room, 20)) {
		head := indent
		if i == 0 {
			head = label
		}
		if _, err := io.WriteString(e.Out, strings.TrimRight(head+l, " ")+"\n"); err != nil {
			return err
		}
	}
	return nil
}

// wordWrap cuts a text at spaces into lines of at most room cells; a longer word stands alone.
func wordWrap(text string, room int) []string {
	var lines []string
	var line strings.Builder
	used := 0
	for word := range strings.FieldsSeq(text) {
		w := runewidth.StringWidth(word)
		if used > 0 && used+1+w > room {
			lines = append(lines, line.String())
			line.Reset()
			used = 0
		}
		if used > 0 {
			line.WriteByte(' ')
			used++
		}
		line.WriteString(word)
		used += w
	}
	return append(lines, line.String())
}

// width is the width that text is wrapped to.
func (e *Env) width() int {
	if e.Width <= 0 {
		return 100
	}
	return max(e.Width, 40)
}

// columns lays cleaned rows out in aligned columns.
func (e *Env) columns(rows [][]string) []string {
	var widths []int
	for _, row := range rows {
		for i := range row {
			row[i] = e.clean(row[i])
			if i == len(widths) {
				widths = append(widths, 0)
			}
			widths[i] = max(widths[i], runewidth.StringWidth(row[i]))
		}
	}
	lines := make([]string, len(rows))
	for n, row := range rows {
		var b strings.Builder
		for i, cell := range row {
			if i > 0 {
				b.WriteString("  ")
			}
			b.WriteString(cell)
			b.WriteString(strings.Repeat(" ", widths[i]-runewidth.StringWidth(cell)))
		}
		lines[n] = strings.TrimRight(b.String(), " ")
	}
	return lines
}

// table prints rows aligned where a person reads, separated by tabs where a program does.
func (e *Env) table(rows [][]string) error {
	lines := make([]string, 0, len(rows))
	if e.OutTerminal {
		lines = e.columns(rows)
	} else {
		for _, row := range rows {
			for i := range row {
				row[i] = e.clean(row[i])
			}
			lines = append(lines, strings.Join(row, "\t"))
		}
	}
	_, err := io.WriteString(e.Out, strings.Join(lines, "\n")+"\n")
	return err
}

func containsFold(text, part string) bool { return strings.Contains(strings.ToLower(text), part) }
