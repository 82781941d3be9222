package cli

import (
	"encoding/json"
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// schema is the version of every JSON shape. Names are never reused with another meaning; new ones may be added within a version.
const schema = 1

// writeJSON prints one value as one line.
func (a *app) writeJSON(v any) error {
	enc := json.NewEncoder(a.env.Out)
	enc.SetEscapeHTML(false)
	return enc.Encode(v)
}

// number is a value in SI; null where it is open (±Inf) or absent (NaN).
func number(x float64) *float64 {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return nil
	}
	return &x
}

// text is a text; null where it is absent.
func text(s string) *string {
	if s == "" {
		return nil
	}
	return &s
}

// unitName is the unit as JSON spells it: SI without prefix in ASCII, "1" for a plain number and for a ratio, "C" for degrees Celsius.
func unitName(u quantity.Unit) string {
	if u == quantity.One || u == quantity.Ratio {
		return "1"
	}
	return u.ASCII()
}

type jsonSource struct {
	Document *string `json:"document"`
	Clause   *string `json:"clause"`
	Status   *string `json:"status"`
}

func sourceJSON(s screening.Source) jsonSource {
	return jsonSource{text(s.Document), text(s.Clause), text(s.Status.String())}
}

// conditionJSON names every variable; null is absent, which is not zero.
func conditionJSON(c screening.Condition) map[string]*float64 {
	at := make(map[string]*float64)
	for _, v := range screening.Variables() {
		at[v.String()] = nil
		if x, ok := c.Get(v); ok {
			at[v.String()] = number(x)
		}
	}
	return at
}

type jsonRating struct {
	Of      string              `json:"of"`
	Section *string             `json:"section"`
	At      map[string]*float64 `json:"at"`
	Nominal *float64            `json:"nominal"`
	Low     *float64            `json:"low"`
	High    *float64            `json:"high"`
	Unit    string              `json:"unit"`
	Typed   *string             `json:"typed"`
	Source  *jsonSource         `json:"source"`
}

type jsonClaim struct {
	Ratings []jsonRating      `json:"ratings"`
	Traits  map[string]string `json:"traits"`
}

func claimJSON(c screening.Claim) jsonClaim {
	out := jsonClaim{Ratings: []jsonRating{}, Traits: map[string]string{}}
	for _, r := range c.Ratings {
		rating := jsonRating{
			Of: string(r.Of), Section: text(r.Section), At: conditionJSON(r.At), Nominal: number(r.Nominal), Low: number(r.Low),
			High: number(r.High), Unit: unitName(r.Unit), Typed: text(r.Typed),
		}
		if r.Source.Status != screening.NoStatus {
			s := sourceJSON(r.Source)
			rating.Source = &s
		}
		out.Ratings = append(out.Ratings, rating)
	}
	for _, t := range c.Traits {
		out.Traits[t.Name] = t.Text
	}
	return out
}

type jsonLimit struct {
	On        string              `json:"on"`
	Section   *string             `json:"section"`
	Unit      string              `json:"unit"`
	Criterion string              `json:"criterion"`
	At        map[string]*float64 `json:"at"`
	Low       *float64            `json:"low"`
	High      *float64            `json:"high"`
	Need      string              `json:"need"`
	Evidence  string              `json:"evidence"`
	Formula   *string             `json:"formula"`
	Set       *string             `json:"set"`
	InUse     bool                `json:"in_use"`
	Grade     *string             `json:"grade"`
	TreatLow  *string             `json:"treat_low"`
	TreatHigh *string             `json:"treat_high"`
	Note      *string             `json:"note"`
	Source    jsonSource          `json:"source"`
}

func limitJSON(l *screening.Limit) jsonLimit {
	return jsonLimit{
		On: string(l.On), Section: text(l.Section), Unit: unitName(l.Unit), Criterion: string(l.Criterion), At: conditionJSON(l.At),
		Low: number(l.Low), High: number(l.High), Need: l.Need.String(), Evidence: l.Evidence.String(), Formula: text(l.FormulaText()),
		Set: text(string(l.Set)), InUse: l.InUse, Grade: text(l.Grade.String()), TreatLow: text(string(l.TreatLow)),
		TreatHigh: text(string(l.TreatHigh)), Note: text(l.Note), Source: sourceJSON(l.Source),
	}
}

type jsonLimits struct {
	Schema int         `json:"schema"`
	Kind   string      `json:"kind"`
	Claim  jsonClaim   `json:"claim"`
	Tables string      `json:"tables"`
	Limits []jsonLimit `json:"limits"`
}
