package section

import "borewright/calc"

// Sector is the part of a circle between two radii; both radii and the arc are wetted.
type Sector struct {
	Radius, Angle float64
}

// Full returns the properties of the sector running full.
//
// Equation:
//
//	A = r² φ/2, P = r (2 + φ)
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - r: radius [m]
//   - φ: angle between the radii, up to 2π [rad]
//
// Validity: any sector within the bounds; at 2π both faces of the slit are
// wetted.
//
// Source: elementary geometry.
//
// Accuracy: 2 ulp.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds.
func (s Sector) Full() (Properties, error) {
	if err := check(dimension{calc.Radius, s.Radius}, dimension{calc.Angle, s.Angle}); err != nil {
		return Properties{}, err
	}
	return outline{area: s.Radius * s.Radius * s.Angle / 2, perimeter: s.Radius * (2 + s.Angle)}.full()
}
