package screening

import "goodbin/screening/quantity"

// Criterion groups the limits that are alternatives for one question: leakage at 1 min or at 2 min, ESR or tan δ. Answering one answers
// the criterion; any failed alternative fails it.
type Criterion string

// LimitSet names which published limits count where several exist.
type LimitSet string

// The limit sets that more than one criterion knows.
const (
	GeneralSet         LimitSet = "general"
	LongLifeSet        LimitSet = "long-life"
	VintageMilitarySet LimitSet = "vintage-military"
	SnapInSet          LimitSet = "snap-in"
	HouseSet           LimitSet = "house"
)

// Grade says how good: as a data sheet asks of a new part, or inside the makers' end-of-endurance limits. A limit of AnyGrade counts at
// both.
type Grade uint8

// The grades, best last.
const (
	AnyGrade Grade = iota
	Serviceable
	WithinSpec
)

// String returns "serviceable", "within-spec" or "".
func (g Grade) String() string { return [...]string{"", "serviceable", "within-spec"}[min(int(g), 2)] }

// Need says how much a limit's answer is needed.
type Need uint8

// The needs.
const (
	Required Need = iota // a verdict of accept cannot do without it
	Wanted               // not needed; when it fails it counts like a required one, when it is missing it is listed as not tested
	RoleOnly             // asked only by a role
)

// String returns the need as JSON spells it.
func (n Need) String() string { return [...]string{"required", "wanted", "role-only"}[min(int(n), 2)] }

// Evidence says what a limit takes as an answer.
type Evidence uint8

// The kinds of evidence.
const (
	ByReading Evidence = iota
	ByRating
	ByEither
)

// String returns the evidence as JSON spells it.
func (e Evidence) String() string { return [...]string{"reading", "rating", "either"}[min(int(e), 2)] }

// Treatment names what can undo a failure; "" is nothing.
type Treatment string

// The treatments known.
const (
	Reform Treatment = "re-form"
	Dry    Treatment = "dry"
)

// Limit is a bound on a characteristic at a condition.
type Limit struct {
	On        Characteristic
	Unit      quantity.Unit
	Section   string
	Criterion Criterion
	At        Condition
	Low, High float64 // SI; ±Inf where open
	Need      Need
	Evidence  Evidence
	TreatLow  Treatment // what can undo a reading below Low
	TreatHigh Treatment // what can undo a reading above High
	Set       LimitSet
	InUse     bool  // whether this set is the rulebook's default for this claim; the policy may choose another
	Grade     Grade // the grade it belongs to
	Soft      bool  // at grade serviceable: a convention vaguer than the meter, passed at the policy's soft probability
	Source    Source
	// Formula renders the rule with this part's numbers in it: "0.01·2200 µF·35 V = 770 µA". It may be nil.
	Formula func() string
	// Note is what a person should know of this limit beyond its source; "" for nothing.
	Note string
}

// FormulaText returns the rendered formula, "" where there is none.
func (l Limit) FormulaText() string {
	if l.Formula == nil {
		return ""
	}
	return l.Formula()
}

// Outcome is what became of one limit.
type Outcome uint8

// The outcomes.
const (
	Missing Outcome = iota // no evidence that fits
	Pass
	Close // too near for this meter, or a failure against a figure that may not reject
	Fail
)

// String returns the outcome as JSON spells it.
func (o Outcome) String() string {
	return [...]string{"missing", "pass", "close", "fail"}[min(int(o), 3)]
}

// Side says on which side of a limit evidence lies.
type Side int8

// The sides.
const (
	Inside Side = 0
	Below  Side = -1
	Above  Side = 1
)

// Finding is one limit held against the best evidence for it.
type Finding struct {
	Limit   Limit
	Need    Need // the limit's, unless the rulebook's Adjust raised it
	By      Evidence
	Reading *Reading // as taken; nil where there is none
	// Converted is the reading brought to the limit's condition; nil where it was compared as it stands.
	Converted   *Conversion
	Outcome     Outcome
	Side        Side     // the side on which it fails, or is nearest to failing
	Probability float64  // of conformance; NaN where undefined
	Margin      float64  // distance to the nearest bound over the width (two bounds) or over the bound (one); negative outside, NaN undefined
	NearLimit   bool     // passed at the soft probability only
	Unconfirmed bool     // would have failed, were the figure's status better
	Wants       Gap      // for Missing and Close: what would settle it
	TooCoarse   bool     // for Close: the last digits typed make up most of the uncertainty
	Unstated    Variable // for Missing: the condition that the reading would have to state
	Why         string   // in words, for Missing and Close
}

// Gap says what to measure, at which condition, and how well.
type Gap struct {
	Of       Characteristic
	Section  string
	At       Condition
	Accuracy float64 // relative accuracy (half-width of a rectangular specification) that would decide; 0 where not known or not the matter
	Repeats  int     // how many more readings would decide, if they scatter alike about the same mean; 0 where no number of them can
}

// Evidence returns the reading that was held against the limit: the converted one where there is one. It is nil where there is none.
func (f Finding) Evidence() *Reading {
	if f.Converted != nil {
		return &f.Converted.Reading
	}
	return f.Reading
}

// Conversion is a reading brought over to another condition by a stated rule.
type Conversion struct {
	OK      bool
	Reading Reading // at the limit's condition, its U including the rule's own; its sense says whether the rule only bounds
	Rule    string  // in words, with the numbers: "×2 per 10 K from 31 °C to 25 °C"
	Source  Source
	U       float64 // the rule's own standard uncertainty, SI
	// NeverPasses is set where a converted value may only refute (a hot reading scaled down).
	NeverPasses bool
	Why         string // where not OK: why not
}
