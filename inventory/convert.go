package inventory

import (
	"fmt"

	"goodbin/screening"
)

func claimTo(c screening.Claim) *claimRecord {
	if c.IsZero() {
		return nil
	}
	record := &claimRecord{}
	for _, r := range c.Ratings {
		to := ratingRecord{
			Of: string(r.Of), Section: r.Section, At: conditionTo(r.At), Unit: unitNames[r.Unit],
			Nominal: r.Nominal, Low: r.Low, High: r.High, Typed: r.Typed,
		}
		if r.Source != (screening.Source{}) {
			to.Source = &sourceRecord{Document: r.Source.Document, Clause: r.Source.Clause, Status: r.Source.Status.String()}
		}
		record.Ratings = append(record.Ratings, to)
	}
	for _, t := range c.Traits {
		record.Traits = append(record.Traits, traitRecord(t))
	}
	return record
}

func claimFrom(record *claimRecord) (screening.Claim, error) {
	var c screening.Claim
	if record == nil {
		return c, nil
	}
	for _, r := range record.Ratings {
		at, err := conditionFrom(r.At)
		if err != nil {
			return c, err
		}
		unit, err := named(unitsByName, "unit", r.Unit)
		if err != nil {
			return c, err
		}
		to := screening.Rating{
			Of: screening.Characteristic(r.Of), Section: r.Section, At: at, Unit: unit, Nominal: r.Nominal, Low: r.Low, High: r.High,
			Typed: r.Typed,
		}
		if to.Source, err = sourceFrom(r.Source); err != nil {
			return c, err
		}
		c.Ratings = append(c.Ratings, to)
	}
	for _, t := range record.Traits {
		c.Traits = append(c.Traits, screening.Trait(t))
	}
	return c, nil
}

func sourceFrom(record *sourceRecord) (screening.Source, error) {
	if record == nil {
		return screening.Source{}, nil
	}
	s := screening.Source{Document: record.Document, Clause: record.Clause}
	if record.Status != "" {
		status, ok := screening.StatusNamed(record.Status)
		if !ok {
			return s, fmt.Errorf("%w: unknown status %q", errVersion, record.Status)
		}
		s.Status = status
	}
	return s, nil
}

func readingTo(r screening.Reading) readingRecord {
	var from []inputRecord
	for _, in := range r.From {
		from = append(from, inputRecord{string(in.Of), in.Name, in.U, in.Sensitivity})
	}
	return readingRecord{
		Of: string(r.Of), Section: r.Section, Value: r.Value, Sense: senseNames[r.Sense], Unit: unitNames[r.Unit], At: conditionTo(r.At),
		Step: r.Step, Over: r.Over, Repeats: r.Repeats, Meter: r.Meter, Typed: r.Typed, U: r.U, Assumed: r.Assumed,
		AssumedAt: conditionTo(r.AssumedAt), Rule: r.Rule, Spec: r.Spec,
		MeterAt: conditionTo(r.MeterAt), Correction: r.Correction, From: from,
	}
}

func readingFrom(record readingRecord) (screening.Reading, error) {
	r := screening.Reading{
		Of: screening.Characteristic(record.Of), Section: record.Section, Value: record.Value, Step: record.Step, Over: record.Over,
		Repeats: record.Repeats, Meter: record.Meter, Typed: record.Typed, U: record.U, Assumed: record.Assumed, Rule: record.Rule,
		Spec: record.Spec, Correction: record.Correction,
	}
	for _, in := range record.From {
		r.From = append(r.From, screening.Input{Of: screening.Characteristic(in.Of), Name: in.Name, U: in.U, Sensitivity: in.Sensitivity})
	}
	var err error
	if r.Sense, err = named(sensesByName, "sense", record.Sense); err != nil {
		return r, err
	}
	if r.Unit, err = named(unitsByName, "unit", record.Unit); err != nil {
		return r, err
	}
	if r.At, err = conditionFrom(record.At); err != nil {
		return r, err
	}
	if r.AssumedAt, err = conditionFrom(record.AssumedAt); err != nil {
		return r, err
	}
	r.MeterAt, err = conditionFrom(record.MeterAt)
	return r, err
}

func countTo(c Count) countRecord { return countRecord{N: c.N, Level: honestyWords[c.Level]} }

func countFrom(record countRecord) (Count, error) {
	level, err := named(honestyByWord, "level of a count", record.Level)
	return Count{N: record.N, Level: level}, err
}

func outcomeTo(o Outcome) outcomeRecord {
	return outcomeRecord{
		Kind: string(o.Kind), Verdict: o.Verdict.String(), Grade: gradeNames[o.Grade], As: o.As, AsClaim: claimTo(o.AsClaim), Title: o.Title,
		NotTested: o.NotTested, Why: o.Why, Next: o.Next, Tables: o.Tables, Assumed: o.Assumed, Judged: stampOf(o.Judged),
	}
}

func outcomeFrom(record outcomeRecord) (Outcome, error) {
	o := Outcome{
		Kind: screening.Kind(record.Kind), As: record.As, Title: record.Title, NotTested: record.NotTested, Why: record.Why,
		Next: record.Next, Tables: record.Tables, Assumed: record.Assumed, Judged: record.Judged.time(),
	}
	if record.Verdict != "" {
		verdict, ok := screening.VerdictNamed(record.Verdict)
		if !ok {
			return o, fmt.Errorf("%w: unknown verdict %q", errVersion, record.Verdict)
		}
		o.Verdict = verdict
	}
	var err error
	if o.Grade, err = named(gradesByName, "grade", record.Grade); err != nil {
		return o, err
	}
	o.AsClaim, err = claimFrom(record.AsClaim)
	return o, err
}

func encodePart(key []byte, p Part) ([]byte, error) {
	record := partRecord{
		Kind: string(p.Part.Kind), Claim: claimTo(p.Part.Claim), Treated: p.Part.Treated, Header: p.Header, Skipped: p.Skipped,
		GoOn: p.GoOn, Outcome: outcomeTo(p.Outcome), Place: p.Place, Note: p.Note, Count: countTo(p.Count), Taken: p.Taken,
		Changed: stampOf(p.Changed),
	}
	for _, o := range p.Part.Look {
		record.Look = append(record.Look, lookRecord(o))
	}
	for _, r := range p.Part.Readings {
		record.Readings = append(record.Readings, readingTo(r))
	}
	return encode(key, record)
}

func decodePart(key, value []byte) (Part, error) {
	var record partRecord
	id, ok := idOf(key)
	if !ok {
		return Part{}, damaged(errShort)
	}
	if err := decode(key, value, &record); err != nil {
		return Part{}, fmt.Errorf("part %s: %w", id, err)
	}
	p, err := partFrom(record)
	if err != nil {
		return Part{}, fmt.Errorf("part %s: %w", id, damaged(err))
	}
	p.ID = id
	return p, nil
}

func partFrom(record partRecord) (Part, error) {
	p := Part{
		Part:   screening.Part{Kind: screening.Kind(record.Kind), Treated: record.Treated},
		Header: record.Header, Skipped: record.Skipped, GoOn: record.GoOn, Place: record.Place, Note: record.Note, Taken: record.Taken,
		Changed: record.Changed.time(),
	}
	var err error
	if p.Part.Claim, err = claimFrom(record.Claim); err != nil {
		return p, err
	}
	for _, o := range record.Look {
		p.Part.Look = append(p.Part.Look, screening.Observation(o))
	}
	for _, r := range record.Readings {
		reading, err := readingFrom(r)
		if err != nil {
			return p, err
		}
		p.Part.Readings = append(p.Part.Readings, reading)
	}
	if p.Outcome, err = outcomeFrom(record.Outcome); err != nil {
		return p, err
	}
	p.Count, err = countFrom(record.Count)
	return p, err
}

func encodeLot(key []byte, l Lot) ([]byte, error) {
	return encode(key, lotRecord{
		Kind: string(l.Kind), Header: l.Header, Claim: claimTo(l.Claim), Mixed: l.Mixed, Source: l.Source, Place: l.Place,
		Storage: l.Storage, Note: l.Note, Made: stampOf(l.Made), Changed: stampOf(l.Changed), Count: countTo(l.Count),
	})
}

func decodeLot(key, value []byte) (Lot, error) {
	var record lotRecord
	if len(key) != 4 {
		return Lot{}, damaged(errShort)
	}
	id := ID{Lot: uint32(key[0])<<24 | uint32(key[1])<<16 | uint32(key[2])<<8 | uint32(key[3])}
	if err := decode(key, value, &record); err != nil {
		return Lot{}, fmt.Errorf("lot %s: %w", id, err)
	}
	l := Lot{
		ID: id.Lot, Kind: screening.Kind(record.Kind), Header: record.Header, Mixed: record.Mixed, Source: record.Source, Place: record.Place,
		Storage: record.Storage, Note: record.Note, Made: record.Made.time(), Changed: record.Changed.time(),
	}
	var err error
	if l.Claim, err = claimFrom(record.Claim); err != nil {
		return l, fmt.Errorf("lot %s: %w", id, damaged(err))
	}
	if l.Count, err = countFrom(record.Count); err != nil {
		return l, fmt.Errorf("lot %s: %w", id, damaged(err))
	}
	return l, nil
}
