package importers

import (
	"strings"
	"testing"
)

// Programs write the same workbook in different ways (ECMA-376 part 1, 18.3 allows them all).
func TestProducers(t *testing.T) {
	body := `<row r="2"><c r="A2" t="s"><v>0</v></c><c r="B2"><v>0.25</v></c><c r="C2"><v>0.125</v></c></row>`
	shared := `<si><t>A</t></si>`
	edit := func(part, old, by string) func(map[string]string) {
		return func(f map[string]string) { f[part] = strings.ReplaceAll(f[part], old, by) }
	}
	for name, c := range map[string]struct {
		sheet, shared string
		change        func(map[string]string)
	}{
		"plain":             {body, shared, nil},
		"no addresses":      {`<row><c t="s"><v>0</v></c><c><v>0.25</v></c><c><v>0.125</v></c></row>`, shared, nil},
		"rich text":         {body, `<si><r><rPr><b/></rPr><t>A</t></r></si>`, nil},
		"rich inline":       {`<row r="2"><c r="A2" t="inlineStr"><is><r><t>A</t></r></is></c><c r="B2"><v>0.25</v></c><c r="C2"><v>0.125</v></c></row>`, shared, nil},
		"phonetic":          {body, `<si><t>A</t><rPh sb="0" eb="1"><t>ei</t></rPh></si>`, nil},
		"empty strings":     {`<row r="2"><c r="A2" t="s"><v>1</v></c><c r="B2"><v>0.25</v></c><c r="C2"><v>0.125</v></c><c r="D2" t="s"><v>0</v></c><c r="E2" s="3"/></row>`, `<si><t/></si><si><t>A</t></si>`, nil},
		"formula results":   {`<row r="2"><c r="A2" t="str"><f>"A"</f><v>A</v></c><c r="B2"><f>1/4</f><v>0.25</v></c><c r="C2"><f t="shared" si="0"/><v>0.125</v></c></row>`, shared, nil},
		"exponents":         {`<row r="2"><c r="A2" t="s"><v>0</v></c><c r="B2"><v>2.5E-1</v></c><c r="C2"><v>1.25E-01</v></c></row>`, shared, nil},
		"empty rows":        {`<row r="2" spans="1:3"/>` + strings.ReplaceAll(body, `2"`, `3"`), shared, nil},
		"absolute targets":  {body, shared, edit("xl/_rels/workbook.xml.rels", `Target="`, `Target="/xl/`)},
		"strict":            {body, shared, edit("_rels/.rels", "http://schemas.openxmlformats.org/officeDocument/2006/relationships", "http://purl.oclc.org/ooxml/officeDocument/relationships")},
		"wide cells styled": {body[:len(body)-6] + `<c r="XFD2" s="0"/></row>`, shared, nil},
		"byte order mark":   {body, shared, func(f map[string]string) { f["xl/worksheets/sheet1.xml"] = "\ufeff" + f["xl/worksheets/sheet1.xml"] }},
		"declaration": {body, shared, func(f map[string]string) {
			f["xl/worksheets/sheet1.xml"] = `<?xml version="1.0" encoding="UTF-8" standalone="yes"?>` + "\r\n" + f["xl/worksheets/sheet1.xml"]
		}},
		"prefixed names": {body, shared, func(f map[string]string) {
			for _, part := range []string{"xl/worksheets/sheet1.xml", "xl/sharedStrings.xml"} {
				s := f[part]
				s = strings.ReplaceAll(strings.ReplaceAll(s, "<", "<x:"), "<x:/", "</x:")
				f[part] = strings.Replace(s, "xmlns=", "xmlns:x=", 1)
			}
		}},
	} {
		t.Run(name, func(t *testing.T) {
			files := minimalBook(headRow+c.sheet, c.shared)
			if c.change != nil {
				c.change(files)
			}
			s, err := Read(write(t, "a.xlsx", pack(t, files)), Options{})
			if err != nil {
				t.Fatal(err)
			}
			if len(s.Records) != 1 || s.Records[0].Study != "A" {
				t.Fatalf("%+v", s.Records)
			}
			if r := s.Records[0].Reported(); r.Estimate.Value != 0.25 || r.StandardError.Value != 0.125 {
				t.Errorf("%+v %+v", r.Estimate, r.StandardError)
			}
		})
	}
}

// Dates count from 1900 or from 1904 (ECMA-376 part 1, 18.17.4.1): 2009-04-03 is day 39906 or 38444.
func TestDateSystems(t *testing.T) {
	for name, c := range map[string]struct {
		day  string
		prop string
	}{"1900": {"39906", ""}, "1904": {"38444", `<workbookPr date1904="1"/>`}} {
		files := minimalBook(headRow+`<row r="2"><c r="A2" t="s"><v>0</v></c><c r="B2"><v>1</v></c><c r="C2"><v>1</v></c><c r="D2" s="1"><v>`+c.day+`</v></c></row>`, `<si><t>A</t></si>`)
		files["xl/workbook.xml"] = strings.Replace(files["xl/workbook.xml"], "<sheets>", c.prop+"<sheets>", 1)
		files["xl/styles.xml"] = `<styleSheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><cellXfs count="2"><xf numFmtId="0"/><xf numFmtId="14"/></cellXfs></styleSheet>`
		files["xl/_rels/workbook.xml.rels"] = strings.Replace(files["xl/_rels/workbook.xml.rels"], "</Relationships>", `<Relationship Id="rId3" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/styles" Target="styles.xml"/></Relationships>`, 1)
		files["[Content_Types].xml"] = strings.Replace(files["[Content_Types].xml"], "</Types>", `<Override PartName="/xl/styles.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.styles+xml"/></Types>`, 1)
		s := mustRead(t, write(t, "a.xlsx", pack(t, files)), Options{})
		cells := s.Records[0].Cells()
		if got := cells[len(cells)-1].Text; got != "2009-04-03" {
			t.Errorf("%s: %q", name, got)
		}
	}
	for serial, want := range map[string]string{"1": "1900-01-01", "59": "1900-02-28", "61": "1900-03-01", "46361.75": "2026-12-05"} {
		if got, ok := serialDate(serial, false); !ok || got != want {
			t.Errorf("%s: %q, want %s", serial, got, want)
		}
	}
	for code, want := range map[string]look{"0.00": {decimals: 2}, "0.000%": {percent: true, decimals: 3}, "d-mmm": {date: true}, `yyyy"-"mm`: {date: true}, `0.0"days"`: {decimals: 1}, "[Red]0.00;[Blue]-0.00": {decimals: 2},
		"General": {}, "@": {}, "[h]:mm": {date: true}, `#,##0.00\ "d"`: {decimals: 2}, "[$-409]d/m/yy": {date: true}} {
		if got := lookOfCode(code); got != want {
			t.Errorf("%q: %+v, want %+v", code, got, want)
		}
	}
}
