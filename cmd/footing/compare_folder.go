package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"sync"

	"footing/plan"
	"footing/plan/edition"
	"footing/plan/result"
	"footing/reports"
)

// folderLine is what one plan of a folder gave.
type folderLine struct {
	Plan       string             `json:"plan"`
	Comparison *result.Comparison `json:"comparison"` // null where the plan can't be compared
	Problems   []string           `json:"problems"`
}

// folderDocument is the document of `footing compare DIR --json`.
type folderDocument struct {
	Schema string       `json:"schema"` // "footing/compare-folder/1"
	Plans  []folderLine `json:"plans"`
}

// compareFolder compares every plan of a folder that has editions with its last one, several at a time, and prints one
// line for each. A plan that can't be used has its own line and stops no other.
func (a *app) compareFolder(dir string) error {
	plans, err := plansWithEditions(dir)
	if err != nil {
		return err
	}
	if len(plans) == 0 {
		return problem("no-edition", dir, "no plan in this folder has an edition", "keep one with footing freeze")
	}
	lines := make([]folderLine, len(plans))
	next := make(chan int)
	var group sync.WaitGroup
	for range min(runtime.NumCPU(), len(plans)) {
		group.Add(1)
		go func() {
			defer group.Done()
			for i := range next {
				lines[i] = compareOne(plans[i])
			}
		}()
	}
	for i := range plans {
		next <- i
	}
	close(next)
	group.Wait()
	return a.printFolder(lines)
}

// plansWithEditions finds the plan files under a folder, in the order of their names.
func plansWithEditions(dir string) ([]string, error) {
	var out []string
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			if path == dir {
				return problem("folder-unreadable", dir, "the folder can't be read", "check its permissions")
			}
			return nil // what can't be read below it is no plan of this person
		}
		if d.IsDir() {
			if path != dir && strings.HasPrefix(d.Name(), ".") || strings.HasSuffix(d.Name(), ".editions") {
				return fs.SkipDir
			}
			return nil
		}
		switch strings.ToLower(filepath.Ext(path)) {
		case ".yaml", ".yml":
			if info, err := os.Stat(edition.Beside(path).Dir); err == nil && info.IsDir() {
				out = append(out, path)
			}
		}
		return nil
	})
	return out, err
}

// compareOne never ends the whole work: whatever goes wrong stands in its line.
func compareOne(path string) (l folderLine) {
	l = folderLine{Plan: path, Problems: []string{}}
	defer func() {
		if r := recover(); r != nil {
			l.Comparison, l.Problems = nil, []string{fmt.Sprintf("%s: a fault of the program: %s", path, firstLine(fmt.Sprint(r)))}
		}
	}()
	file, err := plan.Load(path)
	if err == nil {
		l.Comparison, err = plan.Compare(file, 0, 0, false)
	}
	if err != nil {
		l.Comparison, l.Problems = nil, errorLines(err)
	}
	return l
}

func (a *app) printFolder(lines []folderLine) error {
	triggered, broken := false, 0
	for _, l := range lines {
		if len(l.Problems) > 0 {
			broken++
		} else if l.Comparison.Triggered {
			triggered = true
		}
	}
	if a.json {
		if err := a.printJSON(folderDocument{"footing/compare-folder/1", lines}); err != nil {
			return err
		}
	} else {
		for _, l := range lines {
			if l.Comparison != nil {
				if err := a.print(reports.TermText(l.Plan+": "+l.Comparison.Line) + "\n"); err != nil {
					return err
				}
				continue
			}
			for _, p := range l.Problems {
				fmt.Fprintln(a.err, reports.TermText(p))
			}
		}
	}
	switch {
	case broken > 0:
		return errSaid
	case triggered:
		return answerNo
	}
	return nil
}

// errSaid ends a command with exit code 2 whose problems were printed already.
var errSaid = errors.New("the problems were printed")
