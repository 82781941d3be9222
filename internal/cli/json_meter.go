package cli

import (
	"math"

	"goodbin/screening"
	"goodbin/screening/meters"
	"goodbin/screening/uncertainty"
)

// jsonMeterUsed is the meter that a judgement took its readings to be from.
type jsonMeterUsed struct {
	Name        string   `json:"name"`
	Assumed     bool     `json:"assumed"` // its figures are typical ones, not those of the meter on the bench
	Status      *string  `json:"status"`  // of its figures; null where they were given
	Description *string  `json:"description"`
	NotCovered  []string `json:"not_covered"` // readings for which the assumed meter's figures count instead
}

func meterUsedJSON(j *screening.Judgement, policy *screening.Policy) jsonMeterUsed {
	m := policy.Meters[""]
	out := jsonMeterUsed{Name: m.Name, Assumed: m.Assumed, Description: text(meters.Describe(m)), NotCovered: []string{}}
	switch {
	case m.Name == "":
		out.Name, out.Status = "assumed meter", text(screening.House.String())
	case m.Assumed:
		out.Status = text(screening.FromMemory.String())
	}
	for _, r := range uncovered(&m, j) {
		out.NotCovered = append(out.NotCovered, string(r.Of))
	}
	return out
}

// jsonRisk is the specific risk of deciding a finding either way (JCGM 106, 9.3).
type jsonRisk struct {
	Consumer *float64 `json:"consumer"` // that an accepted part does not conform
	Producer *float64 `json:"producer"` // that a rejected part conforms
}

func riskJSON(f *screening.Finding) jsonRisk {
	consumer, producer := f.Risk()
	return jsonRisk{number(consumer), number(producer)}
}

type jsonContribution struct {
	Kind        string   `json:"kind"`
	Name        string   `json:"name"`
	U           *float64 `json:"u"` // standard uncertainty of the input
	Sensitivity *float64 `json:"sensitivity"`
	Part        *float64 `json:"part"`    // what it makes of the reading's standard uncertainty
	Share       *float64 `json:"share"`   // of the variance
	Freedom     *float64 `json:"freedom"` // null where unlimited
	Source      *string  `json:"source"`
}

type jsonUncertainty struct {
	Combined *float64 `json:"combined"` // standard uncertainty, as the verdict takes it
	Coverage *float64 `json:"coverage"` // the factor k
	Expanded *float64 `json:"expanded"` // U = k·u, u without the widening of few repeats, which k stands for
	Level    float64  `json:"level"`    // the probability that U covers
	Freedom  *float64 `json:"freedom"`  // null where unlimited
}

// budgetJSON lists what makes a finding's reading uncertain, the largest contribution first; nil where there is no reading.
func budgetJSON(f *screening.Finding, policy screening.Policy) ([]jsonContribution, *jsonUncertainty) {
	if f.Evidence() == nil {
		return nil, nil
	}
	b := f.Budget(policy)
	u := b.Combined()
	var lines []jsonContribution
	for _, c := range b.BySize() {
		share := c.Part() / u
		freedom := c.Freedom
		if !countsFreedom(freedom) {
			freedom = math.NaN()
		}
		lines = append(lines, jsonContribution{
			Kind: c.Kind.String(), Name: c.Name, U: number(c.U), Sensitivity: number(c.Sensitivity), Part: number(c.Part()),
			Share: number(share * share), Freedom: number(freedom), Source: text(c.Source),
		})
	}
	return lines, uncertaintyJSON(b)
}

func uncertaintyJSON(b uncertainty.Budget) *jsonUncertainty {
	expanded, k := b.Expanded(coverage)
	return &jsonUncertainty{number(b.Combined()), number(k), number(expanded), coverage, number(b.Freedom())}
}

// jsonMeters is what goodbin meters prints.
type jsonMeters struct {
	Schema int         `json:"schema"`
	Meters []jsonClass `json:"meters"`
}

type jsonClass struct {
	Name    string           `json:"name"`
	Entries []jsonClassEntry `json:"entries"`
}

type jsonClassEntry struct {
	Words    string              `json:"words"` // as --meter reads them
	Of       *string             `json:"of"`    // null for all of the unit
	Unit     string              `json:"unit"`
	Low      *float64            `json:"low"`
	High     *float64            `json:"high"`
	At       map[string]*float64 `json:"at"`
	Relative float64             `json:"relative"`
	Counts   float64             `json:"counts"`
	Absolute float64             `json:"absolute"`
	Source   string              `json:"source"`
	Status   string              `json:"status"`
}

func metersJSON() jsonMeters {
	out := jsonMeters{Schema: schema, Meters: []jsonClass{}}
	for _, e := range meters.ClassEntries() {
		if n := len(out.Meters); n == 0 || out.Meters[n-1].Name != e.Meter {
			out.Meters = append(out.Meters, jsonClass{Name: e.Meter})
		}
		class := &out.Meters[len(out.Meters)-1]
		low, high := math.NaN(), math.NaN()
		if e.Range.Low > 0 {
			low = e.Range.Low
		}
		if e.Range.High > 0 {
			high = e.Range.High
		}
		class.Entries = append(class.Entries, jsonClassEntry{
			Words: e.Words, Of: text(string(e.Range.Of)), Unit: unitName(e.Range.Unit), Low: number(low), High: number(high),
			At: conditionJSON(e.Range.At), Relative: e.Range.Relative, Counts: e.Range.Counts, Absolute: e.Range.Absolute,
			Source: e.Source, Status: e.Status,
		})
	}
	return out
}
