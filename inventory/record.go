package inventory

import (
	"fmt"

	"goodbin/screening"
)

// The records as they stand in the file. Field numbers are part of the format: a number once used is never given another meaning.
// The structs of screening carry no tags, so that the format does not follow them by accident; a test fills every field of theirs and
// compares what comes back.

type conditionRecord map[string]float64

type sourceRecord struct {
	Document string `cbor:"1,keyasint,omitempty"`
	Clause   string `cbor:"2,keyasint,omitempty"`
	Status   string `cbor:"3,keyasint,omitempty"`
}

type ratingRecord struct {
	Of      string          `cbor:"1,keyasint"`
	Section string          `cbor:"2,keyasint,omitempty"`
	At      conditionRecord `cbor:"3,keyasint,omitempty"`
	Unit    string          `cbor:"4,keyasint"`
	Nominal float64         `cbor:"5,keyasint"`
	Low     float64         `cbor:"6,keyasint"`
	High    float64         `cbor:"7,keyasint"`
	Typed   string          `cbor:"8,keyasint,omitempty"`
	Source  *sourceRecord   `cbor:"9,keyasint,omitempty"`
}

type traitRecord struct {
	Name string `cbor:"1,keyasint"`
	Text string `cbor:"2,keyasint"`
}

type claimRecord struct {
	Ratings []ratingRecord `cbor:"1,keyasint,omitempty"`
	Traits  []traitRecord  `cbor:"2,keyasint,omitempty"`
}

type readingRecord struct {
	Of        string          `cbor:"1,keyasint"`
	Section   string          `cbor:"2,keyasint,omitempty"`
	Value     float64         `cbor:"3,keyasint"`
	Sense     string          `cbor:"4,keyasint"`
	Unit      string          `cbor:"5,keyasint"`
	At        conditionRecord `cbor:"6,keyasint,omitempty"`
	Step      float64         `cbor:"7,keyasint,omitempty"`
	Over      bool            `cbor:"8,keyasint,omitempty"`
	Repeats   []float64       `cbor:"9,keyasint,omitempty"`
	Meter     string          `cbor:"10,keyasint,omitempty"`
	Typed     string          `cbor:"11,keyasint,omitempty"`
	U         float64         `cbor:"12,keyasint,omitempty"`
	Assumed   bool            `cbor:"13,keyasint,omitempty"`
	AssumedAt conditionRecord `cbor:"14,keyasint,omitempty"`
	Rule      string          `cbor:"15,keyasint,omitempty"`
	Spec      float64         `cbor:"16,keyasint,omitempty"`

	MeterAt    conditionRecord `cbor:"17,keyasint,omitempty"`
	Correction float64         `cbor:"18,keyasint,omitempty"`
	From       []inputRecord   `cbor:"19,keyasint,omitempty"`
}

type inputRecord struct {
	Of          string  `cbor:"1,keyasint,omitempty"`
	Name        string  `cbor:"2,keyasint,omitempty"`
	U           float64 `cbor:"3,keyasint,omitempty"`
	Sensitivity float64 `cbor:"4,keyasint,omitempty"`
}

type lookRecord struct {
	Check string `cbor:"1,keyasint"`
	Fault bool   `cbor:"2,keyasint,omitempty"`
}

type countRecord struct {
	N     int    `cbor:"1,keyasint,omitempty"`
	Level string `cbor:"2,keyasint,omitempty"`
}

type outcomeRecord struct {
	Kind      string       `cbor:"1,keyasint,omitempty"`
	Verdict   string       `cbor:"2,keyasint,omitempty"`
	Grade     string       `cbor:"3,keyasint,omitempty"`
	As        string       `cbor:"4,keyasint,omitempty"`
	AsClaim   *claimRecord `cbor:"5,keyasint,omitempty"`
	Title     string       `cbor:"6,keyasint,omitempty"`
	NotTested []string     `cbor:"7,keyasint,omitempty"`
	Why       string       `cbor:"8,keyasint,omitempty"`
	Next      string       `cbor:"9,keyasint,omitempty"`
	Tables    string       `cbor:"10,keyasint,omitempty"`
	Assumed   bool         `cbor:"11,keyasint,omitempty"`
	Judged    stamp        `cbor:"12,keyasint,omitempty"`
}

type partRecord struct {
	Kind     string          `cbor:"1,keyasint"`
	Claim    *claimRecord    `cbor:"2,keyasint,omitempty"`
	Look     []lookRecord    `cbor:"3,keyasint,omitempty"`
	Readings []readingRecord `cbor:"4,keyasint,omitempty"`
	Treated  int             `cbor:"5,keyasint,omitempty"`
	Header   string          `cbor:"6,keyasint,omitempty"`
	Skipped  []string        `cbor:"7,keyasint,omitempty"`
	GoOn     bool            `cbor:"8,keyasint,omitempty"`
	Outcome  outcomeRecord   `cbor:"9,keyasint"`
	Place    string          `cbor:"10,keyasint,omitempty"`
	Note     string          `cbor:"11,keyasint,omitempty"`
	Count    countRecord     `cbor:"12,keyasint"`
	Taken    int             `cbor:"13,keyasint,omitempty"`
	Changed  stamp           `cbor:"14,keyasint,omitempty"`
}

type lotRecord struct {
	Kind    string       `cbor:"1,keyasint"`
	Header  string       `cbor:"2,keyasint,omitempty"`
	Claim   *claimRecord `cbor:"3,keyasint,omitempty"`
	Mixed   bool         `cbor:"4,keyasint,omitempty"`
	Source  string       `cbor:"5,keyasint,omitempty"`
	Place   string       `cbor:"6,keyasint,omitempty"`
	Storage string       `cbor:"7,keyasint,omitempty"`
	Note    string       `cbor:"8,keyasint,omitempty"`
	Made    stamp        `cbor:"9,keyasint,omitempty"`
	Changed stamp        `cbor:"10,keyasint,omitempty"`
	Count   countRecord  `cbor:"11,keyasint"`
}

type positionRecord struct {
	Page   string `cbor:"1,keyasint,omitempty"`
	Lot    uint32 `cbor:"2,keyasint,omitempty"`
	Part   uint64 `cbor:"3,keyasint,omitempty"`
	Column string `cbor:"4,keyasint,omitempty"`
}

// changeRecord is one record that an action touched: the part's key (number 0: the lot) and the sealed value that undo puts back, or redo
// once it was undone. Absent: there was none.
type changeRecord struct {
	Key   []byte `cbor:"1,keyasint"`
	Other []byte `cbor:"2,keyasint,omitempty"`
}

type entryRecord struct {
	At      stamp          `cbor:"1,keyasint"`
	Action  string         `cbor:"2,keyasint"`
	Text    string         `cbor:"3,keyasint,omitempty"`
	Changes []changeRecord `cbor:"4,keyasint"`
	Undone  bool           `cbor:"5,keyasint,omitempty"`
	Old     bool           `cbor:"6,keyasint,omitempty"` // what undo needs was let go of
}

func conditionTo(c screening.Condition) conditionRecord {
	if c.IsZero() {
		return nil
	}
	record := make(conditionRecord, 2)
	for _, v := range variables {
		if x, ok := c.Get(v); ok {
			record[v.String()] = x
		}
	}
	return record
}

var variables = screening.Variables()

func conditionFrom(record conditionRecord) (screening.Condition, error) {
	var c screening.Condition
	if len(record) > screening.MaxConditions {
		return c, fmt.Errorf("%w: %d conditions for one value", errVersion, len(record))
	}
	for name, x := range record {
		v, ok := screening.VariableNamed(name)
		if !ok {
			return c, fmt.Errorf("%w: unknown condition %q", errVersion, name)
		}
		c = c.With(v, x)
	}
	return c, nil
}
