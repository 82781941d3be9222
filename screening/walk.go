package screening

import (
	"cmp"
	"errors"
	"slices"
	"time"
)

// AskKind says what a question asks for.
type AskKind uint8

// What a walk can ask.
const (
	AskNothing AskKind = iota // the walk is done
	AskClaim                  // a rating or trait without which nothing can be judged: Field says which
	AskGate                   // the volts remaining across the part, before it is touched
	AskLook                   // all that is looked for by eye, a digit key each
	AskReading                // one reading
)

// Question is what a walk wants to know next.
type Question struct {
	Ask      AskKind
	Field    Field // for AskClaim, AskReading and AskGate
	Section  string
	At       Condition // the condition the limit is stated at
	Checks   []Check   // for AskLook: at most MaxLook, in the order of their digit keys
	Need     Need
	Limit    *Limit // the limit it would answer, for AskReading
	Answered bool
	Skipped  bool
	Why      string // why it is asked: "capacitance reads high, so leakage decides"
	Cautions []Caution
}

// Key identifies a question within its walk.
func (q Question) Key() string {
	switch q.Ask {
	case AskLook:
		return "look"
	case AskGate:
		return "gate"
	case AskClaim:
		return "claim:" + string(q.Field.Name)
	}
	return string(q.Field.Name) + "/" + q.Section
}

// SafeVoltage is what may remain across a part before it is touched: 10 V (house; the published aim of about 10 V after discharging).
const SafeVoltage = 10

// Errors of a walk.
var (
	ErrWalkDone    = errors.New("nothing is left to ask")
	ErrStillLive   = errors.New("the part still carries a voltage")
	ErrNotAsked    = errors.New("this kind has no such reading")
	ErrOutsideBand = errors.New("this reading is impossible")
)

// Walk decides which question comes next for one part: what it claims, the gate, the look, then readings, a required reading that could
// reject in seconds before one that takes minutes. It stops at the first irrecoverable failure; GoOn continues. It is pure state: page and
// linear mode drive it alike, and whoever drives it saves Part after every answer.
type Walk struct {
	book    *Rulebook
	policy  Policy
	part    Part
	skipped map[string]bool
	goOn    bool
	wanted  bool // ask for wanted readings too

	judged Judgement
	err    error
}

// NewWalk starts a walk for a part, which may already hold readings.
func NewWalk(book *Rulebook, policy Policy, part Part) *Walk {
	w := &Walk{book: book, policy: policy, part: part, skipped: map[string]bool{}}
	w.part.Kind = book.Kind
	w.part.Readings = slices.Clone(part.Readings)
	w.part.Look = slices.Clone(part.Look)
	w.judge()
	return w
}

func (w *Walk) judge() { w.judged, w.err = Judge(w.book, w.part, w.policy) }

// Book returns the walk's rulebook.
func (w *Walk) Book() *Rulebook { return w.book }

// Part returns the part as it stands, ready to be saved.
func (w *Walk) Part() Part { return w.part }

// Judgement returns what the judge says of the part as it stands.
func (w *Walk) Judgement() (Judgement, error) { return w.judged, w.err }

// Stopped reports whether an irrecoverable failure or a stop ended the walk before every required question was answered.
func (w *Walk) Stopped() bool {
	if w.goOn || w.err != nil {
		return false
	}
	return w.judged.Verdict == Barred || w.judged.Verdict == Reject
}

// GoOn continues a walk that stopped.
func (w *Walk) GoOn() { w.goOn = true }

// AskWanted makes the walk ask for wanted readings after the required ones.
func (w *Walk) AskWanted(yes bool) { w.wanted = yes }

// SetClaim replaces what the part claims.
func (w *Walk) SetClaim(c Claim) {
	w.part.Claim = c
	w.judge()
}

// See records the answer to one check by eye.
func (w *Walk) See(check string, fault bool) {
	w.part.Look = append(w.part.Look, Observation{Check: check, Fault: fault})
	w.judge()
}

// SeeAll records the whole look: the checks named show their fault, every other one of the kind does not.
func (w *Walk) SeeAll(faults []string) {
	for _, c := range w.book.Look {
		w.part.Look = append(w.part.Look, Observation{Check: c.Name, Fault: slices.Contains(faults, c.Name)})
	}
	w.judge()
}

// Skip leaves a question for later; it is not asked again unless it becomes the last word on a required criterion and Unskip is called.
func (w *Walk) Skip(q Question) { w.skipped[q.Key()] = true }

// Unskip asks skipped questions again.
func (w *Walk) Unskip() { clear(w.skipped) }

// Record adds a reading. A reading of the volts remaining closes the gate only at or below SafeVoltage: above it, Record keeps the reading
// and returns ErrStillLive.
func (w *Walk) Record(r Reading) error {
	f, ok := w.book.BenchField(r.Of)
	if !ok {
		if r.Of != RemainingVoltage.Name {
			return ErrNotAsked
		}
		f = Field{Definition: RemainingVoltage, PerPart: true}
	}
	r, err := Plausible(f, r)
	if err != nil {
		return err
	}
	w.part.Readings = append(w.part.Readings, r)
	if r.Of == RemainingVoltage.Name && r.Value > SafeVoltage {
		return ErrStillLive
	}
	w.judge()
	return nil
}

// Retract removes the last answer: the last reading, or where there is none the look. It reports false where nothing is left.
func (w *Walk) Retract() bool {
	switch {
	case len(w.part.Readings) > 0:
		w.part.Readings = w.part.Readings[:len(w.part.Readings)-1]
	case len(w.part.Look) > 0:
		w.part.Look = nil
	default:
		return false
	}
	clear(w.skipped)
	w.judge()
	return true
}

// Next returns the first question that is open; AskNothing where the walk is done or stopped. A part that was put under voltage is not left
// before it is found discharged, whatever the verdict.
func (w *Walk) Next() Question {
	if w.Stopped() {
		if gate, asked := w.gateQuestion(); asked && !gate.Answered && !gate.Skipped && w.underVoltage() {
			return gate
		}
		return Question{}
	}
	for _, q := range w.Questions() {
		if !q.Answered && !q.Skipped {
			return q
		}
	}
	return Question{}
}

// Questions lists everything the walk asks of this part, answered or not, in the order in which it asks.
func (w *Walk) Questions() []Question {
	qs := w.claimQuestions()
	for _, q := range qs {
		if !q.Answered {
			return qs // without a claim there are no limits to ask for
		}
	}
	gate, gated := w.gateQuestion()
	if gated {
		qs = append(qs, gate)
	}
	if len(w.book.Look) > 0 {
		qs = append(qs, Question{Ask: AskLook, Checks: w.book.Look, Answered: w.looked(), Skipped: w.skipped["look"]})
	}
	qs = append(qs, w.readingQuestions()...)
	return append(qs, w.claimsThatMatter()...)
}

// looked reports whether everything was looked for.
func (w *Walk) looked() bool {
	return !slices.ContainsFunc(w.book.Look, func(c Check) bool {
		_, looked := w.part.Seen(c.Name)
		return !looked
	})
}

// claimsThatMatter asks for claims that were left out and would change what to do.
func (w *Walk) claimsThatMatter() []Question {
	var qs []Question
	for i := range w.book.Claims {
		f := &w.book.Claims[i]
		if f.AskWhen == nil || !f.Trait || w.judged.Claim.Trait(string(f.Name)) != "" || !f.AskWhen(w.judged.Part, w.judged.Findings) {
			continue
		}
		q := Question{Ask: AskClaim, Field: *f, Need: Wanted}
		q.Skipped = w.skipped[q.Key()]
		qs = append(qs, q)
	}
	return qs
}

func (w *Walk) claimQuestions() []Question {
	var qs []Question
	for _, f := range w.book.Claims {
		if !f.Required {
			continue
		}
		answered := w.judged.Claim.Trait(string(f.Name)) != ""
		if !f.Trait {
			_, answered = w.judged.Claim.Rating(f.Name, w.judged.Claim.Sections()[0])
		}
		q := Question{Ask: AskClaim, Field: f, Answered: answered}
		q.Skipped = w.skipped[q.Key()]
		qs = append(qs, q)
	}
	return qs
}

// gateQuestion asks for the remaining volts where a caution demands it, and again after a reading taken under voltage.
func (w *Walk) gateQuestion() (Question, bool) {
	if w.book.Cautions == nil {
		return Question{}, false
	}
	cautions := w.book.Cautions(w.judged.Part, AtLook)
	if !slices.ContainsFunc(cautions, func(c Caution) bool { return c.Gate }) {
		return Question{}, false
	}
	return Question{
		Ask: AskGate, Field: Field{Definition: RemainingVoltage, PerPart: true}, Cautions: cautions, Answered: w.discharged(),
		Skipped: w.skipped["gate"],
	}, true
}

// underVoltage reports whether a test under voltage was made.
func (w *Walk) underVoltage() bool {
	return slices.ContainsFunc(w.part.Readings, func(r Reading) bool {
		f := w.book.bench(r.Of)
		return f != nil && f.UnderVoltage
	})
}

// discharged reports whether the part was last found at or below SafeVoltage, with no test under voltage since.
func (w *Walk) discharged() bool {
	safe := false
	for _, r := range w.part.Readings {
		if r.Of == RemainingVoltage.Name {
			safe = r.Value <= SafeVoltage
		} else if f, ok := w.book.BenchField(r.Of); ok && f.UnderVoltage {
			safe = false
		}
	}
	return safe
}

// readingQuestions lists the readings that the limits in use ask for, required ones first, each group in the order of effort and then of
// the rulebook's bench. One question stands for all the limits of a criterion and section that it would answer.
func (w *Walk) readingQuestions() []Question {
	type slot struct {
		q      Question
		order  int
		effort time.Duration
	}
	var slots []slot
	if w.err == nil {
		for i := range w.judged.Findings {
			f := &w.judged.Findings[i]
			if f.Limit.Evidence == ByRating {
				continue
			}
			order := slices.IndexFunc(w.book.Bench, func(b Field) bool { return b.Name == f.Limit.On })
			if order < 0 {
				continue
			}
			field := w.book.Bench[order]
			if field.UnderVoltage && f.Outcome == Missing && len(w.judged.Stops) > 0 {
				continue // a part that was stopped by eye is not put under voltage, also when the walk goes on
			}
			q := Question{
				// A part's temperature is read, not set: whoever fills a reading in from the question must not take the limit's.
				Ask: AskReading, Field: field, Section: f.Limit.Section, At: f.Limit.At.Without(PartTemperature), Need: f.Need, Limit: &f.Limit,
				Answered: f.Outcome != Missing, Why: f.Why,
			}
			at := slices.IndexFunc(slots, func(s slot) bool {
				return s.q.Limit.Criterion == f.Limit.Criterion && s.q.Section == f.Limit.Section
			})
			switch {
			case at < 0:
				slots = append(slots, slot{q, order, field.Effort})
			default:
				slots[at].q = mergeQuestion(slots[at].q, q)
				if slots[at].q.Field.Name == q.Field.Name {
					slots[at].order, slots[at].effort = order, field.Effort
				}
			}
		}
	}
	slices.SortStableFunc(slots, func(a, b slot) int {
		return cmp.Or(cmp.Compare(a.q.Need, b.q.Need), cmp.Compare(a.effort, b.effort), cmp.Compare(a.order, b.order))
	})
	var qs []Question
	for _, s := range slots {
		if s.q.Need != Required && !w.wanted && !s.q.Answered {
			continue
		}
		s.q.Skipped = w.skipped[s.q.Key()]
		qs = append(qs, s.q)
	}
	return qs
}

// mergeQuestion keeps one question for a criterion: the answered one, else the one that is needed more, else the one measured first.
func mergeQuestion(have, more Question) Question {
	need := min(have.Need, more.Need)
	switch {
	case have.Answered:
	case more.Answered, more.Need < have.Need, more.Need == have.Need && more.Field.Effort < have.Field.Effort:
		have = more
	}
	have.Need = need
	return have
}
