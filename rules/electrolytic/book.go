// Package electrolytic is the rulebook of aluminium electrolytic capacitors, multi-section cans included.
//
// A part prints capacitance and rated voltage, sometimes a tolerance and a date. Three questions decide: is the capacitance there
// (criterion capacitance), are the losses low (criterion loss: ESR or tan δ at 100/120 Hz), does the oxide stand the voltage (criterion
// leakage: one point 1, 2 or 5 minutes after the rated voltage is applied; of a non-polar part one each way round). A part that has dried out reads low with high ESR; nothing
// undoes that. A part that has lost its oxide in storage leaks, and reads high; re-forming can undo that.
package electrolytic

import (
	"time"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// Kind is the kind's word.
const Kind screening.Kind = "electrolytic"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "4"

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind:     Kind,
		Label:    "aluminium electrolytic capacitor",
		Tables:   book.Version(Kind, edition, leakageCSV, tanDeltaCSV, figuresCSV),
		Claims:   claims(),
		Bench:    bench(),
		Look:     looks(),
		Complete: complete,
		Limits:   limits,
		Convert:  convert,
		Adjust:   adjust,
		Lesser:   lesser,
		Untested: untested,
		Cautions: cautions,
		Recipes:  recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Capacitance, Required: true, Example: "2200uF",
			Help:      "as printed; several sections as 8+8/450, or capacitance/2=… for one of them",
			Ambiguous: book.KiloOrTolerance,
		},
		{
			Definition: screening.RatedVoltage, Required: true, Example: "35V",
			Help: "the working voltage as printed, not the surge voltage (SV) beside it",
		},
		{
			Definition: screening.Tolerance, Example: "M",
			Help:        "letter (M is ±20 %, T is −10/+50 %) or percents; leave it out where none is printed",
			AcceptRange: book.CapacitorToleranceLetter, Ambiguous: book.ToleranceMeanings,
		},
		{
			Definition: book.Trait(screening.TraitDated, "maker's date"), Trait: true, Example: "1974",
			Help: "a year, or a decade such as 197x; age decides which limits are fair", AcceptText: acceptYear,
		},
		{
			Definition: book.Trait(screening.TraitCase, "case"), Trait: true, Example: caseRadial,
			Help: "radial, axial, can, snap-in, screw or smd; radial is taken where none is given",
			Words: []screening.Word{
				{Word: "radial", Text: caseRadial},
				{Word: "axial", Text: caseAxial},
				{Word: "can", Text: caseCan},
				{Word: "snap-in", Text: caseSnapIn},
				{Word: "snapin", Text: caseSnapIn},
				{Word: "screw", Text: caseScrew},
				{Word: "smd", Text: caseSMD},
			},
		},
		{
			Definition: book.Trait(traitCanSize, "can size"), Trait: true, Example: "10x20",
			Help: "diameter by length in mm; it says how much heat the can stands while it is re-formed", AcceptText: acceptCanSize,
		},
		technologyField(),
		{
			Definition: book.Trait(traitSeries, "maker's series"), Trait: true, Example: "sound-series",
			Help:  "sound-series where others of its series and years have lasted; it counts for parts of 1999 to 2007 that read high and leak",
			Words: []screening.Word{{Word: "sound-series", Text: seriesSound}},
			Ask: "REPLACE it, or prove the series good: others of the same maker, series and years that have lasted; then claim sound-series " +
				"(no reading of this part settles it)",
		},
	}
}

var (
	anyFrequency  = screening.Fit{screening.Frequency: screening.Any}
	mainsDoubled  = screening.Fit{screening.Frequency: {Low: 0.8, High: 1.25}}
	nearlyAtRated = screening.Fit{
		screening.Voltage: {Low: 0.97, High: 1.03}, screening.After: {Low: 0.9, High: 1.1}, screening.PartTemperature: {Low: 0.75, High: 1.25},
	}
)

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Capacitance, Example: "capacitance=2010uF", FollowsNominal: true, Effort: 10 * time.Second,
			Help:    "discharged, out of circuit; 100 or 120 Hz where the meter offers it (a DC charging meter reads about 10 % more)",
			Default: screening.At(screening.Frequency, lossFrequency), Fit: anyFrequency, Band: screening.Span{Low: 0, High: 100},
		},
		{
			Definition: screening.ESR, Example: "esr@120Hz=61m", Effort: 10 * time.Second,
			Help: "say at which frequency: many ESR meters work at 100 kHz, where less is read; touch the probes together first",
			Fit:  mainsDoubled, Band: screening.Span{Low: 0, High: 1e6},
		},
		{
			Definition: screening.TanDelta, Example: "tan-delta=0.08", Effort: 15 * time.Second,
			Help:    "also called D or dissipation factor; instead of ESR",
			Default: screening.At(screening.Frequency, lossFrequency), Fit: mainsDoubled, Band: screening.Span{Low: 0, High: 1000},
		},
		{
			Definition: screening.Leakage, Example: "leakage@35V,2min=45uA", Effort: 6 * time.Minute, UnderVoltage: true,
			Help:    "the current at rated voltage, 1, 2 or 5 min after it stands across the part",
			Default: screening.At(screening.PartTemperature, roomTemperature), Fit: nearlyAtRated, Band: screening.Span{Low: 0, High: 10},
		},
		{
			Definition: LeakageReversed, Example: "leakage-reversed@50V,5min=45uA", Effort: 6 * time.Minute, UnderVoltage: true,
			Help:    "of a non-polar part only: the same with its leads swapped, after it was discharged",
			Default: screening.At(screening.PartTemperature, roomTemperature), Fit: nearlyAtRated, Band: screening.Span{Low: 0, High: 10},
		},
		{
			Definition: screening.Temperature, PerPart: true, Example: "temperature=24C", Effort: 5 * time.Second,
			Help: "of the part; room temperature is assumed where none is given", Band: screening.Span{Low: -60, High: 150},
		},
		{
			Definition: screening.RemainingVoltage, PerPart: true, Example: "remaining-voltage=0.2V", Effort: 5 * time.Second,
			Help: "across the terminals, after discharging, before anything touches it", Band: screening.Span{Low: -2000, High: 2000},
		},
	}
}

func looks() []screening.Check {
	return book.Look(
		screening.Check{
			Name:     bulged,
			Words:    []string{"bulged", "leaking", "crusted", "vented"},
			Question: "Bulged, vented, leaking, crusted, or the bung pushed out?",
			Help: "look at the vent on top, the rubber bung and the board below it; a bulge under the sleeve can be felt. " +
				"No such sign is no proof of health",
			Verdict: screening.Reject,
			Reason:  "a part that has vented or leaked has lost its electrolyte; whatever it reads today, it fails",
			Do:      "bag it with gloves on and wash what it leaked on; never re-form it, never open it",
			Source: screening.Source{
				Document: "general article on the electrolyte fault of 1999–2007 (\"capacitor plague\")", Clause: "visible symptoms",
				Status: screening.Published,
			},
		},
	)
}

// bulged is the name of the check for a part that has vented.
const bulged = "bulged"
