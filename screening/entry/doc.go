// Package entry turns what people type into claims and readings: words on the command line, answers at a prompt, and rows of a CSV file.
// It knows no kind of part: what a word may mean follows from the fields of the rulebook at hand.
//
// # Words
//
//	NAME[/SECTION][@COND,…]=VALUE    a reading; the last "=" separates
//	rated:NAME[/SECTION][@COND]=VALUE  what the part claims, in numbers: x, L..H, L.., ..H, and ±5% or +80-20% for a tolerance
//	TRAIT=TEXT                       what it claims in words
//	seen=WORD,…                      what was found by eye; seen=nothing: everything was looked at and is sound
//	treated=N                        how many times it was treated already
//	nothing                          it claims nothing, whatever the rest of its lot claims
//	anything else                    is offered to every claim of the kind, and exactly one may take it
//
// VALUE of a reading is x, ..x or <x (at most), x.. or >x (at least), OL (over-range), or repeats x,y,z. A value may have a decimal comma;
// a comma followed by exactly three digits is refused, and a list whose values have decimal commas separates them with ";". A condition has no
// decimal comma. A name that a kind only claims and never measures needs no "rated:".
//
// A multi-section part is claimed as the trade writes it, 8+8/450 or 50/350+25/25 (microfarads and volts), which makes the sections 1, 2, …;
// capacitance/2=7.9uF is the reading of the second.
//
// Words that could mean two things are refused with both meanings; nothing is guessed, and every word's meaning is echoed.
package entry
