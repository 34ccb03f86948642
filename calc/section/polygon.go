package section

import (
	"math"
	"slices"
	"strconv"

	"borewright/calc"
)

// Polygon is any simple polygon, y up, in either sense of rotation. Edge i joins
// vertex i to vertex i+1, the last one to the first; dry edges are not wetted.
type Polygon struct {
	Vertices [][2]float64
	DryEdges []int
}

// MaxVertices bounds the work that one polygon can cause.
const MaxVertices = 10000

// Full returns the properties of the polygon running full.
//
// Equation:
//
//	A = |Σ (x1 y2 - x2 y1)|/2, P = Σ lengths of the edges that are not dry
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - x: horizontal coordinate [m]
//   - y: vertical coordinate [m]
//
// Validity: a simple polygon of 3 to 10000 vertices that is no sliver: its area is
// above 1e-8 of the strips under its edges, whose difference it is.
//
// Source: elementary geometry.
//
// Accuracy: 1e-14 for ordinary polygons; coordinates far from the section lose
// digits.
//
// Errors: [calc.ErrDomain] if the vertices make no simple polygon or every
// edge is dry.
func (p Polygon) Full() (Properties, error) {
	if err := p.check(); err != nil {
		return Properties{}, err
	}
	_, top := p.levels()
	l := p.pool(top)
	if l.sliver() {
		return Properties{}, sliverError()
	}
	return outline{area: l.area, perimeter: p.wettedLength()}.full()
}

// PartlyFull returns the properties of the polygon with a free surface.
//
// Equation:
//
//	A = ∮ max(L - y, 0) dx, A z = ∮ max(L - y, 0)²/2 dx, T = ∮ [y < L] dx, anticlockwise
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - T: width of the free surface [m]
//   - h: depth of the liquid above the lowest point [m]
//   - z: depth of the centroid of A below the surface [m]
//   - L: level of the surface, h above the lowest vertex [m]
//   - x: horizontal coordinate [m]
//   - y: vertical coordinate [m]
//
// Validity: 0 < h up to the highest vertex; all liquid below the level counts,
// separate pools included; a level top stands at the brim and is dry.
//
// Source: elementary geometry.
//
// Accuracy: 1e-13 for ordinary polygons.
//
// Errors: [calc.ErrDomain] if the vertices make no simple polygon, every
// wetted edge is dry or the depth is above the highest vertex.
func (p Polygon) PartlyFull(liquidDepth float64) (Properties, error) {
	if err := p.check(); err != nil {
		return Properties{}, err
	}
	bottom, top := p.levels()
	height := top - bottom
	if liquidDepth > height && liquidDepth <= height*(1+1e-14) {
		liquidDepth = height // the caller subtracted the same levels in another order
	}
	if err := checkDepth(liquidDepth, height); err != nil {
		return Properties{}, err
	}
	level := bottom + liquidDepth
	if liquidDepth == height {
		level = top
	}
	l := p.pool(level)
	l.depth, l.height = liquidDepth, height
	if l.width <= 0 || liquidDepth == height && l.width <= noWidth*height {
		return p.Full()
	}
	if l.perimeter == 0 {
		return Properties{}, allDry()
	}
	if l.sliver() {
		return Properties{}, sliverError()
	}
	return l.properties()
}

// sliver reports whether rounding of the coordinates would hide the area: it is the
// difference of strips that are far larger.
func (l *pool) sliver() bool { return l.area <= thinnest*l.strips }

const thinnest = 1e-8

func sliverError() error {
	return vertexError("this outline is a sliver, so thin that rounding of its coordinates hides its area; give a wider one")
}

// noWidth times its height is a width that the top of a polygon has by rounding alone.
const noWidth = 1e-13

func allDry() error {
	return &calc.Error{Kind: calc.ErrDomain, Quantity: "dry_edges", Detail: "at least one edge in the liquid must be wetted"}
}

func (p Polygon) edge(i int) (a, b [2]float64) {
	return p.Vertices[i], p.Vertices[(i+1)%len(p.Vertices)]
}

func (p Polygon) levels() (bottom, top float64) {
	bottom, top = math.Inf(1), math.Inf(-1)
	for _, v := range p.Vertices {
		bottom, top = min(bottom, v[1]), max(top, v[1])
	}
	return bottom, top
}

func (p Polygon) wettedLength() float64 {
	sum := 0.0
	for i := range p.Vertices {
		if !slices.Contains(p.DryEdges, i) {
			a, b := p.edge(i)
			sum += math.Hypot(b[0]-a[0], b[1]-a[1])
		}
	}
	return sum
}

// pool integrates around the part of the polygon below the level.
func (p Polygon) pool(level float64) pool {
	var l pool
	for i := range p.Vertices {
		a, b := p.edge(i)
		da, db := level-a[1], level-b[1]
		if da <= 0 && db <= 0 {
			continue
		}
		part, wa, wb := 1.0, max(da, 0), max(db, 0)
		if da < 0 || db < 0 {
			part = (wa + wb) / (math.Abs(da) + math.Abs(db)) // one of the two is 0
		}
		dx := (b[0] - a[0]) * part
		strip := (wa + wb) / 2 * dx
		l.area += strip
		l.strips += math.Abs(strip)
		l.moment += (wa*wa + wa*wb + wb*wb) / 6 * dx
		l.width += dx
		if len(p.DryEdges) == 0 || !slices.Contains(p.DryEdges, i) {
			l.perimeter += math.Hypot(b[0]-a[0], b[1]-a[1]) * part
		}
	}
	if l.area < 0 { // clockwise
		l.area, l.moment, l.width = -l.area, -l.moment, -l.width
	}
	return l
}

func (p Polygon) check() error {
	n := len(p.Vertices)
	if n < 3 || n > MaxVertices {
		return vertexError("a polygon has 3 to " + strconv.Itoa(MaxVertices) + " vertices, here " + strconv.Itoa(n))
	}
	for _, v := range p.Vertices {
		for _, c := range v {
			if err := calc.Vertex.Check(c); err != nil {
				return err
			}
		}
	}
	for i := range p.Vertices {
		if a, b := p.edge(i); a == b {
			return vertexError("vertices " + strconv.Itoa(i) + " and " + strconv.Itoa((i+1)%n) + " coincide; leave one out")
		}
	}
	if err := p.checkDryEdges(); err != nil {
		return err
	}
	return p.checkSimple()
}

func vertexError(detail string) error {
	return &calc.Error{Kind: calc.ErrDomain, Quantity: "vertices", Detail: detail}
}

func (p Polygon) checkDryEdges() error {
	n := len(p.Vertices)
	for k, e := range p.DryEdges {
		if e < 0 || e >= n || slices.Contains(p.DryEdges[:k], e) {
			return &calc.Error{Kind: calc.ErrDomain, Quantity: "dry_edges", Value: float64(e), Max: float64(n - 1),
				Detail: "each dry edge is named once, by its index from 0 to " + strconv.Itoa(n-1)}
		}
	}
	if len(p.DryEdges) >= n {
		return allDry()
	}
	return nil
}

// checkSimple refuses edges that cross or touch. Edges are swept in the order of
// their left ends, so that only those that share a stretch of x are compared.
func (p Polygon) checkSimple() error {
	n := len(p.Vertices)
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	left := func(i int) float64 { a, b := p.edge(i); return min(a[0], b[0]) }
	slices.SortFunc(order, func(i, j int) int {
		if d := left(i) - left(j); d != 0 {
			return int(math.Copysign(1, d))
		}
		return i - j
	})
	for k, i := range order {
		a, b := p.edge(i)
		right, low, high := max(a[0], b[0]), min(a[1], b[1]), max(a[1], b[1])
		for _, j := range order[k+1:] {
			c, d := p.edge(j)
			if min(c[0], d[0]) > right {
				break
			}
			if max(c[1], d[1]) < low || min(c[1], d[1]) > high {
				continue
			}
			if p.clash(i, j) {
				return vertexError("edges " + strconv.Itoa(min(i, j)) + " and " + strconv.Itoa(max(i, j)) + " cross or touch; a section is one simple outline")
			}
		}
	}
	return nil
}

// clash reports whether two edges have more in common than the vertex between them.
func (p Polygon) clash(i, j int) bool {
	n := len(p.Vertices)
	a, b := p.edge(i)
	c, d := p.edge(j)
	switch {
	case (i+1)%n == j: // c is b: they may not fold back on each other
		return folds(a, b, d)
	case (j+1)%n == i:
		return folds(c, a, b)
	}
	o1, o2 := turn(a, b, c), turn(a, b, d)
	o3, o4 := turn(c, d, a), turn(c, d, b)
	if o1*o2 < 0 && o3*o4 < 0 {
		return true
	}
	return o1 == 0 && within(a, b, c) || o2 == 0 && within(a, b, d) || o3 == 0 && within(c, d, a) || o4 == 0 && within(c, d, b)
}

// folds reports whether the way a-b-c turns back on itself.
func folds(a, b, c [2]float64) bool {
	return turn(a, b, c) == 0 && (a[0]-b[0])*(c[0]-b[0])+(a[1]-b[1])*(c[1]-b[1]) > 0
}

// turn is positive where a-b-c turns left, negative where it turns right.
func turn(a, b, c [2]float64) float64 {
	v := (b[0]-a[0])*(c[1]-a[1]) - (b[1]-a[1])*(c[0]-a[0])
	switch {
	case v > 0:
		return 1
	case v < 0:
		return -1
	}
	return 0
}

// within reports whether c, on the line through a and b, lies between them.
func within(a, b, c [2]float64) bool {
	return c[0] >= min(a[0], b[0]) && c[0] <= max(a[0], b[0]) && c[1] >= min(a[1], b[1]) && c[1] <= max(a[1], b[1])
}
