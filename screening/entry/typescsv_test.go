package entry

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"goodbin/screening"
)

// readTypes reads a whole file of types; each row becomes what it says, or its errors.
func readTypes(text string) (rows []string, err error) {
	read, err := ReadTypes(strings.NewReader(text), testBooks())
	for _, row := range read {
		if len(row.Errors) > 0 {
			for _, e := range row.Errors {
				rows = append(rows, e.Error())
			}
			continue
		}
		said := fmt.Sprintf("%d: %s %s", row.Line, row.Book.Kind, row.Claim.Trait(screening.TraitType))
		for _, t := range row.Claim.Traits {
			if t.Name != screening.TraitType {
				said += " " + t.Name + "=" + t.Text
			}
		}
		for _, r := range row.Claim.Ratings {
			said += " " + string(r.Of) + " " + r.String()
			if at := r.At.String(); at != "" {
				said += " @ " + at
			}
		}
		for _, x := range []string{row.Alias, row.Source, row.Note} {
			if x != "" {
				said += " | " + x
			}
		}
		rows = append(rows, said)
	}
	return rows, err
}

func TestReadTypes(t *testing.T) {
	for _, tt := range []struct{ name, text, want string }{
		{
			"every sort of column", "kind,type,alias,polarity,rated:vceo,rated:hfe,source,note\ntransistor,QX1,X1,npn,30V,100..300,a sheet,a note\n",
			"2: transistor QX1 polarity=npn vceo 30 V hfe 100 .. 300 | X1 | a sheet | a note",
		},
		{"a condition in the header", "kind,type,\"rated:hfe@ic=2mA,vce=5V\"\ntransistor,QX1,100..300\n", "2: transistor QX1 hfe 100 .. 300 @ IC 2 mA, VCE 5 V"},
		{"a condition in the cell", "kind,type,rated:hfe\ntransistor,QX1,\"..300@2mA,5V\"\n", "2: transistor QX1 hfe ≤ 300 @ IC 2 mA, VCE 5 V"},
		{
			"the cell's condition comes before the header's", "kind;type;rated:hfe@ic=2mA\ntransistor;QX1;100@ic=10mA,vce=1V\n",
			"2: transistor QX1 hfe 100 @ IC 10 mA, VCE 1 V",
		},
		{"a unit in brackets", "kind,type,rated:vceo [mV]\ntransistor,QX1,500\ntransistor,QX2,30V\n", "2: transistor QX1 vceo 500 mV\n3: transistor QX2 vceo 30 V"},
		{"a unit in brackets before a condition", "kind,type,rated:vceo [V]\ntransistor,QX1,30@ic=1mA\n", "2: transistor QX1 vceo 30 V @ IC 1 mA"},
		{"one figure at two conditions", "kind,type,rated:hfe@ic=1mA,rated:hfe@ic=1A\ntransistor,QX1,50..,10..\n", "2: transistor QX1 hfe ≥ 50 @ IC 1 mA hfe ≥ 10 @ IC 1 A"},
		{"a name that is only claimed needs no rated", "kind,type,vceo\ntransistor,QX1,30V\n", "2: transistor QX1 vceo 30 V"},
		{"empty cells and blank lines", "kind,type,polarity,rated:vceo\n\ntransistor,QX1,,\n\ntransistor,QX2,pnp\n", "3: transistor QX1\n5: transistor QX2 polarity=pnp"},
		{"a spreadsheet's guard is taken away", "kind,type,note\ntransistor,'=QX1,'=1+1\n", "2: transistor =QX1 | =1+1"},
		{"a known type is written as the kind writes it", "kind,type\ntransistor,2n3904\n", "2: transistor 2N3904"},
		{"a kind in capitals", "KIND,Type,ALIAS\nTransistor,QX1,q\n", "2: transistor QX1 | q"},

		{"a wrong unit", "kind,type,rated:vceo\ntransistor,QX1,30A\n", `line 2, column 3 (rated:vceo): "30A" is a current; vceo is a voltage such as 35V`},
		{"a word that is none", "kind,type,polarity\ntransistor,QX1,nnp\n", `line 2, column 3 (polarity): "nnp" is none of its words`},
		{"a range upside down", "kind,type,rated:hfe\ntransistor,QX1,300..100\n", `line 2, column 3 (rated:hfe): "300..100" is a range whose lower end lies above its upper end`},
		{"no type", "kind,type,rated:vceo\ntransistor,,30V\n", "line 2: the type is missing"},
		{"no such kind", "kind,type\nvalve,QX1\n", `line 2, column 1 (kind): "valve" is no kind of part`},
		{"a kind without type numbers", "kind,type\ncan,QX1\n", "line 2: a can has no type numbers"},
		{"a figure of another kind", "kind,type,capacitance\ntransistor,QX1,1uF\n", ""},
		{"a value that is missing", "kind,type,rated:hfe\ntransistor,QX1,@ic=1mA\n", "line 2, column 3 (rated:hfe): the value is missing"},
		{"a condition that is none", "kind,type,rated:hfe\ntransistor,QX1,100@vxx=1V\n", `line 2, column 3 (rated:hfe): "vxx" is no condition`},
		{"too many cells", "kind,type\ntransistor,QX1,30V\n", "line 2: the row has 3 columns, the header 2"},
		{
			"every error of every row", "kind,type,rated:vceo,rated:hfe\ntransistor,A,1A,x\ntransistor,B,30V,50\ntransistor,C,1F,\n",
			"line 2, column 3 (rated:vceo): \"1A\" is a current; vceo is a voltage such as 35V\nline 2, column 4 (rated:hfe): \"x\" has no number in it\n" +
				"3: transistor B vceo 30 V hfe 50\nline 4, column 3 (rated:vceo): \"1F\" is a capacitance; vceo is a voltage such as 35V",
		},
		{"an unclosed quote spoils its line alone", "kind,type\ntransistor,\"QX1\ntransistor,QX2\n", "line 2: column 2: the quote is never closed\n3: transistor QX2"},
		{"a terminal escape", "kind,type\ntransistor,QX\x1b[1m\n", `line 2: control character '\x1b' in the line`},
	} {
		rows, err := readTypes(tt.text)
		if tt.want == "" {
			if err == nil {
				t.Errorf("%s: read as %q", tt.name, rows)
			}
			continue
		}
		if got := strings.Join(rows, "\n"); err != nil || got != tt.want {
			t.Errorf("%s: %v\n got %s\nwant %s", tt.name, err, got, tt.want)
		}
	}
}

// Nothing that stands in a column may be left out without a word.
func TestTypesFilesThatCannotBeRead(t *testing.T) {
	for name, tt := range map[string][2]string{
		"empty":               {"", ErrEmptyFile.Error()},
		"binary":              {"kind\x00", ErrBinaryFile.Error()},
		"a misspelt column":   {"kind,type,rated:vcoe\n", "line 1, column 3 (rated:vcoe): no kind of part has such a reading or claim"},
		"a reading":           {"kind,type,hfe\n", "line 1, column 3 (hfe): is measured or seen on a part, and nothing that a sheet says"},
		"what is seen":        {"kind,type,seen\n", "line 1, column 3 (seen): is measured or seen on a part, and nothing that a sheet says"},
		"a lot":               {"kind,type,lot\n", "line 1, column 3 (lot): is of a part, and no column of a file of types"},
		"a verdict":           {"kind,type,verdict\n", "line 1, column 3 (verdict): is of a part, and no column of a file of types"},
		"the temperature":     {"kind,type,temperature\n", "line 1, column 3 (temperature): is measured or seen on a part, and nothing that a sheet says"},
		"no type":             {"kind,polarity\n", "line 1: no column names the type"},
		"alias twice":         {"kind,type,alias,Alias\n", "line 1, column 4 (alias): stands in column 3 too"},
		"a column twice":      {"kind,type,polarity,polarity\n", "line 1, column 4 (polarity): stands in column 3 too"},
		"a section":           {"kind,type,rated:vceo/2\n", "line 1, column 3 (rated:vceo/2): a type has no sections here"},
		"a misspelt variable": {"kind,type,rated:hfe@vxx=1V\n", `line 1, column 3 (rated:hfe@vxx=1V): hfe: "vxx" is no condition`},
	} {
		_, err := readTypes(tt[0])
		if err == nil || err.Error() != tt[1] {
			t.Errorf("%s: %v, want %s", name, err, tt[1])
		}
	}
	long := "kind,type\n" + strings.Repeat("transistor,QX1\n", MaxTypeRows+1)
	if rows, err := readTypes(long); err == nil || len(rows) != MaxTypeRows {
		t.Errorf("%d rows, %v", len(rows), err)
	}
}

func TestSheetValues(t *testing.T) {
	inf := math.Inf(1)
	ratio := screening.Field{Definition: screening.Definition{Name: "ctr", Unit: screening.Tolerance.Unit}}
	for _, tt := range []struct {
		name, text, suffix string
		field              screening.Field
		nominal, low, high float64
	}{
		{"a value", "30V", "", screening.Field{Definition: collector}, 30, 30, 30},
		{"at most", "..30V", "", screening.Field{Definition: collector}, math.NaN(), -inf, 30},
		{"at least", "30V..", "", screening.Field{Definition: collector}, math.NaN(), 30, inf},
		{"at most with a sign", "<30V", "", screening.Field{Definition: collector}, math.NaN(), -inf, 30},
		{"a range", "20V..30V", "", screening.Field{Definition: collector}, math.NaN(), 20, 30},
		{"a suffix for a bare number", "500", "mV", screening.Field{Definition: collector}, 0.5, 0.5, 0.5},
		{"a percentage of something else is a value", "100%", "", ratio, 1, 1, 1},
		{"with a sign it is a tolerance", "±5%", "", ratio, math.NaN(), -0.05, 0.05},
		{"a tolerance letter", "M", "", ratioField(), math.NaN(), -0.2, 0.2},
	} {
		r, err := Rating(tt.field, screening.Condition{}, tt.text, tt.suffix)
		same := r.Nominal == tt.nominal || math.IsNaN(r.Nominal) && math.IsNaN(tt.nominal)
		if err != nil || !same || math.Abs(r.Low-tt.low) > 1e-12 || math.Abs(r.High-tt.high) > 1e-12 || r.Typed != tt.text {
			t.Errorf("%s: %+v, %v", tt.name, r, err)
		}
	}
	for _, text := range []string{"", "@ic=1mA", "30V@", "OL", "30A", "1..2..3", "x", "30V@120"} {
		if r, err := Rating(screening.Field{Definition: collector}, screening.Condition{}, text, ""); err == nil {
			t.Errorf("%q is read as %v", text, r)
		}
	}
}

func FuzzReadTypes(f *testing.F) {
	for _, text := range []string{
		"kind,type,alias,polarity,rated:vceo,source,note\ntransistor,QX1,X1,npn,30V,s,n\n", "kind;type;rated:hfe@ic=2mA\ntransistor;Q;1,5..2\n",
		"kind\ttype\tvceo [mV]\ntransistor\tQ\t1\n", "kind,type,\"rated:hfe@ic=2mA,vce=5V\"\ntransistor,Q,\"..5@1A\"\n", "kind,type\ntransistor,\"Q\n", "\xef\xbb\xbfkind,type\n",
	} {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		rows, err := ReadTypes(strings.NewReader(text), testBooks())
		if err != nil {
			checkPrintable(t, err.Error())
		}
		for _, row := range rows {
			for _, e := range row.Errors {
				checkPrintable(t, e.Error())
			}
			if len(row.Errors) > 0 {
				continue
			}
			if row.Book == nil || row.Claim.Trait(screening.TraitType) == "" {
				t.Fatalf("a row without kind or type: %+v", row)
			}
			checkPrintable(t, row.Alias+row.Claim.Trait(screening.TraitType)+row.Source)
			for _, r := range row.Claim.Ratings {
				if math.IsNaN(r.Low) || math.IsNaN(r.High) || r.Low > r.High {
					t.Fatalf("%+v", r)
				}
			}
		}
	})
}
