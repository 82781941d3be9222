package entry

import (
	"errors"
	"fmt"
	"io"
	"strings"
	"testing"
)

// next reads and understands the next row.
func next(c *CSV) (Row, error) {
	r, err := c.Scan()
	if err != nil {
		return Row{}, err
	}
	return c.Row(r), nil
}

// readAll reads a whole file; each row becomes "line: header | readings" or its errors.
func readAll(t testing.TB, text string) (rows []string, err error) {
	t.Helper()
	file, err := NewCSV(strings.NewReader(text), testBooks())
	if err != nil {
		return nil, err
	}
	for {
		row, err := next(file)
		if errors.Is(err, io.EOF) {
			return rows, nil
		}
		if err != nil {
			return rows, err
		}
		if len(row.Errors) > 0 {
			for _, e := range row.Errors {
				rows = append(rows, e.Error())
			}
			continue
		}
		said := fmt.Sprintf("%d: %s %s-%s [%s]", row.Line, row.Book.Kind, row.Lot, row.Part, row.Parsed.Claim)
		for _, r := range row.Parsed.Readings {
			said += " " + string(r.Of) + r.Section + "=" + Value(r)
			if at := r.At.String(); at != "" {
				said += "@" + at
			}
		}
		rows = append(rows, said)
	}
}

func TestCSV(t *testing.T) {
	tests := []struct{ name, text, want string }{
		{
			"columns are the words of the command line", "kind,lot,part,claim,capacitance,esr@120Hz\ncan,12,7,2200uF 35V M,2010uF,61m\n",
			"2: can 12-7 [2200 µF 35 V ±20 %] capacitance=2010 µF esr=61 mΩ@120 Hz",
		},
		{
			"a header with a comma in its condition is quoted", "kind,\"hfe@ic=10mA,vce=1V\"\ntransistor,180\n",
			"2: transistor - [] hfe=180@IC 10 mA, VCE 1 V",
		},
		{
			"a unit in brackets is that of bare numbers", "kind,\"leakage@35V,2min [uA]\"\ncan,45\ncan,0.045mA\ncan,<0.1\n",
			"2: can - [] leakage=45 µA@35 V, after 2 min\n3: can - [] leakage=45 µA@35 V, after 2 min\n4: can - [] leakage=< 0.1 µA@35 V, after 2 min",
		},
		{"byte order mark and line ends of Windows", "\ufeffkind,capacitance\r\ncan,2010uF\r\n", "2: can - [] capacitance=2010 µF"},
		{"semicolons leave the comma to decimals", "kind;esr;claim\ncan;1,061;2200uF\n", "2: can - [2200 µF] esr=1.061 Ω"},
		{"tabs", "kind\tesr\ncan\t0.5\n", "2: can - [] esr=0.5 Ω"},
		{"no line end at the end", "kind,esr\ncan,1", "2: can - [] esr=1 Ω"},
		{"empty lines and empty cells", "\n\nkind,esr,capacitance\n\ncan,,1uF\n,,\n", "5: can - [] capacitance=1 µF\nline 6, column 1 (kind): the kind is missing"},
		{"a quoted cell over two lines", "kind,note,esr\ncan,\"two\nlines\",1\ncan,,2\n", "2: can - [] esr=1 Ω\n4: can - [] esr=2 Ω"},
		{"kind and claim are typed once a lot", "kind,lot,part,claim\ncan,1,1,2200uF 35V\n,1,2,\n,1,3,100uF 10V\n", "2: can 1-1 [2200 µF 35 V]\n3: can 1-2 [2200 µF 35 V]\n4: can 1-3 [100 µF 10 V]"},
		{
			"a reading in the claim column, which the lot's other parts would take over", "kind,lot,part,claim\ncan,1,1,2200uF esr=1\n",
			"line 2, column 4 (claim): \"2200uF esr=1\" says what was measured or seen, which is one part's own and no claim",
		},
		{"rated, trait, seen and treated columns", "kind,rated:vceo,type,seen\ntransistor,40V,GT308,\n", "2: transistor - [40 V GT308]"},
		{"a cell guarded against spreadsheets", "kind,temperature\ncan,'-5C\n", "2: can - [] temperature=-5 °C"},
		{"columns of an export are passed over", "kind,esr,verdict,why\ncan,1,reject,\"a, b\"\n", "2: can - [] esr=1 Ω"},

		{"a wrong unit is placed, and the rest is read", "kind,leakage\ncan,45uV\ncan,45uA\n", "line 2, column 2 (leakage): \"45uV\" is a voltage; leakage is a current such as 45uA\n3: can - [] leakage=45 µA"},
		{"every wrong cell of a row", "kind,leakage,esr\ncan,x,y\n", "line 2, column 2 (leakage): \"x\" has no number in it\nline 2, column 3 (esr): \"y\" has no number in it"},
		{"an unknown kind", "kind,esr\ncna,1\n", "line 2, column 1 (kind): \"cna\" is no kind of part"},
		{"a reading of another kind", "kind,hfe\ncan,180\ncan,\n", "line 2, column 2 (hfe): hfe: a can has no such reading or claim\n3: can - []"},
		{"no kind column", "esr\n1\n", "line 2: no column says what kind of part this is"},
		{"more cells than columns", "kind,esr\ncan,1,2\ncan,1,\n", "line 2: the row has 3 columns, the header 2\n3: can - [] esr=1 Ω"},
		{"a quote that is never closed spoils its own row", "kind,note,esr\ncan,\"open,1\ncan,x,2\n", "line 2, column 2: the quote is never closed\n3: can - [] esr=2 Ω"},
		{"a quote inside a cell", "kind,note\ncan,a\"b\ncan,c\n", "line 2: column 2: a quote inside a cell; quote the whole cell and double its quotes\n3: can - []"},
		{"a control character", "kind,note\ncan,a\x1b[31m\ncan,c\n", "line 2: control character '\\x1b' in the line\n3: can - []"},
		{"bytes that are no UTF-8", "kind,note\ncan,\xb5\ncan,c\n", "line 2: the line is not UTF-8; save the file as CSV UTF-8\n3: can - []"},
		{"NaN", "kind,esr\ncan,NaN\n", "line 2, column 2 (esr): \"NaN\" has no number in it"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			rows, err := readAll(t, tt.text)
			if err != nil {
				t.Fatal(err)
			}
			got := strings.ReplaceAll(strings.Join(rows, "\n"), "line 2: column 2: the quote", "line 2, column 2: the quote")
			if got != tt.want {
				t.Errorf("got:\n%s\nwant:\n%s", got, tt.want)
			}
		})
	}
}

func TestCSVThatCannotBeRead(t *testing.T) {
	tests := []struct{ name, text, want string }{
		{"an empty file", "", ErrEmptyFile.Error()},
		{"nothing but blank lines", "\n \n\r\n", ErrEmptyFile.Error()},
		{"a binary file", "\x7fELF\x00\x01", ErrBinaryFile.Error()},
		{"UTF-16", "\xff\xfek\x00", ErrUTF16File.Error()},
		{"a column that no kind knows", "kind,leakge\n", "line 1, column 2 (leakge): no kind of part has such a reading or claim"},
		{"a condition that makes no sense", "kind,leakage@35\n", `line 1, column 2 (leakage@35): leakage: condition "35" has no unit`},
		{"a column that stands twice", "kind,esr,ESR\n", "line 1, column 3 (ESR): stands in column 2 too"},
		{"a header that is too long", "kind," + strings.Repeat("x", MaxLineBytes), fmt.Sprintf("line 1: the line is longer than %d bytes", MaxLineBytes)},
		{"a header with 10,000 columns", strings.Repeat("a,", 10_000), fmt.Sprintf("line 1: the row has more than %d columns", MaxColumns)},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			_, err := NewCSV(strings.NewReader(tt.text), testBooks())
			if err == nil || err.Error() != tt.want {
				t.Errorf("error %v, want %s", err, tt.want)
			}
		})
	}
}

func TestCSVGoesOnAfterHugeLines(t *testing.T) {
	const columns = 10_000
	text := "kind,esr\n" + strings.Repeat("x", 10<<20) + "\ncan,1\n" + strings.Repeat("a,", columns) + "\ncan,2\n\"" + strings.Repeat("y", 10<<20) + "\ncan,3\n"
	rows, err := readAll(t, text)
	if err != nil {
		t.Fatal(err)
	}
	want := []string{
		fmt.Sprintf("line 2: the line is longer than %d bytes", MaxLineBytes), "3: can - [] esr=1 Ω",
		fmt.Sprintf("line 4: the row has more than %d columns", MaxColumns), "5: can - [] esr=2 Ω",
		fmt.Sprintf("line 6: the line is longer than %d bytes", MaxLineBytes), "7: can - [] esr=3 Ω",
	}
	if got := strings.Join(rows, "\n"); got != strings.Join(want, "\n") {
		t.Errorf("got:\n%s", got)
	}
}

func TestGuard(t *testing.T) {
	for _, text := range []string{"=1+1", "+1", "-5C", "@x", "'x", "plain", "", "'"} {
		guarded := Guard(text)
		if guarded != "" && strings.ContainsRune("=+-@", rune(guarded[0])) {
			t.Errorf("%q is exported as %q, which a spreadsheet runs", text, guarded)
		}
		if back := unguard(guarded); back != text {
			t.Errorf("%q comes back as %q", text, back)
		}
	}
}

func FuzzCSV(f *testing.F) {
	for _, text := range []string{
		"kind,lot,part,claim,capacitance\ncan,1,1,2200uF 35V,2010uF\n", "kind;esr\ncan;0,5\n", "\ufeffkind,note\ncan,\"a\nb\"\n", "kind,\"hfe@ic=10mA,vce=1V\"\ntransistor,180\n",
		"", "\x00", "kind,esr [ohm]\ncan,1,\"", "kind,note\ncan,\"\"\"\n", "kind\n\"\n\"\ncan\n",
	} {
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text string) {
		file, err := NewCSV(strings.NewReader(text), testBooks())
		if err != nil {
			checkPrintable(t, err.Error())
			return
		}
		lines := strings.Count(text, "\n") + 1
		for n := 0; ; n++ {
			row, err := next(file)
			if errors.Is(err, io.EOF) {
				return
			}
			if err != nil {
				t.Fatal(err)
			}
			if row.Line < 1 || row.Line > lines || n > lines {
				t.Fatalf("row %d begins at line %d of %d", n, row.Line, lines)
			}
			for _, e := range row.Errors {
				checkPrintable(t, e.Error())
			}
		}
	})
}

func BenchmarkCSV(b *testing.B) {
	var text strings.Builder
	text.WriteString("kind,lot,part,place,claim,capacitance,esr@120Hz,\"leakage@35V,2min\",temperature,seen\n")
	const rows = 10_000
	for i := range rows {
		fmt.Fprintf(&text, "can,12,%d,tray A,2200uF 35V M,%duF,%dm,%duA,24C,nothing\n", i+1, 2000+i%100, 50+i%30, 40+i%20)
	}
	b.SetBytes(int64(text.Len()))
	for b.Loop() {
		file, err := NewCSV(strings.NewReader(text.String()), testBooks())
		if err != nil {
			b.Fatal(err)
		}
		n := 0
		for {
			row, err := next(file)
			if errors.Is(err, io.EOF) {
				break
			}
			if err != nil || len(row.Errors) > 0 {
				b.Fatal(err, row.Errors)
			}
			n += len(row.Parsed.Readings)
		}
		if n != 4*rows {
			b.Fatalf("%d readings", n)
		}
	}
	b.ReportMetric(float64(rows)*float64(b.N)/b.Elapsed().Seconds(), "rows/s")
}

func BenchmarkWords(b *testing.B) {
	book := bookOf(b, "can")
	words := strings.Fields("2200uF 35V M capacitance=2010uF esr@120Hz=61m leakage@35V,2min=45uA temperature=24C")
	for b.Loop() {
		if _, err := Words(book, words); err != nil {
			b.Fatal(err)
		}
	}
}
