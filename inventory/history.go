package inventory

import (
	"bytes"
	"encoding/binary"
	"errors"
	"fmt"
	"time"

	bolt "go.etcd.io/bbolt"
)

// UndoLevels is how many actions keep what undo needs. Older ones stay as history.
const UndoLevels = 1000

// redoLargest is how many records an action may have touched and still be done again after an undo: to redo a load would mean to keep
// everything that was loaded a second time.
const redoLargest = 1000

// Event is one line of a part's history.
type Event struct {
	At     time.Time
	Action string // what was done, in words
	Text   string // what came of it: "undecided → accept"; "" where nothing
}

// Done is an action that was taken back or done again.
type Done struct {
	ID     ID  // the part, or lot, that it was about; of several the first
	Parts  int // how many lots and parts it touched
	Action string
	At     time.Time // when it was first done
}

// String words it: "12-07: capacitance 2010 µF", "12-01 and 41 more: screened box.csv".
func (d Done) String() string {
	if d.ID == houseID && d.Parts == 1 {
		return d.Action + " (the tables of your own; used from the next start)"
	}
	if d.Parts > 1 {
		return fmt.Sprintf("%s and %d more: %s", d.ID, d.Parts-1, d.Action)
	}
	return d.ID.String() + ": " + d.Action
}

// entry is a journal entry with its key.
type entry struct {
	key []byte
	entryRecord
}

func (e *entry) done() Done {
	d := Done{Parts: len(e.Changes), Action: e.Action, At: e.At.time()}
	if len(e.Changes) > 0 {
		d.ID, _ = idOf(e.Changes[0].Key)
	}
	return d
}

func readEntry(key, value []byte) (*entry, error) {
	e := &entry{key: bytes.Clone(key)}
	if err := decode(key, value, &e.entryRecord); err != nil {
		return nil, fmt.Errorf("journal entry %x: %w", key, err)
	}
	return e, nil
}

func (c *change) putEntry(e *entry) error {
	sealed, err := encode(e.key, e.entryRecord)
	if err != nil {
		return err
	}
	return c.tx.Bucket(bucketJournal).Put(e.key, sealed)
}

// dropEntry forgets an entry and where it stands in the parts' histories.
func (c *change) dropEntry(e *entry) error {
	byPart := c.tx.Bucket(bucketByPart)
	for _, ch := range e.Changes {
		if err := byPart.Delete(append(bytes.Clone(ch.Key), e.key...)); err != nil {
			return err
		}
	}
	return c.tx.Bucket(bucketJournal).Delete(e.key)
}

// commit writes the change's journal entry: what was undone is forgotten, and the entry UndoLevels before lets go of what undo needs.
func (c *change) commit(action, text string) error {
	journal := c.tx.Bucket(bucketJournal)
	undone, err := undoneEntries(c.tx)
	if err != nil {
		return err
	}
	for _, e := range undone {
		if err := c.dropEntry(e); err != nil {
			return err
		}
	}
	sequence, err := journal.NextSequence()
	if err != nil {
		return err
	}
	e := &entry{sequenceKey(sequence), entryRecord{At: stampOf(c.now), Action: action, Text: text, Changes: c.changes}}
	if err := c.putEntry(e); err != nil {
		return err
	}
	byPart := c.tx.Bucket(bucketByPart)
	for _, ch := range c.changes {
		if err := byPart.Put(append(bytes.Clone(ch.Key), e.key...), nil); err != nil {
			return err
		}
	}
	if sequence <= UndoLevels {
		return nil
	}
	return c.letGo(sequenceKey(sequence - UndoLevels))
}

// letGo strips an entry of the records it keeps for undo.
func (c *change) letGo(key []byte) error {
	value := c.tx.Bucket(bucketJournal).Get(key)
	if value == nil {
		return nil
	}
	e, err := readEntry(key, value)
	if err != nil {
		return nil // damage in the past must not keep today's reading from being saved; Check reports it
	}
	e.Old = true
	for i := range e.Changes {
		e.Changes[i].Other = nil
	}
	return c.putEntry(e)
}

// undoneEntries returns the entries that were undone and can be done again, the last undone first in time: they are the journal's tail.
func undoneEntries(tx *bolt.Tx) ([]*entry, error) {
	var undone []*entry
	cursor := tx.Bucket(bucketJournal).Cursor()
	for key, value := cursor.Last(); key != nil; key, value = cursor.Prev() {
		e, err := readEntry(key, value)
		if err != nil {
			return nil, err
		}
		if !e.Undone {
			break
		}
		undone = append(undone, e)
	}
	return undone, nil
}

// lastDone returns the last entry that was not undone; nil where there is none.
func lastDone(tx *bolt.Tx) (*entry, error) {
	cursor := tx.Bucket(bucketJournal).Cursor()
	for key, value := cursor.Last(); key != nil; key, value = cursor.Prev() {
		e, err := readEntry(key, value)
		if err != nil || !e.Undone {
			return e, err
		}
	}
	return nil, nil
}

// Undo takes the last action back and says which it was; ErrNoUndo where there is none.
func (w *Workbook) Undo() (Done, error) {
	var done Done
	err := w.update(func(c *change) error {
		e, err := lastDone(c.tx)
		if err != nil {
			return err
		}
		if e == nil {
			return fail(ErrNoUndo, "there is nothing to undo")
		}
		if e.Old {
			return fail(ErrNoUndo, fmt.Sprintf("no further back than %d actions: %q of %s stays", UndoLevels, e.Action, e.At.time().Format("2006-01-02")))
		}
		done = e.done()
		if err := c.swap(e); err != nil {
			return err
		}
		if len(e.Changes) > redoLargest {
			return c.dropEntry(e)
		}
		e.Undone = true
		return c.putEntry(e)
	})
	return done, err
}

// Redo does again what Undo took back last; ErrNoUndo where there is nothing. The load of a large file is not done again: load it again.
func (w *Workbook) Redo() (Done, error) {
	var done Done
	err := w.update(func(c *change) error {
		undone, err := undoneEntries(c.tx)
		if err != nil {
			return err
		}
		if len(undone) == 0 {
			return fail(ErrNoUndo, "there is nothing to do again")
		}
		e := undone[len(undone)-1]
		done = e.done()
		if err := c.swap(e); err != nil {
			return err
		}
		e.Undone = false
		return c.putEntry(e)
	})
	return done, err
}

// swap puts the records of an entry back as it keeps them, and keeps in it those that stood there. Lots go first, so that the rows of
// parts are derived from the lot that belongs to them.
func (c *change) swap(e *entry) error {
	lots := map[uint32]bool{}
	for i := range e.Changes {
		ch := &e.Changes[i]
		id, ok := idOf(ch.Key)
		if !ok {
			return damaged(errShort)
		}
		bucket, key := c.tx.Bucket(bucketPart), ch.Key
		switch {
		case id == houseID:
			bucket, key = c.tx.Bucket(bucketHouse), keyHouse
		case id.IsLot():
			bucket, key = c.tx.Bucket(bucketLot), lotKey(id.Lot)
			lots[id.Lot] = true
			delete(c.lots, id.Lot)
		}
		before := bytes.Clone(bucket.Get(key))
		var err error
		if ch.Other == nil {
			err = bucket.Delete(key)
		} else {
			err = bucket.Put(key, ch.Other)
		}
		if err != nil {
			return err
		}
		ch.Other = before
		if len(e.Changes) > redoLargest {
			ch.Other = nil // it will not be done again
		}
	}
	for _, ch := range e.Changes {
		if id, _ := idOf(ch.Key); !id.IsLot() {
			if err := c.derive(id); err != nil {
				return err
			}
		}
	}
	for lot := range lots {
		parts, err := partsOf(c.tx, lot)
		if err != nil {
			return err
		}
		for _, p := range parts {
			if err := c.renew(p); err != nil {
				return err
			}
		}
	}
	return nil
}

// derive renews a part's row after its record was put back or taken away.
func (c *change) derive(id ID) error {
	p, err := part(c.tx, id)
	if errors.Is(err, ErrNotFound) {
		return c.writeRow(id, nil)
	}
	if err != nil {
		return err
	}
	return c.renew(p)
}

// History returns what was done with a part, or (Number 0) with a lot itself, the oldest first. What was undone is not in it.
func (w *Workbook) History(id ID) ([]Event, error) {
	var events []Event
	err := w.view(func(tx *bolt.Tx) error {
		prefix := idKey(id)
		journal := tx.Bucket(bucketJournal)
		cursor := tx.Bucket(bucketByPart).Cursor()
		for key, _ := cursor.Seek(prefix); key != nil && bytes.HasPrefix(key, prefix); key, _ = cursor.Next() {
			at := key[len(prefix):]
			value := journal.Get(at)
			if value == nil {
				return corrupt(w.path, fmt.Errorf("history of %s: entry %d is missing", id, binary.BigEndian.Uint64(at)))
			}
			e, err := readEntry(at, value)
			if err != nil {
				return err
			}
			if !e.Undone {
				events = append(events, Event{At: e.At.time(), Action: e.Action, Text: e.Text})
			}
		}
		return nil
	})
	return events, err
}
