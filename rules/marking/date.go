package marking

import (
	"strconv"
	"strings"
	"time"
)

// earliestCode is the first year that a date code is taken for: coded dates are younger than that (the program's own bound).
const earliestCode = 1950

// earliestYear is the first year that a year printed in full is taken for.
const earliestYear = 1920

// lastWeek is the highest number that a week can have (ISO 8601).
const lastWeek = 53

// String prints a date as far as it is known: "2012", "May 2012", "week 8 of 2012".
func (t Date) String() string {
	switch {
	case t.Month > 0:
		return time.Month(t.Month).String() + " " + strconv.Itoa(t.Year)
	case t.Week > 0:
		return "week " + strconv.Itoa(t.Week) + " of " + strconv.Itoa(t.Year)
	}
	return strconv.Itoa(t.Year)
}

func (t Date) year() string { return strconv.Itoa(t.Year) }

// datesText prints candidates in one line: "week 42 of 2019, 2009 or 1999". They share month and week.
func datesText(dates []Date) string {
	if len(dates) == 0 {
		return ""
	}
	b := []byte(dates[0].String())
	for i, t := range dates[1:] {
		if i == len(dates)-2 {
			b = append(b, " or "...)
		} else {
			b = append(b, ", "...)
		}
		b = strconv.AppendInt(b, int64(t.Year), 10)
	}
	return string(b)
}

// day is what is known of today.
type day struct{ year, month, isoYear, week int }

func dayOf(now time.Time) day {
	isoYear, week := now.ISOWeek()
	return day{now.Year(), int(now.Month()), isoYear, week}
}

// past reports whether a date does not lie in the future.
func (d day) past(t Date) bool {
	switch {
	case t.Week > 0:
		return t.Year < d.isoYear || t.Year == d.isoYear && t.Week <= d.week
	case t.Month > 0:
		return t.Year < d.year || t.Year == d.year && t.Month <= d.month
	}
	return t.Year <= d.year
}

// every lists the years from first on, every so many, that are not in the future, the latest first.
func (d day) every(first, years, month, week int) []Date {
	last := first
	for d.past(Date{last + years, month, week}) {
		last += years
	}
	if !d.past(Date{last, month, week}) {
		return nil
	}
	dates := make([]Date, 0, (last-first)/years+1)
	for y := last; y >= first; y -= years {
		dates = append(dates, Date{y, month, week})
	}
	return dates
}

// lastDigit lists the years that end in a digit.
func (d day) lastDigit(digit, month, week int) []Date {
	return d.every(earliestCode+digit, 10, month, week)
}

// twoDigits lists the years that end in two digits; since no code is older than earliestCode there is one at most, until 2050.
func (d day) twoDigits(yy, month, week int) []Date {
	first := earliestCode/100*100 + yy
	if first < earliestCode {
		first += 100
	}
	return d.every(first, 100, month, week)
}

func (d *decoder) date(id schemeID, dates []Date) {
	if len(dates) == 0 {
		return
	}
	s := d.value(id, 0)
	s.dates, s.rank = dates, d.besides
	d.sayings = append(d.sayings, s)
}

// dateToken reads a whole token of digits and letters as a date code. Inside a longer print only the usual ones are tried.
func (d *decoder) dateToken(i, end int, alone bool) {
	start := len(d.sayings)
	token := d.text[i:end]
	switch len(token) {
	case 1:
		if alone {
			d.oneCharacter(token[0])
		}
	case 2:
		d.yearMonth(token, alone)
	case 3:
		d.yearWeek(token, alone)
	case 4:
		d.fourFigures(token)
	case 5:
		if alone && token[0] >= 'A' && token[0] <= 'Z' && allDigits(token[1:]) && week(token[3:5]) != noWeek {
			d.date(dateSleeve, d.today.twoDigits(number(token[1:3]), 0, week(token[3:5])))
		}
	case 6, 7, 8:
		if alone {
			d.sourceWeek(token)
		}
	}
	d.found = append(d.found, piece{role: asDate, shape: wordShape, from: i, to: end, first: start, count: len(d.sayings) - start})
	if len(d.sayings) == start {
		d.found = d.found[:len(d.found)-1]
	}
}

func allDigits(s string) bool { return strings.Trim(s, "0123456789") == "" }

// week reads two digits as a week; more than a year has gives a week that no day has reached.
func week(digits string) int {
	if w := number(digits); w >= 1 && w <= lastWeek {
		return w
	}
	return noWeek
}

const noWeek = -1

// month reads a month's character: 1 to 9, then the letters of a code; 0 where it is none.
func month(c byte, october, november, december byte) int {
	switch {
	case c >= '1' && c <= '9':
		return int(c - '0')
	case c == october:
		return 10
	case c == november:
		return 11
	case c == december:
		return 12
	}
	return 0
}

// yearMonth reads a year letter and a month (IEC 60062, 20 years), or a year digit and a month.
func (d *decoder) yearMonth(token string, alone bool) {
	c := token[0]
	iec := month(token[1], 'O', 'N', 'D')
	if isLetter(c) {
		if letter := &d.tables.years[c]; letter.year > 0 && iec > 0 {
			d.letterDate(dateTwo, letter, iec, 0)
		}
		return
	}
	if !isDigit(c) || !alone {
		return
	}
	if m := month(token[1], 'A', 'B', 'C'); m > 0 {
		d.date(dateDigitMonth, d.today.lastDigit(int(c-'0'), m, 0))
	}
	if iec > 9 {
		d.date(dateTenYear, d.today.lastDigit(int(c-'0'), iec, 0))
	}
}

func (d *decoder) letterDate(id schemeID, letter *yearLetter, month, week int) {
	n := len(d.sayings)
	d.date(id, d.today.every(letter.year, 20, month, week))
	if len(d.sayings) > n {
		s := &d.sayings[n]
		s.note = letter.note
		if id == dateTwo {
			s.source = &letter.source
		}
	}
}

// yearWeek reads a year letter or digit and a week.
func (d *decoder) yearWeek(token string, alone bool) {
	if !allDigits(token[1:]) || week(token[1:]) == noWeek {
		return
	}
	w := week(token[1:])
	if isLetter(token[0]) {
		if letter := &d.tables.years[token[0]]; letter.year > 0 {
			d.letterDate(dateLetterWeek, letter, 0, w)
		}
	} else if alone && isDigit(token[0]) {
		d.date(dateYWW, d.today.lastDigit(int(token[0]-'0'), 0, w))
	}
}

// fourFigures reads four digits as year and week, week and year, or a year.
func (d *decoder) fourFigures(token string) {
	if !allDigits(token) {
		return
	}
	front, back := token[:2], token[2:]
	if w := week(back); w != noWeek {
		d.date(dateYYWW, d.today.twoDigits(number(front), 0, w))
	}
	if w := week(front); w != noWeek {
		d.date(dateWWYY, d.today.twoDigits(number(back), 0, w))
	}
	if year := number(token); year >= earliestYear && d.today.past(Date{Year: year}) {
		d.date(dateYear, []Date{{Year: year}})
	}
}

// oneCharacter reads the Japanese code that comes back every four years from 1997 on: A to M without I are the months of the first, N to Z
// without O of the second, small letters of the third and fourth.
func (d *decoder) oneCharacter(c byte) {
	const first, second = "ABCDEFGHJKLM", "NPQRSTUVWXYZ"
	for year, letters := range [...]string{first, second, strings.ToLower(first), strings.ToLower(second)} {
		if m := strings.IndexByte(letters, c); m >= 0 {
			d.date(dateOne, d.today.every(1997+year, 4, m+1, 0))
		}
	}
}

// sourceWeek reads a source code of three digits, and behind it year and week: 235-6742, 235742.
func (d *decoder) sourceWeek(token string) {
	if !allDigits(token[:3]) {
		return
	}
	rest := strings.TrimPrefix(token[3:], "-")
	if !allDigits(rest) {
		return
	}
	n := len(d.sayings)
	switch len(rest) {
	case 3:
		if w := week(rest[1:]); w != noWeek {
			d.date(dateSource, d.today.lastDigit(int(rest[0]-'0'), 0, w))
		}
	case 4:
		if w := week(rest[2:]); w != noWeek {
			d.date(dateSource, d.today.twoDigits(number(rest[:2]), 0, w))
		}
	}
	if len(d.sayings) > n {
		d.sayings[n].note = "source code " + token[:3]
	}
}
