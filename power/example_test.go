package power_test

import (
	"fmt"

	"footing/power"
)

// People a group for an effect of half an SD (Cohen 1992 prints 64).
func ExampleSizeFor() {
	design, _ := power.Study{}.Resolve()
	s, _ := power.SizeFor(design, 0.5, 0.80)
	fmt.Printf("%d a group, power %.4f, %.2f before rounding\n", s.N, s.Power.Any(), s.Continuous)
	// Output: 64 a group, power 0.8015, 63.77 before rounding
}
