package cli

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"goodbin/inventory"
	"goodbin/screening"
)

func TestCleanLetsNothingReachTheScreen(t *testing.T) {
	for text, want := range map[string]string{
		"plain":                   "plain",
		"2200 µF ±20 %":           "2200 µF ±20 %",
		"a\x1b[31mred":            "a\uFFFD[31mred",
		"two\nlines\tand a tab":   "two lines and a tab",
		"bell\a and delete\x7f":   "bell\uFFFD and delete\uFFFD",
		"C1 \u009b31m":            "C1 \uFFFD31m",
		"turned \u202eround":      "turned \uFFFDround",
		"hidden \u200b zero":      "hidden \uFFFD zero",
		"bad byte \xff":           "bad byte \uFFFD",
		"\u2028line\u2029 breaks": " line  breaks",
	} {
		if got := clean(text); got != want {
			t.Errorf("clean(%q) = %q, want %q", text, got, want)
		}
	}
	e := Env{ascii: true}
	if got, want := e.clean("61 mΩ ±1 µF ≤ 3 ☃"), "61 mohm +/-1 uF <= 3 ?"; got != want {
		t.Errorf("in ASCII %q, want %q", got, want)
	}
}

func TestWordWrap(t *testing.T) {
	got := wordWrap("one two three µµµµ a-word-longer-than-the-line end", 9)
	want := []string{"one two", "three", "µµµµ", "a-word-longer-than-the-line", "end"}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

func TestDashWords(t *testing.T) {
	got := dashWords([]string{"judge", "-10/+50%", "--json", "-o", "-", "-.5", "-5C"})
	want := []string{"judge", "\u221210/+50%", "--json", "-o", "-", "\u2212.5", "\u22125C"}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

func TestDataDirectory(t *testing.T) {
	tests := []struct{ name, system, home, xdg, local, want string }{
		{"Linux", "linux", "/home/a", "", "", "/home/a/.local/share"},
		{"Linux with its own data directory", "linux", "/home/a", "/data", "", "/data"},
		{"a relative data directory does not count", "linux", "/home/a", "data", "", "/home/a/.local/share"},
		{"macOS", "darwin", "/Users/a", "", "", "/Users/a/Library/Application Support"},
		{"Windows", "windows", "", "", `C:\Users\a\AppData\Local`, `C:\Users\a\AppData\Local`},
		{"no home", "linux", "", "", "", ""},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			env := map[string]string{"HOME": tt.home, "XDG_DATA_HOME": tt.xdg, "LOCALAPPDATA": tt.local}
			if got := dataDirectory(tt.system, func(name string) string { return env[name] }); got != tt.want {
				t.Errorf("data directory %q, want %q", got, tt.want)
			}
		})
	}
}

func TestSettle(t *testing.T) {
	tests := []struct {
		name         string
		env          map[string]string
		terminal     bool
		flag         bool
		ascii, plain bool
	}{
		{"a terminal with UTF-8", map[string]string{"LANG": "de_DE.UTF-8"}, true, false, false, false},
		{"a terminal without", map[string]string{"LANG": "C"}, true, false, true, false},
		{"LC_ALL before LANG", map[string]string{"LC_ALL": "C", "LANG": "de_DE.UTF-8"}, true, false, true, false},
		{"a pipe keeps UTF-8 and has no colour", map[string]string{"LANG": "C"}, false, false, false, true},
		{"--ascii", nil, false, true, true, true},
		{"NO_COLOR", map[string]string{"NO_COLOR": "1"}, true, false, false, true},
		{"a dumb terminal", map[string]string{"TERM": "dumb"}, true, false, false, true},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			e := Env{OutTerminal: tt.terminal, Getenv: func(name string) string { return tt.env[name] }}
			e.settle(tt.flag)
			if e.ascii != tt.ascii || e.plain != tt.plain {
				t.Errorf("ascii %v, plain %v; want %v, %v", e.ascii, e.plain, tt.ascii, tt.plain)
			}
		})
	}
}

func TestStatusOf(t *testing.T) {
	tests := []struct {
		name string
		err  error
		want int
	}{
		{"nothing wrong", nil, ExitDone},
		{"some part not accepted", silent(ExitNotAccepted), ExitNotAccepted},
		{"a wrong request", request(errors.New("x"), ""), ExitRequest},
		{"anything unforeseen", errors.New("x"), ExitRequest},
		{"busy", fmt.Errorf("x: %w", inventory.ErrBusy), ExitWorkbook},
		{"corrupt", inventory.ErrCorrupt, ExitWorkbook},
		{"a full disk", inventory.ErrFull, ExitWorkbook},
		{"interrupted", context.Canceled, ExitInterrupted},
		{"the reader of the output went away", io.ErrClosedPipe, ExitDone},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			if got := statusOf(tt.err); got != tt.want {
				t.Errorf("exit status %d, want %d", got, tt.want)
			}
		})
	}
}

func TestAnInterruptedScreeningEndsWith130(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	box := filepath.Join(t.TempDir(), "box.csv")
	if err := os.WriteFile(box, []byte(boxOf(1000)), 0o600); err != nil {
		t.Fatal(err)
	}
	status := Run(ctx, []string{"screen", box, "--workbook", filepath.Join(t.TempDir(), "w.goodbin")}, Env{
		In: strings.NewReader(""), Out: io.Discard, Err: io.Discard, Getenv: func(string) string { return "" }, Now: func() time.Time { return testTime },
	})
	if status != ExitInterrupted {
		t.Errorf("exit status %d, want %d", status, ExitInterrupted)
	}
}

// TestCtrlCEndsAPromptThatNobodyAnswers interrupts the linear mode and a screening of standard input while they wait.
func TestCtrlCEndsAPromptThatNobodyAnswers(t *testing.T) {
	for _, args := range [][]string{{"bench", "--lines"}, {"screen", "-"}} {
		t.Run(args[0], func(t *testing.T) {
			ctx, cancel := context.WithCancel(t.Context())
			in, keyboard := io.Pipe()
			defer keyboard.Close()
			done := make(chan int)
			go func() {
				done <- Run(ctx, append(args, "--workbook", filepath.Join(t.TempDir(), "w.goodbin")), Env{
					In: in, Out: io.Discard, Err: io.Discard, Getenv: func(string) string { return "" }, Now: func() time.Time { return testTime },
				})
			}()
			io.WriteString(keyboard, "kind,claim,resistance\n") // answers the first prompt, or is the header
			cancel()
			select {
			case status := <-done:
				if status != ExitInterrupted {
					t.Errorf("exit status %d, want %d", status, ExitInterrupted)
				}
			case <-time.After(10 * time.Second):
				t.Fatal("still waiting")
			}
		})
	}
}

// TestBothFacesOfTheCommandLineAgree screens a box and types the same readings in the linear mode: the verdicts are the same.
func TestBothFacesOfTheCommandLineAgree(t *testing.T) {
	dir := t.TempDir()
	box := filepath.Join(dir, "box.csv")
	csv := "kind,lot,part,claim,resistance,seen\nresistor,1,1,4k7 5%,4.68k,nothing\nresistor,1,2,,5.9k,nothing\nresistor,1,3,,4.9k,nothing\n"
	if err := os.WriteFile(box, []byte(csv), 0o600); err != nil {
		t.Fatal(err)
	}
	verdicts := func(workbook string) string {
		stdout, _, _ := runHere(t, "", "stock", "--all", "--by", "id", "--workbook", workbook)
		return stdout
	}
	screened, typed := filepath.Join(dir, "screened.goodbin"), filepath.Join(dir, "typed.goodbin")
	if _, stderr, status := runHere(t, "", "screen", box, "--workbook", screened); status == ExitRequest || stderr != "" {
		t.Fatalf("screen: exit status %d: %s", status, stderr)
	}
	answers := "resistor\n4k7 5%\n\n\n0\n4.68\n\n0\n5.9\n\n0\n4.9\nq\n"
	if _, stderr, status := runHere(t, answers, "bench", "--lines", "--workbook", typed); status != ExitDone || stderr != "" {
		t.Fatalf("bench: exit status %d: %s", status, stderr)
	}
	want, got := verdicts(screened), verdicts(typed)
	if strings.Count(want, "\n") != 3 || want != got {
		t.Errorf("screened:\n%styped:\n%s", want, got)
	}
}

// TestLinesNeverEndOddly feeds the linear mode answers of every sort; it must end by itself and leave nothing unprintable.
func TestLinesNeverEndOddly(t *testing.T) {
	for name, answers := range map[string]string{
		"nothing":              "",
		"half a line":          "resis",
		"unknown kinds":        "x\ny\n\nq\n",
		"escapes":              "resistor\n\x1b[31m\n4k7\n\x1b]0;x\a\n\n0\n\x1b[2J\nq\n",
		"a line of a megabyte": "resistor\n" + strings.Repeat("4", 1<<20) + "\n4k7\n\n\nq\n",
		"only commands":        "resistor\n4k7\n\n\nb\nr\nw\ng\n?\nn\nl\n?\nq\n",
		"back at the start":    "resistor\n4k7\n\n\nb\n0\nb\nb\nq\n",
	} {
		t.Run(name, func(t *testing.T) {
			stdout, stderr, status := runHere(t, answers, "bench", "--lines", "--workbook", filepath.Join(t.TempDir(), "w.goodbin"))
			if status != ExitDone || stderr != "" {
				t.Errorf("exit status %d, standard error %q", status, stderr)
			}
			for line := range strings.Lines(stdout) {
				if text := strings.TrimSuffix(line, "\n"); clean(text) != text {
					t.Errorf("unprintable: %q", text)
				}
			}
		})
	}
}

// boxOf is a box of electrolytics, as a spreadsheet would hold it.
func boxOf(parts int) string {
	var b strings.Builder
	b.WriteString("kind,lot,part,place,claim,capacitance,esr@120Hz,\"leakage@35V,2min\",temperature,seen\n")
	for i := range parts {
		fmt.Fprintf(&b, "electrolytic,12,%d,tray A,2200uF 35V M,%duF,%dm,%duA,24C,nothing\n", i+1, 1900+i%200, 50+i%30, 40+i%20)
	}
	return b.String()
}

// BenchmarkScreen judges and stores a box of 50,000 parts; the aim is 50,000 parts a second.
func BenchmarkScreen(b *testing.B) {
	const parts = 50_000
	box := boxOf(parts)
	for b.Loop() {
		workbook := filepath.Join(b.TempDir(), "parts.goodbin")
		stdout, stderr, status := runHere(b, box, "screen", "-", "--workbook", workbook)
		if status != ExitDone || stderr != "" || !strings.Contains(stdout, "50000 parts: 50000 accept") {
			b.Fatalf("exit status %d: %s", status, stderr)
		}
	}
	b.ReportMetric(float64(parts)*float64(b.N)/b.Elapsed().Seconds(), "parts/s")
}

// BenchmarkScreenJudgeOnly is the same without a workbook.
func BenchmarkScreenJudgeOnly(b *testing.B) {
	const parts = 50_000
	box := boxOf(parts)
	for b.Loop() {
		if _, stderr, status := runHere(b, box, "screen", "-", "--keep=false"); status != ExitDone || stderr != "" {
			b.Fatalf("exit status %d: %s", status, stderr)
		}
	}
	b.ReportMetric(float64(parts)*float64(b.N)/b.Elapsed().Seconds(), "parts/s")
}

func TestCountsText(t *testing.T) {
	counts := map[screening.Verdict]int{screening.Accept: 2, screening.Reject: 1}
	of := func(v screening.Verdict) int { return counts[v] }
	for _, tt := range []struct {
		parts, wrong int
		want         string
	}{{3, 0, "3 parts: 2 accept, 1 reject"}, {3, 1, "3 parts: 2 accept, 1 reject; 1 row wrong"}, {1, 2, "1 part: 2 accept, 1 reject; 2 rows wrong"}} {
		if got := countsText(tt.parts, tt.wrong, of); got != tt.want {
			t.Errorf("%q, want %q", got, tt.want)
		}
	}
}
