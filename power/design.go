package power

import "math"

// Rejections are the chances of a significant result in each direction. Those of a one-sided test are given for a test set up in that direction.
type Rejections struct {
	Above, Below float64 // the estimate lies above, below no effect
	OneSided     bool
}

// Any is what power is: for a two-sided test the chance of a significant result in either direction, for a one-sided test that in the direction of the effect.
func (r Rejections) Any() float64 {
	if r.OneSided {
		return math.Max(r.Above, r.Below)
	}
	return math.Min(1, r.Above+r.Below)
}

// Wrong is the chance of a significant result against the direction of sign.
func (r Rejections) Wrong(sign float64) float64 {
	if r.OneSided {
		return 0
	}
	return r.Toward(-sign)
}

// Toward is the chance of a significant result in the direction of sign (+1 or -1).
func (r Rejections) Toward(sign float64) float64 {
	if sign < 0 {
		return r.Below
	}
	return r.Above
}

// Design is a test of a planned study. n is always the size of the first (treatment) group.
type Design interface {
	Info() Info
	// Groups are the sizes of all groups when the first has n.
	Groups(n int) []int
	// Power is the chance of a significant result in each direction at an effect. n must be at least Info().MinN.
	Power(effect float64, n int) Rejections
	// Continuous is the same for a first group of n that need not be whole, or false where the test has no such form.
	Continuous(effect, n float64) (Rejections, bool)
	// Guess is a first guess of the n that reaches a power, from normal theory.
	Guess(effect, target float64) float64
	// StandardError is that of the estimate at an effect, by large-sample theory.
	StandardError(effect float64, n int) float64
	// Critical is the smallest estimate, towards sign, that comes out significant with n people in the first group.
	Critical(sign float64, n int) float64
}

// Info describes a design and declares what holds for it; the tests hold every design to what it declares.
type Info struct {
	Name, Words, Method, Reference string
	MinN                           int
	Sides                          int
	Alpha                          float64
	// Saw: power can fall with n, as exact tests on counts do. Otherwise it rises.
	Saw bool
	// Exact: at no effect the chance of a significant result equals alpha; otherwise it stays near it, and Below says that it never exceeds it.
	Exact, Below bool
	// Symmetric: an effect of the other sign has the same power with the directions exchanged (two-sided tests only).
	Symmetric bool
	// Effects to try in tests, on the design's scale.
	Try []float64
}

// allocated are the sizes of two groups: the second is the ratio times the first, rounded up.
func allocated(n int, ratio float64) []int {
	return []int{n, int(math.Ceil(float64(n)*ratio - 1e-9))}
}
