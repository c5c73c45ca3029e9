package main

import (
	"errors"
	"time"

	"footing/plan"
	"footing/plan/edition"
	"footing/reports"

	"github.com/spf13/cobra"
)

func (a *app) freezeCommand() *cobra.Command {
	var date, by, why string
	var again bool
	c := &cobra.Command{
		Use:   "freeze PLAN",
		Short: "Keeps this run as the next edition",
		Long: `Runs a plan and keeps the run, with its evidence, as the next edition in the folder "plan.editions"
beside it. An edition is never changed; put the folder under version control.`,
		Example: "  footing freeze plan.yaml --date 2026-11-03 --by AB --why \"first submission\"",
		Args:    exactArgs(1, 1, "one plan file"),
		RunE: func(_ *cobra.Command, args []string) error {
			return a.freeze(args[0], date, by, why, again)
		},
	}
	c.Flags().StringVar(&date, "date", "", "date of the edition, year-month-day (today)")
	c.Flags().StringVar(&by, "by", "", "who freezes it")
	c.Flags().StringVar(&why, "why", "", "why it is frozen now")
	c.Flags().BoolVar(&again, "again", false, "keep an edition although nothing has changed")
	a.jsonFlag(c)
	return c
}

func (a *app) freeze(path, date, by, why string, again bool) error {
	if date == "" {
		date = time.Now().Format("2006-01-02")
	} else if _, err := time.Parse("2006-01-02", date); err != nil {
		return errors.New("footing freeze: --date " + date + " is no date; write year-month-day, such as 2026-11-03")
	}
	file, err := plan.Load(path)
	if err != nil {
		return err
	}
	e, err := plan.Freeze(file, date, by, why, again)
	if errors.Is(err, edition.Unchanged) {
		return problem("edition-unchanged", path, "nothing has changed since the last edition", "use --again to keep another one all the same")
	}
	if err != nil {
		return err
	}
	if a.json {
		return a.printJSON(e.Ref())
	}
	return a.print(reports.TextFreeze(e, editionsOf(path).Dir, a.text()))
}
