package check

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"footing/plan"
	"footing/plan/edition"
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
	out := &result.Check{Schema: "footing/check/1", Tool: plan.ThisTool(), Report: filepath.Base(name), Plan: checkedFile(files[0]), Differs: []result.PrintedDiffers{}}
	p, err := again(out, files)
	if err != nil {
		return nil, err
	}
	fresh, err := reports.HTML(p)
	if err != nil {
		return nil, err
	}
	computed, err := reports.PrintedNumbers(fresh)
	if err != nil {
		return nil, err
	}
	compare(out, printed, computed)
	return out, nil
}

func checkedFile(f reports.EnclosedFile) result.CheckedFile {
	sum := sha256.Sum256(f.Data)
	return result.CheckedFile{Name: f.Name, SHA256: hex.EncodeToString(sum[:])}
}

// again runs the enclosed plan on the enclosed evidence in a folder of its own, against the enclosed editions. The plan comes first in a report, then the evidence that it
// names, then the editions.
func again(out *result.Check, files []reports.EnclosedFile) (p *result.Plan, err error) {
	dir, err := os.MkdirTemp("", "footing-check-")
	if err != nil {
		return nil, err
	}
	defer func() { err = errors.Join(err, os.RemoveAll(dir)) }()
	path := filepath.Join(dir, safeName(files[0].Name, "plan.yaml"))
	if err := os.WriteFile(path, files[0].Data, 0o600); err != nil {
		return nil, err
	}
	f, err := plan.Load(path)
	if err != nil {
		return nil, inReport(dir, err)
	}
	rest := files[1:]
	if typed := f.Evidence.File; typed != "" {
		if len(rest) == 0 || isPack(rest[0]) {
			return nil, fmt.Errorf("the plan in this report names the evidence %s, which the report does not carry", typed)
		}
		e := checkedFile(rest[0])
		out.Evidence = &e
		f.Evidence.File = safeName(typed, "evidence"+filepath.Ext(rest[0].Name))
		if f.Evidence.File == filepath.Base(path) {
			return nil, fmt.Errorf("the plan in this report names itself, %s, as its evidence", typed)
		}
		if err := os.WriteFile(filepath.Join(dir, f.Evidence.File), rest[0].Data, 0o600); err != nil {
			return nil, err
		}
		rest = rest[1:]
	}
	if len(rest) > 0 && isPack(rest[0]) {
		e := checkedFile(rest[0])
		out.Editions = &e
		if err := edition.Beside(path).Unpack(rest[0].Data); err != nil {
			return nil, inReport(dir, err)
		}
	}
	if p, err = plan.RunSince(f); err != nil {
		return nil, inReport(dir, err)
	}
	return p, nil
}

func isPack(f reports.EnclosedFile) bool { return strings.HasSuffix(f.Name, edition.PackEnding) }

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
