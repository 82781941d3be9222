package inventory

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"iter"
	"slices"

	bolt "go.etcd.io/bbolt"
)

// LoadStretch is how many parts Load keeps in one transaction: some 40 MB of memory.
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
// after the other and leaves a smaller file. While a stretch is written, the next is collected.
func (w *Workbook) Load(ctx context.Context, items iter.Seq2[Item, error], opts LoadOptions) (Loaded, error) {
	if opts.stretch == 0 {
		opts.stretch = LoadStretch
	}
	l := &loader{w: w, opts: opts, now: newStretch(), top: map[uint32]uint32{}, next: map[uint32]uint32{}}
	err := l.run(ctx, items)
	return l.done, errors.Join(err, l.wait())
}

// pendingPart is a part ready to be written.
type pendingPart struct {
	id     ID
	sealed []byte
	row    *storedRow
}

// stretch is what goes into one transaction.
type stretch struct {
	lots  []Lot
	known map[uint32]Lot // its lots, and those its parts belong to
	parts []pendingPart
	ids   map[ID]int // where in parts
}

func newStretch() *stretch { return &stretch{known: map[uint32]Lot{}, ids: map[ID]int{}} }

// loader collects stretches.
type loader struct {
	w       *Workbook
	opts    LoadOptions
	done    Loaded
	now     *stretch          // being collected
	writing *stretch          // being written; nil: none
	written chan error        // says when it is
	top     map[uint32]uint32 // by lot: the largest number given in this load
	next    map[uint32]uint32 // by lot: the next free number, once asked for
	last    uint32            // the largest lot number
}

func (l *loader) run(ctx context.Context, items iter.Seq2[Item, error]) error {
	for item, err := range items {
		if err == nil {
			err = ctx.Err()
		}
		if err == nil {
			err = l.add(item)
		}
		if err == nil && len(l.now.parts) >= l.opts.stretch {
			err = l.flush()
		}
		if err != nil {
			return err
		}
	}
	if err := ctx.Err(); err != nil {
		return err
	}
	return l.flush()
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
	if l.coming(lot.ID) {
		return fail(ErrHeld, fmt.Sprintf("lot %d comes twice", lot.ID))
	}
	l.last = max(l.last, lot.ID)
	l.now.known[lot.ID] = *lot
	l.now.lots = append(l.now.lots, *lot)
	return nil
}

// coming reports whether a lot is among those about to be written.
func (l *loader) coming(lot uint32) bool {
	is := func(other Lot) bool { return other.ID == lot }
	return slices.ContainsFunc(l.now.lots, is) || l.writing != nil && slices.ContainsFunc(l.writing.lots, is)
}

// look reads what a part needs from the file: its lot, the next number where it has none, and whether it is already kept.
func (l *loader) look(p *Part) (held bool, err error) {
	lot := p.ID.Lot
	if _, known := l.now.known[lot]; !known && l.writing != nil {
		if before, ok := l.writing.known[lot]; ok {
			l.now.known[lot] = before
		}
	}
	err = l.w.view(func(tx *bolt.Tx) error {
		if _, err := (&change{tx: tx, lots: l.now.known}).lot(lot); err != nil {
			return err
		}
		if p.ID.IsLot() && l.next[lot] == 0 {
			next, err := nextNumber(tx, lot)
			if err != nil {
				return err
			}
			l.next[lot] = max(next, l.top[lot]+1)
		}
		held = !p.ID.IsLot() && tx.Bucket(bucketPart).Get(idKey(p.ID)) != nil
		return nil
	})
	if l.writing != nil {
		_, comes := l.writing.ids[p.ID]
		held = held || comes
	}
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
	at, twice := l.now.ids[p.ID]
	if (held || twice) && !l.opts.Again {
		if l.opts.Held == nil {
			return fail(ErrHeld, fmt.Sprintf("part %s is already kept; choose another number, or say that it is to be replaced", p.ID))
		}
		l.done.Held++
		return l.opts.Held(p.ID)
	}
	lot := l.now.known[p.ID.Lot]
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
		l.now.parts[at] = pending
		return nil
	}
	l.now.ids[p.ID] = len(l.now.parts)
	l.now.parts = append(l.now.parts, pending)
	return nil
}

// flush begins to write the stretch, after the one before is written.
func (l *loader) flush() error {
	if err := l.wait(); err != nil {
		return err
	}
	s := l.now
	if len(s.lots) == 0 && len(s.parts) == 0 {
		return nil
	}
	l.now, l.writing, l.written = newStretch(), s, make(chan error, 1)
	go func() { l.written <- l.w.writeStretch(s, l.opts) }()
	return nil
}

// wait ends when nothing is being written any more.
func (l *loader) wait() error {
	if l.writing == nil {
		return nil
	}
	s := l.writing
	err := <-l.written
	l.writing = nil
	if err != nil {
		return err
	}
	l.done.Lots += len(s.lots)
	l.done.Parts += len(s.parts)
	if l.opts.Saved != nil {
		l.opts.Saved(l.done.Lots, l.done.Parts)
	}
	return nil
}

// writeStretch writes a stretch as one action.
func (w *Workbook) writeStretch(s *stretch, opts LoadOptions) error {
	slices.SortFunc(s.parts, func(a, b pendingPart) int { return a.id.Compare(b.id) })
	return w.update(func(c *change) error {
		for _, lot := range s.lots {
			if c.tx.Bucket(bucketLot).Get(lotKey(lot.ID)) != nil {
				return fail(ErrHeld, fmt.Sprintf("lot %d was made meanwhile; load again", lot.ID))
			}
			if err := c.putLot(lot); err != nil {
				return err
			}
		}
		if err := c.followLots(s); err != nil {
			return err
		}
		if err := c.putSorted(s.parts, opts.Again); err != nil {
			return err
		}
		return c.commit(opts.Action, "")
	})
}

// followLots derives the rows anew whose lot was changed since they were collected.
func (c *change) followLots(s *stretch) error {
	for i := range s.parts {
		pending := &s.parts[i]
		lot, err := c.lot(pending.id.Lot)
		if err != nil {
			return err
		}
		if lot.Changed.Equal(s.known[lot.ID].Changed) {
			continue
		}
		p, err := decodePart(idKey(pending.id), pending.sealed)
		if err != nil {
			return err
		}
		pending.row = newRow(p, lot)
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
