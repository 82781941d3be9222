package inventory

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"iter"
	"slices"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

// LoadStretch is how many parts Load and PutOutcomes keep in one transaction: some 40 MB of memory.
const LoadStretch = 20_000

// appendFill is how full pages are made that are written once, in order.
const appendFill = 0.95

// Item is one thing to load: a lot, or a part of a lot that came before or is already kept. A Lot with ID 0 and a Part with number 0 get
// their numbers before the next item is asked for, through these pointers.
type Item struct {
	Lot  *Lot
	Part *Part
}

// LoadOptions say how to load.
type LoadOptions struct {
	Action string                // what the history says: "screened box.csv"
	Again  bool                  // replace parts that are already kept
	Held   func(id ID) error     // called for a part that is already kept and left as it is; an error stops. nil: ErrHeld stops
	Saved  func(lots, parts int) // called after each durable stretch, with the numbers so far

	stretch int // 0: LoadStretch; tests need not make so many parts
}

// Loaded says what was loaded, durably.
type Loaded struct {
	Lots, Parts int
	Held        int // parts left as they were
}

// Load keeps many lots and parts at once, in stretches of LoadStretch parts: each stretch is one transaction and one action for Undo. On
// an error, the items' own or ctx's among them, the stretches before it stay and Loaded says how far it came.
//
// Records are written in the order of their keys, then each index in the order of its own, which is several times faster than one part
// after the other and leaves a smaller file.
func (w *Workbook) Load(ctx context.Context, items iter.Seq2[Item, error], opts LoadOptions) (Loaded, error) {
	if opts.stretch == 0 {
		opts.stretch = LoadStretch
	}
	l := &loader{w: w, opts: opts, top: map[uint32]uint32{}, next: map[uint32]uint32{}}
	l.clear()
	for item, err := range items {
		if err == nil {
			err = ctx.Err()
		}
		if err == nil {
			err = l.add(item)
		}
		if err == nil && len(l.parts) >= opts.stretch {
			err = l.flush()
		}
		if err != nil {
			return l.done, err
		}
	}
	if err := ctx.Err(); err != nil {
		return l.done, err
	}
	return l.done, l.flush()
}

// pendingPart is a part ready to be written.
type pendingPart struct {
	id     ID
	sealed []byte
	row    *storedRow
}

// loader collects a stretch.
type loader struct {
	w     *Workbook
	opts  LoadOptions
	done  Loaded
	lots  []Lot
	known map[uint32]Lot // lots of this stretch, and those looked up
	parts []pendingPart
	ids   map[ID]int        // where in parts
	top   map[uint32]uint32 // by lot: the largest number given in this load
	next  map[uint32]uint32 // by lot: the next free number, once asked for
	last  uint32            // the largest lot number, once asked for
}

func (l *loader) clear() {
	l.lots, l.parts = nil, make([]pendingPart, 0, 1024)
	l.known, l.ids = map[uint32]Lot{}, map[ID]int{}
}

func (l *loader) add(item Item) error {
	if item.Lot != nil {
		if err := l.addLot(item.Lot); err != nil {
			return err
		}
	}
	if item.Part != nil {
		return l.addPart(item.Part)
	}
	return nil
}

func (l *loader) addLot(lot *Lot) error {
	err := l.w.view(func(tx *bolt.Tx) error {
		c := &change{tx: tx, now: l.w.opts.Now()}
		l.last = max(l.last, lastLot(tx))
		return c.prepareLot(lot, l.last)
	})
	if err != nil {
		return err
	}
	if _, twice := l.known[lot.ID]; twice {
		return fail(ErrHeld, fmt.Sprintf("lot %d comes twice", lot.ID))
	}
	l.last = max(l.last, lot.ID)
	l.known[lot.ID] = *lot
	l.lots = append(l.lots, *lot)
	return nil
}

// look reads what a part needs from the file: its lot, and whether it is already kept.
func (l *loader) look(p *Part) (held bool, err error) {
	err = l.w.view(func(tx *bolt.Tx) error {
		if _, known := l.known[p.ID.Lot]; !known {
			lot, err := (&change{tx: tx, lots: l.known}).lot(p.ID.Lot)
			if err != nil {
				return err
			}
			l.known[lot.ID] = lot
		}
		if p.ID.IsLot() && l.next[p.ID.Lot] == 0 {
			next, err := nextNumber(tx, p.ID.Lot)
			if err != nil {
				return err
			}
			l.next[p.ID.Lot] = max(next, l.top[p.ID.Lot]+1)
		}
		held = !p.ID.IsLot() && tx.Bucket(bucketPart).Get(idKey(p.ID)) != nil
		return nil
	})
	return held, err
}

func (l *loader) addPart(p *Part) error {
	held, err := l.look(p)
	if err != nil {
		return err
	}
	if p.ID.IsLot() {
		p.ID.Number = l.next[p.ID.Lot]
	}
	at, twice := l.ids[p.ID]
	if (held || twice) && !l.opts.Again {
		if l.opts.Held == nil {
			return fail(ErrHeld, fmt.Sprintf("part %s is already kept; choose another number, or say that it is to be replaced", p.ID))
		}
		l.done.Held++
		return l.opts.Held(p.ID)
	}
	lot := l.known[p.ID.Lot]
	if err := preparePart(p, lot); err != nil {
		return err
	}
	l.top[p.ID.Lot] = max(l.top[p.ID.Lot], p.ID.Number)
	if next := l.next[p.ID.Lot]; next != 0 {
		l.next[p.ID.Lot] = max(next, p.ID.Number+1)
	}
	p.Changed = l.w.opts.Now()
	sealed, err := encodePart(idKey(p.ID), *p)
	if err != nil {
		return err
	}
	pending := pendingPart{p.ID, sealed, newRow(*p, lot)}
	if twice {
		l.parts[at] = pending
		return nil
	}
	l.ids[p.ID] = len(l.parts)
	l.parts = append(l.parts, pending)
	return nil
}

// flush writes the stretch.
func (l *loader) flush() error {
	if len(l.lots) == 0 && len(l.parts) == 0 {
		return nil
	}
	slices.SortFunc(l.parts, func(a, b pendingPart) int { return a.id.Compare(b.id) })
	err := l.w.update(func(c *change) error {
		for _, lot := range l.lots {
			if c.tx.Bucket(bucketLot).Get(lotKey(lot.ID)) != nil {
				return fail(ErrHeld, fmt.Sprintf("lot %d was made meanwhile; load again", lot.ID))
			}
			if err := c.putLot(lot); err != nil {
				return err
			}
		}
		if err := c.putSorted(l.parts, l.opts.Again); err != nil {
			return err
		}
		return c.commit(l.opts.Action, "")
	})
	if err != nil {
		return err
	}
	l.done.Lots += len(l.lots)
	l.done.Parts += len(l.parts)
	l.clear()
	if l.opts.Saved != nil {
		l.opts.Saved(l.done.Lots, l.done.Parts)
	}
	return nil
}

// indexKey is a key of part_by_value with its verdict.
type indexKey struct {
	key     []byte
	verdict byte
}

// putSorted writes parts that are in the order of their ids: records, rows, then the index of values in its own order.
func (c *change) putSorted(parts []pendingPart, again bool) error {
	bucket, rows, index := c.tx.Bucket(bucketPart), c.tx.Bucket(bucketRow), c.tx.Bucket(bucketValue)
	bucket.FillPercent, rows.FillPercent, index.FillPercent = appendFill, appendFill, appendFill
	c.tx.Bucket(bucketByPart).FillPercent = appendFill
	keys := make([]indexKey, 0, 4*len(parts))
	c.changes, c.rows = slices.Grow(c.changes, len(parts)), slices.Grow(c.rows, len(parts))
	for _, p := range parts {
		key := idKey(p.id)
		before := bucket.Get(key)
		if before != nil {
			if !again {
				return fail(ErrHeld, fmt.Sprintf("part %s was made meanwhile; load again", p.id))
			}
			if err := c.writeRow(p.id, nil); err != nil {
				return err
			}
		}
		c.remember(p.id, before)
		if err := bucket.Put(key, p.sealed); err != nil {
			return err
		}
		sealed := encodeRow(key, p.row)
		if err := rows.Put(key, sealed); err != nil {
			return err
		}
		c.rows = append(c.rows, rowChange{p.id, sealed})
		for _, k := range p.row.valueKeys(key) {
			keys = append(keys, indexKey{k, verdictByte(p.row.verdict)})
		}
	}
	slices.SortFunc(keys, func(a, b indexKey) int { return bytes.Compare(a.key, b.key) })
	for _, k := range keys {
		if err := index.Put(k.key, []byte{k.verdict}); err != nil {
			return err
		}
	}
	return nil
}

// StaleParts walks the parts whose verdict was reached under other tables than these (by kind). PutOutcome may be called meanwhile.
func (w *Workbook) StaleParts(tables map[screening.Kind]string) iter.Seq2[Part, error] {
	return func(yield func(Part, error) bool) {
		ids, err := w.staleIDs(tables)
		if err != nil {
			yield(Part{}, err)
			return
		}
		for _, id := range ids {
			p, err := w.GetPart(id)
			if errors.Is(err, ErrNotFound) {
				continue // undone meanwhile
			}
			if !yield(p, err) || err != nil {
				return
			}
		}
	}
}

func (w *Workbook) staleIDs(tables map[screening.Kind]string) ([]ID, error) {
	var ids []ID
	err := w.view(func(tx *bolt.Tx) error {
		cursor := tx.Bucket(bucketRow).Cursor()
		for key, sealed := cursor.First(); key != nil; key, sealed = cursor.Next() {
			r, err := decodeRow(key, sealed)
			if err != nil {
				return err
			}
			if id, ok := idOf(key); ok && r.verdict != screening.NoVerdict && r.tables != tables[screening.Kind(r.kind)] {
				ids = append(ids, id)
			}
		}
		return nil
	})
	return ids, err
}

// PutOutcome replaces a part's outcome after re-judging. It is no action of the person: Undo passes over it.
func (w *Workbook) PutOutcome(id ID, o Outcome) error {
	return w.PutOutcomes(context.Background(), func(yield func(ID, Outcome) bool) { yield(id, o) })
}

// outcomeStretch is how many outcomes PutOutcomes keeps in one transaction.
const outcomeStretch = 2000

// PutOutcomes replaces many outcomes, in stretches, each durable. A part that is gone by then is passed over.
func (w *Workbook) PutOutcomes(ctx context.Context, outcomes iter.Seq2[ID, Outcome]) error {
	next, stop := iter.Pull2(outcomes)
	defer stop()
	for {
		var ids []ID
		var judged []Outcome
		for len(ids) < outcomeStretch {
			id, o, ok := next()
			if !ok {
				break
			}
			ids, judged = append(ids, id), append(judged, o)
		}
		if err := ctx.Err(); err != nil || len(ids) == 0 {
			return err
		}
		err := w.update(func(c *change) error {
			for i, id := range ids {
				p, err := part(c.tx, id)
				if errors.Is(err, ErrNotFound) {
					continue
				}
				if err != nil {
					return err
				}
				p.Outcome = judged[i]
				if err := c.writePart(p); err != nil {
					return err
				}
			}
			return nil
		})
		if err != nil {
			return err
		}
	}
}
