package plan

import (
	"maps"
	"strings"

	"footing/importers"
)

// Added is a sheet of new studies, read by the plan that they are to join.
type Added struct {
	New     *EvidenceRead
	Old     *importers.Sheet
	Options importers.Options // by which Old was read
}

// ReadAdded reads new studies from a spreadsheet of their own, with the plan's scale, direction and names of groups.
func ReadAdded(f *File, from, sheet string) (*Added, error) {
	full, _ := f.WithDefaults()
	ev, err := ReadEvidence(full)
	if err != nil {
		return nil, err
	}
	opt := importers.Options{SheetName: full.Evidence.Sheet, Columns: full.Evidence.Columns, Groups: full.Study.Groups, Name: full.Evidence.File,
		Encoding: full.Evidence.Encoding, Decimal: full.Evidence.DecimalMark}
	old, err := importers.Read(full.EvidencePath(), opt)
	if err != nil {
		return nil, err
	}
	g := *full
	g.Path = "" // the new sheet is named as the person named it, not relative to the plan
	g.Evidence.File, g.Evidence.Sheet, g.Evidence.Decisions, g.Evidence.KeepWhere, g.Pool.Scale = from, sheet, nil, nil, string(ev.Scale)
	g.Pool.SubgroupBy, g.Pool.Relevance, g.Evidence.Encoding, g.Evidence.DecimalMark = "", "", "", ""
	g.Evidence.Columns = columnsThere(full.Evidence.Columns, from, sheet, full.Study.Groups)
	added, err := ReadEvidence(&g)
	if err != nil {
		return nil, err
	}
	return &Added{New: added, Old: old, Options: opt}, nil
}

// columnsThere keeps of the plan's columns: those whose heading the new sheet has.
func columnsThere(columns map[string]string, from, sheet string, groups []string) map[string]string {
	if len(columns) == 0 {
		return nil
	}
	out := maps.Clone(columns)
	s, err := importers.Read(from, importers.Options{SheetName: sheet, Groups: groups})
	if err != nil {
		return out
	}
	have := map[string]bool{}
	for _, h := range s.Headings {
		have[strings.ToLower(strings.TrimSpace(h.Typed))] = true
	}
	for meaning, heading := range columns {
		if !have[strings.ToLower(strings.TrimSpace(heading))] {
			delete(out, meaning)
		}
	}
	return out
}
