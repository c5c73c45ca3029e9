package main

import (
	"footing/plan/qualify"
	"footing/reports"

	"github.com/spf13/cobra"
)

func (a *app) qualifyCommand() *cobra.Command {
	var all bool
	c := &cobra.Command{
		Use:   "qualify",
		Short: "Recomputes published values on this machine, value beside value",
		Long: `Recomputes published values through the same code that a plan runs through and prints each beside its
printed digits (installation qualification, for regulated work). Without --all the values of one table
share a line. Exit code 1 if a value is not reproduced.`,
		Example: "  footing qualify\n  footing qualify --all",
		Args:    exactArgs(0, 0, "no argument"),
		RunE: func(*cobra.Command, []string) error {
			r := qualify.Run()
			if a.json {
				if err := a.printJSON(&r); err != nil {
					return err
				}
			} else if err := a.print(reports.TextQualify(r, all, a.text())); err != nil {
				return err
			}
			if r.Reproduced < r.Total {
				return answerNo
			}
			return nil
		},
	}
	c.Flags().BoolVar(&all, "all", false, "print every value on a line of its own, with its source")
	a.jsonFlag(c)
	return c
}
