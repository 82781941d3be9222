package inventory

import (
	"bytes"
	"fmt"
	"iter"
	"strings"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

// SavePart keeps a part, new or changed, and is durable when it returns. action says in words what the person did
// ("capacitance 2010 µF"); it stands in the history and in what Undo says. Number 0 gets the next number. The lot must be there.
func (w *Workbook) SavePart(p Part, action string) (Part, error) {
	saved := p
	err := w.update(func(c *change) error {
		l, err := c.lot(p.ID.Lot)
		if err != nil {
			return err
		}
		saved = p
		if saved.ID.IsLot() {
			if saved.ID.Number, err = nextNumber(c.tx, p.ID.Lot); err != nil {
				return err
			}
		}
		if err := preparePart(&saved, l); err != nil {
			return err
		}
		saved.Changed = c.now
		var before screening.Verdict
		if old, err := part(c.tx, saved.ID); err == nil {
			before = old.Outcome.Verdict
		}
		if err := c.putPart(saved); err != nil {
			return err
		}
		return c.commit(action, verdictChange(before, saved.Outcome))
	})
	return saved, err
}

// verdictChange says what became of a verdict: "undecided → accept: every required reading passes".
func verdictChange(before screening.Verdict, o Outcome) string {
	switch {
	case o.Verdict == before:
		return ""
	case before == screening.NoVerdict:
		return strings.TrimSuffix(o.Verdict.String()+": "+o.Why, ": ")
	case o.Verdict == screening.NoVerdict:
		return before.String() + " → not judged"
	}
	return strings.TrimSuffix(before.String()+" → "+o.Verdict.String()+": "+o.Why, ": ")
}

// preparePart completes a part and checks that it can be kept.
func preparePart(p *Part, l Lot) error {
	if p.Part.Kind == "" {
		p.Part.Kind = l.Kind
	}
	if p.Count == (Count{}) {
		p.Count.N = 1
	}
	if err := checkCount(p.Count); err != nil {
		return err
	}
	if p.Taken < 0 || p.Count.Level == Exact && p.Taken > p.Count.N {
		return fail(ErrCount, fmt.Sprintf("%s: %d taken of %s", p.ID, p.Taken, p.Count))
	}
	for _, r := range p.Part.Readings {
		if err := checkName("reading", string(r.Of)); err != nil {
			return err
		}
		if unitNames[r.Unit] == "" || senseNames[r.Sense] == "" {
			return fail(ErrInvalid, fmt.Sprintf("%s: reading %s has a unit or sense that the workbook does not know", p.ID, r.Of))
		}
	}
	if err := checkName("kind", string(p.Part.Kind)); err != nil {
		return err
	}
	return checkClaim(p.Part.Claim)
}

// checkName keeps out what would break the order of keys.
func checkName(what, name string) error {
	if strings.IndexByte(name, 0) >= 0 || len(name) > 100 {
		return fail(ErrInvalid, fmt.Sprintf("%s %.40q is not a name; names are words such as capacitance", what, name))
	}
	return nil
}

func checkClaim(claim screening.Claim) error {
	for _, r := range claim.Ratings {
		if err := checkName("rating", string(r.Of)); err != nil {
			return err
		}
		if unitNames[r.Unit] == "" {
			return fail(ErrInvalid, fmt.Sprintf("rating %s has a unit that the workbook does not know", r.Of))
		}
	}
	return nil
}

func sameClaim(a, b screening.Claim) bool {
	x, errX := encMode.Marshal(claimTo(a))
	y, errY := encMode.Marshal(claimTo(b))
	return errX == nil && errY == nil && bytes.Equal(x, y)
}

// GetPart returns a part; ErrNotFound where there is none.
func (w *Workbook) GetPart(id ID) (Part, error) {
	var p Part
	err := w.view(func(tx *bolt.Tx) (err error) {
		p, err = part(tx, id)
		return err
	})
	return p, err
}

// Has reports whether a part is kept under this lot and number.
func (w *Workbook) Has(lot, number uint32) (bool, error) {
	var has bool
	err := w.view(func(tx *bolt.Tx) error {
		has = tx.Bucket(bucketPart).Get(idKey(ID{lot, number})) != nil
		return nil
	})
	return has, err
}

// PartsOf returns the parts of a lot in the order of their numbers.
func (w *Workbook) PartsOf(lot uint32) ([]Part, error) {
	var parts []Part
	err := w.view(func(tx *bolt.Tx) (err error) {
		parts, err = partsOf(tx, lot)
		return err
	})
	return parts, err
}

// walkStretch is how many records are read in one transaction while a caller walks them: short ones do not hold up a writer.
const walkStretch = 256

// Parts walks every part in the order of ids. Changes made meanwhile may or may not be seen. It ends after an error.
func (w *Workbook) Parts() iter.Seq2[Part, error] {
	return func(yield func(Part, error) bool) {
		next := idKey(ID{})
		for next != nil {
			var parts []Part
			err := w.view(func(tx *bolt.Tx) error {
				cursor := tx.Bucket(bucketPart).Cursor()
				key, value := cursor.Seek(next)
				for ; key != nil && len(parts) < walkStretch; key, value = cursor.Next() {
					p, err := decodePart(key, value)
					if err != nil {
						return err
					}
					parts = append(parts, p)
				}
				next = bytes.Clone(key)
				return nil
			})
			for _, p := range parts {
				if !yield(p, nil) {
					return
				}
			}
			if err != nil {
				yield(Part{}, err)
				return
			}
		}
	}
}
