package section

import "borewright/calc"

// ParallelPlates is a wide gap; its ends are not wetted.
type ParallelPlates struct {
	Gap, Width float64
}

// Full returns the properties of the gap running full.
//
// Equation:
//
//	A = w s, P = 2 w, Dh = 2 s, f·Re = 96
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - w: width [m]
//   - s: gap [m]
//   - Dh: hydraulic diameter [m]
//   - f·Re: laminar constant, Darcy, on the hydraulic diameter [1]
//
// Validity: plates without ends, or so wide that the ends do not matter.
//
// Source: geometry; plane Poiseuille flow.
//
// Accuracy: 1 ulp.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds.
func (p ParallelPlates) Full() (Properties, error) {
	if err := check(dimension{calc.Gap, p.Gap}, dimension{calc.Width, p.Width}); err != nil {
		return Properties{}, err
	}
	return outline{area: p.Width * p.Gap, perimeter: 2 * p.Width, laminar: calc.Some(96)}.full()
}
