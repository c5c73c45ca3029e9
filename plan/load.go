package plan

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io/fs"
	"os"
	"reflect"

	"footing/internal/finding"

	"go.yaml.in/yaml/v4"
)

// maxPlanBytes is the size from which a file is no plan.
const maxPlanBytes = 4 << 20

// Load reads a plan file. The error, finding.Problems, holds everything that is wrong with it: unknown keys, values of
// the wrong kind and impossible values, each with line and column. No default is filled in.
func Load(path string) (*File, error) {
	data, err := readPlan(path)
	if err != nil {
		return nil, err
	}
	return Parse(path, data)
}

func readPlan(path string) ([]byte, error) {
	problem := func(kind, what, mend string) error {
		return finding.Problems{{Severity: finding.Error, Kind: kind, Place: finding.Place{File: path}, What: what, Mend: mend}}
	}
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil, problem("file-missing", "there is no such file", "check the path, or start a plan with footing new")
	case err != nil:
		return nil, problem("file-unreadable", "the file can't be opened", "check its permissions")
	case info.IsDir():
		return nil, problem("file-is-folder", "this is a folder", "name the plan file in it")
	case info.Size() > maxPlanBytes:
		return nil, problem("file-too-large", "the file is far too large for a plan", "a plan is a short YAML file; is this the right one?")
	}
	data, err := os.ReadFile(path)
	if err != nil {
		return nil, problem("file-unreadable", "the file can't be read", "check its permissions")
	}
	return data, nil
}

// Parse reads a plan from bytes; path is the name that messages use and to whose folder evidence paths are relative.
func Parse(path string, data []byte) (*File, error) {
	d := &decoder{file: path, at: map[string]finding.Place{}}
	f := &File{Path: path}
	var doc yaml.Node
	if err := yaml.Load(data, &doc); err != nil && len(bytes.TrimSpace(data)) > 0 {
		d.syntaxProblems(err)
		return nil, d.sorted()
	}
	root := &doc
	if root.Kind == yaml.DocumentNode && len(root.Content) > 0 {
		root = root.Content[0]
	}
	if root.Kind != yaml.MappingNode {
		return nil, finding.Problems{{Severity: finding.Error, Kind: "not-a-plan", Place: finding.Place{File: path, Line: 1, Column: 1},
			What: "this is no plan: it holds no keys", Mend: "start one with footing new"}}
	}
	d.put(reflect.ValueOf(f).Elem(), root, "")
	f.at = d.at
	f.SHA256 = hash(data)
	for _, p := range f.check() {
		if !d.told(p.Place) { // what is no number needs no word on its size
			d.problems = append(d.problems, p)
		}
	}
	if len(d.problems) > 0 {
		return nil, d.sorted()
	}
	return f, nil
}

// told reports whether a problem was found at the place already.
func (d *decoder) told(at finding.Place) bool {
	for _, p := range d.problems {
		if at.Line > 0 && p.Place == at {
			return true
		}
	}
	return false
}

func hash(data []byte) string {
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:])
}

// At is where a key's value stands in the plan file, by its path ("study: alpha"); without line where it is not given.
func (f *File) At(path string) finding.Place {
	if p, ok := f.at[path]; ok {
		return p
	}
	return finding.Place{File: f.Path}
}
