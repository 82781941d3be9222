// Package cli is goodbin's command line: one file a command. It composes what the other packages do and holds no rule of the trade itself;
// it alone knows the table of all rulebooks.
//
// Standard output is for the answer and standard error for everything else. Nothing that was typed or read from a file reaches either
// without passing through [clean]. The exit statuses are in exit.go, the shapes of --json in the json_*.go files.
package cli
