package reports

import "footing/plan/result"

// Figures are all figures of a report in its order, those left out that have nothing to draw. Each can be written as a
// file of its own by SVG and PNG; its Name is unique and fit for a file name.
func Figures(p *result.Plan, o ...FigureOption) []Figure {
	c := cleanPlan(p)
	var out []Figure
	for _, draw := range []func(*result.Plan, ...FigureOption) Figure{
		ForestFigure, SubgroupsFigure, CumulativeFigure, InfluenceFigure, AdjustedFigure, FunnelFigure, NextFigure, PowerFigure, AssuranceFigure, ScenariosFigure, LeversFigure, CostFigure, SensitivityFigure, ChoicesFigure, HistoryFigure,
	} {
		if f := draw(c, o...); f.empty == "" {
			out = append(out, f)
		}
	}
	return out
}
