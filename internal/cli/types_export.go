package cli

import (
	"encoding/csv"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

var notANumber = math.NaN()

func (a *app) typesExportCommand() *cobra.Command {
	out := ""
	cmd := &cobra.Command{
		Use: "export", Short: "write the type numbers of your own as CSV, which types add reads again", Args: noArguments, Example: typesExamples,
		RunE: func(cmd *cobra.Command, _ []string) error {
			return a.withWorkbook(cmd.Context(), true, func(w *inventory.Workbook) error {
				h, err := w.House()
				if err != nil {
					return err
				}
				return a.toFile(out, w.Path(), func(to io.Writer) error { return writeTypes(to, h.Types) })
			})
		},
	}
	cmd.Flags().StringVarP(&out, "output", "o", "", "write to `FILE` instead of standard output")
	return cmd
}

// writeTypes writes house rows as [entry.ReadTypes] reads them: a column for every trait and figure that any of them has.
func writeTypes(out io.Writer, rows []inventory.HouseType) error {
	var traits, ratings []string
	for _, t := range rows {
		for _, trait := range t.Claim.Traits {
			if trait.Name != screening.TraitType && !slices.Contains(traits, trait.Name) {
				traits = append(traits, trait.Name)
			}
		}
		for _, r := range t.Claim.Ratings {
			if column := ratedColumn(t.Claim, r); !slices.Contains(ratings, column) {
				ratings = append(ratings, column)
			}
		}
	}
	w := csv.NewWriter(out)
	if err := w.Write(slices.Concat([]string{"kind", "type", "alias"}, traits, ratings, []string{"source", "note"})); err != nil {
		return err
	}
	for _, t := range rows {
		row := []string{string(t.Kind), t.Claim.Trait(screening.TraitType), t.Alias}
		for _, name := range traits {
			row = append(row, t.Claim.Trait(name))
		}
		for _, column := range ratings {
			cell := ""
			for _, r := range t.Claim.Ratings {
				if ratedColumn(t.Claim, r) == column {
					cell = ratingCell(r, column)
				}
			}
			row = append(row, cell)
		}
		row = append(row, t.Source, t.Note)
		for i := range row {
			row[i] = entry.Guard(clean(row[i]))
		}
		if err := w.Write(row); err != nil {
			return err
		}
	}
	w.Flush()
	return w.Error()
}

// ratedColumn is the column that a figure stands in: by its name alone, its condition in the cell; where a type states one at several
// conditions, every one but the first, or but the one without a condition, has a column with the condition.
func ratedColumn(c screening.Claim, r screening.Rating) string {
	column := "rated:" + string(r.Of)
	plain, _ := c.Rating(r.Of, "")
	for _, other := range c.Ratings {
		if other.Of == r.Of && other.At.IsZero() {
			plain = other
		}
	}
	if plain.At != r.At {
		column += "@" + conditionWords(r.At)
	}
	return column
}

func conditionWords(c screening.Condition) string {
	var words []string
	for _, v := range screening.Variables() {
		if x, ok := c.Get(v); ok {
			words = append(words, v.String()+"="+valueWords(x, v.Unit()))
		}
	}
	return strings.Join(words, ",")
}

// ratingCell writes a figure as it is read again: "110..450@ic=2mA,vce=5V".
func ratingCell(r screening.Rating, column string) string {
	low, high := "", ""
	if !math.IsInf(r.Low, 0) {
		low = valueWords(r.Low, r.Unit)
	}
	if !math.IsInf(r.High, 0) {
		high = valueWords(r.High, r.Unit)
	}
	text := low + ".." + high
	if r.HasNominal() && r.Low == r.High {
		text = low
	}
	if at := conditionWords(r.At); at != "" && !strings.Contains(column, "@") {
		text += "@" + at
	}
	return text
}

// valueWords writes a value with its unit, in the customary prefix where that says it exactly.
func valueWords(x float64, unit quantity.Unit) string {
	short := strings.ReplaceAll(asciiSpelling.Replace(quantity.Short(x, unit)), " ", "")
	if v, err := quantity.Parse(short, unit); err == nil && v.Number == x && !v.Over && v.Sense == quantity.Exactly {
		return short
	}
	return strconv.FormatFloat(percents(x, unit), 'g', -1, 64) + unit.ASCII()
}

type jsonGroup struct {
	Name   string       `json:"name"`
	Alias  *string      `json:"alias"`
	Gain   jsonRating   `json:"gain"`
	Points []jsonRating `json:"points"`
	Note   *string      `json:"note"`
}

type jsonTrap struct {
	Text   string     `json:"text"`
	Source jsonSource `json:"source"`
}

type jsonTypeRow struct {
	Schema int          `json:"schema"`
	Kind   string       `json:"kind"`
	Type   string       `json:"type"`
	Alias  *string      `json:"alias"`
	Group  *string      `json:"group"`
	House  bool         `json:"house"`
	Claim  jsonClaim    `json:"claim"`
	Points []jsonRating `json:"points"`
	Groups []jsonGroup  `json:"groups"`
	Note   *string      `json:"note"`
	Source jsonSource   `json:"source"`
	Traps  []jsonTrap   `json:"traps"`
}

func ratingsJSON(ratings ...screening.Rating) []jsonRating {
	return claimJSON(screening.Claim{Ratings: ratings}).Ratings
}

func typeJSON(r types.Row) jsonTypeRow {
	out := jsonTypeRow{
		Schema: schema, Kind: string(r.Kind), Type: r.Type, Alias: text(r.Alias), Group: text(r.Group), House: r.House,
		Claim: claimJSON(screening.Claim{Ratings: r.Ratings, Traits: r.Traits}), Points: ratingsJSON(r.Points...), Groups: []jsonGroup{},
		Note: text(r.Note), Source: sourceJSON(r.Source), Traps: []jsonTrap{},
	}
	for _, g := range r.Groups {
		out.Groups = append(out.Groups, jsonGroup{g.Name, text(g.Alias), ratingsJSON(g.Gain)[0], ratingsJSON(g.Points...), text(g.Note)})
	}
	for _, trap := range types.Traps(r.Type) {
		out.Traps = append(out.Traps, jsonTrap{trap.Text, sourceJSON(trap.Source)})
	}
	return out
}

// jsonGuess is what an unknown type number suggests.
type jsonGuess struct {
	Schema   int        `json:"schema"`
	Typed    string     `json:"typed"`
	Scheme   string     `json:"scheme"`
	Name     string     `json:"name"`
	Text     string     `json:"text"`
	Kinds    []string   `json:"kinds"`
	Polarity *string    `json:"polarity"`
	Material *string    `json:"material"`
	Doubt    string     `json:"doubt"`
	Source   jsonSource `json:"source"`
}

func guessJSON(word string, g types.Guess) jsonGuess {
	out := jsonGuess{
		Schema: schema, Typed: clean(word), Scheme: g.Scheme, Name: clean(g.Name), Text: clean(g.String()), Kinds: []string{}, Polarity: text(g.Polarity),
		Material: text(g.Material), Doubt: g.Doubt, Source: sourceJSON(g.Source),
	}
	for _, k := range g.Kinds {
		out.Kinds = append(out.Kinds, string(k))
	}
	return out
}
