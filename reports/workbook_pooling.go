package reports

import (
	"fmt"

	"github.com/xuri/excelize/v2"

	"footing/plan/result"
)

// The rows of the sheet of live formulas: totals above, studies from firstStudy on.
const firstStudy = 25

// pooling writes the common-effect and DerSimonian-Laird pooling as live formulas, each with its value, so that a reviewer can follow the arithmetic and change a
// cell. It is written as a stream, which alone keeps a formula's value beside it. The values are the sums that the formulas stand for.
func (b *book) pooling() {
	const name = "Pooling"
	b.sheet(name)
	w, err := b.f.NewStreamWriter(name)
	if err != nil {
		b.keep(err)
		return
	}
	b.keep(w.SetColWidth(1, 1, 34))
	b.keep(w.SetColWidth(2, 12, 15))
	rows := studyRows(b.p.Pool)
	last := firstStudy + len(rows) - 1
	live := func(value float64, formula string) excelize.Cell {
		return excelize.Cell{StyleID: b.live[formatOf(value)], Formula: formula, Value: value}
	}
	for i, l := range poolingTotals(b.p.Pool, rows, last) {
		cells := []any{excelize.Cell{Value: l.words}}
		if l.formula != "" {
			cells = append(cells, live(l.value, l.formula))
		}
		if l.note != "" {
			cells = append(cells, excelize.Cell{Value: l.note})
		}
		b.keep(w.SetRow(fmt.Sprintf("A%d", i+1), cells))
	}
	heads := []any{}
	for _, h := range []string{"study", "row", "estimate y", "variance v", "w = 1/v", "w y", "w (y - mean)²", "w²", "w* = 1/(v + tau²)", "w* y", "w* (y - mean*)²"} {
		heads = append(heads, excelize.Cell{StyleID: b.head, Value: h})
	}
	b.keep(w.SetRow(fmt.Sprintf("A%d", firstStudy-1), heads))
	for i, r := range rows {
		n := firstStudy + i
		b.keep(w.SetRow(fmt.Sprintf("A%d", n), []any{
			excelize.Cell{Value: sheetText(r.study)}, r.row,
			live(r.y, fmt.Sprintf("Estimates!F%d", r.at)), live(r.v, fmt.Sprintf("Estimates!G%d", r.at)),
			live(r.w, fmt.Sprintf("1/D%d", n)), live(r.w*r.y, fmt.Sprintf("E%d*C%d", n, n)), live(r.q, fmt.Sprintf("E%d*(C%d-$B$5)^2", n, n)), live(r.w*r.w, fmt.Sprintf("E%d^2", n)),
			live(r.ws, fmt.Sprintf("1/(D%d+$B$12)", n)), live(r.ws*r.y, fmt.Sprintf("I%d*C%d", n, n)), live(r.qs, fmt.Sprintf("I%d*(C%d-$B$14)^2", n, n)),
		}))
	}
	b.keep(w.Flush())
}

type poolingRow struct {
	study        string
	row, at      int // in the evidence sheet, on the sheet Estimates
	y, v         float64
	w, ws, q, qs float64
}

func studyRows(p *result.Pool) []poolingRow {
	var rows []poolingRow
	for i, s := range p.Studies {
		if s.Used && s.Estimate != nil && s.Variance != nil {
			rows = append(rows, poolingRow{study: s.Study, row: s.Row, at: i + 2, y: *s.Estimate, v: *s.Variance, w: 1 / *s.Variance})
		}
	}
	return rows
}

type poolingLine struct {
	words   string
	value   float64
	formula string
	note    string
}

// poolingTotals are the lines above the studies. The statistics are those of the result; only the plain sums between them are added up here.
func poolingTotals(p *result.Pool, rows []poolingRow, last int) []poolingLine {
	var dl *result.Estimator
	for i := range p.Estimators {
		if p.Estimators[i].Name == "dersimonian-laird" {
			dl = &p.Estimators[i]
		}
	}
	if dl == nil || dl.TauSquared == nil || dl.Estimate == nil || p.Common.Estimate == nil {
		return nil
	}
	tau, mean, common := *dl.TauSquared, *dl.Estimate, *p.Common.Estimate
	var sw, swy, sw2, q, sws, swsy, qs float64
	for i := range rows {
		r := &rows[i]
		r.ws = 1 / (r.v + tau)
		r.q, r.qs = r.w*(r.y-common)*(r.y-common), r.ws*(r.y-mean)*(r.y-mean)
		sw, swy, sw2, q = sw+r.w, swy+r.w*r.y, sw2+r.w*r.w, q+r.q
		sws, swsy, qs = sws+r.ws, swsy+r.ws*r.y, qs+r.qs
	}
	col := func(c string) string { return fmt.Sprintf("%s%d:%s%d", c, firstStudy, c, last) }
	sum := func(c string) string { return "SUM(" + col(c) + ")" }
	k := len(rows)
	level := fmt.Sprintf("%g", 1-p.Level)
	out := []poolingLine{
		{words: "Common-effect and DerSimonian-Laird pooling, live: change a cell and follow it", note: ""},
		{words: "studies", value: float64(k), formula: "COUNT(" + col("C") + ")"},
		{words: "sum of w", value: sw, formula: sum("E")},
		{words: "sum of w y", value: swy, formula: sum("F")},
		{words: "common-effect mean", value: common, formula: "B4/B3"},
		{words: "its standard error", value: valueOf(p.Common.StandardError), formula: "1/SQRT(B3)"},
		{words: "its interval, lower", value: p.Common.Interval.Lower, formula: "B5-NORMSINV(1-" + level + "/2)*B6"},
		{words: "its interval, upper", value: p.Common.Interval.Upper, formula: "B5+NORMSINV(1-" + level + "/2)*B6"},
		{words: "Q", value: q, formula: sum("G")},
		{words: "degrees of freedom", value: float64(k - 1), formula: "B2-1"},
		{words: "sum of w²", value: sw2, formula: sum("H")},
	}
	if k < 2 {
		return append(out, poolingLine{words: "tau²", value: 0, formula: "0", note: "one study says nothing about how studies differ"}, poolingLine{words: "sum of w*", value: sws, formula: sum("I")}, poolingLine{words: "random-effects mean", value: mean, formula: sum("J") + "/B13"})
	}
	out = append(out,
		poolingLine{words: "tau², cut at 0", value: tau, formula: "MAX(0,(B9-B10)/(B3-B11/B3))"},
		poolingLine{words: "sum of w*", value: sws, formula: sum("I")},
		poolingLine{words: "random-effects mean", value: mean, formula: sum("J") + "/B13"})
	for _, i := range dl.Intervals {
		if i.Lower == nil || i.Upper == nil || i.StandardError == nil {
			continue
		}
		switch i.Method {
		case "normal":
			out = append(out,
				poolingLine{words: "its standard error, normal theory", value: *i.StandardError, formula: "1/SQRT(B13)"},
				poolingLine{words: "normal interval, lower", value: *i.Lower, formula: "B14-NORMSINV(1-" + level + "/2)*B15"},
				poolingLine{words: "normal interval, upper", value: *i.Upper, formula: "B14+NORMSINV(1-" + level + "/2)*B15"})
		case "hartung-knapp-floored":
			out = append(out,
				poolingLine{words: "Hartung-Knapp factor, not below 1", value: max(1, qs/float64(k-1)), formula: "MAX(1," + sum("K") + "/B10)"},
				poolingLine{words: "Hartung-Knapp (floored), lower", value: *i.Lower, formula: "B14-TINV(" + level + ",B10)*B15*SQRT(B18)"},
				poolingLine{words: "Hartung-Knapp (floored), upper", value: *i.Upper, formula: "B14+TINV(" + level + ",B10)*B15*SQRT(B18)"})
		}
	}
	if h := p.Heterogeneity; h.ISquared != nil && p.Random.Method == "dersimonian-laird" {
		out = append(out, poolingLine{words: "I²", value: *h.ISquared, formula: "IF(B9>0,MAX(0,(B9-B10)/B9),0)"})
	}
	return out
}

func valueOf(x *float64) float64 {
	if x == nil {
		return 0
	}
	return *x
}
