package book

import "testing"

func TestWattsAreWrittenAsTheTradeDoes(t *testing.T) {
	for _, tt := range []struct {
		watts  float64
		digits int
		want   string
	}{
		{0.25, 0, "0.25 W"},
		{0.5, 0, "0.5 W"},
		{0.125, 0, "0.125 W"},
		{0.03, 2, "0.03 W"},
		{0.02548, 2, "0.025 W"},
		{0.0999, 2, "0.1 W"},
		{0.996, 2, "1 W"},
		{1.3, 0, "1.3 W"},
		{5, 2, "5.0 W"},
		{0.004, 0, "4 mW"},
		{0, 0, "0 W"},
	} {
		if got := Watts(tt.watts, tt.digits); got != tt.want {
			t.Errorf("%v W with %d digits is %q, want %q", tt.watts, tt.digits, got, tt.want)
		}
	}
}
