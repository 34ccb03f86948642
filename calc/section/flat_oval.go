package section

import (
	"math"

	"borewright/calc"
)

// FlatOval is a duct of two half circles joined by straight sides, lying or
// standing.
type FlatOval struct {
	Width, Height float64 // overall
}

// Full returns the properties of the duct running full.
//
// Equation:
//
//	A = π b²/4 + (a - b) b, P = π b + 2 (a - b); equal-friction diameter 1.55 A^0.625/P^0.25
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - a: longer overall dimension [m]
//   - b: shorter overall dimension, diameter of the ends [m]
//
// Validity: any flat oval within the bounds; a lying and a standing one are
// alike.
//
// Source: geometry; Heyt & Diaz 1975, ASHRAE Trans. 81 (from memory) for the
// equal-friction diameter.
//
// Accuracy: 3 ulp.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds.
func (f FlatOval) Full() (Properties, error) {
	if err := check(dimension{calc.Width, f.Width}, dimension{calc.Height, f.Height}); err != nil {
		return Properties{}, err
	}
	if f.Width == f.Height {
		return round(f.Width)
	}
	a, b := max(f.Width, f.Height), min(f.Width, f.Height)
	p, err := outline{area: math.Pi/4*b*b + (a-b)*b, perimeter: math.Pi*b + 2*(a-b)}.full()
	p.EqualFriction = calc.Some(1.55 * math.Pow(p.FlowArea, 0.625) / math.Sqrt(math.Sqrt(p.WettedPerimeter)))
	return p, err
}
