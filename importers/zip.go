package importers

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"strings"

	"footing/internal/finding"
)

// parts are the parts of a packed file.
type parts struct {
	file  string
	files map[string]*zip.File
	limit int64
}

func openZip(path string, data []byte, opt Options) (*gridSource, error) {
	at := finding.Place{File: path}
	r, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		return nil, problem("file-damaged", at, "the file is cut short or damaged: its directory can't be read", "copy it again, or open and save it in your spreadsheet program")
	}
	if len(r.File) > 5000 {
		return nil, problem("file-too-large", at, "the file has more than 5000 parts", "save the sheet with the prior studies alone")
	}
	p := &parts{file: path, files: make(map[string]*zip.File, len(r.File)), limit: opt.MaxUnzip}
	var total uint64
	for _, f := range r.File {
		name := strings.TrimPrefix(strings.ReplaceAll(f.Name, "\\", "/"), "/")
		if p.files[name] != nil {
			return nil, problem("file-damaged", at, fmt.Sprintf("the file holds the part %q twice", shorten(name)), "open and save it in your spreadsheet program")
		}
		p.files[name] = f
		total += f.UncompressedSize64
		if total > uint64(opt.MaxUnzip) {
			return nil, p.tooLarge()
		}
		if f.Flags&1 != 0 {
			return nil, passwordProtected(at)
		}
	}
	switch {
	case p.files["mimetype"] != nil || p.files["content.xml"] != nil && p.files["[Content_Types].xml"] == nil:
		return openODS(p, opt)
	case p.files["xl/workbook.bin"] != nil:
		return nil, problem("file-not-a-sheet", at, "this is a binary workbook (.xlsb), which can't be read here", "save it as .xlsx or .csv in your spreadsheet program")
	case p.files["word/document.xml"] != nil:
		return nil, problem("file-not-a-sheet", at, "this is a text document, not a spreadsheet", "copy the table into a spreadsheet and save it as .xlsx or .csv")
	case p.files["[Content_Types].xml"] != nil:
		return openXLSX(p, data, opt)
	}
	return nil, problem("file-not-a-sheet", at, "this is a packed archive without a spreadsheet in it", "unpack it, or save the sheet as .xlsx or .csv")
}

func (p *parts) tooLarge() error {
	return problem("file-too-large", finding.Place{File: p.file}, fmt.Sprintf("unpacked, the file is larger than %d MiB", p.limit>>20), "keep only the sheet with the prior studies")
}

func passwordProtected(at finding.Place) error {
	return problem("file-encrypted", at, "the file is protected by a password", "save a copy without a password")
}

func (p *parts) damaged(part, what string) *finding.Problem {
	return problem("file-damaged", finding.Place{File: p.file}, fmt.Sprintf("the workbook is damaged (part %s): %s", shorten(part), what),
		"open and save it in your spreadsheet program, then check that no study is missing")
}

// open opens a part; reading stops with an error beyond the limit, whatever size the directory states.
func (p *parts) open(name string) (io.ReadCloser, error) {
	f := p.files[name]
	if f == nil {
		return nil, p.damaged(name, "it is missing")
	}
	rc, err := f.Open()
	if err != nil {
		return nil, p.damaged(name, "it can't be unpacked")
	}
	return struct {
		io.Reader
		io.Closer
	}{io.LimitReader(rc, p.limit), rc}, nil
}
