package importers

import (
	"bytes"
	"fmt"
	"io"

	"github.com/richardlehane/mscfb"

	"footing/internal/finding"
)

// openCompound opens the container of .xls workbooks and of encrypted .xlsx ones.
func openCompound(path string, data []byte, opt Options) (src *gridSource, err error) {
	at := finding.Place{File: path}
	damaged := func(what string) error {
		return problem("file-damaged", at, "the workbook is damaged: "+what, "open it in your spreadsheet program and save it as .xlsx")
	}
	defer func() {
		if r := recover(); r != nil { // the container reader is fed by strangers
			src, err = nil, damaged("its container can't be read")
		}
	}()
	doc, err := mscfb.New(bytes.NewReader(data))
	if err != nil {
		return nil, damaged("its container can't be read")
	}
	names := 0
	for entry, err := doc.Next(); err == nil; entry, err = doc.Next() {
		if names++; names > 10_000 {
			return nil, damaged("it has too many parts")
		}
		switch entry.Name {
		case "EncryptedPackage", "EncryptionInfo":
			return nil, passwordProtected(at)
		case "Workbook", "WORKBOOK", "Book":
			stream, err := io.ReadAll(io.LimitReader(entry, opt.MaxUnzip))
			if err != nil {
				return nil, damaged("its cells are cut short")
			}
			if int64(len(stream)) < entry.Size {
				return nil, damaged(fmt.Sprintf("%d of %d bytes are missing", entry.Size-int64(len(stream)), entry.Size))
			}
			return openBIFF(path, stream, opt)
		case "WordDocument", "PowerPoint Document":
			return nil, problem("file-not-a-sheet", at, "this is a text document or presentation, not a spreadsheet", "copy the table into a spreadsheet and save it as .xlsx or .csv")
		}
	}
	return nil, problem("file-not-a-sheet", at, "this file holds no workbook", "save the sheet as .xlsx or .csv in your spreadsheet program")
}
