package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"footing/plan"
	"footing/plan/edition"
	"footing/plan/result"
	"footing/reports"

	"github.com/spf13/cobra"
)

// planFlags are the flags of footing plan.
type planFlags struct {
	out    string // folder to write to; "" is the plan's own
	sheet  string // of a spreadsheet given in place of a plan
	force  bool
	noFile bool
	extras
}

// extras are files that are made only when they are asked for, since drawing them takes longer than all the rest.
type extras struct {
	document bool // protocol.docx
	figures  bool // each figure as .svg and .png
}

func (a *app) planCommand() *cobra.Command {
	var f planFlags
	c := &cobra.Command{
		Use:   "plan PLAN",
		Short: "Goes the whole way: report, workbook, JSON, protocol wording",
		Long: `Runs a plan and writes report.html, workbook.xlsx, result.json and protocol.txt beside it; with --document also protocol.docx, with
--figures each figure as .svg and .png in a folder figures. Given a spreadsheet in place of a plan it first writes a plan beside it, every guess marked as assumed, and
runs that.

A rerun writes over only what footing wrote itself and nobody has changed since.`,
		Example: "  footing plan plan.yaml\n  footing plan evidence.xlsx --out drafted\n  footing plan plan.yaml --json --no-files\n  footing plan plan.yaml --document --figures",
		Args:    exactArgs(1, 1, "one plan file or spreadsheet"),
		RunE:    func(_ *cobra.Command, args []string) error { return a.plan(args[0], f) },
	}
	c.Flags().StringVar(&f.out, "out", "", "folder for the files (the plan's own)")
	c.Flags().StringVar(&f.sheet, "sheet", "", "sheet to read, when a spreadsheet is given in place of a plan")
	c.Flags().BoolVar(&f.force, "force", false, "write over files that footing did not write or that were changed")
	c.Flags().BoolVar(&f.document, "document", false, "write protocol.docx too: wording, tables and figures for a word processor")
	c.Flags().BoolVar(&f.figures, "figures", false, "write each figure as .svg and .png too")
	c.Flags().BoolVar(&f.noFile, "no-files", false, "write no files, only print")
	a.jsonFlag(c)
	a.strictFlag(c)
	return c
}

// isSheet tells a spreadsheet from a plan by its name.
func isSheet(path string) bool {
	switch strings.ToLower(filepath.Ext(path)) {
	case ".xlsx", ".xlsm", ".xls", ".ods", ".csv", ".tsv", ".tab", ".txt":
		return true
	}
	return false
}

func (a *app) plan(path string, f planFlags) error {
	var drafted []string
	if isSheet(path) {
		draft, err := a.draft(path, f)
		if err != nil {
			return err
		}
		path, drafted = draft, []string{filepath.Base(draft)}
	}
	p, files, err := runPlan(path, f.extras)
	if err != nil {
		return err
	}
	opt := a.text()
	if !f.noFile {
		dir := f.out
		if dir == "" {
			dir = filepath.Dir(path)
		}
		if err := writeAll(dir, filepath.Base(path), files, f.force); err != nil {
			return err
		}
		opt.Wrote = append(drafted, shownNames(dir, f.out, files)...)
	}
	if a.json {
		err = a.printJSON(p)
	} else {
		err = a.print(reports.TextPlan(p, opt))
	}
	if err != nil {
		return err
	}
	return a.verdict(p)
}

// verdict is the exit code of a plan.
func (a *app) verdict(p *result.Plan) error {
	outOfReach := p.Size.Assurance != nil && p.Size.Assurance.OutOfReach != ""
	if p.AnswerNo != "" || a.strict && (p.Undecided > 0 || outOfReach) {
		return answerNo
	}
	return nil
}

// draft writes the plan that goes with a bare spreadsheet, unless a person has changed it.
func (a *app) draft(sheet string, f planFlags) (string, error) {
	path, text, err := plan.DraftFor(sheet, f.sheet)
	if err != nil {
		return "", err
	}
	return path, writeAll(filepath.Dir(path), "the draft for "+filepath.Base(sheet), []output{{filepath.Base(path), text}}, f.force)
}

func shownNames(dir, out string, files []output) []string {
	names := make([]string, len(files))
	for i, f := range files {
		names[i] = f.name
		if out != "" {
			names[i] = filepath.Join(dir, f.name)
		}
	}
	return names
}

// runPlan runs a plan file and makes its files.
func runPlan(path string, more extras) (*result.Plan, []output, error) {
	go reports.Prepare() // while the numbers are computed
	file, err := plan.Load(path)
	if err != nil {
		return nil, nil, err
	}
	p, err := plan.RunSince(file)
	if err != nil {
		return nil, nil, err
	}
	files, err := render(file, p, more)
	return p, files, err
}

// render makes the files of a result; the report carries the plan, the evidence and the editions that it came from.
func render(file *plan.File, p *result.Plan, more extras) ([]output, error) {
	var enclosed []reports.HTMLOption
	if data, err := os.ReadFile(file.Path); err == nil {
		enclosed = append(enclosed, reports.Enclose(filepath.Base(file.Path), data))
	}
	if name := file.EvidencePath(); name != "" {
		if data, err := os.ReadFile(name); err == nil {
			enclosed = append(enclosed, reports.Enclose(file.Evidence.File, data))
		}
	}
	pack, err := editionsOf(file.Path).Pack()
	if err != nil {
		return nil, err
	}
	if pack != nil {
		name := filepath.Base(file.Path)
		enclosed = append(enclosed, reports.Enclose(strings.TrimSuffix(name, filepath.Ext(name))+edition.PackEnding, pack))
	}
	book, document := make(chan made, 1), make(chan made, 1)
	go func() { book <- making(func() ([]byte, error) { return reports.Workbook(p) }) }()
	go func() { document <- making(func() ([]byte, error) { return marshal(p) }) }()
	html := making(func() ([]byte, error) { return reports.HTML(p, enclosed...) })
	workbook, doc := <-book, <-document
	if err := errors.Join(html.err, workbook.err, doc.err); err != nil {
		return nil, &toolFault{err}
	}
	files := []output{{"report.html", html.data}, {"workbook.xlsx", workbook.data}, {"result.json", doc.data}, {"protocol.txt", []byte(reports.Protocol(p))}}
	return more.add(files, p)
}

// add makes the files that were asked for besides.
func (more extras) add(files []output, p *result.Plan) ([]output, error) {
	if more.document {
		d := making(func() ([]byte, error) { return reports.Document(p) })
		if d.err != nil {
			return nil, &toolFault{d.err}
		}
		files = append(files, output{"protocol.docx", d.data})
	}
	if !more.figures {
		return files, nil
	}
	for _, f := range reports.Figures(p) {
		drawn, picture := making(f.SVG), making(func() ([]byte, error) { return f.PNG(2) })
		if err := errors.Join(drawn.err, picture.err); err != nil {
			return nil, &toolFault{err}
		}
		name := filepath.Join("figures", f.Name)
		files = append(files, output{name + ".svg", drawn.data}, output{name + ".png", picture.data})
	}
	return files, nil
}

// made is a file made beside others.
type made struct {
	data []byte
	err  error
}

// making turns a panic into an error: on another goroutine it would end the process.
func making(f func() ([]byte, error)) (m made) {
	defer func() {
		if r := recover(); r != nil {
			m = made{err: fmt.Errorf("a fault of the program: %s", firstLine(fmt.Sprint(r)))}
		}
	}()
	data, err := f()
	return made{data, err}
}

// editionsOf opens the store of a plan file.
func editionsOf(path string) edition.Store { return edition.Beside(path) }
