package tui

import (
	"context"
	"path/filepath"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
)

// many is the number of parts that the benchmarks work on.
const many = 100_000

func BenchmarkFirstFrame(b *testing.B) {
	wb := openWorkbook(b, filepath.Join(b.TempDir(), "book"))
	fillWorkbook(b, wb, many)
	for _, page := range []pageName{pageBench, pageStock} {
		b.Run(page.String(), func(b *testing.B) {
			wb.SetPosition(inventory.Position{Page: page.inPosition(), Lot: 50, Part: inventory.ID{Lot: 50, Number: 500}, Column: stayHere})
			for b.Loop() {
				m := newTestModel(b, wb, false)
				m.take(tea.WindowSizeMsg{Width: 120, Height: 40})
				runAll(m, m.Init())
				if m.View() == "" {
					b.Fatal("nothing is shown")
				}
			}
		})
	}
}

func BenchmarkFilterKeystroke(b *testing.B) {
	wb := openWorkbook(b, filepath.Join(b.TempDir(), "book"))
	fillWorkbook(b, wb, many)
	m := newTestModel(b, wb, false)
	m.take(tea.WindowSizeMsg{Width: 120, Height: 40})
	runAll(m, m.Init())
	runAll(m, m.take(tea.KeyMsg{Type: tea.KeyF3}))
	letters := []rune("reject tin")
	i := 0
	for b.Loop() {
		if i%len(letters) == 0 {
			m.stock.in = input{}
		}
		runAll(m, m.take(tea.KeyMsg{Type: tea.KeyRunes, Runes: letters[i%len(letters) : i%len(letters)+1]}))
		if m.View() == "" {
			b.Fatal("nothing is shown")
		}
		i++
	}
}

func BenchmarkFrame(b *testing.B) {
	wb := openWorkbook(b, filepath.Join(b.TempDir(), "book"))
	fillWorkbook(b, wb, 1000)
	m := newTestModel(b, wb, false)
	m.desk.ctx = context.Background()
	m.take(tea.WindowSizeMsg{Width: 200, Height: 60})
	runAll(m, m.desk.openLot(1, inventory.ID{Lot: 1, Number: 500}, stayHere))
	for b.Loop() {
		if m.View() == "" {
			b.Fatal("nothing is shown")
		}
	}
}
