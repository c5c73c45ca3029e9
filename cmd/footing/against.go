package main

import (
	"footing/importers"
	"footing/plan"
	"footing/plan/result"
	"footing/reports"
)

// against compares two extractions of the same studies cell by cell; the answer is no where they differ.
func (a *app) against(path, other string, f evidenceFlags) error {
	file, err := f.file(path)
	if err != nil {
		return err
	}
	opt := importers.Options{SheetName: file.Evidence.Sheet, Columns: file.Evidence.Columns, Groups: file.Study.Groups}
	first, err := importers.Read(file.EvidencePath(), opt)
	if err != nil {
		return err
	}
	second, err := importers.Read(other, importers.Options{Groups: file.Study.Groups})
	if err != nil {
		return err
	}
	doc := extractions(importers.Compare(first, second))
	if a.json {
		err = a.printJSON(doc)
	} else {
		err = a.print(reports.TextExtractions(doc, a.text()))
	}
	if err == nil && len(doc.Differences)+len(doc.OnlyA)+len(doc.OnlyB) > 0 {
		return answerNo
	}
	return err
}

func extractions(c importers.Comparison) *result.Extractions {
	out := &result.Extractions{Schema: "footing/extractions/1", Tool: plan.ThisTool(), A: c.A, B: c.B, Studies: c.Studies, Compared: c.Compared, Equal: c.Equal,
		Differences: []result.ExtractionDifference{}, OnlyA: []result.OnlyInOne{}, OnlyB: []result.OnlyInOne{}}
	for _, d := range c.Differences {
		out.Differences = append(out.Differences, result.ExtractionDifference{Study: d.Study, Meaning: string(d.Meaning), CellA: d.CellA, TextA: d.TextA, CellB: d.CellB, TextB: d.TextB})
	}
	for _, m := range c.OnlyA {
		out.OnlyA = append(out.OnlyA, result.OnlyInOne(m))
	}
	for _, m := range c.OnlyB {
		out.OnlyB = append(out.OnlyB, result.OnlyInOne(m))
	}
	return out
}
