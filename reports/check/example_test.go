package check_test

import (
	"fmt"

	"footing/reports/check"
)

// A page that footing did not write, or that carries no plan, can't be checked.
func ExampleReport() {
	_, err := check.Report("page.html", []byte("<p>626</p>"))
	fmt.Println(err != nil)
	// Output: true
}
