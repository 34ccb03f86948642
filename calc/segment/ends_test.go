package segment_test

import (
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/section"
	"borewright/calc/segment"

	"pgregory.net/rapid"
)

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

// A coefficient of 0 that is stated is an answer, none at all is a gap.
func TestEndLossIsMissingOnlyWhereNoneIsStated(t *testing.T) {
	in := waterLine()
	in.Outlet.Kind = segment.Reservoir
	for name, c := range map[string]struct {
		fittings []fitting.Item
		want     bool
	}{
		"none at all":       {nil, true},
		"a component alone": {in.Fittings[1:], true},
		"stated as 0":       {[]fitting.Item{{LossCoefficient: 0, Count: 1}}, false},
		"exit loss":         {[]fitting.Item{{LossCoefficient: 1, Count: 1}}, false},
	} {
		t.Run(name, func(t *testing.T) {
			in.Fittings = c.fittings
			if got := solve(t, in).Conditions.EndLossMissing; got != c.want {
				t.Errorf("missing: %v, want %v", got, c.want)
			}
		})
	}
}

// An end may be a section that runs partly full: its true flow area counts.
func TestEndsMayRunPartlyFull(t *testing.T) {
	in := waterLine()
	half := section.Section{Shape: section.Circle{Diameter: 0.2}, LiquidDepth: calc.Some(0.1)}
	in.Outlet = segment.End{Kind: segment.OtherSection, Section: half}
	if got, want := solve(t, in).Pressure.OutletVelocity, 0.01/(math.Pi*0.2*0.2/8); math.Abs(got/want-1) > 1e-14 {
		t.Errorf("%v m/s, want %v m/s", got, want)
	}
}

// Wherever the fittings stand in the line and in whatever order, the pressure
// nowhere falls below the lowest one, and one arrangement reaches it.
func TestLowestPressureBoundsEveryPlaceOfTheFittings(t *testing.T) {
	kinds := []segment.EndKind{segment.SameSection, segment.Reservoir, segment.FreeDischarge}
	rapid.Check(t, func(t *rapid.T) {
		in := anyLine(t)
		in.Inlet.Kind = rapid.SampledFrom(kinds[:2]).Draw(t, "inlet")
		in.Outlet.Kind = rapid.SampledFrom(kinds).Draw(t, "outlet")
		in.InletPressure = calc.Some(rapid.Float64Range(1e5, 1e7).Draw(t, "inlet pressure"))
		out := solve(t, in)
		p := &out.Pressure
		scale, least := magnitudes(p)+in.InletPressure.Value, math.Inf(1)
		for _, place := range [][]float64{{0, 0, 0}, {1, 1, 1}, {0, 1, 0}, {0, 1, 1}, {1, 0, 1}, {0.5, 0.5, 0.5}} {
			least = min(least, walked(&in, &out, place))
		}
		if !(p.LowestPressure.Value <= least+1e-12*scale) || !(p.LowestPressure.Value >= least-1e-12*scale) {
			t.Errorf("lowest %v, walked %v", p.LowestPressure.Value, least)
		}
	})
}

// walked is the lowest pressure on a walk along the line, the fitting i standing at
// place[i] of its length; losses come before gains at one place.
func walked(in *segment.Input, out *segment.Result, place []float64) float64 {
	p, head := &out.Pressure, in.Fluid.Density*out.Flow.Velocity*out.Flow.Velocity/2
	drops := []float64{2 * in.Fittings[0].LossCoefficient * head, in.Fittings[1].LossCoefficient * head, p.ComponentDrop}
	inside := p.InletPressure.Value + in.Fluid.Density*p.InletVelocity*p.InletVelocity/2 - head
	least := min(p.InletPressure.Value, inside)
	const steps = 4
	for step := 0; step <= steps; step++ {
		x := float64(step) / steps
		at := inside - x*(p.FrictionDrop+p.ElevationDrop.Value)
		for _, lossesFirst := range []bool{true, false} {
			for i, d := range drops {
				if (d >= 0) == lossesFirst && place[i] == x {
					inside -= d
					at -= d
				}
				least = min(least, at)
			}
		}
	}
	return min(least, p.OutletPressure.Value)
}

// With the outlet pressure given the lower of two possible inlet pressures counts.
func TestLowestPressureCountsTheOtherRegime(t *testing.T) {
	in := waterLine()
	in.Flow.Value = 3000 * 1e-6 / 0.1 * math.Pi * 0.01 / 4
	in.Rise, in.OutletPressure, in.Fittings = calc.Some(-10), calc.Some(1e5), nil
	p := solve(t, in).Pressure
	want := 1e5 + p.StaticPressureDropIfLaminar.Value
	if got := p.LowestPressure.Value; math.Abs(got-want) > 1e-9 || !(got < p.InletPressure.Value) {
		t.Errorf("lowest %v, want %v, below the inlet's %v", got, want, p.InletPressure.Value)
	}
}
