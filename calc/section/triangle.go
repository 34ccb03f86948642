package section

import (
	"math"

	"borewright/calc"
)

// Triangle stands on its base; the apex lies ApexOffset to the right of the left
// end of the base, and may lie beyond either end.
type Triangle struct {
	Base, Height, ApexOffset float64
}

func (t Triangle) check() error {
	return check(dimension{calc.Base, t.Base}, dimension{calc.Height, t.Height}, dimension{calc.ApexOffset, t.ApexOffset})
}

// flanks are the lengths of the two sides that rise from the base.
func (t Triangle) flanks() (left, right float64) {
	return math.Hypot(t.ApexOffset, t.Height), math.Hypot(t.Base-t.ApexOffset, t.Height)
}

// Full returns the properties of the triangle running full.
//
// Equation:
//
//	A = b H/2, P = b + sqrt(x² + H²) + sqrt((b - x)² + H²); f·Re = 160/3 with three equal sides
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - b: base [m]
//   - H: height [m]
//   - x: offset of the apex [m]
//   - f·Re: laminar constant, Darcy, on the hydraulic diameter [1]
//
// Validity: any triangle within the bounds; the laminar constant for three
// equal sides.
//
// Source: geometry; exact laminar solution of the equilateral duct (Boussinesq
// 1868, from memory).
//
// Accuracy: 3 ulp; sides count as equal within 4e-15.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds.
func (t Triangle) Full() (Properties, error) {
	if err := t.check(); err != nil {
		return Properties{}, err
	}
	left, right := t.flanks()
	o := outline{area: t.Base * t.Height / 2, perimeter: t.Base + left + right}
	if equal(left, t.Base) && equal(right, t.Base) {
		o.laminar = calc.Some(equilateralLaminar)
	}
	return o.full()
}

const equilateralLaminar = 160.0 / 3

// equal compares two lengths to rounding, as a caller computes sqrt(3)/2.
func equal(a, b float64) bool { return math.Abs(a-b) <= 4e-15*b }

// PartlyFull returns the properties of the triangle with a free surface.
//
// Equation:
//
//	A = b h (1 - h/(2 H)), P = b + (flanks) h/H, T = b (1 - h/H), z = h (1/2 - h/(6 H))/(1 - h/(2 H))
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - T: width of the free surface [m]
//   - h: depth of the liquid above the lowest point [m]
//   - z: depth of the centroid of A below the surface [m]
//   - b: base [m]
//   - H: height [m]
//
// Validity: 0 < h ≤ H; at h = H the triangle is full.
//
// Source: elementary geometry.
//
// Accuracy: 1e-14.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds or the depth above
// the height.
func (t Triangle) PartlyFull(liquidDepth float64) (Properties, error) {
	if err := t.check(); err != nil {
		return Properties{}, err
	}
	if err := checkDepth(liquidDepth, t.Height); err != nil {
		return Properties{}, err
	}
	if liquidDepth == t.Height {
		return t.Full()
	}
	left, right := t.flanks()
	f := liquidDepth / t.Height
	return pool{
		area: t.Base * liquidDepth * (1 - f/2), perimeter: t.Base + (left+right)*f, width: t.Base * ((t.Height - liquidDepth) / t.Height),
		moment: t.Base * liquidDepth * liquidDepth * (0.5 - f/6), depth: liquidDepth, height: t.Height,
	}.properties()
}
