package tui

import (
	"io"
	"strings"

	"github.com/charmbracelet/lipgloss"
	"github.com/muesli/termenv"

	"goodbin/screening"
)

// ink is a pair of sequences that colour what stands between them. The zero ink colours nothing.
type ink struct{ open, end string }

// paint colours a text. Inks do not nest.
func (k ink) paint(text string) string {
	if k.open == "" || text == "" {
		return text
	}
	return k.open + text + k.end
}

// glyphs are the signs that pages draw with; each is one cell wide.
type glyphs struct {
	marker, rule, wall, bullet, more                           string
	outside, inside, bound, opened, closed, spread, dot        string // of a scale
	offLow, offHigh                                            string // a reading beyond the ends of a scale
	full, upper, lower                                         string // of large letters
	accept, regrade, treat, undecided, barred, reject, pending string
}

var unicodeGlyphs = glyphs{
	marker: "▸", rule: "─", wall: "│", bullet: "·", more: "…",
	outside: "┈", inside: "─", bound: "┃", opened: "(", closed: ")", spread: "═", dot: "◆", offLow: "◀", offHigh: "▶",
	full: "█", upper: "▀", lower: "▄",
	accept: "✓", regrade: "≈", treat: "+", undecided: "?", barred: "!", reject: "✗", pending: "·",
}

var asciiGlyphs = glyphs{
	marker: ">", rule: "-", wall: "|", bullet: "-", more: "~",
	outside: ".", inside: "-", bound: "|", opened: "(", closed: ")", spread: "=", dot: "o", offLow: "<", offHigh: ">",
	full: "#", upper: "", lower: "",
	accept: "*", regrade: "~", treat: "+", undecided: "?", barred: "!", reject: "x", pending: ".",
}

// theme is how things look: inks, signs, and whether there is anything but ASCII. It is built once.
type theme struct {
	ascii bool
	g     glyphs

	title, strong, faint, label, key, field, row, error, note, danger, demo ink
	verdicts                                                                [7]ink // by screening.Verdict
	outcomes                                                                [4]ink // by screening.Outcome
}

// newTheme builds the theme for an output. Letters take the sixteen colours of the terminal, so that its owner's palette holds; what
// stands on a colour takes both from the 256, so that the two always contrast.
func newTheme(out io.Writer, ascii, noColor bool) *theme {
	r := lipgloss.NewRenderer(out)
	if noColor {
		r.SetColorProfile(termenv.Ascii)
	}
	return themeFor(r, ascii)
}

func themeFor(r *lipgloss.Renderer, ascii bool) *theme {
	t := &theme{ascii: ascii, g: unicodeGlyphs}
	if ascii {
		t.g = asciiGlyphs
	}
	colour := func(c string) lipgloss.Style { return r.NewStyle().Foreground(lipgloss.Color(c)) }
	on := func(fg, bg string) lipgloss.Style { return colour(fg).Background(lipgloss.Color(bg)) }
	t.title = inkOf(colour("6").Bold(true))
	t.strong = inkOf(r.NewStyle().Bold(true))
	t.faint = inkOf(r.NewStyle().Faint(true))
	t.label = inkOf(colour("6"))
	t.key = inkOf(colour("6").Bold(true))
	t.field = inkOf(on("231", "25"))
	t.row = inkOf(on("231", "239").Bold(true))
	t.error = inkOf(colour("9").Bold(true))
	t.note = inkOf(colour("6"))
	t.danger = inkOf(on("231", "160").Bold(true))
	t.demo = inkOf(on("16", "214").Bold(true))
	for v, pair := range map[screening.Verdict][2]string{
		screening.Accept: {"231", "28"}, screening.Regrade: {"231", "30"}, screening.Treat: {"16", "178"}, screening.Undecided: {"231", "61"},
		screening.Barred: {"231", "90"}, screening.Reject: {"231", "124"}, screening.NoVerdict: {"231", "240"},
	} {
		t.verdicts[v] = inkOf(on(pair[0], pair[1]).Bold(true))
	}
	t.outcomes = [4]ink{
		screening.Missing: {}, screening.Pass: inkOf(colour("2")), screening.Close: inkOf(colour("3")), screening.Fail: t.error,
	}
	return t
}

// inkOf takes a style apart into what it writes before and after a text.
func inkOf(s lipgloss.Style) ink {
	open, end, found := strings.Cut(s.Render("x"), "x")
	if !found {
		return ink{}
	}
	return ink{open, end}
}

// clean makes a text fit for the screen; see the function clean.
func (t *theme) clean(text string) string { return clean(text, t.ascii) }

// verdictSign returns the sign that stands beside a verdict's word, so that no verdict is told by colour alone.
func (t *theme) verdictSign(v screening.Verdict) string {
	return [...]string{t.g.pending, t.g.accept, t.g.regrade, t.g.treat, t.g.undecided, t.g.barred, t.g.reject}[min(int(v), 6)]
}

// verdictInk returns the ink of a verdict's word as plain coloured text; reversed blocks use verdicts.
func (t *theme) verdictInk(v screening.Verdict) ink {
	return t.verdicts[min(int(v), len(t.verdicts)-1)]
}

func (t *theme) outcomeInk(o screening.Outcome) ink {
	return t.outcomes[min(int(o), len(t.outcomes)-1)]
}
