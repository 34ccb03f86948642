package document

import (
	"slices"
	"strings"

	"borewright/calc"
	"borewright/calc/section"
	"borewright/calc/units"
)

// length is a dimension of a section that must be there; optional ones say so.
func length(in calc.Input) FieldSpec {
	return FieldSpec{Input: in, Kind: units.Length, Required: true}
}

func plain(in calc.Input) FieldSpec {
	return FieldSpec{Input: in, Kind: units.Dimensionless, Required: true}
}

func (f FieldSpec) optional() FieldSpec {
	f.Required = false
	return f
}

// depth marks the shapes that can hold a free surface.
const withDepth = true

// shapes is the table of shapes. A new shape is one row here, one type in
// calc/section and one closed schema in the document.
var shapes = []ShapeSpec{
	{Name: "circle", Fields: []FieldSpec{length(calc.Diameter)}, Depth: withDepth,
		Build: func(s *Section) section.Shape { return section.Circle{Diameter: s.Dims[0].Value} }},
	{Name: "pipe", Fields: []FieldSpec{length(calc.OutsideDiameter).optional(), length(calc.WallThickness).optional(), length(calc.LiningThickness).optional()}, Depth: withDepth},
	{Name: "rectangle", Fields: []FieldSpec{length(calc.Width), length(calc.Height), length(calc.CornerRadius).optional()}, Depth: withDepth,
		Build: func(s *Section) section.Shape {
			return section.Rectangle{Width: s.Dims[0].Value, Height: s.Dims[1].Value, CornerRadius: s.Dims[2].Value}
		}},
	{Name: "flat_oval", Fields: []FieldSpec{length(calc.Width), length(calc.Height)},
		Build: func(s *Section) section.Shape {
			return section.FlatOval{Width: s.Dims[0].Value, Height: s.Dims[1].Value}
		}},
	{Name: "ellipse", Fields: []FieldSpec{length(calc.Width), length(calc.Height)}, Depth: withDepth,
		Build: func(s *Section) section.Shape {
			return section.Ellipse{Width: s.Dims[0].Value, Height: s.Dims[1].Value}
		}},
	{Name: "annulus", Fields: []FieldSpec{length(calc.OuterDiameter), length(calc.InnerDiameter)},
		Build: func(s *Section) section.Shape {
			return section.Annulus{OuterDiameter: s.Dims[0].Value, InnerDiameter: s.Dims[1].Value}
		}},
	{Name: "triangle", Fields: []FieldSpec{length(calc.Base), length(calc.Height), length(calc.ApexOffset).optional()}, Depth: withDepth,
		Build: func(s *Section) section.Shape {
			apex := s.Dims[0].Value / 2
			if s.Dims[2].Given {
				apex = s.Dims[2].Value
			}
			return section.Triangle{Base: s.Dims[0].Value, Height: s.Dims[1].Value, ApexOffset: apex}
		}},
	{Name: "regular_polygon", Fields: []FieldSpec{plain(calc.Sides), length(calc.SideLength)},
		Build: func(s *Section) section.Shape {
			return section.RegularPolygon{Sides: s.Dims[0].Value, SideLength: s.Dims[1].Value}
		}},
	{Name: "sector", Fields: []FieldSpec{length(calc.Radius), {Input: calc.Angle, Kind: units.Angle, Required: true}},
		Build: func(s *Section) section.Shape {
			return section.Sector{Radius: s.Dims[0].Value, Angle: s.Dims[1].Value}
		}},
	{Name: "trapezoid", Fields: []FieldSpec{length(calc.BottomWidth), length(calc.Height).optional(), plain(calc.BankLeft), plain(calc.BankRight)}, Depth: withDepth,
		Build: func(s *Section) section.Shape {
			return section.Trapezoid{BottomWidth: s.Dims[0].Value, Height: s.Dims[1].Value, BankLeft: s.Dims[2].Value, BankRight: s.Dims[3].Value}
		}},
	{Name: "parallel_plates", Fields: []FieldSpec{length(calc.Gap), length(calc.Width)},
		Build: func(s *Section) section.Shape {
			return section.ParallelPlates{Gap: s.Dims[0].Value, Width: s.Dims[1].Value}
		}},
	{Name: "polygon", Depth: withDepth,
		Build: func(s *Section) section.Shape {
			return section.Polygon{Vertices: s.Vertices, DryEdges: s.DryEdges}
		}},
}

// Shapes lists the shapes by name, for the tests that compare them with the document.
func Shapes() []ShapeSpec { return slices.Clone(shapes) }

// TextsOf lists the members of a shape that are no numbers.
func TextsOf(shape string) []string { return slices.Clone(texts[shape]) }

var shapeNames = func() (names []string) {
	for i := range shapes {
		names = append(names, shapes[i].Name)
	}
	return names
}()

// texts are the members of a shape that are no numbers.
var texts = map[string][]string{
	"pipe":    {"standard", "size", "schedule"},
	"polygon": {"vertices", "dry_edges"},
}

var depthField = length(calc.LiquidDepth).optional()

func (d *decoder) mainSection(at int32) {
	if d.isObject(at, "section") {
		d.sectionInto(at, &d.req.Section)
	}
}

func (d *decoder) sectionInto(at int32, s *Section) {
	s.Given = true
	shape := d.find(at, "shape")
	if shape == 0 {
		d.missing(at, "shape", "a section says its shape: one of "+strings.Join(shapeNames, ", "))
		return
	}
	i := d.choice(shape, "shape", shapeNames)
	if i < 0 {
		return
	}
	s.Spec = &shapes[i]
	d.dimensions(at, shape, s)
}

// dimensions reads the members of a section by the row of its shape.
func (d *decoder) dimensions(at, shape int32, s *Section) {
	for c := d.nodes[at].child; c != 0; c = d.nodes[c].next {
		if c == shape || d.dimension(c, s) {
			continue
		}
		switch {
		case s.Spec.Depth && d.named(c, "liquid_depth"):
			d.quantity(c, depthField, &s.LiquidDepth)
		case d.sectionText(c, s):
		default:
			d.unknownDimension(c, s)
		}
	}
	for _, f := range s.Spec.Fields {
		if f.Required && d.find(at, f.Input.String()) == 0 {
			d.missing(at, f.Input.String(), f.Input.String()+" is missing; "+takes(f))
		}
	}
	switch {
	case s.Spec.Name == "polygon" && d.find(at, "vertices") == 0:
		d.missing(at, "vertices", "vertices is missing; give [[x, y], …] in m, y up")
	case s.Spec.Name == "pipe":
		d.pipe(at, s)
	}
}

func (d *decoder) dimension(at int32, s *Section) bool {
	for i := range s.Spec.Fields {
		if f := &s.Spec.Fields[i]; d.named(at, f.Input.String()) {
			d.quantity(at, *f, &s.Dims[i])
			return true
		}
	}
	return false
}

func (d *decoder) sectionText(at int32, s *Section) bool {
	switch {
	case s.Spec.Name == "pipe" && d.named(at, "standard"):
		s.Standard = d.words(at, "standard")
	case s.Spec.Name == "pipe" && d.named(at, "size"):
		s.Size = d.words(at, "size")
	case s.Spec.Name == "pipe" && d.named(at, "schedule"):
		d.schedule(at, s)
	case s.Spec.Name == "polygon" && d.named(at, "vertices"):
		d.vertices(at, s)
	case s.Spec.Name == "polygon" && d.named(at, "dry_edges"):
		d.dryEdges(at, s)
	default:
		return false
	}
	return true
}

func (d *decoder) unknownDimension(at int32, s *Section) {
	name := d.key(at)
	if name == "liquid_depth" {
		d.structure(at, "unknown_field", article(s.Spec.Name)+" is offered flowing full only; circle, pipe, rectangle, ellipse, triangle, trapezoid and polygon take a liquid_depth")
		return
	}
	names := []string{"shape"}
	for _, f := range s.Spec.Fields {
		names = append(names, f.Input.String())
	}
	names = append(names, texts[s.Spec.Name]...)
	if s.Spec.Depth {
		names = append(names, "liquid_depth")
	}
	detail := quoted(name) + " is no dimension of " + article(s.Spec.Name)
	if offer := nearest(name, names); offer != "" {
		detail += "; did you mean " + offer + "?"
	} else {
		detail += ", which takes " + strings.Join(names, ", ")
	}
	d.structure(at, "unknown_field", detail)
}

// article puts the indefinite one before the name of a shape.
func article(name string) string {
	if strings.IndexByte("aeiou", name[0]) >= 0 {
		return "an " + name
	}
	return "a " + name
}

// schedule is a name, or a number as people write it.
func (d *decoder) schedule(at int32, s *Section) {
	if d.nodes[at].kind != numberNode {
		s.Schedule = d.words(at, "schedule")
		return
	}
	v, ok := d.float(at)
	if !ok || v < 1 || v > 1000 || v != float64(int(v)) {
		d.structure(at, "out_of_bounds", `a schedule is a name such as "STD" or a whole number such as 40`)
		return
	}
	s.Schedule = number(v)
}

// pipe holds its ways apart: by standard, size and schedule, by standard, size
// and wall, or by outside diameter and wall.
func (d *decoder) pipe(at int32, s *Section) {
	has := func(name string) bool { return d.find(at, name) != 0 }
	outside, wall := has("outside_diameter"), has("wall_thickness")
	byName := has("standard") || has("size") || has("schedule")
	const ways = "a pipe is given by standard, size and schedule, by standard, size and wall_thickness, or by outside_diameter and wall_thickness"
	switch {
	case outside && byName:
		d.violate(d.find(at, "outside_diameter"), "one_of", "the standard gives the outside diameter; "+ways)
	case outside && !wall:
		d.notThere(at, "wall_thickness", ways)
	case outside:
	case !has("standard"):
		d.notThere(at, "standard", ways)
	case !has("size"):
		d.notThere(at, "size", ways)
	case has("schedule") && wall:
		d.violate(d.find(at, "wall_thickness"), "one_of", "the schedule gives the wall; "+ways)
	case !has("schedule") && !wall:
		d.notThere(at, "schedule", ways)
	}
}

// notThere is a missing member that only the meaning of the others asks for.
func (d *decoder) notThere(parent int32, name, detail string) {
	d.violations = append(d.violations, Violation{Pointer: d.pointer(parent) + "/" + name, Code: "required", Detail: name + " is missing; " + detail})
}

var vertexField = FieldSpec{Input: calc.Vertex, Kind: units.Length}

func (d *decoder) vertices(at int32, s *Section) {
	n := &d.nodes[at]
	if n.kind != arrayNode {
		d.structure(at, "wrong_type", "here stands "+d.kindName(at)+"; vertices is an array [[x, y], …] in m, y up")
		return
	}
	if n.count < 3 || n.count > section.MaxVertices {
		d.structure(at, "wrong_length", "a polygon has 3 to 10000 vertices, here are "+number(float64(n.count)))
		return
	}
	s.Vertices = make([][2]float64, 0, n.count)
	for c := n.child; c != 0; c = d.nodes[c].next {
		s.Vertices = append(s.Vertices, d.vertex(c))
	}
}

func (d *decoder) vertex(at int32) (v [2]float64) {
	if n := &d.nodes[at]; n.kind != arrayNode || n.count != 2 {
		d.structure(at, "wrong_type", "a vertex is a pair [x, y] in m")
		return v
	}
	x := d.nodes[at].child
	for i, c := range [2]int32{x, d.nodes[x].next} {
		var n Number
		d.quantity(c, vertexField, &n)
		v[i] = n.Value
	}
	return v
}

func (d *decoder) dryEdges(at int32, s *Section) {
	n := &d.nodes[at]
	if n.kind != arrayNode {
		d.structure(at, "wrong_type", "here stands "+d.kindName(at)+"; dry_edges is an array of edge numbers, edge 0 joins vertices 0 and 1")
		return
	}
	if n.count > section.MaxVertices {
		d.structure(at, "wrong_length", "a polygon has at most 10000 edges")
		return
	}
	for c := n.child; c != 0; c = d.nodes[c].next {
		s.DryEdges = append(s.DryEdges, d.edgeNumber(c))
	}
}

func (d *decoder) edgeNumber(at int32) int {
	if d.nodes[at].kind == numberNode {
		if v, ok := d.float(at); ok && v >= 0 && v < section.MaxVertices && v == float64(int(v)) {
			return int(v)
		}
	}
	d.structure(at, "out_of_bounds", "an edge number is a whole number from 0 to 9999")
	return 0
}
