package cli

import (
	"context"
	"errors"
	"os"
	"os/exec"
	"os/signal"
	"path/filepath"
	"strconv"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"
)

// demoVariable tells the program under test where the demo box is; the real one embeds it.
const demoVariable = "GOODBIN_TEST_DEMO_BOX"

// testTime is the clock of the program under test.
var testTime = time.Date(2026, 3, 1, 12, 0, 0, 0, time.UTC)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"goodbin": testMain})
}

// testMain is main.go without a terminal, with a fixed clock, and with the demo box from a file.
func testMain() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	program, _ := exec.LookPath(os.Args[0])
	demo, _ := os.ReadFile(os.Getenv(demoVariable))
	status := Run(ctx, os.Args[1:], Env{
		In: os.Stdin, Out: os.Stdout, Err: os.Stderr, Now: func() time.Time { return testTime }, Getenv: os.Getenv, DemoBox: demo,
		Executable: program,
	})
	stop()
	os.Exit(status)
}

func TestScripts(t *testing.T) {
	demo, err := filepath.Abs("../../testdata/demo-box.csv")
	if err != nil {
		t.Fatal(err)
	}
	testscript.Run(t, testscript.Params{
		Dir: "testdata/script",
		Setup: func(e *testscript.Env) error {
			e.Setenv(demoVariable, demo)
			e.Setenv("GOODBIN_WORKBOOK", filepath.Join(e.WorkDir, "parts.goodbin"))
			return nil
		},
		Cmds: map[string]func(*testscript.TestScript, bool, []string){"status": status},
	})
}

// status runs a command and holds its exit status against the first argument.
func status(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: status N program args…")
	}
	want, err := strconv.Atoi(args[0])
	if err != nil {
		ts.Fatalf("status %q is no number", args[0])
	}
	got := 0
	err = ts.Exec(args[1], args[2:]...)
	var ended *exec.ExitError
	switch {
	case errors.As(err, &ended):
		got = ended.ExitCode()
	case err != nil:
		ts.Fatalf("%v", err)
	}
	if got != want {
		ts.Fatalf("exit status %d, want %d", got, want)
	}
}
