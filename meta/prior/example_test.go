package prior_test

import (
	"fmt"

	"footing/meta"
	"footing/meta/prior"
)

// Where the true effect in a new setting may lie, after four invented studies.
func ExamplePredictive() {
	d := meta.Data{Y: []float64{0.10, 0.42, 0.25, 0.61}, V: []float64{0.02, 0.03, 0.01, 0.05}}
	next, _ := prior.Predictive(d, 0.01)
	fmt.Printf("cautious %.2f, chance above 0: %.2f\n", next.Quantile(0.2), next.Survival(0))
	// Output: cautious 0.15, chance above 0: 0.92
}
