package check

import (
	"regexp"

	"footing/plan/result"
	"footing/reports"
)

var (
	sinceSection = regexp.MustCompile(`^Since edition \d+$`)
	sinceLine    = regexp.MustCompile(`^Since edition \d+`) // the line of the answer that tells what changed
)

// setAside takes out what can't be computed from the report: the comparison with earlier editions. With a check it is listed there.
func setAside(out *result.Check, numbers []reports.PrintedNumber) []reports.PrintedNumber {
	var keep []reports.PrintedNumber
	for _, n := range numbers {
		if !sinceSection.MatchString(n.Section) && !sinceLine.MatchString(n.Label) && !(n.Section == "" && editionWords.MatchString(n.Label)) {
			keep = append(keep, n)
			continue
		}
		if out == nil {
			continue
		}
		section := n.Section
		if section == "" {
			section = "the edition's number"
		}
		if last := len(out.Unchecked) - 1; last >= 0 && out.Unchecked[last].Section == section {
			out.Unchecked[last].Numbers++
			continue
		}
		out.Unchecked = append(out.Unchecked, result.Unchecked{Section: section, Numbers: 1, Why: "it comes from the kept editions, which a report does not carry"})
	}
	return keep
}

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
