package section

import (
	"math"

	"borewright/calc"
)

// Annulus is the gap between two concentric round tubes.
type Annulus struct {
	OuterDiameter, InnerDiameter float64
}

// Full returns the properties of the gap running full.
//
// Equation:
//
//	A = π/4 (Do - Di)(Do + Di), P = π (Do + Di), Dh = Do - Di;
//	f·Re = 128 sinh²(s/2)/(cosh s - sinh(s)/s), s = ln(Do/Di)
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - Do: outer diameter, the inside of the outer tube [m]
//   - Di: inner diameter, the outside of the inner tube [m]
//   - Dh: hydraulic diameter [m]
//   - f·Re: laminar constant, Darcy, on the hydraulic diameter [1]
//
// Validity: Di < Do.
//
// Source: geometry; exact laminar solution (Lamb, Hydrodynamics, 1932, article
// 331, from memory), rewritten in s so that a narrow gap loses no digits and
// tends to 96.
//
// Accuracy: 5e-15.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds or the inner
// diameter not below the outer.
func (a Annulus) Full() (Properties, error) {
	var p Properties
	err := a.fullInto(&p)
	return p, err
}

func (a Annulus) fullInto(p *Properties) error {
	if err := check(dimension{calc.OuterDiameter, a.OuterDiameter}, dimension{calc.InnerDiameter, a.InnerDiameter}); err != nil {
		return err
	}
	gap := a.OuterDiameter - a.InnerDiameter
	if !(gap > 0) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "inner_diameter", Value: a.InnerDiameter, Max: a.OuterDiameter,
			Detail: "the inner diameter must be below the outer one, which is " + text(a.OuterDiameter) + " m"}
	}
	sum := a.OuterDiameter + a.InnerDiameter
	o := outline{area: math.Pi / 4 * gap * sum, perimeter: math.Pi * sum, laminar: calc.Some(annulusLaminar(math.Log1p(gap / a.InnerDiameter)))}
	return o.fullInto(p)
}

// annulusLaminar is 64 (cosh s - 1)/(cosh s - sinh(s)/s). Up to s = 1 both are
// divided by s² and summed by their series, where they would nearly cancel.
func annulusLaminar(s float64) float64 {
	if s > 1 {
		e := math.Exp(s)
		cosh, sinh := (e+1/e)/2, (e-1/e)/2
		return 64 * (cosh - 1) / (cosh - sinh/s)
	}
	x := s * s
	last := len(annulusSeries) - 1
	above, below := annulusSeries[last][0], annulusSeries[last][1]
	for k := last - 1; k >= 0; k-- {
		above = above*x + annulusSeries[k][0]
		below = below*x + annulusSeries[k][1]
	}
	return 64 * above / below
}

// annulusSeries holds 1/(2k)! and 2k/(2k+1)! from k = 1.
var annulusSeries = [...][2]float64{
	{1.0 / 2, 2.0 / 6},
	{1.0 / 24, 4.0 / 120},
	{1.0 / 720, 6.0 / 5040},
	{1.0 / 40320, 8.0 / 362880},
	{1.0 / 3628800, 10.0 / 39916800},
	{1.0 / 479001600, 12.0 / 6227020800},
	{1.0 / 87178291200, 14.0 / 1307674368000},
	{1.0 / 20922789888000, 16.0 / 355687428096000},
	{1.0 / 6402373705728000, 18.0 / 121645100408832000},
	{1.0 / 2432902008176640000, 20.0 / 51090942171709440000},
}
