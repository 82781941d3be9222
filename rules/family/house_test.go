package family

import (
	"encoding/csv"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// bench is three kinds that exist only here.
func bench() screening.Kinds {
	technology := func(words ...string) screening.Field {
		f := screening.Field{Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true}
		for i := 0; i+1 < len(words); i += 2 {
			f.Words = append(f.Words, screening.Word{Word: words[i], Text: words[i+1]})
		}
		return f
	}
	dated := book.DatedField()
	return screening.Kinds{
		{Kind: "bipolar", Claims: []screening.Field{{Definition: book.Trait(screening.TraitType, "type"), Trait: true}, dated}},
		{Kind: "resistor", Claims: []screening.Field{technology("cf", "carbon-film", "cc", "carbon-composition"), dated}},
		{Kind: "paper", Claims: []screening.Field{technology("oil", "oil-filled", "waxed", "waxed"), dated}},
	}
}

const houseHead = "id,kinds,list,types,traits,before,undated,roles,dispose,reason,do\n"

func TestAGroupsListIsReadWithEveryErrorInIt(t *testing.T) {
	for _, tt := range []struct{ name, text, want string }{
		{"the least that a row needs", "id,kinds,list,reason\nno-paper,paper,never-keep,they leak\n", ""},
		{"every column", houseHead + "old,bipolar,never-keep,AC12?|OC*,,1960,yes,amplifier,exhibit,noisy,KEEP it for the shelf\n", ""},
		{"semicolons", "id;kinds;list;reason\nno-paper;paper;never-keep;they leak, all of them\n", ""},
		{"tabs", "id\tkinds\tlist\treason\nno-paper\tpaper\tnever-keep\tthey leak\n", ""},
		{"a word stands for its text", houseHead + "cf,resistor,never-keep,,technology=cf,,,,,they drift,\n", ""},
		{"empty", "", "no rows"},
		{"no such column", "id,kinds,list,reason,colour\n", `line 1: "colour" is no column`},
		{"a column missing", "id,kinds,list\nx,paper,never-keep\n", `the column "reason" is missing`},
		{"no such kind", houseHead + "x,papr,never-keep,,,,,,,r,\n", `line 2, kinds: "papr" is no kind; did you mean paper?`},
		{"no kind", houseHead + "x,,never-keep,,,,,,,r,\n", "kinds: is empty; name the kinds"},
		{"no such list", houseHead + "x,paper,sometimes,,,,,,,r,\n", `"sometimes" is neither never-keep nor always-keep`},
		{"no such trait", houseHead + "x,paper,never-keep,,colour=red,,,,,r,\n", `"colour" is nothing that a paper claims in words; it has technology, dated`},
		{"no such word", houseHead + "x,resistor,never-keep,,technology=film,,,,,r,\n", `no resistor has technology "film"`},
		{"no types there", houseHead + "x,resistor,never-keep,AC128,,,,,,r,\n", "a resistor claims no type number"},
		{"half a trait", houseHead + "x,paper,never-keep,,technology,,,,,r,\n", "is not TRAIT=TEXT"},
		{"no such day", houseHead + "x,paper,never-keep,,,June,,,,r,\n", `"June" is no day of making`},
		{"undated without a day", houseHead + "x,paper,never-keep,,,,yes,,,r,\n", "says nothing without a day"},
		{"no such disposal", houseHead + "x,paper,never-keep,,,,,,burn,r,\n", `"burn" is none of scrap`},
		{"no reason", houseHead + "x,paper,never-keep,,,,,,,,\n", "say why"},
		{"a built-in id", houseHead + "oil-filled,paper,never-keep,,,,,,,r,\n", "is a family of the built-in table"},
		{"twice", houseHead + "x,paper,never-keep,,,,,,,r,\nx,paper,never-keep,,,,,,,r,\n", `line 3, id: "x" stands twice`},
		{"no id", houseHead + "my family!,paper,never-keep,,,,,,,r,\n", "is no id"},
		{"kept with roles", houseHead + "x,paper,always-keep,,,,,coupling,,r,\n", "has no roles, dispose or do"},
		{"an escape", houseHead + "x,paper,never-keep,,,,,,,\"a\x1b[31mred\",\n", "control character"},
		{"a whisker type kept", houseHead + "x,bipolar,always-keep,AF117|OC170,,,,,,we like them,\n", `"whisker-germanium" always bars these parts`},
		{"every oil-filled one kept", houseHead + "x,paper,always-keep,,technology=oil,,,,,r,\n", `"oil-filled" always bars these parts`},
		{"types of which some are whiskers", houseHead + "x,bipolar,always-keep,AF1*,,,,,,r,\n", ""},
		{"too large", houseHead + strings.Repeat("#", MaxHouseBytes), "longer than"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			families, err := ReadHouse("list.csv", tt.text, bench())
			switch {
			case tt.want == "" && (err != nil || len(families) == 0):
				t.Errorf("%d families, %v", len(families), err)
			case tt.want != "" && (err == nil || families != nil || !strings.Contains(err.Error(), tt.want)):
				t.Errorf("%d families, %v, want %q", len(families), err, tt.want)
			}
		})
	}
	// All that is wrong is said at once.
	_, err := ReadHouse("list.csv", houseHead+"x,papr,never-keep,,,,,,,r,\ny,paper,maybe,,,,,,,r,\n", bench())
	if err == nil || len(strings.Split(err.Error(), "\n")) != 2 {
		t.Errorf("two rows are wrong: %v", err)
	}
}

func mustRead(t *testing.T, rows string) []Family {
	t.Helper()
	families, err := ReadHouse("list.csv", houseHead+rows, bench())
	if err != nil {
		t.Fatal(err)
	}
	return families
}

func TestWhatAGroupKeepsGoesBeforeWhatItDoesNotAndNeverBeforeTheBuiltIn(t *testing.T) {
	house := mustRead(t, "no-germanium,bipolar,never-keep,AC*|AF*|OC*,,,,,,noisy,\n"+
		"our-ac128,bipolar,always-keep,AC128,,,,,,the club's radios need them,\n"+
		"keep-af,bipolar,always-keep,AF1*,,,,,,we like them,\n"+
		"no-cf,resistor,never-keep,,technology=cf,1970,yes,,,they drift,\n"+
		"no-coupling,paper,never-keep,,,,,coupling,hazardous,they leak,\n")
	all := append(Builtin(), house...)
	for _, tt := range []struct {
		name  string
		kind  screening.Kind
		claim screening.Claim
		role  string
		by    string
	}{
		{"never kept", "bipolar", claimOf("type", "OC71"), "", "no-germanium"},
		{"always kept", "bipolar", claimOf("type", "AC128"), "", ""},
		{"its suffix does not matter", "bipolar", claimOf("type", "AC128K"), "", ""},
		{"kept, but it grows whiskers", "bipolar", claimOf("type", "AF117"), "", "whisker-germanium"},
		{"silicon", "bipolar", claimOf("type", "BC107"), "", ""},
		{"old carbon film", "resistor", claimOf("technology", "carbon-film", "dated", "1961"), "", "no-cf"},
		{"without a date", "resistor", claimOf("technology", "carbon-film"), "", "no-cf"},
		{"newer", "resistor", claimOf("technology", "carbon-film", "dated", "1982"), "", ""},
		{"composition", "resistor", claimOf("technology", "carbon-composition", "dated", "1961"), "", ""},
		{"a position", "paper", claimOf("technology", "waxed"), "coupling", "waxed-paper-coupling no-coupling"},
		{"another", "paper", claimOf("technology", "waxed"), "bypass", ""},
	} {
		t.Run(tt.name, func(t *testing.T) {
			if got := barredBy(Barred(all, tt.kind, tt.claim, Position{Role: tt.role})); got != tt.by {
				t.Errorf("barred by %q, want %q", got, tt.by)
			}
		})
	}
	for _, s := range Barred(all, "bipolar", claimOf("type", "OC71"), Position{}) {
		if s.Source.Status != screening.House || !strings.Contains(s.Reason, "your group's list, no-germanium: noisy") || !strings.HasPrefix(s.Do, "SCRAP") {
			t.Errorf("%+v", s)
		}
	}
	i := slices.IndexFunc(house, func(f Family) bool { return f.ID == "keep-af" })
	if still := StillBarred(house[i]); len(still) != 2 || still[0].ID != "whisker-germanium" {
		t.Errorf("still barred: %+v", still)
	}
}

func write(t interface{ Fatal(...any) }, families []Family) string {
	var b strings.Builder
	if err := WriteHouse(&b, families); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestNoSpreadsheetRunsAReason(t *testing.T) {
	families := mustRead(t, "x,paper,never-keep,,,,,,,'=HYPERLINK(1),@do\n")
	if families[0].Reason != "=HYPERLINK(1)" || families[0].Do != "@do" {
		t.Errorf("read as %q and %q", families[0].Reason, families[0].Do)
	}
	if text := write(t, families); !strings.Contains(text, "'=HYPERLINK(1),'@do") {
		t.Errorf("written as %s", text)
	}
}

func TestARecordReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		pick := func(name string, from ...string) string { return rapid.SampledFrom(from).Draw(t, name) }
		list := pick("list", "never-keep", "always-keep")
		rows := [][]string{HouseColumns[:], {
			pick("id", "x", "no-paper", "a1"), pick("kinds", "paper", "paper|resistor"), list, "", pick("traits", "", "dated=195x|1960"),
			"", "", "", "", pick("reason", "they leak", "=1+1", "'quoted'", "-", "'=x", `"so" we, say`, "täglich"), "",
		}}
		if list == "never-keep" {
			rows[1][5], rows[1][7] = pick("before", "", "1960", "1979-07-02"), pick("roles", "", "coupling|smoothing")
			rows[1][8], rows[1][10] = pick("dispose", "", "scrap", "hazardous", "exhibit"), pick("do", "", "BIN it, please")
			if rows[1][5] != "" {
				rows[1][6] = pick("undated", "", "yes", "no")
			}
		}
		var text strings.Builder
		w := csv.NewWriter(&text)
		if err := w.WriteAll(rows); err != nil {
			t.Fatal(err)
		}
		once, err := ReadHouse("a", text.String(), bench())
		if err != nil {
			t.Fatal(err)
		}
		twice, err := ReadHouse("b", write(t, once), bench())
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(once, twice, cmpopts.EquateComparable(screening.Source{}), cmp.AllowUnexported(Family{})); diff != "" {
			t.Fatal(diff)
		}
	})
}

func FuzzReadHouse(f *testing.F) {
	f.Add(houseHead + "x,paper,never-keep,,technology=oil*,1979-07-02,yes,coupling|bypass,hazardous,r,d\n")
	f.Add("\ufeffid,kinds,list,reason\nx,bipolar,always-keep,\"a\nb\"\n")
	f.Add("id,kinds,list,types,reason\nx,bipolar,never-keep,*?*?*?*|AF11?,r\n")
	f.Fuzz(func(t *testing.T, text string) {
		families, err := ReadHouse("fuzz", text, bench())
		if err != nil {
			return
		}
		again, err := ReadHouse("again", write(t, families), bench())
		if err != nil || len(again) != len(families) {
			t.Fatalf("%d families read back as %d: %v", len(families), len(again), err)
		}
		for i := range families {
			Barred(families, families[i].Kinds[0], claimOf("type", "AF117", "technology", "oil-filled", "dated", "1961"), Position{Role: "coupling"})
		}
	})
}

func TestPatterns(t *testing.T) {
	for _, tt := range []struct {
		pattern, text string
		want          bool
	}{
		{"AF11?", "AF117", true},
		{"AF11?", "AF117N", true},
		{"AF11?", "AF11", false},
		{"AF11?", "AF11X", false},
		{"AF11?", "AF1171", false},
		{"*78H??*", "UA78H05KC", true},
		{"*78H??*", "78H05", true},
		{"*78H??*", "78HG", false},
		{"*", "", true},
		{"*A*B*", "XAYBZ", true},
		{"*A*B*", "XBYAZ", false},
		{"AC*", "AC128", true},
		{"", "A", true},
		{"", "7", false},
	} {
		if got := matchType(tt.pattern, tt.text); got != tt.want {
			t.Errorf("%q on %q: %v", tt.pattern, tt.text, got)
		}
	}
	for text, want := range map[string]string{
		"1974": "1974-01-01", "197x": "1970-01-01", "1979-7": "1979-07-01", "1979-07-02": "1979-07-02", "74": "", "KW74": "", "1x74": "", "1979-13": "",
		"1979-07-32": "", "": "", "19745": "",
	} {
		if day, ok := earliest(text); day.String() != want || ok != (want != "") {
			t.Errorf("%q is %q, %v; want %q", text, day, ok, want)
		}
	}
}
