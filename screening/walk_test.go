package screening_test

import (
	"errors"
	"math"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func answerLooks(w *screening.Walk) {
	if w.Next().Ask == screening.AskLook {
		w.SeeAll(nil)
	}
}

func TestWalkAsksQuickReadingsThatCouldRejectFirst(t *testing.T) {
	none := math.NaN()
	w := screening.NewWalk(toy(), relative(0.001), toyPart(none, none, none))
	if q := w.Next(); q.Ask != screening.AskLook || len(q.Checks) != 4 || q.Checks[0].Name != "cracked" {
		t.Fatalf("first question %+v; the look comes before power", q)
	}
	answerLooks(w)
	for _, want := range []struct {
		of    screening.Characteristic
		unit  quantity.Unit
		value float64
	}{{"quick", quantity.Volt, 0.7}, {"value", quantity.Ohm, 100}, {"slow", quantity.Ampere, 1e-4}} {
		q := w.Next()
		if q.Ask != screening.AskReading || q.Field.Name != want.of {
			t.Fatalf("asked for %q; want %q", q.Field.Name, want.of)
		}
		if err := w.Record(exactly(want.of, want.unit, want.value)); err != nil {
			t.Fatal(err)
		}
	}
	if q := w.Next(); q.Ask != screening.AskNothing {
		t.Errorf("still asks %+v after every required reading", q)
	}
	w.AskWanted(true)
	if q := w.Next(); q.Field.Name != "unsure" {
		t.Errorf("wanted readings are not asked on request: %+v", q)
	}
	if j, _ := w.Judgement(); j.Verdict != screening.Accept {
		t.Errorf("verdict %v", j.Verdict)
	}
}

func TestWalkStopsAtTheFirstIrrecoverableFailureAndGoesOnWhenTold(t *testing.T) {
	none := math.NaN()
	w := screening.NewWalk(toy(), relative(0.001), toyPart(none, none, none))
	answerLooks(w)
	if err := w.Record(exactly("quick", quantity.Volt, 0.1)); err != nil {
		t.Fatal(err)
	}
	if !w.Stopped() || w.Next().Ask != screening.AskNothing {
		t.Fatal("a part that is rejected is still asked about")
	}
	w.GoOn()
	if q := w.Next(); q.Field.Name != "value" {
		t.Errorf("going on asks %q; want the next reading", q.Field.Name)
	}
}

func TestWalkTreatableFailureDoesNotStopIt(t *testing.T) {
	none := math.NaN()
	w := screening.NewWalk(toy(), relative(0.001), toyPart(none, 5e-3, none))
	answerLooks(w)
	if w.Stopped() || w.Next().Field.Name != "quick" {
		t.Errorf("a treatable failure ended the walk before the quick reading")
	}
}

func TestWalkSkipRetractAndUnskip(t *testing.T) {
	none := math.NaN()
	w := screening.NewWalk(toy(), relative(0.001), toyPart(none, none, none))
	answerLooks(w)
	w.Skip(w.Next())
	if q := w.Next(); q.Field.Name != "value" {
		t.Fatalf("after a skip asks %q", q.Field.Name)
	}
	w.Unskip()
	if q := w.Next(); q.Field.Name != "quick" {
		t.Errorf("after unskip asks %q", q.Field.Name)
	}
	_ = w.Record(exactly("quick", quantity.Volt, 0.7))
	if !w.Retract() || w.Next().Field.Name != "quick" {
		t.Error("a retracted reading is not asked again")
	}
}

func TestWalkAsksForTheClaimFirst(t *testing.T) {
	w := screening.NewWalk(toy(), relative(0.001), screening.Part{Kind: "toy"})
	if q := w.Next(); q.Ask != screening.AskClaim || q.Field.Name != "value" {
		t.Fatalf("asks %+v; want the claim", q)
	}
	w.SetClaim(toyPart(0, 0, 0).Claim)
	if q := w.Next(); q.Ask != screening.AskLook {
		t.Errorf("after the claim asks %+v", q)
	}
}

func TestWalkRefusesWhatTheKindDoesNotHave(t *testing.T) {
	w := screening.NewWalk(toy(), relative(0.001), toyPart(100, 1e-4, 0.7))
	if err := w.Record(exactly("hfe", quantity.One, 100)); !errors.Is(err, screening.ErrNotAsked) {
		t.Errorf("error %v", err)
	}
	if err := w.Record(exactly("quick", quantity.Volt, -5)); !errors.Is(err, screening.ErrOutsideBand) {
		t.Errorf("error %v", err)
	}
}

// charging makes the slow reading of the toy a test under voltage, with a gate.
func charging() *screening.Rulebook {
	book := toy()
	book.Bench[1].UnderVoltage = true
	book.Cautions = func(_ screening.Part, m screening.Moment) []screening.Caution {
		if m == screening.AtLook {
			return []screening.Caution{{Code: "stored-charge", Level: screening.Danger, Text: "charged", Gate: true}}
		}
		return nil
	}
	return book
}

func TestWalkARejectedPartIsNotLeftCharged(t *testing.T) {
	none := math.NaN()
	w := screening.NewWalk(charging(), relative(0.001), toyPart(none, none, none))
	_ = w.Record(exactly("remaining-voltage", quantity.Volt, 0))
	answerLooks(w)
	_ = w.Record(exactly("slow", quantity.Ampere, 1e-4))
	_ = w.Record(exactly("quick", quantity.Volt, 0.1))
	if !w.Stopped() {
		t.Fatal("0.1 V does not reject")
	}
	if q := w.Next(); q.Ask != screening.AskGate {
		t.Fatalf("after a test under voltage a rejected part is left with %+v", q)
	}
	_ = w.Record(exactly("remaining-voltage", quantity.Volt, 1))
	if q := w.Next(); q.Ask != screening.AskNothing {
		t.Errorf("once discharged it still asks %+v", q)
	}
}

func TestWalkAPartStoppedByEyeIsNotPutUnderVoltage(t *testing.T) {
	none := math.NaN()
	w := screening.NewWalk(charging(), relative(0.001), toyPart(none, none, none))
	_ = w.Record(exactly("remaining-voltage", quantity.Volt, 0))
	w.SeeAll([]string{"cracked"})
	w.GoOn()
	for q := w.Next(); q.Ask != screening.AskNothing; q = w.Next() {
		if q.Field.Name == "slow" {
			t.Fatal("a cracked part is asked for a test under voltage")
		}
		w.Skip(q)
	}
}

func TestWalkGateKeepsHandsOffAChargedPart(t *testing.T) {
	book := charging()
	none := math.NaN()
	w := screening.NewWalk(book, relative(0.001), toyPart(none, none, none))
	if q := w.Next(); q.Ask != screening.AskGate || len(q.Cautions) != 1 {
		t.Fatalf("asks %+v; the gate comes before the look", q)
	}
	if err := w.Record(exactly("remaining-voltage", quantity.Volt, 120)); !errors.Is(err, screening.ErrStillLive) {
		t.Fatalf("120 V remaining: %v", err)
	}
	if q := w.Next(); q.Ask != screening.AskGate {
		t.Fatalf("120 V remaining opens the gate: %+v", q)
	}
	_ = w.Record(exactly("remaining-voltage", quantity.Volt, 2))
	answerLooks(w)
	_ = w.Record(exactly("slow", quantity.Ampere, 1e-4))
	if q := w.Next(); q.Ask != screening.AskGate {
		t.Errorf("after a test under voltage asks %+v; want the gate again", q)
	}
	_ = w.Record(exactly("remaining-voltage", quantity.Volt, 0.5))
	if q := w.Next(); q.Ask != screening.AskReading {
		t.Errorf("after the second gate asks %+v", q)
	}
	again := screening.NewWalk(book, relative(0.001), w.Part())
	if q := again.Next(); q.Ask != screening.AskReading {
		t.Errorf("reopened, the walk asks %+v; it should go on where it was", q)
	}
}

func TestWalkAsksForAClaimOnceItMatters(t *testing.T) {
	book := toy()
	book.Claims = append(book.Claims, screening.Field{
		Definition: screening.Definition{Name: "technology", Label: "technology"}, Trait: true,
		AskWhen: func(_ screening.Part, findings []screening.Finding) bool {
			return findings[0].Outcome == screening.Fail
		},
	})
	sound := screening.NewWalk(book, relative(0.001), toyPart(100, 1e-4, 0.7))
	answerLooks(sound)
	if q := sound.Next(); q.Ask != screening.AskNothing {
		t.Errorf("a sound part is asked for its %s", q.Field.Name)
	}
	off := screening.NewWalk(book, relative(0.001), toyPart(150, 1e-4, 0.7))
	answerLooks(off)
	q := off.Next()
	if q.Ask != screening.AskClaim || q.Field.Name != "technology" || q.Need == screening.Required {
		t.Fatalf("a part that is off is asked %+v", q)
	}
	off.Skip(q)
	if q := off.Next(); q.Ask != screening.AskNothing {
		t.Errorf("a claim that was skipped is asked again: %+v", q)
	}
	off.Unskip()
	off.SetClaim(off.Part().Claim.WithTrait("technology", "film"))
	if q := off.Next(); q.Ask != screening.AskNothing {
		t.Errorf("a claim that was made is asked again: %+v", q)
	}
}

func TestTheLookIsOneQuestion(t *testing.T) {
	none := math.NaN()
	w := screening.NewWalk(toy(), relative(0.001), toyPart(none, none, none))
	w.See("cracked", false)
	if q := w.Next(); q.Ask != screening.AskLook {
		t.Errorf("after one check of four it asks %+v", q)
	}
	w.SeeAll([]string{"short-leads"})
	if q := w.Next(); q.Ask == screening.AskLook {
		t.Error("it looks twice")
	}
	if fault, looked := w.Part().Seen("short-leads"); !fault || !looked {
		t.Error("what was seen is not kept")
	}
	w.SeeAll(nil)
	if fault, _ := w.Part().Seen("short-leads"); fault {
		t.Error("a second look does not correct the first")
	}
	if !w.Retract() || w.Next().Ask != screening.AskLook {
		t.Error("taking the look back does not ask for it again")
	}
}
