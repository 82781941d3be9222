package inventory

import (
	"encoding/binary"
	"math"
	"slices"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// storedRow is what the index of rows keeps of a part.
type storedRow struct {
	verdict   screening.Verdict
	grade     screening.Grade
	level     Honesty
	count     int
	left      int
	kind      string
	title     string
	as        string
	place     string
	why       string
	notTested string
	tables    string
	values    []value
}

// newRow derives a part's row from the part and its lot.
func newRow(p Part, l Lot) *storedRow {
	held := Claimed(p, l)
	r := &storedRow{
		verdict: p.Outcome.Verdict, grade: p.Outcome.Grade, level: p.Count.Level, count: p.Count.N, left: p.Left(), kind: string(held.Kind),
		title: p.Outcome.Title, as: p.Outcome.As, place: p.Place, why: p.Outcome.Why, notTested: shortList(p.Outcome.NotTested),
		tables: p.Outcome.Tables,
	}
	if r.title == "" {
		r.title = held.Claim.String()
	}
	if r.title == "" {
		r.title = p.Header
	}
	if r.place == "" {
		r.place = l.Place
	}
	if p.InStock() {
		if !p.Outcome.AsClaim.IsZero() {
			held.Claim = p.Outcome.AsClaim
		}
		r.values = stockValues(held)
	}
	return r
}

// shortList names what was not tested in few words each: "leakage; esr".
func shortList(notTested []string) string {
	if len(notTested) == 0 {
		return ""
	}
	short := make([]string, len(notTested))
	for i, text := range notTested {
		name, _, _ := strings.Cut(text, " at ")
		short[i] = name
	}
	return strings.Join(slices.Compact(short), "; ")
}

// stockValues lists the numbers under which a part in stock is found.
func stockValues(p screening.Part) []value {
	var values []value
	add := func(v value) {
		if v.x == 0 {
			v.x = 0
		}
		if !math.IsNaN(v.x) && !slices.Contains(values, v) {
			values = append(values, v)
		}
	}
	for _, r := range p.Claim.Ratings {
		if r.HasNominal() {
			add(value{r.Of, FromClaim, r.Nominal})
		}
	}
	for _, r := range p.Current() {
		if r.Sense == quantity.Exactly && !r.Over {
			add(value{r.Of, FromReading, r.Value})
		}
	}
	return values
}

// valueKeys returns the row's keys in part_by_value.
func (r *storedRow) valueKeys(part []byte) [][]byte {
	keys := make([][]byte, 0, len(r.values))
	for _, v := range r.values {
		if key := valueKey(screening.Kind(r.kind), v, part); key != nil {
			keys = append(keys, key)
		}
	}
	return keys
}

// encodeRow seals a row: verdict, grade and honesty bytes, the counts, the texts, then the values. It is written by hand because a list
// of 100,000 rows is read when the program starts.
func encodeRow(key []byte, r *storedRow) []byte {
	b := make([]byte, sealHead, 160)
	b = append(b, verdictByte(r.verdict), gradeByte(r.grade), honestyByte(r.level))
	b = binary.AppendVarint(b, int64(r.count))
	b = binary.AppendVarint(b, int64(r.left))
	for _, text := range []string{r.kind, r.title, r.as, r.place, r.why, r.notTested, r.tables} {
		b = appendText(b, text)
	}
	b = binary.AppendUvarint(b, uint64(len(r.values)))
	for _, v := range r.values {
		b = append(appendText(b, string(v.of)), byte(v.origin))
		bits, _ := floatBits(v.x)
		b = binary.BigEndian.AppendUint64(b, bits)
	}
	return seal(key, b)
}

func appendText(b []byte, text string) []byte {
	return append(binary.AppendUvarint(b, uint64(len(text))), text...)
}

// rowReader takes a row apart; after the first thing that is cut short it yields only zeros.
type rowReader struct {
	b   []byte
	bad bool
}

func (r *rowReader) next() byte {
	if len(r.b) == 0 {
		r.bad = true
		return 0
	}
	x := r.b[0]
	r.b = r.b[1:]
	return x
}

func (r *rowReader) int() int {
	x, n := binary.Varint(r.b)
	if n <= 0 {
		r.bad = true
		return 0
	}
	r.b = r.b[n:]
	return int(x)
}

func (r *rowReader) text() []byte {
	size, n := binary.Uvarint(r.b)
	if n <= 0 || size > uint64(len(r.b)-n) {
		r.bad = true
		return nil
	}
	text := r.b[n : n+int(size)]
	r.b = r.b[n+int(size):]
	return text
}

func (r *rowReader) float() float64 {
	if len(r.b) < 8 {
		r.bad = true
		return 0
	}
	x := floatOf(binary.BigEndian.Uint64(r.b))
	r.b = r.b[8:]
	return x
}

// decodeRow takes a sealed row apart.
func decodeRow(key, sealed []byte) (*storedRow, error) {
	payload, err := unseal(key, sealed)
	if err != nil {
		return nil, damaged(err)
	}
	in := rowReader{b: payload}
	r := &storedRow{verdict: verdictOf(in.next()), grade: gradeOf(in.next()), level: honestyOf(in.next()), count: in.int(), left: in.int()}
	for _, text := range []*string{&r.kind, &r.title, &r.as, &r.place, &r.why, &r.notTested, &r.tables} {
		*text = string(in.text())
	}
	values, n := binary.Uvarint(in.b)
	if n <= 0 || in.bad {
		return nil, damaged(errShort)
	}
	in.b = in.b[n:]
	for range values {
		v := value{of: screening.Characteristic(in.text()), origin: Origin(in.next()), x: in.float()}
		if in.bad {
			return nil, damaged(errShort)
		}
		r.values = append(r.values, v)
	}
	return r, nil
}
