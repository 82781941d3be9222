package inventory

import (
	"cmp"
	"slices"
	"strings"

	"goodbin/screening"
)

// finding is a search with its results, kept for the next one: a filter that only grew looks through what matched before, and another page
// of the same list is only cut out of it.
type finding struct {
	query   Query // with Words folded, Offset and Limit 0
	words   []wordMatch
	matched []int32 // rows that match all but Verdicts and Usable, in the order of ids
	counts  Counts
	listed  []int32 // what is listed, in the order asked for
}

// wordMatch is a word with the texts that contain it.
type wordMatch struct {
	word    string
	id      idWord
	texts   []bool // by number of text
	verdict [7]bool
}

func (s *snapshot) find(q Query) Page {
	offset, limit := max(0, q.Offset), q.Limit
	q.Offset, q.Limit = 0, 0
	q.Words = foldWords(q.Words)
	f := s.last
	if f == nil || !sameQuery(f.query, q) {
		f = s.run(q)
		s.last = f
	}
	listed := f.listed[min(offset, len(f.listed)):]
	if limit > 0 && limit < len(listed) {
		listed = listed[:limit]
	}
	p := Page{Total: len(f.listed), Counts: f.counts, Rows: make([]Row, len(listed))}
	for i, n := range listed {
		p.Rows[i] = s.row(int(n))
	}
	return p
}

// foldWords folds words and splits those that hold spaces.
func foldWords(words []string) []string {
	var folded []string
	for _, w := range words {
		folded = append(folded, strings.Fields(fold(w))...)
	}
	return folded
}

// sameBase compares all of two queries but words, verdicts and order.
func sameBase(a, b Query) bool {
	return a.Place == b.Place && a.Lot == b.Lot && a.Stale == b.Stale && slices.Equal(a.Kinds, b.Kinds)
}

func sameQuery(a, b Query) bool {
	return sameBase(a, b) && a.Usable == b.Usable && a.Order == b.Order && slices.Equal(a.Words, b.Words) && slices.Equal(a.Verdicts, b.Verdicts)
}

func (s *snapshot) run(q Query) *finding {
	f := &finding{query: q}
	narrowed := s.last != nil && sameBase(s.last.query, q) && grown(s.last.query.Words, q.Words)
	for i, word := range q.Words {
		var within *wordMatch
		if narrowed && i < len(s.last.words) {
			within = &s.last.words[i]
		}
		f.words = append(f.words, s.match(word, within))
	}
	keep := s.filter(f)
	if narrowed {
		f.matched = make([]int32, 0, len(s.last.matched))
		for _, i := range s.last.matched {
			if keep(&s.rows[i]) {
				f.matched = append(f.matched, i)
			}
		}
	} else {
		f.matched = make([]int32, 0, len(s.rows))
		for i := range s.rows {
			if keep(&s.rows[i]) {
				f.matched = append(f.matched, int32(i))
			}
		}
	}
	for _, i := range f.matched {
		f.counts[s.rows[i].verdict]++
	}
	s.list(f)
	return f
}

// grown reports whether words only ask for more than before: each earlier one is the beginning of the one now in its place.
func grown(before, now []string) bool {
	if len(before) > len(now) {
		return false
	}
	for i, w := range before {
		if !strings.HasPrefix(now[i], w) {
			return false
		}
	}
	return true
}

// match finds the texts that contain a word; within those that contained the beginning of it, where given.
func (s *snapshot) match(word string, within *wordMatch) wordMatch {
	m := wordMatch{word: word, id: parseIDWord(word)}
	for v := range m.verdict {
		m.verdict[v] = strings.Contains(screening.Verdict(v).String(), word)
	}
	if within != nil && within.word == word {
		m.texts = within.texts
		return m
	}
	m.texts = make([]bool, len(s.texts))
	for i := range s.texts {
		if within != nil && !within.texts[i] {
			continue
		}
		m.texts[i] = strings.Contains(s.texts[i].folded, word)
	}
	return m
}

// has reports whether a row matches the word.
func (m *wordMatch) has(r *memRow) bool {
	return m.texts[r.title] || m.texts[r.why] || m.texts[r.place] || m.texts[r.as] || m.texts[r.kind] || m.verdict[r.verdict] ||
		m.id.digits != 0 && m.id.matches(idPacked(r.id))
}

// filter returns what decides whether a row matches all of a query but verdict and stock.
func (s *snapshot) filter(f *finding) func(*memRow) bool {
	q, words := &f.query, f.words
	var kinds, places []bool
	if len(q.Kinds) > 0 {
		kinds = make([]bool, len(s.texts))
		for _, k := range q.Kinds {
			if n, ok := s.byText[string(k)]; ok {
				kinds[n] = true
			}
		}
	}
	if place := fold(q.Place); place != "" {
		places = make([]bool, len(s.texts))
		for i := range s.texts {
			places[i] = strings.HasPrefix(s.texts[i].folded, place)
		}
	}
	return func(r *memRow) bool {
		if kinds != nil && !kinds[r.kind] || places != nil && !places[r.place] || q.Lot != 0 && uint32(r.id>>32) != q.Lot || q.Stale && !r.stale {
			return false
		}
		for i := range words {
			if !words[i].has(r) {
				return false
			}
		}
		return true
	}
}

// list picks what is listed from what matched, and orders it.
func (s *snapshot) list(f *finding) {
	wanted := func(r *memRow) bool { return true }
	if q := &f.query; len(q.Verdicts) > 0 || q.Usable {
		var verdicts [7]bool
		for v := range verdicts {
			verdicts[v] = len(q.Verdicts) == 0 || slices.Contains(q.Verdicts, screening.Verdict(v))
		}
		wanted = func(r *memRow) bool { return verdicts[r.verdict] && (!q.Usable || r.inStock()) }
	}
	rank := func(*memRow) int { return 0 }
	ranks := 1
	switch f.query.Order {
	case UsableFirst:
		ranks, rank = 8, usableRank
	case ByPlace:
		order := s.placeRanks(f)
		ranks, rank = len(s.texts), func(r *memRow) int { return int(order[r.place]) }
	}
	// The rows are in the order of ids already: counting them by rank keeps that order within each.
	starts := make([]int32, ranks+1)
	for _, i := range f.matched {
		if r := &s.rows[i]; wanted(r) {
			starts[rank(r)+1]++
		}
	}
	for i := 1; i < len(starts); i++ {
		starts[i] += starts[i-1]
	}
	f.listed = make([]int32, starts[ranks])
	for _, i := range f.matched {
		if r := &s.rows[i]; wanted(r) {
			at := rank(r)
			f.listed[starts[at]] = i
			starts[at]++
		}
	}
}

// usableRank puts the verdicts in their order, then what is not judged yet, then what is all taken.
func usableRank(r *memRow) int {
	if r.verdict.Usable() && !r.inStock() {
		return 7
	}
	return int(r.verdict+6) % 7
}

// placeRanks orders the places of what matched; parts without a place come last.
func (s *snapshot) placeRanks(f *finding) []int32 {
	used := make([]bool, len(s.texts))
	var places []uint32
	for _, i := range f.matched {
		if n := s.rows[i].place; !used[n] {
			used[n] = true
			places = append(places, n)
		}
	}
	slices.SortFunc(places, func(a, b uint32) int {
		if (a == 0) != (b == 0) {
			return cmp.Compare(b, a)
		}
		return cmp.Or(cmp.Compare(s.texts[a].folded, s.texts[b].folded), cmp.Compare(a, b))
	})
	ranks := make([]int32, len(s.texts))
	for i, n := range places {
		ranks[n] = int32(i)
	}
	return ranks
}
