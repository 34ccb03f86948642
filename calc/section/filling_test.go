package section_test

import (
	"fmt"
	"math"
	"testing"

	"borewright/calc/section"
)

// vessel is a shape that holds a liquid.
type vessel struct {
	name      string
	shape     section.PartlyFullShape
	height    float64
	bends     []float64               // depths at which a corner bends the surface
	flipped   section.PartlyFullShape // the same upside down
	topWidth  float64                 // above 0, the vessel filled to its height stands at the brim
	symmetric bool                    // about an upright line
}

func mirrored(name string, shape section.PartlyFullShape, height, topWidth float64, bends ...float64) vessel {
	return vessel{name: name, shape: shape, height: height, bends: bends, flipped: shape, topWidth: topWidth, symmetric: true}
}

// vessels has every shape that takes a liquid depth, each in every form that has a
// path of its own. The numbers are exact in binary.
var vessels = []vessel{
	mirrored("circle", section.Circle{Diameter: 0.375}, 0.375, 0),
	mirrored("pipe", section.Pipe{OutsideDiameter: 0.5, WallThickness: 0.0625, LiningThickness: 0.03125}, 0.3125, 0),
	mirrored("rectangle", section.Rectangle{Width: 0.75, Height: 0.5}, 0.5, 0.75),
	mirrored("rounded rectangle", section.Rectangle{Width: 0.75, Height: 0.5, CornerRadius: 0.125}, 0.5, 0.5, 0.125, 0.375),
	mirrored("lying oval", section.Rectangle{Width: 0.75, Height: 0.5, CornerRadius: 0.25}, 0.5, 0.25, 0.25),
	mirrored("standing oval", section.Rectangle{Width: 0.5, Height: 0.75, CornerRadius: 0.25}, 0.75, 0, 0.25, 0.5),
	mirrored("round rectangle", section.Rectangle{Width: 0.5, Height: 0.5, CornerRadius: 0.25}, 0.5, 0),
	mirrored("lying ellipse", section.Ellipse{Width: 0.875, Height: 0.375}, 0.375, 0),
	mirrored("standing ellipse", section.Ellipse{Width: 0.375, Height: 0.875}, 0.875, 0),
	mirrored("flat ellipse", section.Ellipse{Width: 2, Height: 0.125}, 0.125, 0),
	{name: "triangle", shape: section.Triangle{Base: 0.75, Height: 0.5, ApexOffset: 0.25}, height: 0.5,
		flipped: section.Trapezoid{Height: 0.5, BankLeft: 0.5, BankRight: 1}},
	{name: "leaning triangle", shape: section.Triangle{Base: 0.75, Height: 0.5, ApexOffset: -0.25}, height: 0.5,
		flipped: section.Trapezoid{Height: 0.5, BankLeft: -0.5, BankRight: 2}},
	{name: "trapezoid", shape: section.Trapezoid{BottomWidth: 0.5, Height: 0.5, BankLeft: 0.5, BankRight: 1.5}, height: 0.5, topWidth: 1.5,
		flipped: section.Trapezoid{BottomWidth: 1.5, Height: 0.5, BankLeft: -0.5, BankRight: -1.5}},
	{name: "roof", shape: section.Trapezoid{BottomWidth: 0.5, Height: 0.5, BankLeft: -0.5, BankRight: -0.5}, height: 0.5,
		flipped: section.Trapezoid{Height: 0.5, BankLeft: 0.5, BankRight: 0.5}, symmetric: true},
	{name: "kite", shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {0.5, 0.25}, {0, 1}, {-0.25, 0.5}}}, height: 1, bends: []float64{0.25, 0.5},
		flipped: section.Polygon{Vertices: [][2]float64{{0, 0}, {0.5, -0.25}, {0, -1}, {-0.25, -0.5}}}},
	{name: "two feet", shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {0.25, 0}, {0.5, 0.5}, {0.75, 0}, {1, 0}, {1, 1}, {0, 1}}},
		height: 1, bends: []float64{0.5}, topWidth: 1,
		flipped: section.Polygon{Vertices: [][2]float64{{0, 0}, {0.25, 0}, {0.5, -0.5}, {0.75, 0}, {1, 0}, {1, -1}, {0, -1}}}},
}

// depths are even parts of the height of which none hits a bend, and depths near
// the ends.
func (v vessel) depths() []float64 {
	list := []float64{v.height * 1e-6, v.height * 1e-4}
	for i := range 200 {
		list = append(list, v.height*(float64(i)+0.37)/200)
	}
	return append(list, v.height*0.9999, v.height*0.999999)
}

// room is the distance to the nearest bend, bottom and top included.
func (v vessel) room(depth float64) float64 {
	room := min(depth, v.height-depth)
	for _, b := range v.bends {
		room = min(room, math.Abs(depth-b))
	}
	return room
}

// slope is the derivative by the depth from central differences at two steps, whose
// errors of second order cancel, and what rounding leaves of it.
func (v vessel) slope(t *testing.T, depth float64, f func(p section.Properties) float64) (slope, rounding float64) {
	t.Helper()
	step := v.room(depth) / 1024
	difference := func(s float64) float64 {
		return (f(filled(t, v.shape, depth+s)) - f(filled(t, v.shape, depth-s))) / (2 * s)
	}
	const ulps = 8 * 0x1p-52
	return (4*difference(step/2) - difference(step)) / 3, ulps * (f(filled(t, v.shape, depth)) + surface(filled(t, v.shape, depth))*depth) / step
}

// within fails on a difference beyond a relative and an absolute part.
func within(t *testing.T, what string, got, want, relative, absolute float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)+absolute) {
		t.Fatalf("%s: %.17g, want %.17g (%.1e)", what, got, want, math.Abs(got/want-1))
	}
}

func area(p section.Properties) float64    { return p.FlowArea }
func surface(p section.Properties) float64 { return p.FreeSurfaceWidth.Value }
func moment(p section.Properties) float64  { return p.FlowArea * p.CentroidDepth.Value }
func wetted(p section.Properties) float64  { return p.WettedPerimeter }

// Liquid that rises gains area by its surface, and moment about its surface by its
// area. A symmetric wall is longer than the rise by the lean of both its sides.
func TestSurfaceAreaAndWallAreSlopes(t *testing.T) {
	for _, v := range vessels {
		t.Run(v.name, func(t *testing.T) {
			for _, h := range v.depths() {
				at := filled(t, v.shape, h)
				byArea, rounding := v.slope(t, h, area)
				within(t, fmt.Sprintf("dA/dh at %g", h), byArea, surface(at), 1e-8, rounding)
				byMoment, rounding := v.slope(t, h, moment)
				within(t, fmt.Sprintf("d(A z)/dh at %g", h), byMoment, at.FlowArea, 1e-8, rounding)
				if v.symmetric {
					lean, rounding := v.slope(t, h, surface)
					wall, more := v.slope(t, h, wetted)
					within(t, fmt.Sprintf("dP/dh at %g", h), wall, 2*math.Hypot(1, lean/2), 1e-8, rounding+more)
				}
			}
		})
	}
}

func TestRisingLiquidOnlyGrows(t *testing.T) {
	for _, v := range vessels {
		t.Run(v.name, func(t *testing.T) {
			var last section.Properties
			for _, h := range v.depths() {
				p := filled(t, v.shape, h)
				if !(p.FlowArea > last.FlowArea && p.WettedPerimeter > last.WettedPerimeter && moment(p) > moment(last)) {
					t.Fatalf("at %g %+v after %+v", h, p, last)
				}
				if !p.FreeSurface || p.Round || p.LaminarConstant.Valid || p.CentroidDepth.Value >= h || p.CentroidDepth.Value <= 0 {
					t.Fatalf("at %g %+v", h, p)
				}
				near(t, "fill ratio", p.FillRatio.Value, h/v.height, 1e-15)
				near(t, "hydraulic diameter", p.HydraulicDiameter, 4*p.FlowArea/p.WettedPerimeter, 4e-16)
				near(t, "mean depth", p.MeanDepth.Value, p.FlowArea/p.FreeSurfaceWidth.Value, 4e-16)
				last = p
			}
		})
	}
}

// What is wet and what is dry make the whole, and both see the same surface.
func TestLiquidAndTheRestMakeTheWhole(t *testing.T) {
	for _, v := range vessels {
		t.Run(v.name, func(t *testing.T) {
			whole, rounding := full(t, v.shape), 0.0
			if _, ok := v.shape.(section.Polygon); ok {
				rounding = 1e-16 // the surface of a polygon is a difference of stretches of its edges
			}
			for _, h := range v.depths() {
				h = v.height - (v.height - h) // so that both depths are exact
				wet, dry := filled(t, v.shape, h), filled(t, v.flipped, v.height-h)
				near(t, fmt.Sprintf("area at %g", h), wet.FlowArea+dry.FlowArea, whole.FlowArea, 1e-15)
				near(t, fmt.Sprintf("wall at %g", h), wet.WettedPerimeter+dry.WettedPerimeter, whole.WettedPerimeter, 4e-15)
				within(t, fmt.Sprintf("surface at %g", h), surface(wet), surface(dry), 1e-14, rounding)
			}
		})
	}
}

// At its height a vessel without width there is full to the last digit, and one with
// a level top stands at the brim with the top dry; a hair below there is no jump.
func TestFilledToTheHeight(t *testing.T) {
	for _, v := range vessels {
		t.Run(v.name, func(t *testing.T) {
			whole, top := full(t, v.shape), filled(t, v.shape, v.height)
			if v.topWidth == 0 && top != whole {
				t.Errorf("%+v, full %+v", top, whole)
			}
			if v.topWidth > 0 {
				if !top.FreeSurface || top.FreeSurfaceWidth.Value != v.topWidth || top.FillRatio.Value != 1 {
					t.Errorf("%+v", top)
				}
				near(t, "area", top.FlowArea, whole.FlowArea, 2e-16)
				near(t, "wall", top.WettedPerimeter, whole.WettedPerimeter-v.topWidth, 4e-16)
			}
			below := filled(t, v.shape, math.Nextafter(v.height, 0))
			near(t, "area a hair below", below.FlowArea, whole.FlowArea, 4e-16)
			// sqrt(2^-53) is the angle that a last digit of the depth takes at a round crown
			near(t, "wall a hair below", below.WettedPerimeter, top.WettedPerimeter, 4e-8)
		})
	}
}

// An open trapezoid and a closed one hold the same liquid; the open one has no height
// to be filled to.
func TestOpenTrapezoidIsTheClosedOne(t *testing.T) {
	closed := section.Trapezoid{BottomWidth: 0.5, Height: 0.5, BankLeft: 0.5, BankRight: 1.5}
	open := closed
	open.Height = 0
	for _, h := range []float64{1e-6, 0.1, 0.25, 0.5} {
		p, q := filled(t, open, h), filled(t, closed, h)
		if p.FillRatio.Valid || q.FillRatio.Value != h/0.5 {
			t.Errorf("%g: fill ratios %+v and %+v", h, p.FillRatio, q.FillRatio)
		}
		p.FillRatio = q.FillRatio
		if p != q {
			t.Errorf("%g: %+v, closed %+v", h, p, q)
		}
	}
}

// At a bend one formula takes over from another, and none of the sums jumps.
func TestNothingJumpsAtABend(t *testing.T) {
	bends := 0
	for _, v := range vessels {
		t.Run(v.name, func(t *testing.T) {
			for _, b := range v.bends {
				bends++
				below, at, above := filled(t, v.shape, math.Nextafter(b, 0)), filled(t, v.shape, b), filled(t, v.shape, math.Nextafter(b, 1))
				for what, f := range map[string]func(section.Properties) float64{"area": area, "wall": wetted, "moment": moment} {
					near(t, fmt.Sprintf("%s below %g", what, b), f(below), f(at), 2e-15)
					near(t, fmt.Sprintf("%s above %g", what, b), f(above), f(at), 2e-15)
				}
			}
		})
	}
	if bends == 0 {
		t.Error("no vessel has a bend")
	}
}
