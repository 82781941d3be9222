package cli

import (
	"runtime"
	"runtime/debug"

	"github.com/spf13/cobra"
)

// Version is the program's version; a release sets it when it is linked.
var Version = ""

type jsonVersion struct {
	Schema  int               `json:"schema"`
	Version string            `json:"version"`
	Go      string            `json:"go"`
	Tables  map[string]string `json:"tables"` // by kind
}

func (a *app) versionCommand() *cobra.Command {
	cmd := &cobra.Command{
		Use:   "version",
		Short: "print the versions of the program and of its tables",
		Args:  noArguments,
		RunE: func(*cobra.Command, []string) error {
			version := Version
			if info, ok := debug.ReadBuildInfo(); ok && version == "" {
				version = info.Main.Version
			}
			if a.json {
				tables := map[string]string{}
				for _, b := range a.books {
					tables[string(b.Kind)] = b.Tables
				}
				return a.writeJSON(jsonVersion{schema, version, runtime.Version(), tables})
			}
			if err := a.env.line("goodbin %s (%s)", version, runtime.Version()); err != nil {
				return err
			}
			for _, b := range a.books {
				if err := a.env.line("%s: tables %s", b.Kind, b.Tables); err != nil {
					return err
				}
			}
			return nil
		},
	}
	cmd.Flags().BoolVar(&a.json, "json", false, "print JSON")
	return cmd
}
