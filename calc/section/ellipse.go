package section

import (
	"math"

	"borewright/calc"

	"gonum.org/v1/gonum/mathext"
)

// Ellipse is an elliptic section by its full axes.
type Ellipse struct {
	Width, Height float64
}

func (e Ellipse) check() error {
	return check(dimension{calc.Width, e.Width}, dimension{calc.Height, e.Height})
}

// Full returns the properties of the section running full.
//
// Equation:
//
//	A = π a b, P = 4 a E(m), m = 1 - b²/a², a ≥ b; f·Re = 8 Dh² (a² + b²)/(a b)²
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - a: half of the longer axis [m]
//   - b: half of the shorter axis [m]
//   - E: complete elliptic integral of the second kind [1]
//   - f·Re: laminar constant, Darcy, on the hydraulic diameter [1]
//   - Dh: hydraulic diameter [m]
//
// Validity: any ellipse within the bounds.
//
// Source: geometry; exact solution of laminar flow in an elliptic pipe, e.g.
// Boussinesq 1868 (from memory).
//
// Accuracy: 1e-15 times a few; the integral by gonum.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds.
func (e Ellipse) Full() (Properties, error) {
	if err := e.check(); err != nil {
		return Properties{}, err
	}
	if e.Width == e.Height {
		return round(e.Width)
	}
	a, b := max(e.Width, e.Height)/2, min(e.Width, e.Height)/2
	o := outline{area: math.Pi * a * b, perimeter: 4 * a * mathext.CompleteE((a-b)*(a+b)/(a*a))}
	dh := 4 * o.area / o.perimeter
	o.laminar = calc.Some(8 * (dh / b) * (dh / b) * (1 + (b/a)*(b/a)))
	return o.full()
}

// PartlyFull returns the properties of the section with a free surface.
//
// Equation:
//
//	α = 2 asin(sqrt(h/H)), A = W H/4 (α - sin α cos α), T = W sin α,
//	P = W ∫ sqrt(1 - m sin²t) dt from 0 to α, m = 1 - H²/W²
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - T: width of the free surface [m]
//   - h: depth of the liquid above the lowest point [m]
//   - z: depth of the centroid of A below the surface [m]
//   - W: width [m]
//   - H: height [m]
//   - α: half of the eccentric angle of the surface [rad]
//
// Validity: 0 < h ≤ H; at h = H the section is full.
//
// Source: geometry; the arc by the symmetric elliptic integrals, DLMF 19.25.9
// (from memory).
//
// Accuracy: 1e-12.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds or the depth above
// the height.
func (e Ellipse) PartlyFull(liquidDepth float64) (Properties, error) {
	if err := e.check(); err != nil {
		return Properties{}, err
	}
	if err := checkDepth(liquidDepth, e.Height); err != nil {
		return Properties{}, err
	}
	if liquidDepth == e.Height {
		return e.Full()
	}
	below, above := liquidDepth/e.Height, (e.Height-liquidDepth)/e.Height
	s := segmentAt(below, above)
	a, b := e.Width/2, e.Height/2
	arc := ellipseArc(a, b, below, above)
	if below > 0.5 {
		full, err := e.Full()
		if err != nil {
			return Properties{}, err
		}
		arc = full.WettedPerimeter - ellipseArc(a, b, above, below)
	}
	return pool{area: a * b * s.area, perimeter: arc, width: e.Width * s.half, moment: a * b * b * s.moment, depth: liquidDepth, height: e.Height}.properties()
}

// ellipseArc is the arc below a chord in the lower half, twice from the lowest
// point: sin φ = 2 sqrt(below above), cos φ = above - below.
func ellipseArc(a, b, below, above float64) float64 {
	sin2 := 4 * below * above
	cos := above - below
	m := (a - b) * (a + b) / (a * a)
	// 1 - m sin² φ without cancellation: cos² + (b/a)² sin²
	y := cos*cos + (b/a)*(b/a)*sin2
	sin := math.Sqrt(sin2)
	return 2 * a * sin * (mathext.EllipticRF(cos*cos, y, 1) - m*sin2/3*mathext.EllipticRD(cos*cos, y, 1))
}
