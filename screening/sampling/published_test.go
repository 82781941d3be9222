package sampling

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// plan is a plan of no table.
func plan(n, c int) Plan { return Plan{N: n, Sample: n, Accept: c, Reject: c + 1} }

// checks evaluates the quantity of a row of testdata/stats-check.csv, by the beginning of its id; last is what follows the id's last dash.
var checks = map[string]func(t *testing.T, row map[string]string, last string) float64{
	"C01": func(t *testing.T, _ map[string]string, last string) float64 {
		return plan(10, 3).FromProcess(number(t, last))
	},
	"C02b": func(*testing.T, map[string]string, string) float64 { return plan(20, 0).FromProcess(0.15) },
	"C04": func(t *testing.T, _ map[string]string, last string) float64 {
		return mustLookup(t, "L", 1.5, Normal).FromProcess(number(t, last))
	},
	"C05": func(t *testing.T, row map[string]string, last string) float64 {
		_, p, _ := strings.Cut(row["inputs"], "p=")
		return SchemeAcceptance(mustLookup(t, "L", 1.5, Normal), mustLookup(t, "L", 1.5, Tightened), number(t, p))
	},
	"C07": func(*testing.T, map[string]string, string) float64 { return plan(500, 3).FromDefects(1) },
	"C08": func(*testing.T, map[string]string, string) float64 { return 1 - plan(500, 7).FromProcess(0.0065) },
	"C09": func(*testing.T, map[string]string, string) float64 { return MeanAtRisk(1, 0.1) },
	"C10": func(t *testing.T, row map[string]string, _ string) float64 {
		var r, c float64
		scan(t, row["inputs"], "R=%g C=%g", &r, &c)
		_, exact, err := WithoutFailure(r, c)
		if err != nil {
			t.Fatal(err)
		}
		return exact
	},
	"C11":  hypergeometricRow,
	"R15":  hypergeometricRow,
	"C12b": func(*testing.T, map[string]string, string) float64 { return plan(5, 1).FromProcess(0.1) },
	"C12c": func(*testing.T, map[string]string, string) float64 { return plan(5, 1).FromDefects(10) },
	"C13": func(t *testing.T, _ map[string]string, last string) float64 {
		return plan(52, 3).FromProcess(number(t, last))
	},
	"C13q": func(t *testing.T, _ map[string]string, last string) float64 {
		return plan(52, 3).OutgoingQuality(10_000, number(t, last))
	},
	"C13t": func(t *testing.T, _ map[string]string, last string) float64 {
		return plan(52, 3).TotalInspection(10_000, number(t, last))
	},
	"C14": func(t *testing.T, _ map[string]string, last string) float64 {
		return Double{N1: 8, Accept1: 0, Reject1: 2, N2: 8, Accept2: 1}.FromProcess(number(t, last))
	},
	"C15": func(t *testing.T, _ map[string]string, last string) float64 {
		q, err := NewSequential(0.01, 0.10, 0.05, 0.10)
		if err != nil {
			t.Fatal(err)
		}
		h1, h2, _ := q.Lines()
		return map[string]float64{"h1": h1, "h2": h2}[last]
	},
	"C17": func(t *testing.T, row map[string]string, _ string) float64 {
		return percentAt(t, row["id"], 0.95)
	},
	"C17b": func(t *testing.T, row map[string]string, _ string) float64 {
		return percentAt(t, row["id"], 0.10)
	},
}

func scan(t *testing.T, text, format string, into ...any) {
	t.Helper()
	if n, err := fmt.Sscanf(text, format, into...); n != len(into) {
		t.Fatalf("%q: %v", text, err)
	}
}

func hypergeometricRow(t *testing.T, row map[string]string, _ string) float64 {
	var lot, bad, n, c int
	scan(t, row["inputs"], "N=%d D=%d n=%d c=%d", &lot, &bad, &n, &c)
	return Hypergeometric(lot, bad, n, c)
}

// percentAt takes the code letter and the AQL from an id such as C17-F-0.65.
func percentAt(t *testing.T, id string, chance float64) float64 {
	parts := strings.Split(id, "-")
	return 100 * mustLookup(t, parts[1], number(t, parts[2]), Normal).QualityAt(chance)
}

func mustLookup(t testing.TB, letter string, aql float64, i Inspection) Plan {
	t.Helper()
	p, err := Lookup(letter, aql, i)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// TestChecksAgree holds every row of testdata/stats-check.csv on sampling against its value, to 10⁻⁹ of it.
func TestChecksAgree(t *testing.T) {
	used := map[string]bool{}
	for _, row := range table(t, "stats-check.csv") {
		t.Run(row["id"], func(t *testing.T) {
			if row["topic"] == "plan search" {
				p, err := Find(0.019296, 0.95, 0.045884, 0.10)
				if got := fmt.Sprintf("%d,%d", p.N, p.Accept); err != nil || got != row["value"] {
					t.Errorf("%s (%v), want %s (%s)", got, err, row["value"], row["source"])
				}
				return
			}
			prefix, _, _ := strings.Cut(row["id"], "-")
			check := checks[prefix]
			if check == nil {
				t.Fatalf("nothing computes %s", row["id"])
			}
			used[prefix] = true
			last := row["id"][strings.LastIndex(row["id"], "-")+1:]
			got, want := check(t, row, last), number(t, row["value"])
			if !(math.Abs(got-want) <= 1e-9*math.Abs(want)) {
				t.Errorf("%s of %s: %.15g, want %.15g (%s, %s)", row["quantity"], row["inputs"], got, want, row["source"], row["status"])
			}
		})
	}
	if len(used) != len(checks) {
		t.Errorf("%d of %d checks have a row", len(used), len(checks))
	}
}

// TestPublishedFigures holds what documents print, to their last digit. Figures known to be misprinted are left out: the AQLSchemes point
// (.013, .975), the producer's risks read off Birolini's curve, and table X-J at AQL 4.0.
func TestPublishedFigures(t *testing.T) {
	search := func(good, goodChance, bad, badChance float64) string {
		p, err := Find(good, goodChance, bad, badChance)
		return fmt.Sprint(p.N, p.Accept, err)
	}
	for _, tt := range []struct{ fact, source, got, want string }{
		{"smallest plan for .05 at .95 and .15 at .075", "AcceptanceSampling manual (published)", search(.05, .95, .15, .075), "80 7 <nil>"},
		{"smallest plan for .019296 at .95 and .045884 at .10", "AQLSchemes vignette (published)", search(.019296, .95, .045884, .10), "359 11 <nil>"},
	} {
		if tt.got != tt.want {
			t.Errorf("%s: %s, want %s (%s)", tt.fact, tt.got, tt.want, tt.source)
		}
	}
	seven := plan(10, 3)
	for i, want := range []float64{1, .9999980, .9999695, .9998529, .9995574, .9989715, .9979707, .9964239, .9941987, .9911662, .9872048} {
		near(t, fmt.Sprintf("n 10 c 3 at %d %% (AcceptanceSampling manual 3.1, published)", i), seven.FromProcess(float64(i)/100), want, 5e-8)
	}
	for i, want := range []float64{.998, .980, .930, .845, .739, .620, .502, .394, .300, .223, .162, .115} {
		near(t, fmt.Sprintf("n 52 c 3 at %d %% (NIST 6.2.3.2, from memory)", i+1), plan(52, 3).FromProcess(float64(i+1)/100), want, 1e-3)
	}
	for i, want := range []float64{.991549, .848737, .595180} {
		p := []float64{.01, .05, .10}[i]
		near(t, "double plan 8/8 (AS 1199 E, AQL 4.0, derived)", Double{N1: 8, Reject1: 2, N2: 8, Accept2: 1}.FromProcess(p), want, 5e-7)
	}
	samplingplans := plan(68, 2) // samplingplans.com, published
	near(t, "n 68 c 2 at Pa .95", samplingplans.QualityAt(.95), .0121313, 5e-8)
	near(t, "n 68 c 2 at Pa .05", samplingplans.QualityAt(.05), .0897036, 5e-8)
	near(t, "n 20 c 0 at 5 % (AcceptanceSampling manual, published)", plan(20, 0).FromProcess(.05), .35848592, 5e-9)
	near(t, "n 500 c 3 at 1 defect a hundred (7 CFR 42.140, published)", plan(500, 3).FromDefects(1), .26, .006)
	near(t, "n 500 c 3 at 0.1 defects a hundred (7 CFR 42.140, published)", plan(500, 3).FromDefects(.1), .998248, 5e-7)
	near(t, "beta .1 c 1: m = 3.9 (Birolini 2007 p. 300, published)", MeanAtRisk(1, .1), 3.9, .011)
	for _, tt := range []struct {
		good, confidence float64
		n                int
		exact            float64
	}{{.95, .90, 45, 44.89}, {.99, .90, 230, 229.1}, {.999, .90, 2302, 2301.4}} { // AEC-Q100 prints 45, 231 = 3·77 and 2400 = 3·800
		n, exact, err := WithoutFailure(tt.good, tt.confidence)
		if n != tt.n || err != nil {
			t.Errorf("%g at %g: %d parts (%v), want %d", tt.good, tt.confidence, n, err, tt.n)
		}
		near(t, "success run", exact, tt.exact, .06)
	}
	normal, tightened := mustLookup(t, "L", 1.5, Normal), mustLookup(t, "L", 1.5, Tightened)
	near(t, "scheme at .019296 (AQLSchemes vignette: .95, published)", SchemeAcceptance(normal, tightened, .019296), .950538, 5e-7)
	near(t, "scheme at .045884 (AQLSchemes vignette: .10, published)", SchemeAcceptance(normal, tightened, .045884), .099946, 5e-7)
	for _, tt := range []struct {
		letter string
		aql    float64
		want   float64 // percent at Pa .95, MIL-STD-105E table X (from memory; recomputed)
	}{{"F", .65, .2561}, {"F", 2.5, 1.807}, {"F", 4, 4.217}, {"F", 6.5, 7.135}, {"J", .15, .0641}, {"J", .65, .4460}, {"J", 1, 1.030}, {"J", 1.5, 1.726}, {"J", 2.5, 3.317}, {"J", 6.5, 7.906}} {
		near(t, fmt.Sprintf("table X-%s at AQL %g", tt.letter, tt.aql), 100*mustLookup(t, tt.letter, tt.aql, Normal).QualityAt(.95), tt.want, 6e-4)
	}
}

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %.9g, want %.9g ± %g", what, got, want, tolerance)
	}
}

// TestOperatingCharacteristics holds the inverse of every normal plan of the tables against testdata/curve.csv.
func TestOperatingCharacteristics(t *testing.T) {
	rows := table(t, "curve.csv")
	if len(rows) != 84 {
		t.Fatalf("%d rows, want 84", len(rows))
	}
	for _, row := range rows {
		p := mustLookup(t, row["code_letter"], number(t, row["aql_percent"]), Normal)
		if p.N != whole(t, row["n"]) || p.Accept != whole(t, row["ac"]) {
			t.Errorf("%s %s: n %d Ac %d, want %s and %s", row["code_letter"], row["aql_percent"], p.N, p.Accept, row["n"], row["ac"])
			continue
		}
		name := row["code_letter"] + " " + row["aql_percent"]
		for _, chance := range []string{"0.99", "0.95", "0.90", "0.75", "0.50", "0.25", "0.10", "0.05", "0.01"} {
			near(t, name+" at "+chance, 100*p.QualityAt(number(t, chance)), number(t, row[chance]), 6e-6)
		}
		near(t, name+" at the AQL", p.FromProcess(p.AQL/100), number(t, row["pa_at_aql"]), 6e-7)
	}
}
