package cli

import (
	"github.com/spf13/cobra"

	"goodbin/screening"
	"goodbin/screening/entry"
)

const judgeExamples = `  goodbin judge electrolytic 2200uF 35V M capacitance=2010uF esr@120Hz=61m leakage@35V,2min=45uA temperature=24C
  goodbin judge bipolar type=2N3904 hfe@ic=10mA,vce=1V=180 vbe=0.68 iceo@20V=..0.1uA
  goodbin judge electrolytic 8+8/450 capacitance/1=8.2uF capacitance/2=7.9uF seen=nothing
  goodbin judge resistor 4k7 5% "resistance=4.68k, 4.69k, 4.68k"
  goodbin judge resistor 4k7 5% resistance=4.9k --meter "hand-held LCR" --budget

Words:
  NAME[/SECTION][@COND,...]=VALUE   a reading: x, ..x (at most), x.. (at least), OL, or repeats "x, y, z"
  rated:NAME[@COND]=VALUE           what the part claims, in numbers: x, L..H, L.., ..H
  TRAIT=TEXT                        what it claims in words: type=GT308, group=B, dated=1974
  seen=WORD,...                     what was found by eye: seen=cracked; seen=nothing: looked at, and sound
  treated=N                         how often it was treated already
  35V, M, npn, BC547B, 8+8/450      a bare word is offered to every claim of the kind; exactly one may take it`

func (a *app) judgeCommand() *cobra.Command {
	cmd := &cobra.Command{
		Use:               "judge KIND WORD...",
		Short:             "judge one part by what it claims and what was measured",
		Example:           judgeExamples,
		Args:              a.kindArgs,
		ValidArgsFunction: a.completeWords,
		RunE:              func(_ *cobra.Command, args []string) error { return a.judge(args[0], args[1:]) },
	}
	a.judgeFlags(cmd)
	cmd.Flags().BoolVar(&a.all, "all", false, "show every limit, also those of criteria that are answered")
	cmd.Flags().BoolVar(&a.budget, "budget", false, "show under every limit what makes its reading uncertain, the largest first, and the risk")
	return cmd
}

func (a *app) judgeFlags(cmd *cobra.Command) {
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON: SI units, null where open or absent")
	cmd.Flags().StringVar(&a.decision, "decision", "by-probability",
		"decision `RULE`: by-probability (95 % to pass, 95 % to fail), guard-band, guard-band-0.83 or simple")
	cmd.Flags().StringVar(&a.meter, "meter", "",
		"the meter in `WORDS`: a class from goodbin meters, such as \"hand-held LCR\", or what yours claims: \"capacitance@1kHz 2%+5; ohms 0.8%+2\"")
	_ = cmd.RegisterFlagCompletionFunc("meter", cobra.FixedCompletions(classNames(), cobra.ShellCompDirectiveNoFileComp))
	_ = cmd.RegisterFlagCompletionFunc("decision", cobra.FixedCompletions(decisionFlags(), cobra.ShellCompDirectiveNoFileComp))
}

func (a *app) judge(kind string, words []string) error {
	book, err := a.book(kind)
	if err != nil {
		return err
	}
	policy, err := a.policy()
	if err != nil {
		return err
	}
	parsed, err := entry.Words(book, words)
	if err != nil {
		return err
	}
	part := parsed.Part(book)
	j, err := screening.Judge(book, part, policy)
	if err != nil {
		return request(err, "")
	}
	for _, r := range part.Readings {
		if alarm, ok := screening.PowerOfTen(book, part, r); ok {
			a.env.note("goodbin: check the prefix of %s", alarmText(book, r, alarm))
		}
	}
	if a.json {
		err = a.writeJSON(judgeJSON(book, j, policy, a.budget))
	} else {
		err = a.printJudgement(book, j, parsed, policy)
	}
	if err != nil {
		return err
	}
	if !j.Verdict.Usable() {
		return silent(ExitNotAccepted)
	}
	return nil
}

// alarmText says what a reading would be if the prefix were another.
func alarmText(book *screening.Rulebook, r screening.Reading, alarm screening.Alarm) string {
	d := book.Definition(r.Of)
	return d.Label + ": " + entry.Value(r) + " lies far off what the part claims, " + formatValue(alarm.Suggested, r.Unit) +
		" would not; was the prefix or the decimal point meant otherwise?"
}
