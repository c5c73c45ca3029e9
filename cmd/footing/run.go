package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"

	"footing/importers"
	"footing/internal/finding"
	"footing/plan"
	"footing/reports"

	"github.com/spf13/cobra"
	"golang.org/x/term"
)

// The exit codes.
const (
	exitDone  = 0
	exitNo    = 1 // done, but the answer is no
	exitInput = 2 // the input can't be used
	exitFault = 3 // a fault of the tool
)

// app is what every command works with.
type app struct {
	in       io.Reader
	out, err io.Writer
	json     bool
	strict   bool
}

// answerNo ends a command that did its work with exit code 1; what there is to say stands in its text already.
var answerNo = errors.New("the answer is no")

// run is the whole program but for the process: it returns the exit code.
func run(args []string, in io.Reader, out, errOut io.Writer) (code int) {
	defer func() {
		if r := recover(); r != nil {
			fmt.Fprintf(errOut, "footing: a fault of the program, not of your input: %s; please report it with the files that led to it\n", firstLine(fmt.Sprint(r)))
			code = exitFault
		}
	}()
	a := &app{in: in, out: out, err: errOut}
	root := a.root()
	root.SetArgs(args)
	root.SetIn(in)
	root.SetOut(out)
	root.SetErr(errOut)
	return a.finish(root.Execute())
}

// finish prints an error, one line for each problem, and gives the exit code.
func (a *app) finish(err error) int {
	switch {
	case err == nil:
		return exitDone
	case errors.Is(err, answerNo):
		return exitNo
	case errors.Is(err, errSaid):
		return exitInput
	}
	var fault *toolFault
	if errors.As(err, &fault) {
		fmt.Fprintf(a.err, "footing: %s\n", firstLine(err.Error()))
		return exitFault
	}
	for _, line := range errorLines(err) {
		fmt.Fprintln(a.err, reports.TermText(line))
	}
	return exitInput
}

// errorLines gives every problem its own line.
func errorLines(err error) []string {
	var many finding.Problems
	var one *finding.Problem
	switch {
	case errors.As(err, &many):
		out := make([]string, len(many))
		for i, f := range many {
			out[i] = f.String()
		}
		return out
	case errors.As(err, &one):
		return []string{one.Finding.String()}
	}
	return []string{firstLine(err.Error())}
}

func firstLine(s string) string {
	s, _, _ = strings.Cut(strings.TrimSpace(s), "\n")
	return s
}

// toolFault is an error that no input should lead to.
type toolFault struct{ error }

func (a *app) root() *cobra.Command {
	root := &cobra.Command{
		Use:   "footing",
		Short: "Sizes a study from the studies that came before it",
		Long: `Footing reads a spreadsheet of earlier studies, pools them, says what the next study's effect may
plausibly be, sizes the new study across that range and writes a report that can be checked line by line.

Exit codes: 0 done; 1 done, but the answer is no (a revision rule triggered, a value not reproduced,
no size exists, or, with --strict, findings without a decision); 2 the input can't be used; 3 a fault
of the tool.`,
		Example:           "  footing demo",
		SilenceErrors:     true,
		SilenceUsage:      true,
		Version:           plan.Version,
		CompletionOptions: cobra.CompletionOptions{HiddenDefaultCmd: true},
		Args: func(c *cobra.Command, args []string) error {
			if len(args) == 0 {
				return nil
			}
			var names []string
			for _, sub := range c.Commands() {
				names = append(names, sub.Name())
			}
			mend := "footing --help lists them"
			if near := importers.Nearest(args[0], names); near != "" {
				mend = fmt.Sprintf("did you mean %q?", near)
			}
			return fmt.Errorf("footing: there is no command %q; %s", args[0], mend)
		},
		RunE: func(c *cobra.Command, args []string) error { return c.Help() },
	}
	root.SetVersionTemplate("footing {{.Version}}\n")
	root.SetFlagErrorFunc(func(c *cobra.Command, err error) error {
		return fmt.Errorf("%s: %s; %s --help lists what it takes", c.CommandPath(), firstLine(err.Error()), c.CommandPath())
	})
	root.Long = wrapped(root.Long)
	root.SetUsageTemplate(strings.ReplaceAll(root.UsageTemplate(), ".FlagUsages", ".FlagUsagesWrapped 80"))
	for _, g := range []struct {
		title    string
		commands []*cobra.Command
	}{
		{"To start:", []*cobra.Command{a.demoCommand(), a.newCommand()}},
		{"Looking at evidence and sizes:", []*cobra.Command{a.readCommand(), a.poolCommand(), a.sizeCommand()}},
		{"The plan:", []*cobra.Command{a.planCommand(), a.freezeCommand(), a.compareCommand(), a.addCommand()}},
		{"What it rests on:", []*cobra.Command{a.checkCommand(), a.methodsCommand(), a.qualifyCommand()}},
	} {
		root.AddGroup(&cobra.Group{ID: g.title, Title: g.title})
		for _, c := range g.commands {
			c.GroupID, c.Long = g.title, wrapped(c.Long)
			root.AddCommand(c)
		}
	}
	return root
}

// wrapped sets the paragraphs of a help text to the width of a terminal.
func wrapped(s string) string {
	var out []string
	for _, paragraph := range strings.Split(s, "\n\n") {
		line, lines := "", []string{}
		for _, word := range strings.Fields(paragraph) {
			if line != "" && len(line)+1+len(word) > 78 {
				lines, line = append(lines, line), ""
			}
			line = strings.TrimSpace(line + " " + word)
		}
		out = append(out, strings.Join(append(lines, line), "\n"))
	}
	return strings.Join(out, "\n\n")
}

// exactArgs asks for between low and high arguments and says which.
func exactArgs(low, high int, what string) cobra.PositionalArgs {
	return func(c *cobra.Command, args []string) error {
		if len(args) < low || len(args) > high {
			return fmt.Errorf("%s: %s expected, %d given; see %s --help", c.CommandPath(), what, len(args), c.CommandPath())
		}
		return nil
	}
}

func (a *app) jsonFlag(c *cobra.Command) {
	c.Flags().BoolVar(&a.json, "json", false, "print the result as JSON, in full precision")
}

func (a *app) strictFlag(c *cobra.Command) {
	c.Flags().BoolVar(&a.strict, "strict", false, "exit code 1 while errors or warnings have no decision")
}

// printJSON writes a document.
func (a *app) printJSON(v any) error {
	data, err := marshal(v)
	if err != nil {
		return err
	}
	_, err = a.out.Write(data)
	return err
}

func marshal(v any) ([]byte, error) {
	var b strings.Builder
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(v); err != nil {
		return nil, &toolFault{fmt.Errorf("the result can't be written as JSON: %w", err)}
	}
	return []byte(b.String()), nil
}

// text says how terminal texts are written to this output.
func (a *app) text() reports.TextOptions {
	f, ok := a.out.(*os.File)
	colour := ok && term.IsTerminal(int(f.Fd())) && os.Getenv("NO_COLOR") == "" && os.Getenv("TERM") != "dumb"
	return reports.TextOptions{Colour: colour}
}

func (a *app) print(s string) error {
	_, err := io.WriteString(a.out, s)
	return err
}
