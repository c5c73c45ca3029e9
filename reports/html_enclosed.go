package reports

import (
	"bytes"
	"crypto/sha256"
	"encoding/base64"
	"encoding/hex"
	"encoding/json"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strings"
)

// EnclosedFile is a file that a report carries, as Enclose put it there.
type EnclosedFile struct {
	Name string
	Data []byte
}

const enclosedTag = `<script type="application/json" class="enclosed">`

// ReadEnclosed gives the files that a report carries, each checked against the SHA-256 that stands beside it. A page
// without any gives none.
func ReadEnclosed(page []byte) ([]EnclosedFile, error) {
	var out []EnclosedFile
	rest := string(page)
	for {
		_, after, found := strings.Cut(rest, enclosedTag)
		if !found {
			return out, nil
		}
		body, tail, found := strings.Cut(after, "</script>")
		if !found {
			return nil, errors.New("the report is cut short inside an enclosed file")
		}
		var e enclosed
		if err := json.Unmarshal([]byte(body), &e); err != nil {
			return nil, fmt.Errorf("an enclosed file can't be read: %w", err)
		}
		data, err := base64.StdEncoding.DecodeString(e.Data)
		if err != nil {
			return nil, fmt.Errorf("the enclosed file %s can't be read: %w", clipRunes(e.Name, 80), err)
		}
		if sum := sha256.Sum256(data); hex.EncodeToString(sum[:]) != e.Sum {
			return nil, fmt.Errorf("the enclosed file %s has been changed: its SHA-256 is not the one beside it", clipRunes(e.Name, 80))
		}
		out = append(out, EnclosedFile{e.Name, data})
		rest = tail
	}
}

// PrintedNumber is one number as it stands on a page, and where.
type PrintedNumber struct {
	Section string // the section's title; "" above the first
	Label   string // the first cell of its row, the drawing, or the words around it
	Text    string // as printed: "0.39", "−0.15", "98 280", "> 99%"
}

var (
	scripts       = regexp.MustCompile(`(?s)<(script|style)[^>]*>.*?</(script|style)>`)
	doctype       = regexp.MustCompile(`(?i)<!doctype[^>]*>`)
	printedNumber = regexp.MustCompile(`[<>]?[\x{202f} ]?−?(?:\d{1,3}(?:\x{202f}\d{3})+|\d+)?(?:\.\d+)?%?`)
	hasDigit      = regexp.MustCompile(`\d`)
)

// PrintedNumbers lists every number of a report in the order of the page, those inside drawings included (once: the
// drawings for telephones repeat them and are left out, and so are the numbers of sections). Two reports of one result have the same list.
func PrintedNumbers(page []byte) ([]PrintedNumber, error) {
	text := doctype.ReplaceAll(scripts.ReplaceAll(page, nil), nil)
	d := xml.NewDecoder(bytes.NewReader(text))
	d.Strict, d.AutoClose, d.Entity = false, xml.HTMLAutoClose, xml.HTMLEntity
	r := pageReader{}
	for {
		t, err := d.Token()
		if errors.Is(err, io.EOF) {
			return r.out, nil
		}
		if err != nil {
			return nil, fmt.Errorf("the page can't be read: %w", err)
		}
		switch e := t.(type) {
		case xml.StartElement:
			r.start(e)
		case xml.EndElement:
			r.end()
		case xml.CharData:
			r.text(string(e))
		}
	}
}

// pageReader follows the elements of a page.
type pageReader struct {
	open    []string
	skip    int // depth at which a part that repeats begins, 0 outside
	section string
	row     string // first cell of the row
	drawing string
	out     []PrintedNumber
}

func (r *pageReader) start(e xml.StartElement) {
	r.open = append(r.open, e.Name.Local)
	for _, a := range e.Attr {
		switch {
		case a.Name.Local == "class" && a.Value == "narrow" && r.skip == 0:
			r.skip = len(r.open)
		case a.Name.Local == "id" && a.Value == "try" && r.skip == 0:
			r.skip = len(r.open)
		case a.Name.Local == "aria-label" && e.Name.Local == "svg":
			r.drawing, _, _ = strings.Cut(a.Value, ".")
		}
	}
	switch e.Name.Local {
	case "tr":
		r.row = ""
	case "title", "nav": // names of cut labels and of sections repeat what stands elsewhere
		if r.skip == 0 {
			r.skip = len(r.open)
		}
	case "span": // a section's own number is no figure
		if r.skip == 0 && len(r.open) > 1 && r.open[len(r.open)-2] == "h2" {
			r.skip = len(r.open)
		}
	}
}

func (r *pageReader) end() {
	if len(r.open) == 0 {
		return
	}
	if r.skip == len(r.open) {
		r.skip = 0
	}
	if r.open[len(r.open)-1] == "svg" {
		r.drawing = ""
	}
	r.open = r.open[:len(r.open)-1]
}

func (r *pageReader) inside(name string) bool {
	for _, o := range r.open {
		if o == name {
			return true
		}
	}
	return false
}

func (r *pageReader) text(s string) {
	if r.skip > 0 || strings.TrimSpace(s) == "" {
		return
	}
	if r.inside("h2") && r.open[len(r.open)-1] == "h2" {
		r.section = strings.TrimSpace(s)
	}
	label := clipRunes(strings.TrimSpace(s), 60)
	switch {
	case r.drawing != "":
		label = r.drawing
	case r.inside("td"):
		if r.row == "" {
			r.row = label
		}
		label = r.row
	}
	for _, n := range printedNumber.FindAllString(s, -1) {
		if hasDigit.MatchString(n) {
			r.out = append(r.out, PrintedNumber{r.section, label, strings.TrimSpace(n)})
		}
	}
}
