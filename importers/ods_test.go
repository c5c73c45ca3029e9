package importers

import (
	"strings"
	"testing"
)

// What a spreadsheet may hold beside plain cells (ODF 1.3 part 3, 9.1): notes, drawings, tracked changes, groups of rows,
// repeated cells, covered cells, text in pieces.
func TestOpenDocumentContent(t *testing.T) {
	const ns = `xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0" xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0" xmlns:text="urn:oasis:names:tc:opendocument:xmlns:text:1.0" xmlns:style="urn:oasis:names:tc:opendocument:xmlns:style:1.0" xmlns:calcext="urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0" xmlns:draw="urn:oasis:names:tc:opendocument:xmlns:drawing:1.0"`
	words := func(list ...string) string {
		var b strings.Builder
		for _, w := range list {
			b.WriteString(`<table:table-cell office:value-type="string"><text:p>` + w + `</text:p></table:table-cell>`)
		}
		return b.String()
	}
	number := func(v, shown string) string {
		return `<table:table-cell office:value-type="float" office:value="` + v + `"><text:p>` + shown + `</text:p></table:table-cell>`
	}
	content := `<?xml version="1.0" encoding="UTF-8"?><office:document-content ` + ns + `><office:automatic-styles><style:style style:name="ta2" style:family="table"><style:table-properties table:display="false"/></style:style></office:automatic-styles><office:body><office:spreadsheet>` +
		`<table:tracked-changes><table:cell-content-change><table:table-cell office:value-type="float" office:value="99"><text:p>99</text:p></table:table-cell></table:cell-content-change></table:tracked-changes>` +
		`<table:table table:name="Secret" table:style-name="ta2"><table:table-row>` + words("study", "estimate", "se") + `</table:table-row></table:table>` +
		`<table:table table:name="Studies"><table:shapes><draw:frame><table:table table:name="inner"><table:table-row>` + words("no") + `</table:table-row></table:table></draw:frame></table:shapes>` +
		`<table:table-column/><table:table-column table:visibility="collapse"/>` +
		`<table:table-row table:number-rows-repeated="2"><table:table-cell table:number-columns-repeated="1024"/></table:table-row>` +
		`<table:table-header-rows><table:table-row>` + words("study", "estimate", "se", "n") + `</table:table-row></table:table-header-rows>` +
		`<table:table-row-group><table:table-row><table:table-cell office:value-type="string"><office:annotation><text:p>a note</text:p></office:annotation><text:p>Smith<text:s text:c="2"/><text:span>&amp; Co</text:span></text:p></table:table-cell>` + number("0.25", "0.250") + number("0.1234567", "0.12") + number("24", "24") + `</table:table-row></table:table-row-group>` +
		`<table:table-row table:visibility="filter">` + words("Jones") + `<table:table-cell table:number-columns-repeated="2" office:value-type="float" office:value="0.5"><text:p>0.5</text:p></table:table-cell><table:table-cell table:formula="of:=1/0" office:value-type="string" office:string-value="" calcext:value-type="error"><text:p>#DIV/0!</text:p></table:table-cell></table:table-row>` +
		`<table:table-row table:number-rows-repeated="1048000"><table:table-cell table:number-columns-repeated="1024"/></table:table-row>` +
		`</table:table></office:spreadsheet></office:body></office:document-content>`
	s := mustRead(t, write(t, "a.ods", pack(t, map[string]string{"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": content})), Options{})
	if s.Name != "Studies" || len(s.Records) != 2 {
		t.Fatalf("%s %+v", s.Name, s.Records)
	}
	a, b := s.Records[0], s.Records[1]
	ra, rb := a.Reported(), b.Reported()
	if a.Row != 4 || a.Study != "Smith  & Co" || ra.Estimate.Value != 0.25 || ra.Estimate.Decimals != 3 || ra.StandardError.Value != 0.1234567 || ra.StandardError.Decimals != 7 || ra.N.Value != 24 || a.Hidden {
		t.Errorf("%+v %+v", a, ra.Estimate)
	}
	if b.Row != 5 || !b.Hidden || rb.Estimate.Value != 0.5 || rb.StandardError.Value != 0.5 || rb.N.Given {
		t.Errorf("%+v", b)
	}
	if got := kindsOf(s.Findings); got != "error-cell@D5 hidden-rows hidden-column@B3 formulas sheet-chosen" {
		t.Error(got)
	}
	if _, err := Read(write(t, "b.ods", pack(t, map[string]string{"mimetype": "application/vnd.oasis.opendocument.spreadsheet", "content.xml": content[:len(content)-40]})), Options{}); err == nil {
		t.Error("content cut short was read")
	}
}
