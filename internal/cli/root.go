package cli

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"goodbin/inventory"
	"goodbin/rules"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// app is one run of the program: its environment, the rulebooks, and what the flags say.
type app struct {
	env   *Env
	books screening.Kinds
	types *types.Table    // the type numbers that the rulebooks look up
	house inventory.House // the workbook's own tables; zero where there are none

	workbook string
	demo     bool
	ascii    bool
	json     bool
	all      bool // judge and limits: leave nothing out
	decision string
	meter    string // a class of meters, or a description
	budget   bool   // judge: show what makes the readings uncertain
}

// Run runs the program with its arguments (without its name) and returns the exit status. It never panics on what it reads.
func Run(ctx context.Context, args []string, env Env) int {
	a := &app{env: &env, types: types.Builtin()}
	a.books = a.kinds(rules.House{})
	root := a.root()
	root.SetArgs(dashWords(args))
	root.SetIn(env.In)
	root.SetOut(env.Out)
	root.SetErr(env.Err)
	err := root.ExecuteContext(ctx)
	if err != nil && ctx.Err() != nil {
		err = context.Canceled
	}
	a.env.report(err)
	return statusOf(err)
}

// kinds is the table of all rulebooks, with house tables and whatever kinds the environment adds.
func (a *app) kinds(h rules.House) screening.Kinds { return append(rules.With(h), a.env.Kinds...) }

// dashWords lets a tolerance such as -10/+50% stand among the words: no flag begins with a digit, so its minus becomes the sign that the
// words read as minus too.
func dashWords(args []string) []string {
	out := make([]string, len(args))
	for i, arg := range args {
		if len(arg) > 1 && arg[0] == '-' && (arg[1] >= '0' && arg[1] <= '9' || arg[1] == '.') {
			arg = "\u2212" + arg[1:]
		}
		out[i] = arg
	}
	return out
}

const rootExamples = `  goodbin                                                  the pages: measure, decide, find again
  goodbin --demo                                           the same, on an invented box of parts
  goodbin judge electrolytic 2200uF 35V M capacitance=2010uF esr@120Hz=61m leakage@35V,2min=45uA
  goodbin judge bipolar type=2N3904 hfe@ic=10mA,vce=1V=180 vbe=0.68
  goodbin limits electrolytic 2200uF 35V M                 every limit, with formula and source
  goodbin marking 2A474J                                   what a marking means, every reading of it
  goodbin screen box.csv                                   judge a box of parts and keep them
  goodbin stock 35V                                        what can be used
  goodbin bench --lines                                    measure part by part, a line at a time`

func (a *app) root() *cobra.Command {
	root := &cobra.Command{
		Use:   "goodbin",
		Short: "goodbin decides, part by part, what from a stash of old parts may go back into a circuit",
		Long: `goodbin holds what you measured on a salvaged part against what its marking claims and the standards allow, allows for the
meter's own error, and says what to do with the part and why. Every judged part is kept in a workbook and can be found again.`,
		Example:       rootExamples,
		SilenceErrors: true,
		SilenceUsage:  true,
		Args:          a.noSuchCommand,
		PersistentPreRunE: func(cmd *cobra.Command, _ []string) error {
			a.env.settle(a.ascii)
			a.loadHouse(cmd.Name())
			return nil
		},
		RunE: func(cmd *cobra.Command, _ []string) error { return a.pages(cmd) },
	}
	f := root.PersistentFlags()
	f.StringVar(&a.workbook, "workbook", "", "the workbook's `FILE` (default: GOODBIN_WORKBOOK, or goodbin/workbook.goodbin in your data directory)")
	f.BoolVar(&a.ascii, "ascii", false, "spell every sign in ASCII")
	f.BoolVar(&a.demo, "demo", false, "use a throwaway workbook filled from an invented box of parts")
	root.SetUsageTemplate(usageTemplate)
	root.SetHelpCommand(&cobra.Command{Hidden: true, Use: "no-help"})
	root.SetFlagErrorFunc(func(cmd *cobra.Command, err error) error {
		return request(err, "see "+cmd.CommandPath()+" --help")
	})
	root.CompletionOptions.HiddenDefaultCmd = false
	root.AddCommand(
		a.judgeCommand(), a.limitsCommand(), a.markingCommand(), a.screenCommand(), a.stockCommand(), a.benchCommand(), a.exportCommand(),
		a.backupCommand(), a.verifyCommand(), a.verifyChildCommand(), a.versionCommand(), a.typesCommand(),
		a.familiesCommand(), a.samplingCommand(), a.lotCommand(), a.metersCommand(),
	)
	root.AddCommand(a.stockCommands()...)
	return root
}

// usageTemplate shows examples first.
const usageTemplate = `{{if .HasExample}}{{.Example}}

{{end}}Usage:{{if .Runnable}}
  {{.UseLine}}{{end}}{{if .HasAvailableSubCommands}}
  {{.CommandPath}} [command]

Commands:{{range .Commands}}{{if .IsAvailableCommand}}
  {{rpad .Name .NamePadding}} {{.Short}}{{end}}{{end}}{{end}}{{if .HasAvailableLocalFlags}}

Flags:
{{.LocalFlags.FlagUsages | trimTrailingWhitespaces}}{{end}}{{if .HasAvailableInheritedFlags}}

Flags of every command:
{{.InheritedFlags.FlagUsages | trimTrailingWhitespaces}}{{end}}{{if .HasAvailableSubCommands}}

Use "{{.CommandPath}} [command] --help" for more about a command.{{end}}

Exit status: 0 done and accepted or regraded; 1 done and some part is not, or nothing found; 2 the request or a row was wrong;
3 the workbook could not be read or written; 130 interrupted.
`

// noSuchCommand refuses what stands in a command's place.
func (a *app) noSuchCommand(cmd *cobra.Command, args []string) error {
	if len(args) == 0 {
		return nil
	}
	var names []string
	for _, c := range cmd.Commands() {
		if c.IsAvailableCommand() {
			names = append(names, c.Name())
		}
	}
	hint := "see goodbin --help"
	if near := entry.Nearest(args[0], names); near != nil {
		hint = "did you mean goodbin " + strings.Join(near, " or goodbin ") + "?"
	} else if _, ok := a.books.Find(screening.Kind(args[0])); ok {
		hint = "did you mean goodbin judge " + strings.Join(args, " ") + "?"
	}
	return request(fmt.Errorf("%q is no command", args[0]), hint)
}

// book finds the rulebook of a kind as typed.
func (a *app) book(kind string) (*screening.Rulebook, error) {
	if b, ok := a.books.Find(screening.Kind(strings.ToLower(kind))); ok {
		return b, nil
	}
	return nil, entry.UnknownKind(a.books, kind)
}

// policy returns the choices that the flags leave.
func (a *app) policy() (screening.Policy, error) {
	p := screening.DefaultPolicy()
	if a.meter != "" {
		m, err := a.meterOf(a.meter)
		if err != nil {
			return p, err
		}
		p.Meters[""] = m
	}
	if a.decision == "" {
		return p, nil
	}
	rule, ok := screening.DecisionRuleNamed(a.decision)
	if !ok {
		flags := decisionFlags()
		last := len(flags) - 1
		return p, request(fmt.Errorf("--decision %q is no decision rule", a.decision), "it is "+strings.Join(flags[:last], ", ")+" or "+flags[last])
	}
	p.Rule = rule
	return p, nil
}

// decisionFlags lists the decision rules as the command line spells them.
func decisionFlags() []string {
	var names []string
	for _, d := range screening.DecisionRules() {
		names = append(names, d.Flag())
	}
	return names
}

var errNoKind = errors.New("say what kind of part it is")

// kindArgs asks for a kind and takes any words after it.
func (a *app) kindArgs(_ *cobra.Command, args []string) error {
	if len(args) == 0 {
		return request(errNoKind, "the kinds are "+strings.Join(a.kindNames(), ", "))
	}
	return nil
}

func (a *app) kindNames() []string {
	names := make([]string, len(a.books))
	for i, b := range a.books {
		names[i] = string(b.Kind)
	}
	return names
}
