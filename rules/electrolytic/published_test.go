package electrolytic

import (
	"math"
	"os"
	"testing"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// claimed builds a completed claim: microfarad, volts and a tolerance of ±20 %.
func claimed(t testing.TB, microfarad, volts float64, traits ...string) screening.Claim {
	t.Helper()
	c := screening.Claim{}.
		WithRating(screening.NominalRating(screening.Capacitance, microfarad*1e-6)).
		WithRating(screening.NominalRating(screening.RatedVoltage, volts))
	for i := 0; i+1 < len(traits); i += 2 {
		c = c.WithTrait(traits[i], traits[i+1])
	}
	c, _, err := complete(c)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func limitOf(t *testing.T, c screening.Claim, on screening.Characteristic, set screening.LimitSet, after float64) screening.Limit {
	t.Helper()
	all, err := limits(c)
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range all {
		at, hasAfter := l.At.Get(screening.After)
		if l.On == on && l.Set == set && l.Grade != screening.Serviceable && l.Criterion != criterionCeiling && (!hasAfter || at == after) {
			return l
		}
	}
	t.Fatalf("no %s limit of set %s after %g s", on, set, after)
	return screening.Limit{}
}

func TestPublishedValues(t *testing.T) {
	text, err := os.ReadFile("testdata/published.csv")
	if err != nil {
		t.Fatal(err)
	}
	table := book.ReadTable("published.csv", string(text))
	for _, row := range table.Rows() {
		t.Run(row.Required("case"), func(t *testing.T) {
			source, want, within := row.Source(), row.Number("want"), row.Number("within")
			farad, volts, base := row.NumberOr("microfarad", 0)*1e-6, row.NumberOr("volts", 0), row.NumberOr("base", 0)
			set := screening.LimitSet(row.Text("set"))
			var got float64
			switch of := row.Required("of"); of {
			case "leakage":
				l := limitOf(t, claimed(t, farad*1e6, volts), screening.Leakage.Name, set, row.Number("after_s"))
				got = l.High
				if how := row.Text("how"); how == "printed" && set != screening.SnapInSet && l.Source.Status != source.Status {
					t.Errorf("the limit is %s, its check value %s", l.Source.Status, source.Status)
				}
			case "esr":
				got = limitOf(t, claimed(t, farad*1e6, volts), screening.ESR.Name, set, 0).High
			case "whole-step":
				got = base + 0.02*wholeSteps(farad)
			case "linear-step":
				got = base + 0.02*linearSteps(farad)
			case "esr-of":
				got = esrOf(base, lossFrequency, farad)
			case "tolerance":
				low, high, ok := book.CapacitorToleranceLetter(row.Text("set"))
				if !ok || math.Abs(farad*(1+high)-row.Number("want_high")) > within {
					t.Errorf("top %v, want %v", farad*(1+high), row.Number("want_high"))
				}
				got = farad * (1 + low)
			case "can-power":
				got, _ = canPower(screening.Claim{}.WithTrait(traitCanSize, row.Text("set")))
			default:
				t.Fatalf("nothing checks %q", of)
			}
			if math.IsNaN(got) || math.Abs(got-want) > within+1e-12*math.Abs(want) {
				t.Errorf("got %v, want %v ± %v (%s)", got, want, within, source)
			}
		})
	}
	if err := table.Err(); err != nil {
		t.Error(err)
	}
}

func TestEmbeddedTablesLoad(t *testing.T) {
	tables, err := readTables()
	if err != nil {
		t.Fatal(err)
	}
	if len(tables.leakage) == 0 || len(tables.loss) == 0 || len(tables.figures) != len(figureNames) {
		t.Errorf("%d leakage rows, %d ladders, %d figures", len(tables.leakage), len(tables.loss), len(tables.figures))
	}
	for _, tc := range []struct{ name, file, csv string }{
		{"a leakage row of no known shape", "leakage", "set,over_volts,to_volts,after_s,over_cv,to_cv,shape,factor,plus_ua,floor_ua,cap_ua,source,clause,status,note\ng,,,60,,,cubic,1,,,,x,,published,\n"},
		{"a leakage row with an empty range", "leakage", "set,over_volts,to_volts,after_s,over_cv,to_cv,shape,factor,plus_ua,floor_ua,cap_ua,source,clause,status,note\ng,100,50,60,,,linear,1,,,,x,,published,\n"},
		{"a leakage row without status", "leakage", "set,over_volts,to_volts,after_s,over_cv,to_cv,shape,factor,plus_ua,floor_ua,cap_ua,source,clause,status,note\ng,,,60,,,linear,1,,,,x,,,\n"},
		{"figures without one that is needed", "figures", "name,value,source,clause,status\nrest-min,1,x,,published\n"},
		{"a tan δ of 14", "loss", "set,group,frequency_hz,per_1000uf,6.3,10,16,25,35,40,50,63,100,160,200,250,315,350,400,450,source,clause,status\ng,radial,120,0.02,14,,,,,,,,,,,,,,,,x,,published\n"},
		{"a ladder of no known group", "loss", "set,group,frequency_hz,per_1000uf,6.3,10,16,25,35,40,50,63,100,160,200,250,315,350,400,450,source,clause,status\ng,round,120,0.02,.2,,,,,,,,,,,,,,,,x,,published\n"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			var err error
			switch tc.file {
			case "leakage":
				_, err = readLeakage(tc.csv)
			case "figures":
				_, err = readFigures(tc.csv)
			default:
				_, err = readLoss(tc.csv, screening.Source{Document: "endurance", Status: screening.Published})
			}
			if err == nil {
				t.Error("was read")
			}
		})
	}
}

// TestTheLadderOfEveryVoltage holds the general ladder to its promises: every voltage has a base, no voltage between two columns is held
// tighter than either of them.
func TestTheLadderOfEveryVoltage(t *testing.T) {
	for i := range embedded().loss {
		r := &embedded().loss[i]
		for v := 1.0; v <= 1000; v++ {
			s, ok := r.at(v)
			if !ok {
				t.Fatalf("%s prints nothing for %g V", r.source.Document, v)
			}
			if s.beyond {
				continue
			}
			for k := 1; k < len(ladderVolts); k++ {
				if ladderVolts[k-1] < v && v < ladderVolts[k] && math.Abs(v-ladderVolts[k]) > 0.01*ladderVolts[k] && math.Abs(v-ladderVolts[k-1]) > 0.01*ladderVolts[k-1] {
					for _, printed := range []float64{r.ladder[k-1], r.ladder[k]} {
						if printed > s.tanDelta {
							t.Errorf("%s at %g V: %g, tighter than the neighbour's %g", r.source.Document, v, s.tanDelta, printed)
						}
					}
				}
			}
		}
	}
}

func TestLimitSetsInUse(t *testing.T) {
	for _, tc := range []struct {
		name           string
		uF, volts      float64
		traits         []string
		leakage, loss  screening.LimitSet
		need           screening.Need
		toleranceLow   float64
		toleranceKnown bool
	}{
		{"radial 35 V", 100, 35, nil, "general", "general", screening.Wanted, -0.2, true},
		{"above 63 V leakage is required", 10, 100, nil, "general", "general", screening.Required, -0.2, true},
		{"63 V itself is not above 63 V", 10, 63, nil, "general", "general", screening.Wanted, -0.2, true},
		{"before 1985 leakage is required", 100, 25, []string{"dated", "1984"}, "general", "general", screening.Required, -0.1, false},
		{"1985 counts as after 1985", 100, 25, []string{"dated", "1985"}, "general", "general", screening.Wanted, -0.2, true},
		{"before 1980 the vintage set", 20, 450, []string{"dated", "1979"}, "vintage-military", "general", screening.Required, -0.1, false},
		{"the seventies too", 20, 450, []string{"dated", "197x"}, "vintage-military", "general", screening.Required, -0.1, false},
		{"1980 no more", 20, 450, []string{"dated", "1980"}, "general", "general", screening.Required, -0.1, false},
		{"above 500 V the vintage set ends", 8, 525, []string{"dated", "1960"}, "general", "general", screening.Required, -0.1, false},
		{"undated axial", 100, 25, []string{"case", "axial"}, "general", "general", screening.Required, -0.1, false},
		{"undated can", 100, 25, []string{"case", "can"}, "general", "general", screening.Required, -0.1, false},
		{"dated axial at low voltage", 100, 25, []string{"case", "axial", "dated", "1995"}, "general", "general", screening.Wanted, -0.1, false},
		{"snap-in", 10000, 35, []string{"case", "snap-in"}, "snap-in", "snap-in", screening.Wanted, -0.2, true},
		{"screw terminals", 10000, 35, []string{"case", "screw"}, "snap-in", "snap-in", screening.Required, -0.1, false},
	} {
		t.Run(tc.name, func(t *testing.T) {
			c := claimed(t, tc.uF, tc.volts, tc.traits...)
			all, err := limits(c)
			if err != nil {
				t.Fatal(err)
			}
			seen := map[screening.Criterion]int{}
			for _, l := range all {
				if !l.InUse {
					continue
				}
				seen[l.Criterion]++
				switch l.Criterion {
				case criterionLeakage:
					if l.Set != tc.leakage || l.Need != tc.need {
						t.Errorf("leakage: set %s %s, want %s %s", l.Set, l.Need, tc.leakage, tc.need)
					}
				case criterionLoss:
					if l.Set != tc.loss || l.Need != screening.Required {
						t.Errorf("loss: set %s %s", l.Set, l.Need)
					}
				}
			}
			if seen[criterionCapacitance] != 2 || seen[criterionLoss] != 4 || seen[criterionLeakage] == 0 {
				t.Errorf("limits in use: %v", seen)
			}
			u, _ := units(c)
			if u[0].low != tc.toleranceLow || (u[0].toleranceSource.Status == screening.Published) != tc.toleranceKnown {
				t.Errorf("tolerance from %v, %v", u[0].low, u[0].toleranceSource)
			}
		})
	}
}
