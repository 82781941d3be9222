package bridge

import (
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// A sound bridge is through after six quick readings, whatever is typed at the prompt being taken as what was asked.
func TestASoundBridgeTakesSixReadings(t *testing.T) {
	b := Book(types.Builtin())
	w := screening.NewWalk(b, screening.DefaultPolicy(), booktest.Part(t, b, "KBP208 seen=nothing"))
	taken := 0
	for q := w.Next(); q.Ask == screening.AskReading && taken < 20; q = w.Next() {
		r := screening.Reading{Of: q.Field.Name, Section: q.Section, Unit: q.Field.Unit, At: q.At, Value: 0.512, Step: 0.001}
		if q.Field.Name == screening.VBR.Name {
			r.Value, r.Sense, r.Over, r.Step = 2, quantity.AtLeast, true, 0
		}
		if err := w.Record(r); err != nil {
			t.Fatal(err)
		}
		taken++
	}
	j, err := w.Judgement()
	if err != nil || taken != 6 || j.Verdict != screening.Accept || j.Grade != screening.WithinSpec {
		t.Errorf("%d readings: %s %s %v\n%s", taken, j.Verdict, j.Grade, err, booktest.Texts(j))
	}
}

// One that seems open at the first leg is not given up there: the next leg may show that it conducts.
func TestTheWalkGoesOnWhereProbesMayBeTurned(t *testing.T) {
	b := Book(types.Builtin())
	w := screening.NewWalk(b, screening.DefaultPolicy(), booktest.Part(t, b, "KBP208 seen=nothing vf/ac1-plus=OL"))
	if q := w.Next(); w.Stopped() || q.Section != "ac2-plus" {
		t.Errorf("stopped %v, next %s of %s", w.Stopped(), q.Field.Name, q.Section)
	}
}
