package rules_test

import (
	"testing"

	"goodbin/rules"
	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

// Every kind that knows type numbers takes the user's own table over the built-in one, figure by figure, and its verdicts become stale by it;
// those of other kinds do not.
func TestHouseRowsWinInEveryKind(t *testing.T) {
	for _, kind := range types.Builtin().Kinds() {
		for _, row := range types.Builtin().Rows(kind)[:1] {
			claim := screening.Claim{}.WithTrait(screening.TraitType, row.Type)
			claim.Ratings = row.Ratings
			own := types.HouseRow(kind, claim, "", "", "own sheet")
			own.Group = ""
			books := rules.With(rules.House{Types: []types.Row{own}})
			for i, before := range rules.All() {
				after := books[i]
				if (before.Tables != after.Tables) != (before.Kind == kind) {
					t.Errorf("a house row of %s: tables of %s before %q, after %q", kind, before.Kind, before.Tables, after.Tables)
				}
				if before.Kind != kind {
					continue
				}
				completed, _, err := after.Complete(screening.Claim{}.WithTrait(screening.TraitType, row.Type))
				if err != nil {
					t.Errorf("%s %s: %v", kind, row.Type, err)
				}
				for _, r := range row.Ratings {
					r, _ = row.Rating(r.Of) // of one that stands at several conditions the first
					got, ok := completed.Rating(r.Of, "")
					if !ok || got.Source.Status != screening.House || got.Source.Document != "own sheet" || got.Low != r.Low || got.High != r.High {
						t.Errorf("%s %s: %s is %v from %v, want the house figure", kind, row.Type, r.Of, got, got.Source)
					}
				}
			}
		}
	}
}

// A gain of 150 passes the built-in 110 to 800 of BC547 and fails the 200 to 450 of the user's own sheet; without the row it passes again.
func TestAHouseFigureDecidesTheVerdict(t *testing.T) {
	const words = "BC547 vbe=0.66 hfe@ic=2mA,vce=5V=150 iceo@20V=..0.1uA"
	gain := screening.Rating{
		Of: "hfe", At: screening.At(screening.IC, 2e-3).With(screening.VCE, 5), Low: 200, High: 450,
	}
	own := types.HouseRow(types.Bipolar, screening.Claim{
		Traits: []screening.Trait{{Name: screening.TraitType, Text: "BC547"}}, Ratings: []screening.Rating{gain},
	}, "", "", "")
	for _, tt := range []struct {
		name  string
		house rules.House
		want  screening.Verdict
	}{
		{"built-in", rules.House{}, screening.Accept},
		{"house", rules.House{Types: []types.Row{own}}, screening.Reject},
		{"removed again", rules.House{}, screening.Accept},
	} {
		b, _ := rules.With(tt.house).Find(types.Bipolar)
		j := booktest.Judge(t, b, words, screening.DefaultPolicy())
		if j.Verdict != tt.want || j.Tables != b.Tables {
			t.Errorf("%s: %s under %s, want %s", tt.name, j.Verdict, j.Tables, tt.want)
		}
		if tt.want != screening.Reject {
			continue
		}
		for _, f := range j.Findings {
			if f.Outcome == screening.Fail && f.Limit.Source.Status != screening.House {
				t.Errorf("%s fails by %v", f.Limit.On, f.Limit.Source)
			}
		}
	}
}
