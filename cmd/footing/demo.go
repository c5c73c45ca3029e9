package main

import (
	"bytes"
	"fmt"
	"path/filepath"
	"strings"

	"footing/importers"
	"footing/plan/result"
	"footing/reports"

	"github.com/spf13/cobra"
)

// demonstration is one built-in plan.
type demonstration struct {
	name     string
	plan     []byte
	evidence func() importers.Table
}

func demonstrations() []demonstration {
	return []demonstration{{"continuous", continuousPlan, continuousEvidence}, {"binary", binaryPlan, binaryEvidence}}
}

// demoDone is what one demonstration gave; err stops the command.
type demoDone struct {
	dir    string
	result *result.Plan
	wrote  []string
	err    error
}

func (a *app) demoCommand() *cobra.Command {
	var force bool
	c := &cobra.Command{
		Use:   "demo [DIR]",
		Short: "Writes two demonstration plans with invented data and runs them",
		Long: `Writes two demonstration plans with invented data into DIR (./demo), each in a folder of its own, runs
them and prints their answers. Nothing else is needed.`,
		Example: "  footing demo\n  footing demo try",
		Args:    exactArgs(0, 1, "at most one folder"),
		RunE: func(_ *cobra.Command, args []string) error {
			dir := "demo"
			if len(args) == 1 {
				dir = args[0]
			}
			return a.demo(dir, force)
		},
	}
	c.Flags().BoolVar(&force, "force", false, "write over files that footing did not write or that were changed")
	a.jsonFlag(c)
	return c
}

func (a *app) demo(dir string, force bool) error {
	demos := demonstrations()
	done := make([]chan demoDone, len(demos))
	for i, d := range demos {
		done[i] = make(chan demoDone, 1)
		go func() { done[i] <- guarded(func() demoDone { return d.run(dir, force) }) }()
	}
	results := map[string]*result.Plan{}
	for i, d := range demos {
		r := <-done[i]
		if r.err != nil {
			return r.err
		}
		results[d.name] = r.result
		if !a.json {
			opt := a.text()
			opt.Wrote = r.wrote
			if i > 0 {
				a.print("\n")
			}
			if err := a.print(reports.TextPlan(r.result, opt)); err != nil {
				return err
			}
		}
	}
	if a.json {
		return a.printJSON(results)
	}
	return nil
}

// guarded turns a panic of a demonstration into a fault of the tool: it would end the process on another goroutine.
func guarded(f func() demoDone) (d demoDone) {
	defer func() {
		if r := recover(); r != nil {
			d = demoDone{err: &toolFault{fmt.Errorf("a fault of the program: %v", r)}}
		}
	}()
	return f()
}

// run writes a demonstration's inputs and runs it.
func (d demonstration) run(dir string, force bool) demoDone {
	out := demoDone{dir: filepath.Join(dir, d.name)}
	var book bytes.Buffer
	if out.err = importers.WriteWorkbook(&book, d.evidence()); out.err != nil {
		out.err = &toolFault{out.err}
		return out
	}
	inputs := []output{{"plan.yaml", d.plan}, {"evidence.xlsx", book.Bytes()}}
	if out.err = writeAll(out.dir, "footing demo", inputs, force); out.err != nil {
		return out
	}
	var files []output
	if out.result, files, out.err = runPlan(filepath.Join(out.dir, "plan.yaml"), extras{}); out.err != nil {
		return out
	}
	if out.err = writeAll(out.dir, "plan.yaml", files, force); out.err != nil {
		return out
	}
	for _, f := range append(files, inputs...) {
		out.wrote = append(out.wrote, filepath.Join(out.dir, f.name))
	}
	out.wrote = shorter(out.dir, out.wrote)
	return out
}

// shorter names the folder once: "demo/continuous: report.html, ...".
func shorter(dir string, files []string) []string {
	out := make([]string, len(files))
	for i, f := range files {
		out[i] = filepath.Base(f)
	}
	out[0] = strings.TrimSuffix(dir, string(filepath.Separator)) + string(filepath.Separator) + out[0]
	return out
}
