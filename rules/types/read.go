package types

import (
	_ "embed"
	"errors"
	"math"
	"slices"
	"strconv"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var (
	//go:embed transistors.csv
	transistorsCSV string
	//go:embed diodes.csv
	diodesCSV string
	//go:embed zeners.csv
	zenersCSV string
	//go:embed groups.csv
	groupsCSV string
	//go:embed points.csv
	pointsCSV string
)

func read() (*content, error) {
	t := newContent()
	transistors := book.ReadTable("transistors.csv", transistorsCSV)
	diodes := book.ReadTable("diodes.csv", diodesCSV)
	zeners := book.ReadTable("zeners.csv", zenersCSV)
	groups := book.ReadTable("groups.csv", groupsCSV)
	points := book.ReadTable("points.csv", pointsCSV)
	for _, r := range transistors.Rows() {
		t.add(Bipolar, r, transistor(r))
	}
	for _, r := range diodes.Rows() {
		t.add(Diode, r, diode(r))
	}
	for _, r := range zeners.Rows() {
		t.add(Zener, r, zener(r))
	}
	for _, r := range groups.Rows() {
		t.addGroup(r)
	}
	for _, r := range points.Rows() {
		t.addPoint(r)
	}
	var err error
	for kind, text := range general() {
		err = errors.Join(err, t.readKind(kind, text))
	}
	return t, errors.Join(transistors.Err(), diodes.Err(), zeners.Err(), groups.Err(), points.Err(), err)
}

// builtinVersions are the versions of the embedded tables.
func builtinVersions() map[screening.Kind]string {
	versions := map[screening.Kind]string{
		Bipolar: book.Fingerprint(transistorsCSV, groupsCSV, pointsCSV), Diode: book.Fingerprint(diodesCSV), Zener: book.Fingerprint(zenersCSV),
	}
	for kind, text := range general() {
		versions[kind] = book.Fingerprint(text)
	}
	return versions
}

func (t *content) add(kind screening.Kind, r book.Row, row Row) {
	row.Kind = kind
	if t.byName[kind] == nil {
		t.byName[kind] = map[string]int{}
	}
	names := []string{row.Type}
	if r.Has("alias") {
		row.Alias = r.Text("alias")
		names = append(names, r.Text("alias"))
	}
	for _, n := range names {
		if _, twice := t.byName[kind][fold(n)]; twice {
			r.Errorf("type", "%q stands twice", n)
		}
		t.byName[kind][fold(n)] = len(t.rows[kind])
	}
	row.Ratings, row.Traits = slices.Clip(row.Ratings), slices.Clip(row.Traits)
	t.rows[kind] = append(t.rows[kind], row)
}

// line reads one row of a type table; what a cell says goes into row.
type line struct {
	book.Row
	row    Row
	except map[string]screening.Status
}

func newLine(r book.Row) *line {
	l := &line{Row: r, except: map[string]screening.Status{}}
	l.row = Row{
		Type: r.Required("type"), Note: r.Text("note"), Source: r.Source(),
		TempCoLow: notGiven, TempCoHigh: notGiven,
	}
	l.row.Traits = []screening.Trait{{Name: screening.TraitType, Text: l.row.Type}}
	if !r.Has("except") {
		return l
	}
	for _, e := range strings.Split(r.Text("except"), ";") {
		field, word, _ := strings.Cut(e, "=")
		status, ok := screening.StatusNamed(word)
		if !ok {
			r.Errorf("except", "%q is not FIELD=STATUS", e)
		}
		l.except[field] = status
	}
	return l
}

// source is the row's, with the status that this one figure has.
func (l *line) source(field string) screening.Source {
	s := l.row.Source
	if status, ok := l.except[field]; ok {
		if status == screening.FromMemory {
			s.Document = "no text seen; recalled"
		}
		s.Status = status
	}
	return s
}

func (l *line) traits(names ...string) {
	for _, n := range names {
		if l.Has(n) {
			l.row.Traits = append(l.row.Traits, screening.Trait{Name: n, Text: l.Text(n)})
		}
	}
}

// bounds adds a rating with these bounds at a condition.
func (l *line) bounds(of string, unit quantity.Unit, low, high float64, at screening.Condition) {
	l.row.Ratings = append(l.row.Ratings, screening.Rating{
		Of: screening.Characteristic(of), At: at, Unit: unit, Nominal: math.NaN(), Low: low, High: high, Source: l.source(of),
	})
}

// most adds the upper bound in column rated:<of>, where it holds one.
func (l *line) most(of string, unit quantity.Unit, at screening.Condition) {
	if l.Has("rated:" + of) {
		l.bounds(of, unit, math.Inf(-1), l.Number("rated:"+of), at)
	}
}

// stands adds the value in column rated:<of> as what the part claims to stand or to have: a nominal.
func (l *line) stands(of string, unit quantity.Unit, at screening.Condition) {
	if !l.Has("rated:" + of) {
		return
	}
	x := l.Number("rated:" + of)
	l.row.Ratings = append(l.row.Ratings, screening.Rating{
		Of: screening.Characteristic(of), At: at, Unit: unit, Nominal: x, Low: x, High: x, Source: l.source(of),
	})
}

// at reads a condition from columns, skipping empty cells.
func at(r book.Row, columns ...string) screening.Condition {
	var c screening.Condition
	for _, column := range columns {
		if !r.Has(column) {
			continue
		}
		v, ok := conditionColumns[column]
		if !ok {
			r.Errorf(column, "is no condition")
		}
		c = c.With(v, r.Number(column))
	}
	return c
}

var conditionColumns = map[string]screening.Variable{
	"ic": screening.IC, "vce": screening.VCE, "vcb": screening.VCB, "current": screening.Current, "voltage": screening.Voltage,
	"izt": screening.Current, "izk": screening.Current,
}

// span reads "L..H", "L.." or "..H".
func span(r book.Row, column string) (low, high float64) {
	low, high = math.Inf(-1), math.Inf(1)
	a, b, ok := strings.Cut(r.Required(column), "..")
	for _, end := range []struct {
		text string
		to   *float64
	}{{a, &low}, {b, &high}} {
		if end.text == "" {
			continue
		}
		x, err := strconv.ParseFloat(end.text, 64)
		if err != nil {
			ok = false
		}
		*end.to = x
	}
	if !ok || low > high {
		r.Errorf(column, "%q is no range such as 110..450", r.Text(column))
	}
	return low, high
}

func transistor(r book.Row) Row {
	l := newLine(r)
	l.traits("polarity", "material", "technology", "case", "pinout")
	l.row.Darlington = r.Text("technology") == "darlington"
	l.row.LeakageAs = r.Text("leakage-as")
	for _, v := range []string{"vceo", "vcbo", "vebo"} {
		l.stands(v, quantity.Volt, screening.Condition{})
	}
	l.stands("ic-max", quantity.Ampere, screening.Condition{})
	l.stands("ptot", quantity.Watt, screening.Condition{})
	low, high := span(r, "rated:hfe")
	l.bounds("hfe", quantity.One, low, high, at(r, "ic", "vce", "vcb"))
	l.stands("ft", quantity.Hertz, screening.Condition{})
	if r.Has("rated:icbo") {
		l.bounds("icbo", quantity.Ampere, math.Inf(-1), r.Number("rated:icbo"), screening.At(screening.VCB, r.Number("icbo-voltage")))
	}
	return l.row
}

func diode(r book.Row) Row {
	l := newLine(r)
	l.traits("material", "technology", "case")
	l.stands("vrrm", quantity.Volt, screening.Condition{})
	l.stands("if-av", quantity.Ampere, screening.Condition{})
	l.stands("ifsm", quantity.Ampere, screening.Condition{})
	l.most("vf", quantity.Volt, at(r, "current"))
	l.most("ir", quantity.Ampere, at(r, "voltage"))
	l.most("trr", quantity.Second, screening.Condition{})
	return l.row
}

func zener(r book.Row) Row {
	l := newLine(r)
	l.row.Ratings = append(l.row.Ratings, screening.Rating{
		Of: "vz", At: at(r, "izt"), Unit: quantity.Volt,
		Nominal: r.Number("vz"), Low: r.Number("vz-low"), High: r.Number("vz-high"), Source: l.source("vz"),
	})
	l.most("zz", quantity.Ohm, at(r, "izt"))
	if r.Has("rated:zzk") {
		l.bounds("zz", quantity.Ohm, math.Inf(-1), r.Number("rated:zzk"), at(r, "izk"))
	}
	l.most("ir", quantity.Ampere, at(r, "voltage"))
	l.stands("izm", quantity.Ampere, screening.Condition{})
	l.stands("ptot", quantity.Watt, screening.Condition{})
	l.row.TempCoLow, l.row.TempCoHigh = r.NumberOr("tc-low", notGiven), r.NumberOr("tc-high", notGiven)
	return l.row
}

// named finds the transistor that a row of a side table belongs to.
func (t *content) named(r book.Row) (*Row, bool) {
	i, ok := t.byName[Bipolar][fold(r.Required("type"))]
	if !ok {
		r.Errorf("type", "%q is in no table", r.Text("type"))
		return nil, false
	}
	return &t.rows[Bipolar][i], true
}

func (t *content) addGroup(r book.Row) {
	row, ok := t.named(r)
	if !ok {
		return
	}
	g := Group{Name: r.Required("group"), Alias: r.Text("alias"), Note: r.Text("note"), Gain: screening.Rating{
		Of: "hfe", At: at(r, "ic", "vce", "vcb"), Unit: quantity.One, Nominal: math.NaN(),
		Low: r.Number("min"), High: r.Number("max"), Source: r.Source(),
	}}
	if g.Gain.Low >= g.Gain.High {
		r.Errorf("max", "is not above min")
	}
	if _, twice := row.FindGroup(g.Name); twice {
		r.Errorf("group", "%q stands twice for %s", g.Name, row.Type)
	}
	row.Groups = append(row.Groups, g)
}

var pointUnits = map[string]quantity.Unit{
	"hfe": quantity.One, "iceo": quantity.Ampere, "icex": quantity.Ampere, "vbe": quantity.Volt,
}

func (t *content) addPoint(r book.Row) {
	row, ok := t.named(r)
	if !ok {
		return
	}
	unit, ok := pointUnits[r.Required("of")]
	if !ok {
		r.Errorf("of", "%q is none of hfe, iceo, icex, vbe", r.Text("of"))
	}
	p := screening.Rating{
		Of: screening.Characteristic(r.Text("of")), At: at(r, "ic", "vce", "vcb"), Unit: unit, Nominal: math.NaN(),
		Low: r.NumberOr("low", math.Inf(-1)), High: r.NumberOr("high", math.Inf(1)), Source: r.Source(),
	}
	if !r.Has("group") {
		row.Points = append(row.Points, p)
		return
	}
	i := slices.IndexFunc(row.Groups, func(g Group) bool { return g.Name == r.Text("group") })
	if i < 0 {
		r.Errorf("group", "%q is no group of %s", r.Text("group"), row.Type)
		return
	}
	row.Groups[i].Points = append(row.Groups[i].Points, p)
}
