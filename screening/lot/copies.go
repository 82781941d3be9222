package lot

import (
	"encoding/binary"
	"fmt"
	"math"
	"slices"
)

// leastCopied is the fewest equal readings in a row, or readings of a stretch found again, that are worth a word.
const leastCopied = 3

// copies finds equal readings in a row and stretches that come again, beyond what the resolution explains.
func (r *Readings) copies() []Suspicion {
	keys := make([]int, len(r.inOrder))
	for i, x := range r.inOrder {
		keys[i], _ = slices.BinarySearch(r.sorted, x)
	}
	return copied(keys, func(parts []int) string {
		return fmt.Sprintf("%d parts in a row read %s", len(parts), r.print(r.inOrder[parts[0]]))
	})
}

// CopiedRows finds the same in rows of several characteristics a part: rows that are equal throughout stand for one reading. A part that
// lacks a reading has NaN there.
func CopiedRows(rows [][]float64) []Suspicion {
	number := map[string]int{}
	keys := make([]int, len(rows))
	for i, row := range rows {
		b := make([]byte, 0, 8*len(row))
		for _, x := range row {
			if math.IsNaN(x) {
				x = math.NaN() // one pattern for all
			}
			b = binary.BigEndian.AppendUint64(b, math.Float64bits(x+0)) // −0 is 0
		}
		k, known := number[string(b)]
		if !known {
			k = len(number)
			number[string(b)] = k
		}
		keys[i] = k
	}
	return copied(keys, func(parts []int) string {
		return fmt.Sprintf("%d parts in a row have the same readings throughout", len(parts))
	})
}

// copied looks through a sequence of symbols. Of a stretch of equal ones the chance is that of any in a random order of the same readings,
// and so the coarse digit that makes many equal explains itself; of a stretch found again it is the number of pairs of places times the chance
// that so many pairs of readings agree.
func copied(keys []int, run func(parts []int) string) []Suspicion {
	n := len(keys)
	count := map[int]int{}
	for _, k := range keys {
		count[k]++
	}
	var out []Suspicion
	for start := 0; start < n; {
		end := start
		for end < n && keys[end] == keys[start] {
			end++
		}
		if length := end - start; length >= leastCopied {
			if chance := runChance(count, n, length); chance <= FalseAlarm {
				parts := between(start, end)
				out = append(out, Suspicion{
					Kind: Copied, Parts: parts, Chance: chance, Test: "expected number of such runs in random order",
					Why: fmt.Sprintf("%s; readings as coarse as these do so by chance in %s of bags. Copied, or the meter held its value: measure them again",
						run(parts), percent(chance)),
				})
			}
		}
		start = end
	}
	return append(out, repeated(keys, count)...)
}

func between(start, end int) []int {
	parts := make([]int, 0, end-start)
	for i := start; i < end; i++ {
		parts = append(parts, i)
	}
	return parts
}

// runChance returns the expected number of places at which so many readings in a row are equal when the readings stand in random order, and
// so at least the chance of one: (n−r+1)·Σ c(c−1)…(c−r+1)/(n(n−1)…(n−r+1)) over the different readings with their counts c.
func runChance(count map[int]int, n, r int) float64 {
	sum := 0.0
	for _, c := range count {
		if c < r {
			continue
		}
		p := 1.0
		for j := range r {
			p *= float64(c-j) / float64(n-j)
		}
		sum += p
	}
	return math.Min(1, sum*float64(n-r+1))
}

// repeated finds stretches of readings that come again later, long enough not to by chance.
func repeated(keys []int, count map[int]int) []Suspicion {
	n := len(keys)
	agree := 0.0 // chance that two readings are equal
	for _, c := range count {
		agree += float64(c) / float64(n) * float64(c) / float64(n)
	}
	pairs := float64(n) * float64(n) / 2
	length := leastCopied
	if agree < 1 {
		length = max(length, int(math.Ceil(math.Log(FalseAlarm/pairs)/math.Log(agree))))
	}
	if agree >= 1 || 2*length > n {
		return nil
	}
	first := map[uint64]int{}
	var out []Suspicion
	hash := newRolling(keys, length)
	for i := 0; i+length <= n; i++ {
		h := hash.next()
		from, seen := first[h]
		if !seen {
			first[h] = i
			continue
		}
		if from+length > i || !slices.Equal(keys[from:from+length], keys[i:i+length]) || constant(keys[i:i+length]) {
			continue
		}
		end := i + length
		for end < n && from+end-i < i && keys[end] == keys[from+end-i] {
			end++
		}
		chance := math.Min(1, pairs*math.Pow(agree, float64(end-i)))
		out = append(out, Suspicion{
			Kind: Copied, Parts: between(i, end), Chance: chance, Test: "expected number of such repeats among random readings",
			// Places are not what is written on the bag, so the text names none.
			Why: fmt.Sprintf("these %d parts read one by one what the parts %d places before did; by chance in %s of bags. Copied: measure them again",
				end-i, i-from, percent(chance)),
		})
		for ; i+1 < end && i+1+length <= n; i++ { // what was named needs no second word
			hash.next()
		}
	}
	return out
}

func constant(keys []int) bool {
	for _, k := range keys {
		if k != keys[0] {
			return false
		}
	}
	return true
}

// rolling hashes every window of one length in turn.
type rolling struct {
	keys   []int
	length int
	at     int
	hash   uint64
	power  uint64 // base^length
}

const rollingBase = 0x9E3779B97F4A7C15

func newRolling(keys []int, length int) *rolling {
	h := &rolling{keys: keys, length: length, at: -1, power: 1}
	for i := range length {
		h.hash = h.hash*rollingBase + uint64(keys[i]) + 1
		h.power *= rollingBase
	}
	return h
}

// next returns the hash of the next window.
func (h *rolling) next() uint64 {
	h.at++
	if h.at > 0 {
		h.hash = h.hash*rollingBase + uint64(h.keys[h.at+h.length-1]) + 1 - h.power*(uint64(h.keys[h.at-1])+1)
	}
	return h.hash
}
