package segment_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/flow"
	"borewright/calc/section"
	"borewright/calc/segment"

	"pgregory.net/rapid"
)

// anyLine draws a line of any usual section, with fittings, in any regime.
func anyLine(t *rapid.T) segment.Input {
	in := waterLine()
	d := math.Pow(10, rapid.Float64Range(-2.5, 0.3).Draw(t, "log diameter"))
	in.Section.Shape = rapid.SampledFrom([]section.Shape{
		section.Circle{Diameter: d}, section.Rectangle{Width: d, Height: d / 3}, section.Annulus{OuterDiameter: d, InnerDiameter: d / 2},
	}).Draw(t, "shape")
	in.Fluid = given(rapid.Float64Range(500, 2000).Draw(t, "density"), math.Pow(10, rapid.Float64Range(-4, 0).Draw(t, "log viscosity")))
	in.Flow = flow.Rate{By: flow.ByVelocity, Value: math.Pow(10, rapid.Float64Range(-3, 1).Draw(t, "log velocity"))}
	in.Roughness = rapid.Float64Range(0, 0.01).Draw(t, "relative roughness") * d
	in.Length = math.Pow(10, rapid.Float64Range(-1, 4).Draw(t, "log length"))
	in.Rise = calc.Some(rapid.Float64Range(-50, 50).Draw(t, "rise"))
	in.Fittings = []fitting.Item{
		{LossCoefficient: rapid.Float64Range(0, 20).Draw(t, "K"), Count: 2},
		{LossCoefficient: rapid.Float64Range(-2, 0).Draw(t, "negative K"), Count: 1},
		{ByRating: true, RatedDrop: rapid.Float64Range(0, 1e4).Draw(t, "rated drop"), RatedFlow: 0.01, Exponent: 1.8, Count: 1},
	}
	return in
}

// near compares two numbers relative to a scale of the case.
func near(t rapid.TB, what string, got, want, scale float64) {
	t.Helper()
	if !(math.Abs(got-want) <= 1e-12*math.Abs(scale)) {
		t.Fatalf("%s: %v, want %v", what, got, want)
	}
}

// magnitudes is the sum of the magnitudes of the parts, to which rounding is relative.
func magnitudes(p *segment.Pressure) float64 {
	return p.FrictionDrop + math.Abs(p.CoefficientDrop) + math.Abs(p.ComponentDrop) + math.Abs(p.ElevationDrop.Value) + math.Abs(p.AccelerationDrop.Value)
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
		compare := func(got, want float64, what string) { near(t, what, got, want, 100*want) }
		if a.Regime.Name != b.Regime.Name {
			return // a Reynolds number within rounding of a limit
		}
		pressure := m / (l * s * s)
		compare(b.Pressure.StaticPressureDrop.Value, a.Pressure.StaticPressureDrop.Value*pressure, "static drop")
		compare(b.Pressure.HeadLoss, a.Pressure.HeadLoss*l, "head loss")
		compare(b.Pressure.FluidPower.Value, a.Pressure.FluidPower.Value*m*l*l/(s*s*s), "power")
		compare(b.Friction.Darcy.Value, a.Friction.Darcy.Value, "friction factor")
		compare(b.Friction.FrictionVelocity, a.Friction.FrictionVelocity*l/s, "friction velocity")
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

// Two segments of half the length and rise, the fittings in the first, add up to
// the whole.
func TestHalvesAddUp(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyLine(t)
		whole := solve(t, in).Pressure
		in.Length, in.Rise = in.Length/2, calc.Some(in.Rise.Value/2)
		first := solve(t, in).Pressure
		in.Fittings = nil
		second := solve(t, in).Pressure
		near(t, "static drop", first.StaticPressureDrop.Value+second.StaticPressureDrop.Value, whole.StaticPressureDrop.Value, magnitudes(&whole))
		near(t, "friction drop", first.FrictionDrop+second.FrictionDrop, whole.FrictionDrop, whole.FrictionDrop)
	})
}

// The static drop is the sum of the four parts on the branch of the larger friction.
func TestStaticDropIsTheSumOfItsParts(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := solve(t, anyLine(t)).Pressure
		near(t, "sum", p.StaticPressureDrop.Value, p.FrictionDrop+p.CoefficientDrop+p.ComponentDrop+p.ElevationDrop.Value+p.AccelerationDrop.Value, magnitudes(&p))
		if p.TotalPressureLoss != p.FrictionDrop+p.FittingsDrop {
			t.Errorf("total loss %v of %v and %v", p.TotalPressureLoss, p.FrictionDrop, p.FittingsDrop)
		}
	})
}

func TestReversedRiseChangesOnlyTheElevation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyLine(t)
		up := solve(t, in).Pressure
		in.Rise.Value = -in.Rise.Value
		down := solve(t, in).Pressure
		if down.ElevationDrop.Value != -up.ElevationDrop.Value || down.TotalPressureLoss != up.TotalPressureLoss || down.AccelerationDrop != up.AccelerationDrop {
			t.Errorf("up %+v, down %+v", up, down)
		}
		near(t, "difference", up.StaticPressureDrop.Value-down.StaticPressureDrop.Value, 2*up.ElevationDrop.Value, magnitudes(&up))
	})
}

func TestPressureKnownAtEitherEnd(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyLine(t)
		in.InletPressure = calc.Some(rapid.Float64Range(1e7, 1e10).Draw(t, "inlet pressure"))
		first := solve(t, in).Pressure
		if !(first.OutletPressure.Value > 0) {
			return // no such state, a condition says so
		}
		in.InletPressure, in.OutletPressure = calc.Optional{}, first.OutletPressure
		second := solve(t, in).Pressure
		near(t, "inlet pressure", second.InletPressure.Value, first.InletPressure.Value, first.InletPressure.Value+magnitudes(&first))
	})
}

func TestWhereBothRegimesArePossibleTheLargerFrictionStands(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyLine(t)
		re := rapid.OneOf(rapid.Just(2300.0), rapid.Float64Range(2300, 4000)).Draw(t, "Re")
		in.Flow.Value *= re / solve(t, in).Regime.Reynolds
		out := solve(t, in)
		p := &out.Pressure
		if !out.Conditions.RegimeUncertain {
			return // rounded over a limit
		}
		laminar, turbulent := p.FrictionDropIfLaminar.Value, p.FrictionDropIfTurbulent.Value
		if p.FrictionDrop != max(laminar, turbulent) || p.StaticPressureDrop.Value != max(p.StaticPressureDropIfLaminar.Value, p.StaticPressureDropIfTurbulent.Value) {
			t.Errorf("not the larger one: %+v", p)
		}
		near(t, "static drops", p.StaticPressureDropIfTurbulent.Value-p.StaticPressureDropIfLaminar.Value, turbulent-laminar, magnitudes(p))
		constant := out.Section.LaminarConstant.Value
		near(t, "laminar factor", out.Friction.IfLaminar.Value, constant/out.Regime.Reynolds, 1e-2)
	})
}

// Towards rest the drop goes to that of the level alone, and at rest it is that.
func TestTheLimitAtRestIsTheLevel(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyLine(t)
		in.Flow.Value = 0
		rest := solve(t, in)
		in.Flow.Value = 1e-60
		creeping := solve(t, in)
		near(t, "static drop", creeping.Pressure.StaticPressureDrop.Value, rest.Pressure.ElevationDrop.Value, magnitudes(&rest.Pressure)+1e-9)
		if rest.Pressure.StaticPressureDrop != rest.Pressure.ElevationDrop || rest.Pressure.TotalPressureLoss != 0 {
			t.Errorf("at rest: %+v", rest.Pressure)
		}
	})
}

// Two velocities that are nearly the same leave all digits: with the outlet wider by
// the ratio 1 + e, Δpa = -ρ V²/2 (1 - 1/(1+e)²) = -ρ V² e (1 - 3 e/2 ...).
func TestAccelerationLosesNoDigits(t *testing.T) {
	in := waterLine()
	const e = 0x1p-30
	in.Section.Shape = section.Rectangle{Width: 0.5, Height: 0.25}
	in.Flow = flow.Rate{By: flow.ByVelocity, Value: 2}
	in.Outlet = segment.End{Kind: segment.OtherSection, Section: section.Section{Shape: section.Rectangle{Width: 0.5 * (1 + e), Height: 0.25}}}
	got, want := solve(t, in).Pressure.AccelerationDrop.Value, -1000*4*e*(1-1.5*e)
	if math.Abs(got/want-1) > 1e-6 { // the velocity itself is rounded: 1e-16 of 1e-9
		t.Errorf("got %v, want %v", got, want)
	}
	in.Outlet = segment.End{}
	if got := solve(t, in).Pressure.AccelerationDrop.Value; got != 0 {
		t.Errorf("between equal ends %v", got)
	}
}
