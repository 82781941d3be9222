// Goodbin decides, part by part, what from a stash of old electronic parts may go back into a circuit, and finds it again.
package main

import (
	"context"
	_ "embed"
	"os"
	"os/signal"
	"syscall"
	"time"

	"golang.org/x/term"

	"goodbin/internal/cli"
)

//go:embed testdata/demo-box.csv
var demoBox []byte

func main() { os.Exit(run()) }

func run() int {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM, syscall.SIGHUP)
	defer stop()
	// The first interrupt ends the work in order; after it the signal has its default effect again, so that a second one kills.
	context.AfterFunc(ctx, stop)
	program, err := os.Executable()
	if err != nil {
		program = os.Args[0]
	}
	width, height, err := term.GetSize(int(os.Stdout.Fd()))
	if err != nil {
		width, height = 0, 0
	}
	return cli.Run(ctx, os.Args[1:], cli.Env{
		In: os.Stdin, Out: os.Stdout, Err: os.Stderr, Now: time.Now, Getenv: os.Getenv, DemoBox: demoBox, Executable: program,
		Width: width, Height: height,
		InTerminal:  term.IsTerminal(int(os.Stdin.Fd())),
		OutTerminal: term.IsTerminal(int(os.Stdout.Fd())),
		ErrTerminal: term.IsTerminal(int(os.Stderr.Fd())),
	})
}
