package friction

import "math"

// Serghides returns the Darcy friction factor of turbulent flow by an explicit
// stand-in for Colebrook-White: Steffensen's step over two of its iterations.
//
// Equation:
//
//	A = -2 log10(e/3.7 + 12/Re), B = -2 log10(e/3.7 + 2.51 A/Re),
//	C = -2 log10(e/3.7 + 2.51 B/Re), f = (A - (B - A)²/(C - 2 B + A))⁻²
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - A, B, C: successive estimates of 1/sqrt(f) [1]
//   - Re: Reynolds number, 4000 to 1e8 [1]
//   - e: roughness over diameter, 0 to 0.05 [1]
//
// Validity: turbulent flow in commercial pipe. All bounds belong to the range.
//
// Source: Serghides 1984, Chem. Eng. 91(5), 63 (from memory).
//
// Accuracy: arithmetic 1e-12, testdata/friction/colebrook.csv; -0.0032 to 0 % of
// Colebrook-White.
//
// Errors: [calc.ErrRange] outside the bounds of Re and e; [calc.ErrDomain] for what
// is negative or not finite.
func Serghides(p Point) (float64, error) { return SerghidesLaw.Factor(p) }

// serghides writes the last step as A + (B - A)/(1 - q) with q = (C - B)/(B - A),
// and takes q from the logarithm of the change itself: where A is the root already,
// the published form is 0/0.
func serghides(p Point) Partials {
	u := p.RelativeRoughness/3.7 + 12/p.Reynolds
	a := inverseRoot{-twoOverLn10 * math.Log(u), twoOverLn10 * 12 / (p.Reynolds * p.Reynolds * u), -twoOverLn10 / (3.7 * u)}
	b := a.next(p)
	c := b.next(p)
	q := contraction(p, a.value, b.value)
	x := a.value + (b.value-a.value)/(1-q)
	slope := func(da, db, dc float64) float64 {
		return da + 2*(db-da)/(1-q) + (dc-2*db+da)/((1-q)*(1-q))
	}
	f := 1 / (x * x)
	return Partials{f, -2 * f / x * slope(a.byRe, b.byRe, c.byRe), -2 * f / x * slope(a.byE, b.byE, c.byE)}
}

// contraction is (C - B)/(B - A) = -k ln(1 + t)/(B - A), t = 2.51 (B - A)/(Re u),
// where u is the argument of the logarithm of B.
func contraction(p Point, a, b float64) float64 {
	slope := 2.51 / p.Reynolds / (p.RelativeRoughness/3.7 + 2.51/p.Reynolds*a)
	if a == b {
		return -twoOverLn10 * slope
	}
	return -twoOverLn10 * math.Log1p(slope*(b-a)) / (b - a)
}

// inverseRoot is an estimate of 1/sqrt(f) with its derivatives.
type inverseRoot struct{ value, byRe, byE float64 }

// next puts the estimate once through Colebrook-White.
func (r inverseRoot) next(p Point) inverseRoot {
	b := 2.51 / p.Reynolds
	u := p.RelativeRoughness/3.7 + b*r.value
	k := -twoOverLn10 / u
	return inverseRoot{-twoOverLn10 * math.Log(u), k * b * (r.byRe - r.value/p.Reynolds), k * (1/3.7 + b*r.byE)}
}
