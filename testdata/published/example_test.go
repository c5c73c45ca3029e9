package published_test

import (
	"fmt"

	"footing/testdata/published"
)

func ExampleMeets() {
	v := published.Must("cohen1992-05")
	fmt.Println(v.Printed, v.Meets(63.77), v.Meets(64.6))
	// Output: 64 true false
}
