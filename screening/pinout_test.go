package screening

import "testing"

func TestAPinoutSaysWhoSaysItAndToCheckIt(t *testing.T) {
	with := Claim{}.WithTrait(TraitPinout, "C-B-E")
	for _, tt := range []struct {
		name           string
		completed, own Claim
		want           string
	}{
		{"nobody says", Claim{}, Claim{}, ""},
		{"the sheet says", with, Claim{}, "C-B-E from the type table; same case is not same pinout: check with a meter"},
		{"the part claims it", with, with, "C-B-E; same case is not same pinout: check with a meter"},
	} {
		j := Judgement{Claim: tt.completed}
		if got := j.Pinout(tt.own); got != tt.want {
			t.Errorf("%s: %q, want %q", tt.name, got, tt.want)
		}
	}
}
