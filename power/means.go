package power

import (
	"math"

	"footing/internal/num"
)

// tailAlpha is the alpha spent on each direction in which a test may reject.
func tailAlpha(sides int, alpha float64) float64 { return alpha / float64(sides) }

// rejectT is the chance of a noncentral t beyond the critical value on either side.
func rejectT(critical, df, delta float64, sides int) Rejections {
	r := Rejections{OneSided: sides == 1}
	// An estimate this far out falls short of the critical value only if the SD comes out a hundred times too large: with one degree of freedom, the worst case, a
	// chance below 1e-2000.
	if a := math.Abs(delta); a > 1e4 && a > 100*critical {
		if delta > 0 {
			r.Above = 1
		} else {
			r.Below = 1
		}
		return r
	}
	// Beyond 9 on the far side the other direction has a chance below 1e-18.
	if delta > -9 {
		r.Above = num.NoncentralTSurvival(critical, df, delta)
	}
	if delta < 9 {
		r.Below = num.NoncentralTCDF(-critical, df, delta)
	}
	return r
}

// twoSampleT compares two means by the t test with equal variances: noncentrality d sqrt(n1 n2/(n1 + n2)), n1 + n2 - 2 degrees of freedom. Exact.
type twoSampleT struct{ s Study }

func newTwoSampleT(s Study) (Design, error) { return twoSampleT{s}, nil }

func (t twoSampleT) Info() Info {
	return Info{Name: "two-sample-t", Words: "t test of two means", Method: "exact, noncentral t", Reference: "Cohen 1988, ch. 2; Julious 2004, Stat Med 23:1921",
		MinN: minTwo(t.s, 2), Sides: t.s.Sides, Alpha: t.s.Alpha, Exact: true, Symmetric: true, Try: []float64{0.2, 0.5, 1.1}}
}

// minTwo is the smallest first group with which both groups have least people.
func minTwo(s Study, least int) int {
	n := least
	for n < 100000 && allocated(n, s.Allocation.Ratio())[1] < 1 {
		n++
	}
	return n
}

func (t twoSampleT) Groups(n int) []int { return allocated(n, t.s.Allocation.Ratio()) }

func (t twoSampleT) Power(effect float64, n int) Rejections {
	g := t.Groups(n)
	return t.at(effect, float64(g[0]), float64(g[1]))
}

func (t twoSampleT) at(effect, n1, n2 float64) Rejections {
	df := n1 + n2 - 2
	c := num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), df)
	return rejectT(c, df, effect*math.Sqrt(n1*n2/(n1+n2)), t.s.Sides)
}

func (t twoSampleT) Continuous(effect, n float64) (Rejections, bool) {
	if n*(1+t.s.Allocation.Ratio()) <= 2.0001 {
		return Rejections{}, true
	}
	return t.at(effect, n, n*t.s.Allocation.Ratio()), true
}

func (t twoSampleT) Guess(effect, target float64) float64 {
	return normalGuess(t.s, effect, target, 1) + tExtra(t.s)
}

// normalGuess is (z_alpha + z_power)^2 (1 + 1/ratio) factor / effect^2.
func normalGuess(s Study, effect, target, factor float64) float64 {
	z := num.NormalQuantileUpper(tailAlpha(s.Sides, s.Alpha)) + num.NormalQuantile(target)
	return z * z * factor * (1 + 1/s.Allocation.Ratio()) / (effect * effect)
}

// tExtra is about what Student's t costs above the normal: a quarter of the squared critical value a group (Guenther 1981).
func tExtra(s Study) float64 {
	z := num.NormalQuantileUpper(tailAlpha(s.Sides, s.Alpha))
	return z * z / 4
}

func (t twoSampleT) StandardError(_ float64, n int) float64 {
	g := t.Groups(n)
	return math.Sqrt(1/float64(g[0]) + 1/float64(g[1]))
}

func (t twoSampleT) Critical(sign float64, n int) float64 {
	g := t.Groups(n)
	return sign * num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), float64(g[0]+g[1]-2)) * t.StandardError(0, n)
}

// oneSampleT tests one mean, or the mean of paired differences, in SDs of what is tested: noncentrality d sqrt n, n - 1 degrees of freedom. Exact.
type oneSampleT struct{ s Study }

func newOneSampleT(s Study) (Design, error) { return oneSampleT{s}, nil }

func (t oneSampleT) Info() Info {
	return Info{Name: "one-sample-t", Words: "t test of one mean or of paired differences", Method: "exact, noncentral t", Reference: "Cohen 1988, ch. 2",
		MinN: 2, Sides: t.s.Sides, Alpha: t.s.Alpha, Exact: true, Symmetric: true, Try: []float64{0.2, 0.5, 1.1}}
}
func (t oneSampleT) Groups(n int) []int { return []int{n} }
func (t oneSampleT) Power(effect float64, n int) Rejections {
	r, _ := t.Continuous(effect, float64(n))
	return r
}
func (t oneSampleT) Continuous(effect, n float64) (Rejections, bool) {
	if n <= 1.0001 {
		return Rejections{}, true
	}
	c := num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), n-1)
	return rejectT(c, n-1, effect*math.Sqrt(n), t.s.Sides), true
}
func (t oneSampleT) Guess(effect, target float64) float64 {
	return normalGuess(t.s, effect, target, 1/(1+1/t.s.Allocation.Ratio()))
}
func (t oneSampleT) StandardError(_ float64, n int) float64 { return 1 / math.Sqrt(float64(n)) }
func (t oneSampleT) Critical(sign float64, n int) float64 {
	return sign * num.StudentTQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha), float64(n-1)) * t.StandardError(0, n)
}

// zTest is the test of means with a known SD: normal, for one group (or pairs) and for two.
type zTest struct{ s Study }

func newZ(s Study) (Design, error) { return zTest{s}, nil }

func (t zTest) Info() Info {
	return Info{Name: "z", Words: "z test with known SD", Method: "exact, normal", Reference: "common practice, no source",
		MinN: 1, Sides: t.s.Sides, Alpha: t.s.Alpha, Exact: true, Symmetric: true, Try: []float64{0.2, 0.5, 1.1}}
}
func (t zTest) two() bool { return t.s.Arrangement == Parallel }
func (t zTest) Groups(n int) []int {
	if t.two() {
		return allocated(n, t.s.Allocation.Ratio())
	}
	return []int{n}
}
func (t zTest) se(n1, n2 float64) float64 {
	if t.two() {
		return math.Sqrt(1/n1 + 1/n2)
	}
	return 1 / math.Sqrt(n1)
}
func (t zTest) Power(effect float64, n int) Rejections {
	g := t.Groups(n)
	return rejectZ(num.NormalQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha)), effect/t.se(float64(g[0]), float64(g[len(g)-1])), t.s.Sides)
}
func rejectZ(critical, shift float64, sides int) Rejections {
	shift = math.Max(-1e8, math.Min(1e8, shift)) // beyond, the chances are 1 and 0 to every digit
	return Rejections{Above: num.NormalSurvival(critical - shift), Below: num.NormalCDF(-critical - shift), OneSided: sides == 1}
}
func (t zTest) Continuous(effect, n float64) (Rejections, bool) {
	return rejectZ(num.NormalQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha)), effect/t.se(n, n*t.s.Allocation.Ratio()), t.s.Sides), true
}
func (t zTest) Guess(effect, target float64) float64 {
	if t.two() {
		return normalGuess(t.s, effect, target, 1)
	}
	return normalGuess(t.s, effect, target, 1/(1+1/t.s.Allocation.Ratio()))
}
func (t zTest) StandardError(_ float64, n int) float64 {
	g := t.Groups(n)
	return t.se(float64(g[0]), float64(g[len(g)-1]))
}
func (t zTest) Critical(sign float64, n int) float64 {
	return sign * num.NormalQuantileUpper(tailAlpha(t.s.Sides, t.s.Alpha)) * t.StandardError(0, n)
}
