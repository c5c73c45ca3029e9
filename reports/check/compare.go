package check

import (
	"regexp"

	"footing/plan/result"
	"footing/reports"
)

// place is where numbers are held against each other: in their order under one section and label.
type place struct{ section, label string }

func placeOf(n reports.PrintedNumber) place { return place{n.Section, withoutNumbers(n.Label)} }

// compare counts the printed numbers that come out again and lists those that don't, and those that come out and were not printed.
func compare(out *result.Check, printed, computed []reports.PrintedNumber) {
	fresh := map[place][]string{}
	for _, n := range computed {
		fresh[placeOf(n)] = append(fresh[placeOf(n)], n.Text)
	}
	taken := map[place]int{}
	for _, n := range printed {
		out.Numbers++
		at, text := placeOf(n), ""
		if i := taken[at]; i < len(fresh[at]) {
			text = fresh[at][i]
			taken[at]++
		}
		if text == n.Text {
			out.Reproduced++
			continue
		}
		out.Differs = append(out.Differs, result.PrintedDiffers{Section: n.Section, Label: n.Label, Printed: n.Text, Computed: text})
	}
	told := map[place]bool{}
	for _, n := range computed {
		at := placeOf(n)
		if told[at] {
			continue
		}
		told[at] = true
		for _, text := range fresh[at][taken[at]:] {
			out.Differs = append(out.Differs, result.PrintedDiffers{Section: n.Section, Label: n.Label, Computed: text})
		}
	}
}

var digits = regexp.MustCompile(`[0-9][0-9.,\x{202f}]*`)

// withoutNumbers keeps a label's words: a label that holds the number itself would change with it and then match nothing.
func withoutNumbers(label string) string { return digits.ReplaceAllString(label, "#") }
