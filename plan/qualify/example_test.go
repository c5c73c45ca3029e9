package qualify_test

import (
	"fmt"

	"footing/plan/qualify"
)

func ExampleRun() {
	r := qualify.Run()
	fmt.Println(r.Reproduced == r.Total)
	// Output: true
}
