package entry

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"
)

// Limits on a CSV file.
const (
	MaxLineBytes   = 1 << 20 // one line, and one quoted record
	MaxColumns     = 1000
	maxQuotedLines = 50 // lines that one quoted cell may span before its opening quote counts as a slip
)

// Errors that end the reading of a file.
var (
	ErrEmptyFile  = errors.New("the file is empty; the first line names the columns, such as kind,lot,part,claim,capacitance,esr@120Hz")
	ErrBinaryFile = errors.New("this is not a text file; goodbin reads CSV saved as UTF-8")
	ErrUTF16File  = errors.New("the file is UTF-16; save it as CSV UTF-8")
)

// A recordError spoils one record and leaves the rest readable.
type recordError struct{ problem string }

func (e *recordError) Error() string { return e.problem }

// records reads the records of a CSV file one by one. It recovers at the next line from whatever it cannot read, which the reader of
// the standard library does not do after an unclosed quote.
type records struct {
	in        *bufio.Reader
	delimiter byte
	line      int      // number of the last line read, from 1
	pending   []string // lines read ahead while a quote was open, to be read again
	fields    []string
}

func newRecords(in io.Reader) *records {
	return &records{in: bufio.NewReaderSize(in, MaxLineBytes), delimiter: ','}
}

// check looks at the start of the file for what is no CSV at all, and skips a byte order mark.
func (r *records) check() error {
	head, err := r.in.Peek(4096)
	if err != nil && !errors.Is(err, io.EOF) && !errors.Is(err, bufio.ErrBufferFull) {
		return err
	}
	switch {
	case bytes.HasPrefix(head, []byte("\xef\xbb\xbf")):
		_, err := r.in.Discard(3)
		return err
	case bytes.HasPrefix(head, []byte("\xff\xfe")), bytes.HasPrefix(head, []byte("\xfe\xff")):
		return ErrUTF16File
	case bytes.IndexByte(head, 0) >= 0:
		return ErrBinaryFile
	}
	return nil
}

// nextLine returns the next line without its end. It returns a recordError for a line that is too long and has been skipped.
func (r *records) nextLine() (string, error) {
	r.line++
	if len(r.pending) > 0 {
		line := r.pending[0]
		r.pending = r.pending[1:]
		return line, nil
	}
	raw, err := r.in.ReadSlice('\n')
	switch {
	case errors.Is(err, bufio.ErrBufferFull):
		for errors.Is(err, bufio.ErrBufferFull) {
			_, err = r.in.ReadSlice('\n')
		}
		return "", &recordError{fmt.Sprintf("the line is longer than %d bytes", MaxLineBytes)}
	case errors.Is(err, io.EOF) && len(raw) == 0:
		r.line--
		return "", io.EOF
	case err != nil && !errors.Is(err, io.EOF):
		return "", err
	}
	return string(bytes.TrimRight(raw, "\r\n")), nil
}

// next returns the cells of the next record that is not blank, and the line it begins at. The cells are good until the next call. A
// recordError leaves the reader at the line after the one it is about.
func (r *records) next() (cells []string, line int, err error) {
	for {
		text, err := r.nextLine()
		line = r.line
		if err != nil {
			return nil, max(line, 1), err
		}
		if strings.TrimSpace(text) == "" {
			continue
		}
		if err := checkText(text); err != nil {
			return nil, line, err
		}
		if strings.IndexByte(text, '"') < 0 {
			cells, err = r.split(text)
		} else {
			cells, err = r.quoted(text)
		}
		return cells, line, err
	}
}

func checkText(text string) error {
	if !utf8.ValidString(text) {
		return &recordError{"the line is not UTF-8; save the file as CSV UTF-8"}
	}
	if i := strings.IndexFunc(text, func(c rune) bool { return c < ' ' && c != '\t' || c == 0x7f }); i >= 0 {
		return &recordError{fmt.Sprintf("control character %q in the line", text[i])}
	}
	return nil
}

// split cuts a line that holds no quotes.
func (r *records) split(text string) ([]string, error) {
	r.fields = r.fields[:0]
	for {
		i := strings.IndexByte(text, r.delimiter)
		if i < 0 {
			r.fields = append(r.fields, strings.TrimSpace(text))
			return r.fields, nil
		}
		if len(r.fields) == MaxColumns {
			return nil, &recordError{fmt.Sprintf("the row has more than %d columns", MaxColumns)}
		}
		r.fields = append(r.fields, strings.TrimSpace(text[:i]))
		text = text[i+1:]
	}
}

// quoted cuts a record with quoted cells, which may span lines (RFC 4180, 2). Text after a closing quote, and an opening quote inside a
// cell, are slips.
func (r *records) quoted(text string) ([]string, error) {
	r.fields = r.fields[:0]
	var ahead []string
	giveUp := func(why string) ([]string, error) {
		r.pending = append(ahead, r.pending...)
		r.line -= len(ahead)
		return nil, &recordError{why}
	}
	for {
		if len(r.fields) == MaxColumns {
			return giveUp(fmt.Sprintf("the row has more than %d columns", MaxColumns))
		}
		trimmed := strings.TrimLeft(text, " ")
		if !strings.HasPrefix(trimmed, `"`) {
			cell, rest, more := strings.Cut(text, string(r.delimiter))
			if strings.Contains(cell, `"`) {
				return giveUp(fmt.Sprintf("column %d: a quote inside a cell; quote the whole cell and double its quotes", len(r.fields)+1))
			}
			r.fields = append(r.fields, strings.TrimSpace(cell))
			if !more {
				return r.fields, nil
			}
			text = rest
			continue
		}
		cell, rest, closed := closeQuote(trimmed[1:])
		for !closed {
			line, err := r.nextLine()
			if !errors.Is(err, io.EOF) {
				ahead = append(ahead, line) // blank for a line that was skipped, so that lines keep their numbers
			}
			if err != nil || checkText(line) != nil || len(ahead) > maxQuotedLines || len(trimmed)+len(line) > MaxLineBytes {
				return giveUp(fmt.Sprintf("column %d: the quote is never closed", len(r.fields)+1))
			}
			trimmed += "\n" + line
			cell, rest, closed = closeQuote(trimmed[1:])
		}
		r.fields = append(r.fields, strings.TrimSpace(cell))
		rest = strings.TrimLeft(rest, " ")
		if rest == "" {
			return r.fields, nil
		}
		if rest[0] != r.delimiter {
			return giveUp(fmt.Sprintf("column %d: text after the closing quote", len(r.fields)))
		}
		text = rest[1:]
	}
}

// closeQuote reads a quoted cell up to its closing quote.
func closeQuote(text string) (cell, rest string, closed bool) {
	from := 0
	for {
		i := strings.IndexByte(text[from:], '"')
		if i < 0 {
			return "", "", false
		}
		i += from
		if i+1 < len(text) && text[i+1] == '"' {
			from = i + 2
			continue
		}
		return strings.ReplaceAll(text[:i], `""`, `"`), text[i+1:], true
	}
}
