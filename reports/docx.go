package reports

import (
	"archive/zip"
	"bytes"
	"encoding/xml"
	"fmt"
	"image/png"
	"strings"
	"time"
)

// docx writes a word-processor document (Office Open XML, ECMA-376): headings, paragraphs, tables whose first row repeats on every page, pictures with a text alternative.
// Text is escaped and never read as markup. The same calls give the same bytes.
type docx struct {
	body   strings.Builder
	images [][]byte
	err    error
}

func (d *docx) keep(err error) {
	if d.err == nil && err != nil {
		d.err = err
	}
}

// run is text in a paragraph, line ends as breaks.
func run(text string, bold bool) string {
	var b strings.Builder
	for i, line := range strings.Split(sheetText(text), "\n") {
		b.WriteString("<w:r>")
		if bold {
			b.WriteString("<w:rPr><w:b/></w:rPr>")
		}
		if i > 0 {
			b.WriteString("<w:br/>")
		}
		b.WriteString(`<w:t xml:space="preserve">`)
		_ = xml.EscapeText(&b, []byte(line)) // a strings.Builder takes everything
		b.WriteString("</w:t></w:r>")
	}
	return b.String()
}

// paragraph in a style of the document: "" is plain text, "Title", "Heading1", "Caption".
func (d *docx) paragraph(style, text string) {
	if text == "" {
		return
	}
	properties := ""
	if style != "" {
		properties = fmt.Sprintf(`<w:pPr><w:pStyle w:val="%s"/></w:pPr>`, style)
	}
	fmt.Fprintf(&d.body, "<w:p>%s%s</w:p>", properties, run(text, false))
}

// pageWidth is the width of the text on A4 with margins of 2.5 cm, in twentieths of a point.
const pageWidth = 9070

// table writes a table; left is the number of leading columns that stand left, the others stand right.
func (d *docx) table(head []string, rows [][]string, left int) {
	if len(head) == 0 || len(rows) == 0 {
		return
	}
	widths := columnWidths(head, rows)
	d.body.WriteString(`<w:tbl><w:tblPr><w:tblStyle w:val="Lines"/><w:tblW w:w="5000" w:type="pct"/><w:tblLayout w:type="fixed"/></w:tblPr><w:tblGrid>`)
	for _, w := range widths {
		fmt.Fprintf(&d.body, `<w:gridCol w:w="%d"/>`, w)
	}
	d.body.WriteString("</w:tblGrid>")
	line := func(cells []string, first bool) {
		d.body.WriteString("<w:tr><w:trPr><w:cantSplit/>")
		if first {
			d.body.WriteString("<w:tblHeader/>")
		}
		d.body.WriteString("</w:trPr>")
		for i := range head {
			text, side := "", "right"
			if i < len(cells) {
				text = cells[i]
			}
			if i < left {
				side = "left"
			}
			fmt.Fprintf(&d.body, `<w:tc><w:tcPr><w:tcW w:w="%d" w:type="dxa"/></w:tcPr><w:p><w:pPr><w:pStyle w:val="Cell"/><w:jc w:val="%s"/></w:pPr>%s</w:p></w:tc>`, widths[i], side, run(text, first))
		}
		d.body.WriteString("</w:tr>")
	}
	line(head, true)
	for _, r := range rows {
		line(r, false)
	}
	d.body.WriteString("</w:tbl><w:p/>")
}

// columnWidths shares the page by the longest word and the length of each column.
func columnWidths(head []string, rows [][]string) []int {
	need := make([]float64, len(head))
	total := 0.0
	for i := range head {
		for _, r := range append([][]string{head}, rows...) {
			if i >= len(r) {
				continue
			}
			longest := 0
			for _, word := range strings.Fields(r[i]) {
				longest = max(longest, len([]rune(word)))
			}
			need[i] = max(need[i], float64(longest)+1, min(float64(len([]rune(r[i]))), 34)*0.8)
		}
		need[i] = max(need[i], 4)
		total += need[i]
	}
	out := make([]int, len(head))
	for i, n := range need {
		out[i] = int(pageWidth * n / total)
	}
	return out
}

// picture puts a PNG over the width of the text; alt is what it says.
func (d *docx) picture(data []byte, name, alt string) {
	size, err := png.DecodeConfig(bytes.NewReader(data))
	if err != nil {
		d.keep(err)
		return
	}
	d.images = append(d.images, data)
	n := len(d.images)
	const emuPerTwentieth = 635
	w := pageWidth * emuPerTwentieth
	h := w * size.Height / size.Width
	if most := 13000 * emuPerTwentieth; h > most {
		w, h = w*most/h, most
	}
	var a, t strings.Builder
	_ = xml.EscapeText(&a, []byte(sheetText(alt)))
	_ = xml.EscapeText(&t, []byte(sheetText(name)))
	fmt.Fprintf(&d.body, `<w:p><w:r><w:drawing><wp:inline distT="0" distB="0" distL="0" distR="0"><wp:extent cx="%d" cy="%d"/><wp:docPr id="%d" name="%s" descr="%s"/><a:graphic><a:graphicData uri="http://schemas.openxmlformats.org/drawingml/2006/picture"><pic:pic><pic:nvPicPr><pic:cNvPr id="%d" name="%s" descr="%s"/><pic:cNvPicPr/></pic:nvPicPr><pic:blipFill><a:blip r:embed="rIdP%d"/><a:stretch><a:fillRect/></a:stretch></pic:blipFill><pic:spPr><a:xfrm><a:off x="0" y="0"/><a:ext cx="%d" cy="%d"/></a:xfrm><a:prstGeom prst="rect"><a:avLst/></a:prstGeom></pic:spPr></pic:pic></a:graphicData></a:graphic></wp:inline></w:drawing></w:r></w:p>`,
		w, h, n, t.String(), a.String(), n, t.String(), a.String(), n, w, h)
}

// bytes is the finished file; date is that of the document, YYYY-MM-DD.
func (d *docx) bytes(title, date, maker string) ([]byte, error) {
	if d.err != nil {
		return nil, fmt.Errorf("reports: document: %w", d.err)
	}
	when := "2000-01-01T00:00:00Z"
	if t, err := time.Parse("2006-01-02", date); err == nil {
		when = t.Format(time.RFC3339)
	}
	var heading, by strings.Builder
	_ = xml.EscapeText(&heading, []byte(sheetText(title)))
	_ = xml.EscapeText(&by, []byte(sheetText(maker)))
	links := docxLinks
	var pictures strings.Builder
	for i := range d.images {
		fmt.Fprintf(&pictures, `<Relationship Id="rIdP%d" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/image" Target="media/picture%d.png"/>`, i+1, i+1)
	}
	parts := []struct {
		name string
		data []byte
	}{
		{"[Content_Types].xml", []byte(xml.Header + docxTypes)},
		{"_rels/.rels", []byte(xml.Header + docxRoot)},
		{"docProps/core.xml", []byte(xml.Header + fmt.Sprintf(docxCore, heading.String(), by.String(), when, when))},
		{"word/_rels/document.xml.rels", []byte(xml.Header + fmt.Sprintf(links, pictures.String()))},
		{"word/styles.xml", []byte(xml.Header + docxStyles)},
		{"word/document.xml", []byte(xml.Header + fmt.Sprintf(docxDocument, d.body.String()))},
	}
	for i, img := range d.images {
		parts = append(parts, struct {
			name string
			data []byte
		}{fmt.Sprintf("word/media/picture%d.png", i+1), img})
	}
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	for _, p := range parts {
		f, err := w.CreateHeader(&zip.FileHeader{Name: p.name, Method: zip.Deflate})
		if err != nil {
			return nil, fmt.Errorf("reports: document: %w", err)
		}
		if _, err := f.Write(p.data); err != nil {
			return nil, fmt.Errorf("reports: document: %w", err)
		}
	}
	if err := w.Close(); err != nil {
		return nil, fmt.Errorf("reports: document: %w", err)
	}
	return out.Bytes(), nil
}
