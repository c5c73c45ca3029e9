package plan

import (
	"footing/importers"
	"footing/internal/finding"
	"footing/meta/effect"
	"footing/plan/result"
	"footing/power"
)

// EvidenceRead is the first stage: the sheet, and the estimate that each record yields.
type EvidenceRead struct {
	Sheet     *importers.Sheet
	Scale     effect.Scale
	Info      result.ScaleInfo
	Evidence  result.Evidence
	Studies   []result.Study    // every record in sheet order, used or not; weights still null
	Estimates []effect.Estimate // of the used records
	Index     []int             // Estimates[i] belongs to Studies[Index[i]]
	Findings  []finding.Finding
	// Nuisance are values pooled from the sheet itself, by the words of a plan file ("control sd", "control risk").
	Nuisance map[string]Assumed
}

// BuiltRange is the third stage: what the planned study's effect may be, as records and as live distributions.
type BuiltRange struct {
	*result.Range
	Unadjusted, Adjusted power.Effects // nil where there is none
	// TargetWhy says why another scenario than the one asked for is sized for, "" when it is the one.
	TargetWhy string
	Findings  []finding.Finding
}
