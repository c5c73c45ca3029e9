package edition

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// Match pairs the records of two editions as Compare does: pairs holds indices of a and b.
func Match(a, b []result.Study) (pairs [][2]int, onlyA, onlyB []int) { return matchStudies(a, b) }

// matchStudies pairs the records of two editions: by label; among rows of one label by equal content, then by order;
// what is left by equal content under another label. pairs holds indices of a and b.
func matchStudies(a, b []result.Study) (pairs [][2]int, onlyA, onlyB []int) {
	takenA, takenB := make([]bool, len(a)), make([]bool, len(b))
	pass := func(same func(x, y *result.Study) bool) {
		for i := range a {
			for j := range b {
				if !takenA[i] && !takenB[j] && same(&a[i], &b[j]) {
					takenA[i], takenB[j] = true, true
					pairs = append(pairs, [2]int{i, j})
				}
			}
		}
	}
	pass(func(x, y *result.Study) bool { return label(x) == label(y) && content(x) == content(y) })
	pass(func(x, y *result.Study) bool { return label(x) == label(y) && label(x) != "" })
	pass(func(x, y *result.Study) bool { return content(x) == content(y) && content(x) != "" })
	for i, t := range takenA {
		if !t {
			onlyA = append(onlyA, i)
		}
	}
	for j, t := range takenB {
		if !t {
			onlyB = append(onlyB, j)
		}
	}
	return pairs, onlyA, onlyB
}

func label(s *result.Study) string {
	return strings.Join(strings.Fields(strings.ToLower(s.Study)), " ")
}

// content is a record's cells without its label, whatever row it stands in.
func content(s *result.Study) string {
	var b strings.Builder
	for _, c := range s.Cells {
		if text := strings.TrimSpace(c.Text); text != "" && c.Meaning != "study" {
			fmt.Fprintf(&b, "%s\x1f%s\x1e", heading(c), text)
		}
	}
	return b.String()
}

// heading names a cell's column so that a reworded heading of the same meaning is no change.
func heading(c result.Cell) string {
	if c.Meaning != "" {
		return c.Meaning
	}
	return strings.ToLower(strings.TrimSpace(c.Heading))
}

// change lists what differs between two states of one record, cell by cell.
func change(x, y *result.Study) []result.ValueChange {
	var out []result.ValueChange
	before, order := map[string]result.Cell{}, []string{}
	for _, c := range x.Cells {
		k := heading(c)
		if _, twice := before[k]; !twice {
			order = append(order, k)
		}
		before[k] = c
	}
	seen := map[string]bool{}
	for _, c := range y.Cells {
		k := heading(c)
		if seen[k] {
			continue
		}
		seen[k] = true
		from, to := strings.TrimSpace(before[k].Text), strings.TrimSpace(c.Text)
		if from != to {
			out = append(out, result.ValueChange{Name: cellName(c), From: from, To: to})
		}
	}
	for _, k := range order {
		if !seen[k] && strings.TrimSpace(before[k].Text) != "" {
			out = append(out, result.ValueChange{Name: cellName(before[k]), From: strings.TrimSpace(before[k].Text)})
		}
	}
	if x.Used != y.Used || x.Why != y.Why {
		out = append(out, result.ValueChange{Name: "used", From: usedText(x), To: usedText(y)})
	}
	return out
}

func cellName(c result.Cell) string {
	name := strings.TrimSpace(c.Heading)
	if name == "" {
		name = c.Meaning
	}
	if c.Address == "" {
		return name
	}
	return name + " (" + c.Address + ")"
}

func usedText(s *result.Study) string {
	if s.Used {
		return "yes"
	}
	return "no: " + s.Why
}

// options lists the keys of the plan that differ.
func options(a, b []result.NamedText) []result.ValueChange {
	out := []result.ValueChange{}
	before, seen := map[string]string{}, map[string]bool{}
	for _, o := range a {
		before[o.Name] = o.Text
	}
	for _, o := range b {
		seen[o.Name] = true
		if before[o.Name] != o.Text {
			out = append(out, result.ValueChange{Name: o.Name, From: before[o.Name], To: o.Text})
		}
	}
	for _, o := range a {
		if !seen[o.Name] {
			out = append(out, result.ValueChange{Name: o.Name, From: o.Text})
		}
	}
	return out
}
