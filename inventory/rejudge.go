package inventory

import (
	"context"
	"errors"
	"iter"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

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
