package reports

import (
	"fmt"
	"math"
	"strings"

	"footing/plan/result"
)

// The size of the power curve in text: columns of n, rows of a tenth of power each.
const (
	curveColumns = 60
	curveRows    = 10
)

// curve draws power over n of the first group, one mark for each curve, and the target as a line of dots.
func (w *textWriter) curve(curves []result.PowerCurve, target float64, names []string) {
	low, high := 0, 0
	for _, c := range curves {
		for _, p := range c.Points {
			if low == 0 || p.N < low {
				low = p.N
			}
			high = max(high, p.N)
		}
	}
	if high <= low {
		return
	}
	marks := []rune("●○■□▲△")
	cells := make([][]rune, curveRows+1)
	for i := range cells {
		cells[i] = []rune(strings.Repeat(" ", curveColumns))
	}
	row := func(power float64) int { return curveRows - int(math.Max(0, math.Min(1, power))*curveRows+0.5) }
	if target > 0 && target < 1 {
		for x := 0; x < curveColumns; x += 2 {
			cells[row(target)][x] = '·'
		}
	}
	for i, c := range curves {
		for x := range curveColumns {
			n := float64(low) + float64(x)/(curveColumns-1)*float64(high-low)
			if y, ok := powerAt(c.Points, n); ok && !math.IsNaN(y) {
				cells[row(y)][x] = marks[i%len(marks)]
			}
		}
	}
	w.blank()
	w.line("power over n of the first group")
	for i, r := range cells {
		label := ""
		if i%2 == 0 {
			label = fmt.Sprintf("%d%%", 100-10*i)
		}
		w.line("%5s │%s", label, string(r))
	}
	left, right := TermText(wholeText(low)), TermText(wholeText(high))
	w.line("%5s └%s", "", strings.Repeat("─", curveColumns))
	w.line("%5s  %s%s%s", "", left, strings.Repeat(" ", max(1, curveColumns-len(left)-len(right))), right)
	for i, name := range names {
		w.line("       %c %s", marks[i%len(marks)], name)
	}
}

// powerAt reads a curve off between its points; ok is false outside them.
func powerAt(points []result.PowerPoint, n float64) (float64, bool) {
	for i := 1; i < len(points); i++ {
		a, b := points[i-1], points[i]
		if n >= float64(a.N) && n <= float64(b.N) && b.N > a.N {
			return a.Power + (b.Power-a.Power)*(n-float64(a.N))/float64(b.N-a.N), true
		}
	}
	return 0, false
}
