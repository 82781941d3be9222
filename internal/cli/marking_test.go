package cli

import (
	"bytes"
	"context"
	"strings"
	"testing"
	"time"
	"unicode/utf8"
)

// Nothing that was typed reaches the screen unless it is fit for one.
func TestMarkingLetsNothingThrough(t *testing.T) {
	for _, text := range []string{
		"4k7\x1b[31m", "\x1b]0;title\x07", "4k7\u202e", "104\x00", "\xff\xfe", "4k7\u200b", "1\n04", "hello\u0085", strings.Repeat("\x1b", 200),
	} {
		for _, more := range [][]string{nil, {"--json"}, {"--all"}} {
			stdout, stderr, status := runHere(t, "", append([]string{"marking", text}, more...)...)
			if status != ExitRequest || stdout != "" {
				t.Errorf("%q %v: exit status %d, standard output %q", text, more, status, stdout)
			}
			if strings.ContainsAny(strings.TrimSuffix(stderr, "\n"), "\x1b\x07\x00\u202e\u200b\u0085") || !utf8.ValidString(stderr) {
				t.Errorf("%q %v: standard error %q", text, more, stderr)
			}
		}
	}
}

// A terminal without room for the table has a paragraph for each meaning, and no line that is too long.
func TestMarkingFitsTheTerminal(t *testing.T) {
	for _, width := range []int{40, 80, 200} {
		for _, words := range [][]string{{"47K"}, {"X1/Y2", "472M", "Y5U", "250VAC"}, {"942"}, {"brown", "black", "red", "gold"}} {
			var out bytes.Buffer
			status := Run(context.Background(), append([]string{"marking", "--all"}, words...), Env{
				In: strings.NewReader(""), Out: &out, Err: &out, Now: func() time.Time { return testTime },
				Getenv: func(string) string { return "" }, OutTerminal: true, Width: width,
			})
			if status != ExitDone {
				t.Fatalf("%v: exit status %d: %s", words, status, out.String())
			}
			for line := range strings.Lines(out.String()) {
				line = strings.TrimSuffix(line, "\n")
				if !strings.HasPrefix(line, "\x1b[1m") && utf8.RuneCountInString(line) > width {
					t.Errorf("%v at %d columns: %q", words, width, line)
				}
			}
		}
	}
}
