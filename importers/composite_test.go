package importers

import (
	"strings"
	"testing"

	"footing/meta/effect"
)

// figuresOf lists the figures of one record by meaning.
func figuresOf(r Record) map[Meaning]float64 {
	out := map[Meaning]float64{}
	rep := r.Reported()
	for m, get := range figures {
		if f := get(&rep); f.Given && m != "point-biserial r" {
			out[m] = f.Value
		}
	}
	for m, get := range armFigures {
		if get == nil {
			continue
		}
		if f := get(&rep.Treatment); f.Given {
			out["treatment "+m] = f.Value
		}
		if f := get(&rep.Control); f.Given {
			out["control "+m] = f.Value
		}
	}
	return out
}

// How papers print several numbers in one cell: common practice, no source.
func TestCompositeCells(t *testing.T) {
	for _, c := range []struct {
		heading, cell string
		want          map[Meaning]float64
	}{
		{"Mean (SD) control", "12.3 (4.5)", map[Meaning]float64{"control mean": 12.3, "control sd": 4.5}},
		{"Mean ± SD control", "12.3 ± 4.5", map[Meaning]float64{"control mean": 12.3, "control sd": 4.5}},
		{"Mean ± SD control", "-12,3±4,5", map[Meaning]float64{"control mean": -12.3, "control sd": 4.5}},
		{"Mean (SE) control", "12.3 (0.5)", map[Meaning]float64{"control mean": 12.3, "control se": 0.5}},
		{"Mean (95% CI) control", "12.3 (10.1 to 14.5)", map[Meaning]float64{"control mean": 12.3, "control ci lower": 10.1, "control ci upper": 14.5}},
		{"Median (IQR) control", "12 [10–15]", map[Meaning]float64{"control median": 12, "control q1": 10, "control q3": 15}},
		{"Median (range) control", "12 (-3 to 15)", map[Meaning]float64{"control median": 12, "control min": -3, "control max": 15}},
		{"OR (95% CI)", "0.45 [0.20, 0.71]", map[Meaning]float64{"estimate": 0.45, "ci lower": 0.2, "ci upper": 0.71}},
		{"OR (95% CI)", "0.45 [0.20,0.71]", map[Meaning]float64{"estimate": 0.45, "ci lower": 0.2, "ci upper": 0.71}},
		{"OR (95% CI)", "0.45 (95% CI 0.20 to 0.71)", map[Meaning]float64{"estimate": 0.45, "ci lower": 0.2, "ci upper": 0.71}},
		{"OR", "0.45 (90% CI: 0.20-0.71)", map[Meaning]float64{"estimate": 0.45, "ci lower": 0.2, "ci upper": 0.71, "ci level": 0.9}},
		{"estimate", "-0.45 [-0.71, -0.20]", map[Meaning]float64{"estimate": -0.45, "ci lower": -0.71, "ci upper": -0.2}},
		{"estimate", "−0.45 (−0.71 – −0.20)", map[Meaning]float64{"estimate": -0.45, "ci lower": -0.71, "ci upper": -0.2}},
		{"estimate", "0,45 (0,20; 0,71)", map[Meaning]float64{"estimate": 0.45, "ci lower": 0.2, "ci upper": 0.71}},
		{"95% CI", "0.20 to 0.71", map[Meaning]float64{"ci lower": 0.2, "ci upper": 0.71}},
		{"95% CI", "(0.20, 0.71)", map[Meaning]float64{"ci lower": 0.2, "ci upper": 0.71}},
		{"95% CI", "[-0.20 - 0.71]", map[Meaning]float64{"ci lower": -0.2, "ci upper": 0.71}},
		{"events control", "12/48", map[Meaning]float64{"control events": 12, "control n": 48}},
		{"events control", "12 of 48", map[Meaning]float64{"control events": 12, "control n": 48}},
		{"events control", "12/48 (25%)", map[Meaning]float64{"control events": 12, "control n": 48}},
		{"events control", "12 (25%)", map[Meaning]float64{"control events": 12, "control proportion": 0.25}},
		{"n/N control", "12/48", map[Meaning]float64{"control events": 12, "control n": 48}},
		{"n (%) control", "12 (25.0)", map[Meaning]float64{"control events": 12, "control proportion": 0.25}},
		{"risk control", "25%", map[Meaning]float64{"control proportion": 0.25}},
		{"risk control (%)", "25", map[Meaning]float64{"control proportion": 0.25}},
		{"p", "p = .03", map[Meaning]float64{"p": 0.03}},
		{"p", "P<0.001", map[Meaning]float64{"p": 0.001}},
		{"t", "t(45) = 2.3", map[Meaning]float64{"t": 2.3, "df": 45}},
		{"t", "t(45) = −2.3, p = .03", map[Meaning]float64{"t": -2.3, "df": 45, "p": 0.03}},
		{"F", "F(1, 45) = 5.3, p < .05", map[Meaning]float64{"f": 5.3, "numerator df": 1, "df": 45, "p": 0.05}},
		{"chi-square", "χ²(1) = 4.2", map[Meaning]float64{"chi-square": 4.2}},
		{"r", "r = .45", map[Meaning]float64{"r": 0.45}},
		{"n control", "n = 24", map[Meaning]float64{"control n": 24}},
		{"n, mean (SD) control", "24, 12.3 (4.5)", map[Meaning]float64{"control n": 24, "control mean": 12.3, "control sd": 4.5}},
		{"Effect size (SE)", "0.45 (0.12)", map[Meaning]float64{"estimate": 0.45, "standard error": 0.12}},
		{"MD (95% CI)", "-1.2 (-2.5 to 0.1)", map[Meaning]float64{"mean difference": -1.2, "difference ci lower": -2.5, "difference ci upper": 0.1}},
		{"n (treatment/control)", "24/25", map[Meaning]float64{"treatment n": 24, "control n": 25}},
		{"events control", "25%", map[Meaning]float64{"control proportion": 0.25}},
		{"mean control", "12%", map[Meaning]float64{"control mean": 0.12}},
		{"mean control", "12.3 (4.5)", map[Meaning]float64{"control mean": 12.3}},
	} {
		tab := Table{Columns: []NewColumn{{Heading: "study"}, {Heading: c.heading}, {Heading: "year"}}, Rows: [][]any{{"A", c.cell, 2001}}}
		var b strings.Builder
		if err := WriteWorkbook(&b, tab); err != nil {
			t.Fatal(err)
		}
		s := mustRead(t, write(t, "a.xlsx", []byte(b.String())), Options{})
		got := figuresOf(s.Records[0])
		if !strings.Contains(c.heading, "CI") || got[CILevel] == 0.95 {
			if _, asked := c.want[CILevel]; !asked {
				delete(got, CILevel)
			}
		}
		if len(got) != len(c.want) {
			t.Errorf("%s: %q gave %v, want %v (%s)", c.heading, c.cell, got, c.want, kindsOf(s.Findings))
			continue
		}
		for m, v := range c.want {
			if g, ok := got[m]; !ok || g != v {
				t.Errorf("%s: %q gave %v, want %v", c.heading, c.cell, got, c.want)
			}
		}
		if c.heading == "p" && strings.Contains(c.cell, "<") != (s.Records[0].Reported().P.Bound == effect.Below) {
			t.Errorf("%q: bound %v", c.cell, s.Records[0].Reported().P.Bound)
		}
	}
}

func TestCompositeFindings(t *testing.T) {
	for _, c := range []struct{ heading, cell, kind string }{
		{"mean control", "12.3 (4.5)", "second-figure-unclear"}, {"mean control", "12.3 ± 4.5", "second-figure-unclear"}, {"estimate", "0.45 (0.12)", "second-figure-unclear"},
		{"OR (95% CI)", "0.45 (0.71 to 0.20)", "limits-in-wrong-order"}, {"estimate", "0.45 (0.71, 0.80)", "text-in-number-cell"}, {"events control", "5-Dec", "date-in-number-cell"},
		{"events control", "Mar-12", "date-in-number-cell"}, {"Mean (SD) control", "12.3 (4.5", "text-in-number-cell"}, {"Mean (SD) control", "about 12", "text-in-number-cell"},
		{"n control", "24 (12 men)", "text-in-number-cell"}, {"events control", "12/48/3", "text-in-number-cell"}, {"median (IQR) control", "7", ""}, {"95% CI", "0.5", "text-in-number-cell"},
	} {
		s := readCSVText(t, "study\t"+c.heading+"\tyear\nA\t"+c.cell+"\t2001\n", Options{Delimiter: "\t"})
		found := false
		for _, f := range s.Findings {
			found = found || f.Kind == c.kind && f.Place.Cell == "B2" && f.Text == c.cell
		}
		if found != (c.kind != "") {
			t.Errorf("%s: %q gave %s, want %s", c.heading, c.cell, kindsOf(s.Findings), c.kind)
		}
	}
}
