package cli

import (
	"fmt"
	"strconv"

	"goodbin/screening/sampling"
)

// The ways of sampling as JSON names them.
const (
	methodSingle     = "single"
	methodZero       = "accept-on-zero"
	methodPartByPart = "part-by-part"
)

// jsonSampling is what sampling --json prints. Fractions are 0 to 1; the AQL alone is in percent, as the tables head it.
type jsonSampling struct {
	Schema          int              `json:"schema"`
	Method          string           `json:"method"` // single, accept-on-zero, part-by-part
	Lot             int              `json:"lot"`
	Level           *string          `json:"level"`
	AQLPercent      *float64         `json:"aql_percent"`
	Inspection      *string          `json:"inspection"`
	Changes         []string         `json:"changes,omitempty"` // of inspection in the history
	Stopped         bool             `json:"stopped"`           // by the history: no lot is to be taken
	Letter          *string          `json:"letter"`
	PlanLetter      *string          `json:"plan_letter"` // the row that the arrows lead to
	N               *int             `json:"n"`           // parts to test; part by part: at most
	TableN          *int             `json:"table_n"`
	TestAll         bool             `json:"test_all"`
	Accept          *int             `json:"accept"` // at most so many bad; part by part: after the parts tested, null while it cannot be
	Reject          *int             `json:"reject"`
	Good            *float64         `json:"good"`
	Worst           *float64         `json:"worst"`
	WorstParts      *int             `json:"worst_parts"` // bad parts in a lot that bad
	SupplierRisk    *float64         `json:"supplier_risk"`
	Risk            *float64         `json:"risk"`
	Chance          *float64         `json:"chance"` // that a lot with the worst share is accepted
	FirstAcceptance *int             `json:"first_acceptance"`
	AverageGood     *float64         `json:"average_n_good"`
	AverageBad      *float64         `json:"average_n_worst"`
	Tested          *int             `json:"tested"`
	Found           *int             `json:"found"`
	Outcome         *string          `json:"outcome"`
	Curve           []jsonCurvePoint `json:"curve"`
	Source          jsonSource       `json:"source"`
	Note            string           `json:"note"`
}

// refuses reports whether the lot is refused, or no lot is to be taken at all.
func (j *jsonSampling) refuses() bool {
	return j.Stopped || j.Outcome != nil && (*j.Outcome == sampling.Refused.String() || *j.Outcome == sampling.StopAndRefuse.String())
}

// jsonCurvePoint is a point of the operating characteristic.
type jsonCurvePoint struct {
	Bad          float64 `json:"bad"`           // fraction
	ChanceStream float64 `json:"chance_stream"` // of acceptance, a lot drawn from an endless stream: binomial
	BadParts     int     `json:"bad_parts"`     // the nearest number in this lot
	ChanceLot    float64 `json:"chance_lot"`    // of acceptance, this very lot: hypergeometric
}

// mostPercentAQL is the highest AQL that is a share of bad parts; above it the tables count defects per hundred parts.
const mostPercentAQL = 10

// percentText prints a fraction in percent to three digits.
func percentText(fraction float64) string {
	return strconv.FormatFloat(fraction*100, 'g', 3, 64) + " %"
}

// counted prints a number of parts.
func counted(n int) string {
	if n == 1 {
		return "1 part"
	}
	return strconv.Itoa(n) + " parts"
}

// printSampling prints what to test, what refuses, how sure that is, and what no sample can say.
func (a *app) printSampling(out jsonSampling) error {
	rows := [][2]string{}
	add := func(label, format string, args ...any) {
		rows = append(rows, [2]string{label, fmt.Sprintf(format, args...)})
	}
	var head string
	switch out.Method {
	case methodSingle:
		unit := "%"
		if *out.AQLPercent > mostPercentAQL {
			unit = "defects a hundred parts"
		}
		head = fmt.Sprintf("lot of %d, AQL %g %s, level %s, %s inspection: letter %s",
			out.Lot, *out.AQLPercent, unit, *out.Level, *out.Inspection, *out.Letter)
		samplingSingle(out, add)
	case methodZero:
		head = fmt.Sprintf("lot of %d, accepted on zero, worst %s, risk %s", out.Lot, percentText(*out.Worst), percentText(*out.Risk))
		if out.TestAll {
			add("test    ", "all %s: no smaller sample would do", counted(out.Lot))
		} else {
			add("test    ", "%s, drawn at random from the whole lot", counted(*out.N))
		}
		add("accept  ", "with none bad; one bad part refuses the lot")
		add("means   ", "a lot with %d bad of %d is accepted with a chance of %s", *out.WorstParts, out.Lot, percentText(*out.Chance))
	case methodPartByPart:
		head = fmt.Sprintf("lot of %d, part by part, good %s, worst %s", out.Lot, percentText(*out.Good), percentText(*out.Worst))
		samplingPartByPart(out, add)
	}
	for _, change := range out.Changes {
		add("so far  ", "%s", change)
	}
	if out.Outcome != nil {
		add("so      ", "%s: %s", foundText(out), *out.Outcome)
	}
	if out.Stopped {
		add("stop    ", "take no more lots from this source until the cause is found")
	}
	add("source  ", "%s (%s)", *out.Source.Document, *out.Source.Status)
	add("note    ", "%s", out.Note)
	if err := a.env.strong(head); err != nil {
		return err
	}
	for _, r := range rows {
		if err := a.env.wrapped(r[0], r[1]); err != nil {
			return err
		}
	}
	return nil
}

func foundText(out jsonSampling) string {
	if out.Tested != nil {
		return fmt.Sprintf("%d bad of %d tested", *out.Found, *out.Tested)
	}
	return fmt.Sprintf("%d bad in the sample", *out.Found)
}

func samplingSingle(out jsonSampling, add func(label, format string, args ...any)) {
	if out.TestAll {
		add("test    ", "all %s: the table's sample of %d is no smaller than the lot", counted(out.Lot), *out.TableN)
	} else {
		add("test    ", "%s, drawn at random from the whole lot", counted(*out.N))
	}
	bad := "bad"
	if *out.AQLPercent > mostPercentAQL {
		bad = "defects, of which a part may have several"
	}
	add("accept  ", "with at most %d %s", *out.Accept, bad)
	add("refuse  ", "with %d or more", *out.Reject)
	if *out.Reject > *out.Accept+1 {
		add("between ", "accept, and go back to normal inspection")
	}
	if *out.PlanLetter != *out.Letter {
		add("arrow   ", "the plan of letter %s has no sample of its own at this AQL; the table sends to letter %s", *out.Letter, *out.PlanLetter)
	}
	for _, p := range out.Curve {
		add("means   ", "lots with %s bad are accepted %.0f times in 100; this very lot with %d bad, %.0f",
			percentText(p.Bad), 100*p.ChanceStream, p.BadParts, 100*p.ChanceLot)
	}
}

func samplingPartByPart(out jsonSampling, add func(label, format string, args ...any)) {
	add("test    ", "one part after the other, drawn at random, at most %d", *out.N)
	add("accept  ", "at the earliest after %d without a bad one", *out.FirstAcceptance)
	switch {
	case out.Accept != nil && out.Reject != nil:
		add("now     ", "after %d: accept with at most %d bad, refuse with %d or more", *out.Tested, *out.Accept, *out.Reject)
	case out.Reject != nil:
		add("now     ", "after %d: refuse with %d bad or more", *out.Tested, *out.Reject)
	}
	add("means   ", "on average %.0f parts for a lot at the good share, %.0f at the worst; a good lot is refused in %s, the worst accepted in %s of cases",
		*out.AverageGood, *out.AverageBad, percentText(*out.SupplierRisk), percentText(*out.Risk))
}
