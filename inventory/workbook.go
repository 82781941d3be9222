package inventory

import (
	"sync"
	"time"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

// Options say how a workbook is opened.
type Options struct {
	ReadOnly bool             // several readers may share a file; none can while it is open for writing elsewhere
	Create   bool             // make an empty workbook where there is no file
	Timeout  time.Duration    // how long to wait for another process; 0 is DefaultTimeout
	Now      func() time.Time // the clock, safe for several goroutines; nil is time.Now

	// Tables are the versions of the rulebooks' tables by kind: rows judged under others are shown as stale. nil: nothing is stale.
	Tables map[screening.Kind]string
}

// DefaultTimeout is how long Open waits for another process that holds the workbook.
const DefaultTimeout = 300 * time.Millisecond

// Workbook is an open workbook. Its methods may be called from several goroutines.
type Workbook struct {
	path string
	db   *bolt.DB
	opts Options
	lock sidecar

	writing sync.Mutex // one change at a time, from its transaction to the list in memory

	mu       sync.Mutex // guards what follows; taken after writing
	rows     *snapshot  // nil until first needed, and after a bulk change
	position Position
	moved    bool // position is not on the disk yet
	closed   bool
}

// Path returns the file's path.
func (w *Workbook) Path() string { return w.path }

// ReadOnly reports whether the workbook was opened for reading only.
func (w *Workbook) ReadOnly() bool { return w.opts.ReadOnly }

// Position is where the person was, so that reopening lands there.
type Position struct {
	Page   string
	Lot    uint32
	Part   ID
	Column string // the question or column that had the cursor
}

// SetPosition remembers where the person is. It costs nothing: it is written with the next change, or by Close. Set before a part is
// saved, it is on the disk with the part.
func (w *Workbook) SetPosition(p Position) {
	w.mu.Lock()
	defer w.mu.Unlock()
	w.moved = w.moved || p != w.position
	w.position = p
}

// Position returns where the person was last.
func (w *Workbook) Position() Position {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.position
}

// writePosition puts the position into a transaction; kept is called after it was committed.
func (w *Workbook) writePosition(tx *bolt.Tx) (kept func(), err error) {
	w.mu.Lock()
	p, moved := w.position, w.moved
	w.mu.Unlock()
	if !moved {
		return func() {}, nil
	}
	record := positionRecord{Page: p.Page, Lot: p.Lot, Part: p.Part.packed(), Column: p.Column}
	sealed, err := encode(keyPosition, record)
	if err != nil {
		return nil, err
	}
	return func() {
		w.mu.Lock()
		w.moved = w.moved && w.position != p
		w.mu.Unlock()
	}, tx.Bucket(bucketMeta).Put(keyPosition, sealed)
}

// readPosition takes the position from the file. One that cannot be read is no reason not to open: the person starts at the beginning, and
// Check reports it.
func (w *Workbook) readPosition() error {
	return w.view(func(tx *bolt.Tx) error {
		value := tx.Bucket(bucketMeta).Get(keyPosition)
		var record positionRecord
		if value == nil || decode(keyPosition, value, &record) != nil {
			return nil
		}
		w.position = Position{Page: record.Page, Lot: record.Lot, Part: idPacked(record.Part), Column: record.Column}
		return nil
	})
}

// Close writes the position and closes the file. It is safe to call twice.
func (w *Workbook) Close() error {
	w.mu.Lock()
	closed, moved := w.closed, w.moved
	w.closed = true
	w.mu.Unlock()
	if closed {
		return nil
	}
	var err error
	if moved && !w.opts.ReadOnly {
		err = w.update(func(*change) error { return nil })
	}
	w.lock.remove()
	if closing := w.db.Close(); err == nil {
		err = closing
	}
	return err
}

// view reads in one transaction.
func (w *Workbook) view(read func(tx *bolt.Tx) error) error {
	return guard(w.path, func() error { return w.db.View(read) })
}
