package num

import "math"

// NoncentralTCDF is P(T <= t) for the noncentral t distribution with df > 0 degrees of freedom and noncentrality delta: T = (Z + delta)/S with Z
// standard normal and S an independent chi variable over sqrt(df).
//
// It integrates P(Z <= t s - delta) over the density of S, in v = log s, by the trapezoidal rule, which converges exponentially here. Both tails are
// integrals of positive functions, so each keeps its relative accuracy; no series cancels. Where t is negative the distribution is
// reflected.
func NoncentralTCDF(t, df, delta float64) float64 {
	if t < 0 {
		return noncentralTUpper(-t, df, -delta)
	}
	return noncentralTLower(t, df, delta)
}

// NoncentralTSurvival is P(T > t).
func NoncentralTSurvival(t, df, delta float64) float64 {
	if t < 0 {
		return noncentralTLower(-t, df, -delta)
	}
	return noncentralTUpper(t, df, delta)
}

// noncentralTLower is P(T <= t), t >= 0.
func noncentralTLower(t, df, delta float64) float64 {
	checkNoncentralT(t, df, delta)
	switch {
	case t == 0:
		return NormalCDF(-delta)
	case math.IsInf(t, 1):
		return 1
	case delta == 0:
		return StudentTCDF(t, df)
	case df > 1e15:
		return NormalCDF(t - delta)
	}
	return mixOverChi(t, df, delta, false)
}

// noncentralTUpper is P(T > t), t >= 0.
func noncentralTUpper(t, df, delta float64) float64 {
	checkNoncentralT(t, df, delta)
	switch {
	case t == 0:
		return NormalSurvival(-delta)
	case math.IsInf(t, 1):
		return 0
	case delta == 0:
		return StudentTSurvival(t, df)
	case df > 1e15:
		return NormalSurvival(t - delta)
	}
	return mixOverChi(t, df, delta, true)
}

func checkNoncentralT(t, df, delta float64) {
	if !(df > 0) || math.IsNaN(t) || math.IsNaN(delta) || math.IsInf(delta, 0) {
		domain("NoncentralT", t, df, delta)
	}
}

// expExcess is (e^(2v) - 1)/2 - v, with its digits kept near v = 0: v^2 + 2 v^3/3 + v^4/3 + ...
func expExcess(v float64) float64 {
	if math.Abs(v) > 0.25 {
		return math.Expm1(2*v)/2 - v
	}
	x := 2 * v
	return x * x / 4 * (1 + x/3*(1+x/4*(1+x/5*(1+x/6*(1+x/7*(1+x/8*(1+x/9*(1+x/10*(1+x/11*(1+x/12*(1+x/13)))))))))))
}

// chiMixture is the integrand: log density of v = log S is constant - df (expExcess(v)), against the normal tail.
type chiMixture struct {
	t, df, delta float64
	upper        bool
}

// logAt is the logarithm of the integrand without its constant.
func (m chiMixture) logAt(v float64) float64 {
	return -m.df*expExcess(v) + m.logTail(m.t*math.Exp(v)-m.delta)
}

func (m chiMixture) logTail(z float64) float64 {
	if m.upper {
		z = -z
	}
	if z > -37 {
		return math.Log(NormalCDF(z))
	}
	// Mills' ratio by its asymptotic series: the first terms are enough to find a peak.
	return -z*z/2 - math.Log(-z*math.Sqrt(2*math.Pi)) - 1/(z*z)
}

// at is the integrand over e^shift.
func (m chiMixture) at(v, shift float64) float64 {
	z := m.t*math.Exp(v) - m.delta
	if m.upper {
		z = -z
	}
	e := math.Exp(-m.df*expExcess(v) - shift)
	switch {
	case z > 8.5:
		return e
	case z < -37:
		return math.Exp(m.logAt(v) - shift)
	}
	return e * NormalCDF(z)
}

// mixOverChi sums the trapezoidal rule outward from the integrand's peak.
func mixOverChi(t, df, delta float64, upper bool) float64 {
	m := chiMixture{t: t, df: df, delta: delta, upper: upper}
	peak := m.peak()
	shift := m.logAt(peak)
	h := chiStep(df, t*math.Exp(peak), delta)
	sum := m.at(peak, shift)
	sum += m.walk(peak, h, shift, sum)
	sum += m.walk(peak, -h, shift, sum)
	// log of the density's constant: 2 (df/2)^(df/2) e^(-df/2) / Gamma(df/2) = sqrt(df/pi) / exp(stirlingError(df/2))
	front := math.Sqrt(df/math.Pi) * h * math.Exp(shift-stirlingError(df/2))
	return math.Min(1, front*sum)
}

func (m chiMixture) walk(from, h, shift, enough float64) float64 {
	sum := 0.0
	for i := 1.0; i < 1e6; i++ {
		f := m.at(from+i*h, shift)
		sum += f
		if f < 1e-17*(sum+enough) {
			break
		}
	}
	return sum
}

// peak finds the v at which the integrand is largest, by climbing from the better of two starts: the peak of
// the density alone, and the peak where the normal tail acts as a normal density.
func (m chiMixture) peak() float64 {
	v := 0.0
	a, b := m.t*m.delta, m.df+m.t*m.t
	if root := (a + math.Sqrt(a*a+4*m.df*b)) / (2 * b); root > 0 {
		w := math.Log(root)
		if m.logAt(w) > m.logAt(v) {
			v = w
		}
	}
	step := 0.5 / math.Sqrt(2*m.df+m.t*m.t+1)
	best := m.logAt(v)
	for i := 0; i < 400; i++ {
		moved := false
		for _, d := range [2]float64{step, -step} {
			for {
				next := m.logAt(v + d)
				if !(next > best) {
					break
				}
				v, best, moved = v+d, next, true
				d *= 2
			}
		}
		if !moved {
			break
		}
	}
	return v
}

// chiStep is the step of the trapezoidal rule: the integrand is analytic in a strip around the real line; the step makes the error
// exp(-2 pi y/h), less what the integrand grows at imaginary distance y, about 1e-16.
func chiStep(df, ts, delta float64) float64 {
	best := 0.0
	slope := math.Max(math.Abs(ts), math.Abs(delta)) // of the normal tail's argument in v
	for _, y := range [...]float64{0.02, 0.04, 0.07, 0.1, 0.15, 0.2, 0.26, 0.33, 0.4, 0.48, 0.56, 0.64, 0.7} {
		growth := -df / 2 * math.Log(math.Cos(2*y))
		growth += slope * slope * y * y / 2
		if h := 2 * math.Pi * y / (36 + growth); h > best {
			best = h
		}
	}
	return best
}

// NoncentralTPDF is the density at t, by the identity f(t) = df/t [P(T_{df+2} <= t sqrt((df+2)/df)) - P(T_df <= t)] in its
// integral form, which does not cancel: the mixture of normal densities over the chi variable.
func NoncentralTPDF(t, df, delta float64) float64 {
	switch {
	case !(df > 0) || math.IsNaN(t) || math.IsNaN(delta):
		domain("NoncentralTPDF", t, df, delta)
	case df > 1e15:
		return NormalPDF(t - delta)
	}
	if t < 0 {
		t, delta = -t, -delta
	}
	// f(t) = integral of s phi(t s - delta) over the density of S; with v = log s the integrand peaks at the positive root of
	// (df+1) + t delta s - (df + t^2) s^2.
	a, b := t*delta, df+t*t
	s0 := (a + math.Sqrt(a*a+4*(df+1)*b)) / (2 * b)
	at := func(v float64) float64 {
		z := t*math.Exp(v) - delta
		return -df*expExcess(v) + v - z*z/2
	}
	peak := math.Log(s0)
	shift := at(peak)
	h := chiStep(df, t*s0, delta)
	sum := 1.0
	for _, d := range [2]float64{h, -h} {
		for i := 1.0; i < 1e6; i++ {
			f := math.Exp(at(peak+i*d) - shift)
			sum += f
			if f < 1e-17*sum {
				break
			}
		}
	}
	return math.Sqrt(df/math.Pi) / math.Sqrt(2*math.Pi) * h * sum * math.Exp(shift-stirlingError(df/2))
}
