package num

import (
	"math"
	"runtime"
	"testing"
)

func TestRootFindsTheLastDigits(t *testing.T) {
	for _, c := range []struct {
		f    func(float64) float64
		a, b float64
		want float64
	}{
		{func(x float64) float64 { return x*x - 2 }, 0, 2, math.Sqrt2},
		{func(x float64) float64 { return math.Cos(x) - x }, 0, 1, 0.7390851332151607}, // the Dottie number, OEIS A003957
		{func(x float64) float64 { return math.Exp(x) - 1e-8 }, -40, 0, math.Log(1e-8)},
		{func(x float64) float64 { return math.Atan(x - 1e3) }, -1e6, 1e6, 1e3},
	} {
		r := Root(c.f, c.a, c.b, RootOptions{})
		if !r.Converged || !r.Bracketed || math.Abs(r.X-c.want) > 1e-14*math.Abs(c.want) || r.Iterations > 80 {
			t.Errorf("%+v, want %.16g", r, c.want)
		}
	}
	if r := Root(func(x float64) float64 { return x*x + 1 }, -1, 1, RootOptions{}); r.Bracketed || r.Converged {
		t.Errorf("a function without a root: %+v", r)
	}
	if r := Root(func(x float64) float64 { return x }, 1, -3, RootOptions{MaxIterations: 1}); r.Converged {
		t.Errorf("one iteration can't converge: %+v", r)
	}
}

func TestMinimize(t *testing.T) {
	r := Minimize(func(x float64) float64 { return (x-1.25)*(x-1.25) + 3 }, -10, 40, 0)
	if !r.Converged || math.Abs(r.X-1.25) > 1e-7 || math.Abs(r.F-3) > 1e-13 {
		t.Errorf("%+v", r)
	}
	// x log x has its minimum at 1/e.
	if r := Minimize(func(x float64) float64 { return x * math.Log(x) }, 1e-6, 3, 0); math.Abs(r.X-1/math.E) > 1e-7 {
		t.Errorf("%+v", r)
	}
}

// TestIntegrateKnownIntegrals: closed forms, with singular ends, infinite ranges and a narrow peak.
func TestIntegrateKnownIntegrals(t *testing.T) {
	inf := math.Inf(1)
	for name, c := range map[string]struct {
		f      func(float64) float64
		a, b   float64
		breaks []float64
		want   float64
	}{
		"polynomial":  {func(x float64) float64 { return x * x * x }, -1, 3, nil, 20},
		"backwards":   {math.Exp, 1, 0, nil, 1 - math.E},
		"root":        {math.Sqrt, 0, 1, nil, 2.0 / 3},
		"log":         {math.Log, 0, 1, nil, -1},
		"normal":      {NormalPDF, -inf, inf, nil, 1},
		"tail":        {NormalPDF, 2, inf, nil, NormalSurvival(2)},
		"exponential": {func(x float64) float64 { return math.Exp(x) }, -inf, 0, nil, 1},
		"Cauchy":      {func(x float64) float64 { return 1 / (1 + x*x) }, -inf, inf, nil, math.Pi},
		"corner":      {math.Abs, -1, 2, []float64{0}, 2.5},
		"narrow":      {func(x float64) float64 { return NormalPDF((x-0.3)*1e4) * 1e4 }, -1, 1, []float64{0.299, 0.3, 0.301}, 1},
		"oscillation": {func(x float64) float64 { return math.Sin(40 * x) }, 0, 1, nil, (1 - math.Cos(40)) / 40},
	} {
		r := Integrate(c.f, c.a, c.b, IntegrateOptions{Relative: 1e-12, Breaks: c.breaks})
		if !r.Converged || math.Abs(r.Value-c.want) > 1e-11*math.Max(1, math.Abs(c.want)) {
			t.Errorf("%s: %+v, want %.15g", name, r, c.want)
		}
		if math.Abs(r.Value-c.want) > 10*r.Error+1e-14 {
			t.Errorf("%s: error %.2e, estimated %.2e", name, math.Abs(r.Value-c.want), r.Error)
		}
	}
	if r := Integrate(func(x float64) float64 { return 1 / x }, 0, 1, IntegrateOptions{MaxIntervals: 50}); r.Converged {
		t.Errorf("a divergent integral converged: %+v", r)
	}
}

// TestGaussLegendreIsExactForPolynomials of degree 2n - 1.
func TestGaussLegendreIsExactForPolynomials(t *testing.T) {
	for _, n := range []int{1, 2, 5, 20, 64} {
		x, w := GaussLegendre(n)
		for _, degree := range []int{0, 2 * n / 2 * 2, 2*n - 2} {
			if degree > 2*n-1 {
				continue
			}
			s := 0.0
			for i := range x {
				s += w[i] * math.Pow(x[i], float64(degree))
			}
			if want := 2 / float64(degree+1); degree%2 == 0 && math.Abs(s-want) > 1e-14 {
				t.Errorf("n = %d, degree %d: %.16g, want %.16g", n, degree, s, want)
			}
		}
	}
}

func TestSumKeepsWhatCancels(t *testing.T) {
	if s := Sum([]float64{1, 1e100, 1, -1e100}); s != 2 {
		t.Errorf("sum %g, want 2", s)
	}
	xs := make([]float64, 1e6)
	for i := range xs {
		xs[i] = 0.1
	}
	if s := Sum(xs); math.Abs(s-1e5) > 2e-11 {
		t.Errorf("a million tenths: %.12f", s)
	}
}

// TestStreams: the same seed and index give the same numbers, other indices others; moments within 5 standard errors (seed fixed, false-alarm probability below 1e-5).
func TestStreams(t *testing.T) {
	a, b, c := NewStream(1, 2), NewStream(1, 2), NewStream(1, 3)
	same, differ := true, false
	for i := 0; i < 100; i++ {
		x, y, z := a.Normal(), b.Normal(), c.Normal()
		same, differ = same && x == y, differ || x != z
	}
	if !same || !differ {
		t.Error("streams are not their seed and index")
	}
	const n = 200000
	s := NewStream(9, 0)
	for name, d := range map[string]struct {
		draw           func() float64
		mean, variance float64
	}{
		"uniform":        {s.Uniform, 0.5, 1.0 / 12},
		"normal":         {s.Normal, 0, 1},
		"gamma .4":       {func() float64 { return s.Gamma(0.4) }, 0.4, 0.4},
		"gamma 7":        {func() float64 { return s.Gamma(7) }, 7, 7},
		"binomial":       {func() float64 { return float64(s.Binomial(300, 0.3)) }, 90, 63},
		"binomial small": {func() float64 { return float64(s.Binomial(9, 0.8)) }, 7.2, 1.44},
	} {
		var sum, squares Accumulator
		for i := 0; i < n; i++ {
			x := d.draw()
			sum.Add(x)
			squares.Add((x - d.mean) * (x - d.mean))
		}
		if m := sum.Value() / n; math.Abs(m-d.mean) > 5*math.Sqrt(d.variance/n) {
			t.Errorf("%s: mean %g, want %g", name, m, d.mean)
		}
		if v := squares.Value() / n; math.Abs(v/d.variance-1) > 5*math.Sqrt(8.0/n) {
			t.Errorf("%s: variance %g, want %g", name, v, d.variance)
		}
	}
}

// TestChunksDoNotDependOnCores: each chunk is done once, whatever the number of cores.
func TestChunksDoNotDependOnCores(t *testing.T) {
	run := func(cores int) float64 {
		defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(cores))
		parts := make([]float64, 37)
		Chunks(len(parts), func(i int) { parts[i] += NewStream(5, uint64(i)).Normal() })
		return Sum(parts)
	}
	if one, many := run(1), run(7); one != many {
		t.Errorf("%g on one core, %g on seven", one, many)
	}
}

// TestChiRule averages what is known: the mean of S and of the normal distribution function over it, which is Student's t.
func TestChiRule(t *testing.T) {
	for _, df := range []float64{2, 7, 30, 500, 1e5} {
		s, w := ChiRule(df, 8)
		total, tail := 0.0, 0.0
		for i := range s {
			total += w[i]
			tail += w[i] * NormalSurvival(2.1*s[i])
		}
		if math.Abs(total-1) > 1e-12 || math.Abs(tail-StudentTSurvival(2.1, df)) > 1e-12 {
			t.Errorf("df %g: weights %.15g, t tail %.15g against %.15g", df, total, tail, StudentTSurvival(2.1, df))
		}
	}
}
