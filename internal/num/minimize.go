package num

import "math"

// MinimumResult is what a search for a minimum found.
type MinimumResult struct {
	X, F       float64
	Iterations int
	Converged  bool
}

// Minimize finds a local minimum of f in [a, b] by Brent's method (Brent 1973, ch. 5): golden section with parabolic steps. tolerance is
// absolute in x; 0 means what rounding allows (about 1.5e-8 of |x|, since f is flat at its minimum).
func Minimize(f func(float64) float64, a, b, tolerance float64) MinimumResult {
	const golden = 0.381966011250105
	x := a + golden*(b-a)
	w, v := x, x
	fx := f(x)
	fw, fv := fx, fx
	d, e := 0.0, 0.0
	for i := 1; i <= 300; i++ {
		m := (a + b) / 2
		tol := 1e-9*math.Abs(x) + math.Max(tolerance, 1e-300)
		if math.Abs(x-m) <= 2*tol-(b-a)/2 {
			return MinimumResult{X: x, F: fx, Iterations: i, Converged: true}
		}
		p, q, r := 0.0, 0.0, 0.0
		if math.Abs(e) > tol {
			r = (x - w) * (fx - fv)
			q = (x - v) * (fx - fw)
			p = (x-v)*q - (x-w)*r
			q = 2 * (q - r)
			if q > 0 {
				p = -p
			} else {
				q = -q
			}
			r, e = e, d
		}
		if math.Abs(p) < math.Abs(q*r/2) && p > q*(a-x) && p < q*(b-x) {
			d = p / q
			if u := x + d; u-a < 2*tol || b-u < 2*tol {
				d = math.Copysign(tol, m-x)
			}
		} else {
			if x < m {
				e = b - x
			} else {
				e = a - x
			}
			d = golden * e
		}
		u := x + d
		if math.Abs(d) < tol {
			u = x + math.Copysign(tol, d)
		}
		fu := f(u)
		if fu <= fx {
			if u < x {
				b = x
			} else {
				a = x
			}
			v, w, x = w, x, u
			fv, fw, fx = fw, fx, fu
			continue
		}
		if u < x {
			a = u
		} else {
			b = u
		}
		if fu <= fw || w == x {
			v, fv, w, fw = w, fw, u, fu
		} else if fu <= fv || v == x || v == w {
			v, fv = u, fu
		}
	}
	return MinimumResult{X: x, F: fx, Iterations: 300}
}
