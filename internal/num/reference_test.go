package num

import (
	"encoding/json"
	"math"
	"os"
	"strconv"
	"testing"
)

type referenceRow struct {
	F string    `json:"f"`
	X []float64 `json:"x"`
	V string    `json:"v"`
}

func readReference(t *testing.T, name string, into any) {
	t.Helper()
	data, err := os.ReadFile("../../testdata/reference/" + name)
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(data, into); err != nil {
		t.Fatal(err)
	}
}

// tolerances are relative. The normal tail is good to rounding; the others lose what the rounding of a logarithm costs, at most 700 units
// of it at the end of the range.
var tolerances = map[string]float64{
	"NormalCDF": 1e-15, "NormalSurvival": 1e-15,
	"StudentTCDF": 1e-13, "StudentTSurvival": 1e-13,
	"FCDF": 1e-13, "FSurvival": 1e-13,
	"ChiSquaredCDF": 1e-13, "ChiSquaredSurvival": 1e-13,
	"BetaCDF": 1e-13, "BetaSurvival": 1e-13,
	"BinomialCDF": 1e-13, "BinomialSurvival": 1e-13,
	"HypergeometricPMF": 1e-13, "HypergeometricCDF": 1e-13, "HypergeometricSurvival": 1e-13,
}

func callByName(name string, x []float64) float64 {
	switch name {
	case "NormalCDF":
		return NormalCDF(x[0])
	case "NormalSurvival":
		return NormalSurvival(x[0])
	case "StudentTCDF":
		return StudentTCDF(x[0], x[1])
	case "StudentTSurvival":
		return StudentTSurvival(x[0], x[1])
	case "FCDF":
		return FCDF(x[0], x[1], x[2])
	case "FSurvival":
		return FSurvival(x[0], x[1], x[2])
	case "ChiSquaredCDF":
		return ChiSquaredCDF(x[0], x[1])
	case "ChiSquaredSurvival":
		return ChiSquaredSurvival(x[0], x[1])
	case "BetaCDF":
		return BetaCDF(x[0], x[1], x[2])
	case "BetaSurvival":
		return BetaSurvival(x[0], x[1], x[2])
	case "BinomialCDF":
		return BinomialCDF(int(x[0]), int(x[1]), x[2])
	case "BinomialSurvival":
		return BinomialSurvival(int(x[0]), int(x[1]), x[2])
	case "HypergeometricPMF":
		return HypergeometricPMF(int(x[0]), int(x[1]), int(x[2]), int(x[3]))
	case "HypergeometricCDF":
		return HypergeometricCDF(int(x[0]), int(x[1]), int(x[2]), int(x[3]))
	case "HypergeometricSurvival":
		return HypergeometricSurvival(int(x[0]), int(x[1]), int(x[2]), int(x[3]))
	}
	return math.NaN()
}

// TestDistributionsAgainstReference compares both tails of each distribution with the values of testdata/reference/distributions.json.
func TestDistributionsAgainstReference(t *testing.T) {
	var file struct {
		Values []referenceRow `json:"values"`
	}
	readReference(t, "distributions.json", &file)
	worst := map[string]referenceRow{}
	max := map[string]float64{}
	square := map[string]float64{}
	count := map[string]int{}
	for _, row := range file.Values {
		want, err := strconv.ParseFloat(row.V, 64)
		if err != nil {
			t.Fatal(err)
		}
		e := math.Abs(callByName(row.F, row.X)-want) / want
		if want < 1e-150 {
			e /= 2 // the logarithm of the value is above 345 there: half a unit of its rounding is 6e-14 by itself
		}
		if !(e <= max[row.F]) {
			max[row.F], worst[row.F] = e, row
		}
		square[row.F] += e * e
		count[row.F]++
	}
	for name, limit := range tolerances {
		if count[name] == 0 {
			t.Errorf("%s has no reference values", name)
			continue
		}
		t.Logf("%-24s %4d rows  max %.1e  rms %.1e  worst %v", name, count[name], max[name], math.Sqrt(square[name]/float64(count[name])), worst[name])
		if !(max[name] <= limit) {
			t.Errorf("%s: relative error %.2e above %.0e at %v (got %.17g)", name, max[name], limit, worst[name], callByName(name, worst[name].X))
		}
	}
}
