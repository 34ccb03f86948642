package section_test

import (
	"fmt"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/section"
)

const tiny = 0x1p-30

// A shape that is almost another has almost its properties, with the difference that
// the first derivative tells.
func TestAlmostAnotherShape(t *testing.T) {
	circle := full(t, section.Circle{Diameter: 1})
	box := full(t, section.Rectangle{Width: 3, Height: 2})
	for _, c := range []struct {
		name            string
		shape           section.Shape
		area, perimeter float64
	}{
		{"corners of no radius", section.Rectangle{Width: 3, Height: 2, CornerRadius: tiny}, box.FlowArea, box.WettedPerimeter - (8-2*math.Pi)*tiny},
		{"an ellipse a little wide", section.Ellipse{Width: 1 + tiny, Height: 1}, math.Pi / 4 * (1 + tiny), math.Pi * (1 + tiny/2)},
		{"an ellipse a little high", section.Ellipse{Width: 1, Height: 1 + tiny}, math.Pi / 4 * (1 + tiny), math.Pi * (1 + tiny/2)},
		{"a flat oval a little wide", section.FlatOval{Width: 1 + tiny, Height: 1}, math.Pi/4 + tiny, math.Pi + 2*tiny},
		{"a flat oval a little high", section.FlatOval{Width: 1, Height: 1 + tiny}, math.Pi/4 + tiny, math.Pi + 2*tiny},
		{"a rectangle almost all corners", section.Rectangle{Width: 1, Height: 1, CornerRadius: 0.5 - tiny}, math.Pi/4 + (4-math.Pi)*tiny, math.Pi + (8-2*math.Pi)*tiny},
		{"an annulus around a thread", section.Annulus{OuterDiameter: 1, InnerDiameter: 2 * tiny}, math.Pi / 4, math.Pi * (1 + 2*tiny)},
		{"a trapezoid with banks almost upright", section.Trapezoid{BottomWidth: 3, Height: 2, BankLeft: tiny}, 6 + 2*tiny, 10 + 2*tiny},
		{"a sector almost of no angle left out", section.Sector{Radius: 0.5, Angle: 2*math.Pi - tiny}, math.Pi/4 - tiny/8, math.Pi + 1 - tiny/2},
		{"an ellipse almost a slit", section.Ellipse{Width: 1, Height: 2 * tiny}, math.Pi / 2 * tiny, 2},
		{"a flat oval almost a slit", section.FlatOval{Width: 1, Height: 2 * tiny}, 2*tiny - (4-math.Pi)*tiny*tiny, 2 + 2*(math.Pi-2)*tiny},
	} {
		p := full(t, c.shape)
		near(t, c.name+": area", p.FlowArea, c.area, 1e-15)
		near(t, c.name+": perimeter", p.WettedPerimeter, c.perimeter, 1e-15)
		if p.Round {
			t.Errorf("%s counts as round", c.name)
		}
	}
	near(t, "laminar constant of an ellipse almost round", full(t, section.Ellipse{Width: 1 + tiny, Height: 1}).LaminarConstant.Value, circle.LaminarConstant.Value, 1e-15)
}

// What is the same section by another name has the same properties.
func TestSameSectionByAnotherName(t *testing.T) {
	root3 := math.Sqrt(3)
	for _, c := range []struct {
		name     string
		one, two section.Section
	}{
		{"three equal sides", section.Section{Shape: section.RegularPolygon{Sides: 3, SideLength: 0.5}}, section.Section{Shape: section.Triangle{Base: 0.5, Height: root3 / 4, ApexOffset: 0.25}}},
		{"four equal sides", section.Section{Shape: section.RegularPolygon{Sides: 4, SideLength: 0.5}}, section.Section{Shape: section.Rectangle{Width: 0.5, Height: 0.5}}},
		{"upright banks", section.Section{Shape: section.Trapezoid{BottomWidth: 0.5, Height: 0.25}}, section.Section{Shape: section.Rectangle{Width: 0.5, Height: 0.25}}},
		{"upright banks, partly full", depth(section.Trapezoid{BottomWidth: 0.5, Height: 0.25}, 0.1), depth(section.Rectangle{Width: 0.5, Height: 0.25}, 0.1)},
		{"pipe, partly full", depth(section.Pipe{OutsideDiameter: 0.5, WallThickness: 0.125}, 0.1), depth(section.Circle{Diameter: 0.25}, 0.1)},
		{"ellipse of equal axes, half empty", depth(section.Ellipse{Width: 0.5, Height: 0.5}, 0.2), depth(section.Circle{Diameter: 0.5}, 0.2)},
		{"ellipse of equal axes, half full", depth(section.Ellipse{Width: 0.5, Height: 0.5}, 0.3), depth(section.Circle{Diameter: 0.5}, 0.3)},
		{"all corners, half empty", depth(section.Rectangle{Width: 0.5, Height: 0.5, CornerRadius: 0.25}, 0.2), depth(section.Circle{Diameter: 0.5}, 0.2)},
		{"all corners, half full", depth(section.Rectangle{Width: 0.5, Height: 0.5, CornerRadius: 0.25}, 0.3), depth(section.Circle{Diameter: 0.5}, 0.3)},
		{"all corners, full", depth(section.Rectangle{Width: 0.5, Height: 0.5, CornerRadius: 0.25}, 0.5), section.Section{Shape: section.Circle{Diameter: 0.5}}},
		{"a polygon with its apex up, full", depth(section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 0}, {0, 1}}}, 1), section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 0}, {0, 1}}}}},
	} {
		p, q := of(t, c.one), of(t, c.two)
		for what, v := range values(p) {
			w := values(q)[what]
			if v.Valid != w.Valid {
				t.Errorf("%s: %s %+v and %+v", c.name, what, v, w)
			}
			near(t, c.name+": "+what, v.Value, w.Value, 1e-15)
		}
		if p.Round != q.Round || p.FreeSurface != q.FreeSurface {
			t.Errorf("%s: %+v and %+v", c.name, p, q)
		}
	}
}

func depth(shape section.Shape, v float64) section.Section {
	return section.Section{Shape: shape, LiquidDepth: calc.Some(v)}
}

// values are the numbers of a section by their names.
func values(p section.Properties) map[string]calc.Optional {
	return map[string]calc.Optional{
		"flow area": calc.Some(p.FlowArea), "wetted perimeter": calc.Some(p.WettedPerimeter), "hydraulic diameter": calc.Some(p.HydraulicDiameter),
		"hydraulic radius": calc.Some(p.HydraulicRadius), "equal area diameter": calc.Some(p.EqualAreaDiameter), "surface": p.FreeSurfaceWidth,
		"mean depth": p.MeanDepth, "centroid": p.CentroidDepth, "fill ratio": p.FillRatio, "laminar constant": p.LaminarConstant,
		"laminar equivalent": p.LaminarEquivalent, "equal friction": p.EqualFriction,
	}
}

// With more sides a regular polygon holds more of what the circle of its perimeter
// holds: 1 - x²/3 - x⁴/45 with x = π/n, the series of x/tan x.
func TestManySidesAreRound(t *testing.T) {
	last := 0.0
	for n := 3.0; n <= 1000; n++ {
		p := full(t, section.RegularPolygon{Sides: n, SideLength: 1 / n})
		part := p.FlowArea * 4 * math.Pi
		if part <= last {
			t.Fatalf("%v sides hold %v, one less holds %v", n, part, last)
		}
		last = part
		if n >= 100 {
			x := math.Pi / n
			near(t, fmt.Sprintf("%v sides", n), part, 1-x*x/3-x*x*x*x/45, 1e-11)
		}
	}
}

// A polygon of 1000 vertices on a circle is the regular polygon, and filled to any
// depth it is the circle but for the flats.
func TestManyVerticesAreRound(t *testing.T) {
	const n = 1000
	var p section.Polygon
	for i := range n {
		sin, cos := math.Sincos(2 * math.Pi * float64(i) / n)
		p.Vertices = append(p.Vertices, [2]float64{cos / 2, sin / 2})
	}
	regular := full(t, section.RegularPolygon{Sides: n, SideLength: math.Sin(math.Pi / n)})
	near(t, "area", full(t, p).FlowArea, regular.FlowArea, 1e-13)
	near(t, "perimeter", full(t, p).WettedPerimeter, regular.WettedPerimeter, 1e-13)
	for _, h := range []float64{0.05, 0.3, 0.5, 0.8, 0.95} {
		got, want := filled(t, p, h), filled(t, section.Circle{Diameter: 1}, h)
		near(t, "area", got.FlowArea, want.FlowArea, 1e-4)
		near(t, "wall", got.WettedPerimeter, want.WettedPerimeter, 1e-4)
		near(t, "surface", got.FreeSurfaceWidth.Value, want.FreeSurfaceWidth.Value, 1e-4)
		near(t, "centroid", got.CentroidDepth.Value, want.CentroidDepth.Value, 1e-4)
	}
}

// A narrow annulus is a pair of plates, rolled up. Wide ducts tend to plates as well:
// 96 (1 - 2 s + 192 · 31 ζ(5)/(32 π⁵) s), the first two terms of the series of the
// rectangle by the ratio s of its sides.
func TestNarrowGapsArePlates(t *testing.T) {
	for _, gap := range []float64{1e-3, 1e-6, 1e-8} {
		annulus := section.Annulus{OuterDiameter: 1 + gap, InnerDiameter: 1 - gap}
		plates := full(t, section.ParallelPlates{Gap: (annulus.OuterDiameter - annulus.InnerDiameter) / 2, Width: math.Pi})
		p := full(t, annulus)
		near(t, "area", p.FlowArea, plates.FlowArea, 1e-15)
		near(t, "perimeter", p.WettedPerimeter, plates.WettedPerimeter, 1e-15)
		// the constant is even in the curvature, so it differs by the square of the gap
		near(t, "laminar constant", p.LaminarConstant.Value, plates.LaminarConstant.Value, gap*gap+1e-15)
	}
	const slope = 2 - 192*1.00452376279513961613/(math.Pi*math.Pi*math.Pi*math.Pi*math.Pi)
	for _, s := range []float64{1e-3, 1e-6, 1e-9} {
		p := full(t, section.Rectangle{Width: 1, Height: s})
		near(t, "wide rectangle", p.LaminarConstant.Value, 96*(1-slope*s), 3*s*s+1e-15)
	}
}

// A polygon does not care where it stands, with which vertex it begins, in which sense
// it goes round, or whether left and right change places.
func TestPolygonsByOtherNames(t *testing.T) {
	// exact in binary
	outline := [][2]float64{{0, 0}, {2, 0}, {2.5, 1}, {1.5, 0.75}, {1.25, 2}, {0.5, 1}, {-0.5, 1.5}}
	dry := []int{1, 4}
	n := len(outline)
	original := section.Polygon{Vertices: outline, DryEdges: dry}
	change := func(at func(i int) [2]float64, edge func(i int) int) section.Polygon {
		var p section.Polygon
		for i := range n {
			p.Vertices = append(p.Vertices, at(i))
		}
		for _, e := range dry {
			p.DryEdges = append(p.DryEdges, edge(e))
		}
		return p
	}
	same := func(i int) int { return i }
	for name, p := range map[string]section.Polygon{
		"elsewhere":          change(func(i int) [2]float64 { return [2]float64{outline[i][0] + 64, outline[i][1] - 32} }, same),
		"from another start": change(func(i int) [2]float64 { return outline[(i+3)%n] }, func(e int) int { return (e - 3 + n) % n }),
		"backwards":          change(func(i int) [2]float64 { return outline[n-1-i] }, func(e int) int { return (2*n - 2 - e) % n }),
		"mirrored":           change(func(i int) [2]float64 { return [2]float64{-outline[i][0], outline[i][1]} }, same),
	} {
		for _, at := range []calc.Optional{{}, calc.Some(0.125), calc.Some(0.75), calc.Some(1), calc.Some(1.75), calc.Some(2)} {
			got, want := of(t, section.Section{Shape: p, LiquidDepth: at}), of(t, section.Section{Shape: original, LiquidDepth: at})
			for what, v := range values(got) {
				near(t, fmt.Sprintf("%s, %s at %v", name, what, at), v.Value, values(want)[what].Value, 1e-14)
			}
		}
	}
}
