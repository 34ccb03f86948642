package friction

import "math"

// MaxReynolds is where the solution of Colebrook-White has been checked to; no pipe
// comes near it.
const MaxReynolds = 1e12

// ColebrookWhite returns the Darcy friction factor of turbulent flow.
//
// Equation:
//
//	1/sqrt(f) = -2 log10(e/3.7 + 2.51/(Re sqrt(f)))
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number, 1 to 1e12 [1]
//   - e: roughness over diameter, 0 to 0.05 [1]
//
// Validity: published for turbulent flow in commercial pipe, Re from about 4000;
// solved here from Re 1 to 1e12, since the transitional band needs a turbulent
// branch and nothing better is published for it. Both bounds belong to the range.
//
// Source: Colebrook, J. Inst. Civ. Eng. 11 (1939) 133, with the constants 3.7
// and 2.51 (from memory).
//
// Accuracy: the equation is solved to 1e-15 relative; testdata/friction/colebrook.csv.
// Against measured pipes the law itself is good to about 5 % (common practice).
//
// Errors: [calc.ErrRange] outside the bounds of Re and e; [calc.ErrDomain] for what
// is negative or not finite.
func ColebrookWhite(p Point) (float64, error) {
	if err := colebrookRange(p); err != nil {
		return 0, err
	}
	x := colebrookRoot(p.RelativeRoughness/3.7, 2.51/p.Reynolds, p.Reynolds)
	return 1 / (x * x), nil
}

// colebrookRange is the range check on the way of every segment, in four
// comparisons; a NaN fails them and is refused by the table's own check.
func colebrookRange(p Point) error {
	if p.Reynolds >= 1 && p.Reynolds <= MaxReynolds && p.RelativeRoughness >= 0 && p.RelativeRoughness <= MaxRelativeRoughness {
		return nil
	}
	return laws[ColebrookWhiteLaw].Range.check(ColebrookWhiteLaw, p)
}

// lowReynolds is where the start of the two-step solution gives out.
const lowReynolds = 1000

// colebrookRoot solves x + k ln(a + b x) = 0 with k = 2/ln 10 for x = 1/sqrt(f).
//
// The smooth-pipe line x = 1.8 log10(Re/6.9), put once through the equation, both
// with a logarithm read from the bits of the number, starts within 0.08 of the
// root. One Halley step with the one true logarithm leaves 3e-7; it moves u = a + b x
// by so little that the logarithm at the new place is the old one and a short
// series, and a Newton step from there reaches the last digits. Below Re 1000 the
// line runs down to zero and the steps become long: see colebrookLow.
func colebrookRoot(a, b, re float64) float64 {
	if re < lowReynolds {
		return colebrookLow(a, b)
	}
	const k = twoOverLn10
	x := 0.5418*roughLog2(re) - 1.51
	x = -0.602 * roughLog2(a+b*x)
	u := a + b*x
	log := math.Log(u)
	r := b / u
	g := k * r // slope of k ln(a + b x)
	value, slope := x+k*log, 1+k*r
	dx := value * slope / (slope*slope + 0.5*value*g*r)
	x -= dx
	d := -r * dx // u moves to u (1 + d)
	d2 := d * d
	log += d * ((1 - d/2) + d2*((1.0/3-d/4)+d2*((1.0/5-d/6)+d2*(1.0/7)))) // ln(1+d) for |d| < 0.011
	return x - (x+k*log)*((1+d)/(1+d+g))
}

// colebrookLow takes Newton steps until they vanish. The left side rises and is
// concave, so that from the left no step passes the root. The start is left of it: below Re
// 1000 every root lies between 0.1 and 5, and the equation maps what is right of
// the root to what is left of it.
func colebrookLow(a, b float64) float64 {
	x := max(0.1, -twoOverLn10*math.Log(a+5*b))
	for range 12 { // six are the most that any point takes
		next := colebrookStep(a, b, x)
		if next-x <= 1e-7*x {
			return colebrookStep(a, b, next)
		}
		x = next
	}
	return x
}

func colebrookStep(a, b, x float64) float64 {
	u := a + b*x
	return x - (x+twoOverLn10*math.Log(u))/(1+twoOverLn10*b/u)
}

// roughLog2 is log2 within 0.045, from the bits of the number: enough for a start.
func roughLog2(v float64) float64 {
	return float64(int64(math.Float64bits(v))>>32)*(1.0/(1<<20)) - 1022.96
}

// ColebrookWhitePartials returns the factor of [ColebrookWhite] with its exact
// partial derivatives, by implicit differentiation.
//
// Equation:
//
//	x = 1/sqrt(f), u = e/3.7 + 2.51 x/Re, k = 2/ln 10
//	∂x/∂Re = (k/u) 2.51 x/Re² / (1 + k 2.51/(Re u)),
//	∂x/∂e = -(k/u)/3.7 / (1 + k 2.51/(Re u)), ∂f = -2 x⁻³ ∂x
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - x, u, k: as the equation has them [1]
//   - Re: Reynolds number [1]
//   - e: roughness over diameter [1]
//
// Validity: as [ColebrookWhite].
//
// Source: implicit differentiation of the equation of [ColebrookWhite].
//
// Accuracy: Re ∂f/∂Re and e ∂f/∂e to 5e-12 of f, held against differences in the
// tests.
//
// Errors: as [ColebrookWhite].
func ColebrookWhitePartials(p Point) (Partials, error) {
	if err := colebrookRange(p); err != nil {
		return Partials{}, err
	}
	a, b := p.RelativeRoughness/3.7, 2.51/p.Reynolds
	x := colebrookRoot(a, b, p.Reynolds)
	u := a + b*x
	k := twoOverLn10 / u
	outer := -2 / (x * x * x * (1 + k*b))
	return Partials{Factor: 1 / (x * x), ByReynolds: outer * k * b * x / p.Reynolds, ByRelativeRoughness: -outer * k / 3.7}, nil
}
