package main

import (
	"io"
	"os"
	"path/filepath"
	"strings"

	"footing/internal/finding"
	"footing/plan"
	"footing/reports"

	"github.com/spf13/cobra"
)

// poolFlags choose the pooling of a bare sheet.
type poolFlags struct {
	evidenceFlags
	heterogeneity, interval string
	level                   float64
}

func (a *app) poolCommand() *cobra.Command {
	var f poolFlags
	c := &cobra.Command{
		Use:   "pool SHEET",
		Short: "Pooled effects, heterogeneity, prediction, small-study checks",
		Long: `Pools the studies of an evidence sheet: common effect and random effects under every estimator of
the spread, prediction, small-study checks and a forest plot in text. Given a plan in place of a sheet,
the plan's own settings are used.`,
		Example: "  footing pool evidence.xlsx\n  footing pool evidence.xlsx --heterogeneity paule-mandel --json",
		Args:    exactArgs(1, 1, "one spreadsheet or plan"),
		RunE:    func(_ *cobra.Command, args []string) error { return a.pool(args[0], f) },
	}
	f.add(c)
	c.Flags().StringVar(&f.heterogeneity, "heterogeneity", "", "estimator of tau-squared (dersimonian-laird)")
	c.Flags().StringVar(&f.interval, "interval", "", "interval of the mean (hartung-knapp-floored)")
	c.Flags().Float64Var(&f.level, "level", 0, "level of the intervals (0.95)")
	a.jsonFlag(c)
	a.strictFlag(c)
	return c
}

func (a *app) pool(path string, f poolFlags) error {
	file, err := f.file(path)
	if err != nil {
		return err
	}
	if f.heterogeneity != "" {
		file.Pool.Heterogeneity = f.heterogeneity
	}
	if f.interval != "" {
		file.Pool.Interval = f.interval
	}
	if f.level != 0 {
		file.Pool.Level = &f.level
	}
	p, err := plan.Pooled(file)
	if err != nil {
		return err
	}
	if a.json {
		err = a.printJSON(p)
	} else {
		err = a.print(reports.TextPool(p, a.text()))
	}
	if err != nil {
		return err
	}
	return a.openFindings(p.Findings)
}

// openFindings is the exit code of what was read, under --strict.
func (a *app) openFindings(fs []finding.Finding) error {
	if a.strict {
		for _, f := range fs {
			if f.Severity != finding.Note && f.Decision == nil {
				return answerNo
			}
		}
	}
	return nil
}

// looksLikePlan tells a plan from a text file of data that has no telling name.
func looksLikePlan(path string) bool {
	switch strings.ToLower(filepath.Ext(path)) {
	case ".yaml", ".yml":
		return true
	}
	f, err := os.Open(path)
	if err != nil {
		return false
	}
	defer f.Close()
	data, err := io.ReadAll(io.LimitReader(f, 1<<20))
	return err == nil && strings.Contains(string(data), "evidence:")
}
