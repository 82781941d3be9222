package cli

import (
	"context"
	"encoding/json"
	"io"
	"time"

	"goodbin/inventory"
	"goodbin/screening"
)

type jsonLot struct {
	Schema  int       `json:"schema"`
	Lot     uint32    `json:"lot"`
	Kind    string    `json:"kind"`
	Header  *string   `json:"header"`
	Claim   jsonClaim `json:"claim"`
	Mixed   bool      `json:"mixed"`
	Source  *string   `json:"source"`
	Place   *string   `json:"place"`
	Storage *string   `json:"storage"`
	Note    *string   `json:"note"`
	Made    string    `json:"made"`
	Count   string    `json:"count"`
}

type jsonLook struct {
	Check string `json:"check"`
	Fault bool   `json:"fault"`
}

type jsonEvent struct {
	At     string  `json:"at"`
	Action string  `json:"action"`
	Text   *string `json:"text"`
}

type jsonPart struct {
	Schema    int            `json:"schema"`
	Lot       uint32         `json:"lot"`
	Part      uint32         `json:"part"`
	ID        string         `json:"id"`
	Kind      string         `json:"kind"`
	Header    *string        `json:"header"`
	Claim     jsonClaim      `json:"claim"`
	Look      []jsonLook     `json:"look"`
	Readings  []*jsonReading `json:"readings"`
	Treated   int            `json:"treated"`
	Verdict   *string        `json:"verdict"`
	Grade     *string        `json:"grade"`
	HeldAs    *string        `json:"held_as"`
	NotTested []string       `json:"not_tested"`
	Why       *string        `json:"why"`
	Next      *string        `json:"next"`
	Tables    *string        `json:"tables"`
	Assumed   bool           `json:"assumed"`
	Judged    *string        `json:"judged"`
	Place     *string        `json:"place"`
	Note      *string        `json:"note"`
	Count     string         `json:"count"`
	Taken     int            `json:"taken"`
	Changed   string         `json:"changed"`
	History   []jsonEvent    `json:"history"`
}

// jsonHouseType is one type number of the user's own table.
type jsonHouseType struct {
	Schema    int       `json:"schema"`
	HouseType string    `json:"house_type"`
	Kind      string    `json:"kind"`
	Alias     *string   `json:"alias"`
	Claim     jsonClaim `json:"claim"`
	Source    *string   `json:"source"`
	Note      *string   `json:"note"`
	Added     string    `json:"added"`
}

// jsonFamilies is the list of families that the user's group never or always keeps, as the CSV that it was read from.
type jsonFamilies struct {
	Schema   int    `json:"schema"`
	Families string `json:"house_families"`
}

// exportHouseJSON writes the house tables, one object a line.
func exportHouseJSON(w *inventory.Workbook, enc *json.Encoder) error {
	h, err := w.House()
	if err != nil {
		return err
	}
	for _, t := range h.Types {
		err := enc.Encode(jsonHouseType{
			Schema: schema, HouseType: t.Claim.Trait(screening.TraitType), Kind: string(t.Kind), Alias: text(t.Alias), Claim: claimJSON(t.Claim),
			Source: text(t.Source), Note: text(t.Note), Added: t.Added.Format(time.RFC3339),
		})
		if err != nil {
			return err
		}
	}
	if h.Families == "" {
		return nil
	}
	return enc.Encode(jsonFamilies{schema, h.Families})
}

// exportJSON writes the house tables, then the lots, each followed by its parts with every reading ever taken, one object a line.
func (a *app) exportJSON(ctx context.Context, w *inventory.Workbook, out io.Writer) error {
	enc := json.NewEncoder(out)
	enc.SetEscapeHTML(false)
	if err := exportHouseJSON(w, enc); err != nil {
		return err
	}
	lots, err := w.Lots()
	if err != nil {
		return err
	}
	for _, l := range lots {
		if err := enc.Encode(lotJSON(l)); err != nil {
			return err
		}
		parts, err := w.PartsOf(l.ID)
		if err != nil {
			return err
		}
		for _, p := range parts {
			if err := ctx.Err(); err != nil {
				return err
			}
			events, err := w.History(p.ID)
			if err != nil {
				return err
			}
			if err := enc.Encode(partJSON(p, l, events)); err != nil {
				return err
			}
		}
	}
	return nil
}

func lotJSON(l inventory.Lot) jsonLot {
	return jsonLot{
		Schema: schema, Lot: l.ID, Kind: string(l.Kind), Header: text(l.Header), Claim: claimJSON(l.Claim), Mixed: l.Mixed,
		Source: text(l.Source), Place: text(l.Place), Storage: text(l.Storage), Note: text(l.Note), Made: l.Made.Format(time.RFC3339),
		Count: l.Count.String(),
	}
}

func partJSON(p inventory.Part, l inventory.Lot, events []inventory.Event) jsonPart {
	o := p.Outcome
	out := jsonPart{
		Schema: schema, Lot: p.ID.Lot, Part: p.ID.Number, ID: p.ID.String(), Kind: string(l.Kind), Header: text(p.Header),
		Claim: claimJSON(inventory.Claimed(p, l).Claim), Look: []jsonLook{}, Readings: []*jsonReading{}, Treated: p.Part.Treated,
		Verdict: text(o.Verdict.String()), Grade: text(o.Grade.String()), HeldAs: text(o.As), NotTested: append([]string{}, o.NotTested...),
		Why: text(o.Why), Next: text(o.Next), Tables: text(o.Tables), Assumed: o.Assumed, Place: text(p.Place), Note: text(p.Note),
		Count: p.Count.String(), Taken: p.Taken, Changed: p.Changed.Format(time.RFC3339), History: []jsonEvent{},
	}
	if !o.Judged.IsZero() {
		out.Judged = text(o.Judged.Format(time.RFC3339))
	}
	for _, look := range p.Part.Look {
		out.Look = append(out.Look, jsonLook(look))
	}
	for i := range p.Part.Readings {
		out.Readings = append(out.Readings, rawReadingJSON(&p.Part.Readings[i]))
	}
	for _, e := range events {
		out.History = append(out.History, jsonEvent{e.At.Format(time.RFC3339), e.Action, text(e.Text)})
	}
	return out
}

// rawReadingJSON is a reading as taken; its uncertainty is the judge's business and is null.
func rawReadingJSON(r *screening.Reading) *jsonReading {
	out := readingJSON(r)
	out.U = nil
	return out
}
