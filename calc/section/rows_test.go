package section_test

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/section"
)

type row map[string]string

func table(t testing.TB, name string) []row {
	t.Helper()
	file, err := os.Open("../../testdata/section/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	reader := csv.NewReader(file)
	reader.Comment = '#'
	all, err := reader.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []row
	for _, record := range all[1:] {
		r := row{}
		for i, column := range all[0] {
			r[column] = record[i]
		}
		rows = append(rows, r)
	}
	return rows
}

func number(t testing.TB, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// section builds the section of a reference row; dimensions in m, angles in degrees.
func (r row) section(t testing.TB) section.Section {
	t.Helper()
	texts, dims := map[string]string{}, map[string]float64{}
	for _, part := range strings.Split(r["params"], ";") {
		name, value, _ := strings.Cut(strings.TrimSpace(part), "=")
		texts[name] = value
		if v, err := strconv.ParseFloat(value, 64); err == nil {
			dims[name] = v
		}
	}
	depth := r["depth_m"]
	s := section.Section{Shape: shapeOf(t, r["shape"], dims, texts, &depth)}
	if depth != "" {
		s.LiquidDepth = calc.Some(number(t, depth))
	}
	return s
}

func shapeOf(t testing.TB, name string, d map[string]float64, texts map[string]string, depth *string) section.Shape {
	switch name {
	case "circle", "circle_partly_full":
		return section.Circle{Diameter: d["d"]}
	case "rectangle", "rounded_rectangle":
		return section.Rectangle{Width: d["w"], Height: d["h"], CornerRadius: d["r"]}
	case "rectangle_open":
		return section.Rectangle{Width: d["b"], Height: number(t, *depth)}
	case "flat_oval":
		return section.FlatOval{Width: d["w"], Height: d["h"]}
	case "ellipse":
		return section.Ellipse{Width: d["w"], Height: d["h"]}
	case "ellipse_partly_full":
		return section.Ellipse{Width: d["w"], Height: d["v"]}
	case "concentric_annulus":
		return section.Annulus{OuterDiameter: d["do"], InnerDiameter: d["di"]}
	case "isosceles_triangle":
		return section.Triangle{Base: d["base"], Height: d["h"], ApexOffset: d["base"] / 2}
	case "equilateral_triangle":
		return section.Triangle{Base: d["side"], Height: d["side"] * math.Sqrt(3) / 2, ApexOffset: d["side"] / 2}
	case "right_triangle":
		return section.Triangle{Base: d["a"], Height: d["b"]}
	case "regular_polygon":
		return section.RegularPolygon{Sides: d["n"], SideLength: d["side"]}
	case "circular_sector":
		return section.Sector{Radius: d["r"], Angle: d["angle_deg"] * math.Pi / 180}
	case "trapezoid":
		bank := (d["t"] - d["b"]) / 2 / d["h"]
		return section.Trapezoid{BottomWidth: d["b"], Height: d["h"], BankLeft: bank, BankRight: bank}
	case "trapezoid_open", "triangle_open":
		return section.Trapezoid{BottomWidth: d["b"], BankLeft: d["z1"], BankRight: d["z2"]}
	case "parallel_plates":
		return section.ParallelPlates{Gap: d["s"], Width: d["w"]}
	case "rhombus":
		return parallelogram(d["side"], d["side"], d["angle_deg"])
	case "parallelogram":
		return parallelogram(d["a"], d["b"], d["angle_deg"])
	case "polygon":
		return polygonOf(t, texts)
	}
	t.Fatalf("no shape for %s", name)
	return nil
}

func parallelogram(a, b, degrees float64) section.Polygon {
	sin, cos := math.Sincos(degrees * math.Pi / 180)
	return section.Polygon{Vertices: [][2]float64{{0, 0}, {a, 0}, {a + b*cos, b * sin}, {b * cos, b * sin}}}
}

func polygonOf(t testing.TB, texts map[string]string) section.Polygon {
	var p section.Polygon
	ys := strings.Split(texts["y"], "|")
	for i, x := range strings.Split(texts["x"], "|") {
		p.Vertices = append(p.Vertices, [2]float64{number(t, x), number(t, ys[i])})
	}
	if texts["dry_edges"] != "" {
		for _, e := range strings.Split(texts["dry_edges"], "|") {
			p.DryEdges = append(p.DryEdges, int(number(t, e)))
		}
	}
	return p
}

type worst struct {
	deviation float64
	where     string
}

func (w *worst) see(got, want float64, where string) {
	if d := math.Abs(got/want - 1); d > w.deviation || math.IsNaN(d) {
		w.deviation, w.where = d, fmt.Sprintf("%s: got %v, want %v", where, got, want)
	}
}

func (w *worst) within(t *testing.T, bound float64) {
	t.Helper()
	if !(w.deviation <= bound) {
		t.Errorf("worst deviation %.2g exceeds %.2g at %s", w.deviation, bound, w.where)
	}
}

// The bounds are ten times the worst error measured: 1.1e-15.
func TestSectionsAgainstReferenceValues(t *testing.T) {
	var full, partly worst
	for _, r := range table(t, "sections.csv") {
		where := r["shape"] + " " + r["params"] + " " + r["depth_m"]
		p, err := r.section(t).Of()
		if err != nil {
			t.Errorf("%s: %v", where, err)
			continue
		}
		w := &full
		if r["depth_m"] != "" {
			w = &partly
		}
		for column, got := range map[string]float64{
			"area_m2": p.FlowArea, "wetted_perimeter_m": p.WettedPerimeter, "hydraulic_diameter_m": p.HydraulicDiameter,
			"top_width_m": p.FreeSurfaceWidth.Value, "centroid_depth_m": p.CentroidDepth.Value,
		} {
			if r[column] == "" || column == "top_width_m" && r["depth_m"] == "" || number(t, r[column]) == 0 {
				continue
			}
			w.see(got, number(t, r[column]), where+" "+column)
		}
	}
	full.within(t, 1.2e-14)
	partly.within(t, 1.2e-14)
}

func TestLaminarConstantsAgainstReferenceValues(t *testing.T) {
	var w worst
	for _, r := range table(t, "laminar.csv") {
		p, err := r.section(t).Of()
		if err != nil || !p.LaminarConstant.Valid {
			t.Errorf("%s %s: %v, %v", r["shape"], r["params"], p.LaminarConstant, err)
			continue
		}
		w.see(p.LaminarConstant.Value, number(t, r["darcy_f_re_dh"]), r["shape"]+" "+r["params"])
	}
	w.within(t, 1.2e-14)
}

// The published tables give Fanning f·Re of rectangles by their aspect ratio.
func TestLaminarConstantsAgainstPublishedTables(t *testing.T) {
	for _, r := range table(t, "laminar_published.csv") {
		p, err := section.Rectangle{Width: 1, Height: number(t, r["parameter"])}.Full()
		want := 4 * number(t, r["published_fanning_f_re"])
		if err != nil || math.Abs(p.LaminarConstant.Value/want-1) > 2e-4 {
			t.Errorf("aspect ratio %s: %v, %v, want %v", r["parameter"], p.LaminarConstant.Value, err, want)
		}
	}
}

func TestEqualFrictionDiameters(t *testing.T) {
	var w worst
	for _, r := range table(t, "equal_friction.csv") {
		d := map[string]float64{}
		for _, part := range strings.Split(r["params"], ";") {
			name, value, _ := strings.Cut(part, "=")
			d[name] = number(t, value)
		}
		var shape section.Shape
		switch r["quantity"] {
		case "huebscher_equal_friction_diameter_m":
			shape = section.Rectangle{Width: d["a"], Height: d["b"]}
		case "heyt_diaz_flat_oval_diameter_m":
			shape = section.FlatOval{Width: max(d["w"], d["a"], d["major"]), Height: max(d["h"], d["b"], d["minor"])}
		default:
			t.Fatalf("unknown quantity %s", r["quantity"])
		}
		p, err := shape.Full()
		if err != nil {
			t.Fatalf("%v: %v", r, err)
		}
		w.see(p.EqualFriction.Value, number(t, r["value"]), r["quantity"]+" "+r["params"])
	}
	w.within(t, 1e-12)
}
