package section_test

import (
	"fmt"
	"math"
	"math/big"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"

	"borewright/calc/section"
)

func exact(v float64) *big.Float { return new(big.Float).SetPrec(400).SetFloat64(v) }

// exactPi has 80 digits.
func exactPi() *big.Float {
	pi, _, err := big.ParseFloat("3.1415926535897932384626433832795028841971693993751058209749445923078164062862090", 10, 400, big.ToNearestEven)
	if err != nil {
		panic(err)
	}
	return pi
}

// exactSlice is area, arc and moment about the surface of a circle of diameter 1
// filled to h, in big numbers. Up to half they are series, as in exactSegment; above
// they are those of the circle less those of the part that is dry.
func exactSlice(h float64) (area, arc, moment *big.Float) {
	if h > 0.5 {
		dry := 1 - h // exact
		a, s, m := exactSlice(dry)
		area = new(big.Float).Sub(new(big.Float).Quo(exactPi(), exact(4)), a)
		arc = new(big.Float).Sub(exactPi(), s)
		whole := new(big.Float).Quo(exactPi(), exact(4))
		moment = new(big.Float).Add(whole.Mul(whole, exact(h-0.5)), m)
		return area, arc, moment
	}
	area, arc = exactSegment(h)
	// the moment is ∫ (h - y) 2 sqrt(y - y²) dy
	y, c, power, sum := exact(h), exact(1), exact(1), exact(0)
	for k := range 120 {
		sum.Add(sum, new(big.Float).Quo(new(big.Float).Mul(c, power), exact(float64(k)+2.5)))
		power.Mul(power, y)
		c.Mul(c, exact(float64(k)-0.5)).Quo(c, exact(float64(k)+1))
	}
	sum.Mul(sum, new(big.Float).Sqrt(y)).Mul(sum, y).Mul(sum, y).Mul(sum, exact(2))
	moment = new(big.Float).Sub(new(big.Float).Mul(area, y), sum)
	return area, arc, moment
}

func nearest(v *big.Float) float64 {
	f, _ := v.Float64()
	return f
}

// fillings go from nearly empty to nearly full, and sit on both sides of every switch
// between a series and a closed form.
var fillings = []float64{
	1e-9, 1e-8, 1e-6, 3e-5, 1e-3, 0.01, 0.1, 0.1175, 0.1176, 0.19, 0.2, 0.25, 0.4, 0.499999, 0.5, 0.500001, 0.6, 0.75, 0.8, 0.81, 0.8824, 0.8825, 0.9, 0.99,
	0.999, 0.99999, 0.9999999, 0.999999999, 1 - 0x1p-40, 1 - 0x1p-53,
}

// A circle keeps its digits at every depth.
func TestCircleKeepsItsDigits(t *testing.T) {
	for _, h := range fillings {
		area, arc, moment := exactSlice(h)
		p := filled(t, section.Circle{Diameter: 1}, h)
		near(t, fmt.Sprintf("area at %g", h), p.FlowArea, nearest(area), 2e-15)
		near(t, fmt.Sprintf("arc at %g", h), p.WettedPerimeter, nearest(arc), 1e-15)
		near(t, fmt.Sprintf("centroid at %g", h), p.CentroidDepth.Value, nearest(new(big.Float).Quo(moment, area)), 4e-15)
		near(t, fmt.Sprintf("surface at %g", h), p.FreeSurfaceWidth.Value, nearest(new(big.Float).Sqrt(new(big.Float).Mul(exact(4*h), new(big.Float).Sub(exact(1), exact(h))))), 1e-15)
	}
}

// ellipseWall is the wall below a depth of at most half of the height, by quadrature.
// With the depth H u² the half width is W u sqrt(1 - u²), and the integrand has
// neither a pole nor a difference.
func ellipseWall(e section.Ellipse, h float64) float64 {
	const panels = 400
	end, sum := math.Sqrt(h/e.Height), 0.0
	for i := range panels {
		sum += quad.Fixed(func(u float64) float64 {
			return 2 * math.Hypot(e.Width*(1-2*u*u)/math.Sqrt(1-u*u), 2*e.Height*u)
		}, end*float64(i)/panels, end*float64(i+1)/panels, 16, quad.Legendre{}, 0)
	}
	return sum
}

// An ellipse keeps its digits at every depth: area and centroid are those of a
// circle, stretched, and the wall is that of a quadrature.
func TestEllipseKeepsItsDigits(t *testing.T) {
	for _, e := range []section.Ellipse{{1, 1}, {1.0625, 1}, {3, 1}, {100, 1}, {0.9375, 1}, {0.25, 1}, {0.01, 1}} {
		whole := 2 * ellipseWall(e, 0.5)
		near(t, fmt.Sprintf("%+v: whole wall", e), full(t, e).WettedPerimeter, whole, 1e-14)
		for _, h := range fillings {
			area, _, moment := exactSlice(h)
			p := filled(t, e, h)
			what := fmt.Sprintf("%+v at %g: ", e, h)
			near(t, what+"area", p.FlowArea, e.Width*nearest(area), 2e-15)
			near(t, what+"centroid", p.CentroidDepth.Value, nearest(new(big.Float).Quo(moment, area)), 4e-15)
			near(t, what+"surface", p.FreeSurfaceWidth.Value, e.Width*filled(t, section.Circle{Diameter: 1}, h).FreeSurfaceWidth.Value, 4e-16)
			wall := 0.0
			if h <= 0.5 {
				wall = ellipseWall(e, h)
			} else {
				wall = whole - ellipseWall(e, 1-h)
			}
			near(t, what+"wall", p.WettedPerimeter, wall, 2e-14)
		}
	}
}

// A bore of the smallest and one of the largest diameter are alike but for the scale.
func TestDigitsDoNotDependOnTheScale(t *testing.T) {
	for _, scale := range []float64{0x1p-20, 0x1p19} {
		for _, h := range fillings {
			if h*scale < 1e-9 {
				continue
			}
			p, q := filled(t, section.Circle{Diameter: scale}, h*scale), filled(t, section.Circle{Diameter: 1}, h)
			if p.FlowArea != q.FlowArea*scale*scale || p.WettedPerimeter != q.WettedPerimeter*scale || p.CentroidDepth.Value != q.CentroidDepth.Value*scale {
				t.Errorf("%g at %g: %+v, unit %+v", scale, h, p, q)
			}
		}
	}
}
