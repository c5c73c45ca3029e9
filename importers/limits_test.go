package importers

import (
	"archive/zip"
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/xuri/excelize/v2"
)

// pack makes a zip of parts.
func pack(t testing.TB, files map[string]string) []byte {
	t.Helper()
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for name, content := range files {
		part, err := w.Create(name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := part.Write([]byte(content)); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// minimalBook is a workbook with the given sheet data and shared strings.
func minimalBook(sheet, shared string) map[string]string {
	const ns = `xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"`
	const rel = `http://schemas.openxmlformats.org/officeDocument/2006/relationships`
	return map[string]string{
		"[Content_Types].xml":        `<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="xml" ContentType="application/xml"/><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Override PartName="/xl/workbook.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"/><Override PartName="/xl/worksheets/sheet1.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"/><Override PartName="/xl/sharedStrings.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sharedStrings+xml"/></Types>`,
		"_rels/.rels":                `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="` + rel + `/officeDocument" Target="xl/workbook.xml"/></Relationships>`,
		"xl/workbook.xml":            `<workbook ` + ns + ` xmlns:r="` + rel + `"><sheets><sheet name="S" sheetId="1" r:id="rId1"/></sheets></workbook>`,
		"xl/_rels/workbook.xml.rels": `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="` + rel + `/worksheet" Target="worksheets/sheet1.xml"/><Relationship Id="rId2" Type="` + rel + `/sharedStrings" Target="sharedStrings.xml"/></Relationships>`,
		"xl/worksheets/sheet1.xml":   `<worksheet ` + ns + `><sheetData>` + sheet + `</sheetData></worksheet>`,
		"xl/sharedStrings.xml":       `<sst ` + ns + `>` + shared + `</sst>`,
	}
}

const headRow = `<row r="1"><c r="A1" t="inlineStr"><is><t>study</t></is></c><c r="B1" t="inlineStr"><is><t>estimate</t></is></c><c r="C1" t="inlineStr"><is><t>se</t></is></c></row>`

func TestMinimalBook(t *testing.T) {
	s := mustRead(t, write(t, "a.xlsx", pack(t, minimalBook(headRow+`<row r="2"><c r="A2" t="s"><v>0</v></c><c r="B2"><v>0.25</v></c><c r="C2"><v>0.125</v></c></row>`, `<si><t>A</t></si>`))), Options{})
	if len(s.Records) != 1 || s.Records[0].Reported().Estimate.Value != 0.25 {
		t.Errorf("%+v", s.Records)
	}
}

// Files made to exhaust a reader are refused, in bounded time.
func TestBombs(t *testing.T) {
	var wide, sparse, tall strings.Builder
	wide.WriteString(headRow + `<row r="2">`)
	for i := 1; i <= 10_000; i++ {
		fmt.Fprintf(&wide, `<c r="%s2"><v>1</v></c>`, columnName(i))
	}
	wide.WriteString(`</row>`)
	sparse.WriteString(headRow)
	for i := 2; i < 5000; i++ {
		fmt.Fprintf(&sparse, `<row r="%d"><c r="XFD%d"><v>1</v></c></row>`, i, i)
	}
	tall.WriteString(headRow + `<row r="1048576"><c r="A1048576" t="inlineStr"><is><t>A</t></is></c><c r="B1048576"><v>1</v></c><c r="C1048576"><v>1</v></c></row>`)
	zeros := strings.Repeat("<si><t>"+strings.Repeat("0", 1000)+"</t></si>", 9_000)
	deep := strings.Repeat("<a>", 100_000) + strings.Repeat("</a>", 100_000)
	ods := func(body string) []byte {
		return pack(t, map[string]string{"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": `<office:document-content xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0" xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0" xmlns:text="urn:oasis:names:tc:opendocument:xmlns:text:1.0"><office:body><office:spreadsheet><table:table table:name="S">` + body + `</table:table></office:spreadsheet></office:body></office:document-content>`})
	}
	const odsCell = `<table:table-cell office:value-type="string"><text:p>x</text:p></table:table-cell>`
	for name, c := range map[string]struct {
		data []byte
		kind string
	}{
		"10,000 columns":  {pack(t, minimalBook(wide.String(), "")), "too-many-columns"},
		"far columns":     {pack(t, minimalBook(sparse.String(), "")), "too-many-columns"},
		"9 MB of strings": {pack(t, minimalBook(headRow, zeros)), "file-too-large"},
		"deep nesting":    {pack(t, minimalBook(deep, "")), "file-damaged"},
		"repeated rows":   {ods(`<table:table-row table:number-rows-repeated="1000000">` + odsCell + `</table:table-row>`), "sheet-too-large"},
		"repeated cells":  {ods(`<table:table-row><table:table-cell table:number-columns-repeated="16000" office:value-type="float" office:value="1"/></table:table-row>`), "too-many-columns"},
		"wide text":       {[]byte("study,estimate,se\nA,1,1" + strings.Repeat(",1", 5000) + "\n"), "too-many-columns"},
		"many parts":      {manyParts(t), "file-too-large"},
		"encrypted part":  {bytes.ReplaceAll(pack(t, minimalBook(headRow, "")), []byte("PK\x01\x02\x14\x00\x14\x00\x08\x00"), []byte("PK\x01\x02\x14\x00\x14\x00\x09\x00")), "file-encrypted"},
	} {
		t.Run(name, func(t *testing.T) {
			start := time.Now()
			_, err := Read(write(t, "bomb", c.data), Options{MaxUnzip: 8 << 20})
			wantProblem(t, err, c.kind)
			if d := time.Since(start); d > 5*time.Second {
				t.Errorf("it took %v", d)
			}
		})
	}
	start := time.Now()
	s, err := Read(write(t, "tall.xlsx", pack(t, minimalBook(tall.String(), ""))), Options{})
	if err != nil || len(s.Records) != 1 || s.Records[0].Row != 1048576 || time.Since(start) > 5*time.Second {
		t.Errorf("one study in the last row: %v, %v", err, time.Since(start))
	}
}

func manyParts(t testing.TB) []byte {
	files := minimalBook(headRow, "")
	for i := range 5001 {
		files[fmt.Sprintf("xl/media/image%d.png", i)] = "x"
	}
	return pack(t, files)
}

func TestOtherContainers(t *testing.T) {
	for name, c := range map[string]struct {
		files map[string]string
		kind  string
	}{
		"text document": {map[string]string{"[Content_Types].xml": "<Types/>", "word/document.xml": "<w/>"}, "file-not-a-sheet"},
		"odt":           {map[string]string{"mimetype": "application/vnd.oasis.opendocument.text", "content.xml": "<a/>"}, "file-not-a-sheet"},
		"encrypted ods": {map[string]string{"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": "x", "META-INF/manifest.xml": "<m><encryption-data/></m>"}, "file-encrypted"},
		"archive":       {map[string]string{"a.txt": "x"}, "file-not-a-sheet"},
		"binary book":   {map[string]string{"[Content_Types].xml": "<Types/>", "xl/workbook.bin": "x"}, "file-not-a-sheet"},
	} {
		_, err := Read(write(t, "x.xlsx", pack(t, c.files)), Options{})
		t.Run(name, func(t *testing.T) { wantProblem(t, err, c.kind) })
	}
}

func TestPasswordProtected(t *testing.T) {
	f := excelize.NewFile()
	defer f.Close()
	if err := f.SetCellValue("Sheet1", "A1", "study"); err != nil {
		t.Fatal(err)
	}
	p := filepath.Join(t.TempDir(), "secret.xlsx")
	if err := f.SaveAs(p, excelize.Options{Password: "x"}); err != nil {
		t.Fatal(err)
	}
	_, err := Read(p, Options{})
	wantProblem(t, err, "file-encrypted", "password")
}

// Files are told apart by their content: a wrong name does no harm.
func TestWrongNames(t *testing.T) {
	want := gist(mustRead(t, filepath.Join("testdata", "merged.xls"), Options{}))
	for from, to := range map[string]string{"merged.xls": "a.xlsx", "merged.ods": "a.xls"} {
		data, err := os.ReadFile(filepath.Join("testdata", from))
		if err != nil {
			t.Fatal(err)
		}
		if got := gist(mustRead(t, write(t, to, data), Options{})); got != want {
			t.Errorf("%s as %s: %s", from, to, got)
		}
	}
}
