package main

import (
	"bufio"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"footing/importers"
	"footing/plan"
	"footing/plan/edition"
	"footing/plan/result"
	"footing/reports"

	"github.com/spf13/cobra"
)

func (a *app) addCommand() *cobra.Command {
	var from, sheet string
	var yes bool
	c := &cobra.Command{
		Use:   "add PLAN --from NEW",
		Short: "Appends new studies to the evidence sheet, shown first",
		Long: `Reads new studies from a spreadsheet of their own, shows how each is understood and the effect that it
yields, asks, and appends them to the plan's evidence sheet. The sheet keeps its formatting; a copy of it
as it was stays beside it. A study that is there already is refused. --yes does not ask.`,
		Example: "  footing add plan.yaml --from new.csv --yes",
		Args:    exactArgs(1, 1, "one plan file"),
		RunE:    func(_ *cobra.Command, args []string) error { return a.add(args[0], from, sheet, yes) },
	}
	c.Flags().StringVar(&from, "from", "", "spreadsheet with the new studies")
	c.Flags().StringVar(&sheet, "sheet", "", "its sheet (the first with a heading row)")
	c.Flags().BoolVar(&yes, "yes", false, "append without asking")
	a.jsonFlag(c)
	return c
}

func (a *app) add(path, from, sheet string, yes bool) error {
	if from == "" {
		return fmt.Errorf("footing add: no new studies are named; add --from with their spreadsheet")
	}
	file, err := plan.Load(path)
	if err != nil {
		return err
	}
	got, err := plan.ReadAdded(file, from, sheet)
	if err != nil {
		return err
	}
	doc := &result.Reading{Schema: "footing/read/1", Tool: plan.ThisTool(), Evidence: got.New.Evidence, Scale: got.New.Info, Studies: got.New.Studies, Findings: got.New.Findings}
	if a.json {
		err = a.printJSON(doc)
	} else {
		err = a.print(reports.TextRead(doc, a.text()))
	}
	if err != nil {
		return err
	}
	target := file.EvidencePath()
	data, err := importers.Append(target, got.Options, got.Old, got.New.Sheet)
	if err != nil {
		return err
	}
	if !yes && !a.asked(fmt.Sprintf("Append %d to %s? [y/N] ", len(got.New.Studies), target)) {
		return a.say("Nothing was appended.")
	}
	backup, err := backUp(target)
	if err != nil {
		return err
	}
	if err := edition.WriteFile(target, data); err != nil {
		return problem("file-unwritable", target, "the file can't be written", "close it in other programs and check its permissions")
	}
	return a.say(fmt.Sprintf("Appended %d to %s; as it was: %s.", len(got.New.Studies), target, backup))
}

// say prints a sentence where it does not stand in the way of JSON.
func (a *app) say(s string) error {
	if a.json {
		_, err := fmt.Fprintln(a.err, reports.TermText(s))
		return err
	}
	return a.print("  " + reports.TermText(s) + "\n")
}

// asked asks a question on stderr and reads the answer.
func (a *app) asked(question string) bool {
	fmt.Fprint(a.err, reports.TermText(question))
	line, _ := bufio.NewReader(a.in).ReadString('\n')
	fmt.Fprintln(a.err)
	switch strings.ToLower(strings.TrimSpace(line)) {
	case "y", "yes":
		return true
	}
	return false
}

// backUp copies a file beside itself under a name that is free.
func backUp(path string) (string, error) {
	data, err := os.ReadFile(path)
	if err != nil {
		return "", problem("file-unreadable", path, "the file can't be read", "check its permissions")
	}
	ext := filepath.Ext(path)
	for n := 1; ; n++ {
		name := fmt.Sprintf("%s.before-%d%s", strings.TrimSuffix(path, ext), n, ext)
		if _, err := os.Lstat(name); err == nil {
			continue
		}
		if err := edition.WriteFile(name, data); err != nil {
			return "", problem("file-unwritable", name, "the copy can't be written", "check the folder's permissions")
		}
		return name, nil
	}
}
