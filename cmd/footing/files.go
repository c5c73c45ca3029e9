package main

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"sync"

	"footing/internal/finding"
	"footing/plan/edition"
)

// recordName is the file in which footing keeps what it wrote into a folder: name, hash and for which plan. What it
// wrote and nobody has changed since it may write over.
const recordName = ".footing.json"

// written is one file of the record.
type written struct {
	SHA256 string `json:"sha256"`
	For    string `json:"for"` // the plan or command that it was written for
}

// output is one file to write.
type output struct {
	name string
	data []byte
}

func sum(data []byte) string {
	h := sha256.Sum256(data)
	return hex.EncodeToString(h[:])
}

func readRecord(dir string) map[string]written {
	m := map[string]written{}
	if data, err := os.ReadFile(filepath.Join(dir, recordName)); err == nil {
		if json.Unmarshal(data, &m) != nil {
			return map[string]written{} // a record that can't be read vouches for nothing
		}
	}
	return m
}

// writeAll writes files into a folder. Nothing is written unless all may be: a file that footing did not write, or that
// was changed since, or that belongs to another plan is left alone without force.
func writeAll(dir, owner string, files []output, force bool) error {
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return problem("folder-unwritable", dir, "the folder can't be made", "name another one")
	}
	record := readRecord(dir)
	if !force {
		var ps finding.Problems
		for _, f := range files {
			if p := mayWrite(dir, owner, f, record); p != nil {
				ps = append(ps, *p)
			}
		}
		if len(ps) > 0 {
			return ps
		}
	}
	// Side by side, since each file is waited for until it is on the disk.
	faults := make([]error, len(files))
	var group sync.WaitGroup
	for i, f := range files {
		record[f.name] = written{SHA256: sum(f.data), For: owner}
		group.Go(func() { faults[i] = writeOne(filepath.Join(dir, f.name), f.data) })
	}
	group.Wait()
	for _, err := range faults {
		if err != nil {
			return err
		}
	}
	data, err := marshal(record)
	if err != nil {
		return err
	}
	if old, err := os.ReadFile(filepath.Join(dir, recordName)); err == nil && string(old) == string(data) {
		return nil
	}
	if err := edition.WriteFile(filepath.Join(dir, recordName), data); err != nil {
		return problem("file-unwritable", filepath.Join(dir, recordName), "the file can't be written", "check the folder's permissions")
	}
	return nil
}

// writeOne writes a file unless it stands there already.
func writeOne(path string, data []byte) error {
	if old, err := os.ReadFile(path); err == nil && sum(old) == sum(data) {
		return nil
	}
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		return problem("folder-unwritable", filepath.Dir(path), "the folder can't be made", "name another one")
	}
	if err := edition.WriteFile(path, data); err != nil {
		return problem("file-unwritable", path, "the file can't be written", "check the folder's permissions, or name another folder")
	}
	return nil
}

// mayWrite says why a file must not be written, nil when it may.
func mayWrite(dir, owner string, f output, record map[string]written) *finding.Finding {
	path := filepath.Join(dir, f.name)
	info, err := os.Lstat(path)
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	bad := func(what, mend string) *finding.Finding {
		return &finding.Finding{Severity: finding.Error, Kind: "file-in-the-way", Place: finding.Place{File: path}, What: what, Mend: mend}
	}
	if err != nil || !info.Mode().IsRegular() {
		return bad("something that is no plain file stands there", "move it away")
	}
	old, err := os.ReadFile(path)
	if err != nil {
		return bad("the file can't be read", "check its permissions")
	}
	have, mine := record[f.name]
	switch {
	case sum(old) == sum(f.data):
		return nil
	case !mine:
		return bad("the file was not written by footing", "move it away, name another folder with --out, or use --force")
	case have.SHA256 != sum(old):
		return bad("the file was changed since footing wrote it", "move it away, or use --force to write over it")
	case have.For != owner:
		return bad(fmt.Sprintf("the file belongs to %s", have.For), "name another folder with --out, or use --force")
	}
	return nil
}

func problem(kind, file, what, mend string) error {
	return finding.Problems{{Severity: finding.Error, Kind: kind, Place: finding.Place{File: file}, What: what, Mend: mend}}
}
