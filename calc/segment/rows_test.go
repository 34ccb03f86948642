package segment_test

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/flow"
	"borewright/calc/section"
	"borewright/calc/segment"
)

type row map[string]string

func (r row) number(t *testing.T, column string) float64 {
	t.Helper()
	if r[column] == "" {
		return 0
	}
	v, err := strconv.ParseFloat(r[column], 64)
	if err != nil {
		t.Fatalf("%s: column %s: %v", r["case"], column, err)
	}
	return v
}

func referenceRows(t *testing.T) []row { return rowsOf(t, "segment/segment.csv") }

func gasRows(t *testing.T, name string) []row { return rowsOf(t, "gas/"+name) }

func rowsOf(t *testing.T, name string) []row {
	t.Helper()
	file, err := os.Open("../../testdata/" + name)
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

func (r row) section(t *testing.T) section.Shape {
	t.Helper()
	dims := map[string]float64{}
	for _, part := range strings.Split(r["params"], ";") {
		name, value, _ := strings.Cut(part, "=")
		v, err := strconv.ParseFloat(value, 64)
		if err != nil {
			t.Fatal(err)
		}
		dims[name] = v
	}
	switch r["shape"] {
	case "circle":
		return section.Circle{Diameter: dims["d"]}
	case "rectangle":
		return section.Rectangle{Width: dims["w"], Height: dims["h"]}
	case "ellipse":
		return section.Ellipse{Width: dims["w"], Height: dims["h"]}
	case "concentric_annulus":
		return section.Annulus{OuterDiameter: dims["do"], InnerDiameter: dims["di"]}
	case "equilateral_triangle":
		return section.Triangle{Base: dims["side"], Height: dims["side"] * math.Sqrt(3) / 2, ApexOffset: dims["side"] / 2}
	}
	t.Fatalf("unknown shape %s", r["shape"])
	return nil
}

func (r row) input(t *testing.T) segment.Input {
	t.Helper()
	in := segment.Input{
		Section:   section.Section{Shape: r.section(t)},
		Fluid:     given(r.number(t, "density_kg_m3"), r.number(t, "viscosity_Pa_s")),
		Flow:      flow.Rate{By: flow.ByVolume, Value: r.number(t, "volume_flow_m3_s")},
		Roughness: r.number(t, "roughness_m"), Length: r.number(t, "length_m"), Rise: calc.Some(r.number(t, "rise_m")),
		Gravity: segment.StandardGravity,
	}
	if k := r.number(t, "sum_K"); k != 0 {
		in.Fittings = []fitting.Item{{LossCoefficient: k, Count: 1}}
	}
	for column, end := range map[string]*segment.End{"inlet_area_m2": &in.Inlet, "outlet_area_m2": &in.Outlet} {
		if area := r.number(t, column); area != 0 {
			*end = segment.End{Kind: segment.OtherSection, Section: section.Section{Shape: section.Circle{Diameter: math.Sqrt(4 * area / math.Pi)}}}
		}
	}
	return in
}

type worst struct {
	deviation float64
	where     string
}

func (w *worst) see(got, want, scale float64, where string) {
	if want == 0 && got == 0 {
		return
	}
	if d := math.Abs(got-want) / scale; d > w.deviation || math.IsNaN(d) {
		w.deviation, w.where = d, fmt.Sprintf("%s: got %v, want %v", where, got, want)
	}
}

// parts are the columns that are compared value by value.
func (r row) parts(out *segment.Result) map[string]float64 {
	p := &out.Pressure
	return map[string]float64{
		"area_m2": out.Section.FlowArea, "wetted_perimeter_m": out.Section.WettedPerimeter, "hydraulic_diameter_m": out.Section.HydraulicDiameter,
		"darcy_f_re_laminar": out.Section.LaminarConstant.Value,
		"velocity_m_s":       out.Flow.Velocity, "reynolds_dh": out.Regime.Reynolds, "darcy_f": out.Friction.Darcy.Value,
		"friction_dp_Pa": p.FrictionDrop, "minor_dp_Pa": p.FittingsDrop, "static_dp_Pa": p.ElevationDrop.Value,
		"wall_shear_Pa": out.Friction.WallShear, "friction_gradient_Pa_m": p.FrictionGradient, "total_head_loss_m": p.HeadLoss,
	}
}

// totals compares the columns in which parts may cancel: relative to the sum of
// the magnitudes.
func (r row) totals(t *testing.T, out *segment.Result, w *worst) {
	t.Helper()
	p, q, sum := &out.Pressure, r.number(t, "volume_flow_m3_s"), 0.0
	for _, column := range []string{"friction_dp_Pa", "minor_dp_Pa", "static_dp_Pa", "acceleration_dp_Pa"} {
		sum += math.Abs(r.number(t, column))
	}
	power := (r.number(t, "friction_dp_Pa") + r.number(t, "minor_dp_Pa") + r.number(t, "static_dp_Pa")) * q
	w.see(p.AccelerationDrop.Value, r.number(t, "acceleration_dp_Pa"), sum, r["case"]+" acceleration")
	w.see(p.StaticPressureDrop.Value, r.number(t, "total_dp_Pa"), sum, r["case"]+" static drop")
	w.see(p.FluidPower.Value, power, sum*q, r["case"]+" power")
}

// The bounds are some eight times the worst deviation measured; 2e-12 and 1e-11 are
// asked for.
func TestSegmentsAgainstReferenceValues(t *testing.T) {
	var parts, totals worst
	rows := referenceRows(t)
	for _, r := range rows {
		out := solve(t, r.input(t))
		if got := out.Regime.Name.String(); got != r["regime"] {
			t.Errorf("%s: the regime is %s, want %s", r["case"], got, r["regime"])
		}
		for column, got := range r.parts(&out) {
			want := r.number(t, column)
			parts.see(got, want, math.Abs(want), r["case"]+" "+column)
		}
		r.totals(t, &out, &totals)
	}
	t.Logf("%d rows, worst part %.2g %s; worst total %.2g %s", len(rows), parts.deviation, parts.where, totals.deviation, totals.where)
	if !(parts.deviation <= 1e-14) {
		t.Errorf("worst part deviates by %.2g: %s", parts.deviation, parts.where)
	}
	if !(totals.deviation <= 1e-14) {
		t.Errorf("worst total deviates by %.2g of the sum: %s", totals.deviation, totals.where)
	}
	if len(rows) < 160 {
		t.Errorf("only %d rows were read", len(rows))
	}
}
