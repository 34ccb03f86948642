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
		"a depth where none is offered":  {section.Section{Shape: section.FlatOval{Width: 1, Height: 0.5}, LiquidDepth: calc.Some(0.1)}, "liquid_depth", "flowing full only"},
	} {
		p, err := c.section.Of()
		var e *calc.Error
		if !errors.As(err, &e) || e.Quantity != c.quantity || !strings.Contains(e.Detail, c.says) || p != (section.Properties{}) {
			t.Errorf("%s: %v, %+v; wanted an error of %s with %q", name, err, p, c.quantity, c.says)
		}
		var into section.Properties
		into.FlowArea = 1
		if again := c.section.Into(&into); (again == nil) || into != (section.Properties{}) {
			t.Errorf("%s: Into %v, %+v", name, again, into)
		}
	}
}

// Each dimension is taken up to its bounds and not beyond.
func TestDimensionsEndAtTheirBounds(t *testing.T) {
	for in, shape := range map[calc.Input]func(float64) section.Shape{
		calc.Diameter:   func(v float64) section.Shape { return section.Circle{Diameter: v} },
		calc.Width:      func(v float64) section.Shape { return section.Rectangle{Width: v, Height: 1} },
		calc.Height:     func(v float64) section.Shape { return section.Rectangle{Width: 1, Height: v} },
		calc.Base:       func(v float64) section.Shape { return section.Triangle{Base: v, Height: 1} },
		calc.SideLength: func(v float64) section.Shape { return section.RegularPolygon{Sides: 6, SideLength: v} },
		calc.Radius:     func(v float64) section.Shape { return section.Sector{Radius: v, Angle: 1} },
		calc.Gap:        func(v float64) section.Shape { return section.ParallelPlates{Gap: v, Width: 1} },
	} {
		b := in.Bound()
		for _, v := range []float64{b.Min, b.Max} {
			if _, err := shape(v).Full(); err != nil {
				t.Errorf("%s of %g: %v", in, v, err)
			}
		}
		for _, v := range []float64{math.Nextafter(b.Min, math.Inf(-1)), math.Nextafter(b.Max, math.Inf(1)), math.NaN()} {
			if _, err := shape(v).Full(); !errors.Is(err, calc.ErrDomain) {
				t.Errorf("%s of %g: %v", in, v, err)
			}
		}
	}
}
