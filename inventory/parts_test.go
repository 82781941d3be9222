package inventory

import (
	"errors"
	"math"
	"testing"

	"goodbin/screening"
)

func TestNumbersFollowEachOtherWithinALot(t *testing.T) {
	w := newWorkbook(t)
	a, b := addLot(t, w), addLot(t, w)
	for _, tt := range []struct {
		id   ID
		want string
	}{
		{ID{a.ID, 0}, "1-01"}, {ID{b.ID, 0}, "2-01"}, {ID{a.ID, 0}, "1-02"}, {ID{a.ID, 40}, "1-40"}, {ID{a.ID, 0}, "1-41"}, {ID{b.ID, 0}, "2-02"},
	} {
		p := judged(tt.id.Lot, screening.Accept, 1e-3)
		p.ID = tt.id
		if got := save(t, w, p, "saved"); got.ID.String() != tt.want {
			t.Errorf("part %s got %s, want %s", tt.id, got.ID, tt.want)
		}
	}
	if n, err := w.NextNumber(a.ID); err != nil || n != 42 {
		t.Errorf("next number %d, %v", n, err)
	}
	p := judged(b.ID, screening.Accept, 1e-3)
	p.ID.Number = math.MaxUint32
	save(t, w, p, "saved")
	if _, err := w.NextNumber(b.ID); !errors.Is(err, ErrInvalid) {
		t.Errorf("after the last number: %v", err)
	}
}

func TestWhatCannotBeKeptIsRefusedWhole(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	good := judged(l.ID, screening.Accept, 1e-3)
	for name, tt := range map[string]struct {
		spoil func(*Part)
		want  error
	}{
		"no such lot":             {func(p *Part) { p.ID.Lot = 99 }, ErrNotFound},
		"more taken than counted": {func(p *Part) { p.Count, p.Taken = Count{N: 2}, 3 }, ErrCount},
		"a negative count":        {func(p *Part) { p.Count.N = -1 }, ErrCount},
		"0x00 in a name":          {func(p *Part) { p.Part.Readings[0].Of = "a\x00b" }, ErrInvalid},
		"0x00 in the kind":        {func(p *Part) { p.Part.Kind = "\x00" }, ErrInvalid},
		"a unit nobody knows":     {func(p *Part) { p.Part.Readings[0].Unit = 200 }, ErrInvalid},
	} {
		p := good
		p.Part.Readings = append([]screening.Reading(nil), good.Part.Readings...)
		tt.spoil(&p)
		if _, err := w.SavePart(p, "saved"); !errors.Is(err, tt.want) {
			t.Errorf("%s: %v, want %v", name, err, tt.want)
		}
	}
	if _, err := w.AddLot(Lot{}); !errors.Is(err, ErrInvalid) {
		t.Errorf("a lot without a kind: %v", err)
	}
	if r := mustCheck(t, w); r.Parts != 0 || r.Lots != 1 || r.Entries != 1 {
		t.Errorf("left behind: %+v", r)
	}
}

func TestTakeReturnRecount(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	p := judged(l.ID, screening.Accept, 1e-3)
	p.Count = Count{N: 3}
	id := save(t, w, p, "saved").ID
	lot := ID{Lot: l.ID}
	for _, tt := range []struct {
		name string
		do   func() error
		err  error
		of   ID
		left string
	}{
		{"two of three", func() error { return w.Take(id, 2, "receiver") }, nil, id, "1"},
		{"two of one left", func() error { return w.Take(id, 2, "") }, ErrCount, id, "1"},
		{"more back than out", func() error { return w.Return(id, 3, "") }, ErrCount, id, "1"},
		{"one back", func() error { return w.Return(id, 1, "") }, nil, id, "2"},
		{"none", func() error { return w.Take(id, 0, "") }, ErrCount, id, "2"},
		{"less than none", func() error { return w.Return(id, -1, "") }, ErrCount, id, "2"},
		{"recounted", func() error { return w.Recount(id, Count{N: 7}) }, nil, id, "7"},
		{"recounted below zero", func() error { return w.Recount(id, Count{N: -7}) }, ErrCount, id, "7"},
		{"no such part", func() error { return w.Take(ID{l.ID, 99}, 1, "") }, ErrNotFound, id, "7"},
		{"from an empty lot", func() error { return w.Take(lot, 1, "") }, ErrCount, lot, "0"},
		{"a lot counted by eye", func() error { return w.Recount(lot, Count{N: 40, Level: About}) }, nil, lot, "about 40"},
		{"more than about 40", func() error { return w.Take(lot, 45, "") }, nil, lot, "about 0"},
		{"back into the lot", func() error { return w.Return(lot, 5, "") }, nil, lot, "about 5"},
		{"unknown stays unknown", func() error {
			return errors.Join(w.Recount(lot, Count{Level: Unknown}), w.Take(lot, 3, ""))
		}, nil, lot, "unknown"},
	} {
		if err := tt.do(); !errors.Is(err, tt.err) {
			t.Errorf("%s: %v, want %v", tt.name, err, tt.err)
		}
		got := ""
		if tt.of.IsLot() {
			l, err := w.Lot(l.ID)
			must0(t, err)
			got = l.Count.String()
		} else {
			p, err := w.GetPart(tt.of)
			must0(t, err)
			got = Count{N: p.Left()}.String()
		}
		if got != tt.left {
			t.Errorf("%s: leaves %s, want %s", tt.name, got, tt.left)
		}
	}
}

func TestPartsAreWalkedInOrderAcrossStretches(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	const n = 4*walkStretch + 1
	loadParts(t, w, l.ID, n)
	var last ID
	count := 0
	for p, err := range w.Parts() {
		must0(t, err)
		if p.ID.Compare(last) <= 0 {
			t.Fatalf("%s comes after %s", p.ID, last)
		}
		last = p.ID
		count++
	}
	if count != n {
		t.Errorf("%d walked, want %d", count, n)
	}
	hits := 0
	for _, err := range w.Values("electrolytic", "capacitance", FromReading, math.Inf(-1), math.Inf(1)) {
		must0(t, err)
		hits++
	}
	if c, err := w.Counts(); err != nil || hits != c.Usable() || hits <= walkStretch {
		t.Errorf("%d in the index, %d usable, %v", hits, c.Usable(), err)
	}
	if parts, err := w.PartsOf(l.ID); err != nil || len(parts) != n {
		t.Errorf("%d of the lot, %v", len(parts), err)
	}
}

func TestReopeningLandsOnTheSamePart(t *testing.T) {
	w := newWorkbook(t)
	l := addLot(t, w)
	first := Position{Page: "bench", Lot: l.ID, Part: ID{l.ID, 1}, Column: "esr/"}
	w.SetPosition(first)
	save(t, w, judged(l.ID, screening.Accept, 1e-3), "saved")
	reader := func() Position {
		t.Helper()
		copied := t.TempDir() + "/copy"
		must0(t, w.Backup(t.Context(), copied))
		r := mustOpen(t, copied, Options{ReadOnly: true})
		defer r.Close()
		return r.Position()
	}
	if got := reader(); got != first {
		t.Errorf("with the part that was saved the file says %+v", got)
	}
	second := Position{Page: "stock", Part: ID{l.ID, 9}}
	w.SetPosition(second)
	if got := reader(); got != first || w.Position() != second {
		t.Errorf("a position alone costs no write: file %+v, program %+v", got, w.Position())
	}
	must0(t, w.Close())
	w2 := mustOpen(t, w.Path(), Options{})
	defer w2.Close()
	if got := w2.Position(); got != second {
		t.Errorf("reopened at %+v, want %+v", got, second)
	}
}
