package meters

import (
	"encoding/csv"
	"strings"
	"sync"

	"goodbin/screening"
)

// ClassEntry is one line of the list of typical meters, with where its figure is from.
type ClassEntry struct {
	Meter          string
	Words          string // as [Parse] reads it: "capacitance@1kHz 200pF..200uF 0.5%+3"
	Range          screening.Range
	Source, Status string
}

// ClassEntries lists what stands behind [Classes], class by class.
func ClassEntries() []ClassEntry { return append([]ClassEntry(nil), classEntries()...) }

var classEntries = sync.OnceValue(func() []ClassEntry {
	rows, err := csv.NewReader(strings.NewReader(classesCSV)).ReadAll()
	if err != nil {
		panic("meters: embedded classes.csv: " + err.Error())
	}
	at, err := places(rows[0])
	if err != nil {
		panic("meters: embedded classes.csv: " + err.Error())
	}
	var entries []ClassEntry
	for _, m := range classes() {
		n := 0
		for _, row := range rows[1:] {
			if row[at["meter"]] != m.Name {
				continue
			}
			words := row[at["of"]]
			if low, high := row[at["low"]], row[at["high"]]; low != "" || high != "" {
				words += " " + low + ".." + high
			}
			words += " " + row[at["accuracy"]]
			if step := row[at["step"]]; step != "" {
				words += " step=" + step
			}
			if confidence := row[at["confidence"]]; confidence == screening.Normal99.String() {
				words += " " + confidence
			}
			entries = append(entries, ClassEntry{m.Name, words, m.Ranges[n], row[at["source"]], row[at["status"]]})
			n++
		}
	}
	return entries
})

// ClassNamed finds a class by its name as people say it: case, hyphens and a last word "meter" do not count.
func ClassNamed(name string) (screening.Meter, bool) {
	for _, m := range classes() {
		if spoken(m.Name) == spoken(name) {
			return m, true
		}
	}
	return screening.Meter{}, false
}

func spoken(name string) string {
	name = strings.Join(strings.Fields(strings.ReplaceAll(strings.ToLower(name), "-", " ")), " ")
	return strings.TrimSuffix(name, " meter")
}
