package inventory

import (
	"fmt"
	"strings"
)

func checkCount(c Count) error {
	if c.N < 0 || c.Level > Unknown {
		return fail(ErrCount, fmt.Sprintf("a count of %d makes no sense; use 0 or more", c.N))
	}
	return nil
}

// Take takes n out of the box, of a part or (Number 0) of what a lot counts beside its parts. note says what for. More than there is can
// be taken only where the count is not exact; about 5 less 7 is about 0.
func (w *Workbook) Take(id ID, n int, note string) error {
	return w.recount(id, n, "took", note, func(c Count, taken int) (Count, int, error) {
		if c.Level == Exact && n > c.N-taken {
			return c, taken, fail(ErrCount, fmt.Sprintf("%s: %d asked, %d there; recount it if that is wrong", id, n, c.N-taken))
		}
		return c, taken + n, nil
	})
}

// Return puts n back. More than was taken is refused; Recount is for what turns up beyond that.
func (w *Workbook) Return(id ID, n int, note string) error {
	return w.recount(id, n, "returned", note, func(c Count, taken int) (Count, int, error) {
		if n > taken && !id.IsLot() {
			return c, taken, fail(ErrCount, fmt.Sprintf("%s: %d returned, only %d are out; recount it if that is wrong", id, n, taken))
		}
		return c, taken - n, nil
	})
}

// Recount sets how many there are now; nothing counts as taken after it.
func (w *Workbook) Recount(id ID, to Count) error {
	if err := checkCount(to); err != nil {
		return err
	}
	return w.changeCount(id, "counted "+to.String(), func(Count, int) (Count, int, error) { return to, 0, nil })
}

func (w *Workbook) recount(id ID, n int, verb, note string, step func(Count, int) (Count, int, error)) error {
	if n <= 0 {
		return fail(ErrCount, fmt.Sprintf("%s: %d is not a number to take or return; use 1 or more", id, n))
	}
	action := fmt.Sprintf("%s %d", verb, n)
	return w.changeCount(id, strings.TrimSuffix(action+": "+note, ": "), step)
}

// changeCount journals a change of a part's count, or of a lot's, from which what is taken is simply less.
func (w *Workbook) changeCount(id ID, action string, step func(c Count, taken int) (Count, int, error)) error {
	return w.update(func(c *change) error {
		var text string
		if id.IsLot() {
			l, err := c.lot(id.Lot)
			if err != nil {
				return err
			}
			count, taken, err := step(l.Count, 0)
			if err != nil {
				return err
			}
			if count.Level != Unknown {
				count.N = max(0, count.N-taken)
			}
			text = l.Count.String() + " → " + count.String()
			l.Count, l.Changed = count, c.now
			if err := c.putLot(l); err != nil {
				return err
			}
			return c.commit(action, text)
		}
		p, err := part(c.tx, id)
		if err != nil {
			return err
		}
		before := p.Left()
		if p.Count, p.Taken, err = step(p.Count, p.Taken); err != nil {
			return err
		}
		if p.Count.Level != Unknown {
			text = fmt.Sprintf("%d → %d in the box", before, p.Left())
		}
		p.Changed = c.now
		if err := c.putPart(p); err != nil {
			return err
		}
		return c.commit(action, text)
	})
}
