package units

import (
	"math"
	"math/big"
)

// pair is a number as the unevaluated sum of two doubles, good for about 31
// digits. Readings are scaled in pairs and rounded once, so that "150 mm" and
// 0.15 are the same double and equal inputs give equal fingerprints.
type pair struct{ hi, lo float64 }

var one = pair{hi: 1}

// round gives the nearest double.
func (a pair) round() float64 { return a.hi + a.lo }

func renormalised(hi, lo float64) pair {
	s := hi + lo
	return pair{s, lo - (s - hi)}
}

func (a pair) times(b pair) pair {
	p := a.hi * b.hi
	e := math.FMA(a.hi, b.hi, -p)
	return renormalised(p, e+(a.hi*b.lo+a.lo*b.hi))
}

func (a pair) over(b pair) pair {
	q := a.hi / b.hi
	r := math.FMA(-q, b.hi, a.hi) + a.lo - q*b.lo
	return renormalised(q, r/b.hi)
}

func (a pair) plus(b pair) pair {
	s := a.hi + b.hi
	t := s - a.hi
	e := (a.hi - (s - t)) + (b.hi - t)
	return renormalised(s, e+a.lo+b.lo)
}

func (a pair) minus(b pair) pair { return a.plus(pair{-b.hi, -b.lo}) }

// power raises a to an integer exponent, by steps: exponents are small.
func (a pair) power(n int) pair {
	r := one
	for range max(n, -n) {
		r = r.times(a)
	}
	if n < 0 {
		return one.over(r)
	}
	return r
}

// usable reports whether a stays a finite factor other than zero.
func (a pair) usable() bool {
	return a.hi != 0 && !math.IsInf(a.hi, 0) && !math.IsNaN(a.hi) && !math.IsNaN(a.lo)
}

// pairOf gives the pair nearest to an exact ratio.
func pairOf(r *big.Rat) pair {
	hi, _ := r.Float64()
	if math.IsInf(hi, 0) {
		return pair{hi: hi}
	}
	rest := new(big.Rat).Sub(r, new(big.Rat).SetFloat64(hi))
	lo, _ := rest.Float64()
	return pair{hi, lo}
}

// pairOfInteger gives the pair of an integer below 2^64 exactly.
func pairOfInteger(m uint64) pair {
	hi := float64(m)
	if m < 1<<53 {
		return pair{hi: hi}
	}
	return pair{hi, float64(int64(m - uint64(hi)))}
}
