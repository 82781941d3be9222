package inventory

import (
	"bytes"
	"errors"
	"fmt"
	"time"

	bolt "go.etcd.io/bbolt"

	"goodbin/screening"
)

// House is what the user's group keeps beside the tables that the program brings along. It belongs to the workbook: a copy of the file
// holds it, and Undo takes a change of it back.
type House struct {
	Types    []HouseType // their own data sheets
	Families string      // their list of part families that are never or always kept, as the CSV that it was read from; "" for none
}

// IsZero reports whether nothing is kept.
func (h House) IsZero() bool { return len(h.Types) == 0 && h.Families == "" }

// HouseType is one type number of the user's own table.
type HouseType struct {
	Kind   screening.Kind
	Claim  screening.Claim // trait type is its name; figures as typed
	Alias  string          // another name of the same type
	Source string          // the sheet that it was read from, as the user names it
	Note   string
	Added  time.Time // set by PutHouse where zero
}

var (
	bucketHouse = []byte("house")
	keyHouse    = []byte("tables")
)

// houseID is the id under which the house tables stand in the journal: lots are numbered from 1.
var houseID = ID{}

type houseTypeRecord struct {
	Kind   string       `cbor:"1,keyasint"`
	Claim  *claimRecord `cbor:"2,keyasint,omitempty"`
	Alias  string       `cbor:"3,keyasint,omitempty"`
	Source string       `cbor:"4,keyasint,omitempty"`
	Note   string       `cbor:"5,keyasint,omitempty"`
	Added  stamp        `cbor:"6,keyasint,omitempty"`
}

type houseRecord struct {
	Types    []houseTypeRecord `cbor:"1,keyasint,omitempty"`
	Families string            `cbor:"2,keyasint,omitempty"`
}

func encodeHouse(h House) ([]byte, error) {
	record := houseRecord{Families: h.Families}
	for _, t := range h.Types {
		record.Types = append(record.Types, houseTypeRecord{
			Kind: string(t.Kind), Claim: claimTo(t.Claim), Alias: t.Alias, Source: t.Source, Note: t.Note, Added: stampOf(t.Added),
		})
	}
	return encode(keyHouse, record)
}

func decodeHouse(value []byte) (House, error) {
	var record houseRecord
	if err := decode(keyHouse, value, &record); err != nil {
		return House{}, fmt.Errorf("house tables: %w", err)
	}
	h := House{Families: record.Families}
	for _, r := range record.Types {
		t := HouseType{Kind: screening.Kind(r.Kind), Alias: r.Alias, Source: r.Source, Note: r.Note, Added: r.Added.time()}
		var err error
		if t.Claim, err = claimFrom(r.Claim); err != nil {
			return House{}, fmt.Errorf("house tables: %w", damaged(err))
		}
		h.Types = append(h.Types, t)
	}
	return h, nil
}

// House returns the house tables; the zero House where none are kept.
func (w *Workbook) House() (House, error) {
	var h House
	err := w.view(func(tx *bolt.Tx) (err error) {
		h, err = houseIn(tx)
		return err
	})
	return h, err
}

func houseIn(tx *bolt.Tx) (House, error) {
	bucket := tx.Bucket(bucketHouse)
	if bucket == nil { // schema 1, opened for reading only
		return House{}, nil
	}
	value := bucket.Get(keyHouse)
	if value == nil {
		return House{}, nil
	}
	return decodeHouse(value)
}

// PutHouse replaces the house tables. It is an action of the person: Undo takes it back. A zero House removes them.
func (w *Workbook) PutHouse(h House, action string) error {
	return w.update(func(c *change) error {
		for i := range h.Types {
			if h.Types[i].Added.IsZero() {
				h.Types[i].Added = c.now
			}
		}
		bucket := c.tx.Bucket(bucketHouse)
		c.remember(houseID, bucket.Get(keyHouse))
		if err := c.writeHouse(h); err != nil {
			return err
		}
		return c.commit(action, "")
	})
}

func (c *change) writeHouse(h House) error {
	bucket := c.tx.Bucket(bucketHouse)
	if h.IsZero() {
		return bucket.Delete(keyHouse)
	}
	sealed, err := encodeHouse(h)
	if err != nil {
		return err
	}
	return bucket.Put(keyHouse, sealed)
}

// ReadHouse reads the house tables of a workbook without opening it, also where another process has it open: it takes no lock, as
// [BackupHeld], and is begun again where the other process commits meanwhile. Where there is no workbook the error wraps [ErrNotFound].
func ReadHouse(path string) (House, error) {
	if err := recognise(path); err != nil {
		return House{}, err
	}
	var h House
	err := errCommitted
	for try := 0; try < heldTries && errors.Is(err, errCommitted); try++ {
		h, err = readHouse(path)
	}
	switch {
	case errors.Is(err, errCommitted):
		return House{}, failFrom(ErrBusy, err, quote(path)+" is being written all the time by another process; try again when that has ended")
	case err != nil:
		return House{}, corrupt(path, err)
	}
	return h, nil
}

// readHouse reads one state of the file, or fails with errCommitted where it changed meanwhile.
func readHouse(path string) (House, error) {
	file, size, err := openRegular(path)
	if err != nil {
		return House{}, err
	}
	defer file.Close()
	before, err := openPages(file, size)
	if err != nil {
		return House{}, err
	}
	value, ok, reading := before.value(bucketHouse, keyHouse)
	value = bytes.Clone(value)
	if after, err := openPages(file, size); err != nil || after.txid != before.txid {
		return House{}, errCommitted
	}
	if reading != nil || !ok {
		return House{}, reading
	}
	return decodeHouse(value)
}

// bucketsOf lists the buckets that a file of a schema has.
func bucketsOf(schema uint32) [][]byte {
	if schema < 2 {
		return buckets[1:]
	}
	return buckets
}

func addHouseBucket(tx *bolt.Tx) error {
	_, err := tx.CreateBucketIfNotExists(bucketHouse)
	return err
}
