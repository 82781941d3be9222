package cli

import (
	"errors"

	"github.com/spf13/cobra"

	"goodbin/inventory"
)

const backupExamples = `  goodbin backup parts-2026-03-01.goodbin         a verified copy, while the workbook stays as it is
  goodbin stock --workbook parts-2026-03-01.goodbin`

func (a *app) backupCommand() *cobra.Command {
	return &cobra.Command{
		Use:     "backup FILE",
		Short:   "write a verified copy of the workbook",
		Example: backupExamples,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) != 1 || args[0] == "" {
				return request(errors.New("name the file of the copy"), "goodbin backup parts.goodbin")
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			return a.withWorkbook(cmd.Context(), true, func(w *inventory.Workbook) error {
				if err := w.Backup(cmd.Context(), args[0]); err != nil {
					return err
				}
				counts, err := w.Counts()
				if err != nil {
					return err
				}
				return a.env.line("wrote %s: %s", args[0], countsText(counts.All(), 0, counts.Of))
			})
		},
	}
}
