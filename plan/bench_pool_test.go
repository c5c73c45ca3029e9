package plan_test

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"footing/internal/num"
	"footing/plan"
)

// manyStudies writes invented estimates with standard errors as a text sheet.
func manyStudies(tb testing.TB, k int) string {
	tb.Helper()
	s := num.NewStream(4, uint64(k))
	var b strings.Builder
	b.WriteString("study,year,estimate,standard error\n")
	for i := 0; i < k; i++ {
		se := 0.08 + 0.4*s.Uniform()
		fmt.Fprintf(&b, "Study %d,%d,%.4f,%.4f\n", i+1, 1980+i%45, 0.3+0.15*s.Normal()+se*s.Normal(), se)
	}
	path := filepath.Join(tb.TempDir(), "many.csv")
	if err := os.WriteFile(path, []byte(b.String()), 0o600); err != nil {
		tb.Fatal(err)
	}
	return path
}

// BenchmarkPool is everything that footing pool shows of so many studies, from the evidence as read.
func BenchmarkPool(b *testing.B) {
	for _, k := range []int{20, 1000} {
		b.Run(fmt.Sprint(k), func(b *testing.B) {
			ev, err := plan.ReadSheet(manyStudies(b, k), "")
			if err != nil {
				b.Fatal(err)
			}
			b.ResetTimer()
			for i := 0; i < b.N; i++ {
				p, err := plan.PoolStudies(&plan.File{}, ev)
				if err != nil {
					b.Fatal(err)
				}
				if p.K != k || math.IsNaN(*p.Random.Estimate) {
					b.Fatal("not pooled")
				}
			}
		})
	}
}

// BenchmarkPoolFromFile is the same from the file on.
func BenchmarkPoolFromFile(b *testing.B) {
	path := manyStudies(b, 1000)
	for i := 0; i < b.N; i++ {
		ev, err := plan.ReadSheet(path, "")
		if err != nil {
			b.Fatal(err)
		}
		if _, err := plan.PoolStudies(&plan.File{}, ev); err != nil {
			b.Fatal(err)
		}
	}
}
