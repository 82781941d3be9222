package screening

// Verdict is what to do with a part.
type Verdict uint8

// The verdicts, from the best news to the worst.
const (
	NoVerdict Verdict = iota
	Accept
	Regrade
	Treat
	Undecided
	Barred
	Reject
)

var verdictNames = [...]string{"", "accept", "regrade", "treat", "undecided", "barred", "reject"}

// Verdicts lists the six verdicts.
func Verdicts() []Verdict { return []Verdict{Accept, Regrade, Treat, Undecided, Barred, Reject} }

// String returns the verdict's word.
func (v Verdict) String() string { return verdictNames[min(int(v), len(verdictNames)-1)] }

// Usable reports whether a part with this verdict belongs to stock.
func (v Verdict) Usable() bool { return v == Accept || v == Regrade }

// VerdictNamed finds the verdict of a word.
func VerdictNamed(name string) (Verdict, bool) {
	for i, n := range verdictNames {
		if n == name && i > 0 {
			return Verdict(i), true
		}
	}
	return NoVerdict, false
}

// Reason is one sentence of why, with a code that scripts can rely on.
type Reason struct {
	Code string
	Text string
	Of   Characteristic // what it is about; "" for the whole part
}

// Codes of reasons and next steps. They are part of the JSON output and stay.
const (
	CodeStop            = "stop"
	CodeHold            = "hold"
	CodePasses          = "passes"
	CodeFails           = "fails"
	CodeUntreated       = "treatable"
	CodeTreatedBefore   = "treated-before"
	CodeLesserClaim     = "lesser-claim"
	CodeToleranceProven = "tolerance-proven"
	CodeNearLimit       = "near-limit"
	CodeAssumed         = "assumed"
	CodeNote            = "note"
	CodeDrifting        = "drifting"
	CodeUnsettled       = "unsettled"
	CodeSeen            = "seen"
	CodeMeasure         = "measure"
	CodeRepeat          = "repeat"
	CodeConfirmFigure   = "confirm-figure"
	CodeTreatFirst      = "treat"
	CodeStore           = "store"
	CodeScrap           = "scrap"
	CodeKeepApart       = "keep-apart"
)

// Step is a next step in words.
type Step struct {
	Code string
	Text string // "MEASURE leakage at 35 V, after 2 min"
	Gap  Gap    // what it is about, for measure and repeat
}

// Stop is a check found by eye, or a family, that decides whatever the readings say. One with the verdict Undecided only holds: while it
// stands the readings decide nothing.
type Stop struct {
	Check   string
	Verdict Verdict
	Reason  string
	Do      string // what to do with the part
	Source  Source
}

// Level says how grave a caution is.
type Level uint8

// The levels.
const (
	Notice Level = iota
	Danger
)

// String returns the level's word.
func (l Level) String() string { return [...]string{"notice", "danger"}[min(int(l), 1)] }

// Caution is a warning with computed numbers, shown at the step where it matters.
type Caution struct {
	Code   string
	Level  Level
	Text   string
	Values map[string]float64 // the computed numbers by name, SI: "energy", "discharge-resistance", "discharge-power", "discharge-time"
	Source Source
	// Gate asks for the volts remaining across the part before it is touched, and again after every test under voltage.
	Gate bool
}

// Recipe says how to measure something with what people own.
type Recipe struct {
	Title  string
	Lines  []string           // each one step, with this part's numbers
	Values map[string]float64 // the computed numbers by name, SI: "supply", "series-resistance", "resistor-power"
	Source Source
}

// Lesser is a lesser claim that answers a failure.
type Lesser struct {
	Claim   Claim
	Answers Criterion // the criterion whose failure, or closeness, it answers
	Text    string    // "as measured, 112 µF", "group A", "±10 %"
	// Tolerance marks a claim that only widens a tolerance: it also answers a close finding, and the verdict stays accept.
	Tolerance bool
	// FromMissing marks a claim that answers a missing or unclaimed value: unmarked parts taken as measured.
	FromMissing bool
	Source      Source
}

// Judgement is all that the judge has to say of one part.
type Judgement struct {
	Part     Part  // with the claim completed and the readings' uncertainties
	Claim    Claim // as completed by the rulebook
	Tables   string
	Stops    []Stop
	Findings []Finding
	Verdict  Verdict
	Grade    Grade
	// RegradedAs is the claim that the part meets where the verdict is regrade, or the proven tolerance where it is accept; what a part
	// waiting for treatment meets today where it is treat.
	RegradedAs *Lesser
	NotTested  []Gap // wanted and not measured; listed with the verdict everywhere
	Untested   []string
	Reasons    []Reason
	Next       []Step
	Cautions   []Caution
	Assumed    bool // the verdict rests on the assumed meter
}
