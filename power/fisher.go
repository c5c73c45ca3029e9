package power

import (
	"math"
	"sync"

	"footing/internal/num"
)

// fisher compares two proportions by Fisher's exact test; its power is the sum over all tables that it rejects (exact by enumeration; tables together rarer than
// 1e-14 are passed over). Two-sided p adds up all tables with the same margins that are no more likely than the one observed.
type fisher struct {
	proportions
	cache *sync.Map // n -> *fisherRegion
}

func newFisher(s Study) (Design, error) { return fisher{proportions{s}, &sync.Map{}}, nil }

func (f fisher) Info() Info {
	return Info{Name: "fisher-exact", Words: "Fisher's exact test of two proportions", Method: "exact, by enumeration", Reference: "Fisher 1935; Casagrande, Pike & Smith 1978",
		MinN: minTwo(f.s, 2), Sides: f.s.Sides, Alpha: f.s.Alpha, Saw: true, Below: true, Try: tryBinary(f.s.Measure)}
}

// Continuous is not defined for counts.
func (f fisher) Continuous(float64, float64) (Rejections, bool) { return Rejections{}, false }

// Guess starts a little below the pooled z size: the exact test needs more.
func (f fisher) Guess(effect, target float64) float64 { return f.proportions.Guess(effect, target) }

// bounds holds for each total of events the events of the first group up to which (low) and from which (high) the test rejects.
type fisherRegion struct {
	mu        sync.Mutex
	low, high []int32 // -2 where not yet computed
}

func (f fisher) region(n1, n2 int) *fisherRegion {
	if r, ok := f.cache.Load(n1); ok {
		return r.(*fisherRegion)
	}
	r := &fisherRegion{low: make([]int32, n1+n2+1), high: make([]int32, n1+n2+1)}
	for i := range r.low {
		r.low[i] = -2
	}
	actual, _ := f.cache.LoadOrStore(n1, r)
	return actual.(*fisherRegion)
}

func (f fisher) Power(effect float64, n int) Rejections {
	g := f.Groups(n)
	n1, n2 := g[0], g[1]
	first, from1 := window(n1, f.treated(effect))
	second, from2 := window(n2, f.s.ControlRisk)
	region := f.region(n1, n2)
	region.mu.Lock()
	defer region.mu.Unlock()
	var above, below num.Accumulator
	for m := from1 + from2; m <= from1+len(first)-1+from2+len(second)-1; m++ {
		if region.low[m] == -2 {
			region.low[m], region.high[m] = rejection(m, n1, n2, f.s.Sides, f.s.Alpha)
		}
		lo, hi := int(region.low[m]), int(region.high[m])
		x0, x1 := max(from1, m-(from2+len(second)-1)), min(from1+len(first)-1, m-from2)
		for x := x0; x <= min(lo, x1); x++ {
			below.Add(first[x-from1] * second[m-x-from2])
		}
		for x := max(hi, x0); x <= x1; x++ {
			above.Add(first[x-from1] * second[m-x-from2])
		}
	}
	return Rejections{Above: above.Value(), Below: below.Value(), OneSided: f.s.Sides == 1}
}

// window gives the binomial probabilities where they matter and the count at which they begin.
func window(n int, p float64) (pmf []float64, from int) {
	mode := min(n, int(float64(n+1)*p))
	lo, hi := mode, mode
	peak := num.BinomialPMF(mode, n, p)
	down := []float64{}
	q := peak
	for lo > 0 && q > 1e-18 {
		q *= float64(lo) * (1 - p) / (float64(n-lo+1) * p)
		lo--
		down = append(down, q)
	}
	up := []float64{peak}
	q = peak
	for hi < n && q > 1e-18 {
		q *= float64(n-hi) * p / (float64(hi+1) * (1 - p))
		hi++
		up = append(up, q)
	}
	for i := len(down) - 1; i >= 0; i-- {
		pmf = append(pmf, down[i])
	}
	return append(pmf, up...), lo
}

// rejection finds, for m events in all, the counts of the first group up to which and from which the test rejects. -1 and n1+1 where it never does.
func rejection(m, n1, n2, sides int, alpha float64) (low, high int32) {
	from, to := max(0, m-n2), min(n1, m)
	mode := min(to, max(from, int(float64(m+1)*float64(n1+1)/float64(n1+n2+2))))
	// Outward from the mode; counts rarer than 1e-18 of it are rejected whatever they are, and are left out.
	const rare = 1e-18
	up, down := []float64{1}, []float64{}
	total := 1.0
	for x, p := mode, 1.0; x < to && p > rare; x++ {
		p *= float64(n1-x) * float64(m-x) / (float64(x+1) * float64(n2-m+x+1))
		up = append(up, p)
		total += p
	}
	for x, p := mode, 1.0; x > from && p > rare; x-- {
		p *= float64(x) * float64(n2-m+x) / (float64(n1-x+1) * float64(m-x+1))
		down = append(down, p)
		total += p
	}
	from, to = mode-len(down), mode+len(up)-1
	pmf := make([]float64, 0, len(down)+len(up))
	for i := len(down) - 1; i >= 0; i-- {
		pmf = append(pmf, down[i])
	}
	pmf = append(pmf, up...)
	low, high = int32(from-1), int32(to+1)
	if sides == 1 {
		for sum, x := 0.0, from; x <= to; x++ {
			if sum += pmf[x-from]; sum > alpha*total*(1+1e-9) {
				break
			}
			low = int32(x)
		}
		for sum, x := 0.0, to; x >= from; x-- {
			if sum += pmf[x-from]; sum > alpha*total*(1+1e-9) {
				break
			}
			high = int32(x)
		}
		return low, high
	}
	// From the least likely counts inward; equally likely ones (to 1e-7) are taken together.
	i, j, sum := from, to, 0.0
	for i <= j {
		least := math.Min(pmf[i-from], pmf[j-from]) * (1 + 1e-7)
		ni, nj := i, j
		for ni <= j && pmf[ni-from] <= least {
			sum += pmf[ni-from]
			ni++
		}
		for nj >= ni && pmf[nj-from] <= least {
			sum += pmf[nj-from]
			nj--
		}
		if sum > alpha*total*(1+1e-9) {
			break
		}
		i, j = ni, nj
		low, high = int32(i-1), int32(j+1)
	}
	return low, high
}
