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

// FuzzPolygonOnGrid draws the corners of polygons from a grid, where area, crossings
// and what a change of start or sense leaves as it is are known in whole numbers.
func FuzzPolygonOnGrid(f *testing.F) {
	for _, corners := range [][]int8{
		{0, 0, 4, 0, 4, 3}, {0, 0, 4, 0, 4, 3, 0, 3}, {0, 0, 4, 0, 4, 2, 2, 2, 2, 4, 0, 4}, {0, 0, 4, 4, 4, 0, 0, 4}, {0, 0, 4, 0, 2, 0, 2, 2}, {0, 0, 1, 1, 2, 2},
		{0, 0, 8, 0, 8, 8, 4, 0, 0, 8}, {0, 0, 8, 0, 8, 8, 4, 1, 0, 8}, {-128, -128, 127, -128, 127, 127, -128, 127}, {-128, -128, 127, 127, 126, 127},
		{0, 0, 4, 0, 4, 0, 0, 3}, {0, 5, 2, 1, 6, 0, 2, -1, 0, -5, -2, -1, -6, 0, -2, 1},
	} {
		var bytes []byte
		for _, c := range corners {
			bytes = append(bytes, byte(c))
		}
		f.Add(bytes, uint8(3), uint8(1))
	}
	f.Fuzz(func(t *testing.T, bytes []byte, eighths, start uint8) {
		var corners []corner
		for len(bytes) >= 2 && len(corners) < 40 {
			corners = append(corners, corner{int64(int8(bytes[0])), int64(int8(bytes[1]))})
			bytes = bytes[2:]
		}
		polygon := polygonOn(corners)
		p, err := polygon.Full()
		if simple := simpleOutline(corners); simple != (err == nil) {
			t.Fatalf("%v: simple is %v, and yet %v", corners, simple, err)
		}
		if err != nil {
			return
		}
		near(t, "area", p.FlowArea, float64(twiceArea(corners))/2, 1e-13)

		n := len(corners)
		var other, flipped []corner
		for i := range n { // backwards from another start
			other = append(other, corners[(int(start)%n+n-i)%n])
			flipped = append(flipped, corner{corners[i].x, -corners[i].y})
		}
		_, height := spanOf(corners)
		h := float64(height) * float64(1+eighths%7) / 8 // exact, and so is the rest of the height
		wet, again, dry := filled(t, polygon, h), filled(t, polygonOn(other), h), filled(t, polygonOn(flipped), float64(height)-h)
		whole := p.FlowArea
		within(t, "area from another start", again.FlowArea, wet.FlowArea, 0, 1e-12*whole)
		within(t, "wall from another start", again.WettedPerimeter, wet.WettedPerimeter, 1e-13, 0)
		within(t, "surface from another start", again.FreeSurfaceWidth.Value, wet.FreeSurfaceWidth.Value, 0, 1e-11)
		within(t, "liquid and rest", wet.FlowArea+dry.FlowArea, whole, 0, 1e-12*whole+1e-10)
		// a level edge at the surface is wetted by neither
		within(t, "wall of liquid and rest", wet.WettedPerimeter+dry.WettedPerimeter+levelEdges(corners, h), p.WettedPerimeter, 1e-13, 0)
	})
}

type corner struct{ x, y int64 }

func polygonOn(corners []corner) section.Polygon {
	var p section.Polygon
	for _, c := range corners {
		p.Vertices = append(p.Vertices, [2]float64{float64(c.x), float64(c.y)})
	}
	return p
}

func twiceArea(corners []corner) int64 {
	var sum int64
	for i, a := range corners {
		b := corners[(i+1)%len(corners)]
		sum += a.x*b.y - b.x*a.y
	}
	return max(sum, -sum)
}

func spanOf(corners []corner) (bottom, height int64) {
	bottom, top := corners[0].y, corners[0].y
	for _, c := range corners {
		bottom, top = min(bottom, c.y), max(top, c.y)
	}
	return bottom, top - bottom
}

// levelEdges is the length of the level edges at a depth.
func levelEdges(corners []corner, depth float64) float64 {
	bottom, _ := spanOf(corners)
	sum := 0.0
	for i, a := range corners {
		if b := corners[(i+1)%len(corners)]; a.y == b.y && float64(a.y-bottom) == depth {
			sum += math.Abs(float64(b.x - a.x))
		}
	}
	return sum
}

// simpleOutline compares every edge with every other, in whole numbers: two edges
// a + s u and c + t v share the points where both s and t are in 0 to 1.
func simpleOutline(corners []corner) bool {
	n := len(corners)
	if n < 3 {
		return false
	}
	for i := range n {
		a, b := corners[i], corners[(i+1)%n]
		if a == b {
			return false
		}
		for j := range i {
			c, d := corners[j], corners[(j+1)%n]
			u, v, w := corner{b.x - a.x, b.y - a.y}, corner{d.x - c.x, d.y - c.y}, corner{c.x - a.x, c.y - a.y}
			joined := j+1 == i || i == n-1 && j == 0
			det := u.x*v.y - u.y*v.x
			if det != 0 {
				s, t := w.x*v.y-w.y*v.x, w.x*u.y-w.y*u.x
				if det < 0 {
					det, s, t = -det, -s, -t
				}
				if !joined && s >= 0 && s <= det && t >= 0 && t <= det {
					return false
				}
				continue
			}
			if w.x*u.y != w.y*u.x {
				continue // parallel, apart
			}
			// on one line: the stretches along it may share at most the joint
			along := func(p corner) int64 { return (p.x-a.x)*u.x + (p.y-a.y)*u.y }
			low, high := max(0, min(along(c), along(d))), min(along(b), max(along(c), along(d)))
			if low < high || low == high && !joined {
				return false
			}
		}
	}
	return true
}
