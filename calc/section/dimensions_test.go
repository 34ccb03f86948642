package section_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/section"
)

// field is one dimension of a shape: what the shape is when that dimension is v and
// the others are sound. At least and at most are the last values that make a section
// where the other dimensions end it before the stated bound does; the dimension that is
// refused just below such a least value is another one.
type field struct {
	shape           string
	input           calc.Input
	with            func(v float64) section.Section
	atLeast, atMost calc.Optional
}

func flowsFull(shape section.Shape) section.Section { return section.Section{Shape: shape} }

// fields has every dimension of every shape.
var fields = []field{
	{"circle", calc.Diameter, func(v float64) section.Section { return flowsFull(section.Circle{Diameter: v}) }, calc.Optional{}, calc.Optional{}},
	{"circle", calc.LiquidDepth, func(v float64) section.Section { return depth(section.Circle{Diameter: 0.5}, v) }, calc.Optional{}, calc.Some(0.5)},
	{"circle partly full", calc.Diameter, func(v float64) section.Section { return depth(section.Circle{Diameter: v}, 1e-9) }, calc.Optional{}, calc.Optional{}},
	{"pipe", calc.OutsideDiameter, func(v float64) section.Section { return flowsFull(section.Pipe{OutsideDiameter: v}) }, calc.Optional{}, calc.Optional{}},
	{"pipe", calc.WallThickness, func(v float64) section.Section {
		return flowsFull(section.Pipe{OutsideDiameter: 1, WallThickness: v})
	}, calc.Optional{}, calc.Some(math.Nextafter(0.5, 0))},
	{"pipe", calc.LiningThickness, func(v float64) section.Section {
		return flowsFull(section.Pipe{OutsideDiameter: 1, WallThickness: 0.25, LiningThickness: v})
	}, calc.Optional{}, calc.Some(math.Nextafter(0.25, 0))},
	{"pipe", calc.LiquidDepth, func(v float64) section.Section {
		return depth(section.Pipe{OutsideDiameter: 1, WallThickness: 0.25}, v)
	}, calc.Optional{}, calc.Some(0.5)},
	{"rectangle", calc.Width, func(v float64) section.Section { return flowsFull(section.Rectangle{Width: v, Height: 1}) }, calc.Optional{}, calc.Optional{}},
	{"rectangle", calc.Height, func(v float64) section.Section { return flowsFull(section.Rectangle{Width: 1, Height: v}) }, calc.Optional{}, calc.Optional{}},
	{"rectangle", calc.CornerRadius, func(v float64) section.Section {
		return flowsFull(section.Rectangle{Width: 1, Height: 0.5, CornerRadius: v})
	}, calc.Optional{}, calc.Some(0.25)},
	{"upright rectangle", calc.CornerRadius, func(v float64) section.Section {
		return flowsFull(section.Rectangle{Width: 0.5, Height: 1, CornerRadius: v})
	}, calc.Optional{}, calc.Some(0.25)},
	{"rectangle", calc.LiquidDepth, func(v float64) section.Section { return depth(section.Rectangle{Width: 1, Height: 0.5}, v) }, calc.Optional{}, calc.Some(0.5)},
	{"flat oval", calc.Width, func(v float64) section.Section { return flowsFull(section.FlatOval{Width: v, Height: 1}) }, calc.Optional{}, calc.Optional{}},
	{"flat oval", calc.Height, func(v float64) section.Section { return flowsFull(section.FlatOval{Width: 1, Height: v}) }, calc.Optional{}, calc.Optional{}},
	{"ellipse", calc.Width, func(v float64) section.Section { return flowsFull(section.Ellipse{Width: v, Height: 1}) }, calc.Optional{}, calc.Optional{}},
	{"ellipse", calc.Height, func(v float64) section.Section { return flowsFull(section.Ellipse{Width: 1, Height: v}) }, calc.Optional{}, calc.Optional{}},
	{"ellipse partly full", calc.Width, func(v float64) section.Section { return depth(section.Ellipse{Width: v, Height: 1}, 0.5) }, calc.Optional{}, calc.Optional{}},
	{"ellipse", calc.LiquidDepth, func(v float64) section.Section { return depth(section.Ellipse{Width: 1, Height: 0.5}, v) }, calc.Optional{}, calc.Some(0.5)},
	{"annulus", calc.OuterDiameter, func(v float64) section.Section {
		return flowsFull(section.Annulus{OuterDiameter: v, InnerDiameter: v / 2})
	}, calc.Some(2e-9), calc.Optional{}},
	{"annulus", calc.InnerDiameter, func(v float64) section.Section {
		return flowsFull(section.Annulus{OuterDiameter: 1, InnerDiameter: v})
	}, calc.Optional{}, calc.Some(math.Nextafter(1, 0))},
	{"triangle", calc.Base, func(v float64) section.Section { return flowsFull(section.Triangle{Base: v, Height: 1}) }, calc.Optional{}, calc.Optional{}},
	{"triangle", calc.Height, func(v float64) section.Section { return flowsFull(section.Triangle{Base: 1, Height: v}) }, calc.Optional{}, calc.Optional{}},
	{"triangle", calc.ApexOffset, func(v float64) section.Section {
		return flowsFull(section.Triangle{Base: 1, Height: 1, ApexOffset: v})
	}, calc.Optional{}, calc.Optional{}},
	{"triangle partly full", calc.Base, func(v float64) section.Section { return depth(section.Triangle{Base: v, Height: 1}, 0.5) }, calc.Optional{}, calc.Optional{}},
	{"triangle", calc.LiquidDepth, func(v float64) section.Section { return depth(section.Triangle{Base: 1, Height: 0.5}, v) }, calc.Optional{}, calc.Some(0.5)},
	{"regular polygon", calc.Sides, func(v float64) section.Section {
		return flowsFull(section.RegularPolygon{Sides: v, SideLength: 1})
	}, calc.Optional{}, calc.Optional{}},
	{"regular polygon", calc.SideLength, func(v float64) section.Section {
		return flowsFull(section.RegularPolygon{Sides: 6, SideLength: v})
	}, calc.Optional{}, calc.Optional{}},
	{"square", calc.SideLength, func(v float64) section.Section {
		return flowsFull(section.RegularPolygon{Sides: 4, SideLength: v})
	}, calc.Optional{}, calc.Optional{}},
	{"sector", calc.Radius, func(v float64) section.Section { return flowsFull(section.Sector{Radius: v, Angle: 1}) }, calc.Optional{}, calc.Optional{}},
	{"sector", calc.Angle, func(v float64) section.Section { return flowsFull(section.Sector{Radius: 1, Angle: v}) }, calc.Optional{}, calc.Optional{}},
	{"trapezoid", calc.BottomWidth, func(v float64) section.Section {
		return flowsFull(section.Trapezoid{BottomWidth: v, Height: 1, BankLeft: 1})
	}, calc.Optional{}, calc.Optional{}},
	{"trapezoid", calc.Height, func(v float64) section.Section {
		return flowsFull(section.Trapezoid{BottomWidth: 1, Height: v, BankLeft: 1})
	}, calc.Optional{}, calc.Optional{}},
	{"trapezoid partly full", calc.Height, func(v float64) section.Section {
		return depth(section.Trapezoid{BottomWidth: 1, Height: v, BankLeft: 1}, 1e-9)
	}, calc.Optional{}, calc.Optional{}},
	{"trapezoid", calc.BankLeft, func(v float64) section.Section {
		return flowsFull(section.Trapezoid{BottomWidth: 1, Height: 1, BankLeft: v, BankRight: -v})
	}, calc.Optional{}, calc.Optional{}},
	{"trapezoid", calc.BankRight, func(v float64) section.Section {
		return flowsFull(section.Trapezoid{BottomWidth: 1e6, Height: 1, BankRight: v})
	}, calc.Optional{}, calc.Optional{}},
	{"trapezoid", calc.LiquidDepth, func(v float64) section.Section {
		return depth(section.Trapezoid{BottomWidth: 1, Height: 0.5, BankLeft: 1}, v)
	}, calc.Optional{}, calc.Some(0.5)},
	{"open trapezoid", calc.LiquidDepth, func(v float64) section.Section { return depth(section.Trapezoid{BottomWidth: 1, BankLeft: 1}, v) }, calc.Optional{}, calc.Optional{}},
	{"parallel plates", calc.Gap, func(v float64) section.Section { return flowsFull(section.ParallelPlates{Gap: v, Width: 1}) }, calc.Optional{}, calc.Optional{}},
	{"parallel plates", calc.Width, func(v float64) section.Section { return flowsFull(section.ParallelPlates{Gap: 1, Width: v}) }, calc.Optional{}, calc.Optional{}},
	{"polygon", calc.Vertex, func(v float64) section.Section {
		return flowsFull(section.Polygon{Vertices: [][2]float64{{0, 0}, {v, -1e5}, {v, 1e5}}})
	}, calc.Optional{}, calc.Optional{}},
	{"polygon partly full", calc.Vertex, func(v float64) section.Section {
		return depth(section.Polygon{Vertices: [][2]float64{{0, 0}, {0, v}, {1e5, v}}}, 0.5)
	}, calc.Optional{}, calc.Optional{}},
	{"polygon", calc.LiquidDepth, func(v float64) section.Section {
		return depth(section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 0}, {1, 0.5}, {0, 0.5}}}, v)
	}, calc.Optional{}, calc.Some(0.5 * (1 + 1e-14))}, // rounding of the levels is forgiven
}

// Every dimension of every shape is taken up to its ends, and refused by its own name
// one number beyond and where it is no number at all.
func TestEveryDimensionEndsByItsName(t *testing.T) {
	for _, f := range fields {
		b := f.input.Bound()
		least, most := b.Min, b.Max
		below := math.Nextafter(least, math.Inf(-1))
		if f.atLeast.Valid {
			least = f.atLeast.Value
		}
		if f.atMost.Valid {
			most = f.atMost.Value
		}
		above := math.Nextafter(most, math.Inf(1))
		for _, v := range []float64{least, most} {
			if _, err := f.with(v).Of(); err != nil {
				t.Errorf("%s, %s of %g: %v", f.shape, f.input, v, err)
			}
		}
		for _, v := range []float64{below, above, -1, -math.MaxFloat64, math.MaxFloat64, math.NaN(), math.Inf(1), math.Inf(-1)} {
			if v >= least && v <= most { // -1 is an apex offset, a bank and a coordinate
				continue
			}
			p, err := f.with(v).Of()
			var e *calc.Error
			if !errors.Is(err, calc.ErrDomain) || !errors.As(err, &e) || e.Quantity != b.Name || p != (section.Properties{}) {
				t.Errorf("%s, %s of %g: %v, %+v", f.shape, f.input, v, err, p)
			}
		}
	}
}
