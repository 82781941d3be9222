package inventory

import (
	"context"
	"encoding/binary"
	"fmt"

	bolt "go.etcd.io/bbolt"
)

// schemaVersion is the layout that this program writes; see the package comment.
const schemaVersion = 2

func schemaOf(value []byte) uint32 { return binary.BigEndian.Uint32(value) }

// migration brings a workbook from schema `from` to from+1.
type migration struct {
	from uint32
	name string // what it does, in words: it stands in errors
	run  func(*bolt.Tx) error
}

// migrations are ordered and without gaps.
var migrations = []migration{{from: 1, name: "room for house tables", run: addHouseBucket}}

// migrate runs what leads from the file's schema to the program's, each step in one transaction with the new version. Before the first it
// leaves a copy beside the file.
func migrate(db *bolt.DB, path string, to uint32, steps []migration) error {
	var version uint32
	err := db.View(func(tx *bolt.Tx) error {
		version = schemaOf(tx.Bucket(bucketMeta).Get(keySchema))
		return nil
	})
	if err != nil || version == to {
		return err
	}
	if err := copyTo(context.Background(), fmt.Sprintf("%s.schema-%d", path, version), committed(db)); err != nil {
		return fmt.Errorf("copy before the workbook is brought to schema %d: %w", to, err)
	}
	for _, step := range steps {
		if step.from < version {
			continue
		}
		if step.from != version {
			break
		}
		err := db.Update(func(tx *bolt.Tx) error {
			if err := step.run(tx); err != nil {
				return err
			}
			return tx.Bucket(bucketMeta).Put(keySchema, binary.BigEndian.AppendUint32(nil, version+1))
		})
		if err != nil {
			return explainWrite(path, fmt.Errorf("bring the workbook from schema %d to %d (%s): %w", version, version+1, step.name, err))
		}
		version++
	}
	if version != to {
		return fail(ErrCorrupt, fmt.Sprintf("%s has schema %d, from which no way leads to %d", quote(path), version, to))
	}
	return nil
}
