package reports

import (
	"fmt"
	"strings"

	"footing/plan/result"
)

// Document writes what a protocol or an application takes over as a word-processor document (.docx): the wording, the way from the size to the number to enrol, the
// sizes by scenario, the studies and their figures, the assumptions, the cautions. The same result gives the same bytes.
func Document(p *result.Plan) ([]byte, error) {
	if p == nil {
		return nil, fmt.Errorf("reports: there is no result to write")
	}
	d, c := &docx{}, cleanPlan(p)
	words := WordsOf(p)
	d.paragraph("Title", nonEmpty(c.Title, "Sample size"))
	d.paragraph("", c.Question)
	if p.Invented {
		d.paragraph("", "Invented data, for demonstration. Do not use these words or numbers.")
	}
	d.paragraph("Heading1", "For the protocol")
	d.paragraph("", words.Protocol)
	d.trail(c)
	d.scenarios(c)
	d.figures(c)
	d.assumptions(c)
	if words.Results != "" {
		d.paragraph("Heading1", "For the results paper")
		d.paragraph("", words.Results)
		d.paragraph("Heading1", "For a grant application")
		d.paragraph("", words.Grant)
	}
	d.paragraph("Heading1", "Before use")
	for _, x := range c.Cautions {
		d.paragraph("", x)
	}
	d.paragraph("", fmt.Sprintf("Computed by footing %s on the plan %s (SHA-256 %s).", p.Tool.Version, c.File, p.SHA256))
	return d.bytes(c.Title, p.Date, "footing "+p.Tool.Version)
}

func nonEmpty(s, otherwise string) string {
	if strings.TrimSpace(s) == "" {
		return otherwise
	}
	return s
}

func (d *docx) trail(p *result.Plan) {
	if p.Size.Chosen == nil {
		return
	}
	var rows [][]string
	for _, t := range p.Size.Chosen.Trail {
		n := t.N
		rows = append(rows, []string{t.Words, t.Source, groupsText(&n), wholeText(n.Total)})
	}
	d.paragraph("Caption", "From the size without any design help to the number to enrol")
	d.table([]string{"step", "from", "groups", "in all"}, rows, 2)
}

func (d *docx) scenarios(p *result.Plan) {
	if len(p.Size.Cases) == 0 {
		return
	}
	scale := effectScale{p.Size.Scale}
	var rows [][]string
	for _, c := range p.Size.Cases {
		power := "" // at the chosen size, where there is one
		if c.PowerAtChosen != nil {
			power = percentText(*c.PowerAtChosen)
		}
		need := func(n *result.N) string {
			if n == nil {
				return "no size"
			}
			return wholeText(n.Total)
		}
		rows = append(rows, []string{scenarioWords(p, c.Scenario), scale.text(c.Effect), need(c.At80), need(c.At90), need(c.ToEnrol), power})
	}
	d.paragraph("Heading1", "The size under each assumption about the effect")
	d.table([]string{"assumption", p.Size.Scale.Words, "analysed, 80% power", "analysed, 90% power", "to enrol, planned power", "power at the planned size"}, rows, 1)
}

// pictureScale is pixels for each unit of a drawing: about 240 to the inch over the width of a page.
const pictureScale = 2

func (d *docx) figures(p *result.Plan) {
	figures := []Figure{NextFigure(p), PowerFigure(p)}
	if p.Pool != nil {
		figures = append(ForestFigures(p), figures...)
		d.paragraph("Heading1", "The earlier studies, the next effect and the power")
	} else {
		d.paragraph("Heading1", "The next effect and the power")
	}
	for _, f := range figures {
		if f.Empty() != "" {
			continue
		}
		data, err := f.PNG(pictureScale)
		if err != nil {
			d.keep(err)
			return
		}
		d.paragraph("Caption", f.Title)
		d.picture(data, f.Name, f.Alt)
		if f.Name == "forest" || strings.HasPrefix(f.Name, "forest") {
			d.table(f.Table.Head, f.Table.Rows, f.Table.Text)
		}
	}
}

func (d *docx) assumptions(p *result.Plan) {
	var rows [][]string
	for _, a := range p.Assumptions {
		source := a.Source
		if a.Assumed {
			source = "assumed"
		}
		if a.Who != "" {
			source += "; " + a.Who
		}
		rows = append(rows, []string{a.Name, a.Value, source, a.Why})
	}
	if len(rows) > 0 {
		d.paragraph("Heading1", "What was assumed")
		d.table([]string{"assumption", "value", "source", "why"}, rows, 4)
	}
}
