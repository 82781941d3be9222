package marking

import (
	"slices"
	"testing"
	"time"
)

// dates returns the candidates of a scheme, nil where it gives none.
func dates(t *testing.T, text, scheme string, now time.Time) []Date {
	t.Helper()
	meanings, err := Decode(text, Options{Now: now})
	if err != nil {
		return nil
	}
	for _, m := range meanings {
		if m.Of == OfDate && m.Scheme == scheme {
			return m.Dates
		}
	}
	return nil
}

func years(month, week int, years ...int) []Date {
	var all []Date
	for _, y := range years {
		all = append(all, Date{y, month, week})
	}
	return all
}

const (
	yearWeek      = "date: year and week"
	weekYear      = "date: week and year"
	letterMonth   = "date: year letter and month"
	letterWeek    = "date: year letter and week"
	digitMonth    = "date: year digit and month"
	digitIEC      = "date: year digit and IEC month"
	digitWeek     = "date: year digit and week"
	oneCharacter  = "date: one character"
	sourceAndWeek = "date: source code and week"
	sleeve        = "date: letter and year and week"
)

// Today is 1 March 2026, in week 9.
var dateCases = []struct {
	name, text, scheme string
	want               []Date
	source             string
}{
	{"1208 is week 8 of 2012", "1208", yearWeek, years(0, 8, 2012), "QEE (published)"},
	{"and week 12 of 2008", "1208", weekYear, years(0, 12, 2008), "print on parts (from memory)"},
	{"7423 can only be 1974", "7423", yearWeek, years(0, 23, 1974), "YYWW (derived)"},
	{"9408", "9408", yearWeek, years(0, 8, 1994), "YYWW (derived)"},
	{"week 9 of 2026 has begun", "2609", yearWeek, years(0, 9, 2026), "never the future"},
	{"week 10 of 2026 has not", "2610", yearWeek, nil, "never the future"},
	{"there is no week 54", "1254", yearWeek, nil, "ISO 8601"},
	{"there is no week 0", "1200", yearWeek, nil, "ISO 8601"},
	{"before 1950 nothing is coded so", "4908", yearWeek, nil, "house"},
	{"C5 is May of 1992 or 2012", "C5", letterMonth, years(5, 0, 2012, 1992), "electrolytic date codes (published)"},
	{"A1", "A1", letterMonth, years(1, 0, 2010, 1990), "IEC 60062 cycle (from memory)"},
	{"E5 is 1994 or 2014", "E5", letterMonth, years(5, 0, 2014, 1994), "BRAGA (published)"},
	{"M1 is 2000 or 2020", "M1", letterMonth, years(1, 0, 2020, 2000), "BRAGA (published)"},
	{"N5 is 2001, not 2002 as a misprinted almanac has it", "N5", letterMonth, years(5, 0, 2021, 2001), "IEC 60062 cycle; BRAGA's second row is a misprint"},
	{"R3 is 2003: what shows the misprint", "R3", letterMonth, years(3, 0, 2023, 2003), "QEE (published)"},
	{"SO is October of 2004 or 2024", "SO", letterMonth, years(10, 0, 2024, 2004), "BRAGA months (published)"},
	{"SD is December", "SD", letterMonth, years(12, 0, 2024, 2004), "BRAGA months (published)"},
	{"TN is November of 2005 or 2025", "TN", letterMonth, years(11, 0, 2025, 2005), "BRAGA months (published)"},
	{"U3 has come again this month", "U3", letterMonth, years(3, 0, 2026, 2006), "never the future"},
	{"U4 has not", "U4", letterMonth, years(4, 0, 2006), "never the future"},
	{"X9 is 2009: 2029 lies ahead", "X9", letterMonth, years(9, 0, 2009), "never the future"},
	{"G, I, O, Q, Y and Z are no year letters", "G5", letterMonth, nil, "IEC 60062 cycle (from memory)"},
	{"7A is October of years that end in 7", "7A", digitMonth, years(10, 0, 2017, 2007, 1997, 1987, 1977, 1967, 1957), "BRAGA (published)"},
	{"7C is December", "7C", digitMonth, years(12, 0, 2017, 2007, 1997, 1987, 1977, 1967, 1957), "BRAGA (published)"},
	{"63 is March of years that end in 6", "63", digitMonth, years(3, 0, 2026, 2016, 2006, 1996, 1986, 1976, 1966, 1956), "BRAGA (published)"},
	{"7D is December by the other letters", "7D", digitIEC, years(12, 0, 2017, 2007, 1997, 1987, 1977, 1967, 1957), "ten-year code (from memory)"},
	{"942 is week 42 of 1999, or another decade", "942", digitWeek, years(0, 42, 2019, 2009, 1999, 1989, 1979, 1969, 1959), "KEMET (published)"},
	{"K24 is week 24 of 1998 or 2018", "K24", letterWeek, years(0, 24, 2018, 1998), "T491 page (published)"},
	{"235-6742 is week 42 of 1967", "235-6742", sourceAndWeek, years(0, 42, 1967), "EIA source code (from memory)"},
	{"2356742 without the dash", "2356742", sourceAndWeek, years(0, 42, 1967), "EIA source code (from memory)"},
	{"235742 with one digit of the year", "235742", sourceAndWeek, years(0, 42, 2017, 2007, 1997, 1987, 1977, 1967, 1957), "EIA source code (from memory)"},
	{"H1015 on a sleeve is week 15 of 2010", "H1015", sleeve, years(0, 15, 2010), "Nichicon sample (reading from memory)"},
	{"A is January every four years", "A", oneCharacter, years(1, 0, 2025, 2021, 2017, 2013, 2009, 2005, 2001, 1997), "BRAGA (published)"},
	{"M is December: there is no I", "M", oneCharacter, years(12, 0, 2025, 2021, 2017, 2013, 2009, 2005, 2001, 1997), "BRAGA (published)"},
	{"N is January of the second year", "N", oneCharacter, years(1, 0, 2026, 2022, 2018, 2014, 2010, 2006, 2002, 1998), "BRAGA (published)"},
	{"Z is December of the second year", "Z", oneCharacter, years(12, 0, 2022, 2018, 2014, 2010, 2006, 2002, 1998), "BRAGA (published)"},
	{"a is January of the third", "a", oneCharacter, years(1, 0, 2023, 2019, 2015, 2011, 2007, 2003, 1999), "BRAGA (published)"},
	{"z is December of the fourth", "z", oneCharacter, years(12, 0, 2024, 2020, 2016, 2012, 2008, 2004, 2000), "BRAGA (published)"},
	{"1974 in full", "1974", "date: year", years(0, 0, 1974), "trade practice"},
	{"2027 lies ahead", "2027", "date: year", nil, "never the future"},
}

func TestDateCodes(t *testing.T) {
	for _, tt := range dateCases {
		t.Run(tt.name, func(t *testing.T) {
			if got := dates(t, tt.text, tt.scheme, now); !slices.Equal(got, tt.want) {
				t.Errorf("%s: %v, want %v; source: %s", tt.text, got, tt.want, tt.source)
			}
		})
	}
}

// All year letters (electrolytic date codes: R to X and A to F published, 1994 to 2000 published, N and P from memory).
func TestYearLetters(t *testing.T) {
	for i, letter := range "ABCDEFHJKLMNPRSTUVWX" {
		got := dates(t, string(letter)+"1", letterMonth, time.Date(2029, 6, 1, 0, 0, 0, 0, time.UTC))
		if want := years(1, 0, 2010+i, 1990+i); !slices.Equal(got, want) {
			t.Errorf("%c: %v, want %v", letter, got, want)
		}
	}
	if got := dates(t, "A1", letterMonth, time.Date(2030, 6, 1, 0, 0, 0, 0, time.UTC)); !slices.Equal(got, years(1, 0, 2030, 2010, 1990)) {
		t.Errorf("in 2030 A1 comes again: %v", got)
	}
	for letter := 'A'; letter <= 'Z'; letter++ {
		if slices.Contains([]rune("GIOQYZ"), letter) != (load().years[letter].year == 0) {
			t.Errorf("%c: %d", letter, load().years[letter].year)
		}
	}
}

func TestTheMisprintIsNamed(t *testing.T) {
	for text, want := range map[string]bool{"N5": true, "P5": true, "R5": true, "V5": true, "M5": false, "W5": false} {
		for _, m := range decode(t, text) {
			if m.Scheme == letterMonth && contains(m.Note, "misprint") != want {
				t.Errorf("%s: %q", text, m.Note)
			}
		}
	}
}

func TestDatesReadAsWords(t *testing.T) {
	for text, want := range map[string]string{
		"1208": "week 8 of 2012", "1974": "1974",
	} {
		found := false
		for _, m := range decode(t, text) {
			found = found || m.String() == want && slices.Equal(m.Words, []string{"dated=" + m.Dates[0].year()})
		}
		if !found {
			t.Errorf("%s does not read %q:%s", text, want, list(decode(t, text)))
		}
	}
	for text, want := range map[string]string{"C5": "May 2012 or 1992", "E47": "week 47 of 2014 or 1994"} {
		for _, m := range decode(t, text) {
			if m.Of != OfDate {
				continue
			}
			if m.String() != want || m.Words != nil {
				t.Errorf("%s reads %q and claims %v, want %q and nothing", text, m, m.Words, want)
			}
		}
	}
	if m := decode(t, "104K 9408")[0]; m.String() != "100 nF ±10 %, week 8 of 1994" || len(m.Dates) != 1 {
		t.Errorf("a date behind a value: %s", m)
	}
}

// Without a day there are no dates, and nothing else changes.
func TestWithoutADayThereAreNoDates(t *testing.T) {
	meanings, err := Decode("104", Options{})
	if err != nil || meanings[0].Value != 100e-9 {
		t.Fatal(err, meanings)
	}
	for _, m := range meanings {
		if m.Of == OfDate {
			t.Errorf("%s", m)
		}
	}
}
