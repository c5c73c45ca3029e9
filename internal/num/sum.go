package num

import "math"

// Accumulator adds numbers with a running compensation (Neumaier 1974): the error of the sum does not grow with the count. The zero
// value is an empty sum.
type Accumulator struct{ sum, lost float64 }

// Add adds x.
func (a *Accumulator) Add(x float64) {
	t := a.sum + x
	if math.Abs(a.sum) >= math.Abs(x) {
		a.lost += (a.sum - t) + x
	} else {
		a.lost += (x - t) + a.sum
	}
	a.sum = t
}

// Value is the sum so far.
func (a *Accumulator) Value() float64 { return a.sum + a.lost }

// Sum is the compensated sum of xs.
func Sum(xs []float64) float64 {
	var a Accumulator
	for _, x := range xs {
		a.Add(x)
	}
	return a.Value()
}
