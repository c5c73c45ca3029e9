package importers

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"footing/internal/finding"
)

// Options says how an evidence sheet is to be read. The zero Options reads the first sheet with a usable heading row
// and finds everything out by itself.
type Options struct {
	SheetName string            // "": the first sheet that has a heading row
	Columns   map[string]string // meaning to heading as typed, where a heading is not understood by itself
	Groups    []string          // names of the groups, treatment first, as headings may use them ("break", "no break")
	Encoding  string            // of a text file: "utf-8", "windows-1252", ...; "": found out
	Decimal   string            // decimal mark: "." or ","; "": found out
	Delimiter string            // of a text file: one character; "": found out
	Name      string            // of the file, in findings and results; "": the path
	Overrides map[string]string // cell address to the text to read in place of what stands there (decisions)

	MaxBytes   int64 // largest file; 0 means 64 MiB
	MaxUnzip   int64 // largest content of a packed file; 0 means 128 MiB
	MaxRows    int   // 0 means 200,000
	MaxColumns int   // 0 means 1,000
	MaxCells   int   // 0 means 5,000,000
}

func (o Options) withDefaults() Options {
	set := func(v *int, d int) {
		if *v <= 0 {
			*v = d
		}
	}
	if o.MaxBytes <= 0 {
		o.MaxBytes = 64 << 20
	}
	if o.MaxUnzip <= 0 {
		o.MaxUnzip = 128 << 20
	}
	set(&o.MaxRows, 200_000)
	set(&o.MaxColumns, 1000)
	set(&o.MaxCells, 5_000_000)
	return o
}

// Read reads the evidence sheet at path. What stands in single cells and rows is reported in the sheet's findings and
// reading goes on; the error, a *finding.Problem or finding.Problems, says why the file as a whole can't be used.
func Read(path string, opt Options) (*Sheet, error) {
	opt = opt.withDefaults()
	data, err := readFile(path, opt)
	if err != nil {
		return nil, err
	}
	return readBytes(opt.named(path), data, opt)
}

// named is the file's name in messages.
func (o Options) named(path string) string {
	if o.Name != "" {
		return o.Name
	}
	return path
}

func readFile(path string, opt Options) ([]byte, error) {
	at := finding.Place{File: opt.named(path)}
	f, err := os.Open(path)
	if err != nil {
		return nil, openProblem(path, opt.named(path), err)
	}
	defer f.Close()
	info, err := f.Stat()
	if err != nil {
		return nil, problem("file-unreadable", at, "the file can't be read: "+reason(err), "check the file and its permissions")
	}
	if info.IsDir() {
		return nil, problem("file-is-folder", at, "this is a folder, not a spreadsheet", "name the spreadsheet file inside it")
	}
	data, err := io.ReadAll(io.LimitReader(f, opt.MaxBytes+1))
	if err != nil {
		return nil, problem("file-unreadable", at, "the file can't be read: "+reason(err), "check the file and its permissions")
	}
	if int64(len(data)) > opt.MaxBytes {
		return nil, problem("file-too-large", at, fmt.Sprintf("the file is larger than %d MiB, the limit of an evidence sheet", opt.MaxBytes>>20),
			"keep only the sheet with the prior studies")
	}
	return data, nil
}

// openProblem tells a missing file from one that can't be read, with the nearest name in its folder.
func openProblem(path, name string, err error) error {
	at := finding.Place{File: name}
	if !errors.Is(err, fs.ErrNotExist) {
		return problem("file-unreadable", at, "the file can't be opened: "+reason(err), "check the file and its permissions")
	}
	mend := "check the name and the folder"
	var names []string
	if entries, err := os.ReadDir(filepath.Dir(path)); err == nil && len(entries) <= 10_000 {
		for _, e := range entries {
			if !e.IsDir() {
				names = append(names, e.Name())
			}
		}
		if near := nearest(filepath.Base(path), names); near != "" {
			mend = fmt.Sprintf("did you mean %q, in the same folder?", near)
		}
	}
	return problem("file-not-found", at, "there is no such file", mend)
}

// reason is an error without the path that the message already names.
func reason(err error) string {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		return pe.Err.Error()
	}
	return err.Error()
}

// readBytes reads a file's content; opt has its defaults.
func readBytes(path string, data []byte, opt Options) (*Sheet, error) {
	sum := sha256.Sum256(data)
	grids, err := readGrids(path, data, opt)
	if err != nil {
		return nil, err
	}
	if grids.close != nil {
		defer grids.close()
	}
	s, err := choose(path, grids, opt)
	if err != nil {
		return nil, err
	}
	s.File, s.SHA256 = path, hex.EncodeToString(sum[:])
	return s, nil
}

// gridSource reads the sheets of one file, one at a time.
type gridSource struct {
	names   []string
	visible []bool
	read    func(i int) (*grid, error)
	close   func() // frees what reading held open; may be nil
}

// readGrids opens a file by what its first bytes say, not by its name.
func readGrids(path string, data []byte, opt Options) (*gridSource, error) {
	at := finding.Place{File: path}
	const saveAs = "save it as .xlsx or .csv in your spreadsheet program"
	switch {
	case len(bytes.TrimSpace(data)) == 0:
		return nil, problem("file-empty", at, "the file is empty", "put the prior studies in it, one row each under a row of headings")
	case bytes.HasPrefix(data, []byte("PK\x03\x04")) || bytes.HasPrefix(data, []byte("PK\x05\x06")):
		return openZip(path, data, opt)
	case bytes.HasPrefix(data, []byte("\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1")):
		return openCompound(path, data, opt)
	case bytes.HasPrefix(data, []byte("%PDF")):
		return nil, problem("file-not-a-sheet", at, "this is a PDF document, not a spreadsheet", "give the spreadsheet that holds the prior studies")
	case looksLikeMarkup(data):
		return nil, problem("file-not-a-sheet", at, "this is a web page or XML document, not a spreadsheet (whatever its name says)", saveAs)
	}
	if !isUTF16(data) && binaryJunk(data) {
		return nil, problem("file-not-a-sheet", at, "this is no spreadsheet that can be read here (neither .xlsx, .xls, .ods nor text)", saveAs)
	}
	return openText(path, data, opt)
}

func looksLikeMarkup(data []byte) bool {
	head := strings.ToLower(string(bytes.TrimSpace(bytes.TrimPrefix(data[:min(len(data), 300)], []byte("\xef\xbb\xbf")))))
	for _, p := range []string{"<?xml", "<!doctype", "<html", "<table", "{\\rtf"} {
		if strings.HasPrefix(head, p) {
			return true
		}
	}
	return false
}

// binaryJunk reports control characters that no text file holds.
func binaryJunk(data []byte) bool {
	bad := 0
	head := data[:min(len(data), 8192)]
	for _, b := range head {
		if b == 0 || b < 0x20 && b != '\t' && b != '\n' && b != '\r' && b != '\f' && b != 0x1b && b != 0x0b {
			bad++
		}
	}
	return bad > len(head)/50 || bytes.IndexByte(head, 0) >= 0
}

// choose takes the asked sheet, or the first one with a usable heading row.
func choose(path string, src *gridSource, opt Options) (*Sheet, error) {
	if opt.SheetName != "" {
		i := findSheet(src.names, opt.SheetName)
		if i < 0 {
			return nil, noSuchSheet(path, src, opt.SheetName)
		}
		g, err := src.read(i)
		if err != nil {
			return nil, err
		}
		g.sheets = src.names
		return interpret(g, opt)
	}
	var first error
	for _, hidden := range []bool{false, true} {
		for i := range src.names {
			if src.visible[i] == hidden {
				continue
			}
			g, err := src.read(i)
			if err != nil {
				return nil, err
			}
			g.sheets = src.names
			s, err := interpret(g, opt)
			if err == nil {
				s.sayChosen(src, i)
				return s, nil
			}
			if first == nil || isKind(first, "sheet-empty") && !isKind(err, "sheet-empty") {
				first = err
			}
		}
	}
	if first == nil {
		first = problem("sheet-empty", finding.Place{File: path}, "the file has no sheet with cells", "put the prior studies in it")
	}
	return nil, first
}

func isKind(err error, kind string) bool {
	var p *finding.Problem
	return errors.As(err, &p) && p.Kind == kind
}

func findSheet(names []string, want string) int {
	for i, n := range names {
		if n == want {
			return i
		}
	}
	for i, n := range names {
		if strings.EqualFold(strings.TrimSpace(n), strings.TrimSpace(want)) {
			return i
		}
	}
	return -1
}

func noSuchSheet(path string, src *gridSource, want string) error {
	at := finding.Place{File: path}
	if len(src.names) == 1 && src.names[0] == "" {
		return problem("sheet-not-found", at, fmt.Sprintf("a text file has no sheet %q", shorten(want)), "leave the sheet name out")
	}
	quoted := make([]string, len(src.names))
	for i, n := range src.names {
		quoted[i] = fmt.Sprintf("%q", shorten(n))
	}
	mend := "use one of these names"
	if near := nearest(want, src.names); near != "" {
		mend = fmt.Sprintf("did you mean %q?", shorten(near))
	}
	return problem("sheet-not-found", at, fmt.Sprintf("there is no sheet %q; the file has %s", shorten(want), strings.Join(quoted, ", ")), mend)
}

// sayChosen notes which sheet was read where the file has several.
func (s *Sheet) sayChosen(src *gridSource, chosen int) {
	if len(src.names) < 2 {
		return
	}
	var others []string
	for i, n := range src.names {
		if i != chosen {
			name := fmt.Sprintf("%q", shorten(n))
			if !src.visible[i] {
				name += " (hidden)"
			}
			others = append(others, name)
		}
	}
	sev, what := finding.Note, fmt.Sprintf("sheet %q was read", shorten(s.Name))
	if !src.visible[chosen] {
		sev, what = finding.Warning, what+", which is hidden"
	}
	s.Findings = append(s.Findings, finding.Finding{Severity: sev, Kind: "sheet-chosen", Place: finding.Place{File: s.File, Sheet: s.Name},
		What: fmt.Sprintf("%s; not read: %s", what, strings.Join(others, ", ")), Mend: "name another sheet if that is not the one with the prior studies"})
}
