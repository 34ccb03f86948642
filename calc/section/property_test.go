package section_test

import (
	"math"
	"math/big"
	"testing"

	"pgregory.net/rapid"

	"borewright/calc"
	"borewright/calc/section"
)

// anyShape draws a shape of unit size or so, scaled by s; height is that of the
// shape, 0 where it takes no liquid depth.
func anyShape(t *rapid.T, s float64) (shape section.Shape, height float64) {
	a := rapid.Float64Range(0.05, 2).Draw(t, "a") * s
	b := rapid.Float64Range(0.05, 2).Draw(t, "b") * s
	k := rapid.Float64Range(0, 1).Draw(t, "k")
	switch rapid.IntRange(0, 11).Draw(t, "shape") {
	case 0:
		return section.Circle{Diameter: a}, a
	case 1:
		pipe := section.Pipe{OutsideDiameter: a, WallThickness: a / 8, LiningThickness: a * k / 8}
		return pipe, pipe.OutsideDiameter - 2*pipe.WallThickness - 2*pipe.LiningThickness
	case 2:
		return section.Rectangle{Width: a, Height: b, CornerRadius: k * min(a, b) / 2}, b
	case 3:
		return section.FlatOval{Width: max(a, b), Height: min(a, b)}, 0
	case 4:
		return section.Ellipse{Width: a, Height: b}, b
	case 5:
		return section.Annulus{OuterDiameter: a, InnerDiameter: a * (0.01 + 0.98*k)}, 0
	case 6:
		return section.Triangle{Base: a, Height: b, ApexOffset: (2*k - 0.5) * a}, b
	case 7:
		return section.RegularPolygon{Sides: float64(rapid.IntRange(3, 40).Draw(t, "sides")), SideLength: a}, 0
	case 8:
		return section.Sector{Radius: a, Angle: 0.01 + 6.2*k}, 0
	case 9:
		return section.Trapezoid{BottomWidth: a, Height: b, BankLeft: k, BankRight: 2 * k}, b
	case 10:
		return section.ParallelPlates{Gap: min(a, b), Width: max(a, b)}, 0
	}
	return section.Polygon{Vertices: [][2]float64{{0, 0}, {a, 0}, {a, b}, {a / 2, b}, {a / 2, b / 2}, {0, b / 2}}}, b
}

func of(t rapid.TB, s section.Section) section.Properties {
	t.Helper()
	p, err := s.Of()
	if err != nil {
		t.Fatalf("%+v: %v", s, err)
	}
	return p
}

func full(t rapid.TB, s section.Shape) section.Properties {
	t.Helper()
	return of(t, section.Section{Shape: s})
}

func filled(t rapid.TB, s section.Shape, depth float64) section.Properties {
	t.Helper()
	return of(t, section.Section{Shape: s, LiquidDepth: calc.Some(depth)})
}

func near(t rapid.TB, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Fatalf("%s: %.17g, want %.17g (%.1e)", what, got, want, math.Abs(got/want-1))
	}
}

// In another unit of length areas go by the square, lengths by the first power,
// and ratios stay.
func TestSectionsScale(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := math.Pow(2, float64(rapid.IntRange(-12, 12).Draw(t, "scale"))) // exact
		var shapes [2]section.Section
		seedOf := rapid.Float64Range(0.02, 0.98).Draw(t, "filling")
		draw := rapid.Custom(func(t *rapid.T) [2]section.Section {
			small, height := anyShape(t, 1)
			large := scaled(small, s)
			pair := [2]section.Section{{Shape: small}, {Shape: large}}
			if height > 0 && rapid.Bool().Draw(t, "partly full") {
				pair[0].LiquidDepth, pair[1].LiquidDepth = calc.Some(seedOf*height), calc.Some(seedOf*height*s)
			}
			return pair
		})
		shapes = draw.Draw(t, "sections")
		a, b := of(t, shapes[0]), of(t, shapes[1])
		near(t, "area", b.FlowArea, a.FlowArea*s*s, 1e-13)
		near(t, "perimeter", b.WettedPerimeter, a.WettedPerimeter*s, 1e-13)
		near(t, "hydraulic diameter", b.HydraulicDiameter, a.HydraulicDiameter*s, 1e-13)
		near(t, "equal area diameter", b.EqualAreaDiameter, a.EqualAreaDiameter*s, 1e-13)
		near(t, "laminar constant", b.LaminarConstant.Value, a.LaminarConstant.Value, 1e-12)
		near(t, "equal friction diameter", b.EqualFriction.Value, a.EqualFriction.Value*s, 1e-12)
		near(t, "fill ratio", b.FillRatio.Value, a.FillRatio.Value, 1e-13)
		near(t, "surface", b.FreeSurfaceWidth.Value, a.FreeSurfaceWidth.Value*s, 1e-12)
		near(t, "centroid", b.CentroidDepth.Value, a.CentroidDepth.Value*s, 1e-12)
	})
}

// scaled is the shape with all lengths times s.
func scaled(shape section.Shape, s float64) section.Shape {
	switch v := shape.(type) {
	case section.Circle:
		return section.Circle{Diameter: v.Diameter * s}
	case section.Pipe:
		return section.Pipe{OutsideDiameter: v.OutsideDiameter * s, WallThickness: v.WallThickness * s, LiningThickness: v.LiningThickness * s}
	case section.Rectangle:
		return section.Rectangle{Width: v.Width * s, Height: v.Height * s, CornerRadius: v.CornerRadius * s}
	case section.FlatOval:
		return section.FlatOval{Width: v.Width * s, Height: v.Height * s}
	case section.Ellipse:
		return section.Ellipse{Width: v.Width * s, Height: v.Height * s}
	case section.Annulus:
		return section.Annulus{OuterDiameter: v.OuterDiameter * s, InnerDiameter: v.InnerDiameter * s}
	case section.Triangle:
		return section.Triangle{Base: v.Base * s, Height: v.Height * s, ApexOffset: v.ApexOffset * s}
	case section.RegularPolygon:
		return section.RegularPolygon{Sides: v.Sides, SideLength: v.SideLength * s}
	case section.Sector:
		return section.Sector{Radius: v.Radius * s, Angle: v.Angle}
	case section.Trapezoid:
		return section.Trapezoid{BottomWidth: v.BottomWidth * s, Height: v.Height * s, BankLeft: v.BankLeft, BankRight: v.BankRight}
	case section.ParallelPlates:
		return section.ParallelPlates{Gap: v.Gap * s, Width: v.Width * s}
	case section.Polygon:
		p := section.Polygon{DryEdges: v.DryEdges}
		for _, w := range v.Vertices {
			p.Vertices = append(p.Vertices, [2]float64{w[0] * s, w[1] * s})
		}
		return p
	}
	panic("a shape that this test does not know")
}

// What follows from area and perimeter follows, for every shape.
func TestDefinitionsHold(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		shape, _ := anyShape(t, 1)
		p := full(t, shape)
		near(t, "hydraulic diameter", p.HydraulicDiameter, 4*p.FlowArea/p.WettedPerimeter, 1e-15)
		near(t, "hydraulic radius", p.HydraulicRadius, p.HydraulicDiameter/4, 1e-15)
		near(t, "equal area diameter", p.EqualAreaDiameter, math.Sqrt(4*p.FlowArea/math.Pi), 1e-15)
		if p.FreeSurface || p.FreeSurfaceWidth.Valid || p.MeanDepth.Valid || p.FillRatio != calc.Some(1) {
			t.Fatalf("full, and yet %+v", p)
		}
		// no outline encloses more than a circle of its length (isoperimetric inequality)
		if _, plates := shape.(section.ParallelPlates); !plates && p.HydraulicDiameter > p.EqualAreaDiameter*(1+1e-14) {
			t.Fatalf("%+v encloses more than a circle: %+v", shape, p)
		}
		if p.LaminarConstant.Valid {
			near(t, "laminar equivalent", p.LaminarEquivalent.Value, p.HydraulicDiameter*64/p.LaminarConstant.Value, 1e-15)
		}
	})
}

// Rising liquid: area grows by the surface, the first moment by the area.
func TestRisingLiquid(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		shape, height := anyShape(t, 1)
		if height == 0 {
			return
		}
		h := height * rapid.Float64Range(0.01, 0.99).Draw(t, "filling")
		step := height * 1e-5
		below, at, above := filled(t, shape, h-step), filled(t, shape, h), filled(t, shape, h+step)
		if !(below.FlowArea < at.FlowArea && at.FlowArea < above.FlowArea) || !(at.FillRatio.Value > 0 && at.FillRatio.Value < 1) || !at.FreeSurface {
			t.Fatalf("%+v", at)
		}
		kink := 3e-5 * (1 + math.Abs(at.FreeSurfaceWidth.Value)) // corners bend the surface
		if got := (above.FlowArea - below.FlowArea) / (2 * step); math.Abs(got-at.FreeSurfaceWidth.Value) > kink && !bends(shape, h, step) {
			t.Fatalf("dA/dh %v, surface %v", got, at.FreeSurfaceWidth.Value)
		}
		moment := func(p section.Properties) float64 { return p.FlowArea * p.CentroidDepth.Value }
		near(t, "dM/dh", (moment(above)-moment(below))/(2*step), at.FlowArea, 1e-5)
		near(t, "mean depth", at.MeanDepth.Value, at.FlowArea/at.FreeSurfaceWidth.Value, 1e-15)
	})
}

// bends: the polygon of this test jumps in width at half its height.
func bends(shape section.Shape, h, step float64) bool {
	p, ok := shape.(section.Polygon)
	return ok && math.Abs(h-p.Vertices[2][1]/2) <= step
}

// Where two shapes become one, their properties do.
func TestShapesMeet(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := rapid.Float64Range(0.01, 3).Draw(t, "a")
		b := rapid.Float64Range(0.01, 3).Draw(t, "b")
		h := b * rapid.Float64Range(0.01, 0.99).Draw(t, "filling")
		rectangle := section.Rectangle{Width: a, Height: b}
		same := func(what string, p, q section.Properties, relative float64) {
			t.Helper()
			near(t, what+": area", p.FlowArea, q.FlowArea, relative)
			near(t, what+": perimeter", p.WettedPerimeter, q.WettedPerimeter, relative)
			near(t, what+": surface", p.FreeSurfaceWidth.Value, q.FreeSurfaceWidth.Value, relative)
			near(t, what+": centroid", p.CentroidDepth.Value, q.CentroidDepth.Value, relative)
		}
		box := section.Polygon{Vertices: [][2]float64{{0, 0}, {a, 0}, {a, b}, {0, b}}}
		same("rectangle as polygon", full(t, box), full(t, rectangle), 1e-14)
		same("rectangle as polygon, partly full", filled(t, box, h), filled(t, rectangle, h), 1e-13)
		clockwise := section.Polygon{Vertices: [][2]float64{{0, b}, {a, b}, {a, 0}, {0, 0}}}
		same("the other way round", filled(t, clockwise, h), filled(t, box, h), 1e-14)
		same("trapezoid without banks", full(t, section.Trapezoid{BottomWidth: a, Height: b}), full(t, rectangle), 1e-14)
		same("trapezoid without banks, partly full", filled(t, section.Trapezoid{BottomWidth: a, Height: b}, h), filled(t, rectangle, h), 1e-13)
		bank := rapid.Float64Range(0.01, 3).Draw(t, "bank")
		trapezoid := section.Trapezoid{BottomWidth: a, Height: b, BankLeft: bank, BankRight: bank / 2}
		outline := section.Polygon{Vertices: [][2]float64{{0, 0}, {a, 0}, {a + bank/2*b, b}, {-bank * b, b}}}
		same("trapezoid as polygon", full(t, outline), full(t, trapezoid), 1e-13)
		same("trapezoid as polygon, partly full", filled(t, outline, h), filled(t, trapezoid, h), 1e-12)
		apex := a * rapid.Float64Range(-0.5, 1.5).Draw(t, "apex")
		triangle := section.Triangle{Base: a, Height: b, ApexOffset: apex}
		three := section.Polygon{Vertices: [][2]float64{{0, 0}, {a, 0}, {apex, b}}}
		same("triangle as polygon", full(t, three), full(t, triangle), 1e-13)
		same("triangle as polygon, partly full", filled(t, three, h), filled(t, triangle, h), 1e-12)
		dry := box
		dry.DryEdges = []int{2}
		near(t, "a dry top is not wetted", full(t, dry).WettedPerimeter, 2*(a+b)-a, 1e-14)
		same("a dry top above the liquid", filled(t, dry, h), filled(t, box, h), 1e-14)
		circle := full(t, section.Circle{Diameter: a})
		same("ellipse of equal axes", full(t, section.Ellipse{Width: a, Height: a}), circle, 1e-14)
		same("flat oval of equal sides", full(t, section.FlatOval{Width: a, Height: a}), circle, 1e-14)
		same("rectangle that is all corners", full(t, section.Rectangle{Width: a, Height: a, CornerRadius: a / 2}), circle, 1e-14)
		same("flat oval as rectangle", full(t, section.Rectangle{Width: a + b, Height: a, CornerRadius: a / 2}), full(t, section.FlatOval{Width: a + b, Height: a}), 1e-14)
		same("pipe as circle", full(t, section.Pipe{OutsideDiameter: 1.25 * a, WallThickness: a / 8}), circle, 1e-14)
	})
}

// Limits of the laminar constant: closed forms meet where shapes do.
// Source: Shah and London, Laminar Flow Forced Convection in Ducts (1978), from memory:
// 96 for a narrow gap, 64 for a circle, 160/3 for an equilateral triangle.
func TestLaminarConstantsMeet(t *testing.T) {
	constant := func(s section.Shape) float64 {
		p := full(t, s)
		if !p.LaminarConstant.Valid {
			t.Fatalf("%+v has no laminar constant", s)
		}
		return p.LaminarConstant.Value
	}
	near(t, "circle", constant(section.Circle{Diameter: 1}), 64, 0)
	near(t, "parallel plates", constant(section.ParallelPlates{Gap: 1, Width: 7}), 96, 1e-15)
	near(t, "wide rectangle", constant(section.Rectangle{Width: 1e6, Height: 1}), 96, 1e-5)
	near(t, "narrow annulus", constant(section.Annulus{OuterDiameter: 1, InnerDiameter: 1 - 1e-6}), 96, 1e-9)
	near(t, "annulus around a thread", constant(section.Annulus{OuterDiameter: 1, InnerDiameter: 1e-9}), 64, 0.2)
	near(t, "round ellipse", constant(section.Ellipse{Width: 1, Height: 1}), 64, 1e-14)
	near(t, "equilateral triangle", constant(section.RegularPolygon{Sides: 3, SideLength: 1}), 160./3, 1e-14)
	near(t, "equilateral triangle by base and height", constant(section.Triangle{Base: 1, Height: math.Sqrt(3) / 2, ApexOffset: 0.5}), 160./3, 1e-13)
	near(t, "square, either way up", constant(section.Rectangle{Width: 0.4, Height: 0.9}), constant(section.Rectangle{Width: 0.9, Height: 0.4}), 1e-14)
	// a rectangle of 2 to 1: 62.19 by the tables
	near(t, "rectangle of 2 to 1", constant(section.Rectangle{Width: 2, Height: 1}), 62.19, 1e-4)
}

// exactSegment is the area and the arc of a circle of diameter 1 filled to the
// depth h, by series in big numbers: the area is ∫ 2 sqrt(y - y²) dy.
func exactSegment(h float64) (area, arc *big.Float) {
	const precision, terms = 400, 120
	number := func(v float64) *big.Float { return new(big.Float).SetPrec(precision).SetFloat64(v) }
	// sqrt(y - y²) = sqrt(y) Σ c_k y^k with c_k = binom(1/2, k) (-1)^k; the arc is
	// ∫ 1/sqrt(y - y²) dy with d_k = binom(-1/2, k) (-1)^k. sqrt(h) is taken out.
	c, d, power := number(1), number(1), number(1)
	area, arc = number(0), number(0)
	y := number(h)
	for k := range terms {
		half := number(float64(k) + 1.5)
		area.Add(area, new(big.Float).Quo(new(big.Float).Mul(c, power), half))
		arc.Add(arc, new(big.Float).Quo(new(big.Float).Mul(d, power), number(float64(k)+0.5)))
		power.Mul(power, y)
		c.Mul(c, number(float64(k)-0.5)).Quo(c, number(float64(k)+1))
		d.Mul(d, number(float64(k)+0.5)).Quo(d, number(float64(k)+1))
	}
	root := new(big.Float).SetPrec(precision).Sqrt(y)
	area.Mul(area, root).Mul(area, y).Mul(area, number(2))
	arc.Mul(arc, root)
	return area, arc
}

// A nearly empty circle keeps all digits, and so does an ellipse.
func TestNearlyEmptyKeepsItsDigits(t *testing.T) {
	for _, h := range []float64{1e-8, 1e-6, 3e-5, 1e-4, 1e-3, 0.01, 0.05, 0.1, 0.2} {
		exactArea, exactArc := exactSegment(h)
		area, _ := exactArea.Float64()
		arc, _ := exactArc.Float64()
		p := filled(t, section.Circle{Diameter: 1}, h)
		near(t, "area", p.FlowArea, area, 1e-14)
		near(t, "arc", p.WettedPerimeter, arc, 1e-14)
		near(t, "surface", p.FreeSurfaceWidth.Value, 2*math.Sqrt(h*(1-h)), 1e-14)
		near(t, "area of an ellipse", filled(t, section.Ellipse{Width: 3, Height: 1}, h).FlowArea, 3*area, 1e-13)
	}
}

// A nearly full circle is the full one less a nearly empty one, its surface the same.
func TestNearlyFullKeepsItsDigits(t *testing.T) {
	for _, gap := range []float64{0x1p-26, 0x1p-20, 0x1p-14, 0x1p-8, 0x1p-4} {
		exactArea, exactArc := exactSegment(gap)
		empty, _ := exactArea.Float64()
		arc, _ := exactArc.Float64()
		p := filled(t, section.Circle{Diameter: 1}, 1-gap)
		near(t, "area", p.FlowArea, math.Pi/4-empty, 1e-15)
		near(t, "arc", p.WettedPerimeter, math.Pi-arc, 1e-15)
		near(t, "surface", p.FreeSurfaceWidth.Value, 2*math.Sqrt(gap*(1-gap)), 1e-14)
	}
}

// At its full depth a section without width there is full; one with a level top
// stands at the brim, its top dry.
func TestFullDepth(t *testing.T) {
	for _, s := range []struct {
		shape  section.Shape
		height float64
	}{{section.Circle{Diameter: 0.3}, 0.3}, {section.Ellipse{Width: 0.8, Height: 0.5}, 0.5}, {section.Triangle{Base: 1, Height: 0.7, ApexOffset: 0.3}, 0.7}} {
		p, q := filled(t, s.shape, s.height), full(t, s.shape)
		if p.FlowArea != q.FlowArea || p.WettedPerimeter != q.WettedPerimeter || p.FreeSurface {
			t.Errorf("%+v at its full depth: %+v, full %+v", s.shape, p, q)
		}
	}
	brim := filled(t, section.Rectangle{Width: 0.8, Height: 0.5}, 0.5)
	if !brim.FreeSurface || brim.FreeSurfaceWidth.Value != 0.8 || math.Abs(brim.WettedPerimeter-1.8) > 1e-15 {
		t.Errorf("%+v", brim)
	}
}
