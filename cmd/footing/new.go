package main

import (
	"bytes"
	_ "embed"
	"fmt"
	"path/filepath"
	"strings"
	"text/template"
	"time"

	"footing/importers"
	"footing/reports"

	"github.com/spf13/cobra"
)

//go:embed texts/new.yaml
var newPlanText string

var newPlan = template.Must(template.New("plan").Parse(newPlanText))

// starter is what a new plan holds for one outcome.
type starter struct {
	Name, Evidence, Date, Higher, Scale, Worthwhile, Outcome, Nuisance string
	rows                                                               []map[string]any
}

var starters = map[string]starter{
	"continuous": {Higher: "true", Scale: "standardized-mean-difference", Worthwhile: "0.30", Outcome: "continuous",
		Nuisance: "  # standard deviation: {pool: control sd}   # needed for a mean difference in natural units\n  # baseline correlation: {value: 0.50, low: 0.35, high: 0.65, source: \"..\"}\n",
		rows: []map[string]any{
			{"study": "Example one", "year": 2018, "treatment n": 40, "treatment mean": 24.1, "treatment sd": 6.2, "control n": 41, "control mean": 21.0, "control sd": 6.0, "risk of bias": "low"},
			{"study": "Example two", "year": 2020, "treatment n": 65, "treatment mean": 23.0, "treatment sd": 5.8, "control n": 63, "control mean": 21.6, "control sd": 6.1, "risk of bias": "some concerns"},
			{"study": "Example three", "year": 2022, "treatment n": 28, "treatment mean": 25.5, "treatment sd": 6.6, "control n": 30, "control mean": 20.9, "control sd": 6.4, "risk of bias": "low"},
			{"study": "Example four", "year": 2023, "treatment n": 52, "treatment mean": 23.4, "treatment sd": 6.1, "control n": 50, "control mean": 21.2, "control sd": 5.9, "risk of bias": "low"},
		}},
	"binary": {Higher: "false", Scale: "log-odds-ratio", Worthwhile: "0.75", Outcome: "binary",
		Nuisance: "  control risk: {pool: control risk}          # or a number with its source\n",
		rows: []map[string]any{
			{"study": "Example one", "year": 2018, "treatment events": 18, "treatment n": 120, "control events": 30, "control n": 118, "risk of bias": "low"},
			{"study": "Example two", "year": 2020, "treatment events": 41, "treatment n": 260, "control events": 58, "control n": 262, "risk of bias": "some concerns"},
			{"study": "Example three", "year": 2022, "treatment events": 12, "treatment n": 90, "control events": 22, "control n": 92, "risk of bias": "low"},
			{"study": "Example four", "year": 2023, "treatment events": 33, "treatment n": 180, "control events": 45, "control n": 179, "risk of bias": "low"},
		}},
}

func (a *app) newCommand() *cobra.Command {
	var outcome, date string
	var force bool
	c := &cobra.Command{
		Use:   "new [DIR]",
		Short: "Starts a plan: a commented plan file and an evidence sheet",
		Long: `Writes a plan file in which every key is explained, and an evidence sheet with marked example rows, into
DIR (the current folder). The plan runs as it stands; the example rows are named in every output until
they are replaced.`,
		Example: "  footing new myplan\n  footing new trial --outcome binary",
		Args:    exactArgs(0, 1, "at most one folder"),
		RunE: func(_ *cobra.Command, args []string) error {
			dir := "."
			if len(args) == 1 {
				dir = args[0]
			}
			return a.new(dir, outcome, date, force)
		},
	}
	c.Flags().StringVar(&outcome, "outcome", "continuous", "what is measured: continuous or binary")
	c.Flags().StringVar(&date, "date", "", "date that the plan carries, year-month-day (today)")
	c.Flags().BoolVar(&force, "force", false, "write over files that footing did not write or that were changed")
	return c
}

func (a *app) new(dir, outcome, date string, force bool) error {
	s, ok := starters[outcome]
	if !ok {
		mend := "use continuous or binary"
		if near := importers.Nearest(outcome, []string{"continuous", "binary"}); near != "" {
			mend = fmt.Sprintf("did you mean %q?", near)
		}
		return fmt.Errorf("footing new: there is no start for the outcome %q; %s", outcome, mend)
	}
	if date == "" {
		date = time.Now().Format("2006-01-02")
	} else if _, err := time.Parse("2006-01-02", date); err != nil {
		return fmt.Errorf("footing new: --date %s is no date; write year-month-day, such as 2026-11-03", date)
	}
	s.Name, s.Evidence, s.Date = "plan.yaml", "evidence.xlsx", date
	var text bytes.Buffer
	if err := newPlan.Execute(&text, s); err != nil {
		return &toolFault{err}
	}
	var book bytes.Buffer
	if err := importers.WriteWorkbook(&book, s.sheet()); err != nil {
		return &toolFault{err}
	}
	if err := writeAll(dir, "footing new", []output{{s.Name, text.Bytes()}, {s.Evidence, book.Bytes()}}, force); err != nil {
		return err
	}
	plan := filepath.Join(dir, s.Name)
	return a.print(fmt.Sprintf("Wrote %s and %s.\nThe rows in the sheet are examples: replace them.\nNext: footing plan %s\n",
		reports.TermText(plan), reports.TermText(filepath.Join(dir, s.Evidence)), reports.TermText(quoteShell(plan))))
}

// sheet is the evidence sheet with its example rows, each marked in its status.
func (s starter) sheet() importers.Table {
	t := importers.NewSheet(s.Outcome)
	t.Title = "Evidence (example rows)"
	for _, r := range s.rows {
		row := make([]any, len(t.Columns))
		for j, c := range t.Columns {
			row[j] = r[c.Heading]
			switch c.Heading {
			case "status":
				row[j] = "example"
			case "notes":
				row[j] = "example row, invented: replace it"
			}
		}
		t.Rows = append(t.Rows, row)
	}
	return t
}

// quoteShell writes a path so that a shell reads it as one word.
func quoteShell(s string) string {
	if s != "" && strings.Trim(s, "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789-_./\\:") == "" {
		return s
	}
	return "'" + strings.ReplaceAll(s, "'", `'\''`) + "'"
}
