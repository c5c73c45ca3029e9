package smallstudy

import (
	"math"
	"testing"

	"footing/internal/num"
	"footing/meta"
	"footing/testdata/published"
)

func expectancy() meta.Data {
	t := published.Data("teacher_expectancy")
	d := meta.Data{Y: t.Column("d")}
	for _, s := range t.Column("se") {
		d.V = append(d.V, s*s)
	}
	return d
}

// Duval's worked example: 3 studies missing on the left by L0.
func TestTrimFillPublished(t *testing.T) {
	dl, _ := meta.EstimatorByName("")
	r := TrimFill(expectancy(), dl, meta.Normal, 0.95, TrimFillOptions{})
	if v := published.Must("duval2005-04"); !v.Meets(float64(r.Missing)) {
		t.Errorf("%d missing, printed %s", r.Missing, v.Printed)
	}
	if !r.Converged || r.Filled.K() != 22 {
		t.Errorf("converged %v, k %d", r.Converged, r.Filled.K())
	}
}

// TestHenmiCopasConditionalMoments checks the exact conditional moments of Q by simulation from the model itself: 200,000 draws, seed fixed; each bound is 5 standard
// errors of a moment, false-alarm probability below 1e-5.
func TestHenmiCopasConditionalMoments(t *testing.T) {
	d := meta.Data{Y: []float64{0.1, 0.9, -0.3, 1.4, 0.2}, V: []float64{0.01, 0.2, 0.05, 0.4, 0.08}}
	h := newConditionalQ(d)
	if h.tau2 <= 0 {
		t.Fatal("the example should have between-study variance")
	}
	s := num.NewStream(11, 0)
	const n = 200000
	sd := math.Sqrt(h.w1 + h.tau2*h.w2)
	// Sums for the regression of Q on r^2, and of the squared residual on r^2.
	var x1, x2, y1, xy, qs, rs []float64
	_ = x2
	for i := 0; i < n; i++ {
		sim := meta.Data{V: d.V}
		top := 0.0
		for _, v := range d.V {
			e := math.Sqrt(v+h.tau2) * s.Normal()
			sim.Y = append(sim.Y, e)
			top += e / v
		}
		r := top / sd
		rs, qs = append(rs, r*r), append(qs, sim.MeanAt(0).Q)
	}
	for i := range rs {
		x1, y1 = append(x1, rs[i]), append(y1, qs[i])
		xy = append(xy, rs[i]*qs[i])
	}
	mx, my := num.Sum(x1)/n, num.Sum(y1)/n
	// E[Q] = e0 + e2, cov(Q, r^2) = 2 e2, Var Q = v0 + v2 + 2 e2^2
	meanSE := math.Sqrt(varianceOf(qs) / n)
	if want := h.e0 + h.e2; math.Abs(my-want) > 5*meanSE {
		t.Errorf("mean of Q %.4f, formula %.4f (SE %.4f)", my, want, meanSE)
	}
	prod := make([]float64, n)
	for i := range prod {
		prod[i] = (rs[i] - 1) * (qs[i] - my)
	}
	if got, want := num.Sum(prod)/n, 2*h.e2; math.Abs(got-want) > 5*math.Sqrt(varianceOf(prod)/n) {
		t.Errorf("covariance of Q and r^2 %.4f, formula %.4f", got, want)
	}
	sq := make([]float64, n)
	for i := range sq {
		e := qs[i] - h.e0 - h.e2*rs[i]
		sq[i] = e * e
	}
	if got, want := num.Sum(sq)/n, h.v0+h.v2; math.Abs(got-want) > 5*math.Sqrt(varianceOf(sq)/n) {
		t.Errorf("conditional variance of Q %.4f, formula %.4f", got, want)
	}
	_ = mx
}

func varianceOf(x []float64) float64 {
	m := num.Sum(x) / float64(len(x))
	s := 0.0
	for _, v := range x {
		s += (v - m) * (v - m)
	}
	return s / float64(len(x)-1)
}
