package reports

import (
	"archive/zip"
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"testing"

	"footing/plan/result"
)

// documentParts are the parts of a document by name, each read as XML where it is.
func documentParts(t *testing.T, p *result.Plan) map[string]string {
	t.Helper()
	data, err := Document(p)
	if err != nil {
		t.Fatal(err)
	}
	z, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	out := map[string]string{}
	for _, f := range z.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		part, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		r.Close()
		out[f.Name] = string(part)
		if strings.HasSuffix(f.Name, ".png") {
			continue
		}
		d := xml.NewDecoder(bytes.NewReader(part))
		for {
			if _, err := d.Token(); errors.Is(err, io.EOF) {
				break
			} else if err != nil {
				t.Fatalf("%s: %v", f.Name, err)
			}
		}
	}
	return out
}

// textOf is the text of a document, a line for each paragraph.
func textOf(t *testing.T, part string) string {
	t.Helper()
	var b strings.Builder
	d := xml.NewDecoder(strings.NewReader(part))
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			return b.String()
		}
		if err != nil {
			t.Fatal(err)
		}
		switch e := token.(type) {
		case xml.CharData:
			b.Write(e)
		case xml.EndElement:
			if e.Name.Local == "p" {
				b.WriteByte('\n')
			}
		}
	}
}

func TestDocumentHoldsTheWordsTablesAndFigures(t *testing.T) {
	p := inventedPlan(12, false)
	parts := documentParts(t, p)
	body := parts["word/document.xml"]
	text := textOf(t, body)
	w := WordsOf(p)
	for _, want := range []string{p.Title, "Invented data", w.Protocol, w.Results, w.Grant, "needed at the end", "with the score at the start (r = .50)", "Harbour school", "baseline correlation", "assumed", "ethics review"} {
		if !strings.Contains(text, want+"\n") && !strings.Contains(text, want) {
			t.Errorf("%q is not in the document", want)
		}
	}
	if n := strings.Count(body, "<w:tblHeader/>"); n != 4 {
		t.Errorf("%d tables repeat their heading, not 4", n)
	}
	for _, f := range []Figure{ForestFigure(p), NextFigure(p), PowerFigure(p)} {
		alt := f.Alt
		if len(alt) > 40 {
			alt = alt[:40]
		}
		if !strings.Contains(body, `descr="`+alt) {
			t.Errorf("the figure %s has no text alternative", f.Name)
		}
	}
	for i, name := range []string{"word/media/picture1.png", "word/media/picture2.png", "word/media/picture3.png"} {
		if !strings.HasPrefix(parts[name], "\x89PNG") || !strings.Contains(parts["word/_rels/document.xml.rels"], "media/picture"+string(rune('1'+i))+".png") {
			t.Errorf("%s is missing", name)
		}
	}
	if strings.Contains(text, "NaN") || strings.Contains(text, "%!") {
		t.Error("a value that was not there got printed")
	}
}

func TestDocumentEscapesWhatPeopleType(t *testing.T) {
	p := inventedPlan(4, true)
	hostile := `<w:p/>&amp;"' ` + "\x00\x1b[31m\u202e</w:t>"
	p.Title, p.Question = hostile, hostile
	p.Pool.Studies[0].Study, p.Assumptions[0].Source, p.Assumptions[0].Name = hostile, hostile, hostile
	p.Size.Study.Groups = []string{hostile, hostile}
	parts := documentParts(t, p)
	text := textOf(t, parts["word/document.xml"])
	if !strings.Contains(text, `<w:p/>&amp;"' `) || strings.ContainsAny(text, "\x00\x1b") {
		t.Errorf("not as typed:\n%.300s", text)
	}
}

func TestDocumentOfLittle(t *testing.T) {
	p := inventedPlan(3, false)
	p.Size.Chosen, p.Size.Why = nil, "at or beyond no effect"
	if text := textOf(t, documentParts(t, p)["word/document.xml"]); !strings.Contains(text, "No sample size can be stated") || strings.Contains(text, "For a grant application") {
		t.Error(text)
	}
	p = &result.Plan{Title: "", Size: result.Size{Why: "nothing was asked"}}
	documentParts(t, p)
	if _, err := Document(nil); err == nil {
		t.Error("no result, no error")
	}
}

func TestDocumentGivesTheSameBytes(t *testing.T) {
	a, err := Document(inventedPlan(6, false))
	if err != nil {
		t.Fatal(err)
	}
	if b, err := Document(inventedPlan(6, false)); err != nil || !bytes.Equal(a, b) {
		t.Errorf("two runs differ (%v)", err)
	}
}
