package inventory

import (
	"bytes"
	"fmt"
	"iter"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

// Order is the order of a list of parts.
type Order uint8

// The orders. Within each, by id.
const (
	UsableFirst Order = iota // accept, regrade, treat, undecided, barred, reject, not judged yet, all taken
	ByID
	ByPlace
)

// Query says which parts to list.
type Query struct {
	// Words must all match, in any letter case, each anywhere in kind, title, what it is held as, place, verdict or reason. Spaces
	// between a number and its unit do not count, a decimal comma is a point, µ is u, and Ω is ohm. A word of digits, or of lot and
	// number ("12", "12-", "12-07"), also matches the ids that begin with it.
	Words    []string
	Kinds    []screening.Kind    // any of them; none: all
	Verdicts []screening.Verdict // any of them; none: all
	Usable   bool                // only what is in stock: accepted or regraded, and not all taken
	Place    string              // places that begin with it, written in any way that Words may be; "": all
	Lot      uint32              // 0: all
	Stale    bool                // only verdicts under other tables
	Order    Order
	Offset   int
	Limit    int // 0: all
}

// Row is one line of a list of parts.
type Row struct {
	ID        ID
	Kind      screening.Kind
	Title     string // what it claims, in one line
	Verdict   screening.Verdict
	Grade     screening.Grade
	As        string // what it is held as where not its own claim
	Place     string // its own, or its lot's
	Why       string
	NotTested string // in short: "leakage; esr"
	Count     Count
	Left      int
	Stale     bool
}

// InStock reports whether the part can be used now.
func (r Row) InStock() bool { return r.Verdict.Usable() && (r.Count.Level == Unknown || r.Left > 0) }

// Counts are numbers of parts by verdict.
type Counts [7]int

// Of returns the number of parts with a verdict; NoVerdict counts those not judged yet.
func (c Counts) Of(v screening.Verdict) int {
	if int(v) >= len(c) {
		return 0
	}
	return c[v]
}

// All returns the number of all parts.
func (c Counts) All() int {
	sum := 0
	for _, n := range c {
		sum += n
	}
	return sum
}

// Usable returns the number of accepted and regraded parts, taken ones too.
func (c Counts) Usable() int { return c[screening.Accept] + c[screening.Regrade] }

// Page is a stretch of a list.
type Page struct {
	Rows   []Row
	Total  int    // rows of the whole list
	Counts Counts // by verdict, of all that matches everything in the query but Verdicts and Usable
}

// Find lists parts from the row index, which it holds in memory from the first call on; no part is decoded. Measured with 100,000 parts in
// lots of 25: 9 MB, 70 ms for the first call, then 1 to 3 ms; more memory where every title and reason is different.
func (w *Workbook) Find(q Query) (Page, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	if err := w.loadRows(); err != nil {
		return Page{}, err
	}
	return w.rows.find(q), nil
}

// Counts returns the numbers of all parts by verdict.
func (w *Workbook) Counts() (Counts, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	if err := w.loadRows(); err != nil {
		return Counts{}, err
	}
	return w.rows.counts, nil
}

// Row returns the line of one part.
func (w *Workbook) Row(id ID) (Row, error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	if err := w.loadRows(); err != nil {
		return Row{}, err
	}
	i, ok := w.rows.search(id.packed())
	if !ok {
		return Row{}, noPart(id)
	}
	return w.rows.row(i), nil
}

// loadRows reads the row index into memory where it is not. The caller holds w.mu.
func (w *Workbook) loadRows() error {
	if w.rows != nil {
		return nil
	}
	s := newSnapshot(w.opts.Tables)
	err := w.view(func(tx *bolt.Tx) error {
		cursor := tx.Bucket(bucketRow).Cursor()
		for key, sealed := cursor.First(); key != nil; key, sealed = cursor.Next() {
			id, ok := idOf(key)
			if !ok {
				return corrupt(w.path, errShort)
			}
			r, err := s.read(id, key, sealed)
			if err != nil {
				return fmt.Errorf("row of %s: %w", id, err)
			}
			s.append(r)
		}
		return nil
	})
	if err == nil {
		w.rows = s
	}
	return err
}

// Hit is one place in the index of values.
type Hit struct {
	ID      ID
	Value   float64 // SI
	Verdict screening.Verdict
}

// Values walks the parts in stock of a kind that have a characteristic from low to high, both included, in ascending order of the value; by
// what they claim or by what was read. ±Inf leave a side open. A part may come more than once (sections, several conditions).
func (w *Workbook) Values(kind screening.Kind, of screening.Characteristic, origin Origin, low, high float64) iter.Seq2[Hit, error] {
	return func(yield func(Hit, error) bool) {
		next := valueKey(kind, value{of, origin, low}, nil)
		last := valueKey(kind, value{of, origin, high}, bytes.Repeat([]byte{0xFF}, 9))
		if next == nil || last == nil {
			return
		}
		for next != nil {
			var hits []Hit
			err := w.view(func(tx *bolt.Tx) error {
				cursor := tx.Bucket(bucketValue).Cursor()
				key, verdict := cursor.Seek(next)
				for ; key != nil && len(hits) < walkStretch && bytes.Compare(key, last) < 0; key, verdict = cursor.Next() {
					hit, err := hitOf(key, verdict)
					if err != nil {
						return corrupt(w.path, err)
					}
					hits = append(hits, hit)
				}
				next = nil
				if key != nil && bytes.Compare(key, last) < 0 {
					next = bytes.Clone(key)
				}
				return nil
			})
			for _, hit := range hits {
				if !yield(hit, nil) {
					return
				}
			}
			if err != nil {
				yield(Hit{}, err)
				return
			}
		}
	}
}
