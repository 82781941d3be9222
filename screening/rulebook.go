package screening

import (
	"strings"
	"time"

	"goodbin/screening/quantity"
)

// Rulebook is all that is known of one kind of part. Functions that are nil do nothing. Rulebooks are values handed to whoever needs
// them; they hold no state.
type Rulebook struct {
	Kind   Kind
	Label  string  // "aluminium electrolytic capacitor"
	Tables string  // version of the tables behind it; a verdict under another version is stale
	Claims []Field // what is printed on it or stands in its data sheet: numbers and traits, in the order they are asked
	Bench  []Field // what is measured, in the order a person measures: quick ones that could reject first
	Look   []Check // before power is applied

	// Bars lists the stops that follow from a completed claim alone: a family that is refused whatever it reads. It may be nil.
	Bars func(Claim) []Stop
	// Complete adds what the claim implies: the type table's row, the gain group's range, the default tolerance by age. It returns notes
	// for the person and an error where the claim contradicts itself. It must be idempotent.
	Complete func(Claim) (Claim, []Reason, error)
	// Limits lists every known limit for a completed claim, all sets and grades.
	Limits func(Claim) ([]Limit, error)
	// Derive computes further readings (tan δ from ESR, net gain) from readings whose U is set, or notes why not.
	Derive func(Part) ([]Reading, []Reason)
	// Convert brings a reading to a limit's condition by a stated rule, or says why not. It is called only where the fields' Fit does not
	// already allow the comparison.
	Convert func(Part, Reading, Limit) Conversion
	// Adjust holds the rules across readings: it may raise needs, add treatments and change outcomes, saying why.
	Adjust func(Part, []Finding) ([]Finding, []Reason)
	// Lesser lists the lesser claims that answer the findings, best first.
	Lesser func(Part, []Finding) []Lesser
	// Untested words what the evidence at hand leaves unproven ("reverse blocking above 30 V"); shown with the verdict everywhere.
	Untested func(Part, []Finding) []string
	// Cautions lists the warnings that apply at a moment.
	Cautions func(Part, Moment) []Caution
	// Recipes says how to measure what a limit asks.
	Recipes func(Part, Limit) []Recipe
}

// Moment is a step of the work at which cautions are shown.
type Moment uint8

// The moments.
const (
	AtLook    Moment = iota // before the part is touched: stored charge
	AtMeasure               // before and after a test under voltage
	AtVerdict               // with the verdict: what the treatment needs, what not to do
)

// Field is one thing that a kind's claim or bench can hold.
type Field struct {
	Definition
	Trait    bool   // claimed in words; only Name and Label of the definition count
	Required bool   // a claim cannot be judged without it
	PerPart  bool   // never per section: temperature, remaining volts
	Help     string // one line: how it is printed or measured
	Example  string // what to type: "2200uF", "npn"
	Ask      string // the next step that asks for it, where "MEASURE" and its label would be odd: "TURN THE PROBES and read again"

	// AskWhen says that a claim which was left out matters for these findings: the walk then asks for it, and it may be skipped. It may be
	// nil.
	AskWhen func(Part, []Finding) bool

	// Words are the bare words that a trait takes, folded to lower case, and the text each stands for.
	Words []Word
	// AcceptText takes a bare word as this trait (a type number), returning its canonical text. It may be nil.
	AcceptText func(word string) (text string, ok bool)
	// AcceptRange takes a bare word as this rating's bounds (a tolerance letter). It may be nil.
	AcceptRange func(word string) (low, high float64, ok bool)
	// Ambiguous returns the meanings of a bare word that this field could take in two ways; entry refuses it listing them.
	Ambiguous func(word string) []string

	// Default is what a reading's absent conditions are taken as; shown as assumed.
	Default Condition
	// Fit says how far a reading's condition may lie from a limit's.
	Fit Fit
	// Effort is how long the measurement takes: quick ones that could reject come first.
	Effort time.Duration
	// UnderVoltage marks a test that leaves the part charged: the gate is asked again after it.
	UnderVoltage bool
	// Band is the range outside which a reading is refused as impossible, SI; zero means from 0 to +Inf. A negative reading within two
	// steps of zero is taken as zero.
	Band Span
	// FollowsNominal marks readings that the power-of-ten alarm guards: there is a nominal to compare with.
	FollowsNominal bool
}

// Word is a bare word and the trait text it stands for.
type Word struct{ Word, Text string }

// MaxLook is how many things a kind may have people look for: one digit key each.
const MaxLook = 9

// Check is one thing to look for.
type Check struct {
	Name     string   // "mains-or-cracked"
	Words    []string // the words that report it on the command line: seen=cracked
	Question string   // "Is it, or will it be, across the mains, or is it cracked?"
	Help     string
	Verdict  Verdict // Barred or Reject where it stops, Undecided where it holds every verdict back; NoVerdict where it is only kept
	Reason   string  // why it stops or holds
	Do       string  // what to do with the part then
	Source   Source
}

// Plain is the check's name in words: "mains or cracked".
func (c Check) Plain() string { return strings.ReplaceAll(c.Name, "-", " ") }

// Find returns the field of a name among the claims, then the bench.
func (b *Rulebook) Find(name Characteristic) (Field, bool) {
	if f, ok := b.ClaimField(name); ok {
		return f, true
	}
	return b.BenchField(name)
}

// ClaimField returns the claim field of a name.
func (b *Rulebook) ClaimField(name Characteristic) (Field, bool) { return fieldNamed(b.Claims, name) }

// BenchField returns the bench field of a name.
func (b *Rulebook) BenchField(name Characteristic) (Field, bool) { return fieldNamed(b.Bench, name) }

func fieldNamed(fields []Field, name Characteristic) (Field, bool) {
	for i := range fields {
		if fields[i].Name == name {
			return fields[i], true
		}
	}
	return Field{}, false
}

// ExampleClaim returns what a person might type for a part of this kind: "2200uF 35V".
func (b *Rulebook) ExampleClaim() string {
	var examples []string
	for i := range b.Claims {
		if f := &b.Claims[i]; f.Example != "" && (f.Required || len(examples) < 2) {
			examples = append(examples, f.Example)
		}
	}
	return strings.Join(examples, " ")
}

// bench is BenchField without the copy; nil for an unknown name.
func (b *Rulebook) bench(name Characteristic) *Field {
	for i := range b.Bench {
		if b.Bench[i].Name == name {
			return &b.Bench[i]
		}
	}
	return nil
}

// Definition returns the definition of a characteristic that the kind knows; an unknown one is described by its name alone.
func (b *Rulebook) Definition(name Characteristic) Definition {
	if f, ok := b.BenchField(name); ok {
		return f.Definition
	}
	if f, ok := b.ClaimField(name); ok {
		return f.Definition
	}
	return Definition{Name: name, Symbol: string(name), Label: string(name), Unit: quantity.One}
}

// Kinds is the table of all rulebooks, in the order in which they are offered.
type Kinds []*Rulebook

// Find returns the rulebook of a kind.
func (k Kinds) Find(kind Kind) (*Rulebook, bool) {
	for _, b := range k {
		if b.Kind == kind {
			return b, true
		}
	}
	return nil, false
}
