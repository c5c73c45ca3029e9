package num

import (
	"math"
	"math/rand/v2"
)

// Stream is a source of random numbers that depends on its seed and index alone: the same on any machine and any number of cores. A
// simulation gives each fixed chunk of its work a stream of its own.
type Stream struct {
	r     *rand.Rand
	spare float64
	has   bool
}

// NewStream is the stream number index of a seed (PCG-DXSM of the standard library, seeded by both through a mixing function).
func NewStream(seed, index uint64) *Stream {
	return &Stream{r: rand.New(rand.NewPCG(mix(seed), mix(index^0x9e3779b97f4a7c15)))}
}

// mix is the finaliser of SplitMix64 (Steele, Lea & Flood 2014).
func mix(x uint64) uint64 {
	x += 0x9e3779b97f4a7c15
	x = (x ^ (x >> 30)) * 0xbf58476d1ce4e5b9
	x = (x ^ (x >> 27)) * 0x94d049bb133111eb
	return x ^ (x >> 31)
}

// Uniform is a number in the open interval (0, 1).
func (s *Stream) Uniform() float64 { return (float64(s.r.Uint64()>>11) + 0.5) / (1 << 53) }

// Normal is a standard normal number, by the polar method (Marsaglia & Bray 1964).
func (s *Stream) Normal() float64 {
	if s.has {
		s.has = false
		return s.spare
	}
	for {
		u, v := 2*s.Uniform()-1, 2*s.Uniform()-1
		q := u*u + v*v
		if q > 0 && q < 1 {
			f := math.Sqrt(-2 * math.Log(q) / q)
			s.spare, s.has = v*f, true
			return u * f
		}
	}
}

// Gamma is a gamma number of the shape and scale 1 (Marsaglia & Tsang 2000).
func (s *Stream) Gamma(shape float64) float64 {
	if shape < 1 {
		return s.Gamma(shape+1) * math.Pow(s.Uniform(), 1/shape)
	}
	d := shape - 1.0/3
	c := 1 / math.Sqrt(9*d)
	for {
		x := s.Normal()
		v := 1 + c*x
		if v <= 0 {
			continue
		}
		v = v * v * v
		if math.Log(s.Uniform()) < x*x/2+d-d*v+d*math.Log(v) {
			return d * v
		}
	}
}

// ChiSquared is a chi-square number.
func (s *Stream) ChiSquared(df float64) float64 { return 2 * s.Gamma(df/2) }

// Int is a whole number in [0, n).
func (s *Stream) Int(n int) int { return s.r.IntN(n) }

// Binomial is the number of successes in n trials of chance p: by counting for small n, by splitting at a beta-distributed order statistic above.
func (s *Stream) Binomial(n int, p float64) int {
	count := 0
	for n > 40 {
		a := n/2 + 1
		b := n + 1 - a
		x, y := s.Gamma(float64(a)), s.Gamma(float64(b))
		median := x / (x + y)
		if median <= p {
			count += a
			n -= a
			p = (p - median) / (1 - median)
		} else {
			n = a - 1
			p /= median
		}
	}
	for i := 0; i < n; i++ {
		if s.Uniform() < p {
			count++
		}
	}
	return count
}

// Shuffle permutes n things by Fisher and Yates' method.
func (s *Stream) Shuffle(n int, swap func(i, j int)) { s.r.Shuffle(n, swap) }
