package importers

import "strings"

// nearest gives the candidate that want was probably meant to be, "" when none is near: at most one edit in three
// letters, a swap of neighbours counting as one.
func nearest(want string, candidates []string) string {
	w := []rune(strings.ToLower(strings.TrimSpace(want)))
	if len(w) == 0 || len(w) > 200 {
		return ""
	}
	best, bestAt := "", len(w)/3+1
	for _, c := range candidates {
		r := []rune(strings.ToLower(strings.TrimSpace(c)))
		if len(r)-len(w) >= bestAt || len(w)-len(r) >= bestAt {
			continue
		}
		if d := edits(w, r); d < bestAt {
			best, bestAt = c, d
		}
	}
	return best
}

// Nearest gives the candidate that want was probably meant to be, "" when none is near.
func Nearest(want string, candidates []string) string { return nearest(want, candidates) }

// edits is the number of letters to put in, take out, replace or swap with their neighbour to turn a into b (the
// restricted form of Damerau 1964).
func edits(a, b []rune) int {
	before, last, now := make([]int, len(b)+1), make([]int, len(b)+1), make([]int, len(b)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		now[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			now[j] = min(last[j]+1, now[j-1]+1, last[j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				now[j] = min(now[j], before[j-2]+1)
			}
		}
		before, last, now = last, now, before
	}
	return last[len(b)]
}
