package section

import (
	"math"

	"borewright/calc"
)

// Rectangle is a duct or culvert with square or rounded corners.
type Rectangle struct {
	Width, Height float64
	CornerRadius  float64
}

func (r Rectangle) check() error {
	if err := check(dimension{calc.Width, r.Width}, dimension{calc.Height, r.Height}, dimension{calc.CornerRadius, r.CornerRadius}); err != nil {
		return err
	}
	if most := min(r.Width, r.Height) / 2; r.CornerRadius > most {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "corner_radius", Value: r.CornerRadius, Max: most,
			Detail: "a corner radius is at most half of the shorter side, here " + text(most) + " m"}
	}
	return nil
}

// Full returns the properties of the duct running full.
//
// Equation:
//
//	A = w h - (4 - π) r², P = 2 (w + h) - (8 - 2π) r;
//	f·Re = 96/((1 + s)² (1 - (192/π⁵) s Σ tanh(nπ/(2 s))/n⁵)), n odd, s = short/long side, r = 0;
//	equal-friction diameter 1.30 (w h)^0.625/(w + h)^0.25, r = 0
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - w: width [m]
//   - h: height [m]
//   - r: corner radius [m]
//   - f·Re: laminar constant, Darcy, on the hydraulic diameter [1]
//
// Validity: any rectangle within the bounds; laminar constant and equal-
// friction diameter with square corners only (and the circle, when r is half
// of both sides).
//
// Source: geometry; Fourier series of the duct, e.g. Boussinesq 1868 (from
// memory); Huebscher 1948, ASHVE Trans. 54 (from memory).
//
// Accuracy: geometry 3 ulp; laminar constant 1e-14: the sum over tanh is
// written as 31 ζ(5)/32 less an exponentially small rest.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds or the radius too
// large.
func (r Rectangle) Full() (Properties, error) {
	var p Properties
	err := r.fullInto(&p)
	return p, err
}

func (r Rectangle) fullInto(p *Properties) error {
	if err := r.check(); err != nil {
		return err
	}
	if r.CornerRadius > 0 && 2*r.CornerRadius == r.Width && r.Width == r.Height {
		return roundInto(p, r.Width)
	}
	o := outline{
		area:      r.Width*r.Height - (4-math.Pi)*r.CornerRadius*r.CornerRadius,
		perimeter: 2*(r.Width+r.Height) - (8-2*math.Pi)*r.CornerRadius,
	}
	if r.CornerRadius == 0 {
		o.laminar = calc.Some(rectangleLaminar(r.Width, r.Height))
		p.EqualFriction = calc.Some(HuebscherDiameter(r))
	}
	return o.fullInto(p)
}

// rectangleLaminar is the laminar constant of a rectangle. With q = exp(-π/s)
// tanh(nπ/(2s)) is 1 - 2 qⁿ/(1 + qⁿ), and the sum of the ones is known.
func rectangleLaminar(a, b float64) float64 {
	const (
		sumOfOnes = 1.00452376279513961613 // 31 ζ(5)/32, ζ(5) = 1.0369277551433699
		factor    = 192 / (math.Pi * math.Pi * math.Pi * math.Pi * math.Pi)
	)
	s := min(a, b) / max(a, b)
	q := math.Exp(-math.Pi / s)
	rest, power := 0.0, q
	for n := 1.0; power > 1e-18; n += 2 {
		rest += 2 * power / ((1 + power) * n * n * n * n * n)
		power *= q * q
	}
	return 96 / ((1 + s) * (1 + s) * (1 - factor*s*(sumOfOnes-rest)))
}

// HuebscherDiameter is the diameter of the round duct with the same friction at
// the same flow, [m]: 1.30 (w h)^0.625/(w + h)^0.25. Source: Huebscher 1948, ASHVE
// Trans. 54, 101 (from memory); stated for turbulent air flow.
func HuebscherDiameter(r Rectangle) float64 {
	half := math.Sqrt(r.Width * r.Height) // 0.625 = 1/2 + 1/8, and roots cost less than a power
	return 1.30 * half * math.Sqrt(math.Sqrt(half)) / math.Sqrt(math.Sqrt(r.Width+r.Height))
}

// PartlyFull returns the properties of the culvert with a free surface.
//
// Equation:
//
//	r = 0: A = w h, P = w + 2 h, T = w, z = h/2;
//	rounded corners add the segments of a circle of radius r at bottom and top
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - T: width of the free surface [m]
//   - h: depth of the liquid above the lowest point [m]
//   - z: depth of the centroid of A below the surface [m]
//   - w: width [m]
//   - r: corner radius [m]
//
// Validity: 0 < h ≤ height; at the height the culvert stands at the brim, its
// top dry.
//
// Source: elementary geometry.
//
// Accuracy: 1e-13.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds or the depth above
// the height.
func (r Rectangle) PartlyFull(liquidDepth float64) (Properties, error) {
	if err := r.check(); err != nil {
		return Properties{}, err
	}
	if err := checkDepth(liquidDepth, r.Height); err != nil {
		return Properties{}, err
	}
	l := r.pool(liquidDepth)
	if l.width == 0 {
		return r.Full()
	}
	return l.properties()
}

func (r Rectangle) pool(depth float64) pool {
	w, c := r.Width, r.CornerRadius
	l := pool{depth: depth, height: r.Height}
	above := r.Height - depth
	switch {
	case c == 0:
		l.area, l.perimeter, l.width, l.moment = w*depth, w+2*depth, w, w*depth*depth/2
	case depth <= c:
		l.roundedBottom(w-2*c, c, depth)
	case above >= c:
		corners := (2 - math.Pi/2) * c * c
		l.area, l.perimeter, l.width = w*depth-corners, w+2*depth-(4-math.Pi)*c, w
		l.moment = w*depth*depth/2 - corners*depth + (5.0/3-math.Pi/2)*c*c*c
	default:
		var empty pool
		empty.roundedBottom(w-2*c, c, above)
		area := w*r.Height - (4-math.Pi)*c*c
		l.area, l.width = area-empty.area, empty.width
		l.perimeter = 2*(w+r.Height) - (8-2*math.Pi)*c - empty.perimeter
		l.moment = area*(depth-r.Height/2) + empty.moment
	}
	return l
}

// roundedBottom is the pool between two rounded corners and a flat of the given
// width, not deeper than the corner radius.
func (l *pool) roundedBottom(flat, radius, depth float64) {
	if depth <= 0 {
		l.perimeter, l.width = flat, flat
		return
	}
	s := segmentAt(depth/(2*radius), (2*radius-depth)/(2*radius))
	l.area = flat*depth + radius*radius*s.area
	l.perimeter = flat + 2*radius*s.angle
	l.width = flat + 2*radius*s.half
	l.moment = flat*depth*depth/2 + radius*radius*radius*s.moment
}
