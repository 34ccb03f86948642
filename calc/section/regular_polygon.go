package section

import (
	"math"

	"borewright/calc"
)

// RegularPolygon is a section with equal sides and angles.
type RegularPolygon struct {
	Sides      float64 // a whole number
	SideLength float64
}

// Full returns the properties of the polygon running full.
//
// Equation:
//
//	A = n s²/(4 tan(π/n)), P = n s
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - n: number of sides, 3 to 1000 [1]
//   - s: length of a side [m]
//
// Validity: any regular polygon within the bounds; the laminar constant for
// three and four sides.
//
// Source: elementary geometry; laminar constants of the equilateral triangle
// and the square.
//
// Accuracy: 3 ulp.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds or the number of
// sides not whole.
func (r RegularPolygon) Full() (Properties, error) {
	if err := check(dimension{calc.Sides, r.Sides}, dimension{calc.SideLength, r.SideLength}); err != nil {
		return Properties{}, err
	}
	if r.Sides == 4 {
		return Rectangle{Width: r.SideLength, Height: r.SideLength}.Full()
	}
	o := outline{area: r.Sides * r.SideLength * r.SideLength / (4 * math.Tan(math.Pi/r.Sides)), perimeter: r.Sides * r.SideLength}
	if r.Sides == 3 {
		o.laminar = calc.Some(equilateralLaminar)
	}
	return o.full()
}
