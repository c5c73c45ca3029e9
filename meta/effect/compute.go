package effect

import (
	"fmt"
	"math"
	"reflect"
	"sort"
	"strings"

	"footing/internal/finding"
)

// Outcome is what one record yields.
type Outcome struct {
	Best     *Estimate  // by the better route; nil where no route has its figures
	All      []Estimate // by each route that applies, in order of preference
	Findings []finding.Finding
}

// Compute turns what one record reports into estimates on the scale of opt, by every route whose figures are there. Best is the first in the order of
// preference: counts, then means and SDs, then an estimate with its SE or interval, then exact test statistics, then exact p values. Figures
// that are there and impossible, routes that disagree beyond rounding, and a record without any usable figure are findings.
func Compute(study string, r Reported, opt Options) Outcome {
	opt = opt.withDefaults()
	var out Outcome
	var seen []string // figures of a refused route, so that one wrong cell is told once
	for _, rt := range routes {
		if !rt.gives(opt.Scale) {
			continue
		}
		w := &work{r: &r, opt: opt, study: study}
		rt.compute(w)
		w.adjust()
		for _, f := range w.findings {
			if key := f.Kind + f.Place.Cell; !contains(seen, key) {
				seen = append(seen, key)
				out.Findings = append(out.Findings, f)
			}
		}
		if w.ok {
			out.All = append(out.All, w.estimate(rt.name))
		}
	}
	if len(out.All) > 0 {
		out.Best = &out.All[0]
		out.Findings = append(out.Findings, disagreements(study, &r, opt, out.All)...)
		return out
	}
	if !hasError(out.Findings) {
		out.Findings = append(out.Findings, nothingUsable(study, &r, opt))
	}
	return out
}

func hasError(fs []finding.Finding) bool {
	for _, f := range fs {
		if f.Severity == finding.Error {
			return true
		}
	}
	return false
}

func (w *work) estimate(name string) Estimate {
	return Estimate{Study: w.study, Scale: w.opt.Scale, Value: w.value, Variance: w.variance, Route: name, Formula: w.formula, Notes: w.notes, Cells: w.cells, Table: w.table, N: w.n}
}

// nothingUsable says what a record lacks.
func nothingUsable(study string, r *Reported, opt Options) finding.Finding {
	f := finding.Finding{Severity: finding.Error, Kind: "no-usable-figure", Study: study,
		What: "no figure in the row leads to a " + opt.Scale.Words()}
	if opt.Scale == AsGiven {
		f.What = "the row holds no estimate with its standard error, variance or interval"
	}
	var ways []string
	for _, rt := range routes {
		if rt.gives(opt.Scale) {
			ways = append(ways, rt.reads)
		}
	}
	// The usual ways; the whole list is a page long.
	const usual = 4
	if len(ways) > usual {
		ways = append(ways[:usual], fmt.Sprintf("or %d other ways, which footing methods lists", len(ways)-usual))
	}
	f.Mend = "any of these would do: " + strings.Join(ways, "; ")
	if r.P.Given && r.P.Bound != Exact {
		f.Kind, f.Place.Cell, f.Text = "p-is-a-bound", r.P.Cell, r.P.text()
		f.What = "p " + r.P.text() + " is a bound, not a value, and the row has no other usable figure"
		f.Mend = "an exact p value or any other figure of the paper would do"
	} else if r.NotSignificant {
		f.Kind, f.What = "not-significant-without-figure", "the row says only that the result was not significant"
	}
	return f
}

// disagreements compares each further route with the best one. What the rounding of the printed figures can explain is no disagreement: each figure is
// moved by half a unit of its last digit, and the moves of the estimate are added up.
func disagreements(study string, r *Reported, opt Options, all []Estimate) []finding.Finding {
	var out []finding.Finding
	for _, other := range all[1:] {
		best := all[0]
		gap := math.Abs(best.Value - other.Value)
		allowed := roundingOf(best.Route, r, opt, best.Value) + roundingOf(other.Route, r, opt, other.Value) + 1e-6*math.Abs(best.Value)
		// A tenth of the standard error is never worth a person's time: routes also differ by their approximations.
		if gap <= allowed+0.1*math.Sqrt(best.Variance) {
			continue
		}
		out = append(out, finding.Finding{Severity: finding.Warning, Kind: "routes-disagree", Place: finding.Place{Cell: first(other.Cells)}, Study: study,
			What: fmt.Sprintf("by %s the %s is %s, by %s it is %s: more apart than rounding explains", best.Route, opt.Scale.Words(), plain(opt.Scale.ToShown(best.Value)), other.Route, plain(opt.Scale.ToShown(other.Value))),
			Mend: fmt.Sprintf("check the cells %s; %s is used until then", strings.Join(append(append([]string{}, best.Cells...), other.Cells...), ", "), best.Route)})
	}
	return out
}

// roundingOf is how far the rounding of the printed figures can move a route's value.
func roundingOf(name string, r *Reported, opt Options, value float64) float64 {
	var rt route
	for _, candidate := range routes {
		if candidate.name == name {
			rt = candidate
		}
	}
	moved := *r
	total := 0.0
	for _, f := range figuresOf(&moved) {
		if !f.Given || f.Decimals < 0 {
			continue
		}
		keep := f.Value
		f.Value = keep + math.Pow(10, -float64(f.Decimals))/2
		w := &work{r: &moved, opt: opt}
		rt.compute(w)
		w.adjust()
		f.Value = keep
		if w.ok {
			total += math.Abs(w.value - value)
		}
	}
	return total
}

// figuresOf lists every figure of a record, those of people and counts apart, which are not rounded.
func figuresOf(r *Reported) []*Figure {
	var out []*Figure
	var walk func(v reflect.Value)
	exact := map[string]bool{"N": true, "Events": true, "EventsTotal": true, "DF": true, "DF1": true, "Clusters": true, "Items": true}
	walk = func(v reflect.Value) {
		for i := 0; i < v.NumField(); i++ {
			f := v.Field(i)
			switch {
			case exact[v.Type().Field(i).Name]:
			case f.Type() == reflect.TypeOf(Figure{}):
				out = append(out, f.Addr().Interface().(*Figure))
			case f.Type() == reflect.TypeOf(Arm{}):
				walk(f)
			}
		}
	}
	walk(reflect.ValueOf(r).Elem())
	return out
}

// Routes names the routes that lead to a scale, best first.
func Routes(s Scale) []string {
	var out []string
	for _, rt := range routes {
		if rt.gives(s) {
			out = append(out, rt.name)
		}
	}
	return out
}

// Scales lists every scale by name.
func Scales() []Scale {
	out := make([]Scale, 0, len(scaleWords))
	for s := range scaleWords {
		out = append(out, s)
	}
	sort.Slice(out, func(i, j int) bool { return out[i] < out[j] })
	return out
}
