package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"

	"footing/reports"
	"footing/reports/check"

	"github.com/spf13/cobra"
)

// mostReport is the size from which a file is no report.
const mostReport = 256 << 20

func (a *app) checkCommand() *cobra.Command {
	c := &cobra.Command{
		Use:   "check REPORT",
		Short: "Recomputes a report from the plan and evidence inside it, number by number",
		Long: `Takes the plan and the evidence out of a report, runs them again, and says number by number whether the
printed digits are reproduced. It is for a reviewer who has only the report. Exit code 1 if a digit is not reproduced.`,
		Example: "  footing check report.html\n  footing check report.html --json",
		Args:    exactArgs(1, 1, "one report"),
		RunE:    func(_ *cobra.Command, args []string) error { return a.check(args[0]) },
	}
	a.jsonFlag(c)
	return c
}

func (a *app) check(path string) error {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return fmt.Errorf("%s: there is no such file; name a report.html that footing plan wrote", path)
	case err == nil && info.IsDir():
		return fmt.Errorf("%s: this is a folder; name the report in it", path)
	case err == nil && info.Size() > mostReport:
		return fmt.Errorf("%s: far too large for a report; is this the right file?", path)
	}
	page, err := os.ReadFile(path)
	if err != nil {
		return fmt.Errorf("%s: the file can't be read; check its permissions", path)
	}
	c, err := check.Report(path, page)
	if err != nil {
		return err
	}
	if a.json {
		err = a.printJSON(c)
	} else {
		err = a.print(reports.TextCheck(c, a.text()))
	}
	if err == nil && len(c.Differs) > 0 {
		return answerNo
	}
	return err
}
