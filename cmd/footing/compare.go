package main

import (
	"fmt"
	"os"
	"strconv"

	"footing/plan"
	"footing/reports"

	"github.com/spf13/cobra"
)

func (a *app) compareCommand() *cobra.Command {
	var oneLine, orders bool
	c := &cobra.Command{
		Use:   "compare PLAN [A [B]]",
		Short: "What changed between editions, and whether to revise",
		Long: `Compares the last edition of a plan with a run now, edition A with a run now, or editions A and B:
studies that came, went or changed, options, figures, and the plan's revision rules. Exit code 1 when a
rule is triggered. Given a folder it prints one line for each plan in it that has editions.`,
		Example: "  footing compare plan.yaml\n  footing compare plan.yaml 1 --line\n  footing compare .",
		Args:    exactArgs(1, 3, "a plan and up to two edition numbers"),
		RunE:    func(_ *cobra.Command, args []string) error { return a.compare(args, oneLine, orders) },
	}
	c.Flags().BoolVar(&oneLine, "line", false, "print one line")
	c.Flags().BoolVar(&orders, "orders", false, "show what moved the number in each order of its parts")
	a.jsonFlag(c)
	return c
}

func (a *app) compare(args []string, oneLine, orders bool) error {
	if info, err := os.Stat(args[0]); err == nil && info.IsDir() {
		if len(args) > 1 {
			return fmt.Errorf("footing compare: a folder is compared with the last editions of its plans; leave out %q", args[1])
		}
		return a.compareFolder(args[0])
	}
	var numbers [2]int
	for i, s := range args[1:] {
		n, err := strconv.Atoi(s)
		if err != nil || n < 1 {
			return fmt.Errorf("footing compare: %q is no edition; editions are numbered from 1", s)
		}
		numbers[i] = n
	}
	file, err := plan.Load(args[0])
	if err != nil {
		return err
	}
	cmp, err := plan.Compare(file, numbers[0], numbers[1], !oneLine)
	if err != nil {
		return err
	}
	switch {
	case a.json:
		err = a.printJSON(cmp)
	case oneLine:
		err = a.print(reports.TermText(cmp.Line) + "\n")
	default:
		err = a.print(reports.TextCompare(cmp, orders, a.text()))
	}
	if err == nil && cmp.Triggered {
		return answerNo
	}
	return err
}
