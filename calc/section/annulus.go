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

func annulusLaminar(s float64) float64 {
	half := math.Sinh(s / 2)
	if s > 1 {
		return 128 * half * half / (math.Cosh(s) - math.Sinh(s)/s)
	}
	sum, term := 0.0, s*s/6 // cosh s - sinh(s)/s = Σ 2k s^(2k)/(2k + 1)!
	for k := 1.0; 2*k*term > 1e-18*sum; k++ {
		sum += 2 * k * term
		term *= s * s / ((2*k + 2) * (2*k + 3))
	}
	return 128 * half * half / sum
}
