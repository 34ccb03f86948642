package friction

import "math"

// Haaland returns the Darcy friction factor of turbulent flow by an explicit
// stand-in for Colebrook-White.
//
// Equation:
//
//	1/sqrt(f) = -1.8 log10((e/3.7)^1.11 + 6.9/Re)
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number, 4000 to 1e8 [1]
//   - e: roughness over diameter, 0 to 0.05 [1]
//
// Validity: turbulent flow in commercial pipe. At e = 0 it is the smooth-pipe line
// 1.8 log10(Re/6.9) from which it was built. All bounds belong to the range.
//
// Source: Haaland 1983, J. Fluids Eng. 105, 89 (from memory).
//
// Accuracy: arithmetic 1e-12, testdata/friction/colebrook.csv; -1.4 to +1.3 % of
// Colebrook-White.
//
// Errors: [calc.ErrRange] outside the bounds of Re and e; [calc.ErrDomain] for what
// is negative or not finite.
func Haaland(p Point) (float64, error) { return HaalandLaw.Factor(p) }

func haaland(p Point) Partials {
	rough := math.Pow(p.RelativeRoughness/3.7, 1.11)
	u := rough + 6.9/p.Reynolds
	x := -1.8 * math.Log10(u)
	f := 1 / (x * x)
	byU := 2 * f / x * 1.8 / (math.Ln10 * u)
	d := Partials{Factor: f, ByReynolds: -byU * 6.9 / (p.Reynolds * p.Reynolds)}
	if p.RelativeRoughness > 0 { // the power 0.11 left by the derivative is 0 at e = 0
		d.ByRelativeRoughness = byU * 1.11 * rough / p.RelativeRoughness
	}
	return d
}
