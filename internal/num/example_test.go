package num_test

import (
	"fmt"

	"footing/internal/num"
)

// Both tails keep their digits.
func ExampleNoncentralTSurvival() {
	fmt.Printf("%.6e\n", num.NoncentralTSurvival(30, 20, 2))
	fmt.Printf("%.6e\n", num.NoncentralTCDF(-3, 20, 6))
	// Output:
	// 6.292219e-15
	// 8.203529e-17
}
