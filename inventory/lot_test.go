package inventory

import (
	"errors"
	"testing"

	"pgregory.net/rapid"
)

func TestIDsAreWrittenAsOnABag(t *testing.T) {
	for _, tt := range []struct {
		text string
		id   ID
		back string
	}{
		{"12-07", ID{12, 7}, "12-07"},
		{"12-7", ID{12, 7}, "12-07"},
		{" 1-123 ", ID{1, 123}, "1-123"},
		{"12", ID{12, 0}, "12"},
		{"4294967295-4294967295", ID{1<<32 - 1, 1<<32 - 1}, "4294967295-4294967295"},
	} {
		id, err := ParseID(tt.text)
		if err != nil || id != tt.id || id.String() != tt.back {
			t.Errorf("%q is read as %v, %v and written as %q", tt.text, id, err, id)
		}
	}
	for _, text := range []string{"", "-", "12-", "-7", "0-1", "1-0", "12-07-1", "+1-2", "1--2", "1e3", "4294967296-1", "12 - 7", "twelve"} {
		if id, err := ParseID(text); !errors.Is(err, ErrInvalid) {
			t.Errorf("%q is read as %v, %v; it is no id", text, id, err)
		}
	}
}

func TestEveryIDIsReadAsItIsWritten(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		id := ID{rapid.Uint32Min(1).Draw(t, "lot"), rapid.Uint32().Draw(t, "number")}
		if back, err := ParseID(id.String()); err != nil || back != id {
			t.Fatalf("%v is written as %q and read as %v, %v", id, id.String(), back, err)
		}
	})
}
