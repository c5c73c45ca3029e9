package plan

import (
	"fmt"
	"math"
	"sort"

	"footing/internal/finding"
	"footing/meta"
	"footing/meta/effect"
	"footing/meta/prior"
	"footing/plan/result"
)

// The levels of the intervals whose limits are scenarios: the cautious one is the lower limit of the 60% interval (the idea of Perugini, Gallucci & Costantini 2014,
// who take it of the estimate), the other of the 95% interval.
const (
	cautiousLevel = 0.60
	lowerLevel    = 0.95
)

// BuildRange says what the planned study's true effect may plausibly be: the basis distribution, the same after the small-study adjustment, and the scenarios. ev and p
// are nil for a plan without evidence, which needs a smallest worthwhile effect or a scenario of its own.
func BuildRange(f *File, ev *EvidenceRead, p *result.Pool) (*BuiltRange, error) {
	b := &ranger{file: f, ev: ev, pool: p, out: &BuiltRange{Range: &result.Range{Basis: f.Range.Basis, Scenarios: []result.Scenario{}, Chances: []result.Chance{}}}}
	if b.out.Basis == "" {
		b.out.Basis = "predictive"
	}
	if err := b.scale(); err != nil {
		return nil, err
	}
	if ev != nil && p != nil {
		if err := b.distributions(); err != nil {
			return nil, err
		}
	} else {
		b.out.Why = "the plan has no evidence sheet: there is no distribution of the effect, and no assurance"
	}
	if err := b.worthwhile(); err != nil {
		return nil, err
	}
	if err := b.scenarios(); err != nil {
		return nil, err
	}
	if err := b.target(); err != nil {
		return nil, err
	}
	b.chances()
	b.curves()
	return b.out, nil
}

// ranger builds one range.
type ranger struct {
	file *File
	ev   *EvidenceRead
	pool *result.Pool
	out  *BuiltRange

	sc   effect.Scale
	info result.ScaleInfo
	sign float64 // +1 where a larger effect favours the treatment
	// uses is the distribution whose limits the scenarios are: the adjusted one where the plan names an adjustment.
	uses                 prior.Distribution
	unadjusted, adjusted prior.Distribution
	adjustedMean         float64
	hasAdjusted          bool
}

func (b *ranger) scale() error {
	if b.ev != nil {
		b.sc, b.info = b.ev.Scale, b.ev.Info
	} else {
		info, err := scaleWithoutEvidence(b.file)
		if err != nil {
			return err
		}
		b.sc, b.info = effect.Scale(info.Name), info
	}
	b.sign = 1
	if !b.info.HigherBetter {
		b.sign = -1
	}
	return nil
}

func (b *ranger) say(severity finding.Severity, kind, what, mend string) {
	b.out.Findings = append(b.out.Findings, finding.Finding{Severity: severity, Kind: kind, Place: finding.Place{File: b.file.Path}, What: what, Mend: mend})
}

// distributions makes the basis distribution and the adjusted one.
func (b *ranger) distributions() error {
	d, err := meta.NewData(b.ev.Estimates)
	if err != nil {
		return err
	}
	tau := 0.0
	if t := b.pool.Random.TauSquared; t != nil {
		tau = *t
	}
	basis := b.out.Basis
	if basis == "predictive" && d.K() < 3 {
		b.say(finding.Warning, "no-predictive-distribution", fmt.Sprintf("with %s there is no predictive distribution; the range is that of the mean, which is too narrow for a new setting", countOf(d.K(), "study", "studies")),
			"state a smallest worthwhile effect and size for that")
		basis = "pooled"
	}
	b.out.Basis = basis
	var u prior.Located
	words := ""
	if basis == "predictive" {
		u, err = prior.Predictive(d, tau)
		words = "predictive distribution of the true effect in a new setting: %s around the random-effects mean"
	} else {
		u, err = b.ofMean()
		words = "confidence distribution of the mean: %s"
	}
	if err != nil {
		return err
	}
	b.unadjusted, b.out.Unadjusted = u, u
	b.out.Distribution = describe(u, fmt.Sprintf(words, u.Words()))
	b.uses = u
	return b.adjust(d.K(), tau, basis)
}

func (b *ranger) ofMean() (prior.Located, error) {
	r := b.pool.Random
	if r.Estimate == nil || r.StandardError == nil {
		return prior.Located{}, fmt.Errorf("the mean has no interval: %s", r.Why)
	}
	df := math.Inf(1)
	if r.DF != nil {
		df = *r.DF
	}
	return prior.NewLocated(*r.Estimate, *r.StandardError, df)
}

// adjust puts the named adjusted mean in the place of the unadjusted one.
func (b *ranger) adjust(k int, tau float64, basis string) error {
	name := b.file.SmallStudies.AdjustBy
	b.out.UsesAdjusted = name != "" && name != "none"
	if !b.out.UsesAdjusted {
		name = "selection-model"
	}
	if name == "selection-model" {
		name = b.selection()
	}
	var names []string
	for _, s := range b.pool.SmallStudy {
		if s.Estimate != nil && s.StandardError != nil {
			names = append(names, s.Name)
		}
		if s.Name != name || s.Estimate == nil || s.StandardError == nil {
			continue
		}
		mean := prior.AdjustedMean{Estimate: *s.Estimate, StandardError: *s.StandardError}
		var a prior.Located
		var err error
		if basis == "predictive" {
			a, err = prior.AdjustedPredictive(k, mean, tau)
		} else {
			a, err = prior.AdjustedOfMean(mean)
		}
		if err != nil {
			return err
		}
		b.adjusted, b.out.Adjusted, b.out.AdjustedBy = a, a, name
		b.adjustedMean, b.hasAdjusted = mean.Estimate, true
		b.out.Range.Adjusted = describe(a, fmt.Sprintf("the same around the mean adjusted by %s (%s): what is left if that method's assumption holds", name, a.Words()))
		if b.out.UsesAdjusted {
			b.uses = a
		}
		return nil
	}
	if b.out.UsesAdjusted {
		b.out.UsesAdjusted = false
		b.say(finding.Warning, "adjustment-not-available", fmt.Sprintf("small studies: adjust by: %q gives no adjusted estimate here; the unadjusted distribution is used", name), "available are: "+orNone(names))
	}
	return nil
}

// selection is the selection model that can speak here: the fitted one where at least 10 studies with 3 or more on each side of its cut let it be estimated, else the same with the plan's relative chance of
// publication, and where that has no maximum either, the Henmi-Copas interval.
func (b *ranger) selection() string {
	chance := halfChance
	if c := b.file.SmallStudies.RelativeChance; c != nil {
		chance = *c
	}
	for _, want := range []string{"selection-model", givenName(chance)} {
		for _, s := range b.pool.SmallStudy {
			if s.Name == want && s.Estimate != nil {
				return want
			}
		}
	}
	return "henmi-copas"
}

func orNone(names []string) string {
	if len(names) == 0 {
		return "none"
	}
	return joinWords(names)
}

func joinWords(names []string) string {
	out := ""
	for i, n := range names {
		if i > 0 {
			out += ", "
		}
		out += n
	}
	return out
}

var tabulated = []float64{0.005, 0.01, 0.025, 0.05, 0.1, 0.2, 0.25, 0.3, 0.4, 0.5, 0.6, 0.7, 0.75, 0.8, 0.9, 0.95, 0.975, 0.99, 0.995}

// tellsLittle says how well the selection model knows its relative chance of publication.
func (b *ranger) tellsLittle() string {
	for _, s := range b.pool.SmallStudy {
		low, high := s.Figures["its lower limit"], s.Figures["its upper limit"]
		if s.Name == b.out.AdjustedBy && low > 0 && low < 1 && high > 1 {
			return fmt.Sprintf("; its relative chance of publication is %.2f (%.2f to %.2f), so that the studies can hardly tell, and %s stands beside it", s.Figures["relative chance"], low, high, givenName(halfChance))
		}
	}
	return ""
}

func describe(l prior.Located, words string) *result.Distribution {
	out := &result.Distribution{Kind: "student-t", Words: words, Location: number(l.Location), Scale: number(l.Scale), DF: number(l.DF)}
	if math.IsInf(l.DF, 1) {
		out.Kind = "normal"
	}
	mean, sd, hasMean, hasSD := l.Moments()
	if hasMean {
		out.Mean = number(mean)
	}
	if hasSD {
		out.SD = number(sd)
	}
	for _, p := range tabulated {
		out.Quantiles = append(out.Quantiles, result.QuantilePoint{P: p, Value: l.Quantile(p)})
	}
	return out
}

// towardsNone is the quantile on the unfavourable side: the lower limit of an interval of the level, along the favoured direction.
func (b *ranger) towardsNone(level float64) float64 {
	p := (1 - level) / 2
	if b.sign < 0 {
		p = 1 - p
	}
	return b.uses.Quantile(p)
}

// fromShown turns an effect of the plan file into the analysed scale.
func (b *ranger) fromShown(name string, a Assumed) (float64, error) {
	x, err := b.sc.FromShown(a.Value)
	if err == nil {
		return x, nil
	}
	return 0, &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: "effect-off-scale", Place: finding.Place{File: b.file.Path, Line: a.Line, Column: a.Column},
		What: fmt.Sprintf("%s: %s", name, err), Mend: "give it as a " + b.info.Words + ", as people read it"}}
}

func (b *ranger) worthwhile() error {
	w := b.file.Range.SmallestWorthwhile
	if w == nil {
		return nil
	}
	x, err := b.fromShown("range: smallest worthwhile effect", *w)
	if err != nil {
		return err
	}
	if b.sign*x <= 0 {
		better := "larger"
		if b.sign < 0 {
			better = "smaller"
		}
		return &finding.Problem{Finding: finding.Finding{Severity: finding.Error, Kind: "worthwhile-on-the-wrong-side", Place: finding.Place{File: b.file.Path, Line: w.Line, Column: w.Column},
			What: fmt.Sprintf("range: smallest worthwhile effect: %g is at or beyond no effect, since a %s value is better here", w.Value, better),
			Mend: "give it on the favoured side, or set higher is better: in evidence:"}}
	}
	b.out.SmallestWorthwhile = &result.Worthwhile{Effect: x, Shown: w.Value, Source: w.Source, Who: w.Who, Why: w.Why, Assumed: w.Source == "" && w.Who == ""}
	return nil
}

// scenarios lists the named assumptions, from the most favourable to the least.
func (b *ranger) scenarios() error {
	add := func(name, words string, x float64, why string, plan bool) {
		s := result.Scenario{Name: name, Words: words, Effect: x, Shown: b.sc.ToShown(x), Why: why, Plan: plan}
		if b.sign*x <= 0 {
			s.NoSize = "the effect is at or beyond no effect: no size can show it; a smallest worthwhile effect is then the only base"
		}
		b.out.Scenarios = append(b.out.Scenarios, s)
	}
	if b.uses != nil {
		pooled := *b.pool.Random.Estimate
		add("pooled", "average of the studies", pooled, "random-effects mean of the earlier studies", false)
		which := "basis distribution"
		if b.out.UsesAdjusted {
			which = "distribution adjusted by " + b.out.AdjustedBy
		}
		cautious := b.towardsNone(cautiousLevel)
		why := fmt.Sprintf("lower limit of the 60%% interval of the %s", which)
		if b.sign*cautious > b.sign*pooled {
			cautious, why = pooled, why+", which lies beyond the pooled effect, so that the pooled effect stands"
		}
		add("cautious", "cautious", cautious, why, true)
		if b.hasAdjusted {
			add("small-study-adjusted", "allowing for missing studies", b.adjustedMean, "adjusted by "+b.out.AdjustedBy+": what is left if that method's assumption holds"+b.tellsLittle(), false)
		}
		add("lower-limit", "lower limit", b.towardsNone(lowerLevel), fmt.Sprintf("lower limit of the 95%% interval of the %s", which), false)
	}
	if w := b.out.SmallestWorthwhile; w != nil {
		add("smallest-worthwhile", "smallest worthwhile", w.Effect, whoSays(w), true)
	}
	names := make([]string, 0, len(b.file.Range.Scenarios))
	for name := range b.file.Range.Scenarios {
		names = append(names, name)
	}
	sort.Strings(names)
	for _, name := range names {
		x, err := b.fromShown("range: scenarios: "+name, Assumed{Value: b.file.Range.Scenarios[name]})
		if err != nil {
			return err
		}
		add(name, name, x, "named in the plan", true)
	}
	sort.SliceStable(b.out.Scenarios, func(i, j int) bool { return b.sign*b.out.Scenarios[i].Effect > b.sign*b.out.Scenarios[j].Effect })
	return nil
}

func whoSays(w *result.Worthwhile) string {
	switch {
	case w.Who != "" && w.Source != "":
		return fmt.Sprintf("smallest effect that still matters to the %s (%s)", w.Who, w.Source)
	case w.Who != "":
		return "smallest effect that still matters to the " + w.Who
	case w.Source != "":
		return "smallest effect that still matters (" + w.Source + ")"
	}
	return "smallest effect that still matters, assumed: nobody is named who judged it"
}

// target marks the scenario that the study is sized for.
func (b *ranger) target() error {
	want := b.file.Target.SizeFor
	w := b.out.SmallestWorthwhile
	if want == "" || b.uses == nil && want == "cautious" {
		want = "cautious"
		if b.uses == nil {
			want = "smallest-worthwhile"
		}
	}
	var at *result.Scenario
	var names []string
	for i := range b.out.Scenarios {
		names = append(names, b.out.Scenarios[i].Name)
		if b.out.Scenarios[i].Name == want {
			at = &b.out.Scenarios[i]
		}
	}
	if at == nil {
		mend := "the scenarios here are " + orNone(names)
		what := fmt.Sprintf("target: size for: there is no scenario %q", want)
		if want == "smallest-worthwhile" && w == nil {
			what += ", since the plan gives no smallest worthwhile effect"
			mend = "add one under range:, with who judges it; " + mend
		}
		return planProblem(b.file, "scenario-unknown", what, mend)
	}
	if w != nil && want == "cautious" && b.sign*at.Effect < b.sign*w.Effect {
		b.out.TargetWhy = fmt.Sprintf("the cautious effect (%.2f) falls below the smallest worthwhile one (%.2f), so the study is sized for the smallest worthwhile effect", at.Shown, w.Shown)
		for i := range b.out.Scenarios {
			if b.out.Scenarios[i].Name == "smallest-worthwhile" {
				at = &b.out.Scenarios[i]
			}
		}
	}
	at.Target = true
	return nil
}

// chances gives the chance that the true effect lies beyond a value, along the favoured direction.
func (b *ranger) chances() {
	if b.unadjusted == nil {
		return
	}
	beyond := func(d prior.Distribution, x float64) float64 {
		if b.sign > 0 {
			return d.Survival(x)
		}
		return d.CDF(x)
	}
	add := func(words string, x float64) {
		c := result.Chance{Words: words, Effect: x, Chance: beyond(b.unadjusted, x)}
		if b.adjusted != nil {
			c.Adjusted = number(beyond(b.adjusted, x))
		}
		b.out.Chances = append(b.out.Chances, c)
	}
	add("better than no effect", 0)
	if w := b.out.SmallestWorthwhile; w != nil {
		add("at least the smallest worthwhile effect", w.Effect)
	}
}

// curvePoints is how many points a drawn density has.
const curvePoints = 161

// curves tabulates both densities over one axis that holds all scenarios.
func (b *ranger) curves() {
	if b.unadjusted == nil {
		return
	}
	lo, hi := 0.0, 0.0
	for _, s := range b.out.Scenarios {
		lo, hi = math.Min(lo, s.Effect), math.Max(hi, s.Effect)
	}
	for _, d := range []prior.Distribution{b.unadjusted, b.adjusted} {
		l, ok := d.(prior.Located)
		if !ok {
			continue
		}
		// The middle 99%, or four scales where a heavy tail makes that wider.
		half := math.Min(l.Quantile(0.995)-l.Location, 4*l.Scale)
		lo, hi = math.Min(lo, l.Location-half), math.Max(hi, l.Location+half)
	}
	margin := (hi - lo) * 0.02
	lo, hi = lo-margin, hi+margin
	tabulate := func(d prior.Distribution) []result.DensityPoint {
		out := make([]result.DensityPoint, curvePoints)
		for i := range out {
			x := lo + (hi-lo)*float64(i)/(curvePoints-1)
			out[i] = result.DensityPoint{Effect: x, Density: d.Density(x), CDF: d.CDF(x)}
		}
		return out
	}
	b.out.Curve = tabulate(b.unadjusted)
	if b.adjusted != nil {
		b.out.AdjustedCurve = tabulate(b.adjusted)
	}
}
