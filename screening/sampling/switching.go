package sampling

import (
	"fmt"
	"strings"
	"sync"

	"goodbin/screening"
)

// SwitchingRule is one row of the rules by which inspection is tightened, relaxed or stopped.
type SwitchingRule struct {
	Scheme, From, To string
	Rule             string
	Source           screening.Source
}

// SwitchingRules returns the rules with their sources. Most are from memory or from the twin standard for measurements, and say so.
func SwitchingRules() []SwitchingRule { return append([]SwitchingRule(nil), switchingRules()...) }

var switchingRules = sync.OnceValue(func() []SwitchingRule {
	_, rows, err := records(switchingCSV)
	if err != nil {
		panic("sampling: embedded switching.csv: " + err.Error())
	}
	var out []SwitchingRule
	for _, row := range rows {
		source, err := sourceOf(row)
		if err != nil {
			panic("sampling: embedded switching.csv: " + err.Error())
		}
		out = append(out, SwitchingRule{Scheme: row[0], From: row[1], To: row[2], Rule: row[3], Source: source})
	}
	return out
})

const (
	window           = 5  // lots looked back over on normal inspection
	refusalsToTight  = 2  // refused within the window: tighten
	acceptedToNormal = 5  // accepted in a row on tightened: back to normal
	acceptedToReduce = 10 // accepted in a row on normal: may be reduced
	refusedToStop    = 5  // refused while on tightened: stop

	// ReducedScore is the switching score of ISO 2859-1:1999 at which inspection may be reduced (from memory).
	ReducedScore = 30
)

// Switching is where a series of lots stands: the zero value is the start, on normal inspection. It is a value; [Switching.Next] returns
// the state after one more lot, on original inspection (a lot sorted and offered again does not count).
type Switching struct {
	Inspection Inspection
	Stopped    bool // no lot is to be taken until the cause is found; only [Switching.Resume] leaves it
	MayReduce  bool // ten lots in a row were accepted; [Switching.Reduce] when the other conditions hold too

	inRow   int // accepted in a row since the last switch
	refused int // on tightened: refused since the switch
	last    [window]bool
	lots    int // since the last switch
}

// Next returns the state after a lot with this outcome, and why inspection changed; empty where it did not.
func (s Switching) Next(o Outcome) (Switching, string) {
	if s.Stopped {
		return s, ""
	}
	s.MayReduce = false
	s.last[s.lots%window] = o == Refused
	s.lots++
	if o == Refused {
		s.inRow = 0
		s.refused++
	} else {
		s.inRow++
	}
	switch s.Inspection {
	case Normal:
		if n := s.recentRefusals(); n >= refusalsToTight {
			return Switching{Inspection: Tightened}, fmt.Sprintf("%d of the last %d lots were refused", n, min(s.lots, window))
		}
		s.MayReduce = s.inRow >= acceptedToReduce
	case Tightened:
		if s.inRow >= acceptedToNormal {
			return Switching{}, fmt.Sprintf("%d lots in a row were accepted", s.inRow)
		}
		if s.refused >= refusedToStop {
			s.Stopped = true
			return s, fmt.Sprintf("%d lots were refused on tightened inspection: take no more from this source until the cause is found", s.refused)
		}
	case Reduced:
		switch o {
		case Refused:
			return Switching{}, "a lot was refused on reduced inspection"
		case Between:
			return Switching{}, "a lot lay between its acceptance and rejection numbers"
		}
	}
	return s, ""
}

func (s Switching) recentRefusals() int {
	n := 0
	for _, refused := range s.last {
		if refused {
			n++
		}
	}
	return n
}

// Reduce goes over to reduced inspection. It fails unless ten lots in a row were accepted on normal inspection. That production is steady and
// the bad parts stay within the limit number of table VIII the caller vouches for; for salvaged parts nobody can.
func (s Switching) Reduce() (Switching, error) {
	if s.Stopped || s.Inspection != Normal || !s.MayReduce {
		return s, fmt.Errorf("inspection: %d lots in a row are accepted on %s inspection; reduced needs %d on normal", s.inRow, s.Inspection, acceptedToReduce)
	}
	return Switching{Inspection: Reduced}, nil
}

// Irregular goes back from reduced to normal inspection because deliveries became irregular or for any other cause.
func (s Switching) Irregular() Switching {
	if s.Inspection == Reduced {
		return Switching{}
	}
	return s
}

// Resume goes on with tightened inspection after a stop whose cause was mended.
func (s Switching) Resume() Switching {
	if s.Stopped {
		return Switching{Inspection: Tightened}
	}
	return s
}

// Score returns the switching score of ISO 2859-1:1999 after a lot on normal inspection (from memory): 3 more where the plan accepts with 2
// or more bad parts and the lot would have passed one AQL step tighter too, 2 more where it accepts with 0 or 1 and did accept, else 0.
func Score(score int, plan, tighter Plan, bad int) int {
	switch {
	case plan.Outcome(bad) != Accepted:
		return 0
	case plan.Accept < 2:
		return score + 2
	case bad <= tighter.Accept:
		return score + 3
	}
	return 0
}

// mostHistory bounds the lots of a typed history.
const mostHistory = 10_000

// History reads the outcomes of earlier lots, oldest first: a for accepted, r for refused, b for one between the numbers of reduced
// inspection; spaces and commas between them do not matter. "aaara" is five lots of which the fourth was refused.
func History(text string) ([]Outcome, error) {
	var out []Outcome
	for _, c := range strings.ToLower(text) {
		switch c {
		case ' ', ',':
			continue
		case 'a':
			out = append(out, Accepted)
		case 'b':
			out = append(out, Between)
		case 'r':
			out = append(out, Refused)
		default:
			return nil, fmt.Errorf("history: %q is no outcome of a lot; write a for accepted, r for refused, such as aaara", c)
		}
		if len(out) > mostHistory {
			return nil, fmt.Errorf("history: more than %d lots", mostHistory)
		}
	}
	return out, nil
}
