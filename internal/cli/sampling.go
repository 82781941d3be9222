package cli

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/screening"
	"goodbin/screening/sampling"
)

const samplingExamples = `  goodbin sampling --lot 500 --aql 1.0                       how many to test, how many bad ones refuse the lot
  goodbin sampling --lot 500 --aql 1.0 --level II --inspection tightened
  goodbin sampling --lot 500 --aql 1.0 --history aaara       as strictly as the last five lots ask
  goodbin sampling --lot 500 --aql 1.0 --found 2             what two bad ones in the sample mean
  goodbin sampling --lot 60 --accept-on-zero --worst 5       fewest to test, none bad, so that 5 % bad would show
  goodbin sampling --lot 500 --part-by-part --good 1 --worst 10 --tested 12 --found 1
                                                             go on, accept, or stop`

// samplingFlags is what the command line says of a lot and its sample.
type samplingFlags struct {
	lot                              int
	aql, level, inspection, history  string
	zero, partByPart                 bool
	worst, good, risk, supplierRisks string
	tested, found                    int
}

func (a *app) samplingCommand() *cobra.Command {
	var f samplingFlags
	cmd := &cobra.Command{
		Use:   "sampling --lot N --aql PERCENT",
		Short: "how many parts of a lot to test, and how many bad ones refuse it",
		Long: "How many parts of a lot to test, and how many bad ones refuse it: by the tables of MIL-STD-105E (ISO 2859-1), accepting on zero, " +
			"or part by part.\nBut " + sampling.NotALot + ".",
		Example: samplingExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) > 0 {
				return request(fmt.Errorf("%q: sampling takes no words, only flags", args[0]), "goodbin sampling --lot 500 --aql 1.0")
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, _ []string) error { return a.sampling(f, cmd.Flags().Changed) },
	}
	flags := cmd.Flags()
	flags.IntVar(&f.lot, "lot", 0, "parts in the lot: one maker, one type, one history")
	flags.StringVar(&f.aql, "aql", "", "acceptable quality level, `PERCENT` bad (above 10: defects per hundred parts)")
	flags.StringVar(&f.level, "level", string(sampling.General), "inspection level: S-1, S-2, S-3, S-4, I, II or III")
	flags.StringVar(&f.inspection, "inspection", sampling.Normal.String(), "normal, tightened or reduced")
	flags.StringVar(&f.history, "history", "", "the lots before this one instead, oldest first: a accepted, r refused")
	flags.BoolVar(&f.zero, "accept-on-zero", false, "one bad part refuses: the fewest parts for this very lot (exact, hypergeometric)")
	flags.BoolVar(&f.partByPart, "part-by-part", false, "after each part go on, accept or stop (Wald's sequential test)")
	flags.StringVar(&f.worst, "worst", "", "`PERCENT` bad that must not slip through (LTPD)")
	flags.StringVar(&f.good, "good", "", "`PERCENT` bad that should be accepted, for --part-by-part")
	flags.StringVar(&f.risk, "risk", "10", "`PERCENT` chance allowed that a lot with the worst share is accepted")
	flags.StringVar(&f.supplierRisks, "supplier-risk", "5", "`PERCENT` chance allowed that a good lot is refused, for --part-by-part")
	flags.IntVar(&f.tested, "tested", 0, "parts tested so far, for --part-by-part")
	flags.IntVar(&f.found, "found", 0, "bad parts found: says what they mean for the lot")
	flags.BoolVar(&a.json, "json", false, "print JSON: fractions 0 to 1, null where absent")
	offer := func(name string, words ...string) {
		// It fails only for a flag that there is none of.
		_ = cmd.RegisterFlagCompletionFunc(name, cobra.FixedCompletions(words, cobra.ShellCompDirectiveNoFileComp))
	}
	var levels []string
	for _, l := range sampling.Levels() {
		levels = append(levels, string(l))
	}
	offer("level", levels...)
	offer("inspection", "normal", "tightened", "reduced")
	return cmd
}

// sampling answers for one of the three ways.
func (a *app) sampling(f samplingFlags, given func(string) bool) error {
	if !given("lot") {
		return request(errors.New("lot: say how many parts the lot has"), "goodbin sampling --lot 500 --aql 1.0")
	}
	if f.zero && f.partByPart {
		return request(errors.New("--accept-on-zero and --part-by-part are two ways"), "choose one")
	}
	if given("found") && f.found < 0 || given("tested") && f.tested < 0 {
		return request(errors.New("tested and found count parts from 0"), "")
	}
	var out jsonSampling
	var err error
	switch {
	case f.zero:
		out, err = acceptOnZero(f, given)
	case f.partByPart:
		out, err = partByPart(f, given)
	default:
		out, err = singlePlan(f, given)
	}
	if err != nil {
		return request(err, "")
	}
	out.Schema, out.Lot, out.Note = schema, f.lot, sampling.NotALot
	if a.json {
		err = a.writeJSON(out)
	} else {
		err = a.printSampling(out)
	}
	if err == nil && out.refuses() {
		return silent(ExitNotAccepted)
	}
	return err
}

// percentage reads a percentage such as "1.0" or "5 %" as a fraction.
func percentage(name, text string) (float64, error) {
	number := strings.TrimSpace(strings.TrimSuffix(strings.TrimSpace(text), "%"))
	x, err := strconv.ParseFloat(number, 64)
	if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
		if text == "" {
			return 0, fmt.Errorf("%s: none is given; it is a percentage such as --%s 5", name, name)
		}
		return 0, fmt.Errorf("%s: %q is no percentage; it is a number such as 2.5", name, text)
	}
	return x / 100, nil
}

// singlePlan looks up the plan of MIL-STD-105E.
func singlePlan(f samplingFlags, given func(string) bool) (jsonSampling, error) {
	if given("tested") {
		return jsonSampling{}, errors.New("--tested belongs to --part-by-part; here the whole sample is tested")
	}
	aql, err := percentage("aql", f.aql)
	if err != nil {
		return jsonSampling{}, err
	}
	level, err := sampling.ParseLevel(f.level)
	if err != nil {
		return jsonSampling{}, err
	}
	inspection, err := sampling.ParseInspection(f.inspection)
	if err != nil {
		return jsonSampling{}, err
	}
	out := jsonSampling{Method: methodSingle}
	if given("history") {
		if given("inspection") {
			return out, errors.New("--history says how strictly to inspect; --inspection cannot say it too")
		}
		if inspection, out.Changes, out.Stopped, err = inspectionAfter(f.history); err != nil {
			return out, err
		}
	}
	p, err := sampling.Single(f.lot, level, aql*100, inspection)
	if err != nil {
		return out, err
	}
	out.Level, out.Inspection, out.AQLPercent = text(string(level)), text(inspection.String()), &p.AQL
	out.Letter, out.PlanLetter = text(p.Letter), text(p.From)
	out.N, out.TableN, out.Accept, out.Reject, out.TestAll = &p.N, &p.Sample, &p.Accept, &p.Reject, p.TestAll
	out.Source = sourceJSON(p.Source)
	out.Curve = curveOf(p, f.lot)
	if given("found") {
		if f.found > p.N {
			return out, fmt.Errorf("found: %d bad of %d tested", f.found, p.N)
		}
		out.Found, out.Outcome = &f.found, text(p.Outcome(f.found).String())
	}
	return out, nil
}

// inspectionAfter returns how strictly the lot after these is inspected, and what changed on the way.
func inspectionAfter(history string) (sampling.Inspection, []string, bool, error) {
	outcomes, err := sampling.History(history)
	if err != nil {
		return sampling.Normal, nil, false, err
	}
	var s sampling.Switching
	var changes []string
	for i, o := range outcomes {
		before := s.Inspection
		var why string
		if s, why = s.Next(o); why != "" {
			changes = append(changes, fmt.Sprintf("after lot %d from %s to %s: %s", i+1, before, afterwards(s), why))
		}
	}
	if s.MayReduce {
		changes = append(changes, "the last ten lots were accepted: inspection may be reduced where production is steady, "+
			"which nobody can say of salvaged parts")
	}
	return s.Inspection, changes, s.Stopped, nil
}

func afterwards(s sampling.Switching) string {
	if s.Stopped {
		return "a stop"
	}
	return s.Inspection.String()
}

// curveChances are the chances of acceptance that the operating characteristic is shown at.
var curveChances = []float64{0.95, 0.50, 0.10}

// curveOf says how bad a lot is accepted how often: of a stream (binomial; above AQL 10 defects, not shown), and of this very lot with the
// nearest number of bad parts (hypergeometric).
func curveOf(p sampling.Plan, lot int) []jsonCurvePoint {
	points := []jsonCurvePoint{}
	if p.AQL > mostPercentAQL || p.TestAll {
		return points
	}
	for _, chance := range curveChances {
		fraction := p.QualityAt(chance)
		if math.IsNaN(fraction) {
			continue
		}
		bad := int(math.Round(fraction * float64(lot)))
		points = append(points, jsonCurvePoint{Bad: fraction, ChanceStream: chance, BadParts: bad, ChanceLot: p.FromLot(lot, bad)})
	}
	return points
}

// acceptOnZero computes the plan that one bad part refuses.
func acceptOnZero(f samplingFlags, given func(string) bool) (jsonSampling, error) {
	out := jsonSampling{Method: methodZero, Curve: []jsonCurvePoint{}}
	if given("aql") || given("history") || given("inspection") || given("level") || given("tested") {
		return out, errors.New("--accept-on-zero asks for --worst and --risk only; AQL, level and inspection belong to the tables")
	}
	worst, err := percentage("worst", f.worst)
	if err != nil {
		return out, err
	}
	risk, err := percentage("risk", f.risk)
	if err != nil {
		return out, err
	}
	z, err := sampling.AcceptOnZero(f.lot, worst, risk)
	if err != nil {
		return out, err
	}
	accept, reject := 0, 1
	out.N, out.Accept, out.Reject, out.TestAll = &z.N, &accept, &reject, z.N == f.lot
	out.Worst, out.Risk, out.WorstParts, out.Chance = &z.Worst, &z.Risk, &z.Bad, &z.Chance
	out.Source = sourceJSON(z.Source)
	if given("found") {
		out.Found, out.Outcome = &f.found, text(sampling.Plan{Accept: 0, Reject: 1}.Outcome(f.found).String())
	}
	return out, nil
}

// partByPart says what to do after the parts tested so far.
func partByPart(f samplingFlags, given func(string) bool) (jsonSampling, error) {
	out := jsonSampling{Method: methodPartByPart, Curve: []jsonCurvePoint{}}
	if given("aql") || given("history") || given("inspection") || given("level") {
		return out, errors.New("--part-by-part asks for --good and --worst; AQL, level and inspection belong to the tables")
	}
	var fractions [4]float64
	for i, x := range []struct{ name, text string }{{"good", f.good}, {"worst", f.worst}, {"supplier-risk", f.supplierRisks}, {"risk", f.risk}} {
		var err error
		if fractions[i], err = percentage(x.name, x.text); err != nil {
			return out, err
		}
	}
	q, err := sampling.NewSequential(fractions[0], fractions[1], fractions[2], fractions[3])
	if err != nil {
		return out, err
	}
	if f.lot < 1 || f.tested > f.lot || f.found > f.tested {
		return out, fmt.Errorf("%d bad of %d tested of a lot of %d cannot be", f.found, f.tested, f.lot)
	}
	first, most := min(q.FirstAcceptance(), f.lot), min(q.Truncation(), f.lot)
	averageGood, averageBad := q.AverageNumber()
	step := q.AfterInLot(f.lot, f.tested, f.found)
	out.Good, out.Worst, out.SupplierRisk, out.Risk = &q.Good, &q.Bad, &q.SupplierRisk, &q.Risk
	out.FirstAcceptance, out.N, out.AverageGood, out.AverageBad = &first, &most, number(averageGood), number(averageBad)
	out.Tested, out.Found, out.Outcome = &f.tested, &f.found, text(step.String())
	if ac := q.AcceptAt(f.tested); ac >= 0 {
		out.Accept = &ac
	}
	if re := q.RefuseAt(f.tested); re >= 0 {
		out.Reject = &re
	}
	out.Source = sourceJSON(screening.Source{Document: "Wald's sequential test as in NIST/SEMATECH 6.2.6", Status: screening.Derived})
	return out, nil
}
