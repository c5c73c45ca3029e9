package choices_test

import (
	"fmt"
	"testing"

	"footing/plan/choices"
	"footing/plan/result"
)

func n(total int) *result.N { return &result.N{Total: total, Groups: []int{total / 2, total / 2}} }

// The largest saving first, what has no size last (invented figures).
func ExampleSort() {
	for _, l := range choices.Sort([]result.Lever{
		{Words: "no start-of-study measure", Change: 119, N: n(790), ToEnrol: n(896)},
		{Words: "not possible here", Why: "the risk would leave 0 to 1"},
		{Words: "one-sided .05", Change: -58, N: n(434), ToEnrol: n(494)},
	}) {
		fmt.Println(l.Words)
	}
	// Output:
	// one-sided .05
	// no start-of-study measure
	// not possible here
}

func TestSortKeepsItsArgumentAndTies(t *testing.T) {
	in := []result.Lever{{Words: "a", N: n(4)}, {Words: "b", N: n(4), ToEnrol: n(2)}, {Words: "c", Change: -1, N: n(2)}}
	out := choices.Sort(in)
	if in[0].Words != "a" || out[0].Words != "c" || out[1].Words != "a" || out[2].Words != "b" {
		t.Errorf("%v from %v", out, in)
	}
}
