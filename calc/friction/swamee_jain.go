package friction

import "math"

// SwameeJain returns the Darcy friction factor of turbulent flow by an explicit
// stand-in for Colebrook-White.
//
// Equation:
//
//	f = 0.25/log10(e/3.7 + 5.74/Re^0.9)²
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number, 5000 to 1e8 [1]
//   - e: roughness over diameter, 1e-6 to 0.01 [1]
//
// Validity: turbulent flow in commercial pipe. All bounds belong to the range.
//
// Source: Swamee & Jain 1976, J. Hydraul. Div. ASCE 102, 657 (from memory).
//
// Accuracy: arithmetic 1e-12, testdata/friction/colebrook.csv; -0.7 to +2.9 % of
// Colebrook-White in its range.
//
// Errors: [calc.ErrRange] outside the bounds of Re and e; [calc.ErrDomain] for what
// is negative or not finite.
func SwameeJain(p Point) (float64, error) { return SwameeJainLaw.Factor(p) }

func swameeJain(p Point) Partials {
	smooth := 5.74 / math.Pow(p.Reynolds, 0.9)
	u := p.RelativeRoughness/3.7 + smooth
	l := math.Log10(u)
	f := 0.25 / (l * l)
	byU := -2 * f / (l * math.Ln10 * u)
	return Partials{Factor: f, ByReynolds: -byU * 0.9 * smooth / p.Reynolds, ByRelativeRoughness: byU / 3.7}
}
