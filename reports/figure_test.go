package reports

import (
	"os"
	"path/filepath"
	"testing"

	"footing/plan/result"
)

// everyFigure names all figures of a report.
var everyFigure = map[string]func(*result.Plan, ...FigureOption) Figure{
	"subgroups": SubgroupsFigure, "cumulative": CumulativeFigure, "cost": CostFigure, "choices": ChoicesFigure, "history": HistoryFigure,
	"forest": ForestFigure, "funnel": FunnelFigure, "next-study": NextFigure, "power": PowerFigure, "assurance": AssuranceFigure,
	"scenarios": ScenariosFigure, "influence": InfluenceFigure, "adjusted": AdjustedFigure, "levers": LeversFigure, "sensitivity": SensitivityFigure,
}

// TestWriteFigures writes every figure into the folder that FOOTING_FIGURES names, to be looked at.
func TestWriteFigures(t *testing.T) {
	dir := os.Getenv("FOOTING_FIGURES")
	if dir == "" {
		t.Skip("FOOTING_FIGURES names no folder")
	}
	for _, log := range []bool{false, true} {
		p := inventedPlan(12, log)
		for name, f := range everyFigure {
			for kind, o := range map[string][]FigureOption{"wide": nil, "narrow": {Narrow()}} {
				svg, err := f(p, o...).SVG()
				if err != nil {
					t.Fatal(err)
				}
				scale := map[bool]string{false: "smd", true: "or"}[log]
				if err := os.WriteFile(filepath.Join(dir, name+"-"+scale+"-"+kind+".svg"), svg, 0o644); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
}
