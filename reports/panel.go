package reports

import (
	"encoding/json"
	"fmt"
	"math"

	"footing/plan/result"

	"github.com/go-echarts/go-echarts/v2/charts"
	"github.com/go-echarts/go-echarts/v2/opts"
)

// panel is the interactive part of the page: what its script reads, and the controls with their first values. Both
// texts are JSON that the page's template encodes again, so that no label can end the element they stand in.
type panel struct {
	Chart       json.RawMessage // options of the chart
	Data        json.RawMessage // panelData
	Accuracy    string
	Unit        string
	People      string
	Alphas      []choice
	Allocations []choice
	HasEnrol    bool
	HasCost     bool
}

type choice struct {
	Value, Text string
	Selected    bool
}

// panelData is what the script reads: the grid as computed, and where the controls start.
type panelData struct {
	Effects   []float64    `json:"effects"`
	Ns        []int        `json:"ns"`
	Layers    []panelLayer `json:"layers"`
	Transform string       `json:"transform"` // "", "exp" or "tanh": from the analysed scale to the one people read
	Start     panelStart   `json:"start"`
	Plan      panelPlan    `json:"plan"`
	Groups    int          `json:"groups"`
	Per       float64      `json:"perParticipant"`
	Fixed     float64      `json:"fixed"`
	AtMost    *float64     `json:"atMost"`
	Currency  string       `json:"currency"`
}

type panelStart struct {
	Effect     float64 `json:"effect"`
	N          int     `json:"n"`
	Power      float64 `json:"power"`
	Alpha      string  `json:"alpha"`
	Allocation string  `json:"allocation"`
	Dropout    float64 `json:"dropout"`
}

// panelPlan is what the plan itself says, as printed: shown while nothing has been moved.
type panelPlan struct {
	Power  string `json:"power"`
	Needs  string `json:"needs"`
	Enrols string `json:"enrols"`
	Costs  string `json:"costs"`
}

type panelLayer struct {
	Alpha      string      `json:"alpha"`
	Allocation string      `json:"allocation"`
	Power      [][]float64 `json:"power"`
	Assurance  []float64   `json:"assurance"`
	Adjusted   []float64   `json:"adjusted"`
}

// panelOf builds the panel; nil without a grid to read or a size to start from.
func panelOf(p *result.Plan) (*panel, error) {
	g := p.Size.Grid
	if g == nil || p.Size.Chosen == nil || !soundGrid(g) {
		return nil, nil
	}
	d := panelData{Effects: g.Effects, Ns: g.Ns, Groups: len(p.Size.Chosen.N.Groups)}
	switch s := (effectScale{p.Size.Scale}); {
	case s.Log:
		d.Transform = "exp"
	case s.shown(1) != 1:
		d.Transform = "tanh"
	}
	v := &panel{Accuracy: g.Accuracy, Unit: effectScale{p.Size.Scale}.axisWords(), People: groupWords(p), HasEnrol: true}
	seen := map[string]bool{}
	for _, l := range g.Layers {
		side := "two-sided"
		if l.Sides == 1 {
			side = "one-sided"
		}
		alpha := side + " " + shareText(l.Alpha)
		if !seen["a"+alpha] {
			seen["a"+alpha] = true
			v.Alphas = append(v.Alphas, choice{alpha, alpha, l.Alpha == p.Size.Study.Alpha && l.Sides == p.Size.Study.Sides})
		}
		if !seen["r"+l.Allocation] {
			seen["r"+l.Allocation] = true
			v.Allocations = append(v.Allocations, choice{l.Allocation, l.Allocation, l.Allocation == p.Size.Study.Allocation})
		}
		d.Layers = append(d.Layers, panelLayer{alpha, l.Allocation, roundGrid(l.Power), roundAll(l.Assurance), roundAll(l.AssuranceAdjusted)})
	}
	d.Start = panelStart{N: firstGroup(&p.Size.Chosen.N), Power: p.Size.Study.PowerTarget, Alpha: selected(v.Alphas), Allocation: selected(v.Allocations), Dropout: p.Size.Study.Dropout}
	if k := caseOf(p, p.Size.Chosen.Scenario); k != nil {
		d.Start.Effect = math.Min(math.Max(k.Effect, g.Effects[0]), g.Effects[len(g.Effects)-1])
	}
	d.Plan = panelPlan{percentText(p.Size.Chosen.Power), wholeText(firstGroup(&p.Size.Chosen.N)), wholeText(p.Size.Chosen.ToEnrol.Total), costText(p, p.Size.Chosen.Cost)}
	if c := p.Size.Study.Cost; c != nil {
		d.Per, d.Fixed, d.AtMost, d.Currency = c.PerParticipant, c.Fixed, c.AtMost, clipRunes(c.Currency, 12)
		v.HasCost = true
	}
	var err error
	if v.Data, err = json.Marshal(d); err != nil {
		return nil, fmt.Errorf("reports: the panel's numbers: %w", err)
	}
	v.Chart, err = panelChart(p, g)
	return v, err
}

func selected(cs []choice) string {
	for _, c := range cs {
		if c.Selected {
			return c.Value
		}
	}
	if len(cs) > 0 {
		cs[0].Selected = true
		return cs[0].Value
	}
	return ""
}

// soundGrid says whether a grid is whole: ascending axes, a power for every crossing.
func soundGrid(g *result.Grid) bool {
	if len(g.Effects) < 2 || len(g.Ns) < 2 || len(g.Layers) == 0 {
		return false
	}
	for i := 1; i < len(g.Effects); i++ {
		if !(g.Effects[i] > g.Effects[i-1]) {
			return false
		}
	}
	for i := 1; i < len(g.Ns); i++ {
		if g.Ns[i] <= g.Ns[i-1] {
			return false
		}
	}
	for _, l := range g.Layers {
		if len(l.Power) != len(g.Effects) {
			return false
		}
		for _, row := range l.Power {
			if len(row) != len(g.Ns) {
				return false
			}
		}
	}
	return true
}

// roundAll keeps six decimals: far below what reading between the points costs, and a third of the bytes.
func roundAll(xs []float64) []float64 {
	out := make([]float64, len(xs))
	for i, x := range xs {
		out[i] = math.Round(x*1e6) / 1e6
	}
	return out
}

func roundGrid(xs [][]float64) [][]float64 {
	out := make([][]float64, len(xs))
	for i, x := range xs {
		out[i] = roundAll(x)
	}
	return out
}

// panelChart builds the options of the chart with the library's typed options and encodes them with encoding/json,
// which escapes what HTML would read. Colours are the names of inks; the page's script puts the page's colours in.
func panelChart(p *result.Plan, g *result.Grid) (json.RawMessage, error) {
	c := charts.NewLine()
	most := g.Ns[len(g.Ns)-1]
	if n := 3 * firstGroup(&p.Size.Chosen.N); n < most {
		most = n
	}
	step := niceStep(float64(most), 7)
	most = int(math.Ceil(float64(most)/step) * step)
	text := func(size int) *opts.AxisLabel { return &opts.AxisLabel{Color: string(inkSoft), FontSize: size} }
	percent := text(12)
	percent.Formatter = "{value}%"
	c.SetGlobalOptions(
		charts.WithAnimation(false),
		charts.WithTooltipOpts(opts.Tooltip{Show: opts.Bool(false)}),
		charts.WithLegendOpts(opts.Legend{Show: opts.Bool(false)}),
		charts.WithGridOpts(opts.Grid{Left: "48", Right: "150", Top: "24", Bottom: "44"}),
		charts.WithXAxisOpts(opts.XAxis{Type: "value", Min: 0, Max: most, Name: groupWords(p), NameLocation: "end", AxisLabel: text(12),
			SplitLine: &opts.SplitLine{Show: opts.Bool(false)}, AxisLine: &opts.AxisLine{LineStyle: &opts.LineStyle{Color: string(inkFaint)}}}),
		charts.WithYAxisOpts(opts.YAxis{Type: "value", Min: 0, Max: 100, AxisLabel: percent,
			SplitLine: &opts.SplitLine{Show: opts.Bool(true), LineStyle: &opts.LineStyle{Color: string(inkLine)}}}),
	)
	add := func(name string, i ink, width float32, dash string) {
		c.AddSeries(name, []opts.LineData{}, charts.WithLineChartOpts(opts.LineChart{ShowSymbol: opts.Bool(false), Symbol: "none"}),
			charts.WithLineStyleOpts(opts.LineStyle{Color: string(i), Width: width, Type: dash}))
	}
	add("as planned", inkFaint, 1.5, "dashed")
	add("power", inkPlan, 2.4, "solid")
	add("assurance", inkEvidence, 1.8, "solid")
	add("for the power asked", inkPlan, 1.2, "dotted")
	c.Validate()
	b, err := json.Marshal(c.JSON())
	if err != nil {
		return nil, fmt.Errorf("reports: the panel's chart: %w", err)
	}
	return b, nil
}
