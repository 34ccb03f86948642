package section_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/section"
)

func TestImpossibleSectionsAreRefused(t *testing.T) {
	box := [][2]float64{{0, 0}, {1, 0}, {1, 1}, {0, 1}}
	nan, inf := math.NaN(), math.Inf(1)
	for name, c := range map[string]struct {
		section  section.Section
		quantity string
		says     string
	}{
		"no shape":                       {section.Section{}, "shape", "needs a shape"},
		"a negative circle":              {section.Section{Shape: section.Circle{Diameter: -1}}, "diameter", ""},
		"a circle of nothing":            {section.Section{Shape: section.Circle{}}, "diameter", ""},
		"a circle that is no number":     {section.Section{Shape: section.Circle{Diameter: nan}}, "diameter", ""},
		"an endless circle":              {section.Section{Shape: section.Circle{Diameter: inf}}, "diameter", ""},
		"a flat rectangle":               {section.Section{Shape: section.Rectangle{Width: 1}}, "height", ""},
		"a narrow rectangle":             {section.Section{Shape: section.Rectangle{Height: 1}}, "width", ""},
		"corners that meet":              {section.Section{Shape: section.Rectangle{Width: 1, Height: 0.5, CornerRadius: 0.26}}, "corner_radius", "at most half of the shorter side, here 0.25 m"},
		"a corner turned in":             {section.Section{Shape: section.Rectangle{Width: 1, Height: 0.5, CornerRadius: -0.1}}, "corner_radius", ""},
		"an ellipse of nothing":          {section.Section{Shape: section.Ellipse{Width: 1}}, "height", ""},
		"a flat oval of nothing":         {section.Section{Shape: section.FlatOval{Width: 1}}, "height", ""},
		"a core that fills":              {section.Section{Shape: section.Annulus{OuterDiameter: 1, InnerDiameter: 1}}, "inner_diameter", "below the outer one, which is 1 m"},
		"a core that is larger":          {section.Section{Shape: section.Annulus{OuterDiameter: 1, InnerDiameter: 2}}, "inner_diameter", "below the outer one"},
		"a triangle without height":      {section.Section{Shape: section.Triangle{Base: 1}}, "height", ""},
		"an apex that is no number":      {section.Section{Shape: section.Triangle{Base: 1, Height: 1, ApexOffset: nan}}, "apex_offset", ""},
		"two sides":                      {section.Section{Shape: section.RegularPolygon{Sides: 2, SideLength: 1}}, "sides", ""},
		"five and a half sides":          {section.Section{Shape: section.RegularPolygon{Sides: 5.5, SideLength: 1}}, "sides", ""},
		"sides of nothing":               {section.Section{Shape: section.RegularPolygon{Sides: 5}}, "side_length", ""},
		"a sector of no angle":           {section.Section{Shape: section.Sector{Radius: 1}}, "angle", ""},
		"a sector beyond the circle":     {section.Section{Shape: section.Sector{Radius: 1, Angle: 6.3}}, "angle", ""},
		"a V without banks":              {section.Section{Shape: section.Trapezoid{Height: 1}}, "bottom_width", "spread outwards"},
		"banks that meet below":          {section.Section{Shape: section.Trapezoid{BottomWidth: 1, Height: 1, BankLeft: -1, BankRight: -1}}, "bank_left", "meet at 0.5 m"},
		"an open trapezoid, full":        {section.Section{Shape: section.Trapezoid{BottomWidth: 1, BankLeft: 1, BankRight: 1}}, "height", "needs a liquid_depth"},
		"plates that touch":              {section.Section{Shape: section.ParallelPlates{Width: 1}}, "gap", ""},
		"a pipe that is all wall":        {section.Section{Shape: section.Pipe{OutsideDiameter: 0.1, WallThickness: 0.05}}, "wall_thickness", "leave no bore"},
		"a lining that fills":            {section.Section{Shape: section.Pipe{OutsideDiameter: 0.1, WallThickness: 0.01, LiningThickness: 0.04}}, "lining_thickness", "leave no bore"},
		"two vertices":                   {section.Section{Shape: section.Polygon{Vertices: box[:2]}}, "vertices", "3 to 10000"},
		"too many vertices":              {section.Section{Shape: section.Polygon{Vertices: make([][2]float64, 10001)}}, "vertices", "here 10001"},
		"a vertex twice":                 {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 0}, {1, 0}, {0, 1}}}}, "vertices", "1 and 2 coincide"},
		"a vertex far away":              {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {1e7, 0}, {0, 1}}}}, "vertices", ""},
		"an outline that crosses itself": {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 1}, {1, 0}, {0, 1}}}}, "vertices", "cross or touch"},
		"an outline that touches itself": {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {2, 0}, {2, 2}, {1, 0}, {0, 2}}}}, "vertices", "cross or touch"},
		"an outline that folds back":     {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {2, 0}, {1, 0}, {1, 1}}}}, "vertices", "cross or touch"},
		"points on one line":             {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 1}, {2, 2}}}}, "vertices", "cross or touch"},
		"a sliver":                       {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 1}, {1, 1 + 1e-9}}}}, "vertices", "sliver"},
		"an edge that is not there":      {section.Section{Shape: section.Polygon{Vertices: box, DryEdges: []int{4}}}, "dry_edges", "from 0 to 3"},
		"an edge named twice":            {section.Section{Shape: section.Polygon{Vertices: box, DryEdges: []int{1, 1}}}, "dry_edges", "once"},
		"every edge dry":                 {section.Section{Shape: section.Polygon{Vertices: box, DryEdges: []int{0, 1, 2, 3}}}, "dry_edges", "at least one edge"},
		"every edge in the liquid dry":   {section.Section{Shape: section.Polygon{Vertices: box, DryEdges: []int{0, 1, 3}}, LiquidDepth: calc.Some(0.5)}, "dry_edges", "at least one edge"},
		"a depth above the crown":        {section.Section{Shape: section.Circle{Diameter: 1}, LiquidDepth: calc.Some(1.001)}, "liquid_depth", "which is 1 m high"},
		"a depth of nothing":             {section.Section{Shape: section.Circle{Diameter: 1}, LiquidDepth: calc.Some(0)}, "liquid_depth", ""},
		"a depth that is no number":      {section.Section{Shape: section.Ellipse{Width: 1, Height: 1}, LiquidDepth: calc.Some(nan)}, "liquid_depth", ""},
		"a depth above a polygon":        {section.Section{Shape: section.Polygon{Vertices: box}, LiquidDepth: calc.Some(1.1)}, "liquid_depth", "1 m high"},
		"a V of less than an atom":       {section.Section{Shape: section.Trapezoid{BankRight: 1e-30}, LiquidDepth: calc.Some(1e-9)}, "flow_area", "leave no flow area"},
		"banks that meet in the liquid":  {section.Section{Shape: section.Trapezoid{BottomWidth: 1, BankLeft: -1, BankRight: -1}, LiquidDepth: calc.Some(0.6)}, "bank_left", "meet at 0.5 m"},
		"a pipe without bore, part full": {section.Section{Shape: section.Pipe{OutsideDiameter: 0.1, WallThickness: 0.05}, LiquidDepth: calc.Some(0.01)}, "wall_thickness", "leave no bore"},
		"a radius too large, part full":  {section.Section{Shape: section.Rectangle{Width: 1, Height: 0.5, CornerRadius: 0.26}, LiquidDepth: calc.Some(0.1)}, "corner_radius", "at most half"},
		"a crossing outline, part full":  {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 1}, {1, 0}, {0, 1}}}, LiquidDepth: calc.Some(0.5)}, "vertices", "cross or touch"},
		"no vertices":                    {section.Section{Shape: section.Polygon{}}, "vertices", "here 0"},
		"the last vertex is the first":   {section.Section{Shape: section.Polygon{Vertices: [][2]float64{{0, 0}, {1, 0}, {0, 1}, {0, 0}}}}, "vertices", "3 and 0 coincide"},
		"an edge before the first":       {section.Section{Shape: section.Polygon{Vertices: box, DryEdges: []int{-1}}}, "dry_edges", "from 0 to 3"},
		"a depth below nothing":          {section.Section{Shape: section.Circle{Diameter: 1}, LiquidDepth: calc.Some(-0.1)}, "liquid_depth", ""},
		"an endless depth":               {section.Section{Shape: section.Circle{Diameter: 1}, LiquidDepth: calc.Some(inf)}, "liquid_depth", ""},
		"a depth where none is offered":  {section.Section{Shape: section.FlatOval{Width: 1, Height: 0.5}, LiquidDepth: calc.Some(0.1)}, "liquid_depth", "flowing full only"},
	} {
		kind := calc.ErrDomain
		if c.says == "flowing full only" {
			kind = calc.ErrUnknown
		}
		p, err := c.section.Of()
		var e *calc.Error
		if !errors.Is(err, kind) || !errors.As(err, &e) || e.Quantity != c.quantity || !strings.Contains(e.Detail, c.says) || p != (section.Properties{}) {
			t.Errorf("%s: %v, %+v; wanted an error of %s with %q", name, err, p, c.quantity, c.says)
		}
		var into section.Properties
		into.FlowArea = 1
		if again := c.section.Into(&into); again == nil || again.Error() != err.Error() || into != (section.Properties{}) {
			t.Errorf("%s: Into %v, %+v", name, again, into)
		}
	}
}

// Only shapes that hold a liquid take a depth; for the others it is a law not known
// yet, and a depth out of its bounds is out of them first.
func TestShapesWithoutLiquidDepth(t *testing.T) {
	for _, shape := range []section.Shape{
		section.FlatOval{Width: 1, Height: 0.5}, section.Annulus{OuterDiameter: 1, InnerDiameter: 0.5}, section.RegularPolygon{Sides: 6, SideLength: 1},
		section.Sector{Radius: 1, Angle: 1}, section.ParallelPlates{Gap: 0.1, Width: 1},
	} {
		for v, kind := range map[float64]error{0.1: calc.ErrUnknown, 0: calc.ErrDomain, 2e6: calc.ErrDomain} {
			_, err := depth(shape, v).Of()
			var e *calc.Error
			if !errors.Is(err, kind) || !errors.As(err, &e) || e.Quantity != "liquid_depth" {
				t.Errorf("%T at %g: %v, wanted %v", shape, v, err, kind)
			}
		}
	}
}
