package inventory

import (
	"encoding/binary"
	"errors"
	"fmt"
	"hash/crc32"
	"time"

	"github.com/fxamacker/cbor/v2"
)

// codecVersion is the first byte of every sealed value. A value with a higher one was written by a newer program.
const codecVersion = 1

// sealHead is the version byte and the CRC.
const sealHead = 1 + 4

var castagnoli = crc32.MakeTable(crc32.Castagnoli)

var (
	errShort    = errors.New("record is cut short")
	errChecksum = errors.New("record does not match its checksum")
	errVersion  = errors.New("record is of a newer goodbin")
)

// checksum is over key and payload, so that a record that landed under another key is found out too.
func checksum(key, payload []byte) uint32 {
	return crc32.Update(crc32.Checksum(key, castagnoli), castagnoli, payload)
}

// seal puts version and checksum before a payload. The payload's first sealHead bytes are room for them.
func seal(key, withRoom []byte) []byte {
	withRoom[0] = codecVersion
	binary.BigEndian.PutUint32(withRoom[1:], checksum(key, withRoom[sealHead:]))
	return withRoom
}

// unseal returns the payload of a sealed value after checking it. It shares memory with value.
func unseal(key, value []byte) ([]byte, error) {
	switch {
	case len(value) < sealHead:
		return nil, errShort
	case value[0] > codecVersion:
		return nil, errVersion
	case value[0] == 0, binary.BigEndian.Uint32(value[1:]) != checksum(key, value[sealHead:]):
		return nil, errChecksum
	}
	return value[sealHead:], nil
}

// The modes are deterministic: one record, one encoding, so that bytes compare as records do.
var (
	encMode = must(cbor.CoreDetEncOptions().EncMode())
	decMode = must(cbor.DecOptions{
		DupMapKey: cbor.DupMapKeyEnforcedAPF, MaxNestedLevels: 16, MaxArrayElements: 1 << 20, MaxMapPairs: 1 << 16,
		// Text is kept as it was typed or pasted, valid UTF-8 or not; the screen sanitises.
		UTF8: cbor.UTF8DecodeInvalid,
	}.DecMode())
)

func must[T any](mode T, err error) T {
	if err != nil {
		panic("inventory: CBOR options: " + err.Error())
	}
	return mode
}

// encode seals a record for a key.
func encode(key []byte, record any) ([]byte, error) {
	payload, err := encMode.Marshal(record)
	if err != nil {
		return nil, fmt.Errorf("encode: %w", err)
	}
	return seal(key, append(make([]byte, sealHead, sealHead+len(payload)), payload...)), nil
}

// decode opens a sealed record. Nothing of record shares memory with value.
func decode(key, value []byte, record any) error {
	payload, err := unseal(key, value)
	if err != nil {
		return damaged(err)
	}
	if err := decMode.Unmarshal(payload, record); err != nil {
		return damaged(err)
	}
	return nil
}

// damaged makes an error of reading a record one that callers can tell.
func damaged(err error) error {
	if errors.Is(err, errVersion) {
		return failFrom(ErrNewer, err, err.Error()+"; use that version, or a backup from before")
	}
	return failFrom(ErrCorrupt, err, err.Error())
}

// stamp is a time in a record: nanoseconds since 1970 UTC, 0 for the zero time.
type stamp int64

func stampOf(t time.Time) stamp {
	if t.IsZero() {
		return 0
	}
	return stamp(t.UnixNano())
}

func (s stamp) time() time.Time {
	if s == 0 {
		return time.Time{}
	}
	return time.Unix(0, int64(s)).UTC()
}
