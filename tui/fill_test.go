package tui

import (
	"context"
	"testing"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// fillWorkbook loads n measured parts, in lots of 1000.
func fillWorkbook(t testing.TB, wb *inventory.Workbook, n int) {
	t.Helper()
	book := can()
	parsed, err := entry.Words(book, []string{"100uF", "35V", "1986", "seen=nothing", "capacitance=98uF", "esr@120Hz=0.5"})
	if err != nil {
		t.Fatal(err)
	}
	measured := screening.Part{Kind: book.Kind, Claim: parsed.Claim, Look: parsed.Look, Readings: parsed.Readings}
	good, err := screening.Judge(book, measured, screening.DefaultPolicy())
	if err != nil {
		t.Fatal(err)
	}
	spoilt := measured
	spoilt.Readings = append([]screening.Reading{}, measured.Readings...)
	spoilt.Readings[1].Value = 7
	bad, err := screening.Judge(book, spoilt, screening.DefaultPolicy())
	if err != nil {
		t.Fatal(err)
	}
	now := newClock().now()
	outcomes := []inventory.Outcome{
		inventory.Summarise(good, parsed.Claim.String(), now), inventory.Summarise(good, parsed.Claim.String(), now), inventory.Summarise(bad, parsed.Claim.String(), now),
	}
	parts := []screening.Part{measured, measured, spoilt}
	places := []string{"shelf A", "shelf B", "drawer 12", "biscuit tin", "loft"}
	_, err = wb.Load(context.Background(), func(yield func(inventory.Item, error) bool) {
		var lot *inventory.Lot
		for i := range n {
			if i%1000 == 0 {
				lot = &inventory.Lot{Kind: book.Kind, Header: "100uF 35V 1986", Claim: parsed.Claim, Place: places[i/1000%len(places)]}
				if !yield(inventory.Item{Lot: lot}, nil) {
					return
				}
			}
			p := &inventory.Part{ID: inventory.ID{Lot: lot.ID}, Part: parts[i%3], Outcome: outcomes[i%3]}
			p.Part.Claim = screening.Claim{}
			if !yield(inventory.Item{Part: p}, nil) {
				return
			}
		}
	}, inventory.LoadOptions{Action: "loaded"})
	if err != nil {
		t.Fatal(err)
	}
}
