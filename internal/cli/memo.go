package cli

import (
	"slices"
	"sync"

	"goodbin/screening"
)

// maxMemo bounds how many claims a screening remembers the limits of.
const maxMemo = 2000

// claimIdentity identifies a claim by the memory it lies in. Rows that claim the same share theirs (see entry.CSV), claims are never changed in
// place, and an entry of a map keeps its memory from being used again, so the same identity means the same claim.
type claimIdentity struct {
	ratings *screening.Rating
	traits  *screening.Trait
	counts  [2]int
}

func identityOf(c screening.Claim) claimIdentity {
	id := claimIdentity{counts: [2]int{len(c.Ratings), len(c.Traits)}}
	if len(c.Ratings) > 0 {
		id.ratings = &c.Ratings[0]
	}
	if len(c.Traits) > 0 {
		id.traits = &c.Traits[0]
	}
	return id
}

type completed struct {
	claim screening.Claim
	notes []screening.Reason
	err   error
}

type limited struct {
	limits []screening.Limit
	err    error
}

// memo remembers results by the claim they were computed from.
type memo[T any] struct {
	mu    sync.RWMutex
	known map[claimIdentity]T
}

func (m *memo[T]) get(c screening.Claim, compute func() T) T {
	id := identityOf(c)
	m.mu.RLock()
	got, ok := m.known[id]
	m.mu.RUnlock()
	if ok {
		return got
	}
	got = compute()
	m.mu.Lock()
	if len(m.known) < maxMemo {
		m.known[id] = got
	}
	m.mu.Unlock()
	return got
}

// remembering returns the rulebook with Complete and Limits computed once a claim: a box holds few claims and many parts. Limits depend on
// claims alone, so nothing else changes.
func remembering(book *screening.Rulebook) *screening.Rulebook {
	fast := *book
	if book.Complete != nil {
		m := &memo[completed]{known: map[claimIdentity]completed{}}
		fast.Complete = func(c screening.Claim) (screening.Claim, []screening.Reason, error) {
			got := m.get(c, func() completed {
				claim, notes, err := book.Complete(c)
				return completed{claim, slices.Clip(notes), err} // clipped: whoever appends gets memory of its own
			})
			return got.claim, got.notes, got.err
		}
	}
	if book.Limits != nil {
		m := &memo[limited]{known: map[claimIdentity]limited{}}
		fast.Limits = func(c screening.Claim) ([]screening.Limit, error) {
			got := m.get(c, func() limited {
				limits, err := book.Limits(c)
				return limited{slices.Clip(limits), err}
			})
			return got.limits, got.err
		}
	}
	return &fast
}
