package check

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"

	"footing/plan"
	"footing/plan/result"
	"footing/reports"
)

// Report computes a report again. The page is only read, never opened; the files in it are unpacked into an empty folder that is removed again, and the plan reaches no
// other file, whatever it says. The error says why the page can't be used: it is no report, a file in it was changed, the plan does not run.
func Report(name string, page []byte) (*result.Check, error) {
	out, err := report(name, page)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", name, err)
	}
	return out, nil
}

func report(name string, page []byte) (*result.Check, error) {
	files, err := reports.ReadEnclosed(page)
	if err != nil {
		return nil, err
	}
	if len(files) == 0 {
		return nil, errors.New("this page carries no plan, so nothing can be computed again; a report written by footing plan does")
	}
	printed, err := reports.PrintedNumbers(page)
	if err != nil {
		return nil, err
	}
	p, evidence, err := again(files)
	if err != nil {
		return nil, err
	}
	p.Edition = editionOf(printed)
	fresh, err := reports.HTML(p)
	if err != nil {
		return nil, err
	}
	computed, err := reports.PrintedNumbers(fresh)
	if err != nil {
		return nil, err
	}
	out := &result.Check{Schema: "footing/check/1", Tool: plan.ThisTool(), Report: filepath.Base(name), Plan: checkedFile(files[0]), Evidence: evidence,
		Differs: []result.PrintedDiffers{}, Unchecked: []result.Unchecked{}}
	compare(out, setAside(out, printed), setAside(nil, computed))
	return out, nil
}

func checkedFile(f reports.EnclosedFile) result.CheckedFile {
	sum := sha256.Sum256(f.Data)
	return result.CheckedFile{Name: f.Name, SHA256: hex.EncodeToString(sum[:])}
}

// again runs the enclosed plan on the enclosed evidence in a folder of its own.
func again(files []reports.EnclosedFile) (p *result.Plan, evidence *result.CheckedFile, err error) {
	dir, err := os.MkdirTemp("", "footing-check-")
	if err != nil {
		return nil, nil, err
	}
	defer func() { err = errors.Join(err, os.RemoveAll(dir)) }()
	f, err := plan.Parse(filepath.Join(dir, safeName(files[0].Name, "plan.yaml")), files[0].Data)
	if err != nil {
		return nil, nil, inReport(dir, err)
	}
	typed := f.Evidence.File
	if typed != "" {
		if len(files) < 2 {
			return nil, nil, fmt.Errorf("the plan in this report names the evidence %s, which the report does not carry", typed)
		}
		e := checkedFile(files[1])
		evidence = &e
		f.Evidence.File = safeName(typed, "evidence"+filepath.Ext(files[1].Name))
		if err := os.WriteFile(filepath.Join(dir, f.Evidence.File), files[1].Data, 0o600); err != nil {
			return nil, nil, err
		}
	}
	if p, err = plan.Run(f); err != nil {
		return nil, nil, inReport(dir, err)
	}
	return p, evidence, nil
}

// inReport takes the folder of the unpacked files out of a message.
func inReport(dir string, err error) error {
	return errors.New("in the report: " + strings.ReplaceAll(err.Error(), dir+string(filepath.Separator), ""))
}

// safeName is the last part of a name that a stranger wrote, or the fallback where that is no plain file name.
func safeName(name, fallback string) string {
	name = filepath.Base(strings.ReplaceAll(name, `\`, "/"))
	if name == "." || name == ".." || name == "/" || strings.HasPrefix(name, ".") || strings.ContainsRune(name, 0) || len(name) > 200 {
		return fallback
	}
	return name
}

var editionWords = regexp.MustCompile(`^edition (\d+)$`)

// editionOf reads the number that the report gives itself: it comes from the kept editions, which a report does not carry.
func editionOf(printed []reports.PrintedNumber) int {
	for _, n := range printed {
		if m := editionWords.FindStringSubmatch(n.Label); n.Section == "" && m != nil {
			if k, err := strconv.Atoi(m[1]); err == nil {
				return k
			}
		}
	}
	return 0
}
