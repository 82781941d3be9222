package cli

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// What is exported and screened again gets the same verdicts, part by part, whatever the kind: the demo box holds them all.
func TestTheExportedDemoBoxIsJudgedTheSame(t *testing.T) {
	dir := t.TempDir()
	first, second, box := filepath.Join(dir, "first.goodbin"), filepath.Join(dir, "second.goodbin"), filepath.Join(dir, "box.csv")
	listed := func(workbook string) []string {
		stdout, stderr, _ := runHere(t, "", "stock", "--all", "--by", "id", "--workbook", workbook)
		if stdout == "" {
			t.Fatal(stderr)
		}
		return strings.Split(stdout, "\n")
	}
	if _, stderr, status := runHere(t, "", "screen", filepath.Join("..", "..", "testdata", "demo-box.csv"), "--workbook", first); status != ExitNotAccepted {
		t.Fatalf("exit status %d: %s", status, stderr)
	}
	exported, stderr, status := runHere(t, "", "export", "--workbook", first)
	if status != ExitDone {
		t.Fatalf("export: exit status %d: %s", status, stderr)
	}
	if err := os.WriteFile(box, []byte(exported), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, stderr, status := runHere(t, "", "screen", box, "--workbook", second); status != ExitNotAccepted {
		t.Fatalf("screening the export: exit status %d: %s", status, stderr)
	}
	if diff := cmp.Diff(listed(first), listed(second)); diff != "" {
		t.Errorf("first and second reading differ, -first +second\n%s", diff)
	}
}
