package friction

import (
	"math"

	"borewright/calc"
)

// Point is where a turbulent law is evaluated.
type Point struct {
	Reynolds          float64
	RelativeRoughness float64 // roughness / diameter
}

// MaxRelativeRoughness is the roughest wall that the laws are used for.
const MaxRelativeRoughness = 0.05

const twoOverLn10 = 2 / math.Ln10

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
// Errors: [calc.ErrRange] outside the bounds of Re and e.
func ColebrookWhite(p Point) (float64, error) {
	if err := colebrookRange(p); err != nil {
		return 0, err
	}
	x := colebrookRoot(p.RelativeRoughness/3.7, 2.51/p.Reynolds, p.Reynolds)
	return 1 / (x * x), nil
}

func colebrookRange(p Point) error {
	if !(p.Reynolds >= 1 && p.Reynolds <= 1e12) {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: p.Reynolds, Min: 1, Max: 1e12,
			Detail: "colebrook_white is solved for Reynolds numbers from 1 to 1e12"}
	}
	return roughnessRange(p.RelativeRoughness, 0, MaxRelativeRoughness)
}

// colebrookRoot solves x + (2/ln 10) ln(a + b x) = 0 for x = 1/sqrt(f).
//
// The start is the smooth-pipe line x = 1.8 log10(Re/6.9), put once through the
// equation; two Halley steps then reach the last digits over the whole
// turbulent range. Below Re 4000 that line runs down to zero, so the start is
// held up and further steps are taken until they vanish.
func colebrookRoot(a, b, re float64) float64 {
	x := 0.5418*roughLog2(re) - 1.51
	if re < 4000 {
		return colebrookLow(a, b, max(x, 1))
	}
	x = -twoOverLn10 * math.Log(a+b*x)
	x = colebrookStep(a, b, x)
	return colebrookStep(a, b, x)
}

func colebrookLow(a, b, x float64) float64 {
	for range 40 {
		next := colebrookStep(a, b, x)
		if !(next > 0) {
			next = x / 4
		}
		if math.Abs(next-x) <= 1e-9*x {
			return colebrookStep(a, b, next)
		}
		x = next
	}
	return x
}

// colebrookStep is one step of Halley's method.
func colebrookStep(a, b, x float64) float64 {
	u := a + b*x
	g := twoOverLn10 * b / u // slope of the logarithm
	value := x + twoOverLn10*math.Log(u)
	slope := 1 + g
	return x - value*slope/(slope*slope+value*g*g/(2*twoOverLn10))
}

// roughLog2 is log2 to 0.09, from the bits of the number: enough for a start.
func roughLog2(v float64) float64 {
	return float64(int64(math.Float64bits(v))>>32)*(1.0/(1<<20)) - 1022.96
}

// Partials are a factor and its exact partial derivatives.
type Partials struct {
	Factor              float64
	ByReynolds          float64
	ByRelativeRoughness float64
}

// ColebrookWhitePartials returns the factor of [ColebrookWhite] with its exact
// partial derivatives, by implicit differentiation.
//
// Equation:
//
//	x = 1/sqrt(f), u = e/3.7 + 2.51 x/Re, k = 2/ln 10
//	∂x/∂Re = (k/u) 2.51 x/Re² / (1 + k 2.51/(Re u)), ∂x/∂e = -(k/u)/3.7 / (1 + k 2.51/(Re u)), ∂f = -2 x⁻³ ∂x
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number [1]
//   - e: roughness over diameter [1]
//
// Validity: as [ColebrookWhite].
//
// Source: implicit differentiation of the equation of [ColebrookWhite].
//
// Accuracy: 1e-14; compared with differences in the tests.
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
