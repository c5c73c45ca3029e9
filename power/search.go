package power

import (
	"fmt"
	"math"

	"footing/internal/num"
)

// MaxN is the largest first group that a search considers.
const MaxN = 1_000_000_000

// sawCheck is how many sizes beyond the first that reaches the target are checked for a test whose power saws.
const sawCheck = 60

// Sized is the result of a search for n.
type Sized struct {
	N          int        // first group
	Groups     []int      //
	Power      Rejections // attained
	Continuous float64    // first group before rounding; NaN where the test has no such form
	Checked    int        // sizes checked beyond N, for a test whose power saws
}

// SizeFor finds the smallest first group whose power (in both directions together) reaches the target at an effect. For a test whose power saws it is the smallest from
// which the power holds at every one of the next 60 sizes. The error says why no size exists.
func SizeFor(d Design, effect, target float64) (Sized, error) {
	out, err := WholeSizeFor(d, effect, target)
	// Where the effect is so large that the least study is far too large there is no size before rounding to speak of.
	if err == nil && !d.Info().Saw && d.Guess(effect, target) >= 1e-3 {
		if c, ok := continuousN(d, effect, target, out.N); ok {
			out.Continuous = c
		}
	}
	return out, err
}

// WholeSizeFor is SizeFor without the size before rounding (Continuous is NaN), in about half the time.
func WholeSizeFor(d Design, effect, target float64) (Sized, error) {
	info := d.Info()
	switch {
	case !(target > 0 && target < 1):
		return Sized{}, fmt.Errorf("a power of %g can't be asked for; it must lie between 0 and 1", target)
	case target <= info.Alpha:
		return Sized{}, fmt.Errorf("a power of %g is no more than alpha (%g): every study has that", target, info.Alpha)
	case math.IsNaN(effect) || math.IsInf(effect, 0):
		return Sized{}, fmt.Errorf("the effect must be a finite number")
	case effect == 0:
		return Sized{}, fmt.Errorf("the effect is no effect: no size can show it")
	}
	guess := d.Guess(effect, target)
	if !(guess < MaxN) {
		return Sized{}, fmt.Errorf("an effect this close to none needs more than %d people in the first group", MaxN)
	}
	if info.Saw {
		return sawSearch(d, effect, target, guess)
	}
	reaches := func(n int) bool { return d.Power(effect, n).Any() >= target }
	n, ok := firstTrue(reaches, info.MinN, int(guess))
	if !ok {
		return Sized{}, fmt.Errorf("no size up to %d in the first group reaches a power of %g", MaxN, target)
	}
	return Sized{N: n, Groups: d.Groups(n), Power: d.Power(effect, n), Continuous: math.NaN()}, nil
}

// firstTrue finds the smallest n >= from at which a rising condition holds, from a guess.
func firstTrue(holds func(int) bool, from, guess int) (int, bool) {
	n := min(max(from, guess), MaxN)
	lo, hi := from-1, n // holds(lo) is false
	step := 1 + n/200
	if holds(n) {
		for n-step >= from && holds(n-step) {
			n -= step
			step *= 2
		}
		hi = n
		lo = max(from-1, n-step)
	} else {
		lo = n
		for {
			if n == MaxN {
				return 0, false
			}
			n = min(n+step, MaxN)
			step *= 2
			if holds(n) {
				hi = n
				break
			}
			lo = n
		}
	}
	for hi-lo > 1 {
		mid := lo + (hi-lo)/2
		if holds(mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	return hi, true
}

// continuousN is the first group, not rounded, whose power equals the target.
func continuousN(d Design, effect, target float64, n int) (float64, bool) {
	if _, ok := d.Continuous(effect, float64(n)); !ok {
		return 0, false
	}
	f := func(x float64) float64 {
		r, _ := d.Continuous(effect, x)
		return r.Any() - target
	}
	lo, hi := math.Max(float64(n)-2, 0.5), float64(n)
	for i := 0; i < 60 && f(hi) < 0; i++ { // the second group is rounded up, so that whole sizes can reach the target a little earlier
		hi += 1 + hi/1000
	}
	for i := 0; i < 60 && lo > 0.02 && f(lo) > 0; i++ {
		lo /= 1.5
	}
	r := num.Root(f, lo, hi, num.RootOptions{Tolerance: 1e-9})
	return r.X, r.Bracketed && r.Converged
}

// sawSearch walks through the sizes of a test whose power saws. sawLimit bounds the walk: exact tests on counts need at most a few times the normal-theory size.
func sawSearch(d Design, effect, target, guess float64) (Sized, error) {
	info := d.Info()
	const sawLimit = 20000
	if guess > sawLimit {
		return Sized{}, fmt.Errorf("an exact test with more than %d people in the first group is not enumerated; use the pooled z test, which is as good there", sawLimit)
	}
	memo := map[int]bool{}
	holds := func(n int) bool {
		v, ok := memo[n]
		if !ok {
			v = d.Power(effect, n).Any() >= target
			memo[n] = v
		}
		return v
	}
	// Far below the guess the power is short everywhere; start a little below it, nearer the larger it is, since the saw's teeth shrink.
	n := max(info.MinN, int(guess*(1-math.Min(0.15, 3/math.Sqrt(guess))))-8)
	for n > info.MinN && holdsNear(holds, n, info.MinN) {
		n = max(info.MinN, int(float64(n)*0.85)-1)
	}
	for run := 0; n < 4*sawLimit; n++ {
		if !holds(n) {
			run = 0
			continue
		}
		if run++; run == sawCheck+1 {
			first := n - sawCheck
			return Sized{N: first, Groups: d.Groups(first), Power: d.Power(effect, first), Continuous: math.NaN(), Checked: sawCheck}, nil
		}
	}
	return Sized{}, fmt.Errorf("no size reaches a power of %g for good", target)
}

// holdsNear reports whether any of the sizes just below n reaches the target.
func holdsNear(holds func(int) bool, n, least int) bool {
	for i := n; i >= max(least, n-4); i-- {
		if holds(i) {
			return true
		}
	}
	return false
}

// Detectable is the smallest effect towards sign that n people in the first group detect with the target power; false where none does.
func Detectable(d Design, sign float64, n int, target float64) (float64, bool) {
	f := func(x float64) float64 { return d.Power(sign*x, n).Any() - target }
	hi := 0.1
	for i := 0; f(hi) < 0; i++ {
		if hi *= 1.6; i > 60 {
			return 0, false
		}
	}
	r := num.Root(f, 0, hi, num.RootOptions{Tolerance: 1e-10})
	if !r.Bracketed {
		return 0, false
	}
	return sign * r.X, true
}
