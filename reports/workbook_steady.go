package reports

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"regexp"
	"sort"
)

// contentTypes is the part of the file whose lines the library writes in the order of a map.
const contentTypes = "[Content_Types].xml"

var defaultType = regexp.MustCompile(`<Default [^>]*></Default>`)

// steady puts the lines of the content types in order, so that the same result gives the same bytes; every other part is copied as it is.
func steady(data []byte) ([]byte, error) {
	in, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		return nil, fmt.Errorf("reports: workbook: %w", err)
	}
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	for _, f := range in.File {
		if f.Name == contentTypes {
			err = writeSorted(w, f)
		} else {
			err = w.Copy(f)
		}
		if err != nil {
			return nil, fmt.Errorf("reports: workbook: %s: %w", f.Name, err)
		}
	}
	if err := w.Close(); err != nil {
		return nil, fmt.Errorf("reports: workbook: %w", err)
	}
	return out.Bytes(), nil
}

func writeSorted(w *zip.Writer, f *zip.File) error {
	r, err := f.Open()
	if err != nil {
		return err
	}
	defer r.Close()
	part, err := io.ReadAll(r)
	if err != nil {
		return err
	}
	lines := defaultType.FindAll(part, -1)
	sort.Slice(lines, func(i, j int) bool { return bytes.Compare(lines[i], lines[j]) < 0 })
	next := 0
	part = defaultType.ReplaceAllFunc(part, func([]byte) []byte { next++; return lines[next-1] })
	dst, err := w.CreateHeader(&zip.FileHeader{Name: f.Name, Method: zip.Deflate, Modified: f.Modified})
	if err != nil {
		return err
	}
	_, err = dst.Write(part)
	return err
}
