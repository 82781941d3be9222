package inventory

import (
	"errors"
	"fmt"
	"math"
	"reflect"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// fill gives every field of a struct something that is not its zero value, so that a field which the codec forgets is found out.
func fill(v reflect.Value, n *int) {
	*n++
	switch x := v.Addr().Interface().(type) {
	case *screening.Condition:
		all := screening.Variables()
		for i := range screening.MaxConditions {
			*x = x.With(all[(*n+i)%len(all)], float64(*n+i)/7)
		}
		return
	case *time.Time:
		*x = time.Unix(int64(*n), int64(*n)).UTC()
		return
	}
	switch v.Kind() {
	case reflect.Struct:
		for i := range v.NumField() {
			fill(v.Field(i), n)
		}
	case reflect.Slice:
		v.Set(reflect.MakeSlice(v.Type(), 2, 2))
		fill(v.Index(0), n)
		fill(v.Index(1), n)
	case reflect.String:
		v.SetString(fmt.Sprintf("text %d", *n))
	case reflect.Bool:
		v.SetBool(true)
	case reflect.Float64:
		v.SetFloat(float64(*n) / 3)
	case reflect.Int:
		v.SetInt(int64(*n))
	case reflect.Uint8:
		v.SetUint(1) // an enumeration
	case reflect.Uint32:
		v.SetUint(uint64(*n))
	default:
		panic("a kind of field that the test does not know: " + v.Kind().String())
	}
}

func TestEveryFieldComesBackFromTheFile(t *testing.T) {
	n := 0
	var p Part
	fill(reflect.ValueOf(&p).Elem(), &n)
	key := idKey(p.ID)
	sealed, err := encodePart(key, p)
	must0(t, err)
	back, err := decodePart(key, sealed)
	must0(t, err)
	if diff := cmp.Diff(p, back, same); diff != "" {
		t.Errorf("part (-saved +read):\n%s", diff)
	}
	var l Lot
	fill(reflect.ValueOf(&l).Elem(), &n)
	sealed, err = encodeLot(lotKey(l.ID), l)
	must0(t, err)
	backLot, err := decodeLot(lotKey(l.ID), sealed)
	must0(t, err)
	if diff := cmp.Diff(l, backLot, same); diff != "" {
		t.Errorf("lot (-saved +read):\n%s", diff)
	}
}

func TestEveryEnumerationHasAStoredName(t *testing.T) {
	units := 0
	for u := quantity.One; u <= quantity.Coulomb; u++ {
		units++
		if unitNames[u] == "" || unitsByName[unitNames[u]] != u {
			t.Errorf("unit %v has no stored name, or shares one", u)
		}
	}
	if units != len(unitNames) {
		t.Errorf("%d units, %d names", units, len(unitNames))
	}
	for _, s := range []quantity.Sense{quantity.Exactly, quantity.AtLeast, quantity.AtMost} {
		if senseNames[s] == "" || sensesByName[senseNames[s]] != s {
			t.Errorf("sense %v has no stored name, or shares one", s)
		}
	}
	for _, v := range screening.Verdicts() {
		if verdictOf(verdictByte(v)) != v {
			t.Errorf("verdict %v comes back as %v", v, verdictOf(verdictByte(v)))
		}
	}
}

// anyFloat draws what a rating or reading may hold, the special values often.
func anyFloat() *rapid.Generator[float64] {
	return rapid.OneOf(rapid.Float64(), rapid.SampledFrom(append([]float64{math.NaN()}, awkwardFloats...)))
}

func drawCondition(t *rapid.T) screening.Condition {
	var c screening.Condition
	for range rapid.IntRange(0, 4).Draw(t, "conditions") {
		c = c.With(rapid.SampledFrom(screening.Variables()).Draw(t, "variable"), rapid.Float64().Draw(t, "at"))
	}
	return c
}

func drawClaim(t *rapid.T) screening.Claim {
	var c screening.Claim
	for range rapid.IntRange(0, 3).Draw(t, "ratings") {
		c.Ratings = append(c.Ratings, screening.Rating{
			Of: screening.Characteristic(rapid.StringMatching("[a-z-]{1,12}").Draw(t, "of")), Section: rapid.SampledFrom([]string{"", "1", "2"}).Draw(t, "section"),
			At: drawCondition(t), Unit: quantity.Unit(rapid.IntRange(0, int(quantity.Coulomb)).Draw(t, "unit")),
			Nominal: anyFloat().Draw(t, "nominal"), Low: anyFloat().Draw(t, "low"), High: anyFloat().Draw(t, "high"), Typed: rapid.String().Draw(t, "typed"),
			Source: screening.Source{Document: rapid.String().Draw(t, "document"), Status: screening.Status(rapid.IntRange(0, int(screening.House)).Draw(t, "status"))},
		})
	}
	for range rapid.IntRange(0, 2).Draw(t, "traits") {
		c.Traits = append(c.Traits, screening.Trait{Name: rapid.String().Draw(t, "trait"), Text: rapid.String().Draw(t, "text")})
	}
	return c
}

func drawPart(t *rapid.T) Part {
	p := Part{
		ID:     ID{rapid.Uint32Min(1).Draw(t, "lot"), rapid.Uint32Min(1).Draw(t, "number")},
		Part:   screening.Part{Kind: "electrolytic", Claim: drawClaim(t), Treated: rapid.IntRange(0, 3).Draw(t, "treated")},
		Header: rapid.String().Draw(t, "header"), GoOn: rapid.Bool().Draw(t, "go on"), Note: rapid.String().Draw(t, "note"),
		Skipped: rapid.SliceOfN(rapid.String(), 0, 2).Draw(t, "skipped"), Count: Count{N: rapid.IntRange(0, 1e6).Draw(t, "n"), Level: About},
		Outcome: Outcome{
			Verdict: screening.Verdict(rapid.IntRange(0, 6).Draw(t, "verdict")), As: rapid.String().Draw(t, "as"), AsClaim: drawClaim(t),
			NotTested: rapid.SliceOfN(rapid.String(), 0, 2).Draw(t, "not tested"),
		},
	}
	for range rapid.IntRange(0, 3).Draw(t, "readings") {
		p.Part.Readings = append(p.Part.Readings, screening.Reading{
			Of: "capacitance", Value: anyFloat().Draw(t, "value"), Sense: quantity.Sense(rapid.IntRange(0, 2).Draw(t, "sense")), At: drawCondition(t),
			U: anyFloat().Draw(t, "u"), Repeats: rapid.SliceOfN(anyFloat(), 0, 3).Draw(t, "repeats"), AssumedAt: drawCondition(t),
		})
	}
	return p
}

func TestPartsComeBackAsTheyWereSaved(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := drawPart(t)
		key := idKey(p.ID)
		sealed, err := encodePart(key, p)
		if err != nil {
			t.Fatal(err)
		}
		back, err := decodePart(key, sealed)
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(p, back, same); diff != "" {
			t.Fatalf("(-saved +read):\n%s", diff)
		}
		r := newRow(p, Lot{ID: p.ID.Lot, Claim: drawClaim(t), Place: "shelf"})
		row, err := decodeRow(key, encodeRow(key, r))
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(r, row, same, cmp.AllowUnexported(storedRow{}, value{})); diff != "" {
			t.Fatalf("row (-saved +read):\n%s", diff)
		}
	})
}

func TestEveryFlippedBitOfARecordIsFound(t *testing.T) {
	n := 0
	var p Part
	fill(reflect.ValueOf(&p).Elem(), &n)
	key := idKey(p.ID)
	sealed, err := encodePart(key, p)
	must0(t, err)
	for i := range len(sealed) * 8 {
		sealed[i/8] ^= 1 << (i % 8)
		if _, err := decodePart(key, sealed); !errors.Is(err, ErrCorrupt) && !errors.Is(err, ErrNewer) {
			t.Errorf("bit %d flipped: %v", i, err)
		}
		sealed[i/8] ^= 1 << (i % 8)
	}
	if _, err := decodePart(idKey(ID{p.ID.Lot, p.ID.Number + 1}), sealed); !errors.Is(err, ErrCorrupt) {
		t.Errorf("a record under another part's key: %v", err)
	}
	for i := range sealed {
		if _, err := decodePart(key, sealed[:i]); !errors.Is(err, ErrCorrupt) {
			t.Errorf("cut after %d bytes: %v", i, err)
		}
	}
}

func FuzzDecode(f *testing.F) {
	n := 0
	var p Part
	fill(reflect.ValueOf(&p).Elem(), &n)
	key := idKey(ID{1, 1})
	sealed, _ := encodePart(key, p)
	f.Add(sealed[sealHead:])
	f.Add(encodeRow(key, newRow(p, Lot{}))[sealHead:])
	// The checksum is made right, so that the decoders themselves see what the fuzzer thinks of.
	f.Fuzz(func(t *testing.T, payload []byte) {
		value := seal(key, append(make([]byte, sealHead), payload...))
		if p, err := decodePart(key, value); err == nil {
			if _, err := encodePart(key, p); err != nil {
				t.Errorf("read but not written: %v", err)
			}
		}
		_, _ = decodeRow(key, value)
		_, _ = decodeLot(key[:4], value)
		_, _ = readEntry(key, value)
	})
}
