package smallstudy_test

import (
	"fmt"

	"footing/meta"
	"footing/meta/smallstudy"
)

// Small studies show larger effects in these invented estimates; the interval around the common-effect mean moves less.
func ExampleHenmiCopas() {
	d := meta.Data{Y: []float64{0.1, 0.2, 0.3, 0.7, 0.9}, V: []float64{0.005, 0.01, 0.03, 0.08, 0.12}}
	r := smallstudy.HenmiCopas(d, 0.95)
	fmt.Printf("%.2f, %.2f to %.2f\n", r.Interval.Estimate, r.Interval.Lower, r.Interval.Upper)
	// Output: 0.19, -0.16 to 0.53
}
