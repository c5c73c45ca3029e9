package meta

import (
	"fmt"
	"math"

	"footing/meta/effect"
)

// Data are estimates ready for pooling: y and v of equal length.
type Data struct {
	Y, V []float64
}

// NewData checks estimates: k >= 1, every value finite, every variance above 0 and finite. The error names the first study that fails.
func NewData(es []effect.Estimate) (Data, error) {
	d := Data{Y: make([]float64, len(es)), V: make([]float64, len(es))}
	if len(es) == 0 {
		return d, fmt.Errorf("no study has a usable estimate, so there is nothing to pool")
	}
	for i, e := range es {
		if math.IsNaN(e.Value) || math.IsInf(e.Value, 0) {
			return d, fmt.Errorf("study %q: the estimate is not finite", e.Study)
		}
		if !(e.Variance > 0) || math.IsInf(e.Variance, 0) {
			return d, fmt.Errorf("study %q: the variance is %g and must be above 0", e.Study, e.Variance)
		}
		d.Y[i], d.V[i] = e.Value, e.Variance
	}
	return d, nil
}

// K is the number of studies.
func (d Data) K() int { return len(d.Y) }

// Without is the data with study i left out.
func (d Data) Without(i int) Data {
	out := Data{Y: make([]float64, 0, d.K()-1), V: make([]float64, 0, d.K()-1)}
	out.Y = append(append(out.Y, d.Y[:i]...), d.Y[i+1:]...)
	out.V = append(append(out.V, d.V[:i]...), d.V[i+1:]...)
	return out
}

// equal reports whether all estimates are the same number, as far as rounding lets one say.
func (d Data) equal() bool {
	lo, hi := d.Y[0], d.Y[0]
	for _, y := range d.Y {
		lo, hi = math.Min(lo, y), math.Max(hi, y)
	}
	return hi-lo <= 1e-12*math.Max(math.Abs(lo), math.Abs(hi))
}
