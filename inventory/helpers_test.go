package inventory

import (
	"context"
	"fmt"
	"path/filepath"
	"sync"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// clock is a clock that goes on a second at each look.
func clock() func() time.Time {
	now := time.Date(2024, 3, 9, 19, 30, 0, 0, time.UTC)
	var mu sync.Mutex
	return func() time.Time {
		mu.Lock()
		defer mu.Unlock()
		now = now.Add(time.Second)
		return now
	}
}

func mustOpen(t testing.TB, path string, opts Options) *Workbook {
	t.Helper()
	if opts.Now == nil {
		opts.Now = clock()
	}
	w, err := Open(path, opts)
	if err != nil {
		t.Fatal(err)
	}
	return w
}

// newWorkbook opens an empty workbook, and at the end of the test holds everything in it against everything else.
func newWorkbook(t testing.TB) *Workbook {
	t.Helper()
	path := filepath.Join(t.TempDir(), "parts.goodbin")
	w := mustOpen(t, path, Options{Create: true, Tables: map[screening.Kind]string{"electrolytic": "t1", "resistor": "t1"}})
	t.Cleanup(func() { closeAndVerify(t, w) })
	return w
}

func closeAndVerify(t testing.TB, w *Workbook) {
	t.Helper()
	if err := w.Close(); err != nil {
		t.Errorf("close: %v", err)
	}
	if report, err := Verify(w.path); err != nil {
		t.Errorf("the workbook does not verify at the end of the test: %v\n%v", err, report.Problems)
	}
}

func mustCheck(t testing.TB, w *Workbook) Report {
	t.Helper()
	report, err := w.Check(context.Background())
	if err != nil || !report.OK() {
		t.Fatalf("check: %v, %v", err, report.Problems)
	}
	return report
}

// farads is the claim of an electrolytic.
func farads(c, volts float64) screening.Claim {
	return screening.Claim{Ratings: []screening.Rating{
		screening.NominalRating(screening.Capacitance, c), screening.NominalRating(screening.RatedVoltage, volts),
	}}
}

func reading(d screening.Definition, x float64, typed string) screening.Reading {
	return screening.Reading{Of: d.Name, Value: x, Unit: d.Unit, Typed: typed}
}

// judged is a part of a lot with a reading and an outcome.
func judged(lot uint32, v screening.Verdict, c float64) Part {
	p := Part{ID: ID{Lot: lot}, Part: screening.Part{Kind: "electrolytic"}}
	p.Part.Readings = []screening.Reading{reading(screening.Capacitance, c, fmt.Sprintf("%g", c))}
	p.Outcome = Outcome{Kind: "electrolytic", Verdict: v, Tables: "t1", Title: quantity.Format(c, quantity.Farad, 3) + " 35 V", Why: "because"}
	return p
}

func addLot(t testing.TB, w *Workbook) Lot {
	t.Helper()
	l, err := w.AddLot(Lot{Kind: "electrolytic", Header: "2200uF 35V", Claim: farads(2200e-6, 35), Place: "shelf 2"})
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func save(t testing.TB, w *Workbook, p Part, action string) Part {
	t.Helper()
	p, err := w.SavePart(p, action)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func must0(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

// same compares records: NaN is NaN, an empty list is no list.
var same = cmp.Options{
	cmpopts.EquateNaNs(), cmpopts.EquateEmpty(),
	cmp.Comparer(func(a, b screening.Condition) bool { return a == b }),
}
