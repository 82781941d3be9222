package inventory

import (
	"time"

	"goodbin/screening"
)

// Part is one judged part, or one being measured.
type Part struct {
	ID      ID             // Number 0: SavePart gives it the next one of its lot
	Part    screening.Part // as measured; an empty Claim is the lot's, see Workbook.Claimed
	Header  string         // the row's own claim as typed; "" where it takes the lot's
	Skipped []string       // keys of the questions left for later
	GoOn    bool           // the person chose to go on after the walk stopped
	Outcome Outcome
	Place   string // "" is the lot's
	Note    string
	Count   Count     // how many this record stands for; the zero Count is saved as exactly 1
	Taken   int       // of them, how many are out of the box
	Changed time.Time // set by the workbook
}

// Left returns how many are in the box. It means nothing where the count is unknown.
func (p Part) Left() int { return max(0, p.Count.N-p.Taken) }

// InStock reports whether the part can be used now: accepted or regraded, and not all taken.
func (p Part) InStock() bool {
	return p.Outcome.Verdict.Usable() && (p.Count.Level == Unknown || p.Left() > 0)
}

// Outcome is the stored summary of a judgement. The judgement itself can always be had again from the readings.
type Outcome struct {
	Kind    screening.Kind
	Verdict screening.Verdict // NoVerdict: not judged yet
	Grade   screening.Grade
	// As is what the part is held as where that is not its own claim: the lesser claim of a regrade, the proven tolerance of an accept,
	// what a part waiting for treatment meets today. AsClaim is the same as a claim.
	As        string
	AsClaim   screening.Claim
	Title     string   // what it claims to be, in one line
	NotTested []string // wanted and not measured, and what the evidence leaves unproven; shown with the verdict everywhere
	Why       string   // the first reason
	Next      string   // the first next step
	Tables    string   // version of the tables it was judged under
	Assumed   bool     // it rests on the assumed meter
	Judged    time.Time
}

// Stale reports whether the outcome was reached under other tables than these, or under another claim of its lot. What was never judged
// is not stale.
func (o Outcome) Stale(tables string) bool {
	return o.Verdict != screening.NoVerdict && o.Tables != tables
}

// Summarise makes the stored summary of a judgement. title is the claim in one line ("2200 µF 35 V").
func Summarise(j screening.Judgement, title string, now time.Time) Outcome {
	o := Outcome{
		Kind: j.Part.Kind, Verdict: j.Verdict, Grade: j.Grade, Title: title, Tables: j.Tables, Assumed: j.Assumed, Judged: now,
	}
	if j.RegradedAs != nil {
		o.As, o.AsClaim = j.RegradedAs.Text, j.RegradedAs.Claim
	}
	for _, gap := range j.NotTested {
		o.NotTested = append(o.NotTested, gapText(gap))
	}
	o.NotTested = append(o.NotTested, j.Untested...)
	if len(j.Reasons) > 0 {
		o.Why = j.Reasons[0].Text
	}
	if len(j.Next) > 0 {
		o.Next = j.Next[0].Text
	}
	return o
}

// gapText names what was not measured: "leakage at 35 V, after 2 min".
func gapText(g screening.Gap) string {
	text := string(g.Of)
	if g.Section != "" {
		text += " of section " + g.Section
	}
	if !g.At.IsZero() {
		text += " at " + g.At.String()
	}
	return text
}
