package segment_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/section"
	"borewright/calc/segment"
)

func TestRatedComponentScalesWithTheSquareOfFlow(t *testing.T) {
	out := solve(t, waterLine())
	if out.Pressure.ComponentDrop != 5000 { // half the rated flow, a quarter of the drop
		t.Errorf("component takes %v Pa, want 5000 Pa", out.Pressure.ComponentDrop)
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
	entry := solve(t, in).Regime.EntryLength.Value
	for length, want := range map[float64]bool{100: false, entry: false, math.Nextafter(entry, 0): true, 1: true} {
		in.Length = length
		if got := solve(t, in).Conditions.Developing; got != want {
			t.Errorf("%v m of an entry length of %v m: developing %v", length, entry, got)
		}
	}
}

func TestConstantCoefficientsAreFlaggedWhereTheyGrow(t *testing.T) {
	for name, c := range map[string]struct {
		reynolds       float64
		laminar, lowRe bool
	}{
		"laminar":            {1000, true, false},
		"either regime":      {3000, true, false},
		"turbulent, low":     {9999, false, true},
		"above 1e4":          {10001, false, false},
		"far above the band": {1e6, false, false},
	} {
		t.Run(name, func(t *testing.T) {
			in := waterLine()
			in.Flow = flow.Rate{By: flow.ByVelocity, Value: c.reynolds * 1e-6 / 0.1}
			if got := solve(t, in).Conditions; got.ConstantLossLaminar != c.laminar || got.ConstantLossLowRe != c.lowRe {
				t.Errorf("got %+v", got)
			}
			in.Fittings = in.Fittings[1:] // a component alone has no coefficient
			if got := solve(t, in).Conditions; got.ConstantLossLaminar || got.ConstantLossLowRe {
				t.Errorf("without a coefficient: %+v", got)
			}
		})
	}
}

// The bound of 40 % is met from both sides; without a pressure nothing is refused.
func TestGasThatLosesTooMuchPressureIsRefused(t *testing.T) {
	in := waterLine()
	in.Fluid, in.Flow.Value, in.Fittings = given(1.2, 1.8e-5), 0.1, nil
	out := solve(t, in)
	if !out.Conditions.GasIncompressible || solve(t, waterLine()).Conditions.GasIncompressible {
		t.Error("a gas by its density is not flagged, or a liquid is")
	}
	drop := out.Pressure.StaticPressureDrop.Value
	in.InletPressure = calc.Some(drop / 0.4 * 1.000001)
	solve(t, in)
	in.InletPressure = calc.Some(drop / 0.4 * 0.999999)
	refused(t, in, "static_pressure_drop")
	in.InletPressure, in.OutletPressure = calc.Optional{}, calc.Some(drop*1.5*1.000001)
	solve(t, in)
	in.OutletPressure = calc.Some(drop * 1.5 * 0.999999)
	refused(t, in, "static_pressure_drop")
}

func TestGasThatIsTooFastIsRefused(t *testing.T) {
	in := waterLine()
	in.Fluid, in.Fittings = given(1.2, 1.8e-5), nil
	in.Fluid.SoundSpeed = calc.Some(340)
	in.Flow = flow.Rate{By: flow.ByVelocity, Value: 102}
	solve(t, in)
	in.Flow.Value = 102.0001
	refused(t, in, "velocity")
	in.Flow.Value = 51
	in.Outlet = segment.End{Kind: segment.OtherSection, Section: section.Section{Shape: section.Circle{Diameter: 0.07}}} // 104 m/s
	refused(t, in, "velocity")
	in.Fluid.SoundSpeed = calc.Optional{}
	solve(t, in)
}

// refused asks for a refusal as outside the validity, with nothing left behind.
func refused(t *testing.T, in segment.Input, quantity string) {
	t.Helper()
	var out segment.Result
	err := segment.PressureDrop(&in, &out)
	var e *calc.Error
	if !errors.As(err, &e) || e.Quantity != quantity || !errors.Is(err, calc.ErrRange) || out != (segment.Result{}) {
		t.Errorf("got %v and %+v, want a refusal at %s", err, out.Pressure, quantity)
	}
}

// A level channel and a fluid at rest downhill have slopes and powers of 0, not -0.
func TestNothingIsMinusZero(t *testing.T) {
	in := waterLine()
	in.Flow.Value, in.Rise = 0, calc.Some(-3)
	if p := solve(t, in).Pressure; math.Signbit(p.FluidPower.Value) {
		t.Errorf("power at rest is %v", p.FluidPower.Value)
	}
	in.Rise, in.Section.LiquidDepth = calc.Some(0), calc.Some(0.05)
	if p := solve(t, in).Pressure; !p.BedSlope.Valid || math.Signbit(p.BedSlope.Value) {
		t.Errorf("slope of a level bed is %+v", p.BedSlope)
	}
	in.Rise = calc.Optional{}
	if p := solve(t, in).Pressure; p.BedSlope.Valid {
		t.Errorf("without a rise the bed has the slope %v", p.BedSlope.Value)
	}
}
