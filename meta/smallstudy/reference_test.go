package smallstudy

import (
	"encoding/json"
	"math"
	"os"
	"testing"

	"footing/meta"
	"footing/meta/effect"
)

type referenceFit struct {
	Mean, SE, Tau2, Chance, LR float64
}

type referenceSet struct {
	Name      string
	Y, V      []float64
	Sign      float64
	DL, REML  float64
	ML        float64
	PM        float64
	HO, SJ    float64
	HS, DL2   float64
	QP, HK    [2]float64
	Pet       [4]float64
	Peese     [4]float64
	Kendall   float64
	Half      referenceFit
	Quarter   referenceFit
	Selection *referenceFit
	Tables    [][4]float64
	Peters    [4]float64
	Harbord   [4]float64
}

func referenceSets(t *testing.T) []referenceSet {
	t.Helper()
	data, err := os.ReadFile("../../testdata/reference/pooling.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Sets []referenceSet }
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Sets) < 5 {
		t.Fatalf("%d sets", len(file.Sets))
	}
	return file.Sets
}

// near fails unless got agrees with want to a relative tolerance (absolute below 1).
func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance*math.Max(1, math.Abs(want))) {
		t.Errorf("%s: %.12g, reference %.12g", what, got, want)
	}
}

// TestAgainstReference holds closed forms to 1e-8, likelihoods to 1e-6 and the standard errors of the selection model, which the reference takes from differences, to 1e-4.
func TestAgainstReference(t *testing.T) {
	for _, s := range referenceSets(t) {
		d := meta.Data{Y: s.Y, V: s.V}
		for name, want := range map[string]float64{"dersimonian-laird": s.DL, "hedges-olkin": s.HO, "sidik-jonkman": s.SJ, "hunter-schmidt": s.HS, "two-step-dersimonian-laird": s.DL2, "paule-mandel": s.PM} {
			e, err := meta.EstimatorByName(name)
			if err != nil {
				t.Fatal(err)
			}
			near(t, s.Name+" "+name, e.Estimate(d).Value, want, 1e-8)
		}
		for name, want := range map[string]float64{"reml": s.REML, "ml": s.ML} {
			e, _ := meta.EstimatorByName(name)
			near(t, s.Name+" "+name, e.Estimate(d).Value, want, 1e-6)
		}
		q := d.QProfile(0.95)
		near(t, s.Name+" Q-profile lower", q.Lower, s.QP[0], 1e-8)
		near(t, s.Name+" Q-profile upper", q.Upper, s.QP[1], 1e-8)
		hk := d.Interval(meta.HartungKnapp, s.DL, 0.95)
		near(t, s.Name+" Hartung-Knapp lower", hk.Lower, s.HK[0], 1e-8)
		near(t, s.Name+" Hartung-Knapp upper", hk.Upper, s.HK[1], 1e-8)
		pet, peese, egger := PET(d, 0.95), PEESE(d, 0.95), Egger(d)
		near(t, s.Name+" PET", pet.Value, s.Pet[0], 1e-8)
		near(t, s.Name+" PET, SE", pet.StandardError, s.Pet[1], 1e-8)
		near(t, s.Name+" Egger's intercept", egger.Intercept, s.Pet[2], 1e-8)
		near(t, s.Name+" its SE", egger.InterceptSE, s.Pet[3], 1e-8)
		near(t, s.Name+" slope of Egger's line", egger.Slope, s.Pet[0], 1e-8)
		near(t, s.Name+" PEESE", peese.Value, s.Peese[0], 1e-8)
		near(t, s.Name+" PEESE, SE", peese.StandardError, s.Peese[1], 1e-8)
		near(t, s.Name+" rank correlation", RankCorrelation(d).Figures["tau"], s.Kendall, 1e-10)
		for chance, want := range map[float64]referenceFit{0.5: s.Half, 0.25: s.Quarter} {
			r := SelectionGiven(d, s.Sign, chance, 0.95)
			if !r.Available {
				t.Errorf("%s at %g: %s", s.Name, chance, r.Why)
				continue
			}
			near(t, s.Name+" given selection", r.Mean.Value, want.Mean, 1e-6)
			near(t, s.Name+" given selection, tau squared", r.TauSquared, want.Tau2, 1e-6)
			near(t, s.Name+" given selection, SE", r.Mean.StandardError, want.SE, 1e-4)
		}
		if s.Selection != nil {
			r := Selection(d, s.Sign, 0.95)
			if !r.Available {
				t.Logf("%s: %s", s.Name, r.Why)
			} else {
				near(t, s.Name+" selection", r.Mean.Value, s.Selection.Mean, 2e-6)
				near(t, s.Name+" selection, tau squared", r.TauSquared, s.Selection.Tau2, 2e-6)
				near(t, s.Name+" selection, SE", r.Mean.StandardError, s.Selection.SE, 1e-4)
				near(t, s.Name+" relative chance", r.Chance, s.Selection.Chance, 1e-5)
				near(t, s.Name+" likelihood ratio", r.LikelihoodRatio, s.Selection.LR, 1e-5)
			}
		}
		if s.Tables != nil {
			var tables []effect.Table
			for _, x := range s.Tables {
				tables = append(tables, effect.Table{EventsTreatment: x[0], TotalTreatment: x[1], EventsControl: x[2], TotalControl: x[3]})
			}
			near(t, s.Name+" Peters", Peters(s.Y, tables).Figures["slope"], s.Peters[2], 1e-8)
			near(t, s.Name+" Peters t", Peters(s.Y, tables).Statistic, s.Peters[2]/s.Peters[3], 1e-8)
			near(t, s.Name+" Harbord", Harbord(tables).Figures["intercept"], s.Harbord[0], 1e-8)
			near(t, s.Name+" Harbord t", Harbord(tables).Statistic, s.Harbord[0]/s.Harbord[1], 1e-8)
		}
	}
}

// TestSelectionWithoutSelection: a relative chance of 1 is the unselected maximum-likelihood model.
func TestSelectionWithoutSelection(t *testing.T) {
	for _, s := range referenceSets(t) {
		d := meta.Data{Y: s.Y, V: s.V}
		r := SelectionGiven(d, s.Sign, 1, 0.95)
		near(t, s.Name, r.Mean.Value, d.MeanAt(s.ML).Estimate, 1e-6)
		ratio, ok, why := SelectionRatio(d, s.Sign, s.DL, 0)
		if worst := WorstCase(d, s.Sign, s.DL, 0.95); worst.Available && ok != (s.Sign*worst.Value < 0) {
			t.Errorf("%s: ratio %g (%v, %s) beside a worst case of %g", s.Name, ratio, ok, why, worst.Value)
		}
	}
}

// Becker's worked example of Rosenthal's fail-safe number: 26 (see published value becker2005-01).
func TestFailSafe(t *testing.T) {
	if n := FailSafeRosenthal(expectancy(), 1); math.Round(n) != 26 {
		t.Errorf("fail-safe number %.3f, printed 26", n)
	}
}
