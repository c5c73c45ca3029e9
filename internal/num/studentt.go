package num

import "math"

// StudentTCDF is P(T <= t) for Student's t with df > 0 degrees of freedom (df = +Inf is the normal).
func StudentTCDF(t, df float64) float64 { return StudentTSurvival(-t, df) }

// StudentTSurvival is P(T > t).
func StudentTSurvival(t, df float64) float64 {
	switch {
	case !(df > 0) || math.IsNaN(t):
		domain("StudentTSurvival", t, df)
	case df > 1e17:
		return NormalSurvival(t)
	case math.IsInf(t, 0):
		if t > 0 {
			return 0
		}
		return 1
	}
	t2 := t * t
	if math.IsInf(t2, 1) {
		t2 = math.MaxFloat64
	}
	// P(|T| <= |t|) = I_x(1/2, df/2) with x = t^2/(df + t^2)
	inside, outside := BetaTails(t2/(df+t2), df/(df+t2), 0.5, df/2)
	if t >= 0 {
		return outside / 2
	}
	return 0.5 + inside/2
}

// StudentTPDF is the density at t.
func StudentTPDF(t, df float64) float64 {
	if !(df > 0) || math.IsNaN(t) {
		domain("StudentTPDF", t, df)
	}
	if df > 1e17 {
		return NormalPDF(t)
	}
	// Gamma((df+1)/2) / (sqrt(df pi) Gamma(df/2)) (1 + t^2/df)^(-(df+1)/2)
	return math.Exp(LogGammaHalfRatio(df+1)-(df+1)/2*math.Log1p(t/df*t)) / math.Sqrt(df*math.Pi)
}

// StudentTQuantile is the t with StudentTCDF(t, df) = p.
func StudentTQuantile(p, df float64) float64 {
	if !(p >= 0 && p <= 1) {
		domain("StudentTQuantile", p, df)
	}
	if p > 0.5 {
		return StudentTQuantileUpper(1-p, df)
	}
	return -StudentTQuantileUpper(p, df)
}

// StudentTQuantileUpper is the t with StudentTSurvival(t, df) = q. Start: the normal quantile with the first terms of its
// Cornish-Fisher expansion (Fisher & Cornish 1960), or the leading power of the far tail; then Newton's steps on the logarithm of the tail.
func StudentTQuantileUpper(q, df float64) float64 {
	switch {
	case !(q >= 0 && q <= 1) || !(df > 0):
		domain("StudentTQuantileUpper", q, df)
	case q == 0:
		return math.Inf(1)
	case q == 1:
		return math.Inf(-1)
	case q > 0.5:
		return -StudentTQuantileUpper(1-q, df)
	case q == 0.5:
		return 0
	case df > 1e17:
		return NormalQuantileUpper(q)
	}
	return math.Sqrt(df) * math.Exp(studentLogit(q, df)/2)
}

// studentLogit is log(t^2/df) at upper tail q < 1/2.
func studentLogit(q, df float64) float64 {
	z := NormalQuantileUpper(q)
	z2 := z * z
	t := z * (1 + ((z2+1)/4+((5*z2*z2+16*z2+3)/96+(3*z2*z2*z2+19*z2*z2+17*z2-15)/(384*df))/df)/df)
	start := 2*math.Log(t) - math.Log(df)
	if !(df > 4 && z2 < 4*df) {
		// the far tail: q = C t^-df, C = df^(df/2) / (df B(df/2, 1/2))
		a := df / 2
		logBeta := LogGamma(a) + LogGamma(0.5) - LogGamma(a+0.5)
		far := -(math.Log(2*q) + math.Log(a) + logBeta) / a
		if far > start || df <= 4 {
			start = math.Max(far, 2*math.Log(z)-math.Log(df))
		}
		if far > 600 {
			return far // the leading power is exact to the last digit there, and y would leave the range of a double
		}
	}
	return betaLogit(1-2*q, 2*q, 0.5, df/2, start)
}
