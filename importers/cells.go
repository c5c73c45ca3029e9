package importers

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"footing/internal/finding"
	"footing/meta/effect"
)

// cell reads one cell of a record by what its column means.
func (r *recordReader) cell(rec *Record, c *cell, k int, at string) {
	col := &r.set.list[k]
	switch c.kind {
	case errorCell:
		r.tell(finding.Error, "error-cell", rec, at, c.text, fmt.Sprintf("the cell holds the error %s", shorten(c.text)), "mend the formula in the spreadsheet")
		return
	case valueless:
		r.tell(finding.Error, "formula-without-value", rec, at, "", "the cell holds a formula but no value was stored with it", "open the file in your spreadsheet program and save it")
		return
	}
	if words[col.Meaning] {
		r.word(rec, c, col, at)
		return
	}
	if col.Meaning == Year {
		r.year(rec, c, at)
		return
	}
	r.readFigure(rec, c, k, at)
}

// readFigure reads a cell that should hold one number.
func (r *recordReader) readFigure(rec *Record, c *cell, k int, at string) {
	col := &r.set.list[k]
	if c.kind == dateCell {
		r.tell(finding.Error, "date-in-number-cell", rec, at, c.text, fmt.Sprintf("the cell holds the date %s where %s should stand; spreadsheet programs turn entries such as 5/12 or 1-3 into dates", c.text, col.Meaning),
			"type the figure again in a cell formatted as text or as a number")
		return
	}
	if strings.Contains(string(col.Meaning), " + ") {
		switch {
		case isMissing(c.text):
		case isNotSignificant(c.text):
			r.rep.NotSignificant = true
		case !r.several(rec, c, col, at):
			r.sayFault(rec, c, col, at, numberNot)
		}
		return
	}
	n, fault := r.number(c, col.Meaning)
	switch {
	case fault == numberMissing:
		return
	case fault == numberNot && isNotSignificant(c.text) && takesNotSignificant[col.Meaning]:
		r.rep.NotSignificant = true
		return
	case fault == numberNot && c.kind == textCell && r.several(rec, c, col, at):
		return
	case fault != numberFine:
		r.sayFault(rec, c, col, at, fault)
		return
	}
	m := col.Meaning
	if arm, ok := strings.CutSuffix(string(m), "events"); ok && (n.percent || c.kind == percentCell) && arm != "total " && !strings.HasSuffix(arm, "non-") {
		m = Meaning(arm) + "proportion"
	} else if n.percent && !isShare(m) {
		r.tell(finding.Note, "percent-sign", rec, at, c.text, fmt.Sprintf("%q was read as %s", shorten(c.text), strconv.FormatFloat(n.value/100, 'g', -1, 64)), "")
	}
	r.store(rec, m, n, c, col, at)
}

// isShare: meanings for which a percent sign is nothing special.
func isShare(m Meaning) bool {
	return m == CILevel || m == Relevance || m == P || m == "icc" || strings.HasSuffix(string(m), "proportion")
}

// store keeps one number of a cell as the figure m.
func (r *recordReader) store(rec *Record, m Meaning, n number, c *cell, col *column, at string) {
	f := effect.Figure{Value: n.value, Given: true, Decimals: n.decimals, Bound: n.bound, Cell: at}
	scaleFigure(&f, m, n, c, col)
	if !r.inDomain(rec, m, &f, c, at) {
		return
	}
	if m == Relevance {
		rec.Relevance, rec.HasRelevance = f.Value, true
		return
	}
	if n.starred {
		r.tell(finding.Note, "sign-behind-number", rec, at, c.text, fmt.Sprintf("the signs behind the number in %q were left off", shorten(c.text)), "")
	}
	if rest, ok := strings.CutSuffix(string(m), "non-events"); ok {
		r.nonEvents(rec, rest, f)
		return
	}
	if p := r.placeOf(m); p >= 0 {
		if dst := places[p](&r.rep); !dst.Given {
			*dst = f
		}
	}
	switch m {
	case "point-biserial r":
		r.rep.PointBiserial = true
	case P:
		if col.Sides != 0 && r.rep.PSides == 0 {
			r.rep.PSides = col.Sides
		}
	}
}

// number reads the cell as stored or as typed.
func (r *recordReader) number(c *cell, m Meaning) (number, numberFault) {
	mark := r.mark
	switch c.kind {
	case numberCell, percentCell:
		mark = '.'
	case boolCell:
		return number{}, numberNot
	}
	n, fault := parseNumber(c.text, mark)
	if fault == numberAmbiguous && counts[m] {
		n, fault = parseNumber(c.text, '.') // a count has no decimals
	}
	if mark == ',' && counts[m] && fault == numberFine && n.value != math.Floor(n.value) {
		if whole, ok := parseNumber(c.text, '.'); ok == numberFine && whole.value == math.Floor(whole.value) {
			n = whole
		}
	}
	if c.kind == numberCell || c.kind == percentCell {
		n.decimals = int(c.decimals)
		if c.kind == percentCell {
			n.decimals = -1
		}
	}
	return n, fault
}

var takesNotSignificant = map[Meaning]bool{P: true, "t": true, "f": true, "z": true, "chi-square": true, "r": true, Estimate: true, CILower: true, CIUpper: true, "mean difference": true, "coefficient": true}

func isNotSignificant(s string) bool {
	switch strings.ToLower(strings.Trim(plainText(s), " ()*")) {
	case "ns", "n.s.", "n.s", "not significant", "non significant", "non-significant", "nonsignificant", "not sig", "not sig.", "insignificant", "p = n.s.", "p = ns":
		return true
	}
	return false
}

func (r *recordReader) sayFault(rec *Record, c *cell, col *column, at string, fault numberFault) {
	t := shorten(c.text)
	switch fault {
	case numberAmbiguous:
		r.tell(finding.Error, "ambiguous-comma", rec, at, c.text, fmt.Sprintf("%q may be a number with a decimal comma or with thousands, and no other cell settles it; the cell is not used", t),
			"type it without a thousands mark, or say which decimal mark the file uses")
	case numberRange:
		r.tell(finding.Error, "number-out-of-range", rec, at, c.text, fmt.Sprintf("%q is larger than any number that can be computed with; the cell is not used", t), "check the figure")
	case numberNot:
		if spreadsheetDate(c.text) {
			r.tell(finding.Error, "date-in-number-cell", rec, at, c.text, fmt.Sprintf("%q looks like a date that a spreadsheet program made of an entry such as 5/12 or 3-12; the cell is not used", t), "type the figure again in a cell formatted as text")
			return
		}
		fallthrough
	default:
		if strings.Contains(string(col.Meaning), " + ") {
			r.tell(finding.Error, "text-in-number-cell", rec, at, c.text, fmt.Sprintf("%q can't be read as %s; the cell is not used", t, strings.ReplaceAll(string(col.Meaning), " + ", ", ")), "type the figures as the other rows do, or leave the cell empty if they are not reported")
			return
		}
		r.tell(finding.Error, "text-in-number-cell", rec, at, c.text, fmt.Sprintf("%q stands where a number (%s) should; the cell is not used", t, col.Meaning), "type the number alone, or leave the cell empty if it is not reported")
	}
}

// scaleFigure turns percentages into shares where the meaning is a share.
func scaleFigure(f *effect.Figure, m Meaning, n number, c *cell, col *column) {
	share := m == CILevel || m == Relevance || strings.HasSuffix(string(m), "proportion")
	percent := n.percent || col.u.percent && c.kind != percentCell || m == CILevel && f.Value > 1
	if share && percent || n.percent {
		f.Value /= 100
		if f.Decimals >= 0 {
			f.Decimals += 2
		}
	}
}

// inDomain refuses values that the meaning can't have.
func (r *recordReader) inDomain(rec *Record, meaning Meaning, f *effect.Figure, c *cell, at string) bool {
	m, v := string(meaning), f.Value
	_, tail, _ := strings.Cut(m, " ")
	armed := strings.HasPrefix(m, "treatment ") || strings.HasPrefix(m, "control ")
	if !armed {
		tail = m
	}
	wrong := ""
	switch tail {
	case "p":
		switch {
		case v < 0 || v > 1:
			wrong = "a p-value lies between 0 and 1"
		case v == 0 && f.Bound == effect.Exact && c.kind == textCell && f.Decimals > 0:
			f.Bound, f.Value = effect.Below, math.Pow(10, -float64(f.Decimals))
			r.tell(finding.Warning, "p-of-zero", rec, at, c.text, fmt.Sprintf("a p-value is never 0; %q was read as < %s", shorten(c.text), strconv.FormatFloat(f.Value, 'g', -1, 64)), "type it as an inequality")
		case v == 0:
			wrong = "a p-value is never 0; type < and the bound that the paper prints"
		}
	case "sd", "se", "standard error", "variance", "pre sd", "change sd", "difference sd", "difference se", "outcome sd", "log-rank variance":
		if v < 0 {
			wrong = "it can't be negative"
		}
	case "n", "events", "non-events", "total events", "clusters", "items", "covariates", "cluster size", "person-time", "rate":
		if v < 0 {
			wrong = "it can't be negative"
		} else if counts[meaning] && v != math.Floor(v) {
			r.tell(finding.Warning, "count-not-whole", rec, at, c.text, fmt.Sprintf("%s is %s, which is no whole number", m, shorten(c.text)), "check the figure; an effective sample size may be fractional")
		}
	case "proportion":
		if v < 0 || v > 1 {
			wrong = "a proportion lies between 0 and 1 (put % behind the value or in the heading if it is a percentage)"
		}
	case "ci level":
		if v < 0.5 || v >= 1 {
			wrong = "the level of a confidence interval lies between 0.5 and 1"
		}
	case "relevance", "eta-squared":
		if v < 0 || v > 1 {
			wrong = "it lies between 0 and 1"
		}
	case "r", "point-biserial r", "pre-post correlation":
		if v < -1 || v > 1 {
			wrong = "a correlation lies between -1 and 1"
		}
	}
	if wrong == "" {
		return true
	}
	r.tell(finding.Error, "value-out-of-range", rec, at, c.text, fmt.Sprintf("%s is %s: %s; the cell is not used", m, shorten(c.text), wrong), "check the figure")
	return false
}

// nonEvents adds people without the event to those with it, for the group's n.
func (r *recordReader) nonEvents(rec *Record, arm string, f effect.Figure) {
	a := &r.rep.Treatment
	if arm == "control " {
		a = &r.rep.Control
	}
	if a.N.Given || r.set.has(Meaning(arm+"n")) {
		return
	}
	r.placeOf(Meaning(map[string]string{"control ": "control n"}[arm] + map[string]string{"": "treatment n", "treatment ": "treatment n"}[arm]))
	a.N = f // finish adds the events once all cells are read
}

// finish settles what needs the whole row.
func (r *recordReader) finish(rec *Record) {
	rep := &r.rep
	for _, arm := range r.summed {
		a := &rep.Treatment
		if arm == "control " {
			a = &rep.Control
		}
		switch {
		case a.N.Given && a.Events.Given:
			a.N.Value += a.Events.Value
		case a.N.Given:
			a.N = effect.Figure{}
		}
	}
	if rep.CILower.Given || rep.CIUpper.Given || rep.Treatment.CILower.Given || rep.Control.CILower.Given || rep.DifferenceLower.Given {
		for _, c := range r.set.list {
			if c.Level != 0 && !rep.CILevel.Given && c.Meaning != "" {
				rep.CILevel = effect.Figure{Value: c.Level, Given: true, Decimals: -1, Cell: c.Cell}
			}
		}
	}
	if rep.EstimateScale == "" && (rep.Estimate.Given || rep.CILower.Given) {
		rep.EstimateScale, rep.EstimateIsLog = r.scale, r.scaleIsLog
	}
	if rec.Year == 0 {
		rec.Year = yearIn(rec.Study)
	}
}

// yearIn finds the year in a label such as "Adams 2009a" or "Adams (2009)".
func yearIn(s string) int {
	found := 0
	for i := 0; i+4 <= len(s); i++ {
		if !isDigit(s[i]) {
			continue
		}
		j := i
		for j < len(s) && isDigit(s[j]) {
			j++
		}
		if j-i == 4 {
			if y, _ := strconv.Atoi(s[i:j]); y >= 1850 && y <= 2100 {
				found = y
			}
		}
		i = j
	}
	return found
}

func (r *recordReader) year(rec *Record, c *cell, at string) {
	text := strings.TrimSpace(plainText(c.text))
	if isMissing(text) {
		return
	}
	if c.kind == numberCell {
		text, _, _ = strings.Cut(text, ".")
	}
	if rec.Year = yearIn(text); rec.Year == 0 {
		r.tell(finding.Warning, "year-not-understood", rec, at, c.text, fmt.Sprintf("%q is no year", shorten(c.text)), "type the year of publication with four digits")
	}
}

// word reads a cell of words.
func (r *recordReader) word(rec *Record, c *cell, col *column, at string) {
	text := strings.TrimSpace(c.text)
	folded := strings.ToLower(strings.Join(strings.Fields(plainText(text)), " "))
	unclear := func(what, mend string) {
		r.tell(finding.Warning, strings.ReplaceAll(string(col.Meaning), " ", "-")+"-not-understood", rec, at, c.text, fmt.Sprintf("%q is no %s", shorten(c.text), what), mend)
	}
	switch col.Meaning {
	case Subgroup:
		rec.Subgroup = text
	case Status:
		rec.Status = text
	case RiskOfBias:
		v, ok := risks[strings.TrimSuffix(strings.TrimSuffix(folded, " risk of bias"), " risk")]
		if rec.RiskOfBias = v; !ok && !isMissing(folded) {
			unclear("judgement of risk of bias that is known here", "use low, some concerns or high")
		}
	case Direction:
		d, ok := directions[folded]
		if r.rep.Direction = d; !ok && !isMissing(folded) {
			unclear("direction that is known here", `use "favours treatment" or "favours control"`)
		}
	case Better:
		if yes, ok := answers[folded]; ok {
			rec.HigherBetter = &yes
		} else if !isMissing(folded) {
			unclear("answer to whether higher is better", "use yes or no")
		}
	case SidesOfP:
		switch strings.NewReplacer("-", " ", "sided", "", "tailed", "", "tail", "").Replace(folded) {
		case "1", "one", "1 ", "one ", "1.0":
			r.rep.PSides = 1
		case "2", "two", "2 ", "two ", "2.0":
			r.rep.PSides = 2
		default:
			if !isMissing(folded) {
				unclear("number of sides", "use one or two")
			}
		}
	case ScaleOf:
		u, ok := understand(text, nil)
		switch {
		case ok && u.scale != "" && u.rest == "":
			r.rep.EstimateScale, r.rep.EstimateIsLog = u.scale, u.log
		case ok && u.meaning == "mean difference":
			r.rep.EstimateScale = effect.MeanDifference
		case !isMissing(folded):
			unclear("scale of an effect that is known here", "use its name, such as odds ratio, log odds ratio, standardized mean difference")
		}
	}
}

var answers = map[string]bool{"yes": true, "y": true, "true": true, "1": true, "higher": true, "+": true, "no": false, "n": false, "false": false, "0": false, "lower": false, "-1": false}

var risks = map[string]string{"low": "low", "l": "low", "green": "low", "+": "low", "some concerns": "some concerns", "some": "some concerns",
	"moderate": "some concerns", "medium": "some concerns", "unclear": "some concerns", "yellow": "some concerns", "s": "some concerns",
	"m": "some concerns", "some concern": "some concerns", "high": "high", "h": "high", "red": "high", "serious": "high",
	"critical": "high", "very high": "high", "severe": "high"}

var directions = map[string]effect.Direction{"favours treatment": effect.FavoursTreatment, "favors treatment": effect.FavoursTreatment,
	"treatment": effect.FavoursTreatment, "positive": effect.FavoursTreatment, "+": effect.FavoursTreatment, "intervention": effect.FavoursTreatment,
	"favours intervention": effect.FavoursTreatment, "favors intervention": effect.FavoursTreatment, "pos": effect.FavoursTreatment, "better": effect.FavoursTreatment,
	"favours control": effect.FavoursControl, "favors control": effect.FavoursControl, "control": effect.FavoursControl, "negative": effect.FavoursControl,
	"-": effect.FavoursControl, "neg": effect.FavoursControl, "worse": effect.FavoursControl, "1": effect.FavoursTreatment, "-1": effect.FavoursControl,
	"+1": effect.FavoursTreatment, "treatment better": effect.FavoursTreatment, "control better": effect.FavoursControl}
