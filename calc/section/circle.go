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
	if err := calc.Diameter.Check(c.Diameter); err != nil {
		return Properties{}, err
	}
	return round(c.Diameter)
}

func round(d float64) (Properties, error) {
	p, err := outline{area: math.Pi / 4 * d * d, perimeter: math.Pi * d, laminar: calc.Some(64)}.full()
	p.HydraulicDiameter, p.EqualAreaDiameter, p.LaminarEquivalent = d, d, calc.Some(d)
	p.HydraulicRadius = d / 4
	p.Round = true
	return p, err
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
	if err := calc.Diameter.Check(c.Diameter); err != nil {
		return Properties{}, err
	}
	return roundPartlyFull(c.Diameter, liquidDepth)
}

func roundPartlyFull(d, depth float64) (Properties, error) {
	if err := checkDepth(depth, d); err != nil {
		return Properties{}, err
	}
	if depth == d {
		return round(d)
	}
	r := d / 2
	s := segmentAt(depth/d, (d-depth)/d)
	return pool{area: r * r * s.area, perimeter: 2 * r * s.angle, width: d * s.half, moment: r * r * r * s.moment, depth: depth, height: d}.properties()
}

// circleSegment is the part of the unit circle below a chord: half its central
// angle, half its chord, its area and its first moment about the chord.
type circleSegment struct{ angle, half, area, moment float64 }

// segmentAt takes the depth and the height left above it, both over the
// diameter, so that neither end loses digits.
func segmentAt(below, above float64) circleSegment {
	s := circleSegment{half: 2 * math.Sqrt(below*above)}
	if below <= 0.5 {
		s.angle = 2 * math.Asin(math.Sqrt(below))
		s.area, s.moment = segmentArea(s.angle), segmentMoment(s.angle)
		return s
	}
	rest := 2 * math.Asin(math.Sqrt(above))
	s.angle = math.Pi - rest
	s.area = math.Pi - segmentArea(rest)
	// moment of the whole circle about the chord, plus what the part above it would add
	s.moment = math.Pi*(below-above) + segmentMoment(rest)
	return s
}

// segmentArea is α - sin α cos α, by its series where the two nearly cancel.
func segmentArea(a float64) float64 {
	if a > 0.7 {
		sin, cos := math.Sincos(a)
		return a - sin*cos
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
func segmentMoment(a float64) float64 {
	if a > 0.9 {
		sin, cos := math.Sincos(a)
		return sin*(1-sin*sin/3) - a*cos
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
