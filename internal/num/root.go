package num

import "math"

// RootResult is what a search for a root found.
type RootResult struct {
	X          float64
	Lower      float64 // bracket at the end: f changes sign between Lower and Upper
	Upper      float64
	Iterations int
	Converged  bool
	Bracketed  bool // f had opposite signs at both ends to begin with
}

// RootOptions tune Root; the zero value asks for the last digits.
type RootOptions struct {
	Tolerance     float64 // absolute, in x; 0 means relative rounding only (about 4e-16 |x|)
	MaxIterations int     // 0 means 200
}

// Root finds x in [a, b] with f(x) = 0 by Brent's method (Brent 1973, ch. 4): inverse quadratic interpolation inside a bracket, with bisection
// when that is slow. It never leaves the bracket. Without a change of sign it returns Bracketed false.
func Root(f func(float64) float64, a, b float64, opt RootOptions) RootResult {
	if opt.MaxIterations == 0 {
		opt.MaxIterations = 200
	}
	fa, fb := f(a), f(b)
	if fa == 0 {
		return RootResult{X: a, Lower: a, Upper: a, Converged: true, Bracketed: true}
	}
	if fb == 0 {
		return RootResult{X: b, Lower: b, Upper: b, Converged: true, Bracketed: true}
	}
	if math.IsNaN(fa) || math.IsNaN(fb) || (fa > 0) == (fb > 0) {
		return RootResult{X: math.NaN(), Lower: math.Min(a, b), Upper: math.Max(a, b)}
	}
	c, fc := a, fa
	d := b - a
	e := d
	for i := 1; i <= opt.MaxIterations; i++ {
		if (fb > 0) == (fc > 0) {
			c, fc = a, fa
			d = b - a
			e = d
		}
		if math.Abs(fc) < math.Abs(fb) {
			a, b, c = b, c, b
			fa, fb, fc = fb, fc, fb
		}
		tol := 2*2.3e-16*math.Abs(b) + opt.Tolerance/2
		m := (c - b) / 2
		if math.Abs(m) <= tol || fb == 0 {
			return RootResult{X: b, Lower: math.Min(b, c), Upper: math.Max(b, c), Iterations: i, Converged: true, Bracketed: true}
		}
		d, e = brentStep(a, b, c, fa, fb, fc, d, e, m, tol)
		a, fa = b, fb
		if math.Abs(d) > tol {
			b += d
		} else {
			b += math.Copysign(tol, m)
		}
		fb = f(b)
	}
	return RootResult{X: b, Lower: math.Min(b, c), Upper: math.Max(b, c), Iterations: opt.MaxIterations, Bracketed: true}
}

func brentStep(a, b, c, fa, fb, fc, d, e, m, tol float64) (step, before float64) {
	if math.Abs(e) < tol || math.Abs(fa) <= math.Abs(fb) {
		return m, m
	}
	s := fb / fa
	var p, q float64
	if a == c {
		p, q = 2*m*s, 1-s
	} else {
		u, r := fa/fc, fb/fc
		p = s * (2*m*u*(u-r) - (b-a)*(r-1))
		q = (u - 1) * (r - 1) * (s - 1)
	}
	if p > 0 {
		q = -q
	} else {
		p = -p
	}
	if 2*p < math.Min(3*m*q-math.Abs(tol*q), math.Abs(e*q)) {
		return p / q, d
	}
	return m, m
}
