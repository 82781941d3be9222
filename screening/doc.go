// Package screening is the centre of goodbin: the words of the trade as types, and the one judge that holds a part's readings against
// the limits that its claim implies.
//
// A [Part] is one physical component: what it claims (a [Claim] of ratings and traits), what was seen on it, and what the bench measured
// (each [Reading] with its condition, sense and text as typed). A [Rulebook] is all that is known of one kind of part: what is printed on
// it, what to look for, what to measure in which order, which [Limit] each claim implies and who says so. [Judge] holds the best evidence
// for each limit against it under the meter's uncertainty, and rolls the [Finding]s up into one of six verdicts with its reasons and next
// steps. [Walk] is the same knowledge turned into the next question for the person at the bench.
//
// Limits depend on claims, never on readings; the judge is the only place where the two meet. The package knows no kind of part, no file
// and no screen: rulebooks, meters and policy are values handed in.
//
// Values are float64 in coherent SI units throughout; temperature in °C is the one exception. Text with prefixes exists only at the edges
// (package quantity).
package screening
