// Package potentiometer is the rulebook of potentiometers and trimmers: the whole track, both ends of it, the wiper on its way, and the taper
// as it reads, whatever letter is printed.
package potentiometer

import (
	"time"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "potentiometer"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The traits that a potentiometer claims.
const (
	TraitTaper  = "taper"
	TraitForm   = "form"   // trimmer, panel, slider
	TraitSwitch = "switch" // "switched" where it has one
)

// overOhms is what OL shows of any of a potentiometer's resistances, as of [screening.Resistance].
var overOhms = screening.Resistance.Over

// The readings that only a potentiometer has.
var (
	// EndCCW and EndCW are the resistance between the wiper and the end it stands at, at either stop.
	EndCCW = screening.Definition{Name: "end-ccw", Symbol: "RE(1-2)", Label: "end resistance, anticlockwise", Unit: quantity.Ohm, Over: overOhms}
	EndCW  = screening.Definition{Name: "end-cw", Symbol: "RE(2-3)", Label: "end resistance, clockwise", Unit: quantity.Ohm, Over: overOhms}
	// CRV is the contact resistance variation: how far the resistance to the wiper jumps while it is turned slowly.
	CRV = screening.Definition{Name: "crv", Symbol: "CRV", Label: "contact resistance variation", Unit: quantity.Ohm, Over: overOhms}
	// Midpoint is the resistance between the anticlockwise end and the wiper in the middle of its travel.
	Midpoint = screening.Definition{Name: "midpoint", Symbol: "R1-2", Label: "resistance to the wiper in mid-travel", Unit: quantity.Ohm, Over: overOhms}
	// MidpointShare is Midpoint over the whole track.
	MidpointShare = screening.Definition{Name: "midpoint-share", Symbol: "R1-2/R1-3", Label: "share of the track in mid-travel", Unit: quantity.Ratio}
	// SwitchClosed and SwitchOpen are the resistance of a potentiometer's switch.
	SwitchClosed = screening.Definition{Name: "switch-closed", Symbol: "RSW(on)", Label: "resistance of the closed switch", Unit: quantity.Ohm, Over: overOhms}
	SwitchOpen   = screening.Definition{Name: "switch-open", Symbol: "RSW(off)", Label: "resistance of the open switch", Unit: quantity.Ohm, Over: overOhms}
)

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "potentiometer or trimmer",
		Tables: book.Version(Kind, edition, technologiesCSV, limitsCSV, tapersCSV, lettersCSV),
		Claims: claims(), Bench: bench(), Look: look(),
		Complete: complete, Limits: limits, Derive: derive, Adjust: adjust, Lesser: lesser, Untested: untested, Cautions: cautions,
		Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Resistance, Required: true, Example: "10k", Ambiguous: printedMeanings,
			Help: "of the whole track: 10k; sections that differ: rated:resistance/1=10k rated:resistance/2=100k",
		},
		{
			Definition: book.Trait(TraitTaper, "taper"), Trait: true, Words: taperWords(), AcceptText: taperText, Example: "linear",
			Help: "linear, log or reverse-log; a letter alone means different tapers in different countries",
		},
		{
			Definition: screening.Tolerance, Help: "letters G J K M, or 20%; 10 % cermet and 20 % carbon where none is printed", Example: "20%",
			AcceptRange: toleranceLetter,
		},
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Words: technologyWords(), Example: "cermet",
			Help: "of the track: carbon, cermet, wirewound, conductive-plastic, unknown",
		},
		{
			Definition: book.Trait(TraitForm, "form"), Trait: true, Example: "trimmer", Help: "trimmer, panel or slider",
			Words: []screening.Word{{Word: "trimmer", Text: "trimmer"}, {Word: "trimpot", Text: "trimmer"}, {Word: "preset", Text: "trimmer"}, {Word: "panel", Text: "panel"}, {Word: "slider", Text: "slider"}},
		},
		{
			Definition: book.Trait(book.TraitSections, "sections"), Trait: true, Example: "dual", Help: "tracks moved together: single, dual, 2-gang",
			Words: []screening.Word{{Word: "single", Text: "1"}, {Word: "dual", Text: "2"}, {Word: "stereo", Text: "2"}, {Word: "2-gang", Text: "2"}, {Word: "3-gang", Text: "3"}, {Word: "4-gang", Text: "4"}},
		},
		{
			Definition: book.Trait(TraitSwitch, "switch"), Trait: true, Example: "switched", Help: "where a switch sits on the same shaft",
			Words: []screening.Word{{Word: "switched", Text: "switched"}, {Word: "with-switch", Text: "switched"}},
		},
		{Definition: screening.Power, Help: "printed, or judged by size; it is not tested", Example: "0.25W"},
		book.DatedField(),
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Resistance, Effort: 5 * time.Second, FollowsNominal: true, Example: "9.6k",
			Help: "between the two ends of the track, out of circuit",
		},
		{Definition: SwitchClosed, Effort: 5 * time.Second, Example: "0.2", Help: "across the switch, on; work it a few times first"},
		{Definition: SwitchOpen, Effort: 5 * time.Second, Example: "OL", Help: "across the switch, off"},
		{
			Definition: CRV, Effort: 30 * time.Second, Example: "40",
			Help: "end to wiper, on one range that you keep: turn slowly from stop to stop and type the largest jump off a smooth way, 0 for none",
		},
		{Definition: EndCCW, Effort: 10 * time.Second, Example: "3", Help: "anticlockwise end to wiper, turned fully anticlockwise"},
		{Definition: EndCW, Effort: 10 * time.Second, Example: "3", Help: "clockwise end to wiper, turned fully clockwise"},
		{
			Definition: Midpoint, Effort: 15 * time.Second, Example: "4.7k",
			Help: "from the end where it stands when fully anticlockwise to the wiper, turned to the middle of its travel",
		},
		{
			Definition: MidpointShare, Effort: 30 * time.Second, Example: "48%", Band: screening.Span{Low: 0, High: 1},
			Help: "computed from the two resistances; type it only where you measured it otherwise",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the room", Example: "22C"},
	}
}

var lookSource = screening.Source{Document: "repairers' rule", Status: screening.CommonPractice}

func look() []screening.Check {
	return book.Look(
		screening.Check{
			Name: "burnt", Words: []string{"burnt", "charred"}, Question: "Is the track or case burnt or blistered?",
			Help:    "look through the slot beside the lugs: a bare or brown patch, mostly near one end",
			Verdict: screening.Reject, Reason: "the track has been overheated: what is left of it will not stay",
			Do: "SCRAP it, and find out what drew the current before you fit another", Source: lookSource,
		},
		screening.Check{
			Name: "loose-lug", Words: []string{"loose-lug", "loose-rivet"}, Question: "Does a lug or its rivet move?",
			Help:    "a rivet that turns in a carbon track has lost its contact, though it may read well until it is soldered",
			Verdict: screening.Reject, Reason: "a loose rivet opens the track when it is soldered or warms",
			Do: "SCRAP it, or mark it so that it is not used", Source: lookSource,
		},
		screening.Check{
			Name: "stiff", Words: []string{"stiff", "wobbly", "seized"}, Question: "Is the shaft stiff, wobbly or bent?",
			Help:   "hardened grease is not a fault of the track; never force a stop",
			Reason: "its shaft is stiff, wobbly or bent: see that it serves", Source: lookSource,
		},
	)
}
