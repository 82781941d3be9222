package inventory

import (
	"bytes"
	"fmt"
	"slices"
	"time"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

// change is one action of the person in the making: everything in it is one transaction, and what undo needs of it.
type change struct {
	tx      *bolt.Tx
	now     time.Time
	lots    map[uint32]Lot // read or written in this change
	changes []changeRecord // what was touched, as it was before
	rows    []rowChange    // for the list in memory, once the transaction is on the disk
}

// rowChange is a row as it is after a change; sealed nil: it is gone.
type rowChange struct {
	id     ID
	sealed []byte
}

// update runs one change durably, then brings the list in memory up to date.
func (w *Workbook) update(run func(*change) error) error {
	if w.opts.ReadOnly {
		return fail(ErrReadOnly, quote(w.path)+" was opened for reading only")
	}
	w.writing.Lock()
	defer w.writing.Unlock()
	c := &change{now: w.opts.Now(), lots: map[uint32]Lot{}}
	var positionKept func()
	err := guard(w.path, func() error {
		// Update and never Batch: Batch waits for company, and a person at the bench is alone.
		return w.db.Update(func(tx *bolt.Tx) (err error) {
			c.tx = tx
			if err = run(c); err == nil {
				positionKept, err = w.writePosition(tx)
			}
			return err
		})
	})
	if err != nil {
		return explainWrite(w.path, err)
	}
	positionKept()
	w.mu.Lock()
	defer w.mu.Unlock()
	if err := w.rows.apply(c.rows); err != nil {
		w.rows = nil // it is read again when it is next needed
	}
	return nil
}

// lot returns a lot as this change sees it.
func (c *change) lot(id uint32) (Lot, error) {
	if l, ok := c.lots[id]; ok {
		return l, nil
	}
	key := lotKey(id)
	value := c.tx.Bucket(bucketLot).Get(key)
	if value == nil {
		return Lot{}, noLot(id)
	}
	l, err := decodeLot(key, value)
	if err == nil {
		c.lots[id] = l
	}
	return l, err
}

func noLot(id uint32) error {
	return fail(ErrNotFound, fmt.Sprintf("there is no lot %d; `goodbin stock` lists what there is", id))
}

func noPart(id ID) error {
	if id.IsLot() {
		return fail(ErrNotFound, fmt.Sprintf("%s is a lot; a part is such as %s", id, ID{id.Lot, 1}))
	}
	return fail(ErrNotFound, fmt.Sprintf("there is no part %s", id))
}

// part returns a part from the file.
func part(tx *bolt.Tx, id ID) (Part, error) {
	key := idKey(id)
	value := tx.Bucket(bucketPart).Get(key)
	if value == nil {
		return Part{}, noPart(id)
	}
	return decodePart(key, value)
}

// remember keeps what undo puts back.
func (c *change) remember(id ID, before []byte) {
	c.changes = append(c.changes, changeRecord{Key: idKey(id), Other: bytes.Clone(before)})
}

// putLot writes a lot; its parts' rows are not touched.
func (c *change) putLot(l Lot) error {
	key := lotKey(l.ID)
	sealed, err := encodeLot(key, l)
	if err != nil {
		return err
	}
	bucket := c.tx.Bucket(bucketLot)
	c.remember(ID{Lot: l.ID}, bucket.Get(key))
	c.lots[l.ID] = l
	return bucket.Put(key, sealed)
}

// putPart writes a part and what is derived from it.
func (c *change) putPart(p Part) error {
	key := idKey(p.ID)
	bucket := c.tx.Bucket(bucketPart)
	c.remember(p.ID, bucket.Get(key))
	return c.writePart(p)
}

// writePart is putPart without a way back.
func (c *change) writePart(p Part) error {
	key := idKey(p.ID)
	sealed, err := encodePart(key, p)
	if err != nil {
		return err
	}
	if err := c.tx.Bucket(bucketPart).Put(key, sealed); err != nil {
		return err
	}
	return c.renew(p)
}

// renew writes a part's row and its places in the index of values.
func (c *change) renew(p Part) error {
	l, err := c.lot(p.ID.Lot)
	if err != nil {
		return err
	}
	return c.writeRow(p.ID, newRow(p, l))
}

// writeRow replaces a row (nil: removes it) and the index keys that belong to it: the row itself lists them, so that what is taken out is
// what was put in, whatever the lot says now.
func (c *change) writeRow(id ID, r *storedRow) error {
	key := idKey(id)
	bucket, index := c.tx.Bucket(bucketRow), c.tx.Bucket(bucketValue)
	var old, current [][]byte
	if sealed := bucket.Get(key); sealed != nil {
		if before, err := decodeRow(key, sealed); err == nil {
			old = before.valueKeys(key)
		}
	}
	if r != nil {
		current = r.valueKeys(key)
	}
	for _, k := range old {
		if !slices.ContainsFunc(current, func(n []byte) bool { return bytes.Equal(k, n) }) {
			if err := index.Delete(k); err != nil {
				return err
			}
		}
	}
	if r == nil {
		c.rows = append(c.rows, rowChange{id: id})
		return bucket.Delete(key)
	}
	for _, k := range current {
		if err := index.Put(k, []byte{verdictByte(r.verdict)}); err != nil {
			return err
		}
	}
	sealed := encodeRow(key, r)
	c.rows = append(c.rows, rowChange{id: id, sealed: sealed})
	return bucket.Put(key, sealed)
}

// partsOf decodes the parts of a lot in the order of their numbers.
func partsOf(tx *bolt.Tx, lot uint32) ([]Part, error) {
	var parts []Part
	prefix := lotKey(lot)
	cursor := tx.Bucket(bucketPart).Cursor()
	for key, value := cursor.Seek(prefix); key != nil && bytes.HasPrefix(key, prefix); key, value = cursor.Next() {
		p, err := decodePart(key, value)
		if err != nil {
			return nil, err
		}
		parts = append(parts, p)
	}
	return parts, nil
}

// Claimed returns the part with the claim and kind that it is to be judged by: its own, or its lot's where it has none.
func Claimed(p Part, l Lot) screening.Part {
	held := p.Part
	if held.Claim.IsZero() && !l.Mixed && p.Header == "" { // the header "nothing" is a claim of its own, of nothing
		held.Claim = l.Claim
	}
	if held.Kind == "" {
		held.Kind = l.Kind
	}
	return held
}
