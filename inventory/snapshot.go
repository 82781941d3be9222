package inventory

import (
	"cmp"
	"errors"
	"slices"

	"goodbin/screening"
)

// snapshot is the row index in memory. Texts that many parts share (a lot's title, a place, "every required reading passes") stand once in
// a list, so a word is looked for in each different text once, however many parts have it; a row then only asks whether one of its texts
// matched. A text that no row has any more stays until the workbook is opened again.
type snapshot struct {
	tables map[screening.Kind]string

	rows   []memRow // in the order of ids
	texts  []text   // text 0 is ""
	byText map[string]uint32
	counts Counts

	last *finding // the last search, which the next one may narrow or page through
}

type text struct{ shown, folded string }

// memRow is a row with its texts by number: 56 bytes.
type memRow struct {
	id                                   uint64
	kind, title, as, place, why, notTest uint32
	count, left                          int32
	verdict                              screening.Verdict
	grade                                screening.Grade
	level                                Honesty
	stale                                bool
}

func newSnapshot(tables map[screening.Kind]string) *snapshot {
	return &snapshot{tables: tables, texts: []text{{}}, byText: map[string]uint32{"": 0}}
}

// intern returns the number of a text. It keeps a copy.
func (s *snapshot) intern(raw []byte) uint32 {
	if n, ok := s.byText[string(raw)]; ok {
		return n
	}
	shown := string(raw)
	n := uint32(len(s.texts))
	s.texts = append(s.texts, text{shown, fold(shown)})
	s.byText[shown] = n
	return n
}

// read takes a sealed row apart into the list's texts.
func (s *snapshot) read(id ID, key, sealed []byte) (memRow, error) {
	payload, err := unseal(key, sealed)
	if err != nil {
		return memRow{}, damaged(err)
	}
	in := rowReader{b: payload}
	r := memRow{id: id.packed(), verdict: verdictOf(in.next()), grade: gradeOf(in.next()), level: honestyOf(in.next())}
	r.count, r.left = int32(in.int()), int32(in.int())
	r.kind, r.title, r.as, r.place = s.intern(in.text()), s.intern(in.text()), s.intern(in.text()), s.intern(in.text())
	r.why, r.notTest = s.intern(in.text()), s.intern(in.text())
	under := in.text()
	if s.tables != nil && r.verdict != screening.NoVerdict {
		r.stale = s.tables[screening.Kind(s.texts[r.kind].shown)] != string(under)
	}
	if in.bad {
		return r, damaged(errShort)
	}
	return r, nil
}

// append adds a row whose id is the largest so far.
func (s *snapshot) append(r memRow) {
	s.rows = append(s.rows, r)
	s.counts[r.verdict]++
}

func (s *snapshot) search(id uint64) (int, bool) {
	return slices.BinarySearchFunc(s.rows, id, func(r memRow, id uint64) int { return cmp.Compare(r.id, id) })
}

// applyLargest is how many changed rows are worth taking one by one; beyond, the list is read again when it is next needed.
const applyLargest = 500

var errReload = errors.New("too many rows changed")

// apply brings the list up to date after a change. On an error it is no longer usable. A nil snapshot has nothing to keep up.
func (s *snapshot) apply(changes []rowChange) error {
	if s == nil || len(changes) == 0 {
		return nil
	}
	if len(changes) > applyLargest {
		return errReload
	}
	s.last = nil
	for _, ch := range changes {
		at, found := s.search(ch.id.packed())
		if found {
			s.counts[s.rows[at].verdict]--
		}
		if ch.sealed == nil {
			if found {
				s.rows = slices.Delete(s.rows, at, at+1)
			}
			continue
		}
		r, err := s.read(ch.id, idKey(ch.id), ch.sealed)
		if err != nil {
			return err
		}
		s.counts[r.verdict]++
		if found {
			s.rows[at] = r
		} else {
			s.rows = slices.Insert(s.rows, at, r)
		}
	}
	return nil
}

// row makes a line of the list.
func (s *snapshot) row(i int) Row {
	r := &s.rows[i]
	title := s.texts[r.title].shown
	if title == "" || title == "nothing" {
		title = "nothing claimed"
	}
	return Row{
		ID: idPacked(r.id), Kind: screening.Kind(s.texts[r.kind].shown), Title: title, Verdict: r.verdict, Grade: r.grade,
		As: s.texts[r.as].shown, Place: s.texts[r.place].shown, Why: s.texts[r.why].shown, NotTested: s.texts[r.notTest].shown,
		Count: Count{N: int(r.count), Level: r.level}, Left: int(r.left), Stale: r.stale,
	}
}

func (r *memRow) inStock() bool { return r.verdict.Usable() && (r.level == Unknown || r.left > 0) }
