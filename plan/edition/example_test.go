package edition_test

import (
	"fmt"

	"footing/plan/edition"
)

// Editions are kept in a folder beside the plan file.
func ExampleBeside() {
	fmt.Println(edition.Beside("trial/plan.yaml").Dir)
	// Output: trial/plan.editions
}
