package section_test

import (
	"fmt"
	"math"

	"borewright/calc"
	"borewright/calc/section"
)

func show(p section.Properties, err error) {
	fmt.Printf("area %.4f, wetted %.4f, hydraulic diameter %.4f, %v\n", p.FlowArea, p.WettedPerimeter, p.HydraulicDiameter, err)
}

// By hand: π/4 · 0.2² = 0.0314, π · 0.2 = 0.6283.
func ExampleCircle() {
	show(section.Circle{Diameter: 0.2}.Full())
	// Output: area 0.0314, wetted 0.6283, hydraulic diameter 0.2000, <nil>
}

// By hand: half of a circle has half of its area and half of its perimeter, its
// centroid 2 D/(3π) below the surface, 0.0424.
func ExampleCircle_PartlyFull() {
	p, err := section.Circle{Diameter: 0.2}.PartlyFull(0.1)
	show(p, err)
	fmt.Printf("surface %.4f, mean depth %.4f, centroid %.4f below it\n", p.FreeSurfaceWidth.Value, p.MeanDepth.Value, p.CentroidDepth.Value)
	// Output:
	// area 0.0157, wetted 0.3142, hydraulic diameter 0.2000, <nil>
	// surface 0.2000, mean depth 0.0785, centroid 0.0424 below it
}

// By hand: the bore is 0.22 - 2 · 0.006 - 2 · 0.004 = 0.2.
func ExamplePipe() {
	show(section.Pipe{OutsideDiameter: 0.22, WallThickness: 0.006, LiningThickness: 0.004}.Full())
	// Output: area 0.0314, wetted 0.6283, hydraulic diameter 0.2000, <nil>
}

// By hand: 4 · 0.12/1.4. Rounded by 0.1, four corners of (1 - π/4) r² are missing,
// 0.12 - 0.0086, and the perimeter is shorter by (8 - 2π) r = 0.1717.
func ExampleRectangle() {
	show(section.Rectangle{Width: 0.4, Height: 0.3}.Full())
	show(section.Rectangle{Width: 0.4, Height: 0.3, CornerRadius: 0.1}.Full())
	// Output:
	// area 0.1200, wetted 1.4000, hydraulic diameter 0.3429, <nil>
	// area 0.1114, wetted 1.2283, hydraulic diameter 0.3628, <nil>
}

// By hand: a culvert at the brim wets three sides, 0.4 + 2 · 0.3.
func ExampleRectangle_PartlyFull() {
	show(section.Rectangle{Width: 0.4, Height: 0.3}.PartlyFull(0.3))
	// Output: area 0.1200, wetted 1.0000, hydraulic diameter 0.4800, <nil>
}

// By hand: two half circles, π/4 · 0.2² = 0.0314 and π · 0.2 = 0.6283, and 0.3 of
// straight duct between them, 0.06 and 0.6.
func ExampleFlatOval() {
	show(section.FlatOval{Width: 0.5, Height: 0.2}.Full())
	// Output: area 0.0914, wetted 1.2283, hydraulic diameter 0.2977, <nil>
}

// By hand: π · 0.2 · 0.1 = 0.0628; Ramanujan's second formula with h = 1/9 gives
// π · 0.3 · (1 + (1/3)/(10 + sqrt(11/3))) = 0.9688.
func ExampleEllipse() {
	show(section.Ellipse{Width: 0.4, Height: 0.2}.Full())
	// Output: area 0.0628, wetted 0.9688, hydraulic diameter 0.2594, <nil>
}

// By hand: π/4 · (0.01 - 0.0036) = 0.0050, π · 0.16 = 0.5027, 0.1 - 0.06.
func ExampleAnnulus() {
	show(section.Annulus{OuterDiameter: 0.1, InnerDiameter: 0.06}.Full())
	// Output: area 0.0050, wetted 0.5027, hydraulic diameter 0.0400, <nil>
}

// By hand: a right triangle of sides 3, 4 and 5 has an inscribed circle of diameter 2.
func ExampleTriangle() {
	show(section.Triangle{Base: 3, Height: 4}.Full())
	// Output: area 6.0000, wetted 12.0000, hydraulic diameter 2.0000, <nil>
}

// By hand: six equilateral triangles, 6 · sqrt(3)/4 = 2.5981, and two apothems, sqrt(3).
func ExampleRegularPolygon() {
	show(section.RegularPolygon{Sides: 6, SideLength: 1}.Full())
	// Output: area 2.5981, wetted 6.0000, hydraulic diameter 1.7321, <nil>
}

// By hand: a quarter of a circle, π/4, with two radii and a quarter of 2π.
func ExampleSector() {
	show(section.Sector{Radius: 1, Angle: math.Pi / 2}.Full())
	// Output: area 0.7854, wetted 3.5708, hydraulic diameter 0.8798, <nil>
}

// By hand: banks of 3 in 4 are 5 long for 4 of depth; bottom 2, surface 8: area
// 4 · (2 + 8)/2, wetted 2 + 5 + 5.
func ExampleTrapezoid_PartlyFull() {
	p, err := section.Trapezoid{BottomWidth: 2, BankLeft: 0.75, BankRight: 0.75}.PartlyFull(4)
	show(p, err)
	fmt.Printf("surface %.4f, mean depth %.4f\n", p.FreeSurfaceWidth.Value, p.MeanDepth.Value)
	// Output:
	// area 20.0000, wetted 12.0000, hydraulic diameter 6.6667, <nil>
	// surface 8.0000, mean depth 2.5000
}

// By hand: the same banks with a lid of 8.
func ExampleTrapezoid() {
	show(section.Trapezoid{BottomWidth: 2, Height: 4, BankLeft: 0.75, BankRight: 0.75}.Full())
	// Output: area 20.0000, wetted 20.0000, hydraulic diameter 4.0000, <nil>
}

// By hand: both faces wetted, 2 · 0.5, and twice the gap.
func ExampleParallelPlates() {
	show(section.ParallelPlates{Gap: 0.01, Width: 0.5}.Full())
	// Output: area 0.0050, wetted 1.0000, hydraulic diameter 0.0200, <nil>
}

// By hand: an L of three unit squares; edge 1, the upright end of the foot, is dry.
func ExamplePolygon() {
	l := section.Polygon{Vertices: [][2]float64{{0, 0}, {2, 0}, {2, 1}, {1, 1}, {1, 2}, {0, 2}}}
	show(l.Full())
	l.DryEdges = []int{1}
	show(l.Full())
	show(l.PartlyFull(1))
	// Output:
	// area 3.0000, wetted 8.0000, hydraulic diameter 1.5000, <nil>
	// area 3.0000, wetted 7.0000, hydraulic diameter 1.7143, <nil>
	// area 2.0000, wetted 3.0000, hydraulic diameter 2.6667, <nil>
}

// By hand: a quarter of the depth is a half angle of π/3, area 0.01 (π/3 - sqrt(3)/4),
// wetted 0.2 π/3. A depth above the crown is refused.
func ExampleSection_Of() {
	show(section.Section{Shape: section.Circle{Diameter: 0.2}, LiquidDepth: calc.Some(0.05)}.Of())
	_, err := section.Section{Shape: section.Circle{Diameter: 0.2}, LiquidDepth: calc.Some(0.25)}.Of()
	fmt.Println(err)
	// Output:
	// area 0.0061, wetted 0.2094, hydraulic diameter 0.1173, <nil>
	// liquid_depth 0.25: outside the domain: the liquid stands above the section, which is 0.2 m high inside; leave liquid_depth out if it runs full
}

// By hand: 1.30 (0.4 · 0.4)^0.625/0.8^0.25 = 1.30 · 0.3181/0.9457.
func ExampleHuebscherDiameter() {
	fmt.Printf("%.4f\n", section.HuebscherDiameter(section.Rectangle{Width: 0.4, Height: 0.4}))
	// Output: 0.4373
}
