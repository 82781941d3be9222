package oxide

import "testing"

func TestRoundUpIsTheNextOfOneTwoFive(t *testing.T) {
	for x, want := range map[float64]float64{1: 1, 1.01: 2, 2: 2, 2.5: 5, 5: 5, 5.1: 10, 793.8: 1000, 125: 200, 0.03: 0.05} {
		if got := roundUp(x); got < want*(1-1e-9) || got > want*(1+1e-9) {
			t.Errorf("%v rounds up to %v, want %v", x, got, want)
		}
	}
}
