package inventory

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"runtime"
	"runtime/debug"
	"strconv"
	"strings"
	"time"
	"unicode/utf8"

	bolt "go.etcd.io/bbolt"
	berrors "go.etcd.io/bbolt/errors"
)

func quote(path string) string { return strconv.Quote(path) }

// Open opens the workbook at path. Errors wrap ErrNotFound, ErrBusy, ErrForeign, ErrNewer, ErrCorrupt, ErrReadOnly, ErrFull. A file that
// is not a goodbin workbook is never written to.
func Open(path string, opts Options) (*Workbook, error) {
	if opts.Timeout == 0 {
		opts.Timeout = DefaultTimeout
	}
	if opts.Now == nil {
		opts.Now = time.Now
	}
	err := recognise(path)
	if errors.Is(err, fs.ErrNotExist) && opts.Create && !opts.ReadOnly {
		if err = create(path, opts.Now()); err == nil {
			err = recognise(path)
		}
	}
	if err != nil {
		return nil, err
	}
	db, err := openBolt(path, opts)
	if err != nil {
		return nil, err
	}
	w := &Workbook{path: path, db: db, opts: opts}
	if !opts.ReadOnly {
		w.lock = writeSidecar(path, opts.Now())
		err = guard(path, func() error { return migrate(db, path, schemaVersion, migrations) })
	}
	if err == nil {
		err = w.readPosition()
	}
	if err != nil {
		w.lock.remove()
		db.Close()
		return nil, err
	}
	return w, nil
}

// openBolt opens a file that recognise has found to be a workbook.
func openBolt(path string, opts Options) (db *bolt.DB, err error) {
	var file *os.File
	options := &bolt.Options{
		Timeout: opts.Timeout, ReadOnly: opts.ReadOnly, FreelistType: bolt.FreelistMapType,
		// Without O_CREATE: a file that vanished meanwhile is not made anew, empty.
		OpenFile: func(name string, flag int, mode os.FileMode) (*os.File, error) {
			f, err := os.OpenFile(name, flag&^os.O_CREATE, mode)
			if file == nil {
				file = f
			}
			return f, err
		},
	}
	if !opts.ReadOnly && runtime.GOOS != "windows" {
		// A commit that must grow the map waits for every reader. On Windows the file itself would grow to this size.
		options.InitialMmapSize = 256 << 20
	}
	err = guard(path, func() error {
		db, err = bolt.Open(path, 0o600, options)
		return err
	})
	if err != nil && db == nil && file != nil {
		file.Close() // after a panic inside bbolt, also its lock
	}
	switch {
	case errors.Is(err, berrors.ErrTimeout):
		return nil, failFrom(ErrBusy, err, busyText(path))
	case errors.Is(err, fs.ErrPermission), isReadOnly(err):
		if opts.ReadOnly {
			return nil, failFrom(ErrReadOnly, err, quote(path)+" may not be read; check its permissions")
		}
		return nil, failFrom(ErrReadOnly, err, quote(path)+" cannot be written; check its permissions, or open it for reading only")
	case errors.Is(err, berrors.ErrInvalid), errors.Is(err, berrors.ErrChecksum), errors.Is(err, berrors.ErrVersionMismatch):
		return nil, corrupt(path, err)
	case err != nil:
		return nil, fmt.Errorf("open %s: %w", quote(path), err)
	}
	return db, nil
}

// guard runs what reads a file that may be damaged. A panic in it, or a fault in the mapped file, becomes ErrCorrupt. It cannot help where
// another goroutine faults.
func guard(path string, read func() error) (err error) {
	before := debug.SetPanicOnFault(true)
	defer debug.SetPanicOnFault(before)
	defer func() {
		if r := recover(); r != nil {
			err = corrupt(path, fmt.Errorf("%v", r))
		}
	}()
	err = read()
	if errors.Is(err, ErrCorrupt) && !strings.Contains(err.Error(), quote(path)) {
		return corrupt(path, err) // a record's error names the record; the file and what to do come here
	}
	return err
}

func corrupt(path string, cause error) error {
	text := "%s is damaged (%v): keep the file as it is, and go on with the newest backup; `goodbin verify` lists what is wrong"
	return failFrom(ErrCorrupt, cause, fmt.Sprintf(text, quote(path), cause))
}

// recognise tells a goodbin workbook from anything else by plain reads, before bbolt sees the file. It retries, since a process that is
// writing may change a page between two reads.
func recognise(path string) error {
	err := recogniseOnce(path)
	for i := 0; i < 3 && errors.Is(err, ErrCorrupt); i++ {
		time.Sleep(3 * time.Millisecond)
		err = recogniseOnce(path)
	}
	return err
}

func recogniseOnce(path string) error {
	file, size, err := openRegular(path)
	if err != nil {
		return err
	}
	defer file.Close()
	p, err := openPages(file, size)
	if errors.Is(err, errNoMagic) {
		return fail(ErrForeign, quote(path)+" is not a goodbin workbook but "+whatIs(file, size)+
			"; nothing was changed: choose another file name, or move it away")
	}
	if err != nil {
		return corrupt(path, err)
	}
	format, ok, err := p.meta(keyFormat)
	if err != nil {
		return corrupt(path, err)
	}
	if !ok || string(format) != formatName {
		return fail(ErrForeign, quote(path)+" is a database of another program, not a goodbin workbook; nothing was changed: choose another file name")
	}
	schema, ok, err := p.meta(keySchema)
	switch {
	case err != nil:
		return corrupt(path, err)
	case !ok || len(schema) != 4:
		return corrupt(path, errors.New("it does not say its schema"))
	}
	version := schemaOf(schema)
	if version > schemaVersion {
		return fail(ErrNewer, fmt.Sprintf("%s is of a newer goodbin (schema %d; this one knows %d): use that version; nothing was changed",
			quote(path), version, schemaVersion))
	}
	return p.sound(path, bucketsOf(version))
}

// sound checks what bbolt reads while it opens a file: the list of free pages and the buckets.
func (p *pages) sound(path string, buckets [][]byte) error {
	if p.freelist != noFreelist {
		g, err := p.page(p.freelist)
		if err == nil {
			_, err = g.freeIDs(p.high)
		}
		if err != nil {
			return corrupt(path, err)
		}
	}
	root, err := p.page(p.root)
	if err != nil {
		return corrupt(path, err)
	}
	for _, name := range buckets {
		e, ok, err := p.find(root, name)
		if err == nil && !ok {
			err = fmt.Errorf("the bucket %s is missing", name)
		}
		if err == nil {
			_, err = p.bucketPage(e)
		}
		if err != nil {
			return corrupt(path, err)
		}
	}
	return nil
}

// openRegular opens a regular file for reading; a pipe or a device would block or never end.
func openRegular(path string) (*os.File, int64, error) {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil, 0, failFrom(ErrNotFound, err, "there is no workbook at "+quote(path)+"; check the name, or let one be made there")
	case err != nil:
		return nil, 0, fmt.Errorf("open workbook: %w", err)
	case info.IsDir():
		return nil, 0, fail(ErrForeign, quote(path)+" is a folder; name a file in it")
	case !info.Mode().IsRegular():
		return nil, 0, fail(ErrForeign, quote(path)+" is not a file on a disk; name one")
	}
	file, err := os.Open(path)
	if err != nil {
		return nil, 0, failFrom(ErrReadOnly, err, quote(path)+" may not be read; check its permissions")
	}
	return file, info.Size(), nil
}

// whatIs says in words what a file that is no database seems to be.
func whatIs(file io.ReaderAt, size int64) string {
	if size == 0 {
		return "an empty file"
	}
	head := make([]byte, min(size, 512))
	n, _ := file.ReadAt(head, 0)
	head = head[:n]
	for i := 0; i < len(head); {
		r, width := utf8.DecodeRune(head[i:])
		if r < ' ' && r != '\n' && r != '\r' && r != '\t' || r == utf8.RuneError && len(head)-i >= utf8.UTFMax {
			return "a binary file of another kind"
		}
		i += width
	}
	return "a text file"
}
