package sampling

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"goodbin/screening"
)

// Level is an inspection level of table I: how many parts are worth testing. "II" unless there is a reason; "I" and the special levels
// "S-1" to "S-4" where testing is dear and a larger risk is taken, "III" where more must be told apart.
type Level string

// General is the level that counts unless another is chosen.
const General Level = "II"

// Levels returns the levels of table I in its order.
func Levels() []Level { return slices.Clone(standard().levels) }

// ParseLevel reads a level as typed; case does not matter, and "S1" is "S-1".
func ParseLevel(text string) (Level, error) {
	want := strings.ToUpper(strings.TrimSpace(text))
	if len(want) == 2 && want[0] == 'S' {
		want = "S-" + want[1:]
	}
	if l := Level(want); slices.Contains(standard().levels, l) {
		return l, nil
	}
	return "", fmt.Errorf("level: %q is no inspection level; the levels are S-1, S-2, S-3, S-4, I, II and III", text)
}

// Inspection is how strictly lots are inspected at present.
type Inspection uint8

// The three degrees; every series of lots begins with Normal.
const (
	Normal Inspection = iota
	Tightened
	Reduced
)

var inspectionNames = [...]string{"normal", "tightened", "reduced"}

// String returns the degree's name.
func (i Inspection) String() string {
	if int(i) >= len(inspectionNames) {
		return ""
	}
	return inspectionNames[i]
}

// ParseInspection reads a degree as typed.
func ParseInspection(text string) (Inspection, error) {
	for i, name := range inspectionNames {
		if strings.EqualFold(strings.TrimSpace(text), name) {
			return Inspection(i), nil
		}
	}
	return Normal, fmt.Errorf("inspection: %q is no degree of inspection; it is normal, tightened or reduced", text)
}

// AQLs returns the columns of tables II: percent bad up to 10, above it defects per hundred parts.
func AQLs() []float64 { return slices.Clone(standard().aqls) }

// mostPercent is the highest AQL that is a percentage of bad parts; above it the tables count defects per hundred parts.
const mostPercent = 10

// column finds an AQL among the tables' columns, or says which stand beside it.
func (t *tables) column(aql float64) (int, error) {
	if math.IsNaN(aql) || aql <= 0 {
		return 0, fmt.Errorf("aql: %g is no percentage; an AQL is above 0, such as 1.0", aql)
	}
	below, above := "", ""
	for i, a := range t.aqls {
		switch {
		case math.Abs(a-aql) <= 1e-9*a:
			return i, nil
		case a < aql:
			below = strconv.FormatFloat(a, 'g', -1, 64)
		case above == "":
			above = strconv.FormatFloat(a, 'g', -1, 64)
		}
	}
	switch {
	case below == "":
		return 0, fmt.Errorf("aql: the tables have none of %g %%; the lowest is %s", aql, above)
	case above == "":
		return 0, fmt.Errorf("aql: the tables have none of %g; the highest is %s", aql, below)
	}
	return 0, fmt.Errorf("aql: the tables have none of %g %%; the nearest are %s and %s", aql, below, above)
}

// Plan is a single sampling plan: test N parts drawn at random, accept the lot with at most Accept bad ones, refuse it with Reject or more.
type Plan struct {
	Letter     string // code letter of table I; empty where the plan is from no table
	From       string // the letter whose row the arrows lead to
	AQL        float64
	Inspection Inspection

	Sample  int  // sample size as the table has it
	N       int  // parts to test: the sample, or the whole lot where the sample is not smaller
	TestAll bool // N is the whole lot
	Accept  int  // most bad parts with which the lot is accepted
	Reject  int  // fewest bad parts with which it is refused; Accept+1 but for reduced inspection
	Source  screening.Source
}

// Letter returns the code letter of a lot of this many parts, by table I.
func Letter(lot int, level Level) (string, error) {
	t := standard()
	column := slices.Index(t.levels, level)
	if column < 0 {
		_, err := ParseLevel(string(level))
		return "", err
	}
	for _, row := range t.letters {
		if lot >= row.least && (row.most == 0 || lot <= row.most) {
			return row.byLevel[column], nil
		}
	}
	return "", fmt.Errorf("lot: %d parts are no lot to sample; table I begins at 2 parts", lot)
}

// Lookup returns the plan of a code letter and an AQL in percent, arrows followed. N is the table's sample; no lot size is known here.
// Rows A, B and C of reduced inspection have one sample size, so where an arrow leads from one of them to another cannot be told from the
// numbers: those cells stand as plans of their own.
func Lookup(letter string, aql float64, inspection Inspection) (Plan, error) {
	t := standard()
	column, err := t.column(aql)
	if err != nil {
		return Plan{}, err
	}
	if int(inspection) >= len(t.plans) {
		return Plan{}, fmt.Errorf("inspection: it is normal, tightened or reduced")
	}
	rows := t.plans[inspection]
	at := slices.IndexFunc(rows, func(r planRow) bool { return r.letter == letter && !r.cells[0].empty })
	if at < 0 {
		return Plan{}, fmt.Errorf("letter: %q is no code letter; they are A to R without I and O", letter)
	}
	for seen := 0; seen < len(rows); seen++ {
		row := rows[at]
		c := row.cells[column]
		if c.empty {
			break
		}
		if c.step == 0 {
			return Plan{
				Letter: letter, From: row.letter, AQL: t.aqls[column], Inspection: inspection,
				Sample: row.n, N: row.n, Accept: c.accept, Reject: c.reject, Source: row.source,
			}, nil
		}
		if at += c.step; at < 0 || at >= len(rows) {
			break
		}
	}
	return Plan{}, fmt.Errorf("letter %s, aql %g: the tables' arrows lead to no plan", letter, aql)
}

// Single returns the plan of MIL-STD-105E for a lot of this many parts and an AQL in percent. Where the table's sample is not smaller
// than the lot, every part is tested.
func Single(lot int, level Level, aql float64, inspection Inspection) (Plan, error) {
	letter, err := Letter(lot, level)
	if err != nil {
		return Plan{}, err
	}
	p, err := Lookup(letter, aql, inspection)
	if err != nil {
		return Plan{}, err
	}
	if p.Sample >= lot {
		p.N, p.TestAll = lot, true
	}
	return p, nil
}

// Outcome is what a sample says of its lot.
type Outcome uint8

// The outcomes. Between is known to reduced inspection only.
const (
	Accepted Outcome = iota
	Between          // more bad parts than Accept and fewer than Reject: accepted, and the next lot is inspected normally
	Refused
)

// String returns the outcome in words.
func (o Outcome) String() string {
	return [...]string{"accepted", "accepted, back to normal inspection", "refused"}[min(o, Refused)]
}

// Outcome says what so many bad parts among the N tested mean for the lot.
func (p Plan) Outcome(bad int) Outcome {
	switch {
	case bad <= p.Accept:
		return Accepted
	case bad < p.Reject:
		return Between
	}
	return Refused
}
