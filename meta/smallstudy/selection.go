package smallstudy

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize"

	"footing/internal/num"
	"footing/meta"
)

// selectionCut is the one-sided level at which results count as significant in the favoured direction.
const selectionCut = 0.025

// SelectionResult is a selection model fitted to the studies.
type SelectionResult struct {
	Mean            Estimate
	TauSquared      float64
	Chance          float64 // publication of a result that misses the cut, relative to one that meets it
	ChanceLow       float64 // 95% limits on the log scale; 0 for a given chance
	ChanceHigh      float64
	LikelihoodRatio float64 // against the unselected model, 1 df; with P. 0 for a given chance
	P               float64
	Inside, Outside int // studies that meet and miss the cut
	Converged       bool
	Available       bool
	Why             string
}

// model is the likelihood of the step-function selection model (Vevea & Hedges 1995, eq. 5): a study is seen with weight 1 when its one-sided p in the favoured direction is at most the cut, else with
// weight omega. y is turned so that larger is favoured.
type model struct {
	y, v []float64
	cut  []float64 // the estimate at which p equals the cut: z sqrt(v)
	seen []bool    // y at or beyond it
}

func newModel(d meta.Data, sign float64) *model {
	m := &model{v: d.V}
	z := num.NormalQuantileUpper(selectionCut)
	for i, y := range d.Y {
		m.y = append(m.y, sign*y)
		m.cut = append(m.cut, z*math.Sqrt(d.V[i]))
		m.seen = append(m.seen, sign*y >= m.cut[i])
	}
	return m
}

func (m *model) sides() (inside, outside int) {
	for _, s := range m.seen {
		if s {
			inside++
		} else {
			outside++
		}
	}
	return inside, outside
}

// minusLog is minus the log-likelihood without its constant.
func (m *model) minusLog(mu, tau2, omega float64) float64 {
	var sum num.Accumulator
	logOmega := math.Log(omega)
	for i, y := range m.y {
		s2 := m.v[i] + tau2
		s := math.Sqrt(s2)
		r := y - mu
		sum.Add(math.Log(s2)/2 + r*r/(2*s2))
		// the chance to be seen: S + omega (1 - S), S the chance to meet the cut
		z := (m.cut[i] - mu) / s
		sum.Add(math.Log(num.NormalSurvival(z) + omega*num.NormalCDF(z)))
		if !m.seen[i] {
			sum.Add(-logOmega)
		}
	}
	return sum.Value()
}

// fit minimises over the mean and tau2, and over omega unless it is given. Parameters are (mean, log tau2, log omega); tau2 = 0 is compared by itself.
func (m *model) fit(start meta.Mean, given float64) (mu, tau2, omega, value float64, converged bool) {
	smallest := m.v[0]
	for _, v := range m.v {
		smallest = math.Min(smallest, v)
	}
	floor := smallest * 1e-6
	type point struct {
		mu, tau2, omega, value float64
		ok                     bool
	}
	best := point{value: math.Inf(1)}
	try := func(withTau bool, tau0, omega0 float64) {
		unpack := func(x []float64) (float64, float64, float64) {
			mu, at := x[0], 1
			tau2, omega := 0.0, given
			if withTau {
				tau2 = math.Exp(math.Min(x[at], 50))
				at++
			}
			if given == 0 {
				omega = math.Exp(math.Max(-30, math.Min(x[at], 30)))
			}
			return mu, tau2, omega
		}
		x0 := []float64{start.Estimate}
		if withTau {
			x0 = append(x0, math.Log(math.Max(tau0, floor)))
		}
		if given == 0 {
			x0 = append(x0, math.Log(omega0))
		}
		f := func(x []float64) float64 {
			a, b, c := unpack(x)
			if v := m.minusLog(a, b, c); !math.IsNaN(v) {
				return v
			}
			return 1e300
		}
		res, err := optimize.Minimize(optimize.Problem{Func: f}, x0, &optimize.Settings{Converger: &optimize.FunctionConverge{Absolute: 1e-13, Iterations: 200}, MajorIterations: 4000}, &optimize.NelderMead{SimplexSize: 0.3})
		if err != nil && res == nil {
			return
		}
		x := polish(f, res.X)
		a, b, c := unpack(x)
		if b < floor {
			b = 0
		}
		if v := m.minusLog(a, b, c); v < best.value-1e-12 {
			best = point{a, b, c, v, gradientSmall(f, x)}
		}
	}
	for _, omega0 := range []float64{1, 0.3} {
		try(false, 0, omega0)
		try(true, math.Max(start.TauSquared, smallest/10), omega0)
		if given != 0 {
			break
		}
	}
	return best.mu, best.tau2, best.omega, best.value, best.ok
}

// polish takes a few damped Newton steps with central differences.
func polish(f func([]float64) float64, x []float64) []float64 {
	x = append([]float64{}, x...)
	for step := 0; step < 12; step++ {
		g, h := derivatives(f, x)
		var inverse mat.Dense
		if inverse.Inverse(h) != nil {
			return x
		}
		var move mat.VecDense
		move.MulVec(&inverse, g)
		next := make([]float64, len(x))
		now := f(x)
		size := 0.0
		for i := range x {
			next[i] = x[i] - move.AtVec(i)
			size = math.Max(size, math.Abs(move.AtVec(i)))
		}
		if !(f(next) <= now+1e-12*math.Abs(now)) || size > 1 {
			return x
		}
		x = next
		if size < 1e-9 {
			return x
		}
	}
	return x
}

// derivatives are gradient and Hessian by central differences.
func derivatives(f func([]float64) float64, x []float64) (*mat.VecDense, *mat.Dense) {
	n := len(x)
	h := make([]float64, n)
	for i := range x {
		h[i] = 2e-4 * math.Max(0.1, math.Abs(x[i]))
	}
	at := func(i int, si float64, j int, sj float64) float64 {
		y := append([]float64{}, x...)
		y[i] += si * h[i]
		if j >= 0 {
			y[j] += sj * h[j]
		}
		return f(y)
	}
	g, hess := mat.NewVecDense(n, nil), mat.NewDense(n, n, nil)
	centre := f(x)
	for i := 0; i < n; i++ {
		up, down := at(i, 1, -1, 0), at(i, -1, -1, 0)
		g.SetVec(i, (up-down)/(2*h[i]))
		hess.Set(i, i, (up-2*centre+down)/(h[i]*h[i]))
		for j := 0; j < i; j++ {
			v := (at(i, 1, j, 1) - at(i, 1, j, -1) - at(i, -1, j, 1) + at(i, -1, j, -1)) / (4 * h[i] * h[j])
			hess.Set(i, j, v)
			hess.Set(j, i, v)
		}
	}
	return g, hess
}

func gradientSmall(f func([]float64) float64, x []float64) bool {
	g, _ := derivatives(f, x)
	for i := 0; i < g.Len(); i++ {
		if math.Abs(g.AtVec(i)) > 1e-4 {
			return false
		}
	}
	return true
}

// information gives the variances of mean and log omega from the observed information in (mean, tau2, omega); tau2 is left out of it at 0.
func (m *model) information(mu, tau2, omega float64, given bool) (varMean, varLogOmega float64, ok bool) {
	x := []float64{mu}
	if tau2 > 0 {
		x = append(x, math.Log(tau2))
	}
	if !given {
		x = append(x, math.Log(omega))
	}
	f := func(x []float64) float64 {
		at, t, o := 1, 0.0, omega
		if tau2 > 0 {
			t = math.Exp(x[at])
			at++
		}
		if !given {
			o = math.Exp(x[at])
		}
		return m.minusLog(x[0], t, o)
	}
	_, h := derivatives(f, x)
	var inverse mat.Dense
	if inverse.Inverse(h) != nil {
		return 0, 0, false
	}
	varMean = inverse.At(0, 0)
	if !given {
		varLogOmega = inverse.At(len(x)-1, len(x)-1)
	}
	return varMean, varLogOmega, varMean > 0 && varLogOmega >= 0
}

// Selection fits the step-function selection model (Vevea & Hedges 1995) with one cut at a one-sided p of .025 in the favoured direction (sign +1 where larger is favoured): standard errors from the observed
// information, the interval of the relative chance on the log scale, the likelihood-ratio test against the unselected maximum-likelihood model with 1 degree of freedom. It asks for 10 studies with 3 or more on each side of the cut.
func Selection(d meta.Data, sign, level float64) SelectionResult {
	m := newModel(d, sign)
	out := SelectionResult{}
	out.Inside, out.Outside = m.sides()
	if d.K() < 10 || out.Inside < 3 || out.Outside < 3 {
		out.Why = fmt.Sprintf("needs 10 studies with 3 or more on each side of its cut; there are %d, %d significant in the favoured direction and %d not", d.K(), out.Inside, out.Outside)
		return out
	}
	return m.result(d, sign, level, 0, out)
}

// SelectionGiven fits the same model with a given relative chance of publication (Vevea & Woods 2005), 0 < chance <= 1, for studies too few to estimate it.
func SelectionGiven(d meta.Data, sign, chance, level float64) SelectionResult {
	m := newModel(d, sign)
	out := SelectionResult{Chance: chance}
	out.Inside, out.Outside = m.sides()
	switch {
	case !(chance > 0 && chance <= 1):
		out.Why = fmt.Sprintf("a relative chance of publication lies above 0 and at most at 1; it is %g", chance)
		return out
	case d.K() < 2:
		out.Why = "needs at least 2 studies"
		return out
	}
	return m.result(d, sign, level, chance, out)
}

func (m *model) result(d meta.Data, sign, level, given float64, out SelectionResult) SelectionResult {
	ml, _ := meta.EstimatorByName("ml")
	tau := ml.Estimate(d)
	start := d.MeanAt(tau.Value)
	start.Estimate *= sign
	start.TauSquared = tau.Value
	mu, tau2, omega, value, converged := m.fit(start, given)
	varMean, varLogOmega, ok := m.information(mu, tau2, omega, given != 0)
	if !ok || !converged {
		out.Why = "its likelihood has no clear maximum here"
		return out
	}
	out.Mean = newEstimate(sign*mu, math.Sqrt(varMean), math.Inf(1), level, d.K())
	if !out.Mean.Available {
		out.Why = out.Mean.Why
		return out
	}
	out.TauSquared, out.Chance, out.Converged, out.Available = tau2, omega, converged, true
	if given == 0 {
		z := num.NormalQuantileUpper((1 - level) / 2)
		s := math.Sqrt(varLogOmega)
		out.ChanceLow, out.ChanceHigh = omega*math.Exp(-z*s), omega*math.Exp(z*s)
		plain := m.minusLog(start.Estimate, tau.Value, 1)
		out.LikelihoodRatio = math.Max(0, 2*(plain-value))
		out.P = num.ChiSquaredSurvival(out.LikelihoodRatio, 1)
	}
	return out
}
