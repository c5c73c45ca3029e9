package meta_test

import (
	"fmt"

	"footing/meta"
)

// Four invented estimates, pooled by DerSimonian-Laird with the floored Hartung-Knapp interval.
func ExampleData_Interval() {
	d := meta.Data{Y: []float64{0.10, 0.42, 0.25, 0.61}, V: []float64{0.02, 0.03, 0.01, 0.05}}
	e, _ := meta.EstimatorByName("dersimonian-laird")
	tau := e.Estimate(d)
	i := d.Interval(meta.HartungKnappFloored, tau.Value, 0.95)
	fmt.Printf("tau squared %.4f, mean %.3f, %.3f to %.3f\n", tau.Value, i.Estimate, i.Lower, i.Upper)
	// Output: tau squared 0.0114, mean 0.294, -0.012 to 0.600
}
