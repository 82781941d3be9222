package cli

import (
	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/sampling"
)

// jsonLotReport is what lot --json prints. Fractions are 0 to 1, values SI; parts are ids as written on the bag.
type jsonLotReport struct {
	Schema          int                     `json:"schema"`
	Lot             uint32                  `json:"lot"`
	Kind            string                  `json:"kind"`
	Claim           *string                 `json:"claim"`
	Place           *string                 `json:"place"`
	Mixed           bool                    `json:"mixed"`
	Parts           int                     `json:"parts"`
	Counts          map[string]int          `json:"counts"`
	NotJudged       int                     `json:"not_judged"`
	Yield           *jsonYield              `json:"yield"`
	Characteristics []jsonLotCharacteristic `json:"characteristics"`
	CopiedRows      []jsonLotSuspicion      `json:"copied_rows"`
	Note            string                  `json:"note"`
}

type jsonYield struct {
	Usable     int     `json:"usable"`
	Decided    int     `json:"decided"`
	Fraction   float64 `json:"fraction"`
	Low        float64 `json:"low"`
	High       float64 `json:"high"`
	Confidence float64 `json:"confidence"`
	Method     string  `json:"method"`
}

type jsonLotCharacteristic struct {
	Of          string              `json:"of"`
	Section     *string             `json:"section"`
	At          map[string]*float64 `json:"at"`
	Unit        string              `json:"unit"`
	Claim       *string             `json:"claim"`
	N           int                 `json:"n"` // parts in the statistics
	NotExact    []string            `json:"not_exact"`
	Barred      []string            `json:"barred"`
	Rejected    []string            `json:"rejected"`
	Slipped     []string            `json:"slipped"`
	Median      *float64            `json:"median"`
	RobustSigma *float64            `json:"robust_sigma"`
	Min         *float64            `json:"min"`
	Max         *float64            `json:"max"`
	Low         *float64            `json:"low"`
	High        *float64            `json:"high"`
	NoLimits    *string             `json:"no_limits"` // why there are none
	Capability  *jsonCapability     `json:"capability"`
	Histogram   []jsonBin           `json:"histogram"`
	Outliers    []jsonOutlier       `json:"outliers"`
	Suspicions  []jsonLotSuspicion  `json:"suspicions"`
	Groups      []jsonForecast      `json:"groups"`
}

type jsonCapability struct {
	Pp        *float64 `json:"pp"`
	Ppk       *float64 `json:"ppk"`
	PpkLow    *float64 `json:"ppk_low"`
	RobustPpk *float64 `json:"robust_ppk"`
	Outside   int      `json:"outside"`
	Expected  *float64 `json:"expected"`
}

type jsonBin struct {
	Low   float64 `json:"low"`
	High  float64 `json:"high"`
	Count int     `json:"count"`
}

type jsonOutlier struct {
	Part      string   `json:"part"`
	Value     *float64 `json:"value"`
	Within    bool     `json:"within"`
	Test      string   `json:"test"`
	Statistic *float64 `json:"statistic"`
	Threshold *float64 `json:"threshold"`
	Why       string   `json:"why"`
}

type jsonLotSuspicion struct {
	Kind   string   `json:"kind"`
	Parts  []string `json:"parts"`
	Test   string   `json:"test"`
	Chance *float64 `json:"chance"`
	Why    string   `json:"why"`
}

// jsonForecast says how many more parts a group takes; a null number is more than looked ahead.
type jsonForecast struct {
	Size       int      `json:"size"`
	Within     float64  `json:"within"`
	Have       []string `json:"have"`
	Likely     *int     `json:"likely"`
	Sure       *int     `json:"sure"`
	Most       int      `json:"most"`
	Assumption *string  `json:"assumption"`
	Why        *string  `json:"why"` // why nothing can be said
}

func idTexts(ids []inventory.ID) []string {
	out := make([]string, 0, len(ids))
	for _, id := range ids {
		out = append(out, id.String())
	}
	return out
}

func lotReportJSON(v *lotView) jsonLotReport {
	out := jsonLotReport{
		Schema: schema, Lot: v.lot.ID, Kind: string(v.book.Kind), Claim: text(clean(v.lot.Claim.String())), Place: text(clean(v.lot.Place)),
		Mixed: v.lot.Mixed, Parts: len(v.parts), Counts: map[string]int{}, Characteristics: []jsonLotCharacteristic{},
		CopiedRows: []jsonLotSuspicion{}, Note: sampling.NotALot,
	}
	for _, verdict := range screening.Verdicts() {
		out.Counts[verdict.String()] = v.count(verdict)
	}
	out.NotJudged = v.count(screening.NoVerdict)
	if share, usable, decided, ok := v.yield(); ok {
		out.Yield = &jsonYield{usable, decided, share.Fraction, share.Low, share.High, lotConfidence, share.Method}
	}
	for _, g := range v.groups {
		out.Characteristics = append(out.Characteristics, v.characteristicJSON(g))
	}
	for _, r := range v.rows {
		out.CopiedRows = append(out.CopiedRows, suspicionJSON(r.lotSuspicion))
	}
	return out
}

func (v *lotView) characteristicJSON(g *lotGroup) jsonLotCharacteristic {
	s := g.readings.Summary()
	out := jsonLotCharacteristic{
		Of: string(g.of), Section: text(clean(g.section)), At: conditionJSON(g.at), Unit: unitName(g.unit), Claim: text(clean(g.claim)), N: s.N,
		NotExact: idTexts(g.bounded), Barred: idTexts(g.barred), Rejected: idTexts(g.rejected), Slipped: idTexts(g.slipped),
		Median: number(s.Median), RobustSigma: number(s.RobustSigma), Min: number(s.Min), Max: number(s.Max),
		Low: number(g.limits.Low), High: number(g.limits.High), NoLimits: text(clean(g.limitsWhy)),
		Histogram: []jsonBin{}, Outliers: []jsonOutlier{}, Suspicions: []jsonLotSuspicion{}, Groups: []jsonForecast{},
	}
	if c, err := g.readings.Capability(g.limits); err == nil {
		out.Capability = &jsonCapability{number(c.Pp), number(c.Ppk), number(c.PpkLow), number(c.RobustPpk), c.Outside, number(c.Expected)}
	}
	for _, b := range g.readings.Histogram(g.limits, lotBars).Bins {
		out.Histogram = append(out.Histogram, jsonBin(b))
	}
	for _, o := range g.readings.Outliers(g.limits) {
		out.Outliers = append(out.Outliers, jsonOutlier{
			g.ids[o.Index].String(), number(o.Value), o.Within, o.Test, number(o.Statistic), number(o.Threshold), clean(o.Why),
		})
	}
	for _, s := range g.suspicions {
		out.Suspicions = append(out.Suspicions, suspicionJSON(s))
	}
	for _, size := range lotGroups {
		out.Groups = append(out.Groups, v.forecastJSON(g, size))
	}
	return out
}

func suspicionJSON(s lotSuspicion) jsonLotSuspicion {
	return jsonLotSuspicion{s.Kind.String(), idTexts(s.ids), s.Test, number(s.Chance), clean(s.Why)}
}

func (v *lotView) forecastJSON(g *lotGroup, size int) jsonForecast {
	left, _ := v.left()
	out := jsonForecast{Size: size, Within: v.within, Have: []string{}, Most: left}
	f, have, err := v.forecast(g, size)
	if err != nil {
		out.Why = text(err.Error())
		return out
	}
	out.Have, out.Assumption = idTexts(have), text(clean(f.Assumption))
	if f.Have != nil {
		return out
	}
	out.Most = f.Most
	for _, n := range []struct {
		from int
		to   **int
	}{{f.Likely, &out.Likely}, {f.Sure, &out.Sure}} {
		if n.from <= f.Most {
			*n.to = &n.from
		}
	}
	return out
}
