package importers

import (
	"fmt"
	"strconv"

	"footing/meta/effect"
)

// Comparison holds two extractions of the same studies side by side: two people read the same papers, and each
// difference is for them to settle.
type Comparison struct {
	A           string       `json:"a"` // file names
	B           string       `json:"b"`
	Studies     int          `json:"studies"`  // in both
	Compared    int          `json:"compared"` // figures and judgements that at least one sheet states for a study in both
	Equal       int          `json:"equal"`
	Differences []Difference `json:"differences"`
	OnlyA       []Missing    `json:"onlyA"`
	OnlyB       []Missing    `json:"onlyB"`
}

// Difference is one figure or judgement on which the sheets disagree; an empty text means that the sheet doesn't state it.
type Difference struct {
	Study   string  `json:"study"` // as in sheet A
	Meaning Meaning `json:"meaning"`
	CellA   string  `json:"cellA"` // addresses, "" where there is no cell
	CellB   string  `json:"cellB"`
	TextA   string  `json:"textA"` // as typed
	TextB   string  `json:"textB"`
}

// Missing is a study that only one sheet has.
type Missing struct {
	Study string `json:"study"`
	Row   int    `json:"row"`
	Near  string `json:"near"` // label in the other sheet that is nearly the same, "" when there is none
}

// Compare matches the studies of two sheets by label (the first row of a label with the first, the second with the
// second, ...) and compares every figure and judgement by what it means, so that the sheets may be laid out differently.
func Compare(a, b *Sheet) Comparison {
	out := Comparison{A: a.File, B: b.File, Differences: []Difference{}, OnlyA: []Missing{}, OnlyB: []Missing{}}
	index := map[string][]int{}
	for i := range b.Records {
		k := foldHeading(b.Records[i].Study)
		index[k] = append(index[k], i)
	}
	taken := make([]bool, len(b.Records))
	for i := range a.Records {
		r := &a.Records[i]
		k := foldHeading(r.Study)
		if len(index[k]) == 0 {
			out.OnlyA = append(out.OnlyA, Missing{Study: r.Study, Row: r.Row})
			continue
		}
		j := index[k][0]
		index[k] = index[k][1:]
		taken[j] = true
		out.Studies++
		out.compare(r, &b.Records[j])
	}
	for j := range b.Records {
		if !taken[j] {
			out.OnlyB = append(out.OnlyB, Missing{Study: b.Records[j].Study, Row: b.Records[j].Row})
		}
	}
	pairUp(out.OnlyA, out.OnlyB)
	return out
}

// pairUp names for each study without a partner the one that is probably meant.
func pairUp(a, b []Missing) {
	if len(a)*len(b) > 250_000 {
		return
	}
	labels := func(ms []Missing) []string {
		out := make([]string, len(ms))
		for i, m := range ms {
			out[i] = m.Study
		}
		return out
	}
	for i := range a {
		a[i].Near = nearest(a[i].Study, labels(b))
	}
	for i := range b {
		b[i].Near = nearest(b[i].Study, labels(a))
	}
}

// stated is one thing that a record says.
type stated struct {
	meaning    Meaning
	value      string // comparable
	cell, text string
}

// statements lists what a record says, in a fixed order of meanings.
func statements(r *Record) map[Meaning]stated {
	out := map[Meaning]stated{}
	byCell := map[string]string{}
	for _, c := range r.Cells() {
		byCell[c.Address] = c.Text
		if c.Meaning == Year || c.Meaning == RiskOfBias || c.Meaning == Relevance || c.Meaning == Subgroup || c.Meaning == Status || c.Meaning == Direction {
			out[c.Meaning] = stated{c.Meaning, foldHeading(c.Text), c.Address, c.Text}
		}
	}
	if s, ok := out[RiskOfBias]; ok && r.RiskOfBias != "" {
		s.value = r.RiskOfBias
		out[RiskOfBias] = s
	}
	if r.Year != 0 {
		s := out[Year]
		s.meaning, s.value = Year, strconv.Itoa(r.Year)
		if s.text == "" {
			s.text = s.value
		}
		out[Year] = s
	}
	if r.HasRelevance {
		s := out[Relevance]
		s.value = fmt.Sprint(r.Relevance)
		out[Relevance] = s
	}
	keep := func(m Meaning, f *effect.Figure) {
		if f.Given {
			out[m] = stated{m, fmt.Sprint(f.Value, f.Bound), f.Cell, byCell[f.Cell]}
		}
	}
	rep := r.Reported()
	for _, m := range plainOrder {
		if get := figures[m]; get != nil && m != "point-biserial r" {
			keep(m, get(&rep))
		}
	}
	for _, m := range armOrder {
		if get := armFigures[m]; get != nil {
			keep("treatment "+m, get(&rep.Treatment))
			keep("control "+m, get(&rep.Control))
		}
	}
	return out
}

func (c *Comparison) compare(a, b *Record) {
	sa, sb := statements(a), statements(b)
	for _, m := range Meanings() {
		x, inA := sa[m]
		y, inB := sb[m]
		if !inA && !inB || (!inA || isMissing(x.text)) && (!inB || isMissing(y.text)) {
			continue
		}
		c.Compared++
		if inA && inB && x.value == y.value {
			c.Equal++
			continue
		}
		c.Differences = append(c.Differences, Difference{Study: a.Study, Meaning: m, CellA: x.cell, CellB: y.cell, TextA: x.text, TextB: y.text})
	}
}
