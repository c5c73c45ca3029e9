package effect_test

import (
	"fmt"

	"footing/meta/effect"
)

// A paper reports means, SDs and group sizes (worked example, Borenstein et al. 2009, ch. 4).
func ExampleCompute() {
	r := effect.Reported{
		Treatment: effect.Arm{Mean: effect.Of(103), SD: effect.Of(5.5), N: effect.Of(50)},
		Control:   effect.Arm{Mean: effect.Of(100), SD: effect.Of(4.5), N: effect.Of(50)},
	}
	o := effect.Compute("worked example", r, effect.Options{Scale: effect.StandardizedMeanDifference})
	fmt.Printf("g %.4f, variance %.4f, by %s\n", o.Best.Value, o.Best.Variance, o.Best.Route)
	// Output: g 0.5924, variance 0.0418, by means-and-sds
}
