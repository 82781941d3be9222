package cli

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/meters"
)

const metersExamples = `  goodbin meters                                            typical meters, and what they claim
  goodbin judge resistor 4k7 5% resistance=4.9k --meter "hand-held LCR"
  goodbin judge resistor 4k7 5% resistance=4.9k --meter "ohms 0..400 0.8%+3; ohms 400.. 0.8%+2"   yours, from its manual`

// describedMeter names a meter that stands on the command line in its own words.
const describedMeter = "meter as described"

func (a *app) metersCommand() *cobra.Command {
	cmd := &cobra.Command{
		Use:     "meters",
		Short:   "list typical meters and their accuracies, for --meter of judge and screen",
		Example: metersExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) > 0 {
				return request(fmt.Errorf("%q: meters takes no words", args[0]), "goodbin judge … --meter "+strings.Join(args, " "))
			}
			return nil
		},
		RunE: func(*cobra.Command, []string) error {
			if a.json {
				return a.writeJSON(metersJSON())
			}
			return a.printMeters()
		},
	}
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON: SI units, null where open or absent")
	return cmd
}

// printMeters lists the classes, each entry as it can be typed, with its source.
func (a *app) printMeters() error {
	last := ""
	for _, m := range meters.ClassEntries() {
		if m.Meter != last {
			if err := a.env.strong(m.Meter); err != nil {
				return err
			}
			last = m.Meter
		}
		if err := a.env.wrapped("  ", m.Words+"; "+m.Source+" ("+m.Status+")"); err != nil {
			return err
		}
	}
	return a.env.wrapped("", "Accuracy is ±(part of the reading + counts of the last digit + a fixed part). What your meter's manual claims is better than any of "+
		"these: give it in the same words, entries with ; between them.")
}

func classNames() []string {
	var names []string
	for _, m := range meters.Classes() {
		names = append(names, m.Name)
	}
	return names
}

// meterOf reads a meter as the command line names it: a class, or a description.
func (a *app) meterOf(words string) (screening.Meter, error) {
	if m, ok := meters.ClassNamed(words); ok {
		return m, nil
	}
	classes := "the classes are " + strings.Join(classNames(), ", ") + "; or say what yours claims, such as capacitance@1kHz 0..20uF 2%+5"
	if !strings.ContainsAny(words, "0123456789%;=±") {
		return screening.Meter{}, request(fmt.Errorf("--meter %q is no class of meters", words), classes)
	}
	m, err := meters.Parse(meters.Of(a.books), describedMeter, words)
	var wrong *meters.Error
	switch {
	case errors.As(err, &wrong):
		return m, request(fmt.Errorf("--meter: %w", err), classes)
	case err != nil:
		return m, request(err, classes)
	}
	return m, nil
}

// uncovered lists the readings, as they were taken, for which a named meter's own claim does not count.
func uncovered(m *screening.Meter, j *screening.Judgement) []*screening.Reading {
	if m.Name == "" {
		return nil
	}
	var out []*screening.Reading
	for i := range j.Part.Readings {
		r := &j.Part.Readings[i]
		if r.Typed != "" && r.Rule == "" && r.From == nil && !r.Over && !m.Covers(*r) {
			out = append(out, r)
		}
	}
	return out
}

// meterText names the meter that a verdict rests on: "assumed meter", "hand-held LCR meter, typical figures from memory". It is empty where no
// reading counts, and for the assumed meter where none of its figures does.
func meterText(m *screening.Meter, j *screening.Judgement) string {
	if m.Name == "" {
		if j.Assumed {
			return "assumed meter"
		}
		return ""
	}
	if !slices.ContainsFunc(j.Findings, func(f screening.Finding) bool { return f.Evidence() != nil && f.Outcome != screening.Missing }) {
		return ""
	}
	text := m.Name
	if m.Assumed {
		text += ", typical figures from memory"
	}
	var names []string
	for _, r := range uncovered(m, j) {
		if r.Of != screening.Temperature.Name && !slices.Contains(names, string(r.Of)) {
			names = append(names, string(r.Of))
		}
	}
	if len(names) > 0 {
		text += "; assumed meter for " + strings.Join(names, ", ")
	}
	return text
}

// printMeter prints what a named meter does not cover, and the decision rule where it is not the default or the budget is asked for.
func (a *app) printMeter(book *screening.Rulebook, j *screening.Judgement, policy *screening.Policy) error {
	m := policy.Meters[""]
	var values []string
	for _, r := range uncovered(&m, j) {
		values = append(values, book.Definition(r.Of).Label+" "+entry.Value(*r))
	}
	if len(values) > 0 {
		text := "the ranges of the " + m.Name + " do not cover " + strings.Join(values, ", ") +
			"; taken there to be no better than the assumed meter"
		if err := a.env.wrapped("meter       ", text); err != nil {
			return err
		}
	}
	if policy.Rule == screening.ByProbability && !a.budget {
		return nil
	}
	return a.env.wrapped("rule        ", policy.Rule.Words())
}
