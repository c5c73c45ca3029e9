package plan

import (
	"math"
	"testing"

	"footing/importers"
	"footing/meta/effect"
	"footing/plan/result"
)

// TestSharesAddUpToTheMove: with sizes that interact, each part gets the average over the six orders. The expected
// shares are worked by hand: v of studies, rows, options alone 10, 0, 0; studies with rows 30, studies with options 10,
// rows with options 6, all 40.
func TestSharesAddUpToTheMove(t *testing.T) {
	var sizes [allParts]int
	sizes[partStudies], sizes[partStudies|partRows], sizes[partStudies|partOptions], sizes[partRows|partOptions], sizes[allParts-1] = 10, 30, 10, 6, 40
	out := &result.Move{}
	share(out, sizes)
	want := []float64{(10*2 + 30 + 10 + 34*2) / 6.0, (20 + 0*2 + 30*2 + 6) / 6.0, (0 + 0*2 + 6 + 10*2) / 6.0}
	sum := 0.0
	for i, p := range out.Parts {
		sum += p.Change
		if math.Abs(p.Change-want[i]) > 1e-12 {
			t.Errorf("%s: %v, want %v", p.Name, p.Change, want[i])
		}
	}
	if math.Abs(sum-40) > 1e-12 || len(out.Orders) != 6 {
		t.Errorf("shares add up to %v over %d orders", sum, len(out.Orders))
	}
	for _, o := range out.Orders {
		if o.Changes[0]+o.Changes[1]+o.Changes[2] != 40 {
			t.Errorf("order %v: %v", o.Order, o.Changes)
		}
	}
}

// reading is an invented reading: labels with their n as only cell and value.
func reading(names []string, values []float64) *EvidenceRead {
	e := &EvidenceRead{Sheet: &importers.Sheet{}}
	for i, n := range names {
		text := string(rune('a' + int(values[i])))
		e.Studies = append(e.Studies, result.Study{Study: n, Row: i + 2, Used: true, Cells: []result.Cell{{Heading: "x", Text: text}}})
		e.Sheet.Records = append(e.Sheet.Records, importers.Record{Study: n, Row: i + 2})
		e.Estimates = append(e.Estimates, effect.Estimate{Study: n, Value: values[i]})
		e.Index = append(e.Index, i)
	}
	return e
}

func TestHybridMakesEachChangeAlone(t *testing.T) {
	before := reading([]string{"Ash", "Birch", "Cedar"}, []float64{1, 2, 3})
	now := reading([]string{"New", "Cedar", "Ash"}, []float64{9, 8, 1})
	for _, c := range []struct {
		studies, rows bool
		want          map[string]float64
	}{
		{false, false, map[string]float64{"Ash": 1, "Birch": 2, "Cedar": 3}},
		{true, false, map[string]float64{"New": 9, "Ash": 1, "Cedar": 3}},
		{false, true, map[string]float64{"Ash": 1, "Birch": 2, "Cedar": 8}},
		{true, true, map[string]float64{"New": 9, "Ash": 1, "Cedar": 8}},
	} {
		got := hybrid(before, now, c.studies, c.rows)
		if len(got.Estimates) != len(c.want) || len(got.Sheet.Records) != len(c.want) {
			t.Errorf("studies %t, rows %t: %d estimates", c.studies, c.rows, len(got.Estimates))
		}
		for k, e := range got.Estimates {
			if c.want[e.Study] != e.Value || got.Studies[got.Index[k]].Study != e.Study {
				t.Errorf("studies %t, rows %t: %s is %v", c.studies, c.rows, e.Study, e.Value)
			}
		}
	}
}
