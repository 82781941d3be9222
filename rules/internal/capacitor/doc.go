// Package capacitor holds what the rulebooks of capacitors share, whatever the dielectric: what is printed on them, the tolerance band with its
// picofarads, loss as tan δ or ESR, insulation as ohms, seconds or leakage current, and how to take these readings with what people own.
//
// A rulebook builds its claims and bench from the fields here, completes its claim with [Complete], makes its limits with [CapacitanceLimits],
// [LossLimit] and [InsulationLimit], and hands [Derive] and [Convert] to the judge. The figures themselves stand in the rulebooks.
package capacitor
