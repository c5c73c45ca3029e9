package reports

import (
	"fmt"

	"github.com/xuri/excelize/v2"
)

// chart draws the columns from the third on over the second (people in all), beside the table just written, as a chart of the spreadsheet's own that follows its cells.
// The names of the lines are the headings.
func (s *bookSheet) chart(title, upright string, columns int) {
	if s.headed == 0 || s.row <= s.headed+1 || columns < 3 {
		return
	}
	cell := func(column, row int) string {
		at, err := excelize.CoordinatesToCellName(column, row, true)
		s.b.keep(err)
		return fmt.Sprintf("'%s'!%s", s.name, at)
	}
	over := func(column int) string {
		to, err := excelize.CoordinatesToCellName(column, s.row, true)
		s.b.keep(err)
		return cell(column, s.headed+1) + ":" + to
	}
	var lines []excelize.ChartSeries
	for column := 3; column <= columns; column++ {
		ink := chartInks[(column-3)%len(chartInks)]
		lines = append(lines, excelize.ChartSeries{Name: cell(column, s.headed), Categories: over(2), Values: over(column),
			Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{ink}}, Line: excelize.LineOptions{Type: excelize.LineSolid, Width: 2}, Marker: excelize.ChartMarker{Symbol: "none"}})
	}
	zero, one := 0.0, 1.0
	at, err := excelize.CoordinatesToCellName(columns+2, s.headed)
	s.b.keep(err)
	words := func(text string) []excelize.RichTextRun { return []excelize.RichTextRun{{Text: text}} }
	s.b.keep(s.b.f.AddChart(s.name, at, &excelize.Chart{Type: excelize.Scatter, Series: lines, Title: excelize.ChartTitle{Paragraph: words(title)}, Dimension: excelize.ChartDimension{Width: 640, Height: 380},
		Legend: excelize.ChartLegend{Position: "bottom"}, Format: excelize.GraphicOptions{AltText: title + ": the table beside it, drawn"},
		XAxis: excelize.ChartAxis{Title: excelize.ChartTitle{Paragraph: words("people in all")}, Minimum: &zero, MajorGridLines: false}, YAxis: excelize.ChartAxis{Title: excelize.ChartTitle{Paragraph: words(upright)}, Minimum: &zero, Maximum: &one, MajorGridLines: true}}))
}

// chartInks tell lines apart for colour-blind readers too (Okabe & Ito 2008, without the yellow).
var chartInks = []string{"0072B2", "D55E00", "009E73", "CC79A7", "56B4E9", "E69F00"}
