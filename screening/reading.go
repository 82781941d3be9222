package screening

import (
	"slices"

	"goodbin/screening/quantity"
	"goodbin/screening/uncertainty"
)

// Reading is what the bench measured: one value, or a series of repeats of it, at a condition.
type Reading struct {
	Of      Characteristic
	Section string  // "" for the whole part
	Value   float64 // SI; of a series its mean
	Sense   quantity.Sense
	Unit    quantity.Unit
	At      Condition
	Step    float64   // value of one unit in the last typed digit; 0 where unknown
	Over    bool      // the meter showed over-range; Sense and Value then say what that proves
	Repeats []float64 // the series that Value is the mean of; nil for a single reading
	Meter   string    // name of the meter; "" is the assumed one
	Typed   string    // the text as typed

	// What the judge adds.
	U         float64   // standard uncertainty, SI
	Spec      float64   // how far the meter may be off while it keeps its specification, SI; 0 where U is not a meter's
	Assumed   bool      // U rests on the assumed meter
	AssumedAt Condition // the part of At that is the field's default, not typed
	MeterAt   Condition // the part of At that is the meter's own test signal, not typed
	// Correction is what was added to the value shown for the meter's leads, SI; Value holds it already.
	Correction float64
	Rule       string  // how it was derived or converted; "" for a reading as taken
	From       []Input // what it was derived from, where its rule lists it
}

// Input is a reading or rating that another reading was derived from.
type Input struct {
	Of          Characteristic
	Name        string  // in words, where it is no reading: "rated capacitance and its tolerance"
	U           float64 // standard uncertainty, SI
	Sensitivity float64 // by how much the result changes per unit of it
}

// shown returns the value as the meter showed it.
func (r *Reading) shown() float64 { return r.Value - r.Correction }

// Spread returns the sample standard deviation of a series of repeats, 0 for a single reading.
func (r Reading) Spread() float64 { return uncertainty.Spread(r.Repeats) }

// Series makes one reading of several readings of the same thing. Its step is the coarsest. It returns the zero Reading for none.
func Series(readings ...Reading) Reading {
	if len(readings) == 0 {
		return Reading{}
	}
	r := readings[0]
	if len(readings) == 1 {
		return r
	}
	r.Repeats = make([]float64, 0, len(readings))
	r.Typed = ""
	var sum float64
	for i, x := range readings {
		sum += x.Value
		r.Repeats = append(r.Repeats, x.Value)
		r.Step = max(r.Step, x.Step)
		if i > 0 {
			r.Typed += ","
		}
		r.Typed += x.Typed
	}
	r.Value = sum / float64(len(readings))
	return r
}

// Observation is the answer to one check by eye.
type Observation struct {
	Check string
	Fault bool // the thing looked for is there
}

// Part is one physical component with all that is known of it.
type Part struct {
	Kind     Kind
	Claim    Claim // its own, as marked or as the lot's header says
	Look     []Observation
	Readings []Reading // in the order taken; a later reading of the same thing at the same condition supersedes
	Treated  int       // how many times it was treated
}

// Current returns the readings that stand: of each characteristic, section and condition the last one taken.
func (p Part) Current() []Reading {
	standing := make([]Reading, 0, len(p.Readings)+2) // room for what the judge derives
next:
	for i := range p.Readings {
		r := &p.Readings[i]
		for k := range standing {
			if s := &standing[k]; s.Of == r.Of && s.Section == r.Section && s.At == r.At {
				*s = *r
				continue next
			}
		}
		standing = append(standing, *r)
	}
	return standing
}

// Reading returns the last reading taken of a characteristic that holds for a section (the section's own, else the whole part's).
func (p Part) Reading(of Characteristic, section string) (Reading, bool) {
	for _, want := range [...]string{section, ""} {
		for i := len(p.Readings) - 1; i >= 0; i-- {
			if r := &p.Readings[i]; r.Of == of && r.Section == want {
				return *r, true
			}
		}
	}
	return Reading{}, false
}

// Ambient returns the temperature reading of the set in °C, and whether there is one.
func (p Part) Ambient() (Reading, bool) { return p.Reading(Temperature.Name, "") }

// Seen returns the answer to a check, and whether it was looked at.
func (p Part) Seen(check string) (fault, looked bool) {
	for _, o := range slices.Backward(p.Look) {
		if o.Check == check {
			return o.Fault, true
		}
	}
	return false, false
}
