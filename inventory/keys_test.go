package inventory

import (
	"bytes"
	"cmp"
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

var awkwardFloats = []float64{
	math.Inf(-1), -math.MaxFloat64, -1, -math.SmallestNonzeroFloat64, math.Copysign(0, -1), 0, math.SmallestNonzeroFloat64, 2.2250738585072014e-308,
	1e-12, 1, math.Nextafter(1, 2), math.MaxFloat64, math.Inf(1),
}

func checkOrder(t interface{ Fatalf(string, ...any) }, a, b float64) {
	x, okX := floatBits(a)
	y, okY := floatBits(b)
	if okX == math.IsNaN(a) || okY == math.IsNaN(b) {
		t.Fatalf("%v and %v: NaN has no key, everything else has", a, b)
	}
	if okX && okY && cmp.Compare(x, y) != cmp.Compare(a, b) {
		t.Fatalf("the keys of %v and %v order as %d, the numbers as %d", a, b, cmp.Compare(x, y), cmp.Compare(a, b))
	}
	if okX && floatOf(x) != a {
		t.Fatalf("%v comes back as %v", a, floatOf(x))
	}
}

func TestKeysOrderAsNumbersDo(t *testing.T) {
	for _, a := range awkwardFloats {
		for _, b := range awkwardFloats {
			checkOrder(t, a, b)
		}
	}
	rapid.Check(t, func(t *rapid.T) { checkOrder(t, rapid.Float64().Draw(t, "a"), rapid.Float64().Draw(t, "b")) })
}

func FuzzKeysOrderAsNumbersDo(f *testing.F) {
	for i, a := range awkwardFloats {
		f.Add(math.Float64bits(a), math.Float64bits(awkwardFloats[len(awkwardFloats)-1-i]))
	}
	f.Add(math.Float64bits(math.NaN()), uint64(1))
	f.Fuzz(func(t *testing.T, a, b uint64) { checkOrder(t, math.Float64frombits(a), math.Float64frombits(b)) })
}

func TestValueKeysSortByValueThenPart(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		hits := rapid.SliceOfN(rapid.Custom(func(t *rapid.T) Hit {
			return Hit{ID: ID{rapid.Uint32().Draw(t, "lot"), rapid.Uint32().Draw(t, "number")}, Value: rapid.Float64().Draw(t, "x")}
		}), 1, 30).Draw(t, "hits")
		var keys [][]byte
		for _, h := range hits {
			keys = append(keys, valueKey("resistor", value{"resistance", FromReading, h.Value}, idKey(h.ID)))
		}
		slices.SortFunc(keys, bytes.Compare)
		slices.SortFunc(hits, func(a, b Hit) int { return cmp.Or(cmp.Compare(a.Value, b.Value), a.ID.Compare(b.ID)) })
		for i, key := range keys {
			got, err := hitOf(key, []byte{0})
			if err != nil || got != hits[i] {
				t.Fatalf("key %d is of %v, %v; want %v", i, got, err, hits[i])
			}
		}
	})
}

func TestNamesThatWouldBreakTheOrderHaveNoKey(t *testing.T) {
	for name, key := range map[string][]byte{
		"NaN":                    valueKey("resistor", value{"resistance", FromClaim, math.NaN()}, idKey(ID{1, 1})),
		"0x00 in the kind":       valueKey("a\x00b", value{"resistance", FromClaim, 1}, idKey(ID{1, 1})),
		"0x00 in characteristic": valueKey("resistor", value{"a\x00", FromClaim, 1}, idKey(ID{1, 1})),
	} {
		if key != nil {
			t.Errorf("%s: key %x", name, key)
		}
	}
}
