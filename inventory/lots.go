package inventory

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"math"

	bolt "go.etcd.io/bbolt"
)

// AddLot keeps a new lot. ID 0 gets the next number; a number already there is ErrHeld.
func (w *Workbook) AddLot(l Lot) (Lot, error) {
	err := w.update(func(c *change) error {
		if err := c.prepareLot(&l, lastLot(c.tx)); err != nil {
			return err
		}
		if err := c.putLot(l); err != nil {
			return err
		}
		return c.commit("new lot", "")
	})
	return l, err
}

// prepareLot completes a new lot and checks that it can be kept.
func (c *change) prepareLot(l *Lot, last uint32) error {
	if err := checkLot(*l); err != nil {
		return err
	}
	switch {
	case l.ID == 0 && last == math.MaxUint32:
		return fail(ErrInvalid, "there is no lot number left; give the lot a number of its own")
	case l.ID == 0:
		l.ID = last + 1
	case c.tx.Bucket(bucketLot).Get(lotKey(l.ID)) != nil:
		return fail(ErrHeld, fmt.Sprintf("lot %d is already kept; choose another number, or change that lot", l.ID))
	}
	if l.Made.IsZero() {
		l.Made = c.now
	}
	l.Changed = c.now
	return nil
}

func checkLot(l Lot) error {
	if l.Kind == "" && !l.Mixed {
		return fail(ErrInvalid, "a lot needs a kind, such as electrolytic; only a mixed tin can do without")
	}
	if err := checkCount(l.Count); err != nil {
		return err
	}
	return checkClaim(l.Claim)
}

// PutLot replaces a lot. Where claim or place changed, the parts that take them from the lot follow: their rows are renewed and the
// verdicts that rest on the old claim become stale.
func (w *Workbook) PutLot(l Lot) error {
	return w.update(func(c *change) error {
		if err := checkLot(l); err != nil {
			return err
		}
		before, err := c.lot(l.ID)
		if err != nil {
			return err
		}
		l.Changed = c.now
		if l.Made.IsZero() {
			l.Made = before.Made
		}
		if err := c.putLot(l); err != nil {
			return err
		}
		if err := c.followLot(before, l); err != nil {
			return err
		}
		return c.commit("lot changed", lotChanges(before, l))
	})
}

// followLot brings the parts of a lot after a change of it.
func (c *change) followLot(before, after Lot) error {
	reclaimed := before.Kind != after.Kind || before.Mixed != after.Mixed || !sameClaim(before.Claim, after.Claim)
	if !reclaimed && before.Place == after.Place {
		return nil
	}
	parts, err := partsOf(c.tx, after.ID)
	if err != nil {
		return err
	}
	for _, p := range parts {
		if reclaimed && p.Part.Claim.IsZero() && p.Outcome.Tables != "" {
			p.Outcome.Tables = ""
			err = c.putPart(p)
		} else {
			err = c.renew(p)
		}
		if err != nil {
			return err
		}
	}
	return nil
}

// lotChanges says what became of the fields that people look for in a history.
func lotChanges(before, after Lot) string {
	text := ""
	for _, field := range []struct{ name, before, after string }{
		{"claim", before.Header, after.Header},
		{"place", before.Place, after.Place},
		{"source", before.Source, after.Source},
		{"storage", before.Storage, after.Storage},
		{"note", before.Note, after.Note},
		{"count", before.Count.String(), after.Count.String()},
	} {
		if field.before == field.after {
			continue
		}
		if text != "" {
			text += "; "
		}
		text += fmt.Sprintf("%s: %q → %q", field.name, field.before, field.after)
	}
	return text
}

// Lot returns a lot; ErrNotFound where there is none.
func (w *Workbook) Lot(id uint32) (Lot, error) {
	var l Lot
	err := w.view(func(tx *bolt.Tx) (err error) {
		key := lotKey(id)
		value := tx.Bucket(bucketLot).Get(key)
		if value == nil {
			return noLot(id)
		}
		l, err = decodeLot(key, value)
		return err
	})
	return l, err
}

// Lots returns every lot in the order of their numbers.
func (w *Workbook) Lots() ([]Lot, error) {
	var lots []Lot
	err := w.view(func(tx *bolt.Tx) error {
		return tx.Bucket(bucketLot).ForEach(func(key, value []byte) error {
			l, err := decodeLot(key, value)
			lots = append(lots, l)
			return err
		})
	})
	return lots, err
}

func lastLot(tx *bolt.Tx) uint32 {
	key, _ := tx.Bucket(bucketLot).Cursor().Last()
	if len(key) != 4 {
		return 0
	}
	return binary.BigEndian.Uint32(key)
}

// NextNumber returns the number that the next part of a lot gets.
func (w *Workbook) NextNumber(lot uint32) (uint32, error) {
	var next uint32
	err := w.view(func(tx *bolt.Tx) (err error) {
		next, err = nextNumber(tx, lot)
		return err
	})
	return next, err
}

// nextNumber is one more than the largest number of the lot.
func nextNumber(tx *bolt.Tx, lot uint32) (uint32, error) {
	prefix := lotKey(lot)
	cursor := tx.Bucket(bucketPart).Cursor()
	key, _ := cursor.Seek(idKey(ID{lot, math.MaxUint32}))
	if key == nil {
		key, _ = cursor.Last()
	} else if !bytes.Equal(key, idKey(ID{lot, math.MaxUint32})) {
		key, _ = cursor.Prev()
	}
	id, ok := idOf(key)
	switch {
	case !ok || !bytes.HasPrefix(key, prefix):
		return 1, nil
	case id.Number == math.MaxUint32:
		return 0, fail(ErrInvalid, fmt.Sprintf("lot %d has no number left; begin another lot", lot))
	}
	return id.Number + 1, nil
}
