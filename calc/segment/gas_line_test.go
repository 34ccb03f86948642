package segment_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/friction"
	"borewright/calc/section"
	"borewright/calc/segment"

	"pgregory.net/rapid"
)

// nitrogenLine is 80 m of a 50 mm pipe at 8 bar.
func nitrogenLine(t rapid.TB) segment.Input {
	t.Helper()
	p, err := fluid.ByConstants(fluid.ConstantsInput{
		MolarMass: calc.Some(28.0134e-3), HeatCapacityRatio: calc.Some(1.4), DynamicViscosity: 1.78e-5,
		StatePoint: fluid.StatePoint{Temperature: 298.15, Pressure: 8e5},
	})
	if err != nil {
		t.Fatal(err)
	}
	return segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.05}}, Fluid: p, Flow: flow.Rate{By: flow.ByMass, Value: 0.35},
		Roughness: 4.5e-5, Length: 80, Gravity: segment.StandardGravity,
		Fittings: []fitting.Item{{LossCoefficient: 0.3, Count: 4}, {ByRating: true, RatedDrop: 2e3, RatedFlow: 0.04, Exponent: 2, Count: 1}},
	}
}

// gasOfRow is a segment of a table of package gas.
func gasOfRow(t *testing.T, r row, temperature string, model segment.GasModel) segment.Input {
	t.Helper()
	in := nitrogenLine(t)
	p, err := fluid.ByConstants(fluid.ConstantsInput{
		MolarMass: calc.Some(r.number(t, "molar_mass_kg_mol")), HeatCapacityRatio: calc.Some(r.number(t, "gamma")), DynamicViscosity: r.number(t, "viscosity_Pa_s"),
		StatePoint: fluid.StatePoint{Temperature: r.number(t, temperature), Pressure: r.number(t, "inlet_pressure_Pa")},
	})
	if err != nil {
		t.Fatal(err)
	}
	in.Fluid, in.Fittings, in.GasModel = p, nil, model
	in.Section.Shape = section.Circle{Diameter: r.number(t, "diameter_m")}
	in.Flow.Value, in.Roughness, in.Length = r.number(t, "mass_flow_kg_s"), r.number(t, "roughness_m"), r.number(t, "length_m")
	return in
}

func TestGasSegmentsAgainstReferenceValues(t *testing.T) {
	for _, c := range []struct {
		file, temperature, length string
		model                     segment.GasModel
	}{
		{"isothermal.csv", "temperature_K", "choking_length_m", segment.Isothermal},
		{"adiabatic.csv", "inlet_temperature_K", "max_length_m", segment.Adiabatic},
	} {
		answered, choked := 0, 0
		for i, r := range gasRows(t, c.file) {
			in := gasOfRow(t, r, c.temperature, c.model)
			var out segment.Result
			err := segment.PressureDrop(&in, &out)
			if r["outlet_pressure_Pa"] == "" {
				choked++
				var limit *segment.ChokedError
				if !errors.As(err, &limit) || !errors.Is(err, calc.ErrChoked) {
					t.Errorf("%s row %d chokes and got %v", c.file, i+1, err)
					continue
				}
				within(t, "length to choking", limit.Length, r.number(t, c.length), 1e-9)
				continue
			}
			if err != nil {
				t.Errorf("%s row %d: %v", c.file, i+1, err)
				continue
			}
			answered++
			bound := 1e-9
			if out.Gas.MachOut.Value > 0.8 {
				bound = 1e-7
			}
			within(t, "outlet pressure", out.Pressure.OutletPressure.Value, r.number(t, "outlet_pressure_Pa"), bound)
			within(t, "outlet Mach number", out.Gas.MachOut.Value, r.number(t, "outlet_mach"), bound)
			within(t, "inlet Mach number", out.Gas.MachIn.Value, r.number(t, "inlet_mach"), bound)
		}
		if answered < 50 || choked == 0 {
			t.Errorf("%s: %d answered, %d choked", c.file, answered, choked)
		}
	}
}

func within(t *testing.T, what string, got, want, bound float64) {
	t.Helper()
	if !(math.Abs(got-want) <= bound*math.Abs(want)) {
		t.Errorf("%s: %.12g, want %.12g (%.1e)", what, got, want, math.Abs(got/want-1))
	}
}

// anyGasLine draws a gas line with fittings, ends and a rise, slow or fast.
func anyGasLine(t *rapid.T) segment.Input {
	in := nitrogenLine(t)
	in.GasModel = rapid.SampledFrom([]segment.GasModel{segment.Isothermal, segment.Adiabatic}).Draw(t, "model")
	in.Flow.Value = 0.35 * math.Pow(10, rapid.Float64Range(-4, 0.5).Draw(t, "log flow"))
	in.Length = math.Pow(10, rapid.Float64Range(-1, 2).Draw(t, "log length"))
	if rapid.Bool().Draw(t, "rise?") {
		in.Rise = calc.Some(rapid.Float64Range(-60, 60).Draw(t, "rise"))
	}
	ends := []segment.End{{}, {Kind: segment.Reservoir}, {Kind: segment.OtherSection, Section: section.Section{Shape: section.Circle{Diameter: 0.08}}}, {Kind: segment.FreeDischarge}}
	in.Inlet = rapid.SampledFrom(ends[:3]).Draw(t, "inlet")
	in.Outlet = rapid.SampledFrom(ends).Draw(t, "outlet")
	if rapid.Bool().Draw(t, "state at the outlet") {
		in.OutletPressure = in.Fluid.Pressure
	}
	return in
}

func TestTheFourDropsSumToTheStaticDrop(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyGasLine(t)
		var out segment.Result
		if err := segment.PressureDrop(&in, &out); err != nil {
			if !errors.Is(err, calc.ErrChoked) {
				t.Fatal(err)
			}
			return
		}
		p := &out.Pressure
		sum := p.FrictionDrop + p.FittingsDrop + p.ElevationDrop.Value + p.AccelerationDrop.Value
		size := math.Abs(p.FrictionDrop) + math.Abs(p.FittingsDrop) + math.Abs(p.ElevationDrop.Value) + math.Abs(p.AccelerationDrop.Value)
		near(t, "sum of the parts", sum, p.StaticPressureDrop.Value, 10*size)
		near(t, "difference of the ends", p.InletPressure.Value-p.OutletPressure.Value, p.StaticPressureDrop.Value, 10*size+100*p.InletPressure.Value)
		if p.FrictionDrop <= 0 || p.FittingsDrop <= 0 {
			t.Fatalf("friction %v, fittings %v", p.FrictionDrop, p.FittingsDrop)
		}
		if p.LowestPressure.Value > min(p.InletPressure.Value, p.OutletPressure.Value) {
			t.Fatalf("lowest %v of %v and %v", p.LowestPressure.Value, p.InletPressure.Value, p.OutletPressure.Value)
		}
	})
}

// A slow gas with a small drop is what an incompressible one is, part by part.
func TestSlowGasMeetsTheIncompressibleAccount(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyGasLine(t)
		in.Flow.Value = 0.35e-1 * rapid.Float64Range(0.1, 1).Draw(t, "slow")
		in.Length = rapid.Float64Range(0.1, 5).Draw(t, "short")
		in.Rise.Value /= 20
		compressible := solve(t, in)
		in.GasModel = segment.Incompressible
		incompressible := solve(t, in)
		drop := math.Abs(incompressible.Pressure.FrictionDrop) + math.Abs(incompressible.Pressure.ElevationDrop.Value) + math.Abs(incompressible.Pressure.FittingsDrop) + math.Abs(incompressible.Pressure.AccelerationDrop.Value)
		bound := 3*drop/in.Fluid.Pressure.Value + 3*math.Pow(compressible.Gas.MachOut.Value, 2)
		for _, part := range [...]struct {
			name string
			a, b float64
		}{
			{"friction", compressible.Pressure.FrictionDrop, incompressible.Pressure.FrictionDrop},
			{"fittings", compressible.Pressure.FittingsDrop, incompressible.Pressure.FittingsDrop},
			{"elevation", compressible.Pressure.ElevationDrop.Value, incompressible.Pressure.ElevationDrop.Value},
			{"acceleration", compressible.Pressure.AccelerationDrop.Value, incompressible.Pressure.AccelerationDrop.Value},
			{"static", compressible.Pressure.StaticPressureDrop.Value, incompressible.Pressure.StaticPressureDrop.Value},
		} {
			if !(math.Abs(part.a-part.b) <= bound*drop) {
				t.Fatalf("%s: %v compressible, %v incompressible", part.name, part.a, part.b)
			}
		}
	})
}

// What comes out at one end, given there, gives back the other.
func TestStateAtEitherEndIsTheSameSegment(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyGasLine(t)
		in.OutletPressure = calc.Optional{}
		var out segment.Result
		if err := segment.PressureDrop(&in, &out); err != nil {
			return
		}
		if out.Gas.MachOut.Value > 0.7 || out.Regime.CanBeLaminar {
			return // near choking the inlet is ill-conditioned
		}
		p, back := &out.Pressure, in
		density := in.Fluid.Density * (p.OutletPressure.Value / in.Fluid.Pressure.Value) * (in.Fluid.Temperature.Value / out.Gas.OutletTemperature.Value)
		back.Fluid.Density, back.Fluid.KinematicViscosity = density, in.Fluid.DynamicViscosity/density
		back.Fluid.Pressure, back.Fluid.Temperature, back.OutletPressure = p.OutletPressure, out.Gas.OutletTemperature, p.OutletPressure
		if len(back.Fittings) == 2 { // a rated component has another coefficient at another density
			back.Fittings, in.Fittings = back.Fittings[:1], in.Fittings[:1]
			out = solve(t, in)
			density = in.Fluid.Density * (p.OutletPressure.Value / in.Fluid.Pressure.Value) * (in.Fluid.Temperature.Value / out.Gas.OutletTemperature.Value)
			back.Fluid.Density, back.Fluid.KinematicViscosity = density, in.Fluid.DynamicViscosity/density
			back.Fluid.Pressure, back.Fluid.Temperature, back.OutletPressure = p.OutletPressure, out.Gas.OutletTemperature, p.OutletPressure
		}
		again := solve(t, back)
		near(t, "inlet pressure", again.Pressure.InletPressure.Value, in.Fluid.Pressure.Value, 1e4*in.Fluid.Pressure.Value)
		near(t, "inlet temperature", again.Gas.InletTemperature.Value, in.Fluid.Temperature.Value, 1e4*in.Fluid.Temperature.Value)
	})
}

func TestAnswerAtChokingIsTheLargestFlow(t *testing.T) {
	for _, model := range []segment.GasModel{segment.Isothermal, segment.Adiabatic} {
		for _, rise := range []float64{0, 40} {
			in := nitrogenLine(t)
			in.GasModel, in.Flow.Value, in.AnswerAtChoking = model, 50, true
			if rise != 0 {
				in.Rise = calc.Some(rise)
			}
			out := solve(t, in)
			most := out.Gas.ChokingMassFlow.Value
			if !out.Conditions.Choked || out.Flow.MassFlow != most || out.Gas.AskedMassFlow.Value != 50 {
				t.Errorf("%v: %+v at %v kg/s", model, out.Conditions, out.Flow.MassFlow)
			}
			limit := 1.0
			if model == segment.Isothermal {
				limit = 1 / math.Sqrt(1.4)
			}
			if mach := out.Gas.MachOut.Value; !(mach > limit*(1-1e-3) && mach <= limit*(1+1e-12)) {
				t.Errorf("%v leaves at Mach number %v, its limit is %v", model, mach, limit)
			}
			in.AnswerAtChoking = false
			in.Flow.Value = most * (1 - 1e-9)
			solve(t, in)
			in.Flow.Value = most * (1 + 1e-9)
			if err := segment.PressureDrop(&in, &out); !errors.Is(err, calc.ErrChoked) || !strings.Contains(err.Error(), "at most") {
				t.Errorf("%v above the largest flow: %v", model, err)
			}
		}
	}
}

// A law that does not hold for less flow cannot tell how much passes, and says so.
func TestChokingBeyondTheLawsRange(t *testing.T) {
	for _, answered := range []bool{false, true} {
		in := nitrogenLine(t)
		in.Flow.Value, in.Law, in.AnswerAtChoking = 50, friction.VonKarmanRoughLaw, answered
		var out segment.Result
		err := segment.PressureDrop(&in, &out)
		if !errors.Is(err, calc.ErrChoked) || !strings.Contains(err.Error(), "cannot be told") {
			t.Errorf("%v", err)
		}
	}
}

func TestGasAtRestIsAColumn(t *testing.T) {
	in := nitrogenLine(t)
	in.Flow.Value, in.Rise = 0, calc.Some(500)
	out := solve(t, in)
	height := calc.MolarGasConstant / 28.0134e-3 * 298.15 / segment.StandardGravity
	want := 8e5 * (1 - math.Exp(-500/height)) // barometric formula, common practice
	within(t, "static drop", out.Pressure.StaticPressureDrop.Value, want, 1e-13)
	if out.Pressure.StaticPressureDrop != out.Pressure.ElevationDrop || out.Pressure.FrictionDrop != 0 {
		t.Errorf("%+v", out.Pressure)
	}
	in.OutletPressure = in.Fluid.Pressure
	within(t, "inlet pressure", solve(t, in).Pressure.InletPressure.Value, 8e5*math.Exp(500/height), 1e-13)
}

func TestGaugesSeeTheAirOutside(t *testing.T) {
	in := nitrogenLine(t)
	in.Rise, in.SurroundingsDensity = calc.Some(30), calc.Some(1.2)
	out := solve(t, in)
	within(t, "gauge drop", out.Pressure.GaugePressureDrop.Value, out.Pressure.StaticPressureDrop.Value-1.2*segment.StandardGravity*30, 1e-14)
	if out.Conditions.GasRiseWithoutSurroundings {
		t.Error("the surroundings are given")
	}
	in.SurroundingsDensity = calc.Optional{}
	if out = solve(t, in); !out.Conditions.GasRiseWithoutSurroundings || out.Pressure.GaugePressureDrop.Valid {
		t.Errorf("%+v", out.Conditions)
	}
}

func TestDistributionRunsFromEndToEnd(t *testing.T) {
	for _, model := range []segment.GasModel{segment.Isothermal, segment.Adiabatic} {
		for _, atOutlet := range []bool{false, true} {
			in := nitrogenLine(t)
			in.GasModel = model
			if atOutlet {
				in.OutletPressure = in.Fluid.Pressure
			}
			out := solve(t, in)
			points, err := segment.Distribution(nil, &in, &out, 11)
			if err != nil || len(points) != 11 {
				t.Fatal(points, err)
			}
			within(t, "first pressure", points[0].Pressure, out.Pressure.InletPressure.Value, 1e-12)
			within(t, "last pressure", points[10].Pressure, out.Pressure.OutletPressure.Value, 1e-12)
			within(t, "last velocity", points[10].Velocity, out.Pressure.OutletVelocity, 1e-12)
			within(t, "last place", points[10].Distance, in.Length, 1e-15)
			for i := 1; i < len(points); i++ {
				if points[i].Pressure >= points[i-1].Pressure || points[i].Mach <= points[i-1].Mach {
					t.Errorf("%v: point %d does not follow %d: %+v", model, i, i-1, points)
				}
			}
		}
	}
	in := waterLine()
	out := solve(t, in)
	if _, err := segment.Distribution(nil, &in, &out, 3); err == nil {
		t.Error("a liquid has no distribution of a gas")
	}
}

func TestGasModelRefusals(t *testing.T) {
	for name, c := range map[string]struct {
		change   func(*segment.Input)
		quantity string
	}{
		"a liquid with a gas model":         {func(in *segment.Input) { in.Fluid, in.GasModel = given(1000, 1e-3), segment.Isothermal }, "gas_model"},
		"a model that is none":              {func(in *segment.Input) { in.GasModel = 9 }, "gas_model"},
		"a gas by density alone, adiabatic": {func(in *segment.Input) { in.Fluid, in.GasModel = given(1.2, 1.8e-5), segment.Adiabatic }, "gas_model"},
		"adiabatic without its ratio":       {func(in *segment.Input) { in.Fluid.HeatCapacityRatio, in.GasModel = calc.Optional{}, segment.Adiabatic }, "heat_capacity_ratio"},
		"another pressure at the inlet":     {func(in *segment.Input) { in.InletPressure = calc.Some(7e5) }, "inlet_pressure"},
		"another pressure at the outlet":    {func(in *segment.Input) { in.OutletPressure = calc.Some(7e5) }, "outlet_pressure"},
		"losses that drive the flow":        {func(in *segment.Input) { in.Fittings = []fitting.Item{{LossCoefficient: -500, Count: 1}} }, "loss_coefficient"},
	} {
		in := nitrogenLine(t)
		c.change(&in)
		var out segment.Result
		err := segment.PressureDrop(&in, &out)
		var e *calc.Error
		if !errors.As(err, &e) || e.Quantity != c.quantity || e.Detail == "" {
			t.Errorf("%s: %v, want an error about %s", name, err, c.quantity)
		}
	}
}

func TestUncertainRegimeOfAGasGivesBothDrops(t *testing.T) {
	in := nitrogenLine(t)
	in.Flow.Value = 3000 * 1.78e-5 * math.Pi / 4 * 0.05 // Re = 4 m/(π d μ)
	p := solve(t, in).Pressure
	if !(p.FrictionDropIfLaminar.Value < p.FrictionDropIfTurbulent.Value && p.FrictionDropIfTurbulent.Value == p.FrictionDrop && p.StaticPressureDropIfTurbulent == p.StaticPressureDrop) {
		t.Errorf("%+v", p)
	}
}

func BenchmarkGasSegment(b *testing.B) {
	for name, model := range map[string]segment.GasModel{"isothermal": segment.Isothermal, "adiabatic": segment.Adiabatic} {
		b.Run(name, func(b *testing.B) {
			in := nitrogenLine(b)
			in.GasModel = model
			var out segment.Result
			b.ReportAllocs()
			for b.Loop() {
				if err := segment.PressureDrop(&in, &out); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
