package rules_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// bench is a person with the assumed meter: it draws what parts are, and errors inside the meter's specification.
type bench struct {
	*rand.Rand
	meter screening.Meter
}

func newBench(seed uint64) *bench {
	return &bench{rand.New(rand.NewPCG(seed, 2)), screening.AssumedMeter()}
}

func (b *bench) pick(from ...float64) float64 { return from[b.IntN(len(from))] }

func (b *bench) word(from ...string) string { return from[b.IntN(len(from))] }

// between draws from a rectangular distribution.
func (b *bench) between(low, high float64) float64 { return low + (high-low)*b.Float64() }

// decades draws from a rectangular distribution of the logarithm.
func (b *bench) decades(low, high float64) float64 { return low * math.Pow(high/low, b.Float64()) }

// about draws from a normal distribution that is cut off at three deviations, as a factory's own test does.
func (b *bench) about(mean, deviation float64) float64 {
	return mean + deviation*max(-3, min(3, b.NormFloat64()))
}

// e12 draws a value of the E12 series between two decades.
func (b *bench) e12(low, high float64) float64 {
	for {
		x := b.pick(1, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2) * math.Pow10(int(math.Floor(b.between(math.Log10(low), math.Log10(high)+1))))
		if x >= low*0.999 && x <= high*1.001 {
			return x
		}
	}
}

// shown is what a part would show to one question: a true value, or what the display says where it shows none.
type shown struct {
	value float64
	text  string // typed as it stands, where there is no value: "OL", "<0.1uA"
}

func is(x float64) shown { return shown{value: x} }

func says(text string) shown { return shown{text: text} }

// open is what a meter shows of what does not conduct, or drops more than a diode test reaches.
var open = says("OL")

// specimen is one part on the bench.
type specimen struct {
	claim string            // as typed once for its bag
	known map[string]string // what else the person can say of it when asked
	reads map[string]shown  // by the name of the reading, with its section where they differ; what is not there is skipped
	bound float64           // what its faults are reckoned from, where they follow from its print
}

func part(claim string) *specimen { return &specimen{claim: claim, reads: map[string]shown{}} }

func (s *specimen) with(name string, r shown) *specimen {
	s.reads[name] = r
	return s
}

func (s *specimen) scale(name string, by float64) { s.with(name, is(by*s.reads[name].value)) }

// lowestRange is the lowest range of a pocket meter of 2000 counts, by unit; the next ones are ten times as much each. The house's.
var lowestRange = map[quantity.Unit]float64{
	quantity.Volt: 0.2, quantity.Ohm: 200, quantity.Farad: 2e-9, quantity.Ampere: 200e-6, quantity.Henry: 200e-6,
}

// highestOhms is where the highest range of the ohmmeter ends.
const highestOhms = 20e6

// stepAt is what the last digit is worth where the meter shows x.
func stepAt(of screening.Characteristic, unit quantity.Unit, x float64) float64 {
	low, ranged := lowestRange[unit]
	switch {
	case of == screening.ESR.Name:
		return 0.01
	case of == screening.TanDelta.Name:
		return 0.001
	case of == "hfe":
		return 1
	case unit == quantity.Celsius:
		return 0.1
	case !ranged: // computed by hand, to three digits
		return math.Pow10(int(math.Floor(math.Log10(max(x, 1e-3)))) - 2)
	}
	for low < x*(1-1e-12) {
		low *= 10
	}
	return low / 2000
}

// display is what the meter shows of a true value: its error, rectangular inside the assumed specification, then the digits. Leads add to ohms and
// take nothing away.
func (b *bench) display(of screening.Characteristic, unit quantity.Unit, truth float64) string {
	if unit == quantity.Ohm && truth > highestOhms {
		return open.text
	}
	r := screening.Reading{Of: of, Unit: unit, Value: truth, Step: stepAt(of, unit, truth)}
	half := b.meter.HalfWidth(r)
	x := truth + half*(2*b.Float64()-1)
	if unit == quantity.Ohm && of != screening.ESR.Name {
		leads := b.meter.HalfWidth(screening.Reading{Of: of, Unit: unit})
		x = truth + (half-leads)*(2*b.Float64()-1) + leads*b.Float64()
	}
	x = max(0, math.Round(x/r.Step)*r.Step)
	prefix, scale := "", 1.0
	if _, ranged := lowestRange[unit]; ranged && unit != quantity.Volt && of != screening.ESR.Name {
		prefix, scale = prefixOf(r.Step * 1000)
	}
	if unit == quantity.Ratio {
		return fmt.Sprintf("%.*f%%", decimals(r.Step*100), x*100)
	}
	return fmt.Sprintf("%.*f%s%s", decimals(r.Step/scale), x/scale, prefix, letters[unit])
}

var letters = map[quantity.Unit]string{
	quantity.Volt: "V", quantity.Ohm: "ohm", quantity.Farad: "F", quantity.Ampere: "A", quantity.Henry: "H", quantity.Celsius: "C",
}

func prefixOf(x float64) (string, float64) {
	for i, scale := range []float64{1e6, 1e3, 1, 1e-3, 1e-6, 1e-9, 1e-12} {
		if x >= scale*0.999 {
			return []string{"M", "k", "", "m", "u", "n", "p"}[i], scale
		}
	}
	return "p", 1e-12
}

func decimals(step float64) int { return max(0, int(math.Ceil(-math.Log10(step)-1e-9))) }

// shows is what stands on the display for a question, and whether the person has anything to read it with.
func (b *bench) shows(s *specimen, q screening.Question) (string, bool) {
	r, ok := s.reads[string(q.Field.Name)+"/"+q.Section]
	if !ok {
		r, ok = s.reads[string(q.Field.Name)]
	}
	if r.text != "" || !ok {
		return r.text, ok
	}
	return b.display(q.Field.Name, q.Field.Unit, r.value), true
}

// outcome is what became of a part.
type outcome struct {
	screening.Judgement
	answers int // typed, the look and the gate being one each

	// row is the verdict on the same readings where they are typed as a row of a table, by their names, with no condition beside them: what the
	// prompt asks for is then not taken for granted.
	row screening.Verdict
}

// evening puts a part through the questions that the walk asks, as a person with a pocket meter answers them: values as they stand on the
// display, no condition beside them.
func (b *bench) evening(t *testing.T, book *screening.Rulebook, s *specimen, further bool) outcome {
	t.Helper()
	w, answers := b.walk(t, book, s, further)
	j, err := w.Judgement()
	if err != nil {
		t.Fatalf("%s %s: %v", book.Kind, s.claim, err)
	}
	row := w.Part()
	for i := range row.Readings {
		row.Readings[i].At = screening.Condition{}
	}
	bare, err := screening.Judge(book, row, screening.DefaultPolicy())
	if err != nil {
		t.Fatalf("%s %s as a row: %v", book.Kind, s.claim, err)
	}
	return outcome{j, answers, bare.Verdict}
}

func (b *bench) walk(t *testing.T, book *screening.Rulebook, s *specimen, further bool) (w *screening.Walk, answers int) {
	t.Helper()
	p, err := entry.Words(book, strings.Fields(s.claim))
	if err != nil {
		t.Fatalf("%s %s: %v", book.Kind, s.claim, err)
	}
	w = screening.NewWalk(book, screening.DefaultPolicy(), screening.Part{Claim: p.Claim})
	w.AskWanted(further)
	read := map[string]bool{}
	for {
		q := w.Next()
		switch q.Ask {
		case screening.AskNothing:
			return w, answers
		case screening.AskLook:
			w.SeeAll(nil)
			answers++
		case screening.AskGate:
			b.record(t, w, q, "0.0V")
			answers++
		case screening.AskClaim:
			if text, known := s.known[string(q.Field.Name)]; known {
				w.SetClaim(w.Part().Claim.WithTrait(string(q.Field.Name), text))
				answers++
			} else {
				w.Skip(q)
			}
		case screening.AskReading:
			text, able := b.shows(s, q)
			if !able || read[q.Key()] || !b.record(t, w, q, text) {
				w.Skip(q) // nothing to read it with, or it was read already and says no more the second time
				continue
			}
			read[q.Key()] = true
			answers++
		}
		if answers > 60 {
			t.Fatalf("%s %s: the walk does not end; it asks for %s", book.Kind, s.claim, q.Key())
		}
	}
}

// record types an answer. What proves nothing of the question (OL of a capacitance) is refused, and the person skips it.
func (b *bench) record(t *testing.T, w *screening.Walk, q screening.Question, text string) bool {
	t.Helper()
	r, err := entry.Answer(q, text)
	if err == nil {
		err = w.Record(r)
	}
	if err != nil && text != open.text {
		t.Fatalf("%s %s: %s typed for %s: %v", w.Book().Kind, w.Part().Claim, text, q.Key(), err)
	}
	return err == nil
}
