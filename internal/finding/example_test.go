package finding_test

import (
	"fmt"

	"footing/internal/finding"
)

func ExampleFinding_String() {
	f := finding.Finding{Severity: finding.Error, Kind: "sd-not-positive", Place: finding.Place{File: "evidence.xlsx", Sheet: "Studies", Cell: "F7"},
		What: "the SD is 0, and must be above 0", Mend: "give the SD"}
	fmt.Println(f)
	fmt.Println(f.ID())
	// Output:
	// evidence.xlsx, Studies!F7: the SD is 0, and must be above 0; give the SD
	// sd-not-positive@Studies!F7
}
