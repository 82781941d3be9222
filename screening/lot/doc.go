// Package lot looks at the readings of many parts of one lot together: how they are spread, how the lot stands to its limits, which part is
// unlike its fellows although it passes, and what in the readings themselves is suspicious: two populations in one bag, drift while
// measuring, a unit that slipped, rows that were copied.
//
// Everything works on one characteristic at one condition, in the order of measuring; values are in SI units. Only readings of an exact
// value belong here, no "at least" and no "at most". Whatever is found is a reason to measure again or to look again, never a verdict: the
// judge decides, part by part.
//
// Each test is named with its threshold and its chance of a false alarm; the tests of this package show that chance by simulation.
// Distributions are gonum's.
package lot
