package main

import (
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// The plan of the house: which of our packages each part may import, and who alone may import what is not ours.
var (
	mayImport = map[string][]string{
		"screening":    {"screening"},
		"rules":        {"rules", "screening"},
		"inventory":    {"inventory", "screening"},
		"tui":          {"tui", "inventory", "screening"},
		"internal/cli": {"internal/cli", "tui", "inventory", "rules", "screening"},
		"main":         {"internal/cli"},
	}
	onlyIn = map[string]string{
		"github.com/charmbracelet/": "tui",
		"github.com/muesli/":        "tui",
		"go.etcd.io/bbolt":          "inventory",
		"github.com/fxamacker/cbor": "inventory",
		"github.com/spf13/cobra":    "internal/cli",
	}
)

// room returns the part of the house that a file or an import path of ours belongs to.
func room(path string) string {
	if strings.HasPrefix(path, "internal/cli") {
		return "internal/cli"
	}
	first, _, _ := strings.Cut(filepath.ToSlash(path), "/")
	if strings.HasSuffix(first, ".go") {
		return "main"
	}
	return first
}

func TestImportsFollowThePlanOfTheHouse(t *testing.T) {
	checked := 0
	err := filepath.WalkDir(".", func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return err
		}
		file, err := parser.ParseFile(token.NewFileSet(), path, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		from := room(path)
		for _, spec := range file.Imports {
			to, err := strconv.Unquote(spec.Path.Value)
			if err != nil {
				return err
			}
			checked++
			if ours, ok := strings.CutPrefix(to, "goodbin/"); ok {
				if !slices.Contains(mayImport[from], room(ours)) {
					t.Errorf("%s imports %s; %s may import only %v", path, to, from, mayImport[from])
				}
				continue
			}
			for prefix, owner := range onlyIn {
				if strings.HasPrefix(to, prefix) && from != owner {
					t.Errorf("%s imports %s; only %s may", path, to, owner)
				}
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if checked < 50 {
		t.Errorf("only %d imports seen; the walk is broken", checked)
	}
}

func TestTopLevelHoldsOnlyThePlan(t *testing.T) {
	plan := []string{
		"tui", "screening", "inventory", "rules", "internal", "testdata", "main.go", "main_test.go", "go.mod", "go.sum", "README.md",
		"DEVELOPERS.md", "LICENSE",
	}
	entries, err := os.ReadDir(".")
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), ".") && !slices.Contains(plan, e.Name()) && e.Name() != "goodbin" && !strings.HasSuffix(e.Name(), ".test") {
			t.Errorf("%s stands at the top level without need", e.Name())
		}
	}
}
