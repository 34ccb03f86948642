package friction

import (
	"math"

	"borewright/calc"
)

// VonKarmanRough returns the Darcy friction factor of turbulent flow along a fully
// rough wall, where it no longer depends on the Reynolds number.
//
// Equation:
//
//	1/sqrt(f) = 2 log10(3.7/e)
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number, 4000 to 1e12, such that Re e sqrt(f/8) > 70 [1]
//   - e: roughness over diameter, 1e-6 to 0.05 [1]
//
// Validity: fully rough walls; Re is used for that check alone. The bounds of e
// belong to the range, a roughness Reynolds number of 70 does not.
//
// Source: von Karman's law with Nikuradse's constant, VDI-Forschungsheft 361, 1933
// (from memory).
//
// Accuracy: arithmetic 1e-12, testdata/friction/colebrook.csv; within 2 % of the
// measurements it was fitted to (common practice).
//
// Errors: [calc.ErrRange] outside the bounds of e or on a wall that is not fully
// rough; [calc.ErrDomain] for what is negative or not finite.
func VonKarmanRough(p Point) (float64, error) { return VonKarmanRoughLaw.Factor(p) }

func vonKarmanRough(p Point) Partials {
	x := 2 * math.Log10(3.7/p.RelativeRoughness)
	f := 1 / (x * x)
	return Partials{Factor: f, ByRelativeRoughness: 2 * f / x * twoOverLn10 / p.RelativeRoughness}
}

// roughOnly refuses a wall that is not fully rough.
func roughOnly(l Law, p Point, d Partials) (Partials, error) {
	if plus := p.roughnessReynolds(d.Factor); !(plus > RoughAbove) {
		return Partials{}, &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: plus, Min: RoughAbove, Max: MaxReynolds,
			Detail: l.String() + " is for fully rough walls: the roughness Reynolds number is " + text(plus) + " and must be above 70; colebrook_white covers all walls"}
	}
	return d, nil
}
