package plan

import (
	"fmt"
	"math"

	"footing/internal/finding"
	"footing/meta/effect"
	"footing/plan/result"
)

// The limits of the checks across the rows. They only ask a person to look again (common practice, no source).
const (
	largestSMD  = 3.0  // standard deviations between group means beyond which an effect is rarely real
	clearEffect = 1.96 // standard errors from no effect beyond which a row's sign counts as clear
)

// checkEstimates looks across the estimates for what a slip of typing leaves behind.
func (r *evidenceReader) checkEstimates() {
	r.checkSize()
	r.checkSigns()
	r.checkWithinStudy()
	r.checkChangeScores()
}

// tell adds a finding about the cells that a record's estimate came from.
func (r *evidenceReader) tell(i int, kind, what, mend string) {
	rec, o := &r.sheet.Records[i], &r.outcomes[i]
	at := fmt.Sprintf("row %d", rec.Row)
	if len(o.estimate.Cells) > 0 {
		at = o.estimate.Cells[0]
	}
	text := rec.Study
	for _, c := range rec.Cells() {
		if c.Address == at {
			text = c.Text
		}
	}
	o.findings = append(o.findings, finding.Finding{Severity: finding.Warning, Kind: kind, Place: result.Place{File: r.sheet.File, Sheet: r.sheet.Name, Cell: at}, Study: rec.Study, Text: text, What: what, Mend: mend})
}

// checkSize: standardized differences beyond three standard deviations.
func (r *evidenceReader) checkSize() {
	if r.scale != effect.StandardizedMeanDifference {
		return
	}
	for i, o := range r.outcomes {
		if o.estimate != nil && math.Abs(o.estimate.Value) > largestSMD {
			r.tell(i, "effect-beyond-3-sd", fmt.Sprintf("a standardized mean difference of %.2f is hardly ever real", o.estimate.Value),
				"check that the SDs are no standard errors, and that means and SDs have the same unit")
		}
	}
}

// checkSigns: one row is clearly on the other side of no effect than all rows that are clear.
func (r *evidenceReader) checkSigns() {
	var up, down []int
	for i, o := range r.outcomes {
		if o.estimate == nil || !hasNoEffect(r.scale) {
			continue
		}
		switch z := o.estimate.Value / math.Sqrt(o.estimate.Variance); {
		case z > clearEffect:
			up = append(up, i)
		case z < -clearEffect:
			down = append(down, i)
		}
	}
	odd := up
	if len(down) < len(up) {
		odd = down
	}
	if others := len(up) + len(down) - len(odd); len(odd) != 1 || others < 4 {
		return
	}
	r.tell(odd[0], "sign-against-the-rest", fmt.Sprintf("the effect %.3g is clearly on one side, and all %d other clear effects are on the other", r.outcomes[odd[0]].estimate.Value, len(up)+len(down)-1),
		"check that the groups are not swapped and that a larger value means the same in this study")
}

// hasNoEffect: scales of a comparison, on which 0 is no effect.
func hasNoEffect(s effect.Scale) bool {
	switch s {
	case effect.LogitProportion, effect.Mean, effect.LogSD, effect.LogRate, effect.ICC, effect.CronbachAlpha:
		return false
	}
	return true
}

// checkWithinStudy: rows of one study whose signs differ although one of them is clear.
func (r *evidenceReader) checkWithinStudy() {
	if !hasNoEffect(r.scale) {
		return
	}
	first := map[string]int{}
	for i, o := range r.outcomes {
		if o.estimate == nil {
			continue
		}
		label := foldWords(r.sheet.Records[i].Study)
		j, seen := first[label]
		if !seen {
			first[label] = i
			continue
		}
		a, b := r.outcomes[j].estimate, o.estimate
		clear := math.Abs(a.Value) > clearEffect*math.Sqrt(a.Variance) || math.Abs(b.Value) > clearEffect*math.Sqrt(b.Variance)
		if a.Value*b.Value < 0 && clear {
			r.tell(i, "signs-differ-within-study", fmt.Sprintf("row %d of the same study has the effect %.3g, this one %.3g", r.sheet.Records[j].Row, a.Value, b.Value), "check the direction of both outcomes")
		}
	}
}

// checkChangeScores: standardized differences of change scores among those of final values are different quantities
// (Cochrane Handbook, 10.5.2).
func (r *evidenceReader) checkChangeScores() {
	if r.scale != effect.StandardizedMeanDifference {
		return
	}
	var change, final []int
	for i, o := range r.outcomes {
		if o.estimate == nil {
			continue
		}
		rep := r.sheet.Records[i].Reported()
		for _, c := range o.estimate.Cells {
			if c != "" && (c == rep.Treatment.ChangeMean.Cell || c == rep.Treatment.ChangeSD.Cell) {
				change = append(change, i)
				break
			}
			if c != "" && c == rep.Treatment.Mean.Cell {
				final = append(final, i)
				break
			}
		}
	}
	if len(change) == 0 || len(final) == 0 {
		return
	}
	fewer := change
	if len(final) < len(change) {
		fewer = final
	}
	r.tell(fewer[0], "change-among-final-scores", fmt.Sprintf("%d rows are standardized by the SD of change scores and %d by the SD of final values; these are not the same quantity", len(change), len(final)),
		"use final values throughout, or pool mean differences")
}
