package section

import (
	"math"

	"borewright/calc"
)

// Circle is a round bore.
type Circle struct {
	Diameter float64
}

// Full returns the properties of the bore running full.
//
// Equation:
//
//	A = π D²/4, P = π D, f·Re = 64
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - D: diameter [m]
//   - f·Re: laminar constant, Darcy, on the hydraulic diameter [1]
//
// Validity: any circle within the bounds of diameter.
//
// Source: elementary geometry; Hagen-Poiseuille for the laminar constant.
//
// Accuracy: 3 ulp.
//
// Errors: [calc.ErrDomain] if the diameter is out of bounds.
func (c Circle) Full() (Properties, error) {
	var p Properties
	err := c.fullInto(&p)
	return p, err
}

func (c Circle) fullInto(p *Properties) error {
	if err := calc.Diameter.Check(c.Diameter); err != nil {
		return err
	}
	return roundInto(p, c.Diameter)
}

func round(d float64) (Properties, error) {
	var p Properties
	err := roundInto(&p, d)
	return p, err
}

// roundInto states the equalities of a round bore instead of computing them.
func roundInto(p *Properties, d float64) error {
	p.FlowArea, p.WettedPerimeter, p.HydraulicRadius = math.Pi/4*d*d, math.Pi*d, d/4
	p.HydraulicDiameter, p.EqualAreaDiameter, p.LaminarEquivalent = d, d, calc.Some(d)
	p.LaminarConstant, p.FillRatio, p.Round = calc.Some(64), calc.Some(1), true
	return p.check()
}

// PartlyFull returns the properties of the bore with a free surface.
//
// Equation:
//
//	α = 2 asin(sqrt(h/D)), A = D²/4 (α - sin α cos α), P = D α, T = 2 sqrt(h (D - h)),
//	z = D/2 (sin α - sin³α/3 - α cos α)/(α - sin α cos α)
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - T: width of the free surface [m]
//   - h: depth of the liquid above the lowest point [m]
//   - z: depth of the centroid of A below the surface [m]
//   - D: diameter [m]
//   - α: half of the central angle of the surface [rad]
//
// Validity: 0 < h ≤ D; at h = D the bore is full.
//
// Source: elementary geometry.
//
// Accuracy: 1e-13 also for a nearly empty or nearly full bore: small angles by
// series, large ones by the complement.
//
// Errors: [calc.ErrDomain] if the diameter is out of bounds or the depth above
// it.
func (c Circle) PartlyFull(liquidDepth float64) (Properties, error) {
	var p Properties
	err := c.partlyFullInto(&p, liquidDepth)
	return p, err
}

func (c Circle) partlyFullInto(p *Properties, liquidDepth float64) error {
	if err := calc.Diameter.Check(c.Diameter); err != nil {
		return err
	}
	return roundPartlyFullInto(p, roundPool{c.Diameter, liquidDepth})
}

// roundPool is a liquid in a round bore.
type roundPool struct{ diameter, depth float64 }

func roundPartlyFullInto(p *Properties, in roundPool) error {
	d, depth := in.diameter, in.depth
	if err := checkDepth(depth, d); err != nil {
		return err
	}
	if depth == d {
		return roundInto(p, d)
	}
	r := d / 2
	s := segmentAt(depth/d, (d-depth)/d)
	l := pool{area: r * r * s.area, perimeter: 2 * r * s.angle, width: d * s.half, moment: r * r * r * s.moment, depth: depth, height: d}
	return l.into(p)
}

// circleSegment is the part of the unit circle below a chord: half its central
// angle, half its chord, its area and its first moment about the chord.
type circleSegment struct{ angle, half, area, moment float64 }

// arc is half of a central angle with its sine and cosine. They come from the
// depth as well and need no sincos: sin α = 2 sqrt(b a), cos α = a - b, with the
// depth b below and the height a above the chord, both over the diameter.
type arc struct{ angle, sin, cos float64 }

// segmentAt takes the depth and the height left above it, both over the
// diameter, so that neither end loses digits.
func segmentAt(below, above float64) circleSegment {
	s := circleSegment{half: 2 * math.Sqrt(below*above)}
	if below <= 0.5 {
		wet := arc{2 * math.Asin(math.Sqrt(below)), s.half, above - below}
		s.angle, s.area, s.moment = wet.angle, segmentArea(wet), segmentMoment(wet)
		return s
	}
	dry := arc{2 * math.Asin(math.Sqrt(above)), s.half, below - above}
	s.angle = math.Pi - dry.angle
	s.area = math.Pi - segmentArea(dry)
	// moment of the whole circle about the chord, plus what the part above it would add
	s.moment = math.Pi*(below-above) + segmentMoment(dry)
	return s
}

// segmentArea is α - sin α cos α, by its series where the two nearly cancel.
func segmentArea(s arc) float64 {
	a := s.angle
	if a > 0.7 {
		return a - s.sin*s.cos
	}
	x := -4 * a * a
	sum, term := 0.0, 2.0/3
	for k := 5.0; k < 40; k += 2 { // 2 a³/3 (1 - (2a)²/20 (1 - (2a)²/42 ...))
		sum += term
		term *= x / ((k - 1) * k)
		if math.Abs(term) < 1e-18*sum {
			break
		}
	}
	return a * a * a * sum
}

// segmentMoment is sin α - sin³α/3 - α cos α, by its series for small angles.
func segmentMoment(s arc) float64 {
	a := s.angle
	if a > 0.9 {
		return s.sin*(1-s.sin*s.sin/3) - a*s.cos
	}
	x := a * a
	sum, power := 0.0, 1.0
	for _, c := range momentSeries {
		sum += c * power
		power *= x
	}
	return sum * x * x * a
}

// momentSeries holds (-1)^k (3/4 + 3^(2k+1)/12 - (2k+1))/(2k+1)! from k = 2.
var momentSeries = [...]float64{
	16.0 / 120, -176.0 / 5040, 1632.0 / 362880, -14752.0 / 39916800, 132848.0 / 6227020800, -1195728.0 / 1307674368000,
	10761664.0 / 355687428096000, -96855104.0 / 121645100408832000, 871696080.0 / 51090942171709440000,
	-7845264880.0 / 25852016738884976640000, 70607384096.0 / 15511210043330985984000000,
}
