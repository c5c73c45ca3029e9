package num

import (
	"math"
	"strconv"
	"testing"
)

type noncentralRow struct {
	T     float64 `json:"t"`
	DF    float64 `json:"df"`
	Delta float64 `json:"delta"`
	Upper bool    `json:"upper"`
	V     string  `json:"v"`
	C     string  `json:"c"` // condition: relative change of the value for a relative change of an argument
}

// TestNoncentralTAgainstReference holds both tails to 1e-13 relative wherever one rounding of the arguments moves the answer by less than that; beyond
// (condition above 400) to that rounding, three times over.
func TestNoncentralTAgainstReference(t *testing.T) {
	var file struct {
		Values []noncentralRow `json:"values"`
	}
	readReference(t, "noncentral_t.json", &file)
	if len(file.Values) < 500 {
		t.Fatalf("only %d reference values", len(file.Values))
	}
	var worst, worstHard noncentralRow
	max, maxHard, square := 0.0, 0.0, 0.0
	hard := 0
	for _, row := range file.Values {
		want, _ := strconv.ParseFloat(row.V, 64)
		condition, _ := strconv.ParseFloat(row.C, 64)
		got := NoncentralTCDF(row.T, row.DF, row.Delta)
		mirrored := NoncentralTSurvival(-row.T, row.DF, -row.Delta)
		if row.Upper {
			got = NoncentralTSurvival(row.T, row.DF, row.Delta)
			mirrored = NoncentralTCDF(-row.T, row.DF, -row.Delta)
		}
		if got != mirrored {
			t.Errorf("reflection: %v gives %v and %v", row, got, mirrored)
		}
		e := math.Abs(got-want) / want
		square += e * e
		if condition > 400 {
			hard++
			if r := e / (condition * 1.1e-16); r > maxHard {
				maxHard, worstHard = r, row
			}
			continue
		}
		if !(e <= max) {
			max, worst = e, row
		}
	}
	t.Logf("%d rows, max %.1e, rms %.1e, worst %+v", len(file.Values), max, math.Sqrt(square/float64(len(file.Values))), worst)
	t.Logf("%d ill-conditioned rows, at most %.1f roundings of the arguments, worst %+v", hard, maxHard, worstHard)
	if !(max <= 1e-13) {
		t.Errorf("relative error %.2e at %+v", max, worst)
	}
	if !(maxHard <= 3) {
		t.Errorf("%.1f roundings of the arguments at %+v", maxHard, worstHard)
	}
}

// TestNoncentralTDensityIntegratesToItsDistribution ties density and distribution together.
func TestNoncentralTDensityIntegratesToItsDistribution(t *testing.T) {
	for _, c := range [][3]float64{{1.5, 3, 1}, {4, 1, 2.5}, {2, 40, -1}, {12, 200, 10}} {
		whole := Integrate(func(x float64) float64 { return NoncentralTPDF(x, c[1], c[2]) }, math.Inf(-1), c[0], IntegrateOptions{Relative: 1e-13})
		if want := NoncentralTCDF(c[0], c[1], c[2]); math.Abs(whole.Value-want) > 1e-12*want {
			t.Errorf("integral of the density to %v: %.15g, distribution %.15g", c, whole.Value, want)
		}
	}
}
