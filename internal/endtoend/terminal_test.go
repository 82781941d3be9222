package endtoend_test

import (
	"errors"
	"fmt"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// terminal is a real one: tmux on a socket of its own.
type terminal struct {
	t      *testing.T
	socket string
}

// openTerminal runs a shell command in a terminal of a size. The test is skipped where tmux is not installed: only a terminal shows these
// things, and everything else about the pages is tested without one.
func openTerminal(t *testing.T, width, height int, command string) *terminal {
	t.Helper()
	if _, err := exec.LookPath("tmux"); err != nil {
		t.Skip("tmux is not installed; the pages are tested in a real terminal only where it is")
	}
	term := &terminal{t, filepath.Join(t.TempDir(), "tmux")}
	t.Cleanup(func() { _ = exec.Command("tmux", "-S", term.socket, "kill-server").Run() })
	term.tmux("-f", "/dev/null", "new-session", "-d", "-x", fmt.Sprint(width), "-y", fmt.Sprint(height), command+"; echo; echo left with $?; sleep 60")
	return term
}

func (term *terminal) tmux(args ...string) string {
	term.t.Helper()
	out, err := exec.Command("tmux", append([]string{"-S", term.socket}, args...)...).CombinedOutput()
	if err != nil {
		term.t.Fatalf("tmux %v: %v\n%s", args, err, out)
	}
	return string(out)
}

func (term *terminal) screen() string { return term.tmux("capture-pane", "-p") }

// await polls until the screen shows a text.
func (term *terminal) await(text string) string {
	term.t.Helper()
	for end := time.Now().Add(20 * time.Second); time.Now().Before(end); time.Sleep(30 * time.Millisecond) {
		if s := term.screen(); strings.Contains(s, text) {
			return s
		}
	}
	term.t.Fatalf("the screen never shows %q:\n%s", text, term.screen())
	return ""
}

func (term *terminal) keys(keys ...string) {
	term.tmux(append([]string{"send-keys", "--"}, keys...)...)
}
func (term *terminal) text(text string) { term.tmux("send-keys", "-l", "--", text) }

// enter types a text and Enter.
func (term *terminal) enter(text string) {
	if text != "" {
		term.text(text)
	}
	term.keys("Enter")
}

// sameLot is a lot of film resistors, 4k7 ±5 %: what is typed for each part and what must come of it.
var sameLot = []struct{ reading, verdict string }{
	{"4.71", "accept"},
	{"5.2", "regrade"}, // out of tolerance, still of use as measured
	{"OL", "reject"},
}

// The same lot is measured on the page at three sizes, in grey and in ASCII, and in linear mode through a pipe: the same verdicts.
func TestPageAndLinearModeSayTheSame(t *testing.T) {
	program := buildProgram(t)
	for _, face := range []struct {
		name          string
		width, height int
		env, flags    string
	}{
		{"80×24", 80, 24, "", ""},
		{"120×40", 120, 40, "", ""},
		{"60×20", 60, 20, "", ""},
		{"80×24 without colour", 80, 24, "NO_COLOR=1", ""},
		{"80×24 in ASCII", 80, 24, "", "--ascii"},
	} {
		t.Run(face.name, func(t *testing.T) {
			workbook := filepath.Join(t.TempDir(), "page.goodbin")
			term := openTerminal(t, face.width, face.height,
				fmt.Sprintf("env TERM=xterm-256color %s %s %s --workbook %s", face.env, program, face.flags, workbook))
			term.await("New lot")
			for _, text := range []string{"resistor", "4k7 5% carbon-film", "tray A", "", "", ""} {
				term.enter(text)
			}
			for i, part := range sameLot {
				term.await(fmt.Sprintf("1-%02d", i+1))
				term.await("look: the digits")
				term.enter("00")
				term.await("resistance")
				term.enter(part.reading)
				s := term.await(part.verdict)
				if face.flags == "--ascii" {
					inASCII(t, s)
				}
			}
			term.keys("C-c")
			term.await("left with 0")
			stockSays(t, program, workbook)
		})
	}
	t.Run("linear mode through a pipe", func(t *testing.T) {
		workbook := filepath.Join(t.TempDir(), "lines.goodbin")
		answers := "resistor\n4k7 5% carbon-film\ntray A\n\n"
		for _, part := range sameLot {
			answers += "n\n" + part.reading + "\n\n"
		}
		lines := exec.Command(program, "bench", "--lines", "--workbook", workbook)
		lines.Stdin = strings.NewReader(answers + "q\n")
		out, err := lines.CombinedOutput()
		if err != nil {
			t.Errorf("linear mode: %v\n%s", err, out)
		}
		for i, part := range sameLot {
			if want := fmt.Sprintf("1-%02d: %s", i+1, strings.ToUpper(part.verdict)); !strings.Contains(string(out), want) {
				t.Errorf("linear mode never says %q:\n%s", want, out)
			}
		}
		stockSays(t, program, workbook)
	})
}

// stockSays checks the verdicts that a workbook holds.
func stockSays(t *testing.T, program, workbook string) {
	t.Helper()
	out, err := exec.Command(program, "stock", "--all", "--by", "id", "--workbook", workbook).CombinedOutput()
	rows := strings.Split(string(out), "\n")
	if err != nil || len(rows) < len(sameLot) {
		t.Fatalf("stock: %v\n%s", err, out)
	}
	for i, part := range sameLot {
		if !strings.HasPrefix(rows[i], fmt.Sprintf("1-%02d\t%s", i+1, part.verdict)) {
			t.Errorf("stock says %q; want %s", rows[i], part.verdict)
		}
	}
}

func inASCII(t *testing.T, screen string) {
	t.Helper()
	for _, r := range screen {
		if r > 126 {
			t.Errorf("%q on an ASCII screen:\n%s", r, screen)
			return
		}
	}
}

// A window that is closed or a program that is killed leaves the workbook as it was acknowledged; reopening lands on the same part.
func TestReopeningLandsOnTheSamePart(t *testing.T) {
	program, workbook := buildProgram(t), filepath.Join(t.TempDir(), "again.goodbin")
	command := "env TERM=xterm-256color " + program + " --workbook " + workbook
	first := openTerminal(t, 80, 24, command)
	first.await("New lot")
	for _, text := range []string{"resistor", "10k 5%", "tray B", "", "", ""} {
		first.enter(text)
	}
	first.await("look: the digits")
	first.enter("00")
	first.await("resistance")
	first.enter("9.98")
	first.await("1-02")
	first.tmux("kill-server")

	again := openTerminal(t, 80, 24, command)
	s := again.await("1-02")
	if !strings.Contains(s, "1-01") || !strings.Contains(s, "accept") {
		t.Errorf("the first part is not there:\n%s", s)
	}
	if cursor := strings.TrimSpace(again.tmux("display-message", "-p", "#{cursor_flag} #{cursor_y}")); !strings.HasPrefix(cursor, "1 ") {
		t.Errorf("the real cursor is not shown: %q", cursor)
	}
}

// While the pages have the workbook open, a second process is told so, and can take a copy and read that.
func TestASecondProcessReadsACopy(t *testing.T) {
	program, folder := buildProgram(t), t.TempDir()
	workbook, copied := filepath.Join(folder, "held.goodbin"), filepath.Join(folder, "copy.goodbin")
	term := openTerminal(t, 80, 24, "env TERM=xterm-256color "+program+" --workbook "+workbook)
	term.await("New lot")
	for _, text := range []string{"resistor", "10k 5%", "tray B", "", "", ""} {
		term.enter(text)
	}
	term.await("look: the digits")
	term.enter("00")
	term.await("resistance")
	term.enter("9.98")
	term.await("1-02")

	out, err := exec.Command(program, "stock", "--workbook", workbook).CombinedOutput()
	if status := exitStatus(err); status != 3 || !strings.Contains(string(out), "in use by process") || !strings.Contains(string(out), "goodbin backup") {
		t.Errorf("reading an open workbook: status %d\n%s", status, out)
	}
	if out, err = exec.Command(program, "backup", copied, "--workbook", workbook).CombinedOutput(); err != nil {
		t.Fatalf("backup: %v\n%s", err, out)
	}
	out, err = exec.Command(program, "stock", "--workbook", copied).CombinedOutput()
	if err != nil || !strings.HasPrefix(string(out), "1-01\taccept") {
		t.Errorf("stock of the copy: %v\n%s", err, out)
	}
}

func exitStatus(err error) int {
	var exit *exec.ExitError
	if errors.As(err, &exit) {
		return exit.ExitCode()
	}
	return 0
}
