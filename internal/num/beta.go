package num

import "math"

// betaPrefactor is x^a y^b / B(a, b) with y = 1 - x given by itself, in deviance form (Loader 2000).
func betaPrefactor(x, y, a, b float64) float64 {
	n := a + b
	front := math.Sqrt(a / n * b / (2 * math.Pi))
	return front * math.Exp(stirlingError(n)-stirlingError(a)-stirlingError(b)+betaDeviance(x, y, a, b))
}

// betaDeviance is a log(x/p) + b log(y/q) with p = a/(a+b), q = b/(a+b). The linear parts of both logarithms cancel exactly, so
// they are left out where both ratios are near 1.
func betaDeviance(x, y, a, b float64) float64 {
	n := a + b
	// n (x - p) from whichever of x and y is the smaller, which holds more digits.
	var d float64
	if x < y {
		d = n*x - a
	} else {
		d = b - n*y
	}
	u, v := d/a, -d/b
	if math.Abs(u) < 0.35 && math.Abs(v) < 0.35 {
		return a*logOnePlusMinus(u) + b*logOnePlusMinus(v)
	}
	return a*logRatio(n*x, a, u) + b*logRatio(n*y, b, v)
}

func logRatio(x, a, u float64) float64 {
	if math.Abs(u) < 0.35 {
		return math.Log1p(u)
	}
	return math.Log(x / a)
}

// BetaTails gives P(X <= x) and P(X > x) for a beta variable with shapes a, b > 0; y must be 1 - x, given by itself so that neither end loses
// digits. The tail on the far side of the mean is computed by a continued fraction.
func BetaTails(x, y, a, b float64) (lower, upper float64) {
	switch {
	case !(a > 0 && b > 0 && x >= 0 && y >= 0) || math.IsInf(a, 0) || math.IsInf(b, 0):
		domain("BetaTails", x, y, a, b)
	case x == 0:
		return 0, 1
	case y == 0:
		return 1, 0
	}
	front := betaPrefactor(x, y, a, b)
	if x*(a+b+2) < a+1 {
		lower = front * betaFraction(x, y, a, b)
		return lower, 1 - lower
	}
	upper = front * betaFraction(y, x, b, a)
	return 1 - upper, upper
}

// betaFraction is I_x(a, b) B(a, b) / (x^a y^b): the continued fraction of Didonato & Morris (1992, eq. 9), which takes x and y and so does not lose
// digits where either is near 1. Evaluated by the modified Lentz method.
func betaFraction(x, y, a, b float64) float64 {
	const tiny = 1e-300
	lambda := (a+b)*y - b // = a y - b x, from whichever of x and y holds more digits
	if x < y {
		lambda = a - (a+b)*x
	}
	f := a / (a + 1) * (lambda + 1)
	if math.Abs(f) < tiny {
		f = tiny
	}
	c, d := f, 0.0
	for n := 1.0; n < 1e6; n++ {
		s := a + 2*n - 1
		alpha := (a + n - 1) * (a + b + n - 1) / s * n * (b - n) / s * x * x
		beta := n + n*(b-n)*x/s + (a+n)/(s+2)*(lambda+1+n*(1+y))
		d = beta + alpha*d
		if math.Abs(d) < tiny {
			d = tiny
		}
		c = beta + alpha/c
		if math.Abs(c) < tiny {
			c = tiny
		}
		d = 1 / d
		step := c * d
		f *= step
		if math.Abs(step-1) < 3e-16 {
			break
		}
	}
	return 1 / f
}

// BetaCDF is P(X <= x), 0 <= x <= 1.
func BetaCDF(x, a, b float64) float64 {
	lower, _ := BetaTails(x, 1-x, a, b)
	return lower
}

// BetaSurvival is P(X > x).
func BetaSurvival(x, a, b float64) float64 {
	_, upper := BetaTails(x, 1-x, a, b)
	return upper
}

// betaLogit is log(x/(1-x)) with P(X <= x) = lower and P(X > x) = upper; the smaller is the target. On the logit scale a beta variable
// has a log-concave density for all shapes.
func betaLogit(lower, upper, a, b, start float64) float64 {
	return solveTail(lower, upper, start, func(v float64) (float64, float64, float64) {
		x, y := logistic(v)
		l, u := BetaTails(x, y, a, b)
		return l, u, betaPrefactor(x, y, a, b)
	})
}

// logistic gives e^v/(1+e^v) and 1/(1+e^v).
func logistic(v float64) (x, y float64) {
	e := math.Exp(-math.Abs(v))
	small, large := e/(1+e), 1/(1+e)
	if v < 0 {
		return small, large
	}
	return large, small
}

// betaStart is a first guess of the logit: a normal approximation of the logit, or the leading term of the nearer tail.
func betaStart(lower, upper, a, b float64) float64 {
	mean := math.Log(a / b)
	sd := math.Sqrt(1/a + 1/b)
	var z float64
	if lower < upper {
		z = -NormalQuantileUpper(lower)
	} else {
		z = NormalQuantileUpper(upper)
	}
	v := mean + z*sd
	logBeta := LogGamma(a) + LogGamma(b) - LogGamma(a+b)
	if lower < upper {
		if t := (math.Log(lower) + math.Log(a) + logBeta) / a; t < -3 && a < 2 {
			v = t
		}
	} else if t := -(math.Log(upper) + math.Log(b) + logBeta) / b; t > 3 && b < 2 {
		v = t
	}
	return v
}

// BetaQuantile is the x with BetaCDF(x, a, b) = p.
func BetaQuantile(p, a, b float64) float64 { return betaQuantile("BetaQuantile", p, 1-p, a, b) }

// BetaQuantileUpper is the x with BetaSurvival(x, a, b) = q.
func BetaQuantileUpper(q, a, b float64) float64 {
	return betaQuantile("BetaQuantileUpper", 1-q, q, a, b)
}

func betaQuantile(name string, lower, upper, a, b float64) float64 {
	switch {
	case !(lower >= 0 && upper >= 0 && a > 0 && b > 0):
		domain(name, lower, upper, a, b)
	case lower == 0:
		return 0
	case upper == 0:
		return 1
	}
	x, _ := logistic(betaLogit(lower, upper, a, b, betaStart(lower, upper, a, b)))
	return x
}
