package inventory

import (
	"bytes"
	"encoding/binary"
	"errors"
	"fmt"
	"hash/fnv"
	"io"
)

// bbolt trusts its file: it maps it and follows what it reads, so that a damaged page can end the whole process (a fault outside the map
// in a goroutine of its own, a page that is its own child). The reader below follows the same pages with plain reads, checks every offset,
// and never visits a page twice. Open uses it to know a workbook before bbolt sees the file, Verify to walk all of it.
//
// The format is that of bbolt's version 2: pages of pageSize bytes, each with a head of id, flags, count, overflow; pages 0 and 1 are metas.

const (
	boltMagic      = 0xED0CDAED
	boltVersion    = 2
	pageHead       = 16
	elementSize    = 16
	bucketHead     = 16 // root page id, sequence
	flagBranch     = 0x01
	flagLeaf       = 0x02
	flagFreelist   = 0x10
	elementBucket  = 0x01
	maxDepth       = 32
	noFreelist     = ^uint64(0)
	smallestPage   = 1024
	largestPage    = 64 << 10
	metaSize       = 64
	metaBeforeSum  = 56
	countElsewhere = 0xFFFF // a freelist page with so many ids that the first element is the count
)

var (
	errNoMagic  = errors.New("no page says that this is a database")
	errBadMeta  = errors.New("neither of the two head pages is whole")
	errTooShort = errors.New("the file is shorter than its head says")
)

// native is the byte order of the file: bbolt writes the machine's.
var native = binary.NativeEndian

// pages reads a bbolt file by plain reads.
type pages struct {
	file     io.ReaderAt
	size     int64
	pageSize int64
	root     uint64
	freelist uint64
	high     uint64 // one past the last page in use
	txid     uint64
}

// openPages reads the two head pages and takes the newer whole one.
func openPages(file io.ReaderAt, size int64) (*pages, error) {
	var best *pages
	magic := false
	try := func(offset int64) {
		p, seen := readMeta(file, size, offset)
		magic = magic || seen
		if p != nil && (offset == 0 || p.pageSize == offset) && (best == nil || p.txid > best.txid) {
			best = p
		}
	}
	try(0)
	for offset := int64(smallestPage); offset <= largestPage; offset *= 2 {
		try(offset)
	}
	switch {
	case !magic:
		return nil, errNoMagic
	case best == nil:
		return nil, errBadMeta
	case best.high < 4 || best.high > uint64(best.size/best.pageSize):
		return nil, errTooShort
	}
	return best, nil
}

// readMeta reads the head page at an offset; it is nil where it is not whole. magic reports whether it at least began like one.
func readMeta(file io.ReaderAt, size, offset int64) (p *pages, magic bool) {
	var page [pageHead + metaSize]byte
	if _, err := file.ReadAt(page[:], offset); err != nil {
		return nil, false
	}
	meta := page[pageHead:]
	if native.Uint32(meta) != boltMagic {
		return nil, false
	}
	if native.Uint32(meta[4:]) != boltVersion || native.Uint64(meta[metaBeforeSum:]) != metaSum(meta) {
		return nil, true
	}
	p = &pages{
		file: file, size: size, pageSize: int64(native.Uint32(meta[8:])), root: native.Uint64(meta[16:]),
		freelist: native.Uint64(meta[32:]), high: native.Uint64(meta[40:]), txid: native.Uint64(meta[48:]),
	}
	if p.pageSize < smallestPage || p.pageSize > largestPage || p.pageSize&(p.pageSize-1) != 0 {
		return nil, true
	}
	return p, true
}

// metaSum is the checksum of a head page: FNV-1a over all before it.
func metaSum(meta []byte) uint64 {
	sum := fnv.New64a()
	sum.Write(meta[:metaBeforeSum])
	return sum.Sum64()
}

// page is one page with its overflow, or an inline bucket inside a value.
type page struct {
	id    uint64
	data  []byte
	flags uint16
	count int
	spans uint64 // how many page numbers it takes
}

func (p *pages) page(id uint64) (page, error) {
	if id < 2 || id >= p.high {
		return page{}, fmt.Errorf("page %d is outside the file", id)
	}
	var head [pageHead]byte
	if _, err := p.file.ReadAt(head[:], int64(id)*p.pageSize); err != nil {
		return page{}, fmt.Errorf("page %d: %w", id, err)
	}
	spans := uint64(native.Uint32(head[12:])) + 1
	if got := native.Uint64(head[:]); got != id {
		return page{}, fmt.Errorf("page %d says that it is page %d", id, got)
	}
	if spans > p.high-id {
		return page{}, fmt.Errorf("page %d reaches beyond the end of the file", id)
	}
	data := make([]byte, int64(spans)*p.pageSize)
	if _, err := p.file.ReadAt(data, int64(id)*p.pageSize); err != nil {
		return page{}, fmt.Errorf("page %d: %w", id, err)
	}
	return page{id: id, data: data, flags: native.Uint16(head[8:]), count: int(native.Uint16(head[10:])), spans: spans}, nil
}

// inline makes a page of a bucket that is stored inside its parent's leaf.
func inline(value []byte) (page, error) {
	if len(value) < bucketHead+pageHead {
		return page{}, errors.New("a bucket stored in its parent is cut short")
	}
	data := value[bucketHead:]
	return page{data: data, flags: native.Uint16(data[8:]), count: int(native.Uint16(data[10:]))}, nil
}

// element is one entry of a branch (child) or leaf (value, and whether it is a bucket).
type element struct {
	key, value []byte
	child      uint64
	bucket     bool
}

// element reads entry i with every offset checked.
func (g page) element(i int) (element, error) {
	at := pageHead + i*elementSize
	if i >= g.count || at+elementSize > len(g.data) {
		return element{}, fmt.Errorf("page %d: entry %d is outside the page", g.id, i)
	}
	raw := g.data[at:]
	part := func(start, n uint64) ([]byte, error) {
		if start > uint64(len(raw)) || n > uint64(len(raw))-start {
			return nil, fmt.Errorf("page %d: entry %d points outside the page", g.id, i)
		}
		return raw[start : start+n], nil
	}
	if g.flags == flagBranch {
		key, err := part(uint64(native.Uint32(raw)), uint64(native.Uint32(raw[4:])))
		return element{key: key, child: native.Uint64(raw[8:])}, err
	}
	start, keySize := uint64(native.Uint32(raw[4:])), uint64(native.Uint32(raw[8:]))
	key, err := part(start, keySize)
	if err != nil {
		return element{}, err
	}
	value, err := part(start+keySize, uint64(native.Uint32(raw[12:])))
	return element{key: key, value: value, bucket: native.Uint32(raw)&elementBucket != 0}, err
}

// bucketPage returns the page at which a bucket begins.
func (p *pages) bucketPage(e element) (page, error) {
	if !e.bucket || len(e.value) < bucketHead {
		return page{}, fmt.Errorf("%q is not a bucket", e.key)
	}
	if root := native.Uint64(e.value); root != 0 {
		return p.page(root)
	}
	return inline(e.value)
}

// find looks a key up from a page down. ok is false where it is not there.
func (p *pages) find(g page, key []byte) (e element, ok bool, err error) {
	for range maxDepth {
		switch g.flags {
		case flagLeaf:
			for i := range g.count {
				e, err := g.element(i)
				if err != nil {
					return e, false, err
				}
				if bytes.Equal(e.key, key) {
					return e, true, nil
				}
			}
			return element{}, false, nil
		case flagBranch:
			child := uint64(0)
			for i := range g.count {
				e, err := g.element(i)
				if err != nil {
					return e, false, err
				}
				if i > 0 && bytes.Compare(e.key, key) > 0 {
					break
				}
				child = e.child
			}
			if g, err = p.page(child); err != nil {
				return element{}, false, err
			}
		default:
			return element{}, false, fmt.Errorf("page %d is neither branch nor leaf", g.id)
		}
	}
	return element{}, false, errors.New("the pages lead in a circle")
}

// meta looks a key up in the bucket named meta: that tells a goodbin workbook from any other database.
func (p *pages) meta(key []byte) (value []byte, ok bool, err error) { return p.value(bucketMeta, key) }

// value looks a key up in a top-level bucket. ok is false where bucket or key is not there.
func (p *pages) value(name, key []byte) (value []byte, ok bool, err error) {
	root, err := p.page(p.root)
	if err != nil {
		return nil, false, err
	}
	bucket, ok, err := p.find(root, name)
	if err != nil || !ok || !bucket.bucket {
		return nil, false, err
	}
	top, err := p.bucketPage(bucket)
	if err != nil {
		return nil, false, err
	}
	e, ok, err := p.find(top, key)
	return e.value, ok && !e.bucket, err
}
