package sampling

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"sync"

	"goodbin/screening"
)

//go:embed plans.csv
var plansCSV string

//go:embed letters.csv
var lettersCSV string

//go:embed switching.csv
var switchingCSV string

// cell is one cell of tables II-A, II-B and II-C: a plan of the row's own, or an arrow to the row that has it.
type cell struct {
	accept, reject int
	step           int // 0: this row's own plan; +1 the arrow points down, −1 up
	empty          bool
}

// planRow is a row of tables II-A, II-B and II-C.
type planRow struct {
	letter string
	n      int
	cells  []cell
	source screening.Source
}

// letterRow is a row of table I: the code letters of lots of this size.
type letterRow struct {
	least, most int // most 0: no end
	byLevel     []string
}

// tables are the standard's tables as printed.
type tables struct {
	aqls    []float64 // percent, as the columns stand
	plans   [3][]planRow
	levels  []Level
	letters []letterRow
}

// standard reads the embedded tables once. A test holds them to load; a broken one is a fault of the program, not of its input.
var standard = sync.OnceValue(func() *tables {
	t := &tables{}
	if err := t.readPlans(plansCSV); err != nil {
		panic("sampling: embedded plans.csv: " + err.Error())
	}
	if err := t.readLetters(lettersCSV); err != nil {
		panic("sampling: embedded letters.csv: " + err.Error())
	}
	return t
})

// records reads a CSV text with a header whose last two columns are source and status.
func records(text string) (header []string, rows [][]string, err error) {
	all, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		return nil, nil, err
	}
	if len(all) < 2 || len(all[0]) < 3 || !slices.Equal(all[0][len(all[0])-2:], []string{"source", "status"}) {
		return nil, nil, fmt.Errorf("the header must end in source,status and be followed by rows")
	}
	return all[0], all[1:], nil
}

// sourceOf reads the last two columns of a row.
func sourceOf(row []string) (screening.Source, error) {
	status, ok := screening.StatusNamed(row[len(row)-1])
	if !ok {
		return screening.Source{}, fmt.Errorf("%q is no status", row[len(row)-1])
	}
	return screening.Source{Document: row[len(row)-2], Status: status}, nil
}

func (t *tables) readPlans(text string) error {
	header, rows, err := records(text)
	if err != nil {
		return err
	}
	const leading = 3 // inspection, letter, n
	columns := header[leading : len(header)-2]
	for _, name := range columns {
		aql, err := strconv.ParseFloat(name, 64)
		if err != nil {
			return fmt.Errorf("column %q is no AQL", name)
		}
		t.aqls = append(t.aqls, aql)
	}
	for _, row := range rows {
		inspection, err := ParseInspection(row[0])
		if err != nil {
			return err
		}
		out := planRow{letter: row[1]}
		if out.n, err = strconv.Atoi(row[2]); err != nil {
			return err
		}
		if out.source, err = sourceOf(row); err != nil {
			return err
		}
		for _, text := range row[leading : len(row)-2] {
			c, err := parseCell(text)
			if err != nil {
				return err
			}
			out.cells = append(out.cells, c)
		}
		t.plans[inspection] = append(t.plans[inspection], out)
	}
	return nil
}

// parseCell reads "1/2", "up", "down" or nothing.
func parseCell(text string) (cell, error) {
	switch text {
	case "":
		return cell{empty: true}, nil
	case "up":
		return cell{step: -1}, nil
	case "down":
		return cell{step: 1}, nil
	}
	ac, re, found := strings.Cut(text, "/")
	accept, err1 := strconv.Atoi(ac)
	reject, err2 := strconv.Atoi(re)
	if !found || err1 != nil || err2 != nil || accept < 0 || reject <= accept {
		return cell{}, fmt.Errorf("%q is no acceptance and rejection number such as 1/2", text)
	}
	return cell{accept: accept, reject: reject}, nil
}

func (t *tables) readLetters(text string) error {
	header, rows, err := records(text)
	if err != nil {
		return err
	}
	const leading = 2 // lot_min, lot_max
	for _, name := range header[leading : len(header)-2] {
		t.levels = append(t.levels, Level(name))
	}
	for _, row := range rows {
		out := letterRow{byLevel: row[leading : len(row)-2]}
		if out.least, err = strconv.Atoi(row[0]); err != nil {
			return err
		}
		if row[1] != "" {
			if out.most, err = strconv.Atoi(row[1]); err != nil {
				return err
			}
		}
		if _, err = sourceOf(row); err != nil {
			return err
		}
		t.letters = append(t.letters, out)
	}
	return nil
}
