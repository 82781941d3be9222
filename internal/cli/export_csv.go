package cli

import (
	"context"
	"encoding/csv"
	"io"
	"slices"
	"strconv"
	"strings"
	"time"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// The columns of an export before and after those of the readings.
var (
	exportHead = []string{"kind", "lot", "part", "place", "source", "note", "claim", "seen", "treated"}
	exportTail = []string{"verdict", "grade", "held-as", "not-tested", "why", "next", "tables", "judged", "count", "left"}
)

// exporter writes parts as rows that goodbin screen reads again.
type exporter struct {
	*app
	lots    map[uint32]inventory.Lot
	columns []string // headers of the readings
	comma   bool     // decimals are written with a comma
}

func (a *app) exportCSV(ctx context.Context, w *inventory.Workbook, out io.Writer, delimiter rune, decimalComma bool) error {
	x := exporter{app: a, lots: map[uint32]inventory.Lot{}, comma: decimalComma}
	lots, err := w.Lots()
	if err != nil {
		return err
	}
	for _, l := range lots {
		x.lots[l.ID] = l
	}
	if err := x.findColumns(ctx, w); err != nil {
		return err
	}
	writer := csv.NewWriter(out)
	writer.Comma = delimiter
	if err := writer.Write(slices.Concat(exportHead, x.columns, exportTail)); err != nil {
		return err
	}
	for p, err := range w.Parts() {
		if err == nil {
			err = ctx.Err()
		}
		if err != nil {
			return err
		}
		if err := writer.Write(x.row(p)); err != nil {
			return err
		}
	}
	writer.Flush()
	return writer.Error()
}

// findColumns collects the headers that the readings of all parts need, in the order of the rulebooks' benches.
func (x *exporter) findColumns(ctx context.Context, w *inventory.Workbook) error {
	found := map[string]bool{}
	for p, err := range w.Parts() {
		if err == nil {
			err = ctx.Err()
		}
		if err != nil {
			return err
		}
		for _, r := range p.Part.Current() {
			found[readingHeader(r)] = true
		}
	}
	rank := map[string]int{}
	for _, b := range x.books {
		for _, f := range b.Bench {
			if _, known := rank[string(f.Name)]; !known {
				rank[string(f.Name)] = len(rank)
			}
		}
	}
	for h := range found {
		x.columns = append(x.columns, h)
	}
	name := func(header string) string {
		if i := strings.IndexAny(header, "@/"); i >= 0 {
			return header[:i]
		}
		return header
	}
	slices.SortFunc(x.columns, func(a, b string) int {
		if d := rank[name(a)] - rank[name(b)]; d != 0 {
			return d
		}
		return strings.Compare(a, b)
	})
	return nil
}

// readingHeader is the header under which a reading stands: its name, section and condition as words.
func readingHeader(r screening.Reading) string {
	header := string(r.Of)
	if r.Section != "" {
		header += "/" + r.Section
	}
	at := "@"
	for _, v := range screening.Variables() {
		if x, ok := r.At.Get(v); ok {
			header += at + v.String() + "=" + strconv.FormatFloat(x, 'g', -1, 64) + v.Unit().ASCII()
			at = ","
		}
	}
	return header
}

func (x *exporter) row(p inventory.Part) []string {
	lot := x.lots[p.ID.Lot]
	claim := p.Header
	if claim == "" {
		claim = lot.Header
	}
	if claim == "" { // or it would take over what the part above it claims when it is screened again
		claim = "nothing"
	}
	place := p.Place
	if place == "" {
		place = lot.Place
	}
	book, _ := x.books.Find(lot.Kind)
	row := []string{
		string(lot.Kind), strconv.FormatUint(uint64(p.ID.Lot), 10), strconv.FormatUint(uint64(p.ID.Number), 10), place, lot.Source, p.Note, claim,
		seenText(book, p.Part.Look), "",
	}
	if p.Part.Treated > 0 {
		row[len(row)-1] = strconv.Itoa(p.Part.Treated)
	}
	cells := map[string]string{}
	for _, r := range p.Part.Current() {
		cells[readingHeader(r)] = x.readingCell(book, r)
	}
	for _, c := range x.columns {
		row = append(row, cells[c])
	}
	o := p.Outcome
	judged := ""
	if !o.Judged.IsZero() {
		judged = o.Judged.Format(time.RFC3339)
	}
	left := ""
	if p.Count.Level != inventory.Unknown {
		left = strconv.Itoa(p.Left())
	}
	row = append(row, o.Verdict.String(), o.Grade.String(), o.As, strings.Join(o.NotTested, "; "), o.Why, o.Next, o.Tables, judged,
		p.Count.String(), left)
	for i := range row {
		row[i] = entry.Guard(clean(row[i]))
	}
	return row
}

// seenText writes looks as the seen column takes them.
func seenText(book *screening.Rulebook, look []screening.Observation) string {
	var words []string
	part := screening.Part{Look: look} // the last look counts
	for _, o := range look {
		if fault, _ := part.Seen(o.Check); fault && !slices.Contains(words, o.Check) {
			words = append(words, o.Check)
		}
	}
	if len(words) == 0 && book != nil && len(look) > 0 {
		for _, c := range book.Look {
			if !slices.ContainsFunc(look, func(o screening.Observation) bool { return o.Check == c.Name }) {
				return ""
			}
		}
		return "nothing"
	}
	return strings.Join(words, " ")
}

// readingCell is a reading as typed where the text alone says all of it, else its value with the unit.
func (x *exporter) readingCell(book *screening.Rulebook, r screening.Reading) string {
	if book != nil && r.Typed != "" && !x.comma {
		parsed, err := entry.Words(book, []string{readingHeader(r) + "=" + r.Typed})
		if err == nil && len(parsed.Readings) == 1 && parsed.Readings[0].Value == r.Value && parsed.Readings[0].Sense == r.Sense {
			return r.Typed
		}
	}
	values := r.Repeats
	if len(values) < 2 {
		values = []float64{r.Value}
	}
	var texts []string
	for _, v := range values {
		number := strconv.FormatFloat(percents(v, r.Unit), 'f', -1, 64)
		if x.comma {
			number = strings.ReplaceAll(number, ".", ",")
		}
		texts = append(texts, number+r.Unit.ASCII())
	}
	text := strings.Join(texts, "; ")
	switch {
	case r.Over:
		return "OL"
	case r.Sense == quantity.AtMost:
		return ".." + text
	case r.Sense == quantity.AtLeast:
		return text + ".."
	}
	return text
}

// percents is a value in the unit that it is written with.
func percents(x float64, u quantity.Unit) float64 {
	if u == quantity.Ratio {
		return x * 100
	}
	return x
}
