package section_test

import (
	"math"
	"testing"

	"borewright/calc/section"
)

// A quantity is given where it has a meaning and a published or exact value, and
// nowhere else.
func TestWhatIsGivenForWhichShape(t *testing.T) {
	equilateral := section.Triangle{Base: 1, Height: math.Sqrt(3) / 2, ApexOffset: 0.5}
	for _, c := range []struct {
		name                          string
		section                       section.Section
		laminar, equalFriction, round bool
	}{
		{"circle", flowsFull(section.Circle{Diameter: 1}), true, false, true},
		{"circle partly full", depth(section.Circle{Diameter: 1}, 0.5), false, false, false},
		{"circle filled to its crown", depth(section.Circle{Diameter: 1}, 1), true, false, true},
		{"pipe", flowsFull(section.Pipe{OutsideDiameter: 1, WallThickness: 0.1}), true, false, true},
		{"rectangle", flowsFull(section.Rectangle{Width: 1, Height: 0.5}), true, true, false},
		{"rectangle at the brim", depth(section.Rectangle{Width: 1, Height: 0.5}, 0.5), false, false, false},
		{"rounded rectangle", flowsFull(section.Rectangle{Width: 1, Height: 0.5, CornerRadius: 0.1}), false, false, false},
		{"rectangle that is all corners", flowsFull(section.Rectangle{Width: 1, Height: 1, CornerRadius: 0.5}), true, false, true},
		{"flat oval", flowsFull(section.FlatOval{Width: 1, Height: 0.5}), false, true, false},
		{"ellipse", flowsFull(section.Ellipse{Width: 1, Height: 0.5}), true, false, false},
		{"ellipse partly full", depth(section.Ellipse{Width: 1, Height: 0.5}, 0.2), false, false, false},
		{"annulus", flowsFull(section.Annulus{OuterDiameter: 1, InnerDiameter: 0.5}), true, false, false},
		{"triangle", flowsFull(section.Triangle{Base: 1, Height: 1}), false, false, false},
		{"equilateral triangle", flowsFull(equilateral), true, false, false},
		{"isosceles triangle with one side as long as the base", flowsFull(section.Triangle{Base: 1, Height: 1, ApexOffset: 0}), false, false, false},
		{"equilateral triangle partly full", depth(equilateral, 0.5), false, false, false},
		{"three sides", flowsFull(section.RegularPolygon{Sides: 3, SideLength: 1}), true, false, false},
		{"four sides", flowsFull(section.RegularPolygon{Sides: 4, SideLength: 1}), true, true, false},
		{"five sides", flowsFull(section.RegularPolygon{Sides: 5, SideLength: 1}), false, false, false},
		{"sector", flowsFull(section.Sector{Radius: 1, Angle: 1}), false, false, false},
		{"trapezoid", flowsFull(section.Trapezoid{BottomWidth: 1, Height: 1, BankLeft: 1}), false, false, false},
		{"upright trapezoid", flowsFull(section.Trapezoid{BottomWidth: 1, Height: 0.5}), true, true, false},
		{"leaning trapezoid", flowsFull(section.Trapezoid{BottomWidth: 1, Height: 0.5, BankLeft: 1, BankRight: -1}), false, false, false},
		{"parallel plates", flowsFull(section.ParallelPlates{Gap: 0.1, Width: 1}), true, false, false},
		{"polygon", flowsFull(section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 0}, {1, 1}, {0, 1}}}), false, false, false},
	} {
		p := of(t, c.section)
		if p.LaminarConstant.Valid != c.laminar || p.LaminarEquivalent.Valid != c.laminar || p.EqualFriction.Valid != c.equalFriction || p.Round != c.round {
			t.Errorf("%s: %+v, wanted %+v", c.name, p, c)
		}
		for what, v := range values(p) {
			if !v.Valid && v.Value != 0 || v.Valid && !(v.Value > 0) {
				t.Errorf("%s: %s %+v", c.name, what, v)
			}
		}
		if p.FreeSurfaceWidth.Valid != p.FreeSurface || p.MeanDepth.Valid != p.FreeSurface || p.CentroidDepth.Valid != p.FreeSurface {
			t.Errorf("%s: a surface of which some is missing, or the other way round: %+v", c.name, p)
		}
	}
}

// Dimensions that a caller computes carry rounding; what was meant is understood. For
// every one of many sizes: an equilateral triangle by sqrt(3)/2, banks that meet in a
// ridge by half of the bottom width over the height, a polygon that ends in a point.
func TestRoundingOfTheCallerIsForgiven(t *testing.T) {
	for i := 1; i <= 2000; i++ {
		size := float64(i) * 0.0037
		height := 0.1 + math.Mod(float64(i)*0.618, 1)
		if p := full(t, section.Triangle{Base: size, Height: size * math.Sqrt(3) / 2, ApexOffset: size / 2}); !p.LaminarConstant.Valid {
			t.Fatalf("a triangle of %v is not equilateral", size)
		}
		bank := -size / 2 / height
		ridge := section.Trapezoid{BottomWidth: size, Height: height, BankLeft: bank, BankRight: bank}
		near(t, "area under a ridge", full(t, ridge).FlowArea, size*height/2, 1e-12)
		point := section.Polygon{Vertices: [][2]float64{{-size / 3, 0.1}, {size, 0.1}, {size / 7, 0.1 + height}}}
		if p := filled(t, point, height); p.FreeSurface || p != full(t, point) {
			t.Fatalf("%+v filled to its point has a surface: %+v", point, p)
		}
	}
}

// What is meant to be another shape is not forgiven.
func TestWhatIsNotRounding(t *testing.T) {
	if p := full(t, section.Triangle{Base: 1, Height: math.Sqrt(3) / 2 * (1 + 1e-13), ApexOffset: 0.5}); p.LaminarConstant.Valid {
		t.Error("an isosceles triangle counts as equilateral")
	}
	if _, err := (section.Trapezoid{BottomWidth: 1, Height: 1, BankLeft: -0.5, BankRight: -0.5 - 1e-11}).Full(); err == nil {
		t.Error("banks that meet below the top are taken")
	}
	if p := filled(t, section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 0}, {0.5 + 1e-11, 1}, {0.5, 1}}}, 1); !p.FreeSurface {
		t.Error("a narrow top counts as a point")
	}
}
