package reports

import (
	"fmt"
	"strconv"
	"strings"

	"footing/plan/result"
)

// Words are the texts that a plan is quoted by.
type Words struct {
	Protocol string // the paragraph for the protocol: SPIRIT 2025 item 19, CONSORT 2025 item 16a, the DELTA2 reporting items
	Results  string // one sentence for the results paper
	Grant    string // for a grant application
}

// Protocol is the wording as plain text, each part under its heading.
func Protocol(p *result.Plan) string {
	w := WordsOf(p)
	var b strings.Builder
	part := func(head, text string) {
		if text != "" {
			fmt.Fprintf(&b, "%s\n\n%s\n\n", head, text)
		}
	}
	if p.Invented {
		part("Invented data", "The studies behind these words are invented, for demonstration. Do not use them.")
	}
	part("For the protocol", w.Protocol)
	part("For the results paper", w.Results)
	part("For a grant application", w.Grant)
	part("Before use", "What is marked as assumed needs a source or a reason. "+strings.Join(p.Cautions, " "))
	return strings.TrimRight(b.String(), "\n") + "\n"
}

// WordsOf writes the texts; a plan without a size says so in place of them.
func WordsOf(p *result.Plan) Words {
	if p.Size.Chosen == nil {
		return Words{Protocol: "No sample size can be stated: " + oneLine(p.Size.Why) + "."}
	}
	w := protocolWriter{p: p, ch: p.Size.Chosen}
	return Words{Protocol: w.protocol(), Results: w.results(), Grant: w.grant()}
}

type protocolWriter struct {
	p  *result.Plan
	ch *result.Chosen
}

// plainNumber writes a number for running text without typographic signs, which plain text files keep.
func plainNumber(x float64, decimals int) string {
	return strings.ReplaceAll(strings.ReplaceAll(fixed(x, decimals), minusSign, "-"), thinSpace, "")
}

func oneLine(s string) string { return strings.Join(strings.Fields(TermText(s)), " ") }

func (w protocolWriter) shown(c *result.Case) string {
	text := fmt.Sprintf("%s of %s", withArticle(w.p.Size.Scale.Words), plainNumber(c.Shown, 2))
	if c.ControlRisk != nil && c.TreatedRisk != nil {
		text += fmt.Sprintf(" (%s%% against %s%% in the %s group)", plainNumber(100**c.TreatedRisk, 1), plainNumber(100**c.ControlRisk, 1), w.group(1))
	}
	if sd := w.p.Size.Study.SD; sd != nil && w.p.Size.Scale.Name == "standardized-mean-difference" {
		text += fmt.Sprintf(" (a difference of %s with a standard deviation of %s)", plainNumber(c.Effect**sd, 2), plainNumber(*sd, 2))
	} else if sd != nil && w.p.Size.Scale.Name == "mean-difference" {
		text += fmt.Sprintf(" (%s standard deviations; standard deviation %s)", plainNumber(c.Effect / *sd, 2), plainNumber(*sd, 2))
	}
	return text
}

// units asks for what DELTA2 wants beside a standardized difference: the same in the units of the outcome.
func (w protocolWriter) units(say func(string, ...any)) {
	if w.p.Size.Study.Outcome == "continuous" && w.p.Size.Study.SD == nil && w.p.Size.Scale.Name == "standardized-mean-difference" {
		say("[State the difference and the standard deviation in the units of the outcome: a standardized difference alone says little to a reader.]")
	}
	if w.p.Size.Study.Outcome == "binary" {
		say("The %s leads; the proportions follow from it.", w.p.Size.Scale.Words)
	}
}

func withArticle(s string) string {
	if s != "" && strings.ContainsRune("aeiou", rune(s[0])) {
		return "an " + s
	}
	return "a " + s
}

func (w protocolWriter) group(i int) string {
	if g := w.p.Size.Study.Groups; i < len(g) {
		return oneLine(g[i])
	}
	return []string{"treatment", "control"}[min(i, 1)]
}

func (w protocolWriter) target() (*result.Case, *result.Scenario) {
	c := caseOf(w.p, w.ch.Scenario)
	if w.p.Range != nil {
		for i := range w.p.Range.Scenarios {
			if w.p.Range.Scenarios[i].Name == w.ch.Scenario {
				return c, &w.p.Range.Scenarios[i]
			}
		}
	}
	return c, nil
}

// protocol starts with the effect and where it comes from, then the size.
func (w protocolWriter) protocol() string {
	p, c, sc := w.p, (*result.Case)(nil), (*result.Scenario)(nil)
	if c, sc = w.target(); c == nil {
		return ""
	}
	var s []string
	say := func(format string, a ...any) { s = append(s, fmt.Sprintf(format, a...)) }
	if e := estimandOf(p, "endpoint"); e != "" {
		say("The primary outcome is %s.", e)
	} else {
		say("[Name the primary outcome and when it is measured.]")
	}
	say("The study is planned for %s.", w.shown(c))
	w.units(say)
	if sc != nil {
		say("This is the %s.", oneLine(sc.Why))
	}
	if w.ch.ScenarioWhy != "" {
		say("%s.", capitalised(oneLine(w.ch.ScenarioWhy)))
	}
	w.evidence(say)
	w.worthwhile(say, sc)
	if p.Justification != "" {
		say("The size is justified by: %s.", strings.TrimRight(oneLine(p.Justification), "."))
	}
	w.size(say)
	w.alternatives(say)
	return strings.Join(s, " ")
}

func estimandOf(p *result.Plan, name string) string {
	for _, e := range p.Size.Study.Estimand {
		if e.Name == name {
			return oneLine(e.Text)
		}
	}
	return ""
}

// endSentence ends a text with a full stop, unless it ends a sentence already.
func endSentence(s string) string {
	s = strings.TrimRight(s, " :;,")
	if s == "" || strings.HasSuffix(s, ".") || strings.HasSuffix(s, "?") || strings.HasSuffix(s, "!") {
		return s
	}
	return s + "."
}

func capitalised(s string) string {
	if s != "" && s[0] >= 'a' && s[0] <= 'z' {
		return string(s[0]-32) + s[1:]
	}
	return s
}

func (w protocolWriter) evidence(say func(string, ...any)) {
	pool := w.p.Pool
	if pool == nil || pool.Random.Shown == nil {
		say("No earlier studies were pooled for it.")
		return
	}
	people := ""
	if pool.Participants != nil {
		people = fmt.Sprintf(" (%.0f people)", *pool.Participants)
	}
	r := pool.Random.Shown
	text := fmt.Sprintf("Pooling %d earlier %s%s by random effects (%s) gives %s of %s", pool.K, plural(pool.K, "study", "studies"), people, estimatorWords(pool.Random.Method), withArticle(pool.Scale.Words), plainNumber(r.Estimate, 2))
	if r.Lower != nil && r.Upper != nil {
		text += fmt.Sprintf(" (%s%% interval %s to %s)", strconv.FormatFloat(100*pool.Level, 'g', 4, 64), plainNumber(*r.Lower, 2), plainNumber(*r.Upper, 2))
	}
	if x := pool.Prediction.Shown; x != nil && x.Lower != nil && x.Upper != nil {
		text += fmt.Sprintf("; in a new setting the true effect may lie anywhere from %s to %s", plainNumber(*x.Lower, 2), plainNumber(*x.Upper, 2))
	}
	say("%s.", text)
	if q := pool.Evidence.Searched; q != nil && q.Date != "" {
		rule := ""
		if q.Rule != "" {
			rule = " (" + oneLine(q.Rule) + ")"
		}
		say("The literature was searched on %s%s.", dateText(q.Date), rule)
	} else {
		say("[Say when and how the literature was searched.]")
	}
	for _, a := range pool.SmallStudy {
		if w.p.Range != nil && a.Name == w.p.Range.AdjustedBy && a.Shown != nil {
			say("Allowing for selective publication by %s leaves %s, if that method's assumption holds.", methodWords(a.Name), plainNumber(a.Shown.Estimate, 2))
		}
	}
}

// methodWords names a small-study method in running text; methods called after people keep their capitals and hyphen.
func methodWords(name string) string {
	switch name {
	case "henmi-copas":
		return "the Henmi-Copas interval"
	case "pet", "peese", "pet-peese":
		return strings.ToUpper(name)
	}
	if name == "trim-and-fill" {
		return "trim and fill"
	}
	return "the " + strings.ReplaceAll(name, "-", " ")
}

// withThe puts the article before a body ("study board"), unless it has one or is called by its name or initials.
func withThe(who string) string {
	who = oneLine(who)
	if who == "" || strings.HasPrefix(strings.ToLower(who), "the ") || who[0] < 'a' || who[0] > 'z' {
		return who
	}
	return "the " + who
}

func estimatorWords(name string) string {
	switch name {
	case "dersimonian-laird":
		return "DerSimonian-Laird"
	case "paule-mandel":
		return "Paule-Mandel"
	}
	return strings.ReplaceAll(name, "-", " ")
}

func (w protocolWriter) worthwhile(say func(string, ...any), sc *result.Scenario) {
	if w.p.Range == nil || w.p.Range.SmallestWorthwhile == nil {
		say("[State the smallest difference that would matter, and to whom.]")
		return
	}
	x := w.p.Range.SmallestWorthwhile
	by := ""
	switch {
	case x.Who != "" && x.Source != "":
		by = fmt.Sprintf(", judged by %s (%s)", withThe(x.Who), oneLine(x.Source))
	case x.Who != "":
		by = ", judged by " + withThe(x.Who)
	case x.Source != "":
		by = " (" + oneLine(x.Source) + ")"
	default:
		by = " (assumed: nobody is named who judged it)"
	}
	if sc != nil && sc.Name == "smallest-worthwhile" {
		say("The smallest worthwhile effect is %s%s.", plainNumber(x.Shown, 2), by)
		return
	}
	say("The smallest worthwhile effect is %s%s; the study is planned for another value on purpose.", plainNumber(x.Shown, 2), by)
}

// size says the test, the error rates, the size, and each allowance.
func (w protocolWriter) size(say func(string, ...any)) {
	p, ch, st := w.p, w.ch, w.p.Size.Study
	groups := make([]string, len(ch.N.Groups))
	for i, n := range ch.N.Groups {
		groups[i] = fmt.Sprintf("%d in the %s group", n, w.group(i))
	}
	reach := fmt.Sprintf("give %s%% power", plainNumber(100*ch.Power, 1))
	if ch.Basis == "assurance" && p.Size.Assurance != nil && p.Size.Assurance.Target != nil {
		reach = fmt.Sprintf("reach an assurance of %s%% (and %s%% power at the planned effect)", plainNumber(100**p.Size.Assurance.Target, 0), plainNumber(100*ch.Power, 1))
	}
	say("With the %s (%s; %s; allocation %s) at a %s significance level of %s, %s %s; the size was computed by footing %s (%s).",
		p.Size.Test.Words, p.Size.Test.Method, p.Size.Test.Reference, st.Allocation, sidesWords(st.Sides), plainNumber(st.Alpha, decimalsOf(st.Alpha)), joinAnd(groups), reach, p.Tool.Version, "every assumption is listed in its report")
	for _, a := range st.Assumptions {
		source := oneLine(a.Source)
		if a.Assumed {
			source = "assumed"
		}
		text := fmt.Sprintf("%s %s", capitalised(a.Name), a.Value)
		if a.Number != nil {
			text = fmt.Sprintf("%s %s", capitalised(a.Name), strconv.FormatFloat(*a.Number, 'g', 3, 64))
		}
		if a.Low != nil && a.High != nil {
			text += fmt.Sprintf(" (%s to %s)", strconv.FormatFloat(*a.Low, 'g', 3, 64), strconv.FormatFloat(*a.High, 'g', 3, 64))
		}
		say("%s: %s.", text, source)
	}
	if st.Dropout > 0 {
		say("To allow for %s%% dropping out, %d people will be enrolled (%s).", plainNumber(100*st.Dropout, decimalsOf(100*st.Dropout)), ch.ToEnrol.Total, enrolWords(w, ch))
	} else {
		say("No allowance is made for people who drop out: %d people will be enrolled.", ch.ToEnrol.Total)
	}
}

func enrolWords(w protocolWriter, ch *result.Chosen) string {
	parts := make([]string, len(ch.ToEnrol.Groups))
	for i, n := range ch.ToEnrol.Groups {
		parts[i] = fmt.Sprintf("%s %d", w.group(i), n)
	}
	return strings.Join(parts, ", ")
}

func joinAnd(parts []string) string {
	if len(parts) < 2 {
		return strings.Join(parts, "")
	}
	return strings.Join(parts[:len(parts)-1], ", ") + " and " + parts[len(parts)-1]
}

func sidesWords(sides int) string {
	if sides == 1 {
		return "one-sided"
	}
	return "two-sided"
}

// decimalsOf is how many decimals write a number without loss, up to 4.
func decimalsOf(x float64) int {
	s := strconv.FormatFloat(x, 'f', -1, 64)
	if i := strings.IndexByte(s, '.'); i >= 0 {
		return min(4, len(s)-i-1)
	}
	return 0
}

// alternatives gives n at 80 and 90% power, the range over the scenarios, and assurance.
func (w protocolWriter) alternatives(say func(string, ...any)) {
	c, _ := w.target()
	if c.At80 != nil && c.At90 != nil {
		say("80%% power would need %d people analysed, 90%% power %d.", c.At80.Total, c.At90.Total)
	}
	least, most, none := 0, 0, 0
	for _, x := range w.p.Size.Cases {
		if x.ToEnrol == nil {
			none++
			continue
		}
		if least == 0 || x.ToEnrol.Total < least {
			least = x.ToEnrol.Total
		}
		most = max(most, x.ToEnrol.Total)
	}
	if most > least {
		text := fmt.Sprintf("Over the other assumptions considered the number to enrol runs from %d to %d", least, most)
		if none > 0 {
			text += fmt.Sprintf("; for %d of them no size exists", none)
		}
		say("%s.", text)
	}
	if a := w.p.Size.Assurance; a != nil && a.AtChosen != nil && a.Ceiling != nil {
		text := fmt.Sprintf("Averaged over what the earlier studies say about a new setting, the chance of a significant result in the intended direction is %s%% (at most %s%% with any number of people)", plainNumber(100**a.AtChosen, 0), plainNumber(100**a.Ceiling, 0))
		if a.AtChosenAdj != nil {
			text += fmt.Sprintf(", and %s%% after the adjustment for selective publication", plainNumber(100**a.AtChosenAdj, 0))
		}
		say("%s, if these assumptions hold.", text)
	}
}

func (w protocolWriter) results() string {
	c, _ := w.target()
	if c == nil {
		return ""
	}
	return fmt.Sprintf("The sample size of %d (%d to be analysed) was set for %s with %s%% power at a %s level of %s; the calculation stands in the protocol.",
		w.ch.ToEnrol.Total, w.ch.N.Total, w.shown(c), plainNumber(100*w.ch.Power, 0), sidesWords(w.p.Size.Study.Sides), plainNumber(w.p.Size.Study.Alpha, decimalsOf(w.p.Size.Study.Alpha)))
}

func (w protocolWriter) grant() string {
	c, _ := w.target()
	if c == nil {
		return ""
	}
	text := fmt.Sprintf("We will enrol %d people.", w.ch.ToEnrol.Total)
	if pool := w.p.Pool; pool != nil && pool.Random.Shown != nil {
		text += fmt.Sprintf(" The size rests on %d earlier %s (average %s), on how far they differ, and on what selective publication may have added, not on the most favourable of them.",
			pool.K, plural(pool.K, "study", "studies"), plainNumber(pool.Random.Shown.Estimate, 2))
	}
	text += fmt.Sprintf(" It has %s%% power for %s.", plainNumber(100*w.ch.Power, 0), w.shown(c))
	if w.ch.Cost != nil && w.p.Size.Study.Cost != nil {
		text += strings.TrimRight(fmt.Sprintf(" Its cost is %s %s", plainNumber(*w.ch.Cost, 0), oneLine(w.p.Size.Study.Cost.Currency)), " ") + "."
	}
	for i, t := range w.p.Threats {
		if i == 0 {
			text += " What could make the number wrong:"
		}
		text += fmt.Sprintf(" (%d) %s", i+1, endSentence(oneLine(t.Head)+" "+oneLine(t.Text)))
	}
	return strings.TrimSpace(text)
}
