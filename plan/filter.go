package plan

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"

	"footing/importers"
	"footing/internal/finding"
)

// condition is one line of keep where: "year >= 2005", "risk of bias != high", "setting in ward, home".
type condition struct {
	text   string // as typed
	column string // folded
	op     string // =, !=, <, <=, >, >=, in, not in
	values []string
}

var conditionForm = regexp.MustCompile(`^\s*(.+?)\s*(<=|>=|!=|==|=|<|>|≤|≥|≠|\s+not\s+in(?:\s+|\b)|\s+in(?:\s+|\b))\s*(.+?)\s*$`)

// parseCondition reads one condition; its column is checked against the sheet later.
func parseCondition(text string) (condition, bool) {
	m := conditionForm.FindStringSubmatch(text)
	if m == nil {
		return condition{}, false
	}
	c := condition{text: text, column: foldWords(unquote(m[1])), op: strings.Join(strings.Fields(m[2]), " ")}
	switch c.op {
	case "==":
		c.op = "="
	case "≤":
		c.op = "<="
	case "≥":
		c.op = ">="
	case "≠":
		c.op = "!="
	}
	if c.op == "in" || c.op == "not in" {
		list := strings.TrimSpace(m[3])
		list = strings.TrimSuffix(strings.TrimPrefix(strings.TrimSuffix(strings.TrimPrefix(list, "["), "]"), "("), ")")
		for _, v := range strings.Split(list, ",") {
			c.values = append(c.values, unquote(strings.TrimSpace(v)))
		}
		return c, true
	}
	c.values = []string{unquote(m[3])}
	return c, true
}

func unquote(s string) string {
	s = strings.TrimSpace(s)
	if len(s) >= 2 && (s[0] == '"' || s[0] == '\'') && s[len(s)-1] == s[0] {
		return s[1 : len(s)-1]
	}
	return s
}

func foldWords(s string) string { return strings.ToLower(strings.Join(strings.Fields(s), " ")) }

// parseConditions reads all conditions and checks that the sheet has their columns.
func parseConditions(f *File, s *importers.Sheet) ([]condition, error) {
	var out []condition
	var ps finding.Problems
	bad := func(kind, what, mend string) {
		ps = append(ps, finding.Finding{Severity: finding.Error, Kind: kind, Place: finding.Place{File: f.Path}, What: what, Mend: mend})
	}
	known := map[string]bool{"year": true, "relevance": true, "risk of bias": true, "study": true, "subgroup": true, "status": true}
	names := []string{}
	for _, h := range s.Headings {
		for _, n := range []string{string(h.Meaning), foldWords(h.Typed)} {
			if n != "" && !known[n] {
				known[n] = true
				names = append(names, n)
			}
		}
	}
	for _, t := range f.Evidence.KeepWhere {
		c, ok := parseCondition(t)
		switch {
		case !ok:
			bad("condition-not-understood", fmt.Sprintf("keep where: %q is no condition", t), "write a column, a comparison (=, !=, <, <=, >, >=, in) and a value, such as year >= 2005")
			continue
		case !known[c.column]:
			bad("condition-column-unknown", fmt.Sprintf("keep where: the sheet has no column %q", c.column), "it has: year, relevance, risk of bias, study, subgroup, status, "+strings.Join(names, ", "))
			continue
		case strings.ContainsAny(c.op, "<>"):
			if _, err := strconv.ParseFloat(c.values[0], 64); err != nil {
				bad("condition-not-understood", fmt.Sprintf("keep where: %q compares with %q, which is no number", t, c.values[0]), "use = or != for words")
				continue
			}
		}
		out = append(out, c)
	}
	if len(ps) > 0 {
		return nil, ps
	}
	return out, nil
}

// keeps decides one record; why says what speaks against it. A record that doesn't state the figure is left out by
// every comparison but != and not in.
func (c condition) keeps(r *importers.Record) (ok bool, why string) {
	text, number, isNumber := lookUp(r, c.column)
	if text == "" {
		if c.op == "!=" || c.op == "not in" {
			return true, ""
		}
		return false, fmt.Sprintf("%s is not given, and the plan keeps rows with %s", c.column, c.text)
	}
	equal := func(v string) bool {
		if want, err := strconv.ParseFloat(v, 64); err == nil && isNumber {
			return number == want
		}
		return foldWords(v) == foldWords(text)
	}
	switch c.op {
	case "=", "!=":
		ok = equal(c.values[0]) == (c.op == "=")
	case "in", "not in":
		found := false
		for _, v := range c.values {
			found = found || equal(v)
		}
		ok = found == (c.op == "in")
	default:
		want, _ := strconv.ParseFloat(c.values[0], 64)
		ok = isNumber && map[string]bool{"<": number < want, "<=": number <= want, ">": number > want, ">=": number >= want}[c.op]
	}
	if ok {
		return true, ""
	}
	return false, fmt.Sprintf("%s is %s, and the plan keeps rows with %s", c.column, text, c.text)
}

// lookUp finds a column's value in a record, by meaning first, then by heading as typed.
func lookUp(r *importers.Record, column string) (text string, number float64, isNumber bool) {
	switch column {
	case "year":
		if r.Year != 0 {
			return strconv.Itoa(r.Year), float64(r.Year), true
		}
		return "", 0, false
	case "relevance":
		if r.HasRelevance {
			return strconv.FormatFloat(r.Relevance, 'g', -1, 64), r.Relevance, true
		}
		return "", 0, false
	case "risk of bias":
		return r.RiskOfBias, 0, false
	case "study":
		return r.Study, 0, false
	case "subgroup":
		return r.Subgroup, 0, false
	case "status":
		return r.Status, 0, false
	}
	cells := r.Cells()
	for _, byMeaning := range []bool{true, false} {
		for _, c := range cells {
			if byMeaning && string(c.Meaning) == column || !byMeaning && foldWords(c.Heading) == column {
				v, ok := importers.ParseNumber(c.Text)
				return strings.TrimSpace(c.Text), v, ok
			}
		}
	}
	return "", 0, false
}
