package meters

import (
	_ "embed"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"sync"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// MaxRows is how many rows a file of meters may have.
const MaxRows = 2000

// The columns of a file of meters. Those after digit are for people.
var columns = []string{"meter", "of", "low", "high", "accuracy", "step", "spread", "confidence", "digit", "source", "status", "note"}

// ReadCSV reads a file of meters, in the order of their first rows. The error says line and column.
func ReadCSV(known Characteristics, in io.Reader) ([]screening.Meter, error) {
	r := csv.NewReader(in)
	r.TrimLeadingSpace = true
	header, err := r.Read()
	if errors.Is(err, io.EOF) {
		return nil, problem("", "the file is empty; its first line names the columns: %s", strings.Join(columns, ","))
	}
	if err != nil {
		return nil, err
	}
	at, err := places(header)
	if err != nil {
		return nil, err
	}
	var all []screening.Meter
	for n := 1; ; n++ {
		row, err := r.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return all, err
		}
		line, _ := r.FieldPos(0)
		if n > MaxRows {
			return all, fmt.Errorf("line %d: a file of meters has at most %d rows", line, MaxRows)
		}
		if all, err = addRow(all, known, row, at); err != nil {
			return all, fmt.Errorf("line %d, %w", line, err)
		}
	}
	for i := range all {
		if err := whole(&all[i]); err != nil {
			return all, err
		}
	}
	return all, nil
}

// places finds the columns.
func places(header []string) (map[string]int, error) {
	at := map[string]int{}
	for i, name := range header {
		name = strings.ToLower(strings.TrimSpace(strings.TrimPrefix(name, "\ufeff")))
		if !slices.Contains(columns, name) {
			return nil, problem("", "line 1, column %d: %s is no column of a file of meters; they are %s", i+1, quantity.Quote(name), strings.Join(columns, ", "))
		}
		if _, twice := at[name]; twice {
			return nil, problem("", "line 1, column %d: %s stands there twice", i+1, name)
		}
		at[name] = i
	}
	for _, need := range [...]string{"meter", "of", "accuracy"} {
		if _, ok := at[need]; !ok {
			return nil, problem("", "line 1: no column is named %s", need)
		}
	}
	return at, nil
}

// addRow understands one row and adds its entry to the meter of its name.
func addRow(all []screening.Meter, known Characteristics, row []string, at map[string]int) ([]screening.Meter, error) {
	cell := func(name string) string {
		if i, ok := at[name]; ok {
			return strings.TrimSpace(row[i])
		}
		return ""
	}
	name := cell("meter")
	if err := checkName(name); err != nil {
		return all, err
	}
	i := slices.IndexFunc(all, func(m screening.Meter) bool { return m.Name == name })
	if i < 0 {
		i, all = len(all), append(all, screening.Meter{Name: name})
	}
	m := &all[i]
	switch of := strings.ToLower(cell("of")); {
	case of == "leads" || of == "stray" || of == "found":
		return all, addLeads(m, of, strings.ReplaceAll(cell("accuracy"), " ", ""))
	case len(m.Ranges) >= MaxEntries:
		return all, problem(name, "a meter has at most %d entries", MaxEntries)
	}
	g, d, err := begin(known, cell("of"))
	if err == nil {
		err = bounds(&g, d, cell("low"), cell("high"))
	}
	for _, s := range [...]string{"step", "spread"} {
		if text := cell(s); err == nil && text != "" {
			err = setting(&g, d, s, text)
		}
	}
	if err == nil {
		err = accuracy(&g, d, cell("accuracy"))
	}
	if err != nil {
		return all, err
	}
	switch text := cell("confidence"); text {
	case screening.Normal99.String():
		g.Confidence = screening.Normal99
	case "", screening.WithinIt.String():
	default:
		return all, problem(string(d.Name), "%s is no confidence; it is 99%% or rectangular", quantity.Quote(text))
	}
	switch text := cell("digit"); text {
	case "apart":
		g.DigitApart = true
	case "", "in":
	default:
		return all, problem(string(d.Name), "the digit is apart or in, not %s", quantity.Quote(text))
	}
	m.Ranges = append(m.Ranges, g)
	return all, nil
}

//go:embed classes.csv
var classesCSV string

// Classes returns typical meters in words, for people who do not know what theirs claims: orders of magnitude, from memory. Their readings
// count as taken with an assumed meter.
func Classes() []screening.Meter { return slices.Clone(classes()) }

var classes = sync.OnceValue(func() []screening.Meter {
	all, err := ReadCSV(sharedNames, strings.NewReader(classesCSV))
	if err != nil {
		panic("meters: embedded classes.csv: " + err.Error())
	}
	for i := range all {
		all[i].Assumed = true
	}
	return all
})

// sharedNames knows the characteristics that the classes name without asking the rulebooks.
func sharedNames(name screening.Characteristic) (screening.Definition, bool) {
	for _, d := range [...]screening.Definition{screening.Capacitance, screening.ESR, screening.TanDelta, screening.VF} {
		if d.Name == name {
			return d, true
		}
	}
	if name == "hfe" {
		return screening.Definition{Name: "hfe", Unit: quantity.One}, true
	}
	return screening.Definition{}, false
}
