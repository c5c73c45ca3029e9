package plan

import (
	"fmt"
	"sort"
	"strconv"
	"strings"
	"time"

	"footing/importers"
	"footing/internal/finding"
	"footing/meta"
	"footing/meta/effect"
)

// The words of a plan file that stand for one choice out of a list.
var (
	outcomes     = []string{"continuous", "binary", "event-time", "count", "ordinal", "association"}
	arrangements = []string{"single-group", "paired", "parallel", "repeated", "crossover", "clusters", "sites", "stepped-wedge", "factorial"}
	aims         = []string{"superiority", "non-inferiority", "equivalence", "precision"}
	sides        = []string{"two", "one"}
	bases        = []string{"predictive", "pooled"}
	// ownScenarios exist in every plan with evidence.
	ownScenarios = []string{"pooled", "cautious", "small-study-adjusted", "lower-limit", "smallest-worthwhile"}
)

// checker collects what is impossible in a plan.
type checker struct {
	f  *File
	ps finding.Problems
}

// check finds every value that no run could use.
func (f *File) check() finding.Problems {
	c := &checker{f: f}
	c.general()
	c.evidence()
	c.effects()
	c.study()
	c.target()
	c.revision()
	return c.ps
}

func (c *checker) bad(path, what, mend string) {
	c.ps = append(c.ps, finding.Finding{Severity: finding.Error, Kind: "impossible-value", Place: c.f.At(path), What: path + ": " + what, Mend: mend})
}

// oneOf checks a word against its list.
func (c *checker) oneOf(path, have string, list []string) {
	if have == "" {
		return
	}
	for _, w := range list {
		if have == w {
			return
		}
	}
	if near := importers.Nearest(have, list); near != "" {
		c.bad(path, fmt.Sprintf("%q is none of the choices", have), fmt.Sprintf("did you mean %q?", near))
		return
	}
	c.bad(path, fmt.Sprintf("%q is none of the choices", have), "use one of "+strings.Join(list, ", "))
}

// between checks a share that must lie inside an open interval.
func (c *checker) between(path string, x *float64, low, high float64) bool {
	if x == nil || *x > low && *x < high {
		return true
	}
	mend := fmt.Sprintf("write a number above %v and below %v", low, high)
	if low == 0 && high == 1 && *x > 1 && *x < 100 {
		mend = fmt.Sprintf("write %v for %v%%", *x/100, *x)
	}
	c.bad(path, fmt.Sprintf("%v is not possible", *x), mend)
	return false
}

func (c *checker) general() {
	c.date("date", c.f.Date)
	c.oneOf("range: basis", c.f.Range.Basis, bases)
	c.between("pool: level", c.f.Pool.Level, 0, 1)
	if name := c.f.SmallStudies.AdjustBy; name != "" {
		c.oneOf("small studies: adjust by", name, adjustments(c.f))
	}
	if x := c.f.SmallStudies.RelativeChance; x != nil && !(*x > 0 && *x <= 1) {
		c.bad("small studies: relative chance of publication", fmt.Sprintf("%v is not possible", *x), "write a number above 0 and at most 1")
	}
	if _, err := meta.EstimatorByName(c.f.Pool.Heterogeneity); err != nil {
		var names []string
		for _, e := range meta.Estimators() {
			names = append(names, e.Name)
		}
		c.oneOf("pool: heterogeneity", c.f.Pool.Heterogeneity, names)
	}
	if _, err := meta.ParseIntervalMethod(c.f.Pool.Interval); err != nil {
		c.oneOf("pool: interval", c.f.Pool.Interval, meta.IntervalMethods())
	}
	if _, err := effect.ParseScale(c.f.Pool.Scale); err != nil && c.f.Pool.Scale != "" {
		var names []string
		for _, s := range effect.Scales() {
			names = append(names, string(s))
		}
		c.oneOf("pool: scale", c.f.Pool.Scale, names)
	}
}

// adjustments are the adjusted estimates that a plan can name.
func adjustments(f *File) []string {
	out := []string{"none", "selection-model", "henmi-copas", "pet-peese", "pet", "peese", "trim-and-fill", "limit-estimate", "unrestricted-least-squares", "adequately-powered", "worst-case", givenName(halfChance), givenName(quarterChance)}
	if c := f.SmallStudies.RelativeChance; c != nil {
		out = append(out, givenName(*c))
	}
	return out
}

func (c *checker) date(path, s string) {
	if s == "" {
		return
	}
	if _, err := time.Parse("2006-01-02", s); err != nil {
		c.bad(path, fmt.Sprintf("%q is no date", s), "write year-month-day, such as 2026-11-03")
	}
}

func (c *checker) evidence() {
	e := &c.f.Evidence
	if strings.TrimSpace(e.File) == "" && c.f.Range.SmallestWorthwhile == nil {
		if len(c.f.Range.Scenarios) == 0 {
			c.bad("evidence", "the plan names no evidence file and no smallest worthwhile effect, so there is nothing to size for",
				"add evidence: {file: ..}, or range: {smallest worthwhile effect: ..}")
		}
	}
	c.assumed("evidence: pre-post correlation", e.PrePostR, above(-1), below(1))
	c.assumed("evidence: intracluster correlation", e.ICC, from(0), below(1))
	c.assumed("evidence: reliability", e.Reliability, above(0), from(1))
	for i, d := range e.Decisions {
		path := fmt.Sprintf("evidence: decisions: %d", i+1)
		if strings.TrimSpace(d.Finding) == "" {
			c.bad(path, "no finding is named", "add finding: with the name that footing read prints, such as sd-looks-like-se@Studies!F7")
		}
		if d.On != "" {
			c.date(path+": on", d.On)
		}
	}
	if s := e.Searched; s != nil {
		c.date("evidence: searched: date", s.Date)
		steps := []struct {
			name string
			n    *int
		}{{"found", s.Found}, {"screened", s.Screened}, {"kept", s.Kept}}
		last := -1
		for _, step := range steps {
			path := "evidence: searched: " + step.name
			switch {
			case step.n == nil:
			case *step.n < 0:
				c.bad(path, "a number of records can't be negative", "write how many there were")
			case last >= 0 && *step.n > last:
				c.bad(path, fmt.Sprintf("%d is more than the %d of the step before", *step.n, last), "check the counts")
			default:
				last = *step.n
			}
		}
	}
}

func (c *checker) effects() {
	r := &c.f.Range
	c.assumed("range: smallest worthwhile effect", r.SmallestWorthwhile, noLimit, noLimit)
	for _, name := range scenarioNames(r.Scenarios) {
		for _, own := range ownScenarios {
			if strings.EqualFold(name, own) {
				c.bad("range: scenarios: "+name, "this name belongs to a scenario that always exists", "give yours another name")
			}
		}
	}
}

func scenarioNames(m map[string]float64) []string {
	out := make([]string, 0, len(m))
	for k := range m {
		out = append(out, k)
	}
	sort.Strings(out)
	return out
}

// limit is a bound of a value; closed when the bound itself is possible.
type limit struct {
	at     float64
	closed bool
	given  bool
}

var noLimit = limit{}

func above(x float64) limit   { return limit{at: x, given: true} }
func from(x float64) limit    { return limit{at: x, given: true, closed: true} }
func below(x float64) limit   { return limit{at: x, given: true} }
func (l limit) words() string { return strconv.FormatFloat(l.at, 'g', -1, 64) }

// assumed checks a value with its uncertainty.
func (c *checker) assumed(path string, a *Assumed, low, high limit) {
	if a == nil || a.Pool != "" && a.Value == 0 {
		return
	}
	inside := func(x float64) bool {
		return (!low.given || x > low.at || low.closed && x == low.at) && (!high.given || x < high.at || high.closed && x == high.at)
	}
	for _, x := range []struct {
		path string
		v    *float64
	}{{path, &a.Value}, {path + ": low", a.Low}, {path + ": high", a.High}} {
		if x.v == nil || inside(*x.v) {
			continue
		}
		mend := "write a number above " + low.words()
		if low.closed {
			mend = "write a number from " + low.words() + " up"
		}
		if high.given {
			mend += " and below " + high.words()
		}
		c.bad(x.path, fmt.Sprintf("%v is not possible", *x.v), mend)
	}
	switch {
	case (a.Low == nil) != (a.High == nil):
		c.bad(path, "only one of low and high is given", "give both: they are the limits of a 95% interval, or of a range with as: range")
	case a.Low != nil && (*a.Low > a.Value || *a.High < a.Value || *a.Low == *a.High):
		c.bad(path, fmt.Sprintf("%v does not lie between low %v and high %v", a.Value, *a.Low, *a.High), "check the three")
	}
	if a.As != "" {
		c.oneOf(path+": as", a.As, []string{"range"})
	}
}

func (c *checker) study() {
	s := &c.f.Study
	c.oneOf("study: outcome", s.Outcome, outcomes)
	c.oneOf("study: arrangement", s.Arrangement, arrangements)
	c.oneOf("study: aim", s.Aim, aims)
	c.oneOf("study: sides", s.Sides, sides)
	c.between("study: alpha", s.Alpha, 0, 1)
	if len(s.Groups) > 0 && len(s.Groups) != 2 {
		c.bad("study: groups", fmt.Sprintf("%d names are given", len(s.Groups)), "name two groups, treatment first")
	}
	if s.Allocation != "" {
		if _, _, ok := parseAllocation(s.Allocation); !ok {
			c.bad("study: allocation", fmt.Sprintf("%q is no allocation", s.Allocation), "write treatment:control, such as 1:1 or 2:1")
		}
	}
	c.assumed("study: standard deviation", s.SD, above(0), noLimit)
	c.assumed("study: control risk", s.ControlRisk, above(0), below(1))
	c.assumed("study: baseline correlation", s.BaselineCorrelation, above(-1), below(1))
	c.assumed("study: dropout", s.Dropout, from(0), below(1))
}

// parseAllocation reads "2:1": people in the treatment group to people in the control group.
func parseAllocation(text string) (treatment, control float64, ok bool) {
	a, b, found := strings.Cut(text, ":")
	if !found {
		return 0, 0, false
	}
	x, err1 := strconv.ParseFloat(strings.TrimSpace(a), 64)
	y, err2 := strconv.ParseFloat(strings.TrimSpace(b), 64)
	if err1 != nil || err2 != nil || !(x > 0 && y > 0) || x > 1000 || y > 1000 {
		return 0, 0, false
	}
	return x, y, true
}

func (c *checker) target() {
	t := &c.f.Target
	alpha := defaultAlpha
	if a := c.f.Study.Alpha; a != nil && *a > 0 && *a < 1 {
		alpha = *a
	}
	if c.between("target: power", t.Power, 0, 1) && t.Power != nil && *t.Power <= alpha {
		c.bad("target: power", fmt.Sprintf("%v does not exceed alpha %v, and any study reaches that", *t.Power, alpha), "the usual targets are 0.8 and 0.9")
	}
	c.between("target: assurance", t.Assurance, 0, 1)
	if t.SizeFor != "" {
		c.oneOf("target: size for", t.SizeFor, append(append([]string{}, ownScenarios...), scenarioNames(c.f.Range.Scenarios)...))
		if t.SizeFor == "smallest-worthwhile" && c.f.Range.SmallestWorthwhile == nil {
			c.bad("target: size for", "no smallest worthwhile effect is given", "add range: {smallest worthwhile effect: ..}")
		}
	}
	b := t.Budget
	if b == nil {
		return
	}
	if b.PerParticipant < 0 {
		c.bad("target: budget: per participant", fmt.Sprintf("%v is not possible", b.PerParticipant), "write what one participant costs")
	}
	if b.Fixed < 0 {
		c.bad("target: budget: fixed", fmt.Sprintf("%v is not possible", b.Fixed), "write what the study costs before its first participant")
	}
	if b.AtMost != nil && *b.AtMost <= b.Fixed {
		c.bad("target: budget: at most", fmt.Sprintf("%v leaves nothing after the fixed cost of %v", *b.AtMost, b.Fixed), "check the two")
	}
}

func (c *checker) revision() {
	r := &c.f.ReviseWhen
	c.between("revise when: assurance of the frozen n below", r.AssuranceBelow, 0, 1)
	c.between("revise when: power of the frozen n below", r.PowerBelow, 0, 1)
	for _, x := range []struct{ path, text string }{{"revise when: required n moves by", r.NMovesBy}, {"revise when: tau grows by", r.TauGrowsBy}} {
		if _, ok := ParseShare(x.text); x.text != "" && !ok {
			c.bad(x.path, fmt.Sprintf("%q is no share", x.text), "write a percentage, such as 10%")
		}
	}
}

// ParseShare reads "10%" or "0.1" as .1; ok is false for what is no share above 0.
func ParseShare(text string) (share float64, ok bool) {
	s := strings.TrimSpace(text)
	percent := strings.HasSuffix(s, "%")
	s = strings.TrimSpace(strings.TrimSuffix(s, "%"))
	x, err := strconv.ParseFloat(s, 64)
	if err != nil || !plainNumber(s) || !(x > 0) {
		return 0, false
	}
	if percent {
		x /= 100
	}
	return x, true
}
