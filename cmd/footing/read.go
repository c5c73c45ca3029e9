package main

import (
	"footing/plan"
	"footing/plan/result"
	"footing/reports"

	"github.com/spf13/cobra"
)

// evidenceFlags say how a bare sheet is to be read.
type evidenceFlags struct {
	sheet, scale string
	lower        bool
}

func (f *evidenceFlags) add(c *cobra.Command) {
	c.Flags().StringVar(&f.sheet, "sheet", "", "sheet to read (the first with a heading row)")
	c.Flags().StringVar(&f.scale, "scale", "", "effect scale, such as standardized-mean-difference or log-odds-ratio (found out)")
	c.Flags().BoolVar(&f.lower, "lower-is-better", false, "a smaller value is the better one")
}

// file turns the flags into the plan that a bare sheet is read by; a plan file is taken as it is.
func (f *evidenceFlags) file(path string) (*plan.File, error) {
	if !isSheet(path) && looksLikePlan(path) {
		return plan.Load(path)
	}
	file := &plan.File{}
	file.Evidence.File, file.Evidence.Sheet, file.Pool.Scale = path, f.sheet, f.scale
	if f.lower {
		no := false
		file.Evidence.HigherBetter = &no
	}
	return file, nil
}

func (a *app) readCommand() *cobra.Command {
	var f evidenceFlags
	var against string
	c := &cobra.Command{
		Use:   "read SHEET",
		Short: "Shows how each heading and row was understood, and all findings",
		Long: `Shows how each heading and each row of an evidence sheet was understood, the effect that each row
yields and by which route, and everything that is odd about the data, with its cell. Given a plan in
place of a sheet, the plan's own settings and decisions are used. With --against, a second extraction
of the same studies is compared cell by cell; exit code 1 where the two differ.`,
		Example: "  footing read evidence.xlsx\n  footing read plan.yaml --json\n  footing read evidence.xlsx --against evidence.xlsx",
		Args:    exactArgs(1, 1, "one spreadsheet or plan"),
		RunE: func(_ *cobra.Command, args []string) error {
			if against != "" {
				return a.against(args[0], against, f)
			}
			return a.read(args[0], f)
		},
	}
	c.Flags().StringVar(&against, "against", "", "a second extraction of the same studies")
	f.add(c)
	a.jsonFlag(c)
	a.strictFlag(c)
	return c
}

func (a *app) read(path string, f evidenceFlags) error {
	file, err := f.file(path)
	if err != nil {
		return err
	}
	ev, err := plan.ReadEvidence(file)
	if err != nil {
		return err
	}
	r := &result.Reading{Schema: "footing/read/1", Tool: plan.ThisTool(), Evidence: ev.Evidence, Scale: ev.Info, Studies: ev.Studies, Findings: ev.Findings}
	if a.json {
		err = a.printJSON(r)
	} else {
		err = a.print(reports.TextRead(r, a.text()))
	}
	if err != nil {
		return err
	}
	return a.openFindings(r.Findings)
}
