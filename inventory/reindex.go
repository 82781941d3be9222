package inventory

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"slices"

	bolt "go.etcd.io/bbolt"
)

// Reindex rebuilds row, part_by_value and journal_by_part from the records, in one transaction; it is the repair when Check reports an
// index. Records that cannot be read are left as they are and named in the report; they have no row.
func (w *Workbook) Reindex(ctx context.Context) (Report, error) {
	var report Report
	err := w.update(func(c *change) error {
		for _, name := range [][]byte{bucketRow, bucketValue, bucketByPart} {
			if err := c.tx.DeleteBucket(name); err != nil {
				return fmt.Errorf("clear %s: %w", name, err)
			}
			if _, err := c.tx.CreateBucket(name); err != nil {
				return fmt.Errorf("clear %s: %w", name, err)
			}
		}
		found := &problems{}
		err := c.reindexParts(ctx, &report, found)
		if err == nil {
			err = c.reindexJournal(ctx, &report, found)
		}
		report.Problems = found.list
		return err
	})
	w.mu.Lock()
	w.rows = nil
	w.mu.Unlock()
	return report, err
}

func (c *change) reindexParts(ctx context.Context, report *Report, found *problems) error {
	report.Lots = c.tx.Bucket(bucketLot).Stats().KeyN
	rows, index := c.tx.Bucket(bucketRow), c.tx.Bucket(bucketValue)
	rows.FillPercent, index.FillPercent = appendFill, appendFill
	var keys []indexKey
	err := c.tx.Bucket(bucketPart).ForEach(func(key, value []byte) error {
		report.Parts++
		p, err := decodePart(key, value)
		if err != nil {
			found.add("%v", err)
			return ctx.Err()
		}
		l, err := c.lot(p.ID.Lot)
		if err != nil {
			found.add("part %s: %v", p.ID, err)
			return ctx.Err()
		}
		r := newRow(p, l)
		for _, k := range r.valueKeys(key) {
			keys = append(keys, indexKey{k, verdictByte(r.verdict)})
		}
		return errors.Join(ctx.Err(), rows.Put(key, encodeRow(key, r)))
	})
	if err != nil {
		return err
	}
	slices.SortFunc(keys, func(a, b indexKey) int { return bytes.Compare(a.key, b.key) })
	for _, k := range keys {
		if err := index.Put(k.key, []byte{k.verdict}); err != nil {
			return err
		}
	}
	return nil
}

func (c *change) reindexJournal(ctx context.Context, report *Report, found *problems) error {
	var keys [][]byte
	err := c.tx.Bucket(bucketJournal).ForEach(func(key, value []byte) error {
		report.Entries++
		e, err := readEntry(key, value)
		if err != nil {
			found.add("%v", err)
			return ctx.Err()
		}
		for _, ch := range e.Changes {
			keys = append(keys, append(bytes.Clone(ch.Key), key...))
		}
		return ctx.Err()
	})
	if err != nil {
		return err
	}
	return putKeys(c.tx.Bucket(bucketByPart), keys)
}

// putKeys writes keys without values in their order.
func putKeys(bucket *bolt.Bucket, keys [][]byte) error {
	bucket.FillPercent = appendFill
	slices.SortFunc(keys, bytes.Compare)
	for _, key := range keys {
		if err := bucket.Put(key, nil); err != nil {
			return err
		}
	}
	return nil
}
