package result_test

import (
	"encoding/json"
	"fmt"

	"footing/plan/result"
)

// A size as it stands in result.json.
func ExampleN() {
	data, _ := json.Marshal(result.N{Total: 552, Groups: []int{276, 276}})
	fmt.Println(string(data))
	// Output: {"total":552,"groups":[276,276]}
}
