package inventory

import (
	"bytes"
	"context"
	"fmt"
	"slices"
)

// pageWalk visits every page that a database reaches, each once.
type pageWalk struct {
	*pages
	ctx      context.Context
	seen     []bool
	problems *problems
}

// MaxProblems is how many problems a report names; there may be more.
const MaxProblems = 50

// problems collects what is wrong, up to MaxProblems.
type problems struct{ list []string }

func (p *problems) add(format string, args ...any) {
	if len(p.list) < MaxProblems {
		p.list = append(p.list, fmt.Sprintf(format, args...))
	}
}

func (p *problems) full() bool { return len(p.list) >= MaxProblems }

// walkAll checks the structure of the whole file: every page inside the file, reached once, its entries inside it and in order; every page
// that is not reached is on the list of free ones, and none is both.
func (p *pages) walkAll(ctx context.Context, found *problems) error {
	w := &pageWalk{pages: p, ctx: ctx, seen: make([]bool, p.high), problems: found}
	w.seen[0], w.seen[1] = true, true
	free := w.readFreelist()
	root, err := w.visit(p.root)
	if err != nil {
		found.add("%v", err)
		return ctx.Err()
	}
	if err := w.tree(root, nil, nil, 0); err != nil {
		return err
	}
	for _, id := range free {
		if w.seen[id] {
			found.add("page %d is in use and on the list of free pages", id)
			continue
		}
		w.seen[id] = true
	}
	if p.freelist != noFreelist && len(found.list) == 0 {
		for id, seen := range w.seen {
			if !seen {
				found.add("page %d is neither in use nor on the list of free pages", id)
			}
		}
	}
	return nil
}

// visit reads a page and marks it; one that was reached before is an error, which also ends circles.
func (w *pageWalk) visit(id uint64) (page, error) {
	g, err := w.page(id)
	if err != nil {
		return g, err
	}
	for n := range g.spans {
		if w.seen[id+n] {
			return g, fmt.Errorf("page %d is reached twice", id+n)
		}
		w.seen[id+n] = true
	}
	return g, nil
}

// tree checks a page and what hangs below it. Keys must lie from low (inclusive; nil: open) to below high (nil: open). Only an interrupted
// context is returned as an error; what is wrong goes to the problems.
func (w *pageWalk) tree(g page, low, high []byte, depth int) error {
	if err := w.ctx.Err(); err != nil {
		return err
	}
	if depth > maxDepth || g.flags != flagBranch && g.flags != flagLeaf {
		w.problems.add("page %d is neither branch nor leaf, or lies too deep", g.id)
		return nil
	}
	elements := make([]element, g.count)
	for i := range elements {
		e, err := g.element(i)
		if err != nil {
			w.problems.add("%v", err)
			return nil
		}
		outside := low != nil && bytes.Compare(e.key, low) < 0 || high != nil && bytes.Compare(e.key, high) >= 0
		if outside || i > 0 && bytes.Compare(elements[i-1].key, e.key) >= 0 {
			w.problems.add("page %d: entry %d is out of order", g.id, i)
			return nil
		}
		elements[i] = e
	}
	for i, e := range elements {
		if w.problems.full() {
			return nil
		}
		var err error
		switch {
		case g.flags == flagBranch:
			childHigh := high
			if i+1 < len(elements) {
				childHigh = elements[i+1].key
			}
			err = w.child(e, childHigh, depth)
		case e.bucket:
			err = w.bucket(e, depth)
		}
		if err != nil {
			return err
		}
	}
	return nil
}

func (w *pageWalk) child(e element, high []byte, depth int) error {
	g, err := w.visit(e.child)
	if err != nil {
		w.problems.add("%v", err)
		return nil
	}
	return w.tree(g, e.key, high, depth+1)
}

func (w *pageWalk) bucket(e element, depth int) error {
	if len(e.value) < bucketHead {
		w.problems.add("bucket %q is cut short", e.key)
		return nil
	}
	var g page
	var err error
	if root := native.Uint64(e.value); root != 0 {
		g, err = w.visit(root)
	} else {
		g, err = inline(e.value)
	}
	if err != nil {
		w.problems.add("bucket %q: %v", e.key, err)
		return nil
	}
	return w.tree(g, nil, nil, depth+1)
}

// readFreelist returns the ids on the list of free pages that lie inside the file.
func (w *pageWalk) readFreelist() []uint64 {
	if w.freelist == noFreelist {
		return nil
	}
	g, err := w.visit(w.freelist)
	if err != nil {
		w.problems.add("list of free pages: %v", err)
		return nil
	}
	ids, err := g.freeIDs(w.high)
	if err != nil {
		w.problems.add("%v", err)
	}
	return ids
}

// freeIDs reads a freelist page; the ids must ascend and lie inside the file.
func (g page) freeIDs(high uint64) ([]uint64, error) {
	if g.flags != flagFreelist {
		return nil, fmt.Errorf("page %d is not a list of free pages", g.id)
	}
	count, at := uint64(g.count), uint64(pageHead)
	if count == countElsewhere {
		count, at = native.Uint64(g.data[at:]), at+8
	}
	if count > (uint64(len(g.data))-at)/8 {
		return nil, fmt.Errorf("page %d: the list of free pages is longer than its page", g.id)
	}
	ids := make([]uint64, count)
	for i := range ids {
		ids[i] = native.Uint64(g.data[at+8*uint64(i):])
	}
	bad := func(id uint64) bool { return id < 2 || id >= high }
	if slices.ContainsFunc(ids, bad) || !strictlyAscending(ids) {
		return nil, fmt.Errorf("page %d: the list of free pages is out of order", g.id)
	}
	return ids, nil
}

func strictlyAscending(ids []uint64) bool {
	for i := 1; i < len(ids); i++ {
		if ids[i-1] >= ids[i] {
			return false
		}
	}
	return true
}
