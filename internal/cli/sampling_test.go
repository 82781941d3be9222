package cli

import (
	"maps"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// TestSamplingJSON holds the names of sampling --json and that every way of sampling prints by them.
func TestSamplingJSON(t *testing.T) {
	names := map[string]bool{}
	collectNames(names, "", reflect.TypeFor[jsonSampling]())
	got := strings.Join(slices.Sorted(maps.Keys(names)), "\n") + "\n"
	golden := filepath.Join("testdata", "json", "sampling.names")
	if os.Getenv(updateVariable) != "" {
		if err := os.WriteFile(golden, []byte(got), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(golden)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(string(want), got); diff != "" {
		t.Errorf("names and types differ from %s: -want +got\n%s", golden, diff)
	}
	for _, args := range [][]string{
		{"--lot", "500", "--aql", "1.0", "--found", "1", "--history", "araar"},
		{"--lot", "100", "--accept-on-zero", "--worst", "5"},
		{"--lot", "500", "--part-by-part", "--good", "1", "--worst", "10", "--tested", "12", "--found", "1"},
	} {
		stdout, stderr, status := runHere(t, "", append([]string{"sampling", "--json"}, args...)...)
		if status != ExitDone || !strings.HasPrefix(stdout, `{"schema":1,`) || !decodes(stdout, []any{jsonSampling{}}) {
			t.Errorf("%v: status %d, %s%s", args, status, stdout, stderr)
		}
	}
}

func FuzzPercentage(f *testing.F) {
	for _, seed := range []string{"1.0", "5%", " 2.5 % ", "", "%", "1e400", "NaN", "0x1p-2", "−1", "\x1b[31m"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		x, err := percentage("worst", text)
		if err == nil && (math.IsNaN(x) || math.IsInf(x, 0)) {
			t.Errorf("%q is %g", text, x)
		}
		if err != nil && strings.ContainsRune(err.Error(), '\x1b') {
			t.Errorf("%q reaches the screen as it is: %s", text, err)
		}
	})
}
