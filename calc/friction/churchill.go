package friction

import "math"

// Churchill returns the Darcy friction factor of all regimes in one formula.
// Between laminar and turbulent flow it is a fit and no physics.
//
// Equation:
//
//	f = 8 ((8/Re)^12 + (A + B)^-1.5)^(1/12),
//	A = (2.457 ln(1/((7/Re)^0.9 + 0.27 e)))^16, B = (37530/Re)^16
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - A: turbulent part [1]
//   - B: transitional part [1]
//   - Re: Reynolds number, 1e-3 to 1e8 [1]
//   - e: roughness over diameter, 0 to 0.05 [1]
//
// Validity: all regimes in a round pipe; 64/Re in laminar flow. As the law of a
// turbulent branch ([ChurchillLaw]) it starts at Re 4000, since below it is partly
// laminar. All bounds belong to the range.
//
// Source: Churchill 1977, Chem. Eng. 84(24), 91 (from memory).
//
// Accuracy: arithmetic 1e-12, testdata/friction/all_regimes.csv; in turbulent flow
// -0.6 to +3.1 % of Colebrook-White.
//
// Errors: [calc.ErrRange] outside the bounds of Re and e; [calc.ErrDomain] for what
// is negative or not finite.
func Churchill(p Point) (float64, error) {
	r := ChurchillLaw.Info().Range
	r.MinReynolds = 1e-3
	if err := r.check(ChurchillLaw, p); err != nil {
		return 0, err
	}
	return churchill(p).Factor, nil
}

func churchill(p Point) Partials {
	seven := math.Pow(7/p.Reynolds, 0.9)
	w := seven + 0.27*p.RelativeRoughness
	l := -2.457 * math.Log(w)
	a, b := math.Pow(l, 16), math.Pow(37530/p.Reynolds, 16)
	laminar, turbulent := math.Pow(8/p.Reynolds, 12), math.Pow(a+b, -1.5)
	sum := laminar + turbulent
	f := 8 * math.Pow(sum, 1.0/12)
	bySum := f / (12 * sum)
	byA := bySum * -1.5 * turbulent / (a + b)
	byW := byA * 16 * a / l * -2.457 / w
	return Partials{
		Factor:              f,
		ByReynolds:          (-bySum*12*laminar - byA*16*b - byW*0.9*seven) / p.Reynolds,
		ByRelativeRoughness: byW * 0.27,
	}
}
