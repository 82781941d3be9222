package inventory

import (
	"bytes"
	"context"
	"encoding/binary"
	"errors"
	"time"

	bolt "go.etcd.io/bbolt"
)

// Report is what a check found.
type Report struct {
	Lots, Parts, Entries int      // records read; entries are those of the journal
	Types                int      // type numbers of the user's own table
	Problems             []string // at most MaxProblems; empty: all is well
}

// OK reports whether nothing is wrong.
func (r Report) OK() bool { return len(r.Problems) == 0 }

// Verify checks a workbook file from outside: every page, every checksum, every index. It opens it for reading only. Pages are first
// followed by plain reads, so that bbolt is let at the file only where its structure holds; still, run it in a child process with a time
// limit. A damaged file is an error that wraps ErrCorrupt, and a report that says where.
func Verify(path string) (Report, error) { return VerifyContext(context.Background(), path) }

// VerifyContext is Verify, stoppable.
func VerifyContext(ctx context.Context, path string) (Report, error) {
	var report Report
	if err := recognise(path); err != nil {
		return report, err
	}
	db, err := openBolt(path, Options{ReadOnly: true, Timeout: 2 * time.Second})
	if err != nil {
		return report, err
	}
	defer db.Close()
	// The shared lock is held from here on: nobody writes.
	found := &problems{}
	if err := walkFile(ctx, path, found); err != nil {
		return report, err
	}
	report.Problems = found.list
	if report.OK() {
		err = guard(path, func() error { return db.View(func(tx *bolt.Tx) error { return report.check(ctx, tx) }) })
	}
	if err == nil && !report.OK() {
		err = corrupt(path, errors.New(report.Problems[0]))
	}
	return report, err
}

func walkFile(ctx context.Context, path string, found *problems) error {
	file, size, err := openRegular(path)
	if err != nil {
		return err
	}
	defer file.Close()
	p, err := openPages(file, size)
	if err != nil {
		return corrupt(path, err)
	}
	return p.walkAll(ctx, found)
}

// Check holds every page, every record and every index against each other while the workbook is open. What is wrong stands in the report;
// an error means that it could not be looked.
func (w *Workbook) Check(ctx context.Context) (Report, error) {
	var report Report
	err := w.view(func(tx *bolt.Tx) error { return report.check(ctx, tx) })
	return report, err
}

// check looks at everything in a transaction. It holds the rows as derived afresh against the stored ones.
func (report *Report) check(ctx context.Context, tx *bolt.Tx) error {
	found := &problems{list: report.Problems}
	defer func() { report.Problems = found.list }()
	// To the end, whatever it says: an undrained channel leaves its goroutine reading pages after the file was closed.
	for err := range tx.Check() {
		found.add("%v", err)
	}
	if len(found.list) > 0 {
		return ctx.Err()
	}
	check := checker{ctx: ctx, tx: tx, found: found, report: report}
	for _, step := range []func() error{check.meta, check.house, check.lots, check.parts, check.valueKeys, check.journal} {
		if err := step(); err != nil {
			return err
		}
	}
	return nil
}

type checker struct {
	ctx    context.Context
	tx     *bolt.Tx
	found  *problems
	report *Report
	lotsBy map[uint32]Lot
	values int // keys that the rows ask for
}

// each walks a bucket; it stops with the context, or when enough is wrong.
func (c *checker) each(bucket []byte, visit func(key, value []byte)) error {
	cursor := c.tx.Bucket(bucket).Cursor()
	for key, value := cursor.First(); key != nil && !c.found.full(); key, value = cursor.Next() {
		if err := c.ctx.Err(); err != nil {
			return err
		}
		visit(key, value)
	}
	return nil
}

func (c *checker) meta() error {
	value := c.tx.Bucket(bucketMeta).Get(keyPosition)
	var record positionRecord
	if value != nil {
		if err := decode(keyPosition, value, &record); err != nil {
			c.found.add("position: %v", err)
		}
	}
	return nil
}

func (c *checker) house() error {
	h, err := houseIn(c.tx)
	if err != nil {
		c.found.add("%v", err)
	}
	c.report.Types = len(h.Types)
	return nil
}

func (c *checker) lots() error {
	c.lotsBy = map[uint32]Lot{}
	return c.each(bucketLot, func(key, value []byte) {
		c.report.Lots++
		l, err := decodeLot(key, value)
		if err != nil {
			c.found.add("%v", err)
			return
		}
		c.lotsBy[l.ID] = l
	})
}

func (c *checker) parts() error {
	rows, index := c.tx.Bucket(bucketRow), c.tx.Bucket(bucketValue)
	err := c.each(bucketPart, func(key, value []byte) {
		c.report.Parts++
		p, err := decodePart(key, value)
		if err != nil {
			c.found.add("%v", err)
			return
		}
		l, ok := c.lotsBy[p.ID.Lot]
		if !ok {
			c.found.add("part %s belongs to no lot", p.ID)
			return
		}
		r := newRow(p, l)
		if !bytes.Equal(rows.Get(key), encodeRow(key, r)) {
			c.found.add("row of %s does not say what the part says", p.ID)
		}
		for _, k := range r.valueKeys(key) {
			c.values++
			if got := index.Get(k); !bytes.Equal(got, []byte{verdictByte(r.verdict)}) {
				c.found.add("part %s is missing from the index of values, or stands there with another verdict", p.ID)
			}
		}
	})
	if err != nil {
		return err
	}
	return c.each(bucketRow, func(key, _ []byte) {
		if c.tx.Bucket(bucketPart).Get(key) == nil {
			id, _ := idOf(key)
			c.found.add("row of %s has no part", id)
		}
	})
}

// valueKeys counts the index of values: every key asked for is there, so any beyond is too many.
func (c *checker) valueKeys() error {
	n := 0
	err := c.each(bucketValue, func(_, _ []byte) { n++ })
	if err == nil && len(c.found.list) == 0 && n != c.values {
		c.found.add("the index of values has %d entries, the parts ask for %d", n, c.values)
	}
	return err
}

func (c *checker) journal() error {
	byPart, expected := c.tx.Bucket(bucketByPart), 0
	err := c.each(bucketJournal, func(key, value []byte) {
		c.report.Entries++
		e, err := readEntry(key, value)
		if err != nil {
			c.found.add("%v", err)
			return
		}
		for _, ch := range e.Changes {
			expected++
			// Get cannot tell an empty value from none: look the key itself up.
			full := append(bytes.Clone(ch.Key), key...)
			if got, _ := byPart.Cursor().Seek(full); !bytes.Equal(got, full) {
				id, _ := idOf(ch.Key)
				c.found.add("history of %s does not name entry %d", id, binary.BigEndian.Uint64(key))
			}
		}
	})
	if err != nil || len(c.found.list) > 0 {
		return err
	}
	n := 0
	err = c.each(bucketByPart, func(_, _ []byte) { n++ })
	if err == nil && n != expected {
		c.found.add("the histories name %d entries, the journal %d", n, expected)
	}
	return err
}
