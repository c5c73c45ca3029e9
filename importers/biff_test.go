package importers

import (
	"bytes"
	"encoding/binary"
	"math"
	"testing"
	"unicode/utf16"
)

// biffStream writes records one after another.
type biffStream struct{ bytes.Buffer }

func (s *biffStream) rec(typ uint16, parts ...any) {
	var d bytes.Buffer
	for _, p := range parts {
		switch p := p.(type) {
		case string:
			d.WriteString(p)
		case []uint16:
			for _, u := range p {
				_ = binary.Write(&d, binary.LittleEndian, u)
			}
		default:
			_ = binary.Write(&d, binary.LittleEndian, p)
		}
	}
	_ = binary.Write(s, binary.LittleEndian, typ)
	_ = binary.Write(s, binary.LittleEndian, uint16(d.Len()))
	s.Write(d.Bytes())
}

// oldBook writes a workbook of one sheet; strings and cells write their records ([MS-XLS] 2.4).
func oldBook(strings, cells func(s *biffStream)) []byte {
	var head, sheet biffStream
	head.rec(biffBOF, uint16(0x0600), uint16(5), uint32(0), uint32(0), uint32(0))
	strings(&head)
	sheet.rec(biffBOF, uint16(0x0600), uint16(16), uint32(0), uint32(0), uint32(0))
	cells(&sheet)
	sheet.rec(biffEOF)
	const name = "Data"
	at := head.Len() + 4 + 8 + len(name) + 4
	head.rec(biffBoundSheet, uint32(at), uint8(0), uint8(0), uint8(len(name)), uint8(0), name)
	head.rec(biffEOF)
	return append(head.Bytes(), sheet.Bytes()...)
}

func readBook(t *testing.T, data []byte) (*grid, error) {
	t.Helper()
	src, err := openBIFF("a.xls", data, Options{}.withDefaults())
	if err != nil {
		return nil, err
	}
	return src.read(0)
}

// Texts that cross into a continuing record start there with a new width; runs and phonetic parts are passed over.
func TestBIFFStrings(t *testing.T) {
	wide := utf16.Encode([]rune("Grüße 研究 B"))
	data := oldBook(func(s *biffStream) {
		s.rec(biffSST, uint32(4), uint32(4),
			uint16(5), uint8(0), "study",
			uint16(8), uint8(8), uint16(2), "richtext", uint32(1), uint32(2), // two formatting runs
			uint16(len(wide)), uint8(1|4), uint32(3), wide[:4])
		s.rec(biffContinue, uint8(1), wide[4:], "xyz", // three phonetic bytes
			uint16(11), uint8(1), utf16.Encode([]rune("Smith")))
		s.rec(biffContinue, uint8(0), " 2001a") // narrow from here on
	}, func(s *biffStream) {
		for i := range 4 {
			s.rec(biffLabelSST, uint16(i), uint16(0), uint16(0), uint32(i))
		}
	})
	g, err := readBook(t, data)
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []string{"study", "richtext", "Grüße 研究 B", "Smith 2001a"} {
		if got := g.rows[i].cells[0].text; got != want {
			t.Errorf("text %d: %q, want %q", i, got, want)
		}
	}
}

func TestBIFFCells(t *testing.T) {
	formula := func(s *biffStream, row, col uint16, result ...any) {
		s.rec(biffFormula, append(append([]any{row, col, uint16(0)}, result...), uint16(0), uint32(0), uint16(0))...)
	}
	data := oldBook(func(*biffStream) {}, func(s *biffStream) {
		s.rec(biffRow, uint16(0), uint16(0), uint16(9), uint16(0), uint32(0), uint32(0x20))
		s.rec(biffNumber, uint16(0), uint16(0), uint16(0), math.Float64bits(0.1))
		s.rec(biffRK, uint16(0), uint16(1), uint16(0), uint32(1234<<2|2|1)) // 12.34
		negative := int32(-7)
		s.rec(biffMulRK, uint16(0), uint16(2), uint16(0), uint32(negative<<2|2), uint16(0), uint32(math.Float64bits(1.5)>>32), uint16(3))
		s.rec(biffLabel, uint16(0), uint16(4), uint16(0), uint16(3), uint8(0), "abc")
		s.rec(biffBoolErr, uint16(0), uint16(5), uint16(0), uint8(1), uint8(0))
		s.rec(biffBoolErr, uint16(0), uint16(6), uint16(0), uint8(7), uint8(1))
		formula(s, 0, 7, uint64(0xFFFF000000000000)) // a text, in a record of its own
		s.rec(0x04BC, uint32(0))                     // a shared formula between the two
		s.rec(biffString, uint16(4), uint8(0), "text")
		formula(s, 0, 8, math.Float64bits(2.5))
		formula(s, 1, 0, uint64(0xFFFF000000000003))                                // an empty text
		formula(s, 1, 1, uint64(0xFFFF0000002A0002))                                // #N/A
		s.rec(biffBOF, uint16(0x0600), uint16(32), uint32(0), uint32(0), uint32(0)) // a chart inside
		s.rec(biffNumber, uint16(0), uint16(0), uint16(0), math.Float64bits(99))
		s.rec(biffEOF)
	})
	g, err := readBook(t, data)
	if err != nil {
		t.Fatal(err)
	}
	want := []cell{{"0.1", 1, 1, numberCell}, {"12.34", 2, 2, numberCell}, {"-7", 3, 0, numberCell}, {"1.5", 4, 1, numberCell}, {"abc", 5, -1, textCell},
		{"TRUE", 6, -1, boolCell}, {"#DIV/0!", 7, -1, errorCell}, {"text", 8, -1, textCell}, {"2.5", 9, 1, numberCell}}
	if len(g.rows) != 2 || len(g.rows[0].cells) != len(want) || !g.rows[0].hidden || g.rows[1].hidden || g.formulas != 4 {
		t.Fatalf("%+v", g)
	}
	for i, w := range want {
		if g.rows[0].cells[i] != w {
			t.Errorf("cell %d: %+v, want %+v", i, g.rows[0].cells[i], w)
		}
	}
	if c := g.rows[1].cells; len(c) != 2 || c[0].kind != valueless || c[1].text != "#N/A" {
		t.Errorf("%+v", c)
	}
}

func TestBIFFRefuses(t *testing.T) {
	none := func(*biffStream) {}
	whole := oldBook(none, func(s *biffStream) { s.rec(biffNumber, uint16(0), uint16(0), uint16(0), math.Float64bits(1)) })
	for n := range whole {
		if _, err := readBook(t, whole[:n]); err == nil {
			t.Fatalf("cut at %d of %d bytes, it was read", n, len(whole))
		}
	}
	old := bytes.Clone(whole)
	old[4], old[5] = 0, 5
	for name, c := range map[string]struct {
		data []byte
		kind string
	}{
		"format of 1995": {old, "file-not-a-sheet"},
		"password":       {oldBook(func(s *biffStream) { s.rec(biffFilePass, uint16(1)) }, none), "file-encrypted"},
		"text index":     {oldBook(none, func(s *biffStream) { s.rec(biffLabelSST, uint16(0), uint16(0), uint16(0), uint32(3)) }), "file-damaged"},
		"cell twice": {oldBook(none, func(s *biffStream) {
			s.rec(biffNumber, uint16(0), uint16(0), uint16(0), math.Float64bits(1))
			s.rec(biffNumber, uint16(0), uint16(0), uint16(0), math.Float64bits(2))
		}), "file-damaged"},
		"short record":   {oldBook(none, func(s *biffStream) { s.rec(biffNumber, uint16(0), uint16(0)) }), "file-damaged"},
		"texts cut":      {oldBook(func(s *biffStream) { s.rec(biffSST, uint32(2), uint32(2), uint16(1), uint8(0), "a") }, none), "file-damaged"},
		"too many texts": {oldBook(func(s *biffStream) { s.rec(biffSST, uint32(2), uint32(0x7FFFFFFF)) }, none), "file-damaged"},
	} {
		_, err := readBook(t, c.data)
		t.Run(name, func(t *testing.T) { wantProblem(t, err, c.kind) })
	}
}
