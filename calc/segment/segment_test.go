package segment_test

import (
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/section"
	"borewright/calc/segment"

	"pgregory.net/rapid"
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

func referenceRows(t *testing.T) []row {
	t.Helper()
	file, err := os.Open("../../testdata/segment/segment.csv")
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

func given(density, viscosity float64) fluid.Properties {
	p, err := fluid.Given(fluid.GivenInput{Density: density, DynamicViscosity: calc.Some(viscosity)})
	if err != nil {
		panic(err)
	}
	return p
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

func TestSegmentsAgainstReferenceValues(t *testing.T) {
	var parts, totals worst
	for _, r := range referenceRows(t) {
		in := r.input(t)
		var out segment.Result
		if err := segment.PressureDrop(&in, &out); err != nil {
			t.Errorf("%s: %v", r["case"], err)
			continue
		}
		p := &out.Pressure
		sum := 0.0
		for _, column := range []string{"friction_dp_Pa", "minor_dp_Pa", "static_dp_Pa", "acceleration_dp_Pa"} {
			sum += math.Abs(r.number(t, column))
		}
		for column, got := range map[string]float64{
			"velocity_m_s": out.Flow.Velocity, "reynolds_dh": out.Regime.Reynolds, "darcy_f": out.Friction.Darcy.Value,
			"friction_dp_Pa": p.FrictionDrop, "minor_dp_Pa": p.FittingsDrop, "static_dp_Pa": p.ElevationDrop.Value,
			"wall_shear_Pa": out.Friction.WallShear, "friction_gradient_Pa_m": p.FrictionGradient, "total_head_loss_m": p.HeadLoss,
		} {
			want := r.number(t, column)
			parts.see(got, want, math.Abs(want), r["case"]+" "+column)
		}
		totals.see(p.AccelerationDrop.Value, r.number(t, "acceleration_dp_Pa"), sum, r["case"]+" acceleration")
		totals.see(p.StaticPressureDrop.Value, r.number(t, "total_dp_Pa"), sum, r["case"]+" static drop")
		power := (r.number(t, "friction_dp_Pa") + r.number(t, "minor_dp_Pa") + r.number(t, "static_dp_Pa")) * r.number(t, "volume_flow_m3_s")
		totals.see(p.FluidPower.Value, power, sum*r.number(t, "volume_flow_m3_s"), r["case"]+" power")
	}
	if !(parts.deviation <= 1e-13) {
		t.Errorf("worst part deviates by %.2g: %s", parts.deviation, parts.where)
	}
	if !(totals.deviation <= 1e-13) {
		t.Errorf("worst total deviates by %.2g of the sum: %s", totals.deviation, totals.where)
	}
}

func waterLine() segment.Input {
	return segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.1}}, Fluid: given(1000, 1e-3),
		Flow: flow.Rate{By: flow.ByVolume, Value: 0.01}, Roughness: 4.5e-5, Length: 100, Rise: calc.Some(3), Gravity: segment.StandardGravity,
		Fittings: []fitting.Item{{LossCoefficient: 0.4, Count: 3}, {ByRating: true, RatedDrop: 2e4, RatedFlow: 0.02, Exponent: 2, Count: 1}},
	}
}

func solve(t testing.TB, in segment.Input) segment.Result {
	t.Helper()
	var out segment.Result
	if err := segment.PressureDrop(&in, &out); err != nil {
		t.Fatal(err)
	}
	return out
}

func TestRatedComponentScalesWithTheSquareOfFlow(t *testing.T) {
	out := solve(t, waterLine())
	if out.Pressure.ComponentDrop != 5000 { // half the rated flow, a quarter of the drop
		t.Errorf("component takes %v Pa, want 5000 Pa", out.Pressure.ComponentDrop)
	}
}

// Two lines of half the length, without the rest, add up to the whole.
func TestHalvesAddUp(t *testing.T) {
	in := waterLine()
	in.Fittings = nil
	whole := solve(t, in)
	in.Length, in.Rise = 50, calc.Some(1.5)
	half := solve(t, in)
	if d := math.Abs(2*half.Pressure.StaticPressureDrop.Value/whole.Pressure.StaticPressureDrop.Value - 1); d > 1e-14 {
		t.Errorf("two halves differ from the whole by %v", d)
	}
}

func TestPressureKnownAtEitherEnd(t *testing.T) {
	in := waterLine()
	in.InletPressure = calc.Some(5e5)
	first := solve(t, in)
	in.InletPressure, in.OutletPressure = calc.Optional{}, first.Pressure.OutletPressure
	second := solve(t, in)
	if math.Abs(second.Pressure.InletPressure.Value-5e5) > 1e-9*5e5 {
		t.Errorf("inlet comes back as %v Pa", second.Pressure.InletPressure.Value)
	}
	if first.Pressure.LowestPressure != first.Pressure.OutletPressure {
		t.Errorf("on a rising line the lowest pressure is the outlet's: %+v", first.Pressure)
	}
}

// Downhill the fittings may stand at the top, where the pressure is lowest.
func TestLowestPressureTakesTheSafeSide(t *testing.T) {
	in := waterLine()
	in.Rise, in.InletPressure = calc.Some(-30), calc.Some(2e5)
	p := solve(t, in).Pressure
	if want := 2e5 - p.FittingsDrop; p.LowestPressure.Value != want {
		t.Errorf("lowest %v, want %v behind the fittings", p.LowestPressure.Value, want)
	}
}

func TestVapourPressureAndVacuumAreConditions(t *testing.T) {
	in := waterLine()
	in.Fluid.VapourPressure = calc.Some(2339)
	in.InletPressure = calc.Some(5e5)
	if c := solve(t, in).Conditions; c.BelowVapour || c.NotPositive {
		t.Errorf("a healthy line is flagged: %+v", c)
	}
	drop := solve(t, in).Pressure.StaticPressureDrop.Value
	in.InletPressure = calc.Some(drop + 2000)
	if c := solve(t, in).Conditions; !c.BelowVapour || c.NotPositive {
		t.Errorf("2000 Pa at the outlet is below the vapour pressure: %+v", c)
	}
	in.InletPressure = calc.Some(drop - 1)
	if c := solve(t, in).Conditions; !c.BelowVapour || !c.NotPositive {
		t.Errorf("a negative absolute pressure must be flagged: %+v", c)
	}
}

func TestUncertainRegimeGivesBothBranches(t *testing.T) {
	in := waterLine()
	in.Flow = flow.Rate{By: flow.ByVelocity, Value: 3000 * 1e-6 / 0.1}
	out := solve(t, in)
	p := out.Pressure
	if !out.Conditions.RegimeUncertain || p.FrictionDrop != p.FrictionDropIfTurbulent.Value || !(p.FrictionDrop > p.FrictionDropIfLaminar.Value) {
		t.Errorf("the plain drop is not the larger one: %+v", p)
	}
	if p.StaticPressureDrop != p.StaticPressureDropIfTurbulent || p.StaticPressureDrop.Value <= p.StaticPressureDropIfLaminar.Value {
		t.Errorf("static drops: %+v", p)
	}
	if want := 64.0 / 3000; math.Abs(out.Friction.IfLaminar.Value/want-1) > 1e-14 {
		t.Errorf("laminar branch %v, want %v", out.Friction.IfLaminar.Value, want)
	}
}

func TestAtRestOnlyTheLevelCounts(t *testing.T) {
	in := waterLine()
	in.Flow.Value = 0
	out := solve(t, in)
	p := out.Pressure
	want := 29419.95 // 1000 · 9.80665 · 3
	if p.FrictionDrop != 0 || p.FittingsDrop != 0 || math.Abs(p.StaticPressureDrop.Value-want) > 1e-11 || p.FluidPower.Value != 0 || out.Friction.Darcy.Valid || !out.Conditions.AtRest {
		t.Errorf("at rest: %+v %+v", p, out.Conditions)
	}
}

func TestEndsChangeTheVelocity(t *testing.T) {
	in := waterLine()
	in.Inlet.Kind, in.Outlet.Kind = segment.Reservoir, segment.FreeDischarge
	p := solve(t, in).Pressure
	v := solve(t, in).Flow.Velocity
	if p.InletVelocity != 0 || p.OutletVelocity != v || math.Abs(p.AccelerationDrop.Value/(500*v*v)-1) > 1e-15 {
		t.Errorf("from a reservoir to a jet: %+v", p)
	}
	in.Fittings = nil
	if !solve(t, in).Conditions.EndLossMissing {
		t.Error("a reservoir without any loss coefficient is not flagged")
	}
}

func TestFreeSurfaceGivesASlope(t *testing.T) {
	in := waterLine()
	in.Section.LiquidDepth = calc.Some(0.04)
	in.Flow.Value = 0.002
	in.Rise = calc.Some(-0.5)
	out := solve(t, in)
	p := out.Pressure
	if p.StaticPressureDrop.Valid || p.ElevationDrop.Valid || p.AccelerationDrop.Valid || p.FluidPower.Valid || !out.Conditions.DepthGiven {
		t.Errorf("a free surface has no static drop: %+v", p)
	}
	if want := p.FrictionDrop / (1000 * segment.StandardGravity * 100); math.Abs(p.FrictionSlope.Value/want-1) > 1e-15 || p.BedSlope.Value != 0.005 {
		t.Errorf("slopes %+v, want friction slope %v and bed slope 0.005", p, want)
	}
}

func TestDevelopingFlowIsACondition(t *testing.T) {
	in := waterLine()
	if solve(t, in).Conditions.Developing {
		t.Error("100 m of DN 100 are developed")
	}
	in.Length = 1
	if !solve(t, in).Conditions.Developing {
		t.Error("1 m of DN 100 is still developing")
	}
}

func TestGasTakenAsIncompressible(t *testing.T) {
	in := waterLine()
	in.Fluid, in.Flow.Value, in.Fittings = given(1.2, 1.8e-5), 0.1, nil
	if !solve(t, in).Conditions.GasIncompressible {
		t.Error("a gas by its density is not flagged")
	}
	in.InletPressure = calc.Some(1000)
	var out segment.Result
	if err := segment.PressureDrop(&in, &out); !errors.Is(err, calc.ErrRange) {
		t.Errorf("a gas that loses %v of 1000 Pa: %v", out.Pressure.StaticPressureDrop.Value, err)
	}
}

func TestRefusalsPointAtTheirField(t *testing.T) {
	for name, c := range map[string]struct {
		change   func(*segment.Input)
		quantity string
		kind     error
	}{
		"length zero":           {func(in *segment.Input) { in.Length = 0 }, "length", calc.ErrDomain},
		"length no number":      {func(in *segment.Input) { in.Length = math.NaN() }, "length", calc.ErrDomain},
		"roughness negative":    {func(in *segment.Input) { in.Roughness = -1e-9 }, "roughness", calc.ErrDomain},
		"roughness over 5 %":    {func(in *segment.Input) { in.Roughness = 0.0051 }, "roughness", calc.ErrRange},
		"rise too large":        {func(in *segment.Input) { in.Rise = calc.Some(2e6) }, "rise", calc.ErrDomain},
		"gravity zero":          {func(in *segment.Input) { in.Gravity = 0 }, "gravity", calc.ErrDomain},
		"both pressures":        {func(in *segment.Input) { in.InletPressure, in.OutletPressure = calc.Some(1e5), calc.Some(1e5) }, "outlet_pressure", calc.ErrDomain},
		"negative flow":         {func(in *segment.Input) { in.Flow.Value = -1 }, "volume_flow", calc.ErrDomain},
		"negative pressure":     {func(in *segment.Input) { in.InletPressure = calc.Some(-1) }, "inlet_pressure", calc.ErrDomain},
		"coefficient no number": {func(in *segment.Input) { in.Fittings[0].LossCoefficient = math.Inf(1) }, "loss_coefficient", calc.ErrDomain},
		"half a fitting":        {func(in *segment.Input) { in.Fittings[0].Count = 0.5 }, "count", calc.ErrDomain},
		"depth over the crown":  {func(in *segment.Input) { in.Section.LiquidDepth = calc.Some(0.11) }, "liquid_depth", calc.ErrDomain},
		"pressure with a surface": {func(in *segment.Input) {
			in.Section.LiquidDepth, in.InletPressure = calc.Some(0.05), calc.Some(2e5)
		}, "inlet_pressure", calc.ErrDomain},
	} {
		t.Run(name, func(t *testing.T) {
			in := waterLine()
			c.change(&in)
			var out segment.Result
			err := segment.PressureDrop(&in, &out)
			var e *calc.Error
			if !errors.As(err, &e) || e.Quantity != c.quantity || !errors.Is(err, c.kind) {
				t.Errorf("got %v, want %v at %s", err, c.kind, c.quantity)
			}
		})
	}
}

func TestErrorOfAnEndNamesTheEnd(t *testing.T) {
	in := waterLine()
	in.Outlet = segment.End{Kind: segment.OtherSection, Section: section.Section{Shape: section.Circle{Diameter: -1}}}
	var out segment.Result
	var end *segment.EndError
	if err := segment.PressureDrop(&in, &out); !errors.As(err, &end) || end.End != "outlet" {
		t.Errorf("got %v", err)
	}
}

func TestErrorOfAFittingNamesItsPlace(t *testing.T) {
	in := waterLine()
	in.Fittings[1].RatedFlow = 0
	var out segment.Result
	var item *fitting.ItemError
	if err := segment.PressureDrop(&in, &out); !errors.As(err, &item) || item.Index != 1 {
		t.Errorf("got %v", err)
	}
}

// In another system of units every answer scales as its dimension says.
func TestUnitsCancel(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		l := math.Exp(rapid.Float64Range(-1, 1).Draw(t, "ln length"))
		m := math.Exp(rapid.Float64Range(-1, 1).Draw(t, "ln mass"))
		s := math.Exp(rapid.Float64Range(-1, 1).Draw(t, "ln time"))
		in := waterLine()
		in.Flow.Value = math.Exp(rapid.Float64Range(-12, -3).Draw(t, "ln flow"))
		in.Fittings = in.Fittings[:1]
		scaled := in
		scaled.Section = section.Section{Shape: section.Circle{Diameter: 0.1 * l}}
		scaled.Fluid.Density *= m / (l * l * l)
		scaled.Fluid.DynamicViscosity *= m / (l * s)
		scaled.Fluid.KinematicViscosity *= l * l / s
		scaled.Flow.Value *= l * l * l / s
		scaled.Roughness *= l
		scaled.Length *= l
		scaled.Rise.Value *= l
		scaled.Gravity *= l / (s * s)
		var a, b segment.Result
		errA, errB := segment.PressureDrop(&in, &a), segment.PressureDrop(&scaled, &b)
		if errA != nil || errB != nil {
			t.Fatal(errA, errB)
		}
		near := func(got, want float64, what string) {
			if math.Abs(got-want) > 1e-9*math.Abs(want) {
				t.Fatalf("%s: %v, want %v", what, got, want)
			}
		}
		if a.Regime.Name != b.Regime.Name {
			return // a Reynolds number within rounding of a limit
		}
		pressure := m / (l * s * s)
		near(b.Pressure.StaticPressureDrop.Value, a.Pressure.StaticPressureDrop.Value*pressure, "static drop")
		near(b.Pressure.HeadLoss, a.Pressure.HeadLoss*l, "head loss")
		near(b.Pressure.FluidPower.Value, a.Pressure.FluidPower.Value*m*l*l/(s*s*s), "power")
		near(b.Friction.Darcy.Value, a.Friction.Darcy.Value, "friction factor")
		near(b.Friction.FrictionVelocity, a.Friction.FrictionVelocity*l/s, "friction velocity")
	})
}

// More flow takes more pressure, except that a laminar drop jumps up on entering the band.
func TestDropRisesWithFlow(t *testing.T) {
	in := waterLine()
	last := 0.0
	for q := 1e-9; q < 1; q *= 1.05 {
		in.Flow.Value = q
		drop := solve(t, in).Pressure.TotalPressureLoss
		if !(drop > last) {
			t.Fatalf("at %v m3/s the drop %v is not above %v", q, drop, last)
		}
		last = drop
	}
}

func TestSmallerDoorsGiveTheSameDigits(t *testing.T) {
	in := waterLine()
	whole := solve(t, in)
	var regime, friction segment.Result
	if err := errors.Join(segment.Regime(&in, &regime), segment.Friction(&in, &friction)); err != nil {
		t.Fatal(err)
	}
	if regime.Section != whole.Section || regime.Regime != whole.Regime || friction.Friction != whole.Friction || friction.Flow != whole.Flow {
		t.Error("a smaller door gives other digits")
	}
}

func FuzzSegment(f *testing.F) {
	f.Add(0.1, 0.0, 1000.0, 1e-3, 0.01, 4.5e-5, 100.0, 3.0, 0.5, 9.80665, 3e5)
	f.Add(1e-9, 1e-10, 1e6, 1e9, 1e12, 0.0, 1e-9, -1e6, -1e3, 1e-6, 1e12)
	f.Add(1e6, 5e5, 1e-9, 1e-12, 1e-300, 1e6, 1e6, 1e6, 1e9, 1e3, 1e-300)
	f.Fuzz(func(t *testing.T, d, depth, rho, mu, q, rough, length, rise, k, g, p float64) {
		fl, err := fluid.Given(fluid.GivenInput{Density: rho, DynamicViscosity: calc.Some(mu), Phase: fluid.Liquid})
		if err != nil {
			return
		}
		in := segment.Input{
			Section: section.Section{Shape: section.Circle{Diameter: d}}, Fluid: fl, Flow: flow.Rate{By: flow.ByVolume, Value: q},
			Roughness: rough, Length: length, Rise: calc.Some(rise), Gravity: g, Fittings: []fitting.Item{{LossCoefficient: k, Count: 1}},
		}
		if depth > 0 {
			in.Section.LiquidDepth = calc.Some(depth)
		} else if p > 0 {
			in.InletPressure = calc.Some(p)
		}
		var out segment.Result
		if err := segment.PressureDrop(&in, &out); err != nil {
			return
		}
		r := out.Pressure
		for _, v := range []float64{r.FrictionDrop, r.TotalPressureLoss, r.StaticPressureDrop.Value, r.HeadLoss, r.FluidPower.Value, r.FrictionSlope.Value, r.OutletPressure.Value, out.Friction.WallShear, out.Friction.RoughnessReynolds, out.Regime.EntryLength.Value} {
			if !calc.Finite(v) {
				t.Fatalf("%+v from %+v", out, in)
			}
		}
	})
}

func ExamplePressureDrop() {
	in := segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.1}}, Fluid: given(1000, 0.1),
		Flow: flow.Rate{By: flow.ByVelocity, Value: 1}, Length: 10, Gravity: segment.StandardGravity,
	}
	var out segment.Result
	err := segment.PressureDrop(&in, &out)
	// Re = 1000, f = 0.064, f L/D = 6.4, times 500 Pa
	fmt.Println(out.Pressure.FrictionDrop, err)
	// Output: 3200 <nil>
}

func ExampleFriction() {
	in := segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.1}}, Fluid: given(1000, 0.1),
		Flow: flow.Rate{By: flow.ByVelocity, Value: 1},
	}
	var out segment.Result
	err := segment.Friction(&in, &out)
	fmt.Println(out.Friction.Darcy.Value, out.Friction.WallShear, err)
	// Output: 0.064 8 <nil>
}

func ExampleRegime() {
	in := segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.1}}, Fluid: given(1000, 0.1),
		Flow: flow.Rate{By: flow.ByVelocity, Value: 1},
	}
	var out segment.Result
	err := segment.Regime(&in, &out)
	fmt.Println(out.Regime.Reynolds, out.Regime.Name, err)
	// Output: 1000 laminar <nil>
}
