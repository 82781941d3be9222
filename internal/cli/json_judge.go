package cli

import (
	"goodbin/screening"
)

type jsonReading struct {
	Of        string              `json:"of"`
	Section   *string             `json:"section"`
	Value     *float64            `json:"value"`
	Sense     string              `json:"sense"`
	Unit      string              `json:"unit"`
	U         *float64            `json:"u"`
	At        map[string]*float64 `json:"at"`
	Repeats   []float64           `json:"repeats"`
	Over      bool                `json:"over"`
	Typed     *string             `json:"typed"`
	Meter     *string             `json:"meter"`
	Assumed   bool                `json:"assumed"`
	AssumedAt map[string]*float64 `json:"assumed_at"`
	Rule      *string             `json:"rule"`
}

func readingJSON(r *screening.Reading) *jsonReading {
	if r == nil {
		return nil
	}
	out := &jsonReading{
		Of: string(r.Of), Section: text(r.Section), Value: number(r.Value), Sense: r.Sense.String(), Unit: unitName(r.Unit), U: number(r.U),
		At: conditionJSON(r.At), Repeats: r.Repeats, Over: r.Over, Typed: text(r.Typed), Meter: text(r.Meter), Assumed: r.Assumed,
		Rule: text(r.Rule),
	}
	if !r.AssumedAt.IsZero() {
		out.AssumedAt = conditionJSON(r.AssumedAt)
	}
	return out
}

type jsonConverted struct {
	Rule   string   `json:"rule"`
	Status *string  `json:"status"`
	U      *float64 `json:"u"`
	Value  *float64 `json:"value"`
	Sense  string   `json:"sense"`
}

type jsonFinding struct {
	Limit       jsonLimit      `json:"limit"`
	Need        string         `json:"need"`
	By          string         `json:"by"`
	Reading     *jsonReading   `json:"reading"`
	Converted   *jsonConverted `json:"converted"`
	Outcome     string         `json:"outcome"`
	NearLimit   bool           `json:"near_limit"`
	Probability *float64       `json:"probability"`
	Margin      *float64       `json:"margin"`
	Why         *string        `json:"why"`
	Statement   *string        `json:"statement"`
	Risk        jsonRisk       `json:"risk"`

	Budget      []jsonContribution `json:"budget,omitempty"`      // with --budget
	Uncertainty *jsonUncertainty   `json:"uncertainty,omitempty"` // with --budget
}

func findingJSON(f *screening.Finding, policy *screening.Policy) jsonFinding {
	out := jsonFinding{
		Limit: limitJSON(&f.Limit), Need: f.Need.String(), By: "none", Reading: readingJSON(f.Reading), Outcome: f.Outcome.String(),
		NearLimit: f.NearLimit, Probability: number(f.Probability), Margin: number(f.Margin), Why: text(f.Why),
		Statement: text(f.Statement(policy.Rule).String()), Risk: riskJSON(f),
	}
	switch {
	case f.By == screening.ByRating && f.Outcome != screening.Missing:
		out.By = "rating"
	case f.Reading != nil:
		out.By = "reading"
	}
	if c := f.Converted; c != nil {
		out.Converted = &jsonConverted{
			Rule: c.Rule, Status: text(c.Source.Status.String()), U: number(c.U), Value: number(c.Reading.Value), Sense: c.Reading.Sense.String(),
		}
	}
	return out
}

type jsonReason struct {
	Code string  `json:"code"`
	Text string  `json:"text"`
	Of   *string `json:"of"`
}

type jsonGap struct {
	Of      *string             `json:"of"`
	Section *string             `json:"section"`
	At      map[string]*float64 `json:"at"`
	Text    string              `json:"text"`
}

type jsonStep struct {
	Code     string              `json:"code"`
	Text     string              `json:"text"`
	Of       *string             `json:"of"`
	Section  *string             `json:"section"`
	At       map[string]*float64 `json:"at"`
	Accuracy *float64            `json:"accuracy"` // relative half-width that would decide
}

type jsonCaution struct {
	Code   string             `json:"code"`
	Level  string             `json:"level"`
	Text   string             `json:"text"`
	Values map[string]float64 `json:"values"`
	Source jsonSource         `json:"source"`
}

type jsonStop struct {
	Check   string     `json:"check"`
	Verdict string     `json:"verdict"`
	Reason  string     `json:"reason"`
	Do      *string    `json:"do"`
	Source  jsonSource `json:"source"`
}

type jsonLesser struct {
	Claim   jsonClaim  `json:"claim"`
	Answers string     `json:"answers"`
	Text    string     `json:"text"`
	Source  jsonSource `json:"source"`
}

type jsonPolicy struct {
	Decision    string                       `json:"decision"`
	LowestGrade string                       `json:"lowest_grade"`
	Accept      float64                      `json:"accept"`
	Soft        float64                      `json:"soft"`
	Reject      float64                      `json:"reject"`
	Sets        map[string]map[string]string `json:"sets"`
}

func policyJSON(p screening.Policy) jsonPolicy {
	out := jsonPolicy{p.Rule.String(), p.Lowest.String(), p.Accept, p.Soft, p.Reject, map[string]map[string]string{}}
	for kind, chosen := range p.Sets {
		sets := map[string]string{}
		for criterion, set := range chosen {
			sets[string(criterion)] = string(set)
		}
		out.Sets[string(kind)] = sets
	}
	return out
}

// jsonJudgement is what judge prints, and screen for each row with lot, part and row before it.
type jsonJudgement struct {
	Schema     int            `json:"schema"`
	Lot        *uint32        `json:"lot,omitempty"`
	Part       *uint32        `json:"part,omitempty"`
	Row        *int           `json:"row,omitempty"`
	Kind       string         `json:"kind"`
	Claim      jsonClaim      `json:"claim"`
	Policy     jsonPolicy     `json:"policy"`
	Tables     string         `json:"tables"`
	Readings   []*jsonReading `json:"readings"`
	Stops      []jsonStop     `json:"stops"`
	Findings   []jsonFinding  `json:"findings"`
	Verdict    string         `json:"verdict"`
	Grade      *string        `json:"grade"`
	RegradedAs *jsonLesser    `json:"regraded_as"`
	NotTested  []jsonGap      `json:"not_tested"`
	Reasons    []jsonReason   `json:"reasons"`
	Next       []jsonStep     `json:"next"`
	Cautions   []jsonCaution  `json:"cautions"`
	Assumed    bool           `json:"assumed"`
	Meter      jsonMeterUsed  `json:"meter"`
	RuleWords  string         `json:"decision_words"`
}

func judgeJSON(book *screening.Rulebook, j screening.Judgement, policy screening.Policy, budget bool) jsonJudgement {
	out := jsonJudgement{
		Schema: schema, Kind: string(book.Kind), Claim: claimJSON(j.Claim), Policy: policyJSON(policy), Tables: j.Tables,
		Readings: []*jsonReading{}, Stops: []jsonStop{}, Findings: []jsonFinding{}, Verdict: j.Verdict.String(), Grade: text(j.Grade.String()),
		NotTested: []jsonGap{}, Reasons: []jsonReason{}, Next: []jsonStep{}, Cautions: []jsonCaution{}, Assumed: j.Assumed,
		Meter: meterUsedJSON(&j, &policy), RuleWords: policy.Rule.Words(),
	}
	for i := range j.Part.Readings {
		out.Readings = append(out.Readings, readingJSON(&j.Part.Readings[i]))
	}
	for _, s := range j.Stops {
		out.Stops = append(out.Stops, jsonStop{s.Check, s.Verdict.String(), s.Reason, text(s.Do), sourceJSON(s.Source)})
	}
	for i := range j.Findings {
		f := findingJSON(&j.Findings[i], &policy)
		if budget {
			f.Budget, f.Uncertainty = budgetJSON(&j.Findings[i], policy)
		}
		out.Findings = append(out.Findings, f)
	}
	if l := j.RegradedAs; l != nil {
		out.RegradedAs = &jsonLesser{claimJSON(l.Claim), string(l.Answers), l.Text, sourceJSON(l.Source)}
	}
	for _, g := range j.NotTested {
		out.NotTested = append(out.NotTested, jsonGap{text(string(g.Of)), text(g.Section), conditionJSON(g.At), gapText(book, g)})
	}
	for _, t := range j.Untested {
		out.NotTested = append(out.NotTested, jsonGap{Text: t})
	}
	for _, r := range j.Reasons {
		out.Reasons = append(out.Reasons, jsonReason{r.Code, r.Text, text(string(r.Of))})
	}
	for _, s := range j.Next {
		out.Next = append(out.Next, stepJSON(s))
	}
	for _, c := range j.Cautions {
		out.Cautions = append(out.Cautions, jsonCaution{c.Code, c.Level.String(), c.Text, finiteValues(c.Values), sourceJSON(c.Source)})
	}
	return out
}

// stepJSON leaves the condition out of a step that asks for no reading.
func stepJSON(s screening.Step) jsonStep {
	out := jsonStep{Code: s.Code, Text: s.Text, Of: text(string(s.Gap.Of)), Section: text(s.Gap.Section)}
	if s.Gap.Of != "" {
		out.At = conditionJSON(s.Gap.At)
	}
	if s.Gap.Accuracy > 0 {
		out.Accuracy = number(s.Gap.Accuracy)
	}
	return out
}

// finiteValues leaves out what JSON cannot hold.
func finiteValues(values map[string]float64) map[string]float64 {
	out := make(map[string]float64, len(values))
	for name, x := range values {
		if number(x) != nil {
			out[name] = x
		}
	}
	return out
}
