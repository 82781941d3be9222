package inventory

import (
	"bufio"
	"fmt"
	"io"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"

	"goodbin/screening"
)

// crashEnv names the workbook that the child of the crash test writes to.
const crashEnv = "GOODBIN_CRASH_WORKBOOK"

func TestMain(m *testing.M) {
	if path := os.Getenv(crashEnv); path != "" {
		fmt.Fprintln(os.Stderr, saveUntilKilled(path))
		os.Exit(3)
	}
	if os.Getenv(mountEnv) != "" {
		os.Exit(inOwnMounts())
	}
	os.Exit(m.Run())
}

// saveUntilKilled saves reading after reading, and says each on standard output once SavePart has returned: that is what the bench would
// have shown. Parts get two readings each, so that records grow as well as come.
func saveUntilKilled(path string) error {
	w, err := Open(path, Options{Create: true, Timeout: 5 * time.Second})
	if err != nil {
		return err
	}
	if _, err := w.Lot(1); err != nil {
		if _, err := w.AddLot(Lot{Kind: "electrolytic", Header: "2200uF 35V"}); err != nil {
			return err
		}
	}
	for {
		p, err := w.SavePart(judged(1, screening.Undecided, 2e-3), "capacitance 2m")
		if err != nil {
			return err
		}
		fmt.Printf("%s 1\n", p.ID)
		p.Part.Readings = append(p.Part.Readings, reading(screening.ESR, float64(p.ID.Number), fmt.Sprint(p.ID.Number)))
		p.Outcome.Verdict = screening.Accept
		w.SetPosition(Position{Page: "bench", Part: p.ID})
		if _, err := w.SavePart(p, "esr"); err != nil {
			return err
		}
		fmt.Printf("%s 2\n", p.ID)
	}
}

// crashOnce starts the child, kills it some time after it has said so many readings, and returns all that it said.
func crashOnce(t *testing.T, path string, enough int, after time.Duration) []string {
	t.Helper()
	cmd := exec.Command(os.Args[0])
	cmd.Env = append(os.Environ(), crashEnv+"="+path)
	out, err := cmd.StdoutPipe()
	must0(t, err)
	complaint, err := cmd.StderrPipe()
	must0(t, err)
	must0(t, cmd.Start())
	kill := func() { _ = cmd.Process.Kill() }
	defer time.AfterFunc(2*time.Second, kill).Stop()
	if enough == 0 {
		time.AfterFunc(after, kill) // before or while the file is opened or made
	}
	var said []string
	lines := bufio.NewReader(out)
	for {
		line, err := lines.ReadString('\n')
		if err != nil {
			break // an unfinished line was not acknowledged
		}
		said = append(said, strings.TrimSpace(line))
		if len(said) == enough {
			time.AfterFunc(after, kill)
		}
	}
	words, _ := io.ReadAll(complaint)
	_ = cmd.Wait()
	if len(words) > 0 {
		t.Fatalf("the child ended by itself: %s", words)
	}
	return said
}

func TestNoAcknowledgedReadingIsLostWhenTheProgramIsKilled(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("there is no SIGKILL to send")
	}
	path := filepath.Join(t.TempDir(), "parts.goodbin")
	random := rand.New(rand.NewPCG(3, 4))
	rounds, limit := 30, time.Now().Add(20*time.Second)
	if testing.Short() {
		rounds = 5
	}
	readings := map[ID]int{}
	total, killed := 0, 0
	for ; killed < rounds && time.Now().Before(limit); killed++ {
		for _, line := range crashOnce(t, path, random.IntN(20), time.Duration(random.IntN(8000))*time.Microsecond) {
			var text string
			var n int
			_, err := fmt.Sscan(line, &text, &n)
			must0(t, err)
			id, err := ParseID(text)
			must0(t, err)
			readings[id] = n
			total++
		}
		if _, err := os.Stat(path); err != nil && total == 0 {
			continue // killed before there was a workbook
		}
		checkAcknowledged(t, path, readings)
		if t.Failed() {
			t.Fatalf("after %d kills", killed+1)
		}
	}
	t.Logf("%d kills, %d acknowledged readings, none lost", killed, total)
	if killed < min(rounds, 5) || total < 20 {
		t.Errorf("only %d kills and %d readings: nothing was tested", killed, total)
	}
}

// checkAcknowledged verifies the file that a killed process left, and looks for every reading that it had said.
func checkAcknowledged(t *testing.T, path string, readings map[ID]int) {
	t.Helper()
	if report, err := Verify(path); err != nil {
		t.Errorf("verify: %v, %v", err, report.Problems)
		return
	}
	w := mustOpen(t, path, Options{ReadOnly: true})
	defer w.Close()
	for id, n := range readings {
		p, err := w.GetPart(id)
		if err != nil || len(p.Part.Readings) < n {
			t.Errorf("%s: %d readings acknowledged, %d found, %v", id, n, len(p.Part.Readings), err)
		}
	}
	if left, err := filepath.Glob(filepath.Join(filepath.Dir(path), ".*.new-*")); err != nil || len(left) > 1 {
		t.Logf("half-made workbooks left: %v", left)
	}
}
