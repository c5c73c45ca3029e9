package importers

import (
	"bytes"
	"math"
	"strings"
	"testing"
)

func TestWriteAndRead(t *testing.T) {
	hostile := []string{`=HYPERLINK("http://x","y")`, "+1+1", "-1+cmd", "@SUM(A1)", "'x", "Ünï", "5/12"}
	tab := NewSheet("continuous")
	third := 1.0 / 3
	for i, h := range hostile {
		tab.Rows = append(tab.Rows, []any{h, 2000 + i, 20, third, 1.5, 21, nil, 2.25, nil, nil, nil, nil, nil, "low", 0.5, nil, nil, h})
	}
	var a, b, c bytes.Buffer
	for _, w := range []*bytes.Buffer{&a, &b} {
		if err := WriteWorkbook(w, tab); err != nil {
			t.Fatal(err)
		}
	}
	if !bytes.Equal(a.Bytes(), b.Bytes()) {
		t.Error("two runs gave different bytes")
	}
	if err := WriteText(&c, tab); err != nil {
		t.Fatal(err)
	}
	for name, s := range map[string]*Sheet{"xlsx": mustRead(t, write(t, "a.xlsx", a.Bytes()), Options{}), "csv": mustRead(t, write(t, "a.csv", c.Bytes()), Options{})} {
		if len(s.Records) != len(hostile) {
			t.Fatalf("%s: %d records", name, len(s.Records))
		}
		for i, h := range hostile {
			r := s.Records[i]
			if r.Study != h || r.Reported().Treatment.Mean.Value != third || r.Year != 2000+i || r.Reported().Control.Mean.Given || r.Relevance != 0.5 {
				t.Errorf("%s: %+v", name, r)
			}
		}
	}
	if strings.Contains(c.String(), "\n=") || strings.Contains(c.String(), "\n@") {
		t.Error("a text cell of the .csv could be taken for a formula")
	}
	if err := WriteWorkbook(&a, Table{Columns: tab.Columns, Rows: [][]any{{math.NaN()}}}); err == nil {
		t.Error("NaN was written")
	}
}

// Every heading of a new sheet, and every meaning, must be understood as itself and be explained.
func TestMeaningsAreUnderstood(t *testing.T) {
	for _, m := range Meanings() {
		if u, ok := understand(string(m), nil); !ok || u.rest != "" || u.meaning != m && !(u.meaning == StandardError && m == "se") {
			t.Errorf("%q is understood as %q (rest %q)", m, u.meaning, u.rest)
		}
		if Explain(m) == "" {
			t.Errorf("%q is not explained", m)
		}
	}
	for _, o := range []string{"continuous", "binary", "count", "association", "event-time"} {
		for _, c := range NewSheet(o).Columns {
			if c.Explain == "" {
				t.Errorf("%s: %q is not explained", o, c.Heading)
			}
		}
	}
}
