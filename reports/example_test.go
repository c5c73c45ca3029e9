package reports_test

import (
	"fmt"
	"strings"

	"footing/plan/result"
	"footing/reports"
)

// What a person typed comes out harmless on a terminal.
func ExampleTermText() {
	fmt.Println(strings.Contains(reports.TermText("A\x1b[31mB"), "\x1b"))
	// Output: false
}

// A plan without a size says so in place of the wording.
func ExampleWordsOf() {
	fmt.Println(reports.WordsOf(&result.Plan{Size: result.Size{Why: "the effect is no effect"}}).Protocol)
	// Output: No sample size can be stated: the effect is no effect.
}
