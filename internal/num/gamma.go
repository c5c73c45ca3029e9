package num

import "math"

// stirlingError is log Gamma(x) - [(x - 1/2) log x - x + log(2 pi)/2], x > 0: what Stirling's form leaves out.
// Below 16 it is brought up by the recurrence of the gamma function; above, its asymptotic series (DLMF 5.11.1) is used.
// Multiples of a half below 16, which degrees of freedom give, are tabulated once.
func stirlingError(x float64) float64 {
	if x >= 16 {
		return stirlingSeries(x)
	}
	if h := 2 * x; h == math.Trunc(h) && h >= 1 {
		return stirlingHalves[int(h)]
	}
	return stirlingShifted(x)
}

var stirlingHalves = func() (table [32]float64) {
	for h := 1; h < len(table); h++ {
		table[h] = stirlingShifted(float64(h) / 2)
	}
	return table
}()

func stirlingSeries(x float64) float64 {
	r := 1 / (x * x)
	return (1.0/12 - r*(1.0/360-r*(1.0/1260-r*(1.0/1680-r*(1.0/1188-r*(691.0/360360-r/156)))))) / x
}

func stirlingShifted(x float64) float64 {
	var s Accumulator
	for ; x < 16; x++ {
		// error(x) - error(x+1) = (x + 1/2) log(1 + 1/x) - 1
		s.Add((x+0.5)*math.Log1p(1/x) - 1)
	}
	s.Add(stirlingSeries(x))
	return s.Value()
}

// logOnePlusMinus is log(1+u) - u for u > -1, with its digits kept near u = 0.
func logOnePlusMinus(u float64) float64 {
	if math.Abs(u) > 0.35 {
		return math.Log1p(u) - u
	}
	// log(1+u) = 2 artanh(r), r = u/(2+u), and 2r - u = -u r.
	r := u / (2 + u)
	r2 := r * r
	sum, power := 0.0, r2
	for k := 3.0; power > 1e-18*r2 || k < 6; k += 2 {
		sum += power / k
		power *= r2
	}
	return r * (2*sum - u)
}

// LogGammaHalfRatio is log Gamma(m/2) - log Gamma((m-1)/2), m > 1, to about 1e-15 absolute for every m: the subtraction of two large
// logarithms is done in closed form.
func LogGammaHalfRatio(m float64) float64 {
	if !(m > 1) || math.IsInf(m, 0) {
		domain("LogGammaHalfRatio", m)
	}
	b := (m - 1) / 2
	a := m / 2
	// (a-1/2) log a - a - (b-1/2) log b + b with a = b + 1/2
	return b*math.Log1p(0.5/b) - 0.5 + 0.5*math.Log(b) + stirlingError(a) - stirlingError(b)
}

// LogGamma is log |Gamma(x)| for x > 0.
func LogGamma(x float64) float64 {
	if !(x > 0) {
		domain("LogGamma", x)
	}
	g, _ := math.Lgamma(x)
	return g
}

// gammaPrefactor is x^a e^-x / Gamma(a), in deviance form (Loader 2000), so that it keeps its digits for large a near x = a.
func gammaPrefactor(x, a float64) float64 {
	return math.Sqrt(a/(2*math.Pi)) * math.Exp(a*logRatioMinus(x, a)-stirlingError(a))
}

// logRatioMinus is log(x/a) - (x-a)/a.
func logRatioMinus(x, a float64) float64 {
	u := (x - a) / a
	if u > -0.35 && u < 0.35 {
		return logOnePlusMinus(u)
	}
	return math.Log(x/a) - u
}

// GammaTails gives P(X <= x) and P(X > x) for a gamma variable of shape a > 0 and scale 1, x >= 0. Series below the mean, continued
// fraction above (DLMF 8.11.4 and 8.9.2): the smaller tail is computed, so that both keep their digits.
func GammaTails(x, a float64) (lower, upper float64) {
	switch {
	case !(a > 0) || math.IsNaN(x) || x < 0 || math.IsInf(a, 0):
		domain("GammaTails", x, a)
	case x == 0:
		return 0, 1
	case math.IsInf(x, 1):
		return 1, 0
	}
	front := gammaPrefactor(x, a)
	if x < a+0.5 {
		term, sum := 1/a, 1/a
		for n := 1.0; n < 1e7; n++ {
			term *= x / (a + n)
			sum += term
			if term < sum*1e-17 {
				break
			}
		}
		lower = front * sum
		return lower, 1 - lower
	}
	upper = front * gammaFraction(x, a)
	return 1 - upper, upper
}

// gammaFraction is the continued fraction of Gamma(a, x) / (x^a e^-x) by the modified Lentz method.
func gammaFraction(x, a float64) float64 {
	const tiny = 1e-300
	b := x + 1 - a
	c := 1 / tiny
	d := 1 / b
	h := d
	for i := 1.0; i < 1e7; i++ {
		an := -i * (i - a)
		b += 2
		d = an*d + b
		if math.Abs(d) < tiny {
			d = tiny
		}
		c = b + an/c
		if math.Abs(c) < tiny {
			c = tiny
		}
		d = 1 / d
		step := d * c
		h *= step
		if math.Abs(step-1) < 3e-16 {
			break
		}
	}
	return h
}

// gammaLogQuantile is log x with P(X <= x) = lower and P(X > x) = upper; the smaller of the two is the target.
func gammaLogQuantile(lower, upper, a float64) float64 {
	// Wilson & Hilferty (1931) to start, or the first term of the series in the far lower tail.
	z := 0.0
	if lower < upper {
		z = -NormalQuantileUpper(lower)
	} else {
		z = NormalQuantileUpper(upper)
	}
	w := 1 - 1/(9*a) + z/(3*math.Sqrt(a))
	start := math.Log(a) + 3*math.Log(math.Max(w, 1e-2))
	if small := (math.Log(lower) + LogGamma(a+1)) / a; lower < upper && (small < math.Log(a)-2 || w < 0.1) {
		start = small
	}
	return solveTail(lower, upper, start, func(v float64) (float64, float64, float64) {
		x := math.Exp(v)
		lo, up := GammaTails(x, a)
		return lo, up, gammaPrefactor(x, a)
	})
}

// GammaQuantile is the x with P(X <= x) = p for shape a; GammaQuantileUpper has P(X > x) = q.
func GammaQuantile(p, a float64) float64 {
	return gammaQuantile("GammaQuantile", p, 1-p, a)
}

// GammaQuantileUpper is the x with P(X > x) = q for shape a.
func GammaQuantileUpper(q, a float64) float64 {
	return gammaQuantile("GammaQuantileUpper", 1-q, q, a)
}

func gammaQuantile(name string, lower, upper, a float64) float64 {
	switch {
	case !(lower >= 0 && upper >= 0) || !(a > 0):
		domain(name, lower, upper, a)
	case lower == 0:
		return 0
	case upper == 0:
		return math.Inf(1)
	}
	return math.Exp(gammaLogQuantile(lower, upper, a))
}
