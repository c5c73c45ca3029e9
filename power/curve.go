package power

import "math"

// powerCurve is power in the intended direction over a stretch of effects as a polynomial through Chebyshev points. Power is smooth in the effect, so that a few dozen
// points carry it to 1e-10; the count is doubled until halfway points agree.
type powerCurve struct {
	from, to float64
	x, y     []float64 // Chebyshev points of the second kind, and power there
}

// newPowerCurve tabulates f between from and to.
func newPowerCurve(f func(float64) float64, from, to float64) powerCurve {
	memo := map[int]float64{} // by position on the finest grid
	const finest = 1024
	at := func(k, n int) float64 {
		key := k * (finest / n)
		v, ok := memo[key]
		if !ok {
			v = f(point(from, to, k, n))
			memo[key] = v
		}
		return v
	}
	for n := 32; ; n *= 2 {
		c := powerCurve{from: from, to: to}
		for k := 0; k <= n; k++ {
			c.x, c.y = append(c.x, point(from, to, k, n)), append(c.y, at(k, n))
		}
		if n == finest {
			return c
		}
		worst := 0.0
		for k := 1; k < 2*n; k += n/8 + 1 | 1 { // some of the halfway points
			if k%2 == 1 {
				worst = math.Max(worst, math.Abs(c.at(point(from, to, k, 2*n))-at(k, 2*n)))
			}
		}
		if worst < 1e-10 {
			return c
		}
	}
}

// point is the k-th of n+1 Chebyshev points, from the upper end down.
func point(from, to float64, k, n int) float64 {
	return from + (to-from)*(1+math.Cos(math.Pi*float64(k)/float64(n)))/2
}

// at evaluates the polynomial by the barycentric formula (Berrut & Trefethen 2004, eq. 5.4).
func (c powerCurve) at(u float64) float64 {
	n := len(c.x) - 1
	top, bottom := 0.0, 0.0
	sign := 1.0
	for k, x := range c.x {
		d := u - x
		if d == 0 {
			return c.y[k]
		}
		w := sign / d
		if k == 0 || k == n {
			w /= 2
		}
		top += w * c.y[k]
		bottom += w
		sign = -sign
	}
	return math.Min(1, math.Max(0, top/bottom))
}
