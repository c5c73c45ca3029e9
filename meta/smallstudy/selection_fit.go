package smallstudy

import (
	"math"

	"footing/internal/num"
	"footing/meta"
)

// params are the parameters of the selection model: mean, tau2 and log omega.
type params [3]float64

func (p params) omega() float64 { return math.Exp(p[2]) }

// slope is the log-likelihood (without its constant) with its gradient by (mean, tau2, log omega).
//
// With S^2 = v + tau2, u = (cut - mean)/S and A = Q(u) + omega P(u): log-likelihood sum -log S - r^2/2S^2 + [missed] log omega - log A; dA/dmean = (1 - omega) f(u)/S, dA/dtau2 =
// (1 - omega) f(u) u/2S^2, dA/dlog omega = omega P(u), P, Q and f the standard normal distribution, its upper tail and its density.
func (m *model) slope(p params) (value float64, g params) {
	omega := p.omega()
	var sum, gm, gt, gw num.Accumulator
	for i, y := range m.y {
		s2 := m.v[i] + p[1]
		s := math.Sqrt(s2)
		r := y - p[0]
		u := (m.cut[i] - p[0]) / s
		upper, lower := num.NormalSurvival(u), num.NormalCDF(u)
		a := upper + omega*lower
		f := (1 - omega) * num.NormalPDF(u) / a
		sum.Add(-(math.Log(s2)+r*r/s2)/2 - math.Log(a))
		gm.Add(r/s2 - f/s)
		gt.Add((r*r/s2 - 1 - f*u) / (2 * s2))
		miss := 0.0
		if !m.seen[i] {
			miss = 1
			sum.Add(p[2])
		}
		gw.Add(miss - omega*lower/a)
	}
	return sum.Value(), params{gm.Value(), gt.Value(), gw.Value()}
}

// curvature is the Hessian of the log-likelihood by central differences of its exact gradient, for the free parameters. tau2 never steps below 0.
func (m *model) curvature(p params, free []int) [][]float64 {
	h := make([][]float64, len(free))
	for a, i := range free {
		step := 1e-5 * m.step(p, i)
		up, down := p, p
		up[i] += step
		down[i] = p[i] - step
		if i == 1 && down[1] < 0 {
			down[1] = 0
		}
		_, gu := m.slope(up)
		_, gd := m.slope(down)
		h[a] = make([]float64, len(free))
		for b, j := range free {
			h[a][b] = (gu[j] - gd[j]) / (up[i] - down[i])
		}
	}
	for a := range h {
		for b := 0; b < a; b++ {
			h[a][b] = (h[a][b] + h[b][a]) / 2
			h[b][a] = h[a][b]
		}
	}
	return h
}

// step is the natural size of a parameter: a typical standard error, variance, and 1.
func (m *model) step(p params, i int) float64 {
	switch i {
	case 0:
		return math.Sqrt(m.typical + p[1])
	case 1:
		return m.typical + p[1]
	}
	return 1
}

// climb goes from a start to a local maximum by damped Newton steps; tau2 stays at 0 while the slope there points below it.
func (m *model) climb(p params, estimateOmega bool) (params, float64, bool) {
	value, g := m.slope(p)
	for iteration := 0; iteration < 100; iteration++ {
		free := []int{0}
		if p[1] > 0 || g[1] > 0 {
			free = append(free, 1)
		}
		if estimateOmega {
			free = append(free, 2)
		}
		move := m.newton(p, g, free)
		next, nextValue, nextG, moved := m.search(p, value, move)
		if !moved {
			return p, value, m.flat(p, g, free)
		}
		size := 0.0
		for i := range p {
			size = math.Max(size, math.Abs(next[i]-p[i])/m.step(p, i))
		}
		p, value, g = next, nextValue, nextG
		if math.Abs(p[2]) > 25 {
			return p, value, false
		}
		if size < 1e-11 {
			return p, value, true
		}
	}
	return p, value, false
}

// flat says whether the slope is 0 as far as rounding lets one see, in units of the parameters' own sizes.
func (m *model) flat(p, g params, free []int) bool {
	for _, i := range free {
		if math.Abs(g[i])*m.step(p, i) > 1e-7*float64(len(m.y)) {
			return false
		}
	}
	return true
}

// newton is the step -H^-1 g in scaled parameters, with a ridge where H is not negative definite.
func (m *model) newton(p, g params, free []int) params {
	h := m.curvature(p, free)
	n := len(free)
	a := make([][]float64, n)
	for ridge := 0.0; ; ridge = math.Max(2*ridge, 1e-3*float64(len(m.y))) {
		b := make([]float64, n)
		for i := range a {
			a[i] = make([]float64, n)
			for j := range a[i] {
				a[i][j] = -h[i][j] * m.step(p, free[i]) * m.step(p, free[j])
			}
			a[i][i] += ridge
			b[i] = g[free[i]] * m.step(p, free[i])
		}
		if x, ok := solvePositive(a, b); ok {
			var out params
			for i, f := range free {
				out[f] = x[i] * m.step(p, f)
			}
			return out
		}
		if ridge > 1e12 {
			return params{}
		}
	}
}

// search halves a step until the log-likelihood doesn't fall.
func (m *model) search(p params, value float64, move params) (params, float64, params, bool) {
	for share := 1.0; share > 1e-9; share /= 2 {
		next := p
		for i := range p {
			next[i] += share * move[i]
		}
		next[1] = math.Max(0, next[1])
		next[2] = math.Max(-30, math.Min(30, next[2]))
		if next == p {
			return p, value, params{}, false
		}
		if v, g := m.slope(next); v >= value-1e-13*math.Abs(value) && !math.IsNaN(v) {
			return next, v, g, true
		}
	}
	return p, value, params{}, false
}

// solvePositive solves a x = b by Cholesky's factors (a is overwritten); ok is false where a is not positive definite.
func solvePositive(a [][]float64, b []float64) (x []float64, ok bool) {
	n := len(b)
	x = append([]float64{}, b...)
	for j := 0; j < n; j++ {
		size := a[j][j]
		for k := 0; k < j; k++ {
			a[j][j] -= a[j][k] * a[j][k]
		}
		if !(a[j][j] > 1e-14*math.Abs(size)) {
			return nil, false
		}
		a[j][j] = math.Sqrt(a[j][j])
		for i := j + 1; i < n; i++ {
			for k := 0; k < j; k++ {
				a[i][j] -= a[i][k] * a[j][k]
			}
			a[i][j] /= a[j][j]
		}
	}
	for i := 0; i < n; i++ {
		for k := 0; k < i; k++ {
			x[i] -= a[i][k] * x[k]
		}
		x[i] /= a[i][i]
	}
	for i := n - 1; i >= 0; i-- {
		for k := i + 1; k < n; k++ {
			x[i] -= a[k][i] * x[k]
		}
		x[i] /= a[i][i]
	}
	return x, true
}

// fit maximises the likelihood over mean and tau2, and over omega unless it is given (given = 0 estimates it), from several starts, the highest taken. It gives minus
// the log-likelihood.
func (m *model) fit(start meta.Mean, given float64) (mu, tau2, omega, value float64, converged bool) {
	inverse := 0.0
	for _, v := range m.v {
		inverse += 1 / v
	}
	m.typical = float64(len(m.v)) / inverse
	starts := []params{}
	for _, t := range []float64{start.TauSquared, 4*start.TauSquared + m.typical, 0} {
		logs := []float64{math.Log(given)}
		if given == 0 {
			logs = []float64{0, -1.2}
		}
		for _, l := range logs {
			starts = append(starts, params{start.Estimate, t, l})
		}
	}
	if len(m.y) > 200 { // with so many studies the likelihood has one maximum in practice
		starts = starts[:1]
	}
	best, top := params{}, math.Inf(-1)
	for _, s := range starts {
		if p, v, ok := m.climb(s, given == 0); v > top+1e-10 {
			best, top, converged = p, v, ok
		}
	}
	return best[0], best[1], best.omega(), -top, converged
}

// information gives the variances of mean and log omega from the observed information in (mean, tau2, log omega); tau2 is left out of it at 0.
func (m *model) information(mu, tau2, omega float64, given bool) (varMean, varLogOmega float64, ok bool) {
	p := params{mu, tau2, math.Log(omega)}
	free := []int{0}
	if tau2 > 0 {
		free = append(free, 1)
	}
	if !given {
		free = append(free, 2)
	}
	h := m.curvature(p, free)
	inverse := func(at int) (float64, bool) {
		a, b := make([][]float64, len(free)), make([]float64, len(free))
		for i := range a {
			a[i] = make([]float64, len(free))
			for j := range a[i] {
				a[i][j] = -h[i][j] * m.step(p, free[i]) * m.step(p, free[j])
			}
		}
		b[at] = m.step(p, free[at])
		x, ok := solvePositive(a, b)
		if !ok {
			return 0, false
		}
		return x[at] * m.step(p, free[at]), true
	}
	if varMean, ok = inverse(0); !ok {
		return 0, 0, false
	}
	if !given {
		varLogOmega, ok = inverse(len(free) - 1)
	}
	return varMean, varLogOmega, ok
}
