package cli

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/lot"
	"goodbin/screening/quantity"
)

const lotExamples = `  goodbin lot 12                  how the lot stands: yield, spread, outliers, what to measure again
  goodbin lot 12 esr              one characteristic only
  goodbin lot 12 hfe --within 2   how many more to measure for a pair or four within 2 %
  goodbin lot 12 --json           for scripts: SI units, null where there are too few parts`

func (a *app) lotCommand() *cobra.Command {
	var within string
	cmd := &cobra.Command{
		Use:     "lot N [CHARACTERISTIC]",
		Short:   "look at a lot as a whole: yield, spread, outliers, and which parts to measure again",
		Example: lotExamples,
		RunE:    func(cmd *cobra.Command, args []string) error { return a.lot(cmd, args, within) },
	}
	cmd.Flags().StringVar(&within, "within", "5", "how far apart a pair or four may read, `PERCENT`")
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON: SI units, fractions 0 to 1, null where absent")
	return cmd
}

// lotView is a lot with all that can be said of its parts together.
type lotView struct {
	book   *screening.Rulebook
	lot    inventory.Lot
	parts  []inventory.Part
	within float64 // how far apart a group may read, as a fraction
	groups []*lotGroup
	rows   []lotRows // rows that are the same throughout
}

// lotKey tells apart what may be looked at together: one characteristic of one section at one condition, of parts that claim the same.
type lotKey struct {
	claim   string
	of      screening.Characteristic
	section string
	at      screening.Condition
}

// lotReading is one part's exact reading.
type lotReading struct {
	id      inventory.ID
	value   float64
	step    float64
	verdict screening.Verdict
	taken   bool // out of the box: no partner for another
}

// lotGroup is one characteristic of a lot.
type lotGroup struct {
	lotKey
	unit    quantity.Unit
	claimed screening.Claim
	all     []lotReading // every exact reading, in the order of part numbers
	bounded []inventory.ID

	barred, rejected, slipped []inventory.ID // not in the statistics

	limits     lot.Limits
	from       []screening.Limit // that give the limits
	limitsWhy  string            // why there is none
	ids        []inventory.ID    // of the parts in the statistics, by their place in readings
	readings   *lot.Readings     // in the statistics
	suspicions []lotSuspicion

	cold, warm float64        // the parts' temperatures in °C; NaN where one's is not known
	hereIDs    []inventory.ID // of the parts that are still in the box
	here       *lot.Readings  // theirs, to be matched
}

// lotSuspicion is a suspicion with the parts that it names.
type lotSuspicion struct {
	lot.Suspicion
	ids []inventory.ID
}

// lotRows are parts whose readings are the same throughout.
type lotRows struct {
	lotSuspicion
	claim string
}

func (a *app) lot(cmd *cobra.Command, args []string, within string) error {
	id, rest, err := idArgument(args, "lot 12")
	switch {
	case err != nil:
		return err
	case !id.IsLot():
		return request(fmt.Errorf("%s is a part, not a lot", id), fmt.Sprintf("goodbin lot %d", id.Lot))
	case len(rest) > 1:
		return request(fmt.Errorf("%q: one characteristic at a time", strings.Join(rest, " ")), fmt.Sprintf("goodbin lot %d %s", id.Lot, rest[0]))
	}
	v := &lotView{}
	if v.within, err = percentage("within", within); err != nil {
		return request(err, "")
	}
	if !(v.within > 0 && v.within <= 1) {
		return request(fmt.Errorf("within: %s is no spread of a pair", percentText(v.within)), "it is above 0 and at most 100, such as 5")
	}
	err = a.withWorkbook(cmd.Context(), true, func(w *inventory.Workbook) error {
		if v.lot, err = w.Lot(id.Lot); err != nil {
			return err
		}
		v.parts, err = w.PartsOf(id.Lot)
		return err
	})
	if errors.Is(err, inventory.ErrNotFound) && statusOf(err) != ExitWorkbook {
		return request(fmt.Errorf("lot %d is not in the workbook", id.Lot), "goodbin stock --all lists the parts kept, each with its lot")
	}
	if err != nil {
		return err
	}
	if v.book, err = a.book(string(v.lot.Kind)); err != nil {
		return err
	}
	only, err := characteristicOf(v.book, rest)
	if err != nil {
		return err
	}
	v.gather(only)
	v.look(only == "")
	if a.json {
		err = a.writeJSON(lotReportJSON(v))
	} else {
		err = a.printLot(v)
	}
	if err == nil && !slices.ContainsFunc(v.groups, func(g *lotGroup) bool { return len(g.all) > 0 }) {
		return silent(ExitNotAccepted)
	}
	return err
}

// characteristicOf reads the one characteristic that is asked for; "" is all.
func characteristicOf(book *screening.Rulebook, words []string) (screening.Characteristic, error) {
	if len(words) == 0 {
		return "", nil
	}
	name := strings.ToLower(words[0])
	if _, ok := book.BenchField(screening.Characteristic(name)); ok {
		return screening.Characteristic(name), nil
	}
	var names []string
	for _, f := range book.Bench {
		if !f.PerPart {
			names = append(names, string(f.Name))
		}
	}
	hint := "it is " + strings.Join(names, ", ")
	if near := entry.Nearest(name, names); near != nil {
		hint = "did you mean " + strings.Join(near, " or ") + "?"
	}
	return "", request(fmt.Errorf("%s is not measured on a lot of kind %s", quantity.Quote(words[0]), book.Kind), hint)
}

// gather sorts the readings that stand into groups. The room's temperature and the volts remaining are none of the part's own.
func (v *lotView) gather(only screening.Characteristic) {
	byKey := map[lotKey]*lotGroup{}
	for _, p := range v.parts {
		part := inventory.Claimed(p, v.lot)
		claim := part.Claim.String()
		for _, r := range part.Current() {
			if f, ok := v.book.BenchField(r.Of); only != "" && r.Of != only || only == "" && ok && f.PerPart {
				continue
			}
			key := lotKey{claim, r.Of, r.Section, r.At.Without(screening.PartTemperature)}
			g := byKey[key]
			if g == nil {
				g = &lotGroup{lotKey: key, unit: r.Unit, claimed: part.Claim, cold: math.Inf(1), warm: math.Inf(-1)}
				byKey[key] = g
				v.groups = append(v.groups, g)
			}
			if r.Sense != quantity.Exactly || r.Over || math.IsNaN(r.Value) || math.IsInf(r.Value, 0) {
				g.bounded = append(g.bounded, p.ID)
				continue
			}
			t := temperatureOf(part, r)
			g.cold, g.warm = math.Min(g.cold, t), math.Max(g.warm, t)
			taken := p.Count.Level != inventory.Unknown && p.Taken > 0 && p.Left() <= 0
			g.all = append(g.all, lotReading{p.ID, r.Value, r.Step, p.Outcome.Verdict, taken})
		}
	}
}

// temperatureOf returns what a part's temperature was at a reading, else that of the room, in °C; NaN where neither is known.
func temperatureOf(part screening.Part, r screening.Reading) float64 {
	if t, ok := r.At.Get(screening.PartTemperature); ok {
		return t
	}
	if ambient, ok := part.Ambient(); ok {
		return ambient.Value
	}
	return math.NaN()
}

// look takes every group in turn, and then, where all characteristics are there, the parts' readings throughout.
func (v *lotView) look(whole bool) {
	for _, g := range v.groups {
		g.limits, g.from, g.limitsWhy = withinSpec(v.book, g)
		g.examine()
	}
	if whole {
		v.copiedRows()
	}
}

// withinSpec returns what the claim allows of a group's characteristic at its condition as a data sheet asks of a new part: the tightest of
// the limits in use that a reading taken so can be held against as it stands.
func withinSpec(book *screening.Rulebook, g *lotGroup) (lot.Limits, []screening.Limit, string) {
	band := lot.NoLimits()
	claim, _, err := complete(book, g.claimed)
	if err != nil {
		return band, nil, err.Error()
	}
	if book.Limits == nil {
		return band, nil, "no limits are known for this kind"
	}
	limits, err := book.Limits(claim)
	if err != nil {
		return band, nil, err.Error()
	}
	field, _ := book.BenchField(g.of)
	cold, warm := g.at, g.at
	if !math.IsNaN(g.cold+g.warm) && len(g.all) > 0 {
		cold, warm = cold.With(screening.PartTemperature, g.cold), warm.With(screening.PartTemperature, g.warm)
	}
	cold, warm = cold.Fill(field.Default), warm.Fill(field.Default)
	var from []screening.Limit
	for _, l := range limits {
		if l.On != g.of || l.Section != "" && l.Section != g.section || !l.InUse || l.Need == screening.RoleOnly ||
			l.Grade == screening.Serviceable || l.Evidence == screening.ByRating {
			continue
		}
		_, _, fitsCold := field.Fit.Misfit(&cold, &l.At)
		_, _, fitsWarm := field.Fit.Misfit(&warm, &l.At)
		if !fitsCold || !fitsWarm {
			continue
		}
		band.Low, band.High = math.Max(band.Low, l.Low), math.Min(band.High, l.High)
		from = append(from, l)
	}
	if from == nil {
		return band, nil, "the claim sets none for new parts that readings at this condition can be held against as they stand"
	}
	return band, from, ""
}

// examine finds what is suspicious among all readings but those of barred parts, then takes out of the statistics what was barred, was
// rejected or has slipped by a power of ten. A rejected part stays among the suspects: a slip of the unit is the likeliest reason to reject.
func (g *lotGroup) examine() {
	var suspects, counted []lotReading
	for _, r := range g.all {
		if r.verdict == screening.Barred {
			g.barred = append(g.barred, r.id)
			continue
		}
		suspects = append(suspects, r)
	}
	readings, ids := readingsOf(g.unit, suspects)
	for _, s := range readings.Examine() {
		named := lotSuspicion{s, named(ids, s.Parts)}
		g.suspicions = append(g.suspicions, named)
		if s.Kind == lot.UnitSlip {
			g.slipped = append(g.slipped, named.ids...)
		}
	}
	slices.SortFunc(g.slipped, inventory.ID.Compare)
	for _, r := range suspects {
		switch {
		case slices.Contains(g.slipped, r.id):
		case r.verdict == screening.Reject:
			g.rejected = append(g.rejected, r.id)
		default:
			counted = append(counted, r)
		}
	}
	g.readings, g.ids = readingsOf(g.unit, counted)
	g.here, g.hereIDs = readingsOf(g.unit, slices.DeleteFunc(counted, func(r lotReading) bool { return r.taken }))
}

// readingsOf makes readings of finite values. Their step is the coarsest that at least half of them were read to, so that one reading on the
// wrong range does not blur all.
func readingsOf(unit quantity.Unit, from []lotReading) (*lot.Readings, []inventory.ID) {
	var values, steps []float64
	var ids []inventory.ID
	for _, r := range from {
		values, steps, ids = append(values, r.value), append(steps, r.step), append(ids, r.id)
	}
	step := 0.0
	if len(steps) > 0 {
		slices.Sort(steps)
		step = steps[len(steps)/2]
	}
	readings, err := lot.New(unit, step, values...)
	if err != nil { // gather took finite values only; a step that is no size counts as unknown
		readings, _ = lot.New(unit, 0, values...)
	}
	return readings, ids
}

func named(ids []inventory.ID, places []int) []inventory.ID {
	out := make([]inventory.ID, 0, len(places))
	for _, i := range places {
		out = append(out, ids[i])
	}
	return out
}

// copiedRows finds parts in a row whose readings are the same throughout, of two or more characteristics.
func (v *lotView) copiedRows() {
	byClaim := map[string][]*lotGroup{}
	var claims []string
	for _, g := range v.groups {
		if byClaim[g.claim] == nil {
			claims = append(claims, g.claim)
		}
		byClaim[g.claim] = append(byClaim[g.claim], g)
	}
	for _, claim := range claims {
		groups := byClaim[claim]
		if len(groups) < 2 {
			continue
		}
		ids, rows := rowsOf(groups)
		for _, s := range lot.CopiedRows(rows) {
			v.rows = append(v.rows, lotRows{lotSuspicion{s, named(ids, s.Parts)}, claim})
		}
	}
}

// rowsOf lays the exact readings of groups out by part; NaN stands where a part has none.
func rowsOf(groups []*lotGroup) (ids []inventory.ID, rows [][]float64) {
	at := map[inventory.ID][]float64{}
	for k, g := range groups {
		for _, r := range g.all {
			if at[r.id] == nil {
				at[r.id] = slices.Repeat([]float64{math.NaN()}, len(groups))
				ids = append(ids, r.id)
			}
			at[r.id][k] = r.value
		}
	}
	slices.SortFunc(ids, inventory.ID.Compare)
	for _, id := range ids {
		rows = append(rows, at[id])
	}
	return ids, rows
}

// lotConfidence is of the interval of the yield.
const lotConfidence = 0.95

// forecast says how many more parts a group of this size takes; those taken out of the box are left out.
func (v *lotView) forecast(g *lotGroup, size int) (f lot.Forecast, have []inventory.ID, err error) {
	left, _ := v.left()
	f, err = g.here.MoreForGroup(size, lot.Within{Relative: v.within}, left)
	return f, named(g.hereIDs, f.Have), err
}

// yield returns the share of usable parts among those decided, how many are usable and how many decided; ok is false where none is.
func (v *lotView) yield() (share lot.Interval, usable, decided int, ok bool) {
	for _, p := range v.parts {
		switch verdict := p.Outcome.Verdict; {
		case verdict.Usable():
			usable++
			decided++
		case verdict != screening.NoVerdict && verdict != screening.Undecided:
			decided++
		}
	}
	share, err := lot.Yield(usable, decided, lotConfidence)
	return share, usable, decided, err == nil
}

// left returns how many parts of the lot can still be measured, and whether that is recorded.
func (v *lotView) left() (int, bool) {
	const ahead = 1000 // as far as the forecast looks
	if v.lot.Count.Level == inventory.Unknown || v.lot.Count.N <= 0 {
		return ahead, false
	}
	return v.lot.Count.N, true
}
