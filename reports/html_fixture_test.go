package reports

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"sort"

	"footing/internal/finding"
	"footing/plan/result"

	"gonum.org/v1/gonum/stat/distuv"
)

// inventedPlan is a whole result with k invented studies, for the tests of what is drawn. Its numbers hang together
// (weights, pooled mean, power by the normal approximation), but no test takes them for reference values.
func inventedPlan(k int, log bool) *result.Plan {
	f := &fixture{rng: rand.New(rand.NewPCG(7, uint64(k))), k: k, z: distuv.UnitNormal}
	f.scale = result.ScaleInfo{Name: "standardized-mean-difference", Words: "standardized mean difference", HigherBetter: true, Favours: "better with split lessons"}
	f.mu, f.tau, f.worthwhile, f.perPerson = 0.36, 0.18, 0.22, 4
	if log {
		f.scale = result.ScaleInfo{Name: "log-odds-ratio", Words: "odds ratio", Log: true, Favours: "fewer failures with split lessons"}
		f.mu, f.tau, f.worthwhile, f.perPerson = -0.42, 0.24, math.Log(0.75), 18
	}
	p := &result.Plan{
		Schema: "footing/plan/1", Tool: result.Tool{Name: "footing", Version: "0.0.0-test"}, File: "plan.yaml",
		SHA256: "0f3c2f6f3f0a9d5a8a3e1f0e2e6d8c0b1a2b3c4d5e6f708192a3b4c5d6e7f809",
		Title:  "Split lessons and recall", Question: "Do two half lessons raise recall a week later, against one whole lesson?",
		Date: "2026-11-17", Seed: 20261117, Edition: 2, Invented: true, Justification: "smallest effect of interest",
		Cautions: []string{
			"A sample size in research with people is subject to ethics review, local regulation and a qualified statistician's judgement. This report replaces none of them.",
			"Prior effects may not carry over to a new setting, other people or another way of measuring.",
		},
	}
	f.pool(p)
	f.rangeOf(p)
	f.size(p)
	f.rest(p)
	return p
}

type fixture struct {
	rng                   *rand.Rand
	k                     int
	scale                 result.ScaleInfo
	mu, tau               float64
	worthwhile            float64
	perPerson             float64 // variance of an effect is perPerson / total people
	z                     distuv.Normal
	mean, se, scaleOfNext float64
}

func num(x float64) *float64 { return &x }
func whole(n int) *int       { return &n }

func (f *fixture) shown(x float64) float64 {
	if f.scale.Log {
		return math.Exp(x)
	}
	return x
}

func (f *fixture) shownOf(e, lo, hi float64) *result.Shown {
	return &result.Shown{Scale: f.scale.Words, Estimate: f.shown(e), Lower: num(f.shown(lo)), Upper: num(f.shown(hi))}
}

func (f *fixture) pool(p *result.Plan) {
	places := []string{"Harbour school", "Hill school, autumn", "North college", "Evening classes", "River school", "Two colleges", "Mill lane", "Old town, pilot", "West academy", "Hill school, spring", "Lake school", "Adult learners", "Station road", "East academy"}
	bias := []string{"low", "some concerns", "low", "high", "low", "some concerns", "high"}
	var studies []result.Study
	var sw, swy, sw2, q, people float64
	for i := 0; i < f.k; i++ {
		n1 := float64(14 + f.rng.IntN(90))
		n2 := n1 + float64(f.rng.IntN(7)-3)
		v := f.perPerson / (n1 + n2)
		y := f.mu + f.tau*f.rng.NormFloat64() + math.Sqrt(v)*f.rng.NormFloat64() + sign(f.mu)*0.5*math.Max(0, math.Sqrt(v)-0.2)
		name := places[i%len(places)]
		if i >= len(places) {
			name = fmt.Sprintf("%s %d", name, i/len(places)+1)
		}
		se := math.Sqrt(v)
		s := result.Study{Row: i + 5, Place: result.Place{File: "evidence.xlsx", Sheet: "Studies", Cell: fmt.Sprintf("row %d", i+5)},
			Study: name, Year: whole(2004 + (i*7)%20), RiskOfBias: bias[i%len(bias)], Relevance: num(1 - 0.15*float64(i%4)), Used: true,
			NTreatment: num(n1), NControl: num(n2), Estimate: num(y), StandardError: num(se), Variance: num(v),
			Interval: &result.Interval{Level: 0.95, Lower: y - 1.96*se, Upper: y + 1.96*se, Method: "normal"},
			Shown:    f.shownOf(y, y-1.96*se, y+1.96*se),
			Route:    "means, SDs and group sizes", Formula: "Hedges & Olkin 1985", From: []string{fmt.Sprintf("C%d:H%d", i+5, i+5)},
			Cells: []result.Cell{
				{Address: fmt.Sprintf("A%d", i+5), Heading: "Study", Meaning: "study", Text: name},
				{Address: fmt.Sprintf("C%d", i+5), Heading: "n split", Meaning: "n treatment", Text: fmt.Sprint(n1)},
				{Address: fmt.Sprintf("D%d", i+5), Heading: "M split", Meaning: "mean treatment", Text: fmt.Sprintf("%.1f", 50+10*y)},
				{Address: fmt.Sprintf("E%d", i+5), Heading: "SD split", Meaning: "sd treatment", Text: "10.1"},
				{Address: fmt.Sprintf("F%d", i+5), Heading: "n whole", Meaning: "n control", Text: fmt.Sprint(n2)},
				{Address: fmt.Sprintf("G%d", i+5), Heading: "M whole", Meaning: "mean control", Text: "50.0"},
				{Address: fmt.Sprintf("H%d", i+5), Heading: "SD whole", Meaning: "sd control", Text: "9.9"},
			}}
		if i%5 == 3 {
			s.Route, s.Flipped, s.Notes = "t statistic and group sizes", true, []string{"lower was better in this paper: sign turned"}
		}
		people += n1 + n2
		w := 1 / v
		sw, swy, sw2 = sw+w, swy+w*y, sw2+w*w
		studies = append(studies, s)
	}
	common := swy / sw
	for _, s := range studies {
		q += (*s.Estimate - common) * (*s.Estimate - common) / *s.Variance
	}
	tau2 := 0.0
	if f.k > 1 {
		tau2 = math.Max(0, (q-float64(f.k-1))/(sw-sw2/sw))
	}
	var rw, rwy float64
	for _, s := range studies {
		rw += 1 / (*s.Variance + tau2)
		rwy += *s.Estimate / (*s.Variance + tau2)
	}
	f.mean, f.se = rwy/rw, 1/math.Sqrt(rw)
	df := float64(f.k - 1)
	t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: math.Max(1, df)}.Quantile(0.975)
	for i := range studies {
		studies[i].Weight = num(1 / (*studies[i].Variance + tau2) / rw)
		studies[i].WeightCommon = num(1 / *studies[i].Variance / sw)
	}
	studies = append(studies, result.Study{Row: f.k + 5, Study: "Conference abstract", Year: whole(2019), Why: "no standard deviation, interval or test statistic",
		Place: result.Place{File: "evidence.xlsx", Sheet: "Studies", Cell: fmt.Sprintf("row %d", f.k+5)},
		Cells: []result.Cell{{Address: fmt.Sprintf("A%d", f.k+5), Heading: "Study", Meaning: "study", Text: "Conference abstract"}}})
	f.scaleOfNext = math.Sqrt(tau2 + f.se*f.se)
	i2 := 0.0
	if q > df {
		i2 = (q - df) / q
	}
	estimate := func(method string, e, se, crit float64, tau *float64) result.Pooled {
		z := e / se
		return result.Pooled{Method: method, Estimate: num(e), StandardError: num(se), DF: num(df), Statistic: num(z), P: num(2 * f.z.Survival(math.Abs(z))),
			Interval: &result.Interval{Level: 0.95, Lower: e - crit*se, Upper: e + crit*se, Method: "hartung-knapp-floored"}, Shown: f.shownOf(e, e-crit*se, e+crit*se), TauSquared: tau}
	}
	pool := &result.Pool{Schema: "footing/pool/1", Scale: f.scale, Level: 0.95, Studies: studies, K: f.k, Participants: num(people),
		Evidence: result.Evidence{File: "evidence.xlsx", Sheet: "Studies", SHA256: "9ac1d7", Rows: f.k + 1, Used: f.k, Invented: true,
			Headings: []result.Heading{{Cell: "A4", Typed: "Study", Meaning: "study"}, {Cell: "D4", Typed: "M split", Meaning: "mean treatment", First: []string{"53.1", "55.0"}}, {Cell: "K4", Typed: "remarks", Why: "kept as a note"}},
			Searched: &result.Searched{Date: "2026-10-02", Found: whole(318), Screened: whole(81), Kept: whole(f.k + 1), Rule: "controlled, classroom, recall after a week"}},
		Common: estimate("inverse variance", common, 1/math.Sqrt(sw), 1.96, nil), Random: estimate("dersimonian-laird", f.mean, f.se, t, num(tau2)),
		Heterogeneity: result.Heterogeneity{Q: num(q), DF: f.k - 1, P: num(distuv.ChiSquared{K: math.Max(1, df)}.Survival(q)), HSquared: num(q / math.Max(1, df)), ISquared: num(i2),
			ISquaredInterval: &result.Interval{Level: 0.95, Lower: i2 * 0.3, Upper: math.Min(0.97, i2*1.5), Method: "q-profile"},
			TauSquared:       num(tau2), Tau: num(math.Sqrt(tau2)), TauSquaredInterval: &result.Interval{Level: 0.95, Lower: tau2 * 0.2, Upper: tau2 * 4, Method: "q-profile"}},
		Prediction: result.Prediction{Interval: &result.Interval{Level: 0.95, Lower: f.mean - t*f.scaleOfNext, Upper: f.mean + t*f.scaleOfNext, Method: "student-t"}, DF: num(df)},
		Sentences:  []string{"Risk of bias is low in 6 studies of 12; those alone give a smaller average.", "No study reports the outcome after more than four weeks."}}
	pool.Prediction.Shown = f.shownOf(f.mean, pool.Prediction.Interval.Lower, pool.Prediction.Interval.Upper)
	if f.k < 3 {
		pool.Prediction = result.Prediction{Why: "fewer than three studies can't say how far true effects differ"}
	}
	for i, name := range []string{"dersimonian-laird", "paule-mandel", "restricted-maximum-likelihood", "hunter-schmidt"} {
		tt := tau2 * (1 + 0.12*float64(i))
		pool.Estimators = append(pool.Estimators, result.Estimator{Name: name, TauSquared: num(tt), ISquared: num(i2), Estimate: num(f.mean + 0.004*float64(i)), Converged: true, Iterations: 4 * i,
			Intervals: []result.EstimatorInterval{{Method: "normal", Lower: num(f.mean - 1.96*f.se), Upper: num(f.mean + 1.96*f.se)}, {Method: "hartung-knapp-floored", Lower: num(f.mean - t*f.se), Upper: num(f.mean + t*f.se)}}})
	}
	adj := func(name, words string, share, se float64, weak, assumes string) result.SmallStudy {
		e := f.mean * share
		return result.SmallStudy{Name: name, Words: words, Estimate: num(e), StandardError: num(se), Interval: &result.Interval{Level: 0.95, Lower: e - 1.96*se, Upper: e + 1.96*se, Method: "normal"},
			Shown: f.shownOf(e, e-1.96*se, e+1.96*se), Weak: weak, Assumes: assumes, Figures: map[string]float64{}}
	}
	pool.SmallStudy = []result.SmallStudy{
		{Name: "egger-regression", Words: "regression of effect on its standard error", Statistic: num(2.31), DF: num(df - 1), P: num(0.043), Figures: map[string]float64{"intercept": 1.42}, Assumes: "small studies differ from large ones only by selective publication", Weak: weakIf(f.k < 10, "fewer than ten studies: the test can hardly speak")},
		{Name: "rank-correlation", Words: "rank correlation of effect and variance", Statistic: num(1.4), P: num(0.16), Figures: map[string]float64{}},
		adj("trim-and-fill", "filling in the mirror images of small studies", 0.86, f.se*1.1, "", "the funnel of all studies would be symmetric"),
		adj("selection-model", "selection by p value, estimated", 0.79, f.se*1.4, "", "whether a study appears depends on its one-sided p value alone"),
		adj("selection-model-half", "non-significant studies half as likely to appear", 0.84, f.se*1.2, "", "the stated chance"),
		adj("pet-peese", "regression on the standard error, then on the variance", 0.35, f.se*2.6, "wide: it can't tell a halved effect from none", "the effect of an endless study is the straight line's end"),
		{Name: "henmi-copas", Words: "interval robust to selective publication", Why: "needs at least three studies more than there are"},
	}
	pool.SmallStudy[2].Points = []result.FunnelPoint{{Estimate: f.mean - sign(f.mean)*0.42, StandardError: 0.31}, {Estimate: f.mean - sign(f.mean)*0.3, StandardError: 0.27}}
	for i, s := range studies[:f.k] {
		if f.k == 1 {
			break
		}
		w := *s.Weight
		e := (f.mean - w**s.Estimate) / math.Max(1e-9, 1-w)
		in := result.Influence{Row: s.Row, Study: s.Study, Estimate: num(e), Lower: num(e - 2*f.se), Upper: num(e + 2*f.se), TauSquared: num(tau2), Residual: num((*s.Estimate - f.mean) / math.Sqrt(*s.Variance+tau2)), ShareOfQ: num(w)}
		n := 300 + int(float64(i%7)*9*w*20)
		in.PerGroup, in.ToEnrol, in.Cost = []int{n, n}, whole(2*n+80), num(float64(26000+130*(2*n+80)))
		pool.Influence = append(pool.Influence, in)
	}
	f.groups(pool, studies[:f.k], t)
	p.Pool = pool
	p.Findings = []finding.Finding{
		{Severity: finding.Warning, Kind: "sd-looks-like-se", Place: finding.Place{File: "evidence.xlsx", Sheet: "Studies", Cell: "E7"}, Study: "North college", Text: "1.9", What: "SD 1.9 is a fifth of the other rows' (9.0 to 13.0) and may be a standard error", Mend: "give it under a heading \"SE\", or answer it in the plan's decisions"},
		{Severity: finding.Warning, Kind: "same-study-twice", Place: finding.Place{File: "evidence.xlsx", Sheet: "Studies", Cell: "row 14"}, What: "Hill school stands in two rows", Mend: "say how the rows hang together", Decision: &finding.Decision{Accept: true, Why: "different pupils in spring and autumn", By: "AB", On: "2026-11-02"}},
		{Severity: finding.Note, Kind: "direction-turned", Place: finding.Place{File: "evidence.xlsx", Sheet: "Studies", Cell: "row 8"}, What: "lower is better in this row: the sign was turned"},
	}
	p.Undecided = 1
	pool.Findings = p.Findings
	sort.SliceStable(pool.Influence, func(i, j int) bool { return pool.Influence[i].Row < pool.Influence[j].Row })
}

// groups are two subgroups and the mean as the studies came in; their means are rough.
func (f *fixture) groups(pool *result.Pool, studies []result.Study, t float64) {
	part := func(of []result.Study) result.Pooled {
		var w, wy float64
		for _, s := range of {
			w += *s.Weight / (f.se * f.se)
			wy += *s.Weight / (f.se * f.se) * *s.Estimate
		}
		e, se := wy/w, 1/math.Sqrt(w)
		return result.Pooled{Method: "dersimonian-laird", Estimate: num(e), StandardError: num(se), Interval: &result.Interval{Level: 0.95, Lower: e - t*se, Upper: e + t*se}}
	}
	if f.k < 4 {
		return
	}
	half := f.k / 2
	for i := range studies {
		studies[i].Subgroup = map[bool]string{true: "schools", false: "adult classes"}[i < half]
	}
	pool.Subgroups = []result.Subgroup{{Name: "schools", K: half, Random: part(studies[:half]), ISquared: num(0.2), TauSquared: num(0.01)}, {Name: "adult classes", K: f.k - half, Random: part(studies[half:]), ISquared: num(0.4), TauSquared: num(0.03)}}
	pool.Between = &result.Between{Q: num(1.9), DF: 1, P: num(0.168), Weak: "few studies in each group"}
	sorted := slices.Clone(studies)
	byYear(sorted)
	for i := range sorted {
		m := part(sorted[:i+1])
		pool.Cumulative = append(pool.Cumulative, result.CumulativePoint{Row: sorted[i].Row, Study: sorted[i].Study, Year: sorted[i].Year, K: i + 1, Estimate: m.Estimate, Lower: num(m.Interval.Lower), Upper: num(m.Interval.Upper)})
	}
}

func weakIf(b bool, s string) string {
	if b {
		return s
	}
	return ""
}

func sign(x float64) float64 { return math.Copysign(1, x) }

func (f *fixture) rangeOf(p *result.Plan) {
	t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: math.Max(1, float64(f.k-1))}
	adj := f.mean * 0.79
	dist := func(loc float64) *result.Distribution {
		d := &result.Distribution{Kind: "student-t", Words: fmt.Sprintf("Student t with %d degrees of freedom around the pooled mean, spread by tau-squared and the mean's error", f.k-1), Location: num(loc), Scale: num(f.scaleOfNext), DF: num(t.Nu), Mean: num(loc), SD: num(f.scaleOfNext * 1.1)}
		for _, q := range []float64{0.025, 0.1, 0.25, 0.5, 0.75, 0.9, 0.975} {
			d.Quantiles = append(d.Quantiles, result.QuantilePoint{P: q, Value: loc + f.scaleOfNext*t.Quantile(q)})
		}
		return d
	}
	curve := func(loc float64) []result.DensityPoint {
		var out []result.DensityPoint
		for i := 0; i <= 200; i++ {
			u := -4 + 8*float64(i)/200
			out = append(out, result.DensityPoint{Effect: loc + u*f.scaleOfNext, Density: t.Prob(u) / f.scaleOfNext, CDF: t.CDF(u)})
		}
		return out
	}
	s := sign(f.mean)
	cautious := f.mean - s*0.95*f.scaleOfNext*t.Quantile(0.8)
	lower := f.mean - s*f.scaleOfNext*t.Quantile(0.975)
	share := func(x float64) float64 { return t.CDF(s * (f.mean - x) / f.scaleOfNext) }
	r := &result.Range{Basis: "predictive", Distribution: dist(f.mean), Adjusted: dist(adj), AdjustedBy: "selection-model", Curve: curve(f.mean), AdjustedCurve: curve(adj),
		SmallestWorthwhile: &result.Worthwhile{Effect: f.worthwhile, Shown: f.shown(f.worthwhile), Source: "panel of teachers, 2025", Who: "the board of the school trust", Why: "one grade in five pupils"},
		Chances:            []result.Chance{{Words: "on the better side of no effect", Effect: 0, Chance: share(0), Adjusted: num(share(0) - 0.08)}, {Words: "at least the smallest worthwhile effect", Effect: f.worthwhile, Chance: share(f.worthwhile), Adjusted: num(share(f.worthwhile) - 0.12)}}}
	add := func(name, words string, e float64, why string, plan, target bool) {
		r.Scenarios = append(r.Scenarios, result.Scenario{Name: name, Words: words, Effect: e, Shown: f.shown(e), Why: why, Plan: plan, Target: target})
	}
	add("pooled", "average of the studies", f.mean, "the random-effects mean", false, false)
	add("small-study-adjusted", "allowing for missing studies", adj, "the mean after the selection model", false, false)
	add("smallest-worthwhile", "smallest worthwhile", f.worthwhile, "panel of teachers, 2025", true, true)
	add("cautious", "cautious", cautious, "lower limit of the 60% interval of the next setting's effect", true, false)
	add("lower-limit", "lower limit", lower, "lower limit of the 95% interval of the next setting's effect", true, false)
	if s*lower <= 0 {
		r.Scenarios[4].NoSize = "at or beyond no effect"
	}
	if !f.scale.Log {
		for i := range r.Scenarios {
			r.Scenarios[i].InPeople = num(f.z.CDF(r.Scenarios[i].Effect / math.Sqrt2))
		}
	}
	p.Range = r
}

// need is the people per group, and power the chance, by the normal approximation.
func (f *fixture) need(e, power float64) float64 {
	q := f.z.Quantile(0.975) + f.z.Quantile(power)
	return f.perPerson / 2 * q * q / (e * e) * 0.75
}

func (f *fixture) power(e, n, alpha float64) float64 {
	d := sign(f.mean) * e / math.Sqrt(f.perPerson/2*0.75/n)
	return f.z.CDF(d - f.z.Quantile(1-alpha/2))
}

func (f *fixture) assurance(n, loc, alpha float64) float64 {
	var sum, ws float64
	for i := 0; i <= 80; i++ {
		u := -4 + 8*float64(i)/80
		w := math.Exp(-u * u / 2)
		sum += w * f.power(loc+u*f.scaleOfNext, n, alpha)
		ws += w
	}
	return sum / ws
}

func (f *fixture) pair(n float64) *result.N {
	g := int(math.Ceil(n))
	return &result.N{Total: 2 * g, Groups: []int{g, g}}
}

func (f *fixture) size(p *result.Plan) {
	const perHead, fixedCost, drop = 130.0, 26000.0, 0.12
	cost := func(n *result.N) *float64 { return num(fixedCost + perHead*float64(n.Total)) }
	enrol := func(n *result.N) *result.N { return f.pair(float64(n.Groups[0]) / (1 - drop)) }
	chosen := f.pair(f.need(f.worthwhile, 0.8))
	n := float64(chosen.Groups[0])
	s := result.Size{Schema: "footing/size/1", Tool: p.Tool, Scale: f.scale,
		Study: result.Planned{Outcome: "continuous", Arrangement: "parallel", Aim: "superiority", Sides: 2, Alpha: 0.05, PowerTarget: 0.8, Allocation: "1:1", Groups: []string{"split lesson", "whole lesson"}, Dropout: drop, BaselineR: num(0.5),
			Cost:        &result.Cost{PerParticipant: perHead, Fixed: fixedCost, AtMost: num(150000), Currency: "€"},
			Estimand:    []result.NamedText{{Name: "population", Text: "pupils of 12 to 15 years in ordinary classes"}, {Name: "endpoint", Text: "words recalled after a week"}},
			Assumptions: []result.Assumption{{Name: "baseline correlation", Value: ".50, .35 to .65", Number: num(0.5), Low: num(0.35), High: num(0.65), Source: "pilot 2024"}, {Name: "dropout", Value: "12%", Number: num(0.12), Assumed: true}}},
		Test: result.Test{Name: "baseline-adjusted-t", Words: "analysis of covariance with the score at the start", Method: "exact, noncentral t", Reference: "Borm, Fransen & Lemmens 2007"}}
	low := n
	for _, sc := range p.Range.Scenarios {
		c := result.Case{Scenario: sc.Name, Effect: sc.Effect, Shown: sc.Shown, PowerAtChosen: num(f.power(sc.Effect, n, 0.05)), WrongSide: num(0.0004), TypeS: num(0.0005), TypeM: num(1.12)}
		if sc.NoSize != "" {
			c.Why = sc.NoSize
		} else {
			c.N = f.pair(f.need(sc.Effect, 0.8))
			c.ContinuousN = num(f.need(sc.Effect, 0.8))
			c.Power = num(f.power(sc.Effect, float64(c.N.Groups[0]), 0.05))
			c.ToEnrol = enrol(c.N)
			c.Cost = cost(c.ToEnrol)
			c.At80, c.At90 = f.pair(f.need(sc.Effect, 0.8)), f.pair(f.need(sc.Effect, 0.9))
			low = math.Max(low, float64(c.N.Groups[0]))
		}
		s.Cases = append(s.Cases, c)
		pc := result.PowerCurve{Scenario: sc.Name}
		for i := 0; i <= 60; i++ {
			x := 4 + i*int(n*2)/60
			pc.Points = append(pc.Points, result.PowerPoint{N: x, Total: 2 * x, Power: f.power(sc.Effect, float64(x), 0.05)})
		}
		if sc.NoSize == "" {
			s.Curves = append(s.Curves, pc)
		}
	}
	toEnrol := enrol(chosen)
	bare := f.pair(n / 0.75)
	s.Chosen = &result.Chosen{Scenario: "smallest-worthwhile", Basis: "power", N: *chosen, ToEnrol: *toEnrol, Power: 0.801, Cost: cost(toEnrol), AffordableToEnrol: whole(953),
		Trail:               []result.TrailStep{{Words: "needed at the end", N: *bare, Source: "two-sided .05, power 80%"}, {Words: "with the score at the start (r = .50)", N: *chosen, Source: "pilot 2024, range .35 to .65"}, {Words: "to allow for 12% leaving", N: *toEnrol, Source: "assumed"}},
		SmallestSignificant: num(f.worthwhile * 0.7), SmallestDetectable: num(f.worthwhile)}
	ass := &result.Assurance{Target: num(0.7), Uses: "adjusted", AtChosen: num(f.assurance(n, f.mean, 0.05)), AtChosenAdj: num(f.assurance(n, f.mean*0.79, 0.05)),
		Ceiling: num(f.assurance(1e9, f.mean, 0.05)), CeilingAdj: num(f.assurance(1e9, f.mean*0.79, 0.05)), NForTarget: f.pair(n * 0.6)}
	for i := 0; i <= 60; i++ {
		x := 4 + i*int(n*2)/60
		ass.Curve = append(ass.Curve, result.AssurancePoint{N: x, Total: 2 * x, Assurance: f.assurance(float64(x), f.mean, 0.05), Adjusted: num(f.assurance(float64(x), f.mean*0.79, 0.05))})
	}
	s.Assurance = ass
	for i := 0; i <= 160; i++ {
		e := f.mean + (float64(i)/160*8-4)*f.scaleOfNext
		np := result.NeedPoint{Effect: e}
		if e*sign(f.mean) > 0.02 {
			np.N = num(f.need(e, 0.8))
		}
		s.NeedCurve = append(s.NeedCurve, np)
	}
	for _, v := range []struct {
		a, v string
		m    float64
	}{{"baseline correlation", ".35", 1.17}, {"baseline correlation", ".65", 0.77}, {"dropout", "20%", 1}, {"dropout", "5%", 1}} {
		m := f.pair(n * v.m)
		e := enrol(m)
		if v.a == "dropout" {
			e = f.pair(n / map[string]float64{"20%": 0.8, "5%": 0.95}[v.v])
		}
		s.Sensitivity = append(s.Sensitivity, result.Sensitivity{Assumption: v.a, Value: v.v, N: m, ToEnrol: e, Cost: cost(e), OverBudget: *cost(e) > 150000, PowerAtChosen: num(0.8 - 0.1*(v.m-1))})
	}
	for _, v := range []struct {
		w, price string
		m        float64
	}{{"two scores at the start (r .65)", "one more lesson of testing", 0.77}, {"one-sided .05", "harm can't be shown", 0.79}, {"reliability .80 to .90", "two raters", 0.89}, {"allocation 2:1", "more whole lessons", 1.125}, {"no score at the start", "what r = .50 saves now", 1.333}} {
		m := f.pair(n * v.m)
		e := enrol(m)
		s.Levers = append(s.Levers, result.Lever{Words: v.w, N: m, ToEnrol: e, Change: m.Groups[0] - chosen.Groups[0], Cost: cost(e), Price: v.price})
	}
	s.Grid = f.grid(n)
	s.Choices = f.choices(chosen, enrol)
	p.Size = s
}

func (f *fixture) choices(chosen *result.N, enrol func(*result.N) *result.N) *result.ChoiceMap {
	m := &result.ChoiceMap{Dimensions: []result.ChoiceDimension{
		{Name: "estimator", Words: "estimator", Options: []string{"DerSimonian-Laird", "REML", "Paule-Mandel"}},
		{Name: "adjustment", Words: "adjustment", Options: []string{"none", "selection model", "regression on the standard error"}},
		{Name: "studies", Words: "studies", Options: []string{"all", "low risk of bias", "since 2014"}},
		{Name: "limit", Words: "cautious limit of", Options: []string{"next study", "mean"}}}}
	for i := 0; i < 54; i++ {
		o := []int{i % 3, i / 3 % 3, i / 9 % 3, i / 27}
		c := result.ChoiceCombination{Options: o, Plan: i == 0, K: f.k - 2*o[2]}
		e := f.mean * (0.9 + 0.02*float64(o[0])) * []float64{1, 0.78, 0.2}[o[1]] * []float64{0.8, 0.6, 0.9}[o[2]] * []float64{0.85, 1}[o[3]]
		if o[1] == 2 && o[2] != 2 {
			c.Why = "at or beyond no effect"
			m.NoSize++
		} else {
			c.Effect, c.N = num(e), f.pair(f.need(e, 0.8))
			c.ToEnrol = enrol(c.N)
			if c.N.Groups[0] <= chosen.Groups[0] {
				m.Enough++
			} else {
				m.More++
			}
		}
		m.Combinations = append(m.Combinations, c)
	}
	return m
}

func (f *fixture) grid(n float64) *result.Grid {
	g := &result.Grid{Accuracy: "read between computed points: within half a percentage point of power", AccuracyValue: 0.005}
	for i := 0; i <= 24; i++ {
		g.Effects = append(g.Effects, sign(f.mean)*float64(i)*0.04)
	}
	g.Effects = append(g.Effects, f.worthwhile)
	sort.Float64s(g.Effects)
	for i := 0; i <= 30; i++ {
		g.Ns = append(g.Ns, int(math.Round(8*math.Pow(n*5/8, float64(i)/30))))
	}
	g.Ns = append(g.Ns, int(n))
	sort.Ints(g.Ns)
	g.Ns = slices.Compact(g.Ns)
	for _, alpha := range []float64{0.01, 0.025, 0.05, 0.1} {
		for _, a := range []string{"1:1", "2:1"} {
			l := result.GridLayer{Alpha: alpha, Sides: 2, Allocation: a}
			k := map[string]float64{"1:1": 1, "2:1": 0.75}[a]
			for _, e := range g.Effects {
				var row []float64
				for _, x := range g.Ns {
					row = append(row, f.power(e, float64(x)*k, alpha))
				}
				l.Power = append(l.Power, row)
			}
			for _, x := range g.Ns {
				l.Assurance = append(l.Assurance, f.assurance(float64(x)*k, f.mean, alpha))
				l.AssuranceAdjusted = append(l.AssuranceAdjusted, f.assurance(float64(x)*k, f.mean*0.79, alpha))
			}
			g.Layers = append(g.Layers, l)
		}
	}
	return g
}

func (f *fixture) rest(p *result.Plan) {
	p.Threats = []result.Threat{
		{Head: "The studies differ.", Text: "The true effect in a new setting may lie on either side of no effect."},
		{Head: "Small studies show larger effects.", Text: "One adjustment leaves a third of the average; the number rests on the smallest worthwhile effect, not on the average."},
		{Head: "If the score at the start correlates .35, not .50,", Text: "the size grows by a sixth and the cost passes the limit."},
	}
	p.Assumptions = []result.Assumption{
		{Name: "smallest worthwhile effect", Value: effectText(f.shown(f.worthwhile)), Source: "panel of teachers, 2025", Who: "the board of the school trust"},
		{Name: "baseline correlation", Value: ".50, .35 to .65", Source: "pilot 2024"},
		{Name: "dropout", Value: "12%", Assumed: true, Place: result.Place{File: "plan.yaml", Line: 41, Column: 12}},
	}
	n := p.Size.Chosen.N
	p.Since = &result.Comparison{Schema: "footing/compare/1", Plan: "plan.yaml", From: result.EditionRef{Number: 1, Date: "2026-05-04", By: "AB", Why: "first submission"}, To: result.EditionRef{Date: "2026-11-17"},
		Added:   []result.StudyChange{{Study: "Lake school", Place: result.Place{Sheet: "Studies", Cell: "row 15"}}},
		Figures: []result.FigureChange{{Name: "pooled", Words: "average of the studies", From: num(f.mean * 1.1), To: num(f.mean), FromShown: num(f.shown(f.mean * 1.1)), ToShown: num(f.shown(f.mean))}},
		FrozenN: &n, FrozenPower: num(0.8), FrozenAssurance: num(0.78), Rules: []result.RuleOutcome{{Rule: "assurance of the frozen n below .60", Text: "it is 78%"}, {Rule: "required n moves by 10%", Text: "it moved by 0%"}}, Line: "one study added; no revision rule triggered",
		History: []result.HistoryPoint{
			{Edition: result.EditionRef{Number: 1, Date: "2026-05-04", By: "AB"}, K: f.k - 1, Estimate: num(f.mean * 1.1), Lower: num(f.mean*1.1 - 2*f.se), Upper: num(f.mean*1.1 + 2*f.se), N: &n, ToEnrol: &p.Size.Chosen.ToEnrol},
			{Edition: result.EditionRef{Date: "2026-11-17"}, K: f.k, Estimate: num(f.mean), Lower: num(f.mean - 2*f.se), Upper: num(f.mean + 2*f.se), N: &n, ToEnrol: &p.Size.Chosen.ToEnrol}}}
	p.Methods = []result.MethodUsed{
		{Name: "dersimonian-laird", Words: "random-effects mean by the method of moments", Assumes: "true effects scatter around one mean", Misleads: "with few studies the spread is poorly known", Reference: "DerSimonian & Laird 1986, Control Clin Trials 7:177"},
		{Name: "hartung-knapp-floored", Words: "interval of the mean by Student t", Assumes: "as above", Reference: "Hartung & Knapp 2001, Stat Med 20:3875"},
		{Name: "assurance", Words: "power averaged over the distribution of the effect", Assumes: "that distribution", Reference: "O'Hagan, Stevens & Campbell 2005, Pharm Stat 4:187"},
	}
}
