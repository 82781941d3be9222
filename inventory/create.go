package inventory

import (
	"encoding/binary"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"time"

	bolt "go.etcd.io/bbolt"
)

// create makes an empty workbook under a temporary name and then gives it its own, so that a half-made one is never found under it.
func create(path string, now time.Time) error {
	folder := filepath.Dir(path)
	temp, err := os.CreateTemp(folder, "."+filepath.Base(path)+".new-*")
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return failFrom(ErrNotFound, err, "there is no folder "+quote(folder)+" to make the workbook in; make it first")
	case err != nil:
		return explainCreate(path, err)
	}
	name := temp.Name()
	defer os.Remove(name)
	temp.Close()
	if err := initialise(name, now); err != nil {
		return explainCreate(path, err)
	}
	// A hard link fails where a file of that name appeared meanwhile; a rename would replace it. Some file systems have no links.
	err = os.Link(name, path)
	if errors.Is(err, fs.ErrExist) {
		return nil // somebody else made it: it is looked at like any other
	}
	if err != nil {
		if err := os.Rename(name, path); err != nil {
			return explainCreate(path, err)
		}
	}
	return syncFolder(folder)
}

func explainCreate(path string, err error) error {
	switch {
	case isFull(err):
		return failFrom(ErrFull, err, "no room left to make the workbook "+quote(path)+": free some space")
	case isReadOnly(err):
		return failFrom(ErrReadOnly, err, "the workbook "+quote(path)+" cannot be made: its folder cannot be written; choose another place")
	}
	return fmt.Errorf("make workbook %s: %w", quote(path), err)
}

// initialise writes an empty workbook into an empty file.
func initialise(path string, now time.Time) error {
	db, err := bolt.Open(path, 0o600, &bolt.Options{Timeout: time.Second, FreelistType: bolt.FreelistMapType})
	if err != nil {
		return err
	}
	err = db.Update(func(tx *bolt.Tx) error {
		for _, name := range buckets {
			if _, err := tx.CreateBucket(name); err != nil {
				return err
			}
		}
		meta := tx.Bucket(bucketMeta)
		made, err := encode(keyMade, stampOf(now))
		if err != nil {
			return err
		}
		return errors.Join(
			meta.Put(keyFormat, []byte(formatName)),
			meta.Put(keySchema, binary.BigEndian.AppendUint32(nil, schemaVersion)),
			meta.Put(keyMade, made),
		)
	})
	return errors.Join(err, db.Close())
}

// syncFolder makes a rename durable. Not every system can sync a folder; those that cannot make it durable themselves.
func syncFolder(folder string) error {
	d, err := os.Open(folder)
	if err != nil {
		return nil
	}
	defer d.Close()
	if err := d.Sync(); isFull(err) {
		return err
	}
	return nil
}
