package inventory

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"goodbin/screening"
)

// model is what the workbook should hold, in plain maps, with every earlier state for undo.
type model struct {
	lots  map[uint32]Lot
	parts map[ID]Part
}

func (m model) clone() model {
	c := model{map[uint32]Lot{}, map[ID]Part{}}
	for k, v := range m.lots {
		c.lots[k] = v
	}
	for k, v := range m.parts {
		c.parts[k] = v
	}
	return c
}

func (m model) ids() []ID {
	var ids []ID
	for id := range m.parts {
		ids = append(ids, id)
	}
	slices.SortFunc(ids, ID.Compare)
	return ids
}

// machine drives workbook and model side by side.
type machine struct {
	w          *Workbook
	now        model
	undo, redo []model
}

func (m *machine) did() {
	m.redo = nil
}

func (m *machine) before() { m.undo = append(m.undo, m.now.clone()) }

func (m *machine) drawLot(t *rapid.T) uint32 { return rapid.Uint32Range(1, 4).Draw(t, "lot") }

func (m *machine) AddLot(t *rapid.T) {
	l := Lot{ID: m.drawLot(t), Kind: "electrolytic", Claim: farads(rapid.Float64Range(1e-6, 1e-2).Draw(t, "c"), 35), Place: "shelf"}
	_, exists := m.now.lots[l.ID]
	got, err := m.w.AddLot(l)
	if exists != errors.Is(err, ErrHeld) || !exists && err != nil {
		t.Fatalf("lot %d exists %v: %v", l.ID, exists, err)
	}
	if err == nil {
		m.before()
		m.now.lots[got.ID] = got
		m.did()
	}
}

func (m *machine) PutLot(t *rapid.T) {
	id := m.drawLot(t)
	l, exists := m.now.lots[id]
	l.ID, l.Kind, l.Place = id, "electrolytic", rapid.SampledFrom([]string{"shelf", "tin 3", ""}).Draw(t, "place")
	reclaimed := rapid.Bool().Draw(t, "another claim")
	if reclaimed {
		l.Claim = farads(rapid.Float64Range(1e-6, 1e-2).Draw(t, "c"), 35)
	}
	changed := !sameClaim(l.Claim, m.now.lots[id].Claim)
	err := m.w.PutLot(l)
	if exists == errors.Is(err, ErrNotFound) || exists && err != nil {
		t.Fatalf("lot %d exists %v: %v", id, exists, err)
	}
	if err != nil {
		return
	}
	m.before()
	l, err = m.w.Lot(id)
	if err != nil {
		t.Fatal(err)
	}
	m.now.lots[id] = l
	for _, pid := range m.now.ids() {
		if p := m.now.parts[pid]; pid.Lot == id && changed && p.Part.Claim.IsZero() {
			p.Outcome.Tables = ""
			m.now.parts[pid] = p
		}
	}
	m.did()
}

func (m *machine) SavePart(t *rapid.T) {
	id := ID{m.drawLot(t), rapid.Uint32Range(0, 5).Draw(t, "number")}
	p := judged(id.Lot, screening.Verdict(rapid.IntRange(0, 6).Draw(t, "verdict")), rapid.Float64Range(1e-6, 1e-2).Draw(t, "c"))
	p.ID.Number = id.Number
	if rapid.Bool().Draw(t, "own claim") {
		p.Part.Claim = farads(rapid.SampledFrom([]float64{1e-6, 2e-6}).Draw(t, "claimed"), 16)
	}
	if rapid.Bool().Draw(t, "own place") {
		p.Place = rapid.SampledFrom([]string{"tin 3", "box"}).Draw(t, "place")
	}
	_, exists := m.now.lots[id.Lot]
	saved, err := m.w.SavePart(p, "saved")
	if exists == errors.Is(err, ErrNotFound) || exists && err != nil {
		t.Fatalf("lot %d exists %v: %v", id.Lot, exists, err)
	}
	if err == nil {
		m.before()
		m.now.parts[saved.ID] = saved
		m.did()
	}
}

func (m *machine) Take(t *rapid.T) {
	ids := m.now.ids()
	if len(ids) == 0 {
		t.Skip("no part")
	}
	id := rapid.SampledFrom(ids).Draw(t, "id")
	err := m.w.Take(id, 1, "")
	p := m.now.parts[id]
	if enough := p.Left() >= 1; enough != (err == nil) || !enough && !errors.Is(err, ErrCount) {
		t.Fatalf("take of %s with %d left: %v", id, p.Left(), err)
	}
	if err == nil {
		m.before()
		p.Taken++
		m.now.parts[id] = p
		m.did()
	}
}

func (m *machine) Undo(t *rapid.T) {
	_, err := m.w.Undo()
	if len(m.undo) == 0 {
		if !errors.Is(err, ErrNoUndo) {
			t.Fatalf("nothing to undo: %v", err)
		}
		return
	}
	if err != nil {
		t.Fatal(err)
	}
	m.redo = append(m.redo, m.now)
	m.now = m.undo[len(m.undo)-1]
	m.undo = m.undo[:len(m.undo)-1]
}

func (m *machine) Redo(t *rapid.T) {
	_, err := m.w.Redo()
	if len(m.redo) == 0 {
		if !errors.Is(err, ErrNoUndo) {
			t.Fatalf("nothing to do again: %v", err)
		}
		return
	}
	if err != nil {
		t.Fatal(err)
	}
	m.undo = append(m.undo, m.now)
	m.now = m.redo[len(m.redo)-1]
	m.redo = m.redo[:len(m.redo)-1]
}

// Check compares everything that can be read with what the model says.
func (m *machine) Check(t *rapid.T) {
	page, err := m.w.Find(Query{Order: ByID})
	if err != nil {
		t.Fatal(err)
	}
	ids := m.now.ids()
	if len(page.Rows) != len(ids) || page.Total != len(ids) {
		t.Fatalf("%d rows of %d listed, %d parts", len(page.Rows), page.Total, len(ids))
	}
	var counts Counts
	for i, id := range ids {
		want := m.now.parts[id]
		got, err := m.w.GetPart(id)
		if err != nil {
			t.Fatal(err)
		}
		want.Changed = got.Changed
		if diff := cmp.Diff(want, got, same); diff != "" {
			t.Fatalf("part %s (-model +workbook):\n%s", id, diff)
		}
		counts[want.Outcome.Verdict]++
		place := want.Place
		if place == "" {
			place = m.now.lots[id.Lot].Place
		}
		if r := page.Rows[i]; r.ID != id || r.Verdict != want.Outcome.Verdict || r.Place != place || r.Left != want.Left() {
			t.Fatalf("row %+v of part %+v", r, want)
		}
	}
	if all, err := m.w.Counts(); err != nil || page.Counts != counts || all != counts {
		t.Fatalf("counts are %v and %v, %v; want %v", page.Counts, all, err, counts)
	}
	m.checkValues(t, ids)
}

// checkValues walks ranges of the index and looks for the same parts in the model.
func (m *machine) checkValues(t *rapid.T, ids []ID) {
	low := rapid.Float64Range(1e-6, 1e-2).Draw(t, "low")
	for _, origin := range []Origin{FromClaim, FromReading} {
		var want []Hit
		for _, id := range ids {
			p := m.now.parts[id]
			x := p.Part.Readings[0].Value
			if origin == FromClaim {
				x, _ = Claimed(p, m.now.lots[id.Lot]).Claim.Nominal("capacitance", "")
			}
			if p.InStock() && x >= low {
				want = append(want, Hit{id, x, p.Outcome.Verdict})
			}
		}
		slices.SortStableFunc(want, func(a, b Hit) int {
			switch {
			case a.Value < b.Value:
				return -1
			case a.Value > b.Value:
				return 1
			}
			return a.ID.Compare(b.ID)
		})
		var got []Hit
		for hit, err := range m.w.Values("electrolytic", "capacitance", origin, low, 1) {
			if err != nil {
				t.Fatal(err)
			}
			got = append(got, hit)
		}
		if diff := cmp.Diff(want, got, same); diff != "" {
			t.Fatalf("values %c from %v (-model +index):\n%s", origin, low, diff)
		}
	}
}

func TestWorkbookHoldsWhatAMapWouldHold(t *testing.T) {
	folder := t.TempDir()
	n := 0
	rapid.Check(t, func(t *rapid.T) {
		n++
		path := filepath.Join(folder, fmt.Sprint(n))
		defer os.Remove(path)
		w, err := Open(path, Options{Create: true, Now: clock()})
		if err != nil {
			t.Fatal(err)
		}
		w.db.NoSync = true // what a transaction holds is the question here, not when it is on the disk
		m := &machine{w: w, now: model{map[uint32]Lot{}, map[ID]Part{}}}
		t.Repeat(map[string]func(*rapid.T){
			"": m.Check, "AddLot": m.AddLot, "PutLot": m.PutLot, "SavePart": m.SavePart, "SavePart again": m.SavePart, "Take": m.Take,
			"Undo": m.Undo, "Redo": m.Redo,
		})
		if err := w.Close(); err != nil {
			t.Fatal(err)
		}
		if report, err := Verify(path); err != nil {
			t.Fatalf("%v: %v", err, report.Problems)
		}
	})
}
