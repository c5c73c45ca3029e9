package reports

import "testing"

func BenchmarkHTML(b *testing.B) {
	p := inventedPlan(20, false)
	for b.Loop() {
		if _, err := HTML(p); err != nil {
			b.Fatal(err)
		}
	}
}
