// Package oxide holds what the rulebooks of solid electrolytic capacitors share, tantalum and polymer: leakage that follows C·V, a ladder of
// tan δ by capacitance, the makers' end-of-life figures for a serviceable part, the ohms reading that finds a short, and the recipes.
//
// Two things decide. Is the capacitance there, and is it free of a short: the way in which these parts fail. An ohmmeter shows the second as
// well as a supply does, so a pocket meter can answer all that is required; leakage at rated voltage and the losses are wanted, and listed
// where they were not tested. The figures stand in the rulebooks' own tables.
package oxide
