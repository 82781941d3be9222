// Package meters reads and writes descriptions of meters: in words, a line or so for each meter, and as CSV.
//
// # Words
//
// A description is a list of entries with ";" between them. An entry begins with what it is of:
//
//	OF[@COND,…] [LOW..HIGH] ACCURACY [step=X] [spread=X] [99%] [digit-apart]
//	leads=R[±u]      ohms that the leads add, found with the leads shorted; u is a standard uncertainty
//	stray=C[±u]      farads that leads or jig add, found with nothing in them
//	found=DATE       when: 2026-03-01
//
// OF is a characteristic (capacitance, esr, hfe) or, for all of a unit that have no entry of their own, one of volts, ohms, farads, amperes,
// henries, celsius, numbers. COND is the test signal: capacitance@1kHz. LOW..HIGH is the range of readings that the entry holds for; either end
// may be missing. ACCURACY is what the maker claims, terms with "+" between them: 0.5% of the reading (or 50ppm), 2 counts of the last digit
// (2 or 2counts), and a fixed part with its unit (20mohm; of a plain number 0.002abs). A sign ± and brackets are understood. step is what one
// count is worth in this range (without it the last digit typed counts), spread the standard deviation of repeats on a steady part, 99% says
// that the claim is 99 % of a normal distribution and not a bound, digit-apart that it leaves the digit out. No part of an entry has a
// decimal comma. An offset without its u is known to within half of itself.
//
//	volts 0..40V 0.5%+2; ohms 0..400 0.8%+3 step=0.1; ohms 400.. 0.8%+2; capacitance@100Hz 2%+5; leads=0.2ohm±0.05; found=2026-03-01
//
// # CSV
//
// One row for each entry, columns in any order: meter (the name, needed in every row), of (with its @COND, or leads, stray, found), low,
// high, accuracy (or the value of leads, stray, found), step, spread, confidence (99% or rectangular), digit (apart or in), and columns
// source, status and note for people, which are not read. Rows of one name are one meter.
package meters
