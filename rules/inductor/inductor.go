// Package inductor is the rulebook of inductors and chokes.
//
// An inductor is told by its inductance, and by its Q whether all of its turns take part. A shorted turn takes inductance and Q away
// together; a winding that is open takes both. Q means something only at its frequency, and best beside a sound twin: measure the twin and
// claim what it has (rated:q@10kHz=38). What a current does to it, saturation or heat, a pocket meter does not show.
package inductor

import (
	"fmt"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/winding"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "inductor"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The characteristics of an inductor.
var (
	// Inductance is in henry.
	Inductance = screening.Definition{Name: "inductance", Symbol: "L", Label: "inductance", Unit: quantity.Henry}
	// Q is reactance over resistance at one frequency: Q = 2πfL/R.
	Q = screening.Definition{Name: "q", Symbol: "Q", Label: "quality factor", Unit: quantity.One}
	// Biased is the inductance that is left while a direct current flows. It has a name of its own so that it never counts as the part's value.
	Biased = screening.Definition{Name: "biased-inductance", Symbol: "L(I)", Label: "inductance under direct current", Unit: quantity.Henry}
	// ISat is a rating: the direct current at which inductance has fallen by a stated share.
	ISat = screening.Definition{Name: "i-sat", Symbol: "Isat", Label: "saturation current", Unit: quantity.Ampere}
	// IHeat is a rating: the current that warms it by a stated rise, 40 K where none is (Murata: published).
	IHeat = screening.Definition{Name: "i-heat", Symbol: "Itemp", Label: "heating current", Unit: quantity.Ampere}
)

// TraitSatDrop is the share of inductance lost at the saturation current, in percent.
const TraitSatDrop = "sat-drop"

// The criteria.
const (
	windingCriterion    screening.Criterion = "winding"
	valueCriterion      screening.Criterion = "inductance"
	turnsCriterion      screening.Criterion = "turns"
	saturationCriterion screening.Criterion = "saturation"
)

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "inductor", Tables: book.Version(Kind, edition, technologiesCSV, figuresCSV, winding.CSV),
		Claims: claims(), Bench: bench(), Look: look(),
		Complete: complete, Limits: limits, Derive: derive, Adjust: adjust, Lesser: lesser, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{
			Definition: Inductance, Required: true, Example: "10mH",
			Help: "as printed or by its colours; of an unmarked one what a sound twin measures",
		},
		{
			Definition: screening.Tolerance, Example: "10%", Help: "letters G J K M; leave it out where none is printed",
			AcceptRange: book.ToleranceLetter, Ambiguous: book.ToleranceMeanings,
		},
		{
			Definition: Q, Example: "rated:q@10kHz=38",
			Help: "what a sound twin has at the same frequency on the same meter, or the least its sheet allows: rated:q@10kHz=30..",
		},
		{Definition: screening.DCR, Example: "rated:dcr=12", Help: "the winding resistance it claims, or a twin's; ..12 for a sheet's maximum"},
		{Definition: ISat, Example: "rated:i-sat=1.2A", Help: "the saturation current of its sheet; it says nothing without sat-drop"},
		{
			Definition: book.Trait(TraitSatDrop, "fall of inductance at the saturation current"), Trait: true, Example: "sat-drop=30%",
			Help: "the share at which the sheet states the saturation current: makers use 10, 20, 30 or 40 %",
		},
		{Definition: IHeat, Example: "rated:i-heat=1A", Help: "the current that warms it by 40 K, or by what its sheet says; not tested"},
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: "ferrite", Words: technologyWords(),
			Help: "air, ferrite, iron-powder, laminated (a filter choke); unknown where you cannot tell",
		},
		book.DatedField(),
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.DCR, Example: "dcr=11.8", Effort: 5 * time.Second, FollowsNominal: true, Band: screening.Span{Low: 0, High: 1e9},
			Help: "ohms range, probes shorted first; OL is an open winding",
		},
		{
			Definition: Inductance, Example: "inductance@10kHz=9.7mH", Effort: 10 * time.Second, FollowsNominal: true,
			Fit: screening.Fit{screening.Frequency: screening.Any}, Band: screening.Span{Low: 0, High: 1e5},
			Help: "out of circuit, away from metal; say at which frequency where the meter does",
		},
		{
			Definition: Q, Example: "q@10kHz=36", Effort: 15 * time.Second, Fit: sameFrequency, Band: screening.Span{Low: 0, High: 1e5},
			Help: "at the frequency of use, or at the twin's; it needs its frequency",
		},
		{
			Definition: screening.ESR, Example: "esr@10kHz=17", Effort: 15 * time.Second, Fit: sameFrequency, Band: screening.Span{Low: 0, High: 1e9},
			Help: "where the meter shows a series resistance instead of Q: Q is computed from it",
		},
		{
			Definition: Biased, Example: "biased-inductance@1.2A=7.5mH", Effort: 5 * time.Minute, Band: screening.Span{Low: 0, High: 1e5},
			Fit:  screening.Fit{screening.Current: {Low: 0.98, High: 10}},
			Help: "with the stated direct current through it, where the bench has a bias supply",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the room: copper changes by 0.39 % per kelvin", Example: "22C"},
	}
}

// sameFrequency: Q follows frequency, by its definition.
var sameFrequency = screening.Fit{screening.Frequency: {Low: 0.9, High: 1.1}}

func look() []screening.Check {
	repairers := screening.Source{Document: "repairers' rule", Status: screening.CommonPractice}
	return book.Look(
		screening.Check{
			Name: "burnt", Words: []string{"burnt", "charred", "smells"}, Question: "Is the winding burnt, dark or does it smell burnt?",
			Help:    "lacquer that has gone dark in one place, melted bobbin, charred paper",
			Verdict: screening.Reject, Reason: "its insulation has been overheated: turns touch, or will",
			Do: "SCRAP it, and find out what overloaded it before you fit another", Source: repairers,
		},
		screening.Check{
			Name: "core-broken", Words: []string{"core-broken", "chipped", "core-loose"}, Question: "Is the core chipped, split, loose or missing?",
			Help:    "a split in the ferrite can be hair-fine; a slug that was turned no longer has the printed value",
			Verdict: screening.Reject, Reason: "a broken core has another inductance, saturates sooner and goes on moving",
			Do: "SCRAP it, or keep it as wire and bobbin", Source: repairers,
		},
		screening.Check{
			Name: "green", Words: []string{"green", "damp"}, Question: "Is there green or white corrosion on wire or tags?",
			Help: "fine wire corrodes open where flux or damp stayed on it", Reason: "corroded fine wire opens sooner or later: measure it again before it is used",
			Source: repairers,
		},
	)
}

// complete adds the default tolerance, and refuses a claim that cannot be.
func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	tech, known := technologyNamed(c.Trait(screening.TraitTechnology))
	if !known {
		return c, nil, fmt.Errorf("technology: %q is not known; one of %s", c.Trait(screening.TraitTechnology), technologyNames())
	}
	l, ok := c.Nominal(Inductance.Name, "")
	if ok && l <= 0 {
		return c, nil, fmt.Errorf("inductance: %s is no inductance", quantity.Format(l, quantity.Henry, 0))
	}
	var notes []screening.Reason
	tolerance, claimed := c.Rating(screening.Tolerance.Name, "")
	switch {
	case !claimed && !ok:
	case !claimed:
		tolerance = screening.RangeRating(screening.Tolerance, tech.low, tech.high)
		tolerance.Source = tech.source
		c = c.WithRating(tolerance)
		notes = append(notes, book.Note(screening.Tolerance.Name, "no tolerance claimed: taken as %s, %s", tolerance, tolerance.Source))
	case tolerance.Low <= -1 || tolerance.High >= 10 || tolerance.Low > 0 || tolerance.High < 0:
		return c, nil, fmt.Errorf("tolerance: %s is no tolerance of an inductor; it is a band such as ±10 %%", tolerance)
	}
	if text := c.Trait(TraitSatDrop); text != "" {
		if _, ok := satDrop(c); !ok {
			return c, nil, fmt.Errorf("sat-drop: %q is no share of inductance; makers state 10%% to 40%%", text)
		}
	}
	if _, ok := c.Rating(ISat.Name, ""); ok && c.Trait(TraitSatDrop) == "" {
		notes = append(notes, book.Note(ISat.Name, "the saturation current is not used: it does not say at which fall of inductance "+
			"(makers use 10 to 40 %%); add it as sat-drop=30%%"))
	}
	if r, ok := c.Rating(Q.Name, ""); ok && !r.At.Has(screening.Frequency) {
		notes = append(notes, book.Note(Q.Name, "rated:q=%s is not used: it does not say at which frequency it holds", r))
	}
	return c, notes, nil
}

// satDrop returns the share of inductance that is lost at the saturation current, as a ratio.
func satDrop(c screening.Claim) (float64, bool) {
	v, err := quantity.Parse(c.Trait(TraitSatDrop), quantity.Ratio)
	return v.Number, err == nil && v.Sense == quantity.Exactly && !v.Over && v.Number > 0 && v.Number < 1
}
