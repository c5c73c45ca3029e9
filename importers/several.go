package importers

import (
	"fmt"
	"slices"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
)

// severalForms are the headings that announce several figures a cell: what stands in them, in order, and the figures.
// The mark ! asks for a bracket or another sign between them, since "SE of the estimate" is one figure; the mark / asks for
// a slash or the word of.
var severalForms = map[string]string{
	"mean sd": "mean|sd", "!mean se": "mean|se", "mean ci": "mean|ci lower|ci upper", "n mean sd": "n|mean|sd", "mean sd n": "mean|sd|n",
	"!n mean se": "n|mean|se", "median iqr": "median|q1|q3", "median range": "median|min|max", "n median iqr": "n|median|q1|q3", "median q1 q3": "median|q1|q3",
	"q1 q3": "q1|q3", "min max": "min|max", "iqr": "q1|q3", "range": "min|max", "/events n": "events|n", "/events total": "events|n",
	"n %": "events|proportion", "/events n %": "events|n|proportion", "/events total %": "events|n|proportion", "mean median": "",
}

// severalPlain are the same about the comparison as a whole.
var severalPlain = map[string]string{
	"ci": "ci lower|ci upper", "estimate ci": "estimate|ci lower|ci upper", "!estimate se": "estimate|standard error", "!estimate variance": "estimate|variance",
	"difference ci": "mean difference|difference ci lower|difference ci upper", "!difference se": "mean difference|difference se", "!difference sd": "mean difference|difference sd",
	"coefficient ci": "coefficient|ci lower|ci upper", "!coefficient se": "coefficient|standard error", "beta ci": "standardized beta|ci lower|ci upper", "!beta se": "standardized beta|standard error",
}

// announced is what a heading of several figures a cell names, in the order in which it does.
type announced struct {
	list        []string // figures, "%" among them
	arm, second string   // groups; the second one in "n (treatment/control)"
	weak        bool
	time        string
	log         bool
	scale       effect.Scale
}

// announce collects the features; false when a side ("lower") says that the heading is about one limit.
func announce(fs []feature) (a announced, ok bool) {
	maybe := ""
	for i, g := range fs {
		switch {
		case g.side != "" && !g.weak:
			return a, false
		case g.arm != "" && (g.base == "" || i > 0 && g.weak):
			if a.arm != "" && a.arm != g.arm {
				a.second = g.arm
				a.weak = a.weak || g.weak
				continue
			}
			a.arm, a.weak = g.arm, g.weak
		case g.percent:
			a.list = append(a.list, "%")
		case g.base != "" && !slices.Contains(a.list, g.base):
			a.list = append(a.list, g.base)
		}
		a.time += g.time
		if g.maybe != "" {
			maybe = g.maybe
		}
		a.log = a.log || g.log
		if g.scale != "" {
			a.scale = g.scale
		}
	}
	if a.time == "post" {
		a.time = ""
	}
	if a.arm == "" && maybe != "" {
		a.arm, a.weak = maybe, true
	}
	return a, true
}

// composeSeveral reads a heading that announces several figures a cell.
func (u *understood) composeSeveral(fs []feature, marked, slashed bool) bool {
	a, ok := announce(fs)
	if !ok {
		return false
	}
	key := strings.Join(a.list, " ")
	if a.second != "" { // "n (treatment/control)"
		form, armed := strings.CutPrefix(bases[key], "arm ")
		if !armed || !slashed || a.time != "" {
			return false
		}
		u.meaning, u.weakArm = joinMeanings(Meaning(a.arm+" "+form), Meaning(a.second+" "+form)), a.weak
		return true
	}
	form, armed := severalForm(key, marked, slashed)
	timed := key == "mean sd" && (a.time == "pre" || a.time == "change")
	if form == "" || a.arm != "" && !armed && key != "ci" || a.time != "" && !timed {
		return false
	}
	var out []Meaning
	for _, p := range strings.Split(form, "|") {
		if a.time != "" {
			p = a.time + " " + p
		}
		if a.arm != "" {
			p = a.arm + " " + p
		}
		out = append(out, Meaning(p))
	}
	u.meaning, u.scale, u.log, u.weakArm, u.percent = joinMeanings(out...), a.scale, a.log, a.weak, slices.Contains(a.list, "%")
	return true
}

// severalForm finds the form of a heading; armed when it is about groups.
func severalForm(key string, marked, slashed bool) (form string, armed bool) {
	if form, armed = severalForms[key]; armed {
		return form, true
	}
	if slashed {
		if form, armed = severalForms["/"+key]; armed {
			return form, true
		}
	}
	if marked {
		if form, armed = severalForms["!"+key]; armed {
			return form, true
		}
	}
	if form = severalPlain[key]; form == "" && marked {
		form = severalPlain["!"+key]
	}
	return form, false
}

// several reads a cell that holds several figures: by its column's meaning when that names them, else by what its form
// can only mean.
func (r *recordReader) several(rec *Record, c *cell, col *column, at string) bool {
	comp, ok := parseComposite(c.text, r.mark)
	if !ok {
		return false
	}
	parts := col.Meaning.parts()
	if len(parts) == 1 {
		parts = comp.implied(parts[0])
	} else {
		parts = comp.named(parts)
	}
	if parts == nil {
		return r.sayUnclear(rec, c, col, at, &comp)
	}
	if comp.level != 0 && !r.rep.CILevel.Given {
		*places[r.placeOf(CILevel)](&r.rep) = effect.Figure{Value: comp.level, Given: true, Decimals: -1, Cell: at}
	}
	if lower, upper, ok := comp.limits(parts); ok && lower > upper {
		r.tell(finding.Error, "limits-in-wrong-order", rec, at, c.text, fmt.Sprintf("in %q the lower limit is above the upper one; the cell is not used", shorten(c.text)), "check the figures")
		return true
	}
	for i, m := range parts {
		if m != "" {
			r.store(rec, m, comp.values[i], c, col, at)
		}
	}
	return true
}

// limits finds the interval among the parts.
func (c *composite) limits(parts []Meaning) (lower, upper float64, ok bool) {
	found := 0
	for i, m := range parts {
		switch {
		case strings.HasSuffix(string(m), "ci lower") || strings.HasSuffix(string(m), "q1") || strings.HasSuffix(string(m), " min"):
			lower = c.values[i].value
			found++
		case strings.HasSuffix(string(m), "ci upper") || strings.HasSuffix(string(m), "q3") || strings.HasSuffix(string(m), " max"):
			upper = c.values[i].value
			found++
		}
	}
	return lower, upper, found == 2
}

// named fits the numbers of a cell to the parts that its column names.
func (c *composite) named(parts []Meaning) []Meaning {
	last := string(parts[len(parts)-1])
	switch c.shape {
	case "#±#", "#(±#)", "#(#)", "#,#", "(#,#)", "#/#", "#(#%)", "#%(#)":
		if len(parts) != 2 || len(c.values) != 2 {
			return nil
		}
		if c.shape == "#%(#)" && strings.HasSuffix(last, "proportion") {
			return []Meaning{parts[1], parts[0]}
		}
		return parts
	case "#(#,#)", "#,#,#", "#,#(#)", "#,#±#", "#/#(#%)", "#(#)#", "#±#(#)":
		if len(parts) == 3 {
			return parts
		}
		if len(parts) == 2 && c.shape == "#/#(#%)" {
			return []Meaning{parts[0], parts[1], ""}
		}
	case "#,#(#,#)":
		if len(parts) == 4 {
			return parts
		}
	case "#":
		switch strings.TrimPrefix(strings.TrimPrefix(string(parts[0]), "treatment "), "control ") {
		case "mean", "median", "estimate", "mean difference", "coefficient", "standardized beta", "change mean", "pre mean":
			return parts[:1]
		}
	}
	return nil
}

// implied says what a cell of several numbers means under a heading that names one figure, where its form leaves no doubt.
func (c *composite) implied(m Meaning) []Meaning {
	arm, tail := "", string(m)
	for _, a := range []string{"treatment ", "control "} {
		if rest, ok := strings.CutPrefix(tail, a); ok {
			arm, tail = a, rest
		}
	}
	prefixed := func(s string) Meaning { return Meaning(arm + s) }
	between := func() bool { return c.values[1].value <= c.values[0].value && c.values[0].value <= c.values[2].value }
	switch tail + " " + c.shape {
	case "estimate #(#,#)", "coefficient #(#,#)", "standardized beta #(#,#)":
		if between() {
			return []Meaning{m, CILower, CIUpper}
		}
	case "mean difference #(#,#)":
		if between() {
			return []Meaning{m, "difference ci lower", "difference ci upper"}
		}
	case "mean #(#,#)":
		if c.level != 0 && between() {
			return []Meaning{m, prefixed("ci lower"), prefixed("ci upper")}
		}
	case "median #(#,#)":
		if between() {
			return []Meaning{m, prefixed("q1"), prefixed("q3")}
		}
	case "events #/#", "proportion #/#":
		return []Meaning{prefixed("events"), prefixed("n")}
	case "events #/#(#%)", "proportion #/#(#%)":
		return []Meaning{prefixed("events"), prefixed("n"), ""}
	case "events #(#%)", "proportion #(#%)", "n #(#%)":
		return []Meaning{prefixed("events"), prefixed("proportion")}
	case "proportion #%(#/#)", "proportion #(#/#)":
		return []Meaning{"", prefixed("events"), prefixed("n")}
	case "t t(#)=#", "t t(#)=#,p#", "t t(#)=#,p=#", "p t(#)=#,p=#", "p t(#)=#,p#":
		return []Meaning{"df", "t", P}[:len(c.values)]
	case "f f(#,#)=#", "f f(#,#)=#,p=#", "f f(#,#)=#,p#", "p f(#,#)=#,p=#", "p f(#,#)=#,p#":
		return []Meaning{"numerator df", "df", "f", P}[:len(c.values)]
	case "chi-square chi(#)=#", "chi-square chi(#)=#,p=#", "chi-square chi(#)=#,p#":
		if c.values[0].value == 1 {
			return []Meaning{"", "chi-square", P}[:len(c.values)]
		}
	case "p p=#", "p p#", "t t=#", "f f=#", "z z=#", "r r=#", "n n=#", "mean m=#", "sd sd=#", "estimate d=#", "estimate g=#", "estimate or=#", "estimate hr=#", "estimate rr=#", "se se=#", "standard error se=#":
		return []Meaning{m}
	case "r r(#)=#":
		return []Meaning{"", "r"}
	}
	return nil
}

// sayUnclear reports a cell whose second number has no name; the first is used where it can only be the mean.
func (r *recordReader) sayUnclear(rec *Record, c *cell, col *column, at string, comp *composite) bool {
	m := string(col.Meaning)
	if (comp.shape == "#(#)" || comp.shape == "#±#" || comp.shape == "#(±#)") && (strings.HasSuffix(m, "mean") || m == "estimate" || m == "mean difference") {
		what := "a standard deviation or a standard error"
		mend := fmt.Sprintf("write the heading as %q or %q", col.Typed+" (SD)", col.Typed+" (SE)")
		r.tell(finding.Error, "second-figure-unclear", rec, at, c.text, fmt.Sprintf("in %q the second number may be %s; only the first is used", shorten(c.text), what), mend)
		r.store(rec, col.Meaning, comp.values[0], c, col, at)
		return true
	}
	return false
}

// spreadsheetDate: a text such as "5-Dec" or "Mar-12", which a spreadsheet program made of 5/12 or 3-12.
func spreadsheetDate(s string) bool {
	s = strings.ToLower(strings.TrimSpace(plainText(s)))
	a, b, ok := strings.Cut(s, "-")
	if !ok || len(a) > 4 || len(b) > 4 || a == "" || b == "" {
		return false
	}
	if isDigit(b[0]) {
		a, b = b, a
	}
	return allDigits(a) && slices.Contains([]string{"jan", "feb", "mar", "apr", "may", "jun", "jul", "aug", "sep", "sept", "oct", "nov", "dec"}, b)
}
