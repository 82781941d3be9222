package inventory

import (
	"cmp"
	"fmt"
	"strconv"
	"strings"
	"time"

	"goodbin/screening"
)

// ID is what is written on a bag: lot and number in the lot. Number 0 stands for the lot itself. It is comparable.
type ID struct {
	Lot    uint32
	Number uint32
}

// String prints the id as it is written on a bag, the number with at least two digits: "12-07"; a lot itself as "12".
func (id ID) String() string {
	if id.IsLot() {
		return strconv.FormatUint(uint64(id.Lot), 10)
	}
	return fmt.Sprintf("%d-%02d", id.Lot, id.Number)
}

// IsLot reports whether the id stands for a lot as a whole.
func (id ID) IsLot() bool { return id.Number == 0 }

// Compare orders ids by lot, then number.
func (id ID) Compare(other ID) int {
	return cmp.Or(cmp.Compare(id.Lot, other.Lot), cmp.Compare(id.Number, other.Number))
}

// ParseID reads what String prints: "12-07", "12-7", or "12" for the lot itself. Lots and parts are numbered from 1.
func ParseID(text string) (ID, error) {
	lot, number, hasNumber := strings.Cut(strings.TrimSpace(text), "-")
	id := ID{Lot: parseNumber(lot)}
	if hasNumber {
		id.Number = parseNumber(number)
	}
	if id.Lot == 0 || hasNumber && id.Number == 0 {
		return ID{}, fail(ErrInvalid, quote(text)+" is not a part's id; an id is lot and part such as 12-07")
	}
	return id, nil
}

// parseNumber reads digits only (no sign, no space); 0 means that it is none.
func parseNumber(text string) uint32 {
	if text == "" || text[0] < '0' || text[0] > '9' {
		return 0
	}
	n, err := strconv.ParseUint(text, 10, 32)
	if err != nil {
		return 0
	}
	return uint32(n)
}

// Honesty says how well a count is known.
type Honesty uint8

// How well a count is known.
const (
	Exact Honesty = iota
	About
	Unknown
)

var honestyNames = [...]string{"exact", "about", "unknown"}

// String returns "exact", "about" or "unknown".
func (h Honesty) String() string { return honestyNames[min(int(h), len(honestyNames)-1)] }

// Count is how many there are, and how well that is known. The zero Count is exactly none.
type Count struct {
	N     int // meaningless where Level is Unknown
	Level Honesty
}

// String prints the count as people say it: "12", "about 40", "unknown".
func (c Count) String() string {
	switch c.Level {
	case Exact:
		return strconv.Itoa(c.N)
	case About:
		return "about " + strconv.Itoa(c.N)
	}
	return "unknown"
}

// Lot is parts that share marking and origin: a bag. A tin of mixed parts is a lot whose rows carry their own claims.
type Lot struct {
	ID      uint32 // set by AddLot where 0
	Kind    screening.Kind
	Header  string          // what it claims, as typed
	Claim   screening.Claim // what it claims, understood
	Mixed   bool            // a tin: every part has its own claim
	Source  string          // where it comes from: "bequest, tin 3"
	Place   string          // where it lies; parts without a place of their own lie there
	Storage string          // how it was stored: "damp cellar, 20 years"
	Note    string
	Made    time.Time // when it was entered; set by AddLot where zero
	Changed time.Time // set by the workbook
	Count   Count     // parts of it that are not kept one by one
}
