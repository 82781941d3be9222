package unknown

import (
	_ "embed"
	"fmt"
	"math"
	"slices"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var inf, negInf = math.Inf(1), math.Inf(-1)

//go:embed candidates.csv
var candidatesCSV string

//go:embed classes.csv
var classesCSV string

// set is a set of classes of one reading, a bit each.
type set uint16

// class is one class of a reading: closed bounds, SI.
type class struct {
	name      string
	low, high float64
	source    screening.Source
}

// measurement is one reading that may be taken: of what, between which leads. The first lead of a vf pair has the red probe.
type measurement struct {
	of       string
	from, to int // leads from 1; 0 for the whole part
	section  string
}

var definitions = map[string]screening.Definition{
	"vf": screening.VF, "resistance": screening.Resistance, "capacitance": screening.Capacitance,
}

// candidate is one sort of part: the classes of its readings by the roles of its leads.
type candidate struct {
	name        string
	kinds       []screening.Kind
	roles       []string
	vf          [][]set // by role and role; [i][j] with red on i
	resistance  [][]set
	capacitance set
	alike       [][]bool // pairs of roles whose vf is the same both ways round
	tell        string
	source      screening.Source
}

// fit is a candidate with one way in which its roles may lie on the leads: lead[i] is the role of lead i.
type fit struct {
	*candidate
	ways [][]int
}

type table struct {
	classes    map[string][]class
	candidates []candidate
}

// load reads the embedded tables once; a test holds them to load.
var load = sync.OnceValue(func() table {
	t, err := read()
	if err != nil {
		panic("unknown: embedded tables: " + err.Error())
	}
	return t
})

func read() (table, error) {
	t := table{classes: map[string][]class{}}
	classes := book.ReadTable("classes.csv", classesCSV)
	for _, r := range classes.Rows() {
		c := class{name: r.Required("class"), low: r.Number("low"), source: r.Source()}
		if c.high = inf; r.Text("high") != "inf" {
			c.high = r.Number("high")
		}
		of := r.Required("of")
		t.classes[of] = append(t.classes[of], c)
	}
	if err := classes.Err(); err != nil {
		return t, err
	}
	rows := book.ReadTable("candidates.csv", candidatesCSV)
	for _, r := range rows.Rows() {
		c := candidate{name: r.Required("name"), roles: strings.Fields(r.Required("terminals")), tell: r.Text("tell"), source: r.Source()}
		for _, k := range strings.Fields(r.Text("kinds")) {
			c.kinds = append(c.kinds, screening.Kind(k))
		}
		if int(r.Number("leads")) != len(c.roles) {
			r.Errorf("terminals", "%d roles for %s leads", len(c.roles), r.Text("leads"))
		}
		c.vf = t.pairs(r, "vf", ">", c.roles)
		c.alike = alikePairs(r, c.roles)
		c.resistance = t.pairs(r, "resistance", "-", c.roles)
		if r.Has("capacitance") {
			c.capacitance = t.pairs(r, "capacitance", "-", c.roles)[0][0]
		}
		t.candidates = append(t.candidates, c)
	}
	return t, rows.Err()
}

// pairs reads "a>b:si *:open" into the classes of every pair of roles; sep is ">" where the direction counts.
func (t table) pairs(r book.Row, column, sep string, roles []string) [][]set {
	all := make([][]set, len(roles))
	for i := range all {
		all[i] = make([]set, len(roles))
	}
	words := strings.Fields(r.Required(column))
	for pass := range 2 { // the rest first: what is named overrides it
		for _, word := range words {
			pair, names, _ := strings.Cut(word, ":")
			classes, err := t.setOf(column, names)
			if err != nil {
				r.Errorf(column, "%v", err)
			}
			if pair == "*" {
				if pass == 0 {
					fill(all, classes)
				}
				continue
			}
			from, to, ok := strings.Cut(pair, sep)
			i, j := slices.Index(roles, from), slices.Index(roles, to)
			if !ok || i < 0 || j < 0 {
				r.Errorf(column, "%q names no pair of %v", pair, roles)
				continue
			}
			if pass == 1 {
				all[i][j] = classes
				if sep == "-" {
					all[j][i] = classes
				}
			}
		}
	}
	return all
}

// alikePairs reads "a-b c-d" or "*".
func alikePairs(r book.Row, roles []string) [][]bool {
	all := make([][]bool, len(roles))
	for i := range all {
		all[i] = slices.Repeat([]bool{r.Text("alike") == "*"}, len(roles))
	}
	for pair := range strings.FieldsSeq(strings.Trim(r.Text("alike"), "*")) {
		from, to, _ := strings.Cut(pair, "-")
		i, j := slices.Index(roles, from), slices.Index(roles, to)
		if i < 0 || j < 0 {
			r.Errorf("alike", "%q names no pair of %v", pair, roles)
			continue
		}
		all[i][j], all[j][i] = true, true
	}
	return all
}

func fill(all [][]set, s set) {
	for i := range all {
		for j := range all[i] {
			all[i][j] = s
		}
	}
}

func (t table) setOf(of, names string) (set, error) {
	if names == "any" {
		return 1<<len(t.classes[of]) - 1, nil
	}
	var s set
	for name := range strings.SplitSeq(names, "|") {
		i := slices.IndexFunc(t.classes[of], func(c class) bool { return c.name == name })
		if i < 0 {
			return 0, fmt.Errorf("%q is no class of %s", name, of)
		}
		s |= 1 << i
	}
	return s, nil
}

// measurements lists the readings that may be taken of a part with n leads, the cheapest first.
func measurements(n int) []measurement {
	var all []measurement
	for i := 1; i <= n; i++ {
		for j := 1; j <= n; j++ {
			if i != j {
				all = append(all, measurement{"vf", i, j, fmt.Sprintf("%d-%d", i, j)})
			}
		}
	}
	for i := 1; i <= n; i++ {
		for j := i + 1; j <= n; j++ {
			all = append(all, measurement{"resistance", i, j, fmt.Sprintf("%d-%d", i, j)})
		}
	}
	if n == 2 {
		all = append(all, measurement{of: "capacitance"})
	}
	return all
}

// seen returns the classes that a reading allows, and whether it was taken.
func seen(m measurement, readings []screening.Reading) (set, bool) {
	for i := len(readings) - 1; i >= 0; i-- {
		r := &readings[i]
		if r.Of != definitions[m.of].Name || r.Section != m.section && !(m.of == "resistance" && r.Section == fmt.Sprintf("%d-%d", m.to, m.from)) {
			continue
		}
		var s set
		for k, c := range load().classes[m.of] {
			low, high := r.Value-r.Spec, r.Value+r.Spec
			switch r.Sense {
			case quantity.AtLeast:
				high = inf
				low = r.Value
			case quantity.AtMost:
				low = 0
			default:
				if r.Value == 0 {
					high = 0 // less than the last digit, whatever that is
				}
			}
			if low <= c.high && high >= c.low {
				s |= 1 << k
			}
		}
		return s, true
	}
	return 0, false
}

// expected is the classes that a candidate shows in a measurement when its roles lie on the leads in one way, given what was read already.
func (c *candidate) expected(m measurement, way []int, taken map[measurement]set) set {
	if m.of == "capacitance" {
		return c.capacitance
	}
	i, j := way[m.from-1], way[m.to-1]
	if m.of == "resistance" {
		return c.resistance[i][j]
	}
	s := c.vf[i][j]
	if c.alike[i][j] {
		if turned, ok := taken[m.turned()]; ok {
			s &= turned
		}
	}
	return s
}

// turned is the same measurement with the probes exchanged.
func (m measurement) turned() measurement {
	return measurement{m.of, m.to, m.from, fmt.Sprintf("%d-%d", m.to, m.from)}
}

// takenOf collects what the readings allow of each measurement.
func takenOf(n int, readings []screening.Reading) map[measurement]set {
	taken := map[measurement]set{}
	for _, m := range measurements(n) {
		if s, ok := seen(m, readings); ok {
			taken[m] = s
		}
	}
	return taken
}

// possible lists the candidates that the readings leave, each with the ways in which its roles may lie on the leads.
func possible(n int, readings []screening.Reading) []fit {
	ways, taken := permutations(n), takenOf(n, readings)
	var left []fit
	for i := range load().candidates {
		c := &load().candidates[i]
		if len(c.roles) != n {
			continue
		}
		f := fit{candidate: c}
		for _, way := range ways {
			agrees := true
			for m, s := range taken {
				agrees = agrees && c.expected(m, way, taken)&s != 0
			}
			if agrees {
				f.ways = append(f.ways, way)
			}
		}
		if f.ways != nil {
			left = append(left, f)
		}
	}
	return left
}

func permutations(n int) [][]int {
	all := [][]int{{}}
	for i := range n {
		var longer [][]int
		for _, p := range all {
			for at := 0; at <= len(p); at++ {
				longer = append(longer, slices.Insert(slices.Clone(p), at, i))
			}
		}
		all = longer
	}
	return all
}

// separating returns the measurement that leaves the fewest candidates in its worst case; false where none tells any of them apart.
func separating(n int, readings []screening.Reading, left []fit) (measurement, bool) {
	var best measurement
	all, least := weight(left), inf
	if len(left) < 2 {
		return best, false
	}
	taken := takenOf(n, readings)
	for _, m := range measurements(n) {
		if _, ok := taken[m]; ok {
			continue
		}
		worst := 0.0
		for k := range load().classes[m.of] {
			worst = max(worst, weight(after(left, m, 1<<k, taken)))
		}
		if cost := worst * dearness(m); worst < all && cost < least {
			least, best = cost, m
		}
	}
	return best, best.of != ""
}

// weight counts candidates; of the ways in which one lies on the leads it counts a little, so that a measurement that only turns a part round
// is better than none while sorts remain.
func weight(left []fit) float64 {
	w := 0.0
	for _, f := range left {
		w += 1 + 0.01*float64(len(f.ways))
	}
	return w
}

// after keeps what remains when a measurement shows a class.
func after(left []fit, m measurement, s set, taken map[measurement]set) []fit {
	var kept []fit
	for _, f := range left {
		g := fit{candidate: f.candidate}
		for _, way := range f.ways {
			if f.expected(m, way, taken)&s != 0 {
				g.ways = append(g.ways, way)
			}
		}
		if g.ways != nil {
			kept = append(kept, g)
		}
	}
	return kept
}

// text names the candidate with what is known of its leads: "a silicon NPN transistor (base is lead 2)".
func (f fit) text() string {
	var known []string
	for role, name := range f.roles {
		lead := slices.Index(f.ways[0], role)
		if len(name) > 1 && !slices.ContainsFunc(f.ways, func(w []int) bool { return w[lead] != role }) {
			known = append(known, fmt.Sprintf("%s is lead %d", name, lead+1))
		}
	}
	if known == nil {
		return f.name
	}
	return f.name + " (" + strings.Join(known, ", ") + ")"
}

// reason says what the candidate is judged as, and what would tell it from the others.
func (f fit) reason() screening.Reason {
	kinds := make([]string, len(f.kinds))
	for i, k := range f.kinds {
		kinds[i] = string(k)
	}
	text := "it may be " + f.text()
	if len(kinds) > 0 {
		text += ": judge it as " + strings.Join(kinds, ", ")
	}
	if f.tell != "" {
		text += "; " + f.tell
	}
	return book.Note("", "%s (%s)", text, f.source.Status)
}
