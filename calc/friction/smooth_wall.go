package friction

import (
	"math"

	"borewright/calc"
)

// Blasius returns the Darcy friction factor of turbulent flow along a smooth wall.
//
// Equation:
//
//	f = 0.3164/Re^0.25
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number, 4000 to 1e5 [1]
//   - e: roughness over diameter, such that Re e sqrt(f/8) < 5 [1]
//
// Validity: hydraulically smooth walls, where roughness does not show; e is used
// for that check alone. The bounds of Re belong to the range.
//
// Source: Blasius 1913, Forschungsarb. Ver. Dtsch. Ing. 131 (from memory).
//
// Accuracy: arithmetic 1e-12, testdata/friction/colebrook.csv; about 2 % of
// measured smooth pipes (common practice).
//
// Errors: [calc.ErrRange] outside the bounds of Re or on a wall that is not
// smooth; [calc.ErrDomain] for what is negative or not finite.
func Blasius(p Point) (float64, error) { return BlasiusLaw.Factor(p) }

func blasius(p Point) Partials {
	f := 0.3164 / math.Sqrt(math.Sqrt(p.Reynolds))
	return Partials{Factor: f, ByReynolds: -0.25 * f / p.Reynolds}
}

// PrandtlSmooth returns the Darcy friction factor of turbulent flow along a smooth
// wall.
//
// Equation:
//
//	1/sqrt(f) = 2 log10(Re sqrt(f)) - 0.8
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number, 4000 to 3.4e6 [1]
//   - e: roughness over diameter, such that Re e sqrt(f/8) < 5 [1]
//
// Validity: hydraulically smooth walls; e is used for that check alone. The bounds
// of Re belong to the range, which is that of the measurements behind it.
//
// Source: Prandtl's law with Nikuradse's constants, VDI-Forschungsheft 356, 1932
// (from memory).
//
// Accuracy: solved to 1e-14, testdata/friction/colebrook.csv; within 2 % of the
// measurements it was fitted to (common practice).
//
// Errors: [calc.ErrRange] outside the bounds of Re or on a wall that is not
// smooth; [calc.ErrDomain] for what is negative or not finite.
func PrandtlSmooth(p Point) (float64, error) { return PrandtlSmoothLaw.Factor(p) }

// prandtlSmooth is the equation of Colebrook-White with no roughness and 10^0.4
// for 2.51. There u = b x, so that k b/u = k/x.
func prandtlSmooth(p Point) Partials {
	const tenTo04 = 2.5118864315095801110850320677993
	x := colebrookRoot(0, tenTo04/p.Reynolds, p.Reynolds)
	f := 1 / (x * x)
	return Partials{Factor: f, ByReynolds: -2 * f / x * twoOverLn10 / (p.Reynolds * (1 + twoOverLn10/x))}
}

// smoothOnly refuses a wall whose roughness shows.
func smoothOnly(l Law, p Point, d Partials) (Partials, error) {
	if plus := p.roughnessReynolds(d.Factor); !(plus < SmoothBelow) {
		return Partials{}, &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: plus, Max: SmoothBelow,
			Detail: l.String() + " is for smooth walls: the roughness Reynolds number is " + text(plus) + " and must be below 5; colebrook_white takes the roughness into account"}
	}
	return d, nil
}
