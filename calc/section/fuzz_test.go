package section_test

import (
	"encoding/binary"
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/section"
)

// sound fails on a result beside an error, an error that points at nothing, and on
// a property that no section has.
func sound(t *testing.T, s section.Section) {
	t.Helper()
	p, err := s.Of()
	if err != nil {
		var e *calc.Error
		if !errors.As(err, &e) || e.Quantity == "" || p != (section.Properties{}) {
			t.Fatalf("%+v: %v, %+v", s, err, p)
		}
		return
	}
	for _, v := range []float64{p.FlowArea, p.WettedPerimeter, p.HydraulicDiameter, p.HydraulicRadius, p.EqualAreaDiameter} {
		if !(v > 0) || math.IsInf(v, 0) {
			t.Fatalf("%+v: %+v", s, p)
		}
	}
	for _, o := range []calc.Optional{p.FreeSurfaceWidth, p.MeanDepth, p.CentroidDepth, p.FillRatio, p.LaminarConstant, p.LaminarEquivalent, p.EqualFriction} {
		if o.Valid && (!(o.Value >= 0) || math.IsInf(o.Value, 0)) {
			t.Fatalf("%+v: %+v", s, p)
		}
	}
}

func FuzzPolygon(f *testing.F) {
	add := func(depth float64, values ...float64) {
		var bytes []byte
		for _, v := range values {
			bytes = binary.LittleEndian.AppendUint64(bytes, math.Float64bits(v))
		}
		f.Add(bytes, depth, uint8(2))
	}
	add(0, 0, 0, 1, 0, 0, 1)
	add(0.4, 0, 0, 1, 0, 1, 1, 0, 1)
	add(0.3, 0, 0, 2, 0, 2, 1, 1, 0.5, 0, 1)
	add(0.1, 0, 0, 1, 1, 1, 0, 0, 1)
	add(0, 0, 0, 1e-9, 0, 0, 1e-9)
	add(1e6, -1e6, -1e6, 1e6, -1e6, 0, 1e6)
	f.Fuzz(func(t *testing.T, bytes []byte, depth float64, dry uint8) {
		var p section.Polygon
		for len(bytes) >= 16 && len(p.Vertices) < 200 {
			x, y := binary.LittleEndian.Uint64(bytes), binary.LittleEndian.Uint64(bytes[8:])
			p.Vertices = append(p.Vertices, [2]float64{math.Float64frombits(x), math.Float64frombits(y)})
			bytes = bytes[16:]
		}
		if dry%3 == 1 {
			p.DryEdges = []int{int(dry) / 3}
		}
		sound(t, section.Section{Shape: p})
		sound(t, section.Section{Shape: p, LiquidDepth: calc.Some(depth)})
	})
}

func FuzzDepth(f *testing.F) {
	f.Add(0.3, 0.2, 0.1, 0.5, 0.5)
	f.Add(1.0, 1.0, 1.0, 0.0, 0.0)
	f.Add(1e-9, 1e6, 1e-9, -1.0, 1.0)
	f.Add(1e6, 1e-9, 1e-9, 1e6, -1e6)
	f.Fuzz(func(t *testing.T, a, b, depth, k, m float64) {
		for _, shape := range []section.Shape{
			section.Circle{Diameter: a}, section.Ellipse{Width: a, Height: b}, section.Rectangle{Width: a, Height: b}, section.Rectangle{Width: a, Height: b, CornerRadius: k},
			section.Triangle{Base: a, Height: b, ApexOffset: k}, section.Trapezoid{BottomWidth: a, Height: b, BankLeft: k, BankRight: m},
			section.Trapezoid{BottomWidth: a, BankLeft: k, BankRight: m}, section.Pipe{OutsideDiameter: a, WallThickness: b, LiningThickness: k},
			section.Annulus{OuterDiameter: a, InnerDiameter: b}, section.FlatOval{Width: a, Height: b}, section.Sector{Radius: a, Angle: b},
			section.RegularPolygon{Sides: a, SideLength: b}, section.ParallelPlates{Gap: a, Width: b},
		} {
			sound(t, section.Section{Shape: shape})
			sound(t, section.Section{Shape: shape, LiquidDepth: calc.Some(depth)})
		}
	})
}
