package plan

import (
	"fmt"
	"path/filepath"
	"runtime"
	"sync"

	"footing/importers"
	"footing/plan/edition"
	"footing/plan/result"
)

// The parts of a move in the number to enrol.
var moveParts = []result.MovePart{
	{Name: "studies", Words: "studies that came or went"},
	{Name: "rows", Words: "rows that changed"},
	{Name: "options", Words: "options of the plan"},
}

const (
	partStudies = 1 << iota
	partRows
	partOptions
	allParts
)

// mover holds the two sides of a comparison, each sheet read with each side's options.
type mover struct {
	files [2]*File            // options before and now, defaults filled in
	reads [2][2]*EvidenceRead // [options][sheet]
}

// decompose takes apart what moved the number to enrol from edition e to plan f.
func decompose(f *File, e *edition.Edition) *result.Move {
	out := &result.Move{Parts: []result.MovePart{}, Orders: []result.MoveOrder{}}
	m, err := newMover(f, e)
	if err != nil {
		out.Why = "one side can't be read with the options of the other: " + err.Error()
		return out
	}
	sizes, why := m.sizes()
	if why != "" {
		out.Why = why
		return out
	}
	out.From, out.To = sizes[0], sizes[allParts-1]
	share(out, sizes)
	return out
}

// share averages each part's change over the six orders.
func share(out *result.Move, sizes [allParts]int) {
	out.Parts = append(out.Parts, moveParts...)
	orders := [][3]int{{0, 1, 2}, {0, 2, 1}, {1, 0, 2}, {1, 2, 0}, {2, 0, 1}, {2, 1, 0}}
	totals := [3]int{}
	for _, o := range orders {
		in, line := 0, result.MoveOrder{}
		for _, part := range o {
			step := sizes[in|1<<part] - sizes[in]
			in |= 1 << part
			totals[part] += step
			line.Order = append(line.Order, moveParts[part].Name)
			line.Changes = append(line.Changes, step)
		}
		out.Orders = append(out.Orders, line)
	}
	for part, total := range totals {
		out.Parts[part].Change = float64(total) / float64(len(orders))
	}
}

// newMover reads both sheets with both sets of options.
func newMover(f *File, e *edition.Edition) (*mover, error) {
	before, err := Parse(f.Path, e.Plan.Text())
	if err != nil {
		return nil, err
	}
	m := &mover{}
	paths := [2]string{"", f.EvidencePath()}
	if e.Evidence != nil {
		paths[0] = filepath.Join(edition.Beside(f.Path).Dir, e.Evidence.Copy)
	}
	if (paths[0] == "") != (paths[1] == "") {
		return nil, fmt.Errorf("only one of the two has evidence")
	}
	for o, g := range []*File{before, f} {
		m.files[o], _ = g.WithDefaults()
		if paths[1] == "" {
			continue
		}
		for s, path := range paths {
			h := *m.files[o]
			if h.Evidence.File, err = filepath.Abs(path); err != nil {
				return nil, err
			}
			if m.reads[o][s], err = ReadEvidence(&h); err != nil {
				return nil, err
			}
		}
	}
	return m, nil
}

// sizes are the people to enrol under every set of parts put in; why says which has none.
func (m *mover) sizes() (sizes [allParts]int, why string) {
	var whys [allParts]string
	var group sync.WaitGroup
	slots := make(chan struct{}, runtime.NumCPU())
	for set := range allParts {
		group.Add(1)
		go func() {
			defer group.Done()
			slots <- struct{}{}
			defer func() { <-slots }()
			sizes[set], whys[set] = m.size(set)
		}()
	}
	group.Wait()
	for _, w := range whys {
		if w != "" {
			return sizes, w
		}
	}
	return sizes, ""
}

func (m *mover) size(set int) (int, string) {
	o := 0
	if set&partOptions != 0 {
		o = 1
	}
	f := *m.files[o]
	s := &stages{file: &f, lean: true}
	if m.reads[o][0] != nil {
		s.ev = hybrid(m.reads[o][0], m.reads[o][1], set&partStudies != 0, set&partRows != 0)
	}
	if _, err := s.compute(&f, nil); err != nil {
		return 0, "a mixture of before and now can't be sized: " + err.Error()
	}
	if s.out.Size.Chosen == nil {
		return 0, "a mixture of before and now has no size: " + s.out.AnswerNo
	}
	return s.out.Size.Chosen.ToEnrol.Total, ""
}

// hybrid is the evidence with some of the changes from before to now made: the coming and going of studies, the new
// contents of rows that both have.
func hybrid(before, now *EvidenceRead, studies, rows bool) *EvidenceRead {
	pairs, _, _ := edition.Match(before.Studies, now.Studies)
	toNow, toBefore := map[int]int{}, map[int]int{}
	for _, p := range pairs {
		toNow[p[0]], toBefore[p[1]] = p[1], p[0]
	}
	base, other, across := before, now, toNow
	useOther := rows
	if studies {
		base, other, across = now, before, toBefore
		useOther = !rows
	}
	out := *base
	sheet := *base.Sheet
	sheet.Records = nil
	out.Sheet, out.Studies, out.Estimates, out.Index = &sheet, nil, nil, nil
	for i := range base.Studies {
		from, at := base, i
		if j, paired := across[i]; paired && useOther {
			from, at = other, j
		}
		out.take(from, at)
	}
	out.Evidence.Rows, out.Evidence.Used = len(out.Studies), len(out.Estimates)
	out.Nuisance = poolNuisance(&out)
	return &out
}

// take appends record i of another reading.
func (e *EvidenceRead) take(from *EvidenceRead, i int) {
	var rec importers.Record
	if i < len(from.Sheet.Records) {
		rec = from.Sheet.Records[i]
	}
	e.Sheet.Records = append(e.Sheet.Records, rec)
	e.Studies = append(e.Studies, from.Studies[i])
	for k, at := range from.Index {
		if at == i {
			e.Estimates = append(e.Estimates, from.Estimates[k])
			e.Index = append(e.Index, len(e.Studies)-1)
		}
	}
}
