package choices

import (
	"sort"

	"footing/plan/result"
)

// Sort orders levers by what they save, the largest saving first: by the change of the first group, then, where that is equal (as when fewer people leave), by the number to enrol. Levers without a
// size stand last. The order of equal levers is kept; the argument is left as it is.
func Sort(levers []result.Lever) []result.Lever {
	out := append([]result.Lever{}, levers...)
	sort.SliceStable(out, func(i, j int) bool {
		a, b := out[i], out[j]
		switch {
		case (a.N == nil) != (b.N == nil):
			return a.N != nil
		case a.N == nil:
			return false
		case a.Change != b.Change:
			return a.Change < b.Change
		}
		return enrol(a) < enrol(b)
	})
	return out
}

func enrol(l result.Lever) int {
	if l.ToEnrol == nil {
		return 0
	}
	return l.ToEnrol.Total
}
