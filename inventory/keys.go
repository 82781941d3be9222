package inventory

import (
	"bytes"
	"encoding/binary"
	"math"

	"goodbin/screening"
)

// The names of the buckets.
var (
	bucketMeta    = []byte("meta")
	bucketLot     = []byte("lot")
	bucketPart    = []byte("part")
	bucketRow     = []byte("row")
	bucketValue   = []byte("part_by_value")
	bucketJournal = []byte("journal")
	bucketByPart  = []byte("journal_by_part")
)

// buckets lists every bucket, derived ones last; the first is new in schema 2.
var buckets = [][]byte{bucketHouse, bucketMeta, bucketLot, bucketPart, bucketJournal, bucketRow, bucketValue, bucketByPart}

// The keys in meta.
var (
	keyFormat   = []byte("format")
	keySchema   = []byte("schema")
	keyMade     = []byte("made")
	keyPosition = []byte("position")
)

const formatName = "goodbin workbook"

func lotKey(lot uint32) []byte { return binary.BigEndian.AppendUint32(nil, lot) }

// idKey is a part's key, or with number 0 the one under which a lot stands in the journal.
func idKey(id ID) []byte {
	key := binary.BigEndian.AppendUint32(make([]byte, 0, 8), id.Lot)
	return binary.BigEndian.AppendUint32(key, id.Number)
}

// idOf reads a part's key; ok is false where it is none.
func idOf(key []byte) (id ID, ok bool) {
	if len(key) != 8 {
		return ID{}, false
	}
	return ID{binary.BigEndian.Uint32(key), binary.BigEndian.Uint32(key[4:])}, true
}

func (id ID) packed() uint64 { return uint64(id.Lot)<<32 | uint64(id.Number) }

func idPacked(x uint64) ID { return ID{uint32(x >> 32), uint32(x)} }

func sequenceKey(n uint64) []byte { return binary.BigEndian.AppendUint64(nil, n) }

// floatBits maps float64 to uint64 so that the order of the integers is the order of the numbers: all bits inverted where negative, else
// the top bit set. −0 becomes 0. ok is false for NaN, which has no place in an order.
func floatBits(x float64) (bits uint64, ok bool) {
	if math.IsNaN(x) {
		return 0, false
	}
	if x == 0 {
		x = 0 // −0 is not a place of its own
	}
	bits = math.Float64bits(x)
	if bits>>63 == 1 {
		return ^bits, true
	}
	return bits | 1<<63, true
}

// floatOf is the inverse of floatBits.
func floatOf(bits uint64) float64 {
	if bits>>63 == 1 {
		return math.Float64frombits(bits &^ (1 << 63))
	}
	return math.Float64frombits(^bits)
}

// Origin says where a value in the index comes from.
type Origin byte

// The origins.
const (
	FromClaim   Origin = 'c' // the nominal of a rating in the claim that the part is held to
	FromReading Origin = 'm' // an exact reading that stands
)

// value is one number of a part in stock, under which part_by_value finds it.
type value struct {
	of     screening.Characteristic
	origin Origin
	x      float64 // SI, never NaN
}

// valuePrefix begins the keys of a kind's characteristic.
func valuePrefix(kind screening.Kind, of screening.Characteristic, origin Origin) []byte {
	key := make([]byte, 0, len(kind)+len(of)+3+16)
	key = append(append(key, kind...), 0)
	key = append(append(key, of...), 0)
	return append(key, byte(origin))
}

// valueKey returns nil for a value that has no key: NaN, or a name with a 0x00 in it.
func valueKey(kind screening.Kind, v value, part []byte) []byte {
	bits, ok := floatBits(v.x)
	if !ok || bytes.IndexByte([]byte(kind), 0) >= 0 || bytes.IndexByte([]byte(v.of), 0) >= 0 {
		return nil
	}
	return append(binary.BigEndian.AppendUint64(valuePrefix(kind, v.of, v.origin), bits), part...)
}

// hitOf takes the end of an index key apart: float64, part.
func hitOf(key, verdict []byte) (Hit, error) {
	if len(key) < 16 || len(verdict) != 1 {
		return Hit{}, errShort
	}
	tail := key[len(key)-16:]
	id, _ := idOf(tail[8:])
	return Hit{ID: id, Value: floatOf(binary.BigEndian.Uint64(tail)), Verdict: verdictOf(verdict[0])}, nil
}
