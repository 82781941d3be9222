package inventory

import (
	"context"
	"fmt"
	"iter"
	"path/filepath"
	"runtime"
	"testing"

	"goodbin/screening"
)

// boxOf makes lots of 25 parts each, as a large collection has them: many different titles, and a reason of its own for what is rejected.
func boxOf(n int) iter.Seq2[Item, error] {
	return func(yield func(Item, error) bool) {
		var lot Lot
		for i := range n {
			if i%25 == 0 {
				c := float64(1+i%997) * 1e-6
				lot = Lot{Kind: "electrolytic", Claim: farads(c, 35), Place: fmt.Sprintf("shelf %d / tin %d", i%11, i%113)}
				if !yield(Item{Lot: &lot}, nil) {
					return
				}
			}
			p := judged(lot.ID, screening.Verdict(1+i%6), float64(1+i%9973)*1e-7)
			p.Part.Readings = append(p.Part.Readings, reading(screening.ESR, float64(i%577)*1e-3, "61m"), reading(screening.Leakage, 45e-6, "45uA"))
			p.Outcome.Title = lot.Claim.String()
			p.Outcome.Why, p.Outcome.NotTested = "every required reading passes", []string{"leakage at 35 V, after 2 min"}
			if p.Outcome.Verdict == screening.Reject {
				p.Outcome.Why = fmt.Sprintf("ESR reads %d mΩ; at most 151 mΩ at 120 Hz", 152+i)
			}
			if !yield(Item{Part: &p}, nil) {
				return
			}
		}
	}
}

const manyParts = 100_000

// bigWorkbook is one with 100,000 parts.
func bigWorkbook(b *testing.B) *Workbook {
	b.Helper()
	w := mustOpen(b, filepath.Join(b.TempDir(), "parts.goodbin"), Options{Create: true})
	done, err := w.Load(context.Background(), boxOf(manyParts), LoadOptions{Action: "loaded"})
	if err != nil || done.Parts != manyParts {
		b.Fatalf("%+v, %v", done, err)
	}
	b.Cleanup(func() { w.Close() })
	return w
}

func BenchmarkSavePart(b *testing.B) {
	for _, size := range []struct {
		name string
		open func(*testing.B) *Workbook
	}{
		{"first", func(b *testing.B) *Workbook {
			w := mustOpen(b, filepath.Join(b.TempDir(), "w"), Options{Create: true})
			b.Cleanup(func() { w.Close() })
			addLot(b, w)
			return w
		}},
		{"among100000", bigWorkbook},
	} {
		b.Run(size.name, func(b *testing.B) {
			w := size.open(b)
			if _, err := w.Counts(); err != nil {
				b.Fatal(err)
			}
			for b.Loop() {
				if _, err := w.SavePart(judged(1, screening.Accept, 2e-3), "capacitance 2010uF"); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkFind100000(b *testing.B) {
	w := bigWorkbook(b)
	heap := func() float64 {
		var m runtime.MemStats
		runtime.GC()
		runtime.GC() // pools are emptied by the second
		runtime.ReadMemStats(&m)
		return float64(m.HeapAlloc) / 1e6
	}
	if _, err := w.Counts(); err != nil {
		b.Fatal(err)
	}
	texts, with := len(w.rows.texts), heap()
	w.rows = nil
	b.Logf("the list in memory: %.1f MB, %d different texts", with-heap(), texts)
	if _, err := w.Counts(); err != nil {
		b.Fatal(err)
	}
	forget := func() { w.rows.last = nil }
	for _, q := range []struct {
		name  string
		query []Query // as typed, the last measured
	}{
		{"all", []Query{{Limit: 40}}},
		{"oneLetter", []Query{{Words: []string{"4"}, Limit: 40}}},
		{"fresh", []Query{{Words: []string{"470uf", "tin 7"}, Limit: 40}}},
		{"nothingMatches", []Query{{Words: []string{"zzz"}, Limit: 40}}},
		{"narrowing", []Query{{Words: []string{"4"}, Limit: 40}, {Words: []string{"47"}, Limit: 40}}},
		{"usableByPlace", []Query{{Usable: true, Order: ByPlace, Limit: 40}}},
		{"nextPage", []Query{{Limit: 40}, {Limit: 40, Offset: 40}}},
	} {
		b.Run(q.name, func(b *testing.B) {
			last := len(q.query) - 1
			for b.Loop() {
				b.StopTimer()
				forget()
				for _, earlier := range q.query[:last] {
					if _, err := w.Find(earlier); err != nil {
						b.Fatal(err)
					}
				}
				b.StartTimer()
				if _, err := w.Find(q.query[last]); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
	b.Run("afterSave", func(b *testing.B) {
		p, err := w.GetPart(ID{7, 1})
		if err != nil {
			b.Fatal(err)
		}
		for b.Loop() {
			b.StopTimer()
			if _, err := w.SavePart(p, "again"); err != nil {
				b.Fatal(err)
			}
			b.StartTimer()
			if _, err := w.Find(Query{Words: []string{"47"}, Limit: 40}); err != nil {
				b.Fatal(err)
			}
		}
	})
}

func BenchmarkLoad100000(b *testing.B) {
	for b.Loop() {
		b.StopTimer()
		w := mustOpen(b, filepath.Join(b.TempDir(), "w"), Options{Create: true})
		b.StartTimer()
		if _, err := w.Load(context.Background(), boxOf(manyParts), LoadOptions{}); err != nil {
			b.Fatal(err)
		}
		b.StopTimer()
		w.Close()
		b.StartTimer()
	}
	b.ReportMetric(float64(b.N)*manyParts/b.Elapsed().Seconds(), "parts/s")
}

func BenchmarkOpen100000(b *testing.B) {
	w := bigWorkbook(b)
	if err := w.Close(); err != nil {
		b.Fatal(err)
	}
	b.Run("open", func(b *testing.B) {
		for b.Loop() {
			mustOpen(b, w.Path(), Options{}).Close()
		}
	})
	b.Run("openAndList", func(b *testing.B) {
		for b.Loop() {
			w := mustOpen(b, w.Path(), Options{})
			if _, err := w.Find(Query{Limit: 40}); err != nil {
				b.Fatal(err)
			}
			w.Close()
		}
	})
	b.Run("verify", func(b *testing.B) {
		for b.Loop() {
			if _, err := Verify(w.Path()); err != nil {
				b.Fatal(err)
			}
		}
	})
}

func BenchmarkBackup100000(b *testing.B) {
	w := bigWorkbook(b)
	path := filepath.Join(b.TempDir(), "copy")
	for b.Loop() {
		if err := w.Backup(b.Context(), path); err != nil {
			b.Fatal(err)
		}
	}
}
