package diode

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// judge judges a part from the words that a person types.
func judge(t testing.TB, words string, policy screening.Policy) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, Book(types.Builtin()), words, policy)
}

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	grade       screening.Grade
	says        string
}{
	{"1N4148 with a diode test", "1N4148 vf=0.62 vbr=OL", screening.Accept, screening.WithinSpec, "untested: reverse blocking untested above 2 V (rated 100 V)"},
	{"1N4007 blocks 30 V of 1000", "1N4007 vf=0.52 vbr=>30V", screening.Accept, screening.WithinSpec, "reverse blocking untested above 30 V (rated 1000 V)"},
	{"1N4007 that blocks all of it", "1N4007 vf=0.52 vbr=>1100V", screening.Accept, screening.WithinSpec, "forward voltage at 1 A"},
	{"a breakdown above the rating is normal", "1N4007 vf=0.52 vbr=1300V", screening.Accept, screening.WithinSpec, ""},
	{"blocking by leakage at 20 V", "1N4148 vf=0.62 ir@20V=0.01uA temperature=23C", screening.Accept, screening.WithinSpec, "above 20 V (rated 100 V)"},
	{"more leakage than a sheet in nanoamperes, less than silicon may", "1N4148 vf=0.62 ir@20V=0.9uA temperature=23C", screening.Accept, screening.Serviceable, "leaks more than its sheet allows"},
	{"a rectifier's VF at the rated current", "1N4007 vf@1A=0.95 vbr=OL", screening.Accept, screening.WithinSpec, "above 2 V"},
	{"a rectifier that drops 0.66 V at 1 mA: the 0.6 is from memory", "1N4007 vf=0.66 vbr=OL", screening.Accept, screening.Serviceable, ""},
	{"Schottky", "1N5819 vf=0.19 vbr=OL", screening.Accept, screening.WithinSpec, ""},
	{"a power Schottky leaks milliamperes by its sheet", "1N5819 vf=0.19 ir@30V=0.5mA temperature=25C", screening.Accept, screening.WithinSpec, ""},
	{"germanium with its temperature", "1N34A vf=0.24 ir@10V=20uA temperature=22C", screening.Accept, screening.WithinSpec, ""},
	{"germanium without its temperature that no room brings over its limit", "OA91 vf=0.31 ir@10V=14uA", screening.Accept, screening.WithinSpec, "note: no temperature stated: assumed a room's"},
	{"no claim at all", "vf=0.61 vbr=>30V", screening.Accept, screening.Serviceable, "no rating known"},
	{"unmarked that drops 0.25 V", "vf=0.25 vbr=OL", screening.Accept, screening.Serviceable, "cannot tell which"},
	{"rated by the words on it", "rectifier 1000V 1A vf=0.55 vbr=>30V", screening.Accept, screening.WithinSpec, "(rated 1000 V)"},
	{"unmarked silicon that the meter cannot tell from 10 µA", "vf=0.61 ir@20V=10.1uA temperature=25C", screening.Accept, screening.Serviceable, ""},
	{"the sheet's drop even at twice its current", "1N4007 vf@2A=1.05 vbr=OL", screening.Accept, screening.WithinSpec, ""},
	{"a signal diode of an older sheet: 85 V breakdown of 100", "1N914 vf=0.62 vbr=85V", screening.Accept, screening.Serviceable, ""},

	{"breaks down at 250 V of 1000", "1N4007 vf=0.52 vbr=250V", screening.Reject, screening.AnyGrade, "reverse breakdown voltage reads 250 V; at least 1 kV"},
	{"breaks down somewhere below 5 V", "1N4007 vf=0.52 vbr=<5V", screening.Reject, screening.AnyGrade, "fails"},
	{"its own rating stands before the laxest sheet's", "1N914 rated:vrrm=100V vf=0.62 vbr=85V", screening.Reject, screening.AnyGrade, "at least 100 V"},
	{"below the laxest sheet", "1N914 vf=0.62 vbr=60V", screening.Reject, screening.AnyGrade, "at least 75"},
	{"shorted", "1N4007 vf=0.00 vbr=0.00", screening.Reject, screening.AnyGrade, "reads shorted"},
	{"a short is not turned round", "1N4148 vf=OL vbr=0.02", screening.Reject, screening.AnyGrade, "reads 20.0 mV"},
	{"nor is a Zener", "1N4148 vf=OL vbr=5.1V", screening.Reject, screening.AnyGrade, "reads 5.10 V"},
	{"open", "1N4148 vf=OL vbr=OL", screening.Reject, screening.AnyGrade, "light-emitting"},
	{"silicon that leaks 100 µA at 20 V", "1N4148 vf=0.62 ir@20V=100uA temperature=23C", screening.Reject, screening.AnyGrade, "at most 10 µA"},
	{"a reading hot may refute", "1N4148 vf=0.62 ir@20V=100uA temperature=45C", screening.Reject, screening.AnyGrade, "comes to 25.0 µA"},
	{"claimed silicon that drops like a Schottky", "signal vf=0.25 vbr=OL", screening.Reject, screening.AnyGrade, "look at what it claims again"},
	{"drops more than its sheet at the rated current", "1N4007 vf=0.52 vf@1A=1.4 vbr=OL", screening.Reject, screening.AnyGrade, "300 mV to 1.1 V at 1 A"},
	{"unmarked silicon that leaks 100 µA", "vf=0.61 ir@20V=100uA temperature=25C", screening.Reject, screening.AnyGrade, "no more than silicon"},

	{"blocking not tried", "1N4148 vf=0.62", screening.Undecided, screening.AnyGrade, "measure: TURN THE PROBES and read again: OL shows that it blocks"},
	{"only tried in reverse", "1N4148 vbr=OL", screening.Undecided, screening.AnyGrade, "MEASURE forward voltage at 1 mA"},
	{"a rating from memory may not reject: confirm it", "BY127 vf=0.52 vbr=700V", screening.Undecided, screening.AnyGrade, "CONFIRM the figure"},
	{"unmarked that breaks down at 5 V", "vf=0.62 vbr=5.1V", screening.Undecided, screening.AnyGrade, "a Zener diode"},
	{"leakage without its voltage", "1N4148 vf=0.62 ir=0.1uA", screening.Undecided, screening.AnyGrade, "measure: STATE the voltage of the reading: reverse current"},
	// The limit is 500 µA; from 15 °C with a doubling per 8 K the factor is 2.378, so up to 210 µA no room brings it over.
	{"germanium without its temperature, too much for a cold room", "OA91 vf=0.31 ir@10V=230uA", screening.Undecided, screening.AnyGrade, "measure: STATE the temperature of the reading: reverse current"},
	{"hot and above the limit never accepts", "1N4148 vf=0.62 ir@20V=15uA temperature=45C", screening.Undecided, screening.AnyGrade, "let it cool"},
	{"measured the wrong way round", "1N4148 vf=OL vbr=0.62", screening.Undecided, screening.AnyGrade, "the probes were the wrong way round"},
	{"a dual with one half measured", "MBR20100CT vf/1=0.25 vbr/1=OL", screening.Undecided, screening.AnyGrade, "OL shows that it blocks (vbr=OL), section 2"},
	{"too little current says little", "1N4148 vf@10uA=0.45 vbr=OL", screening.Undecided, screening.AnyGrade, "forward voltage"},

	{"across the mains", "1N4007 vf=0.52 vbr=OL seen=mains", screening.Barred, screening.AnyGrade, "across the mains"},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		t.Run(tt.name, func(t *testing.T) {
			j := judge(t, tt.words, screening.DefaultPolicy())
			seen[j.Verdict]++
			if j.Verdict != tt.verdict || j.Grade != tt.grade {
				t.Errorf("%s: %s %s, want %s %s\n%s", tt.words, j.Verdict, j.Grade, tt.verdict, tt.grade, booktest.Texts(j))
			}
			if !strings.Contains(booktest.Texts(j), tt.says) {
				t.Errorf("%s: nothing says %q:\n%s", tt.words, tt.says, booktest.Texts(j))
			}
			if as := booktest.As(j); as != "" {
				t.Errorf("%s: as %q; a diode has no lesser claim", tt.words, as)
			}
		})
	}
	// A diode is not regraded and not treated: what breaks down below its rating is damaged.
	booktest.EveryVerdict(t, seen, screening.Regrade, screening.Treat)
}

// refRow is one row of the published list of diodes.
type refRow struct {
	name           string
	seen           bool
	vrrm           float64
	vf, at, ir, vr float64
}

func refRows(t testing.TB) []refRow {
	t.Helper()
	var rows []refRow
	for _, ref := range booktest.Reference(t, "../types/testdata/diode-ref.csv", 54) {
		number := func(column string) float64 { return booktest.Number(t, ref[column], math.NaN()) }
		rows = append(rows, refRow{
			ref["type"], ref["tag"] == "SEEN", number("vrrm_v"), number("vf_max_v"), number("vf_at_a"), number("ir_max_a"), number("vr_v"),
		})
	}
	return rows
}

// Every row of the list: at its own limits it passes, just outside it fails, where its status lets it.
func TestEveryTypeAtItsOwnLimits(t *testing.T) {
	for _, row := range refRows(t) {
		t.Run(row.name, func(t *testing.T) {
			completed, _, err := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, row.name))
			if err != nil {
				t.Fatal(err)
			}
			for _, section := range sections(completed)[:1] {
				forward := screening.At(screening.Current, row.at)
				reverse := screening.At(screening.Voltage, row.vr).With(screening.PartTemperature, 25)
				hold(t, row, section, screening.VF, forward, forwardCriterion, screening.AnyGrade, row.vf, +1)
				hold(t, row, section, screening.IR, reverse, leakageCriterion, screening.WithinSpec, row.ir, +1)
				grade := screening.AnyGrade
				if load().variants[row.name].least > 0 {
					grade = screening.WithinSpec
				}
				hold(t, row, section, screening.VBR, screening.Condition{}, breakdownCriterion, grade, row.vrrm, -1)
			}
		})
	}
}

// hold takes one reading at a limit and one just outside (sign says which way) and looks at what becomes of the limit of that criterion.
func hold(t *testing.T, row refRow, section string, of screening.Definition, at screening.Condition, criterion screening.Criterion,
	grade screening.Grade, value, sign float64,
) {
	t.Helper()
	for _, outside := range []bool{false, true} {
		r := screening.Reading{Of: of.Name, Section: section, Unit: of.Unit, Value: value, At: at}
		want := screening.Pass
		if outside {
			r.Value *= 1 + sign*1e-3
			want = screening.Fail
		}
		j, err := screening.Judge(Book(types.Builtin()), screening.Part{
			Claim: screening.Claim{}.WithTrait(screening.TraitType, row.name), Readings: []screening.Reading{r},
		}, booktest.Exactly())
		if err != nil {
			t.Fatal(err)
		}
		i := slices.IndexFunc(j.Findings, func(f screening.Finding) bool {
			return f.Limit.On == of.Name && f.Limit.Criterion == criterion && f.Limit.Grade == grade && f.Limit.Section == section
		})
		if i < 0 {
			t.Errorf("%s: no limit", of.Name)
			continue
		}
		f := j.Findings[i]
		if outside && !f.Limit.Source.Status.MayReject() {
			want = screening.Close
		}
		if f.Outcome != want {
			t.Errorf("%s %v (limit %v, %s): %s, want %s; %s", of.Name, r.Value, value, f.Limit.Source.Status, f.Outcome, want, f.Why)
		}
		if row.seen && f.Limit.Source.Status == screening.NoStatus || !row.seen && f.Limit.Source.Status == screening.Published {
			t.Errorf("%s: %s is %s", row.name, of.Name, f.Limit.Source)
		}
	}
}

func TestClaimsThatContradictThemselves(t *testing.T) {
	for words, want := range map[string]string{
		"1N4148 rated:vrrm=101V": "vrrm: 101 V is claimed, but 1N4148 is rated 100 V",
		"1N4148 schottky":        `"schottky" is claimed, but 1N4148 is signal`,
		"1N4148 ge":              `"ge" is claimed, but 1N4148 is si`,
		"1N4001 1000V":           "1 kV is claimed, but 1N4001 is rated 50 V",
		"rated:vrrm=0":           "no reverse voltage",
		"technology=valve":       "",
		"material=selenium":      "",
	} {
		p, err := entry.Words(Book(types.Builtin()), strings.Fields(words))
		if err == nil {
			_, err = screening.Judge(Book(types.Builtin()), screening.Part{Claim: p.Claim}, screening.DefaultPolicy())
		}
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
	j := judge(t, "type=XY9999 vf=0.6 vbr=OL", screening.DefaultPolicy())
	if !strings.Contains(booktest.Texts(j), "not in the table") || j.Verdict != screening.Accept {
		t.Errorf("an unknown type: %s\n%s", j.Verdict, booktest.Texts(j))
	}
	j = judge(t, "rectifier rated:vf=..1.1V vf=0.5 vbr=OL", screening.DefaultPolicy())
	if !strings.Contains(booktest.Texts(j), "does not say at which current") {
		t.Errorf("a rating without its condition:\n%s", booktest.Texts(j))
	}
}

// A bare value of a diode's print is what it bears.
func TestBareValues(t *testing.T) {
	p, err := entry.Words(Book(types.Builtin()), []string{"400V", "3A", "schottky", "dual"})
	if err != nil {
		t.Fatal(err)
	}
	v, ok := ratedVoltage(p.Claim)
	i, _ := p.Claim.Rating(screening.IFAV.Name, "")
	if !ok || v != 400 || i.Low != 3 || technologyOf(p.Claim).name != schottky || len(sections(p.Claim)) != 2 {
		t.Errorf("%v V, %v A, %s, %v", v, i.Low, technologyOf(p.Claim).name, sections(p.Claim))
	}
	if _, _, ok := book.AtLeastIn(quantity.Volt, "V")("BAV"); ok {
		t.Error("BAV is taken as a voltage")
	}
}

func TestCompleteIsIdempotent(t *testing.T) {
	for _, name := range types.Builtin().Names(Kind) {
		once, _, err := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, name))
		twice, _, err2 := builtin.complete(once)
		if err != nil || err2 != nil || !slices.Equal(once.Traits, twice.Traits) || len(once.Ratings) != len(twice.Ratings) {
			t.Errorf("%s: %v, %v", name, err, err2)
		}
		if tech, ok := technologyNamed(once.Trait(screening.TraitTechnology)); !ok {
			t.Errorf("%s: technology %q is not in sound.csv", name, tech.name)
		}
	}
}

// However poor the meter, a diode that reads inside its band and its sheet's maximum, and blocks, is never rejected.
func TestASoundDiodeIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(types.Builtin().Names(Kind)).Draw(t, "type")
		completed, _, err := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, name))
		if err != nil {
			t.Fatal(err)
		}
		s := technologyOf(completed).sound
		accuracy := rapid.Float64Range(0, 0.3).Draw(t, "accuracy")
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": {ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Volt: {Relative: accuracy}}}}
		part := screening.Part{Claim: completed}
		for _, section := range sections(completed) {
			top := s.high
			if r, at, ok := sheet(completed, screening.VF.Name, screening.Current); ok && at >= testerCurrent {
				top = math.Min(top, r.High)
			}
			vf := rapid.Float64Range(s.low, top).Draw(t, "vf")
			part.Readings = append(part.Readings,
				screening.Reading{Of: screening.VF.Name, Section: section, Unit: quantity.Volt, Value: vf},
				screening.Reading{Of: screening.VBR.Name, Section: section, Unit: quantity.Volt, Value: 2, Over: true, Sense: quantity.AtLeast})
		}
		j, err := screening.Judge(Book(types.Builtin()), part, policy)
		if err != nil || j.Verdict == screening.Reject {
			t.Fatalf("%s: %s, %v\n%s", name, j.Verdict, err, booktest.Texts(j))
		}
	})
}

func TestTablesAreChecked(t *testing.T) {
	if _, err := readTables(expectedCSV, soundCSV, leakageCSV, variantsCSV); err != nil {
		t.Error(err)
	}
	wide := strings.Replace(expectedCSV, "signal,0.55", "signal,0.35", 1)
	if _, err := readTables(wide, soundCSV, leakageCSV, variantsCSV); err == nil {
		t.Error("an expected band outside the sound one is read")
	}
	stray := strings.Replace(expectedCSV, "\nsignal,", "\nvalve,", 1)
	if _, err := readTables(stray, soundCSV, leakageCSV, variantsCSV); err == nil {
		t.Error("a technology that sound.csv does not know is read")
	}
	for _, tech := range load().technologies {
		if load().leakage[tech.material].value <= 0 {
			t.Errorf("%s: no leakage rule for %s", tech.name, tech.material)
		}
	}
}

func TestCautionsAndRecipes(t *testing.T) {
	completed, _, _ := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, "1N4007"))
	cautions := Book(types.Builtin()).Cautions(screening.Part{Claim: completed}, screening.AtMeasure)
	if len(cautions) != 2 || cautions[1].Level != screening.Danger {
		t.Fatalf("%+v", cautions)
	}
	// 30 V through 30 kΩ is 1 mA and 30 mW; 1000 V through 1 MΩ 1 mA and 1 W.
	for i, want := range []map[string]float64{
		{"supply": 30, "series-resistance": 30e3, "resistor-power": 0.03}, {"supply": 1000, "series-resistance": 1e6, "resistor-power": 1},
	} {
		for name, x := range want {
			if got := cautions[i].Values[name]; math.Abs(got-x) > 1e-9*x {
				t.Errorf("%s: %s is %v, want %v", cautions[i].Code, name, got, x)
			}
		}
	}
	for _, words := range []string{"can kill", "local code and licensed practice", "1 MΩ", "10 V"} {
		if !strings.Contains(cautions[1].Text, words) {
			t.Errorf("the text does not say %q: %s", words, cautions[1].Text)
		}
	}
	signal, _, _ := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, "1N5819"))
	if got := Book(types.Builtin()).Cautions(screening.Part{Claim: signal}, screening.AtMeasure); len(got) != 1 {
		t.Errorf("40 V needs no warning of a supply that kills: %+v", got)
	}
	all, err := limits(completed)
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range all {
		found := Book(types.Builtin()).Recipes(screening.Part{Claim: completed}, l)
		if len(found) == 0 {
			t.Errorf("%s: no recipe", l.On)
		}
		for _, r := range found {
			for name, x := range r.Values {
				if math.IsNaN(x) || math.IsInf(x, 0) || x <= 0 {
					t.Errorf("%s, %s: %s is %v", l.On, r.Title, name, x)
				}
			}
		}
	}
	// 9 V less 1.1 V at 1 A: 7.9 Ω and 7.9 W, but the junction's own top (0.85 V) bounds the drop: 8.15 Ω.
	r := forwardRecipe(completed, screening.Limit{On: screening.VF.Name, At: screening.At(screening.Current, 1), High: 1.1})
	if math.Abs(r.Values["series-resistance"]-8.15) > 1e-9 || !strings.Contains(strings.Join(r.Lines, "\n"), "gets hot") {
		t.Errorf("%+v", r)
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "1N4148 vf=0.62 vbr=OL")
}
