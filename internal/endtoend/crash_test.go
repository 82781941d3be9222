package endtoend_test

import (
	"bufio"
	"context"
	"fmt"
	"math/rand/v2"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"goodbin/inventory"
)

// buildProgram builds the real program once for a test.
func buildProgram(t *testing.T) string {
	t.Helper()
	program := filepath.Join(t.TempDir(), "goodbin")
	if out, err := exec.Command("go", "build", "-o", program, "goodbin").CombinedOutput(); err != nil {
		t.Fatalf("go build: %v\n%s", err, out)
	}
	return program
}

// TestKilledBetweenReadingsNothingAcknowledgedIsLost runs the real program on a pipe, answers its questions about part after part, kills
// it with SIGKILL at a random moment, and looks for every reading that it had said was saved.
func TestKilledBetweenReadingsNothingAcknowledgedIsLost(t *testing.T) {
	program, workbook := buildProgram(t), filepath.Join(t.TempDir(), "crash.goodbin")
	random := rand.New(rand.NewPCG(7, 11))
	acknowledged := map[string]string{}
	rounds := 25
	if testing.Short() {
		rounds = 5
	}
	for round := range rounds {
		runAndKill(t, program, workbook, 1+random.IntN(12), round, acknowledged)
	}
	if len(acknowledged) < rounds {
		t.Fatalf("only %d readings were acknowledged in %d rounds; the test does not do its work", len(acknowledged), rounds)
	}
	w, err := inventory.Open(workbook, inventory.Options{ReadOnly: true})
	if err != nil {
		t.Fatalf("after %d kills: %v", rounds, err)
	}
	defer w.Close()
	for id, typed := range acknowledged {
		parsed, err := inventory.ParseID(id)
		if err != nil {
			t.Fatal(err)
		}
		part, err := w.GetPart(parsed)
		if err != nil {
			t.Errorf("%s: %v", id, err)
			continue
		}
		if n := len(part.Part.Readings); n == 0 || part.Part.Readings[n-1].Typed != typed {
			t.Errorf("%s: reading %q was acknowledged and is not there: %+v", id, typed, part.Part.Readings)
		}
	}
	t.Logf("%d kills, %d acknowledged readings, none lost", rounds, len(acknowledged))
}

// runAndKill answers until `until` readings were acknowledged, then kills the program at once.
func runAndKill(t *testing.T, program, workbook string, until, round int, acknowledged map[string]string) {
	t.Helper()
	ctx, cancel := context.WithTimeout(t.Context(), time.Minute)
	defer cancel()
	cmd := exec.CommandContext(ctx, program, "bench", "--lines", "--workbook", workbook)
	stdin, err := cmd.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	stdout, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	defer func() {
		_ = cmd.Process.Kill()
		_ = cmd.Wait()
	}()
	typed, said := "", []string{}
	lines := bufio.NewScanner(stdout)
	for n := 0; n < until && lines.Scan(); {
		line := lines.Text()
		said = append(said, line)
		if rest, ok := strings.CutPrefix(line, "saved "); ok && strings.Contains(rest, "resistance") {
			id, _, _ := strings.Cut(rest, " ")
			acknowledged[id] = typed
			n++
			continue
		}
		answer := ""
		switch {
		case strings.HasPrefix(line, "kind,"):
			answer = "resistor"
		case strings.HasPrefix(line, "what is printed"):
			answer = "4k7 5%"
		case strings.HasPrefix(line, "look:"):
			answer = "0"
		case strings.HasPrefix(line, "resistance"):
			typed = fmt.Sprintf("4.6%02d", (round*7+n)%100)
			answer = typed
		case !strings.HasSuffix(line, ":"):
			continue
		}
		if _, err := fmt.Fprintln(stdin, answer); err != nil {
			break
		}
	}
	if len(said) == 0 {
		t.Fatal("the program said nothing")
	}
}
