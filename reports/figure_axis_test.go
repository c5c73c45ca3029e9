package reports

import (
	"encoding/xml"
	"errors"
	"io"
	"math"
	"strconv"
	"strings"
	"testing"

	"footing/plan/result"

	"pgregory.net/rapid"
)

func wellFormed(t *testing.T, name string, data []byte) {
	t.Helper()
	d := xml.NewDecoder(strings.NewReader(string(data)))
	for {
		if _, err := d.Token(); errors.Is(err, io.EOF) {
			return
		} else if err != nil {
			t.Errorf("%s is not well-formed: %v", name, err)
			return
		}
	}
}

func texts(ts []tick) string {
	var out []string
	for _, t := range ts {
		out = append(out, t.Text)
	}
	return strings.Join(out, " ")
}

func TestTicks(t *testing.T) {
	for i, c := range []struct{ got, want string }{
		{texts(linearTicks(0, 1, 5)), "0.0 0.2 0.4 0.6 0.8 1.0"},
		{texts(linearTicks(-0.37, 1.02, 6)), "−0.2 0.0 0.2 0.4 0.6 0.8 1.0"},
		{texts(linearTicks(0, 550, 6)), "0 100 200 300 400 500"},
		{texts(linearTicks(0, 12000, 4)), "0 5\u202f000 10\u202f000"},
		{texts(countTicks(25, 6000, 6)), "30 100 300 1\u202f000 3\u202f000"},
		{texts(countTicks(90, 400, 7)), "100 200"},
		{texts(ratioTicks(math.Log(0.5), math.Log(2), 5)), "0.5 0.7 1 1.5 2"},
		{texts(ratioTicks(math.Log(0.01), math.Log(30), 4)), "0.01 0.1 1 10"},
	} {
		if c.got != c.want {
			t.Errorf("row %d: %q, want %q", i, c.got, c.want)
		}
	}
}

// A tick stands where its text says: on a ratio axis the value is the logarithm of what is written.
func TestTicksSayTheirPlace(t *testing.T) {
	s := effectScale{result.ScaleInfo{Name: "log-odds-ratio", Log: true}}
	for _, k := range s.ticks(-1.2, 1.7, 8) {
		if said, err := strconv.ParseFloat(k.Text, 64); err != nil || math.Abs(said-math.Exp(k.Value)) > 1e-9 {
			t.Errorf("tick %q stands at %v, which is %v", k.Text, k.Value, math.Exp(k.Value))
		}
	}
	z := effectScale{result.ScaleInfo{Name: "fisher-z"}}
	for _, k := range z.ticks(-0.5, 1.2, 8) {
		if got := fixed(math.Tanh(k.Value), 1); got != k.Text {
			t.Errorf("tick %q stands at %v, which is r = %v", k.Text, k.Value, got)
		}
	}
}

// Labels that are moved apart keep their order and their distance, stay in bounds where they fit, and do not move
// when they need not.
func TestSpread(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		want := rapid.SliceOfN(rapid.Float64Range(0, 100), 1, 8).Draw(t, "want")
		got := spread(want, 12, 0, 100)
		clear := true
		for i := range want {
			if got[i] < -1e-9 || got[i] > 100+1e-9 {
				t.Fatalf("%v left the bounds", got[i])
			}
			for j := range want {
				if i == j {
					continue
				}
				if math.Abs(got[i]-got[j]) < 12-1e-9 {
					t.Fatalf("%v and %v are too close", got[i], got[j])
				}
				if want[i] < want[j] && got[i] > got[j] {
					t.Fatalf("order changed")
				}
				clear = clear && math.Abs(want[i]-want[j]) >= 12
			}
		}
		if clear {
			for i := range want {
				if math.Abs(got[i]-want[i]) > 1e-9 {
					t.Fatalf("%v moved to %v without need", want[i], got[i])
				}
			}
		}
	})
}

func TestClipText(t *testing.T) {
	long := strings.Repeat("a word ", 2000)
	short, cut := clipText(long, 100, 12, false)
	if !cut || !strings.HasSuffix(short, "…") || textWidth(short, 12, false) > 100 {
		t.Errorf("%q is %v wide", short, textWidth(short, 12, false))
	}
	if s, cut := clipText("brief", 100, 12, false); cut || s != "brief" {
		t.Errorf("%q was cut", s)
	}
	for _, l := range wrapText("one two three four five", 60, 12, 2, false) {
		if textWidth(l, 12, false) > 60 {
			t.Errorf("%q is wider than its line", l)
		}
	}
}

func TestCleanText(t *testing.T) {
	for _, h := range append([]string{"plain", "Überprüfung", "שלום", "a\u2068b"}, hostile...) {
		once := cleanText(h)
		if twice := cleanText(once); twice != once {
			t.Errorf("cleaning %.20q twice gives %.20q, once %.20q", h, twice, once)
		}
		if strings.ContainsAny(once, "\x00\x1b\a\n\t\u202e\u2028\u0085") {
			t.Errorf("%.30q still holds control characters", once)
		}
	}
	if got := cleanText("שלום"); got != "\u2068שלום\u2069" {
		t.Errorf("right to left is not set apart: %q", got)
	}
}
