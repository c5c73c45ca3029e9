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

// expExcess is (e^(2v) - 1)/2 - v, with its digits kept near v = 0 by its series, the sum of 2^(k-1) v^k / k! from k = 2.
func expExcess(v float64) float64 {
	if v > 0.25 || v < -0.25 {
		return math.Expm1(2*v)/2 - v
	}
	if v < 0.02 && v > -0.02 {
		return v * v * (1 + v*(2.0/3+v*(1.0/3+v*(2.0/15+v*(2.0/45+v*(4.0/315+v*(1.0/315)))))))
	}
	return v * v * (2.0/2 + v*(4.0/6+v*(8.0/24+v*(16.0/120+v*(32.0/720+v*(64.0/5040+v*(128.0/40320+v*(256.0/362880+v*(512.0/3628800+v*(1024.0/39916800+v*(2048.0/479001600+v*(4096.0/6227020800+v*(8192.0/87178291200+v*(16384.0/1307674368000+v*(32768.0/20922789888000+v*(65536.0/355687428096000))))))))))))))))
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
	if z > 8.5 {
		return 0
	}
	if z > -37 {
		return math.Log(NormalCDF(z))
	}
	// Mills' ratio by its asymptotic series: the first terms are enough to find a peak.
	return -z*z/2 - math.Log(-z*math.Sqrt(2*math.Pi)) - 1/(z*z)
}

// at is the integrand over e^shift at v, with ts = t e^v.
func (m chiMixture) at(v, ts, shift float64) float64 {
	z := ts - m.delta
	if m.upper {
		z = -z
	}
	e := math.Exp(-m.df*expExcess(v) - shift)
	switch {
	case z > 8.3:
		return e
	case z > -2:
		return e * math.Erfc(-z/math.Sqrt2) / 2
	case z < -37:
		return math.Exp(m.logAt(v) - shift)
	}
	return e * NormalCDF(z)
}

// mixOverChi sums the trapezoidal rule outward from near the integrand's peak.
func mixOverChi(t, df, delta float64, upper bool) float64 {
	m := chiMixture{t: t, df: df, delta: delta, upper: upper}
	from, shift := m.start()
	h := chiStep(df, math.Max(t*math.Exp(from), math.Abs(delta)), fullDigits)
	sum := 1.0
	sum += m.walk(from, h, shift, sum)
	sum += m.walk(from, -h, shift, sum)
	// The density's constant over e^shift: 2 (df/2)^(df/2) e^(-df/2) / Gamma(df/2) = sqrt(df/pi) / exp(stirlingError(df/2)).
	front := math.Sqrt(df/math.Pi) * h * math.Exp(shift-stirlingError(df/2))
	return math.Min(1, front*sum)
}

func (m chiMixture) walk(from, h, shift, enough float64) float64 {
	sum := 0.0
	ts := m.t * math.Exp(from)
	ratio := math.Exp(h)
	for i := 1.0; i < 1e6; i++ {
		v := from + i*h
		// Where t s is small the rounding of a running product does no harm; elsewhere each node has its own exponential.
		if ts *= ratio; ts > 8 {
			ts = m.t * math.Exp(v)
		}
		f := m.at(v, ts, shift)
		sum += f
		if f < 3e-16*(sum+enough) {
			break
		}
	}
	return sum
}

// start is a v near the integrand's peak: where the density alone peaks, or where the normal tail acts as a normal density, whichever is
// higher. walk climbs the rest of the way.
func (m chiMixture) start() (v, logAt float64) {
	logAt = m.logAt(0)
	a, b := m.t*m.delta, m.df+m.t*m.t
	root := (a + math.Sqrt(a*a+4*m.df*b)) / (2 * b)
	if root > 0 {
		w := math.Log(root)
		if l := m.logAt(w); l > logAt {
			return w, l
		}
	}
	return 0, logAt
}

// strip holds imaginary distances y with the two ways in which the integrand grows there: the chi density by (cos 2y)^(-df/2), the normal tail,
// whose argument has slope k in v, by exp(k^2 sin^2 y / (2 cos 2y)) at most.
var strip = func() (table [13]struct{ y, density, tail float64 }) {
	for i, y := range [13]float64{0.02, 0.04, 0.07, 0.1, 0.15, 0.2, 0.26, 0.33, 0.4, 0.48, 0.56, 0.64, 0.7} {
		table[i].y = y
		table[i].density = -math.Log(math.Cos(2*y)) / 2
		table[i].tail = math.Sin(y) * math.Sin(y) / (2 * math.Cos(2*y))
	}
	return table
}()

// fullDigits asks chiStep for an error of 2e-14 at most; measured it is below 4e-14.
const fullDigits = 31.5

// chiStep is the step of the trapezoidal rule. The integrand is analytic in a strip around the real line; at imaginary distance y the rule's
// error is exp(-2 pi y/h) times what the integrand has grown there, and the widest h that makes it exp(-digits) is taken.
func chiStep(df, slope, digits float64) float64 {
	best := 0.0
	for _, s := range strip {
		growth := df*s.density + slope*slope*s.tail
		if h := 2 * math.Pi * s.y / (digits + growth); h > best {
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
	h := chiStep(df, math.Max(t*s0, math.Abs(delta)), fullDigits)
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

// ChiRule gives nodes s and weights w for the mean of a function of S, a chi variable over sqrt(df): the trapezoidal rule in log s. It is good to about 1e-12
// absolute for functions as smooth as a normal distribution function of slope up to slope; the weights add up to 1.
func ChiRule(df, slope float64) (s, w []float64) {
	if !(df > 0) || math.IsInf(df, 0) || !(slope >= 0) {
		domain("ChiRule", df, slope)
	}
	h := chiStep(df, slope, 31)
	front := math.Sqrt(df/math.Pi) * h * math.Exp(-stirlingError(df/2))
	put := func(v float64) bool {
		weight := front * math.Exp(-df*expExcess(v))
		s, w = append(s, math.Exp(v)), append(w, weight)
		return weight > 1e-15*front
	}
	put(0)
	for _, d := range [2]float64{h, -h} {
		for i := 1.0; put(i*d) && i < 1e6; i++ {
		}
	}
	return s, w
}
