package plan_test

import (
	"fmt"

	"footing/plan"
)

// A plan without earlier studies rests on the smallest effect that would still matter.
func ExampleRun() {
	f, err := plan.Parse("plan.yaml", []byte("title: Quiet hours\nrange:\n  smallest worthwhile effect: 0.5\nstudy:\n  outcome: continuous\n"))
	if err != nil {
		fmt.Println(err)
		return
	}
	p, err := plan.Run(f)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(p.Size.Chosen.N.Groups, p.Size.Test.Name)
	// Output: [64 64] two-sample-t
}
