package cli

import (
	"context"
	"errors"

	"github.com/spf13/cobra"

	"goodbin/inventory"
)

const backupExamples = `  goodbin backup parts-2026-03-01.goodbin         a verified copy, also while the pages are open
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
		RunE: func(cmd *cobra.Command, args []string) error { return a.backup(cmd.Context(), args[0]) },
	}
}

// backup copies the workbook, also where the pages have it open, and says what the copy holds.
func (a *app) backup(ctx context.Context, to string) error {
	say := func(w *inventory.Workbook) error {
		counts, err := w.Counts()
		if err != nil {
			return err
		}
		return a.env.line("wrote %s: %s", to, countsText(counts.All(), 0, counts.Of))
	}
	err := a.withWorkbook(ctx, true, func(w *inventory.Workbook) error {
		if err := w.Backup(ctx, to); err != nil {
			return err
		}
		return say(w)
	})
	if !errors.Is(err, inventory.ErrBusy) {
		return err
	}
	path, err := a.workbookPath()
	if err != nil {
		return err
	}
	if err := inventory.BackupHeld(ctx, path, to); err != nil {
		return &failure{status: ExitWorkbook, err: err, hint: workbookHint(err)}
	}
	return a.withFile(to, inventory.Options{ReadOnly: true, Now: a.env.Now, Tables: a.tables()}, say)
}
