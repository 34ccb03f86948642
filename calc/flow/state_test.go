package flow_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/flow"

	"pgregory.net/rapid"
)

func TestEveryMeasureGivesTheSameFlow(t *testing.T) {
	const area, density = 0.5, 800.0
	want := flow.State{MassFlow: 600, VolumeFlow: 0.75, Velocity: 1.5}
	for _, rate := range []flow.Rate{{By: flow.ByVolume, Value: 0.75}, {By: flow.ByMass, Value: 600}, {By: flow.ByVelocity, Value: 1.5}} {
		if got, err := flow.StateOf(rate, area, density); err != nil || got != want {
			t.Errorf("%+v: got %+v, %v; want %+v", rate, got, err, want)
		}
	}
}

func TestFlowComesBackFromEachOfItsMeasures(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		area, density := rapid.Float64Range(1e-6, 100).Draw(t, "area"), rapid.Float64Range(0.01, 2e4).Draw(t, "density")
		velocity := rapid.Float64Range(1e-6, 1e3).Draw(t, "velocity")
		s, err := flow.StateOf(flow.Rate{By: flow.ByVelocity, Value: velocity}, area, density)
		if err != nil {
			t.Fatal(err)
		}
		for _, rate := range []flow.Rate{{By: flow.ByVolume, Value: s.VolumeFlow}, {By: flow.ByMass, Value: s.MassFlow}} {
			back, err := flow.StateOf(rate, area, density)
			if err != nil || math.Abs(back.Velocity-velocity) > 1e-15*velocity {
				t.Errorf("%+v: velocity %.17g, %v; want %.17g", rate, back.Velocity, err, velocity)
			}
		}
	})
}

func TestNegativeFlowIsRefusedWithTheAdviceToSwapTheEnds(t *testing.T) {
	for by, quantity := range map[flow.Measure]string{flow.ByVolume: "volume_flow", flow.ByMass: "mass_flow", flow.ByVelocity: "velocity"} {
		for _, v := range []float64{-1, -5e-324} {
			_, err := flow.StateOf(flow.Rate{By: by, Value: v}, 1, 1)
			wantError(t, err, calc.ErrDomain, quantity)
			var e *calc.Error
			if errors.As(err, &e) && !strings.Contains(e.Detail, "swap the ends") {
				t.Errorf("%s: no advice in %q", quantity, e.Detail)
			}
		}
	}
	_, err := flow.RegimeOf(flow.RegimeInput{Velocity: -1, HydraulicDiameter: 1, KinematicViscosity: 1})
	wantError(t, err, calc.ErrDomain, "velocity")
}

func TestFlowBoundsBelongToTheRangeAndTheNextNumberDoesNot(t *testing.T) {
	for by, most := range map[flow.Measure]float64{flow.ByVolume: 1e12, flow.ByMass: 1e15, flow.ByVelocity: 1e6} {
		for _, v := range []float64{0, most} {
			if _, err := flow.StateOf(flow.Rate{By: by, Value: v}, 1, 1); err != nil {
				t.Errorf("measure %d, %g: %v", by, v, err)
			}
		}
		for _, v := range []float64{math.Nextafter(most, math.Inf(1)), math.Inf(1), math.NaN()} {
			_, err := flow.StateOf(flow.Rate{By: by, Value: v}, 1, 1)
			if !errors.Is(err, calc.ErrDomain) {
				t.Errorf("measure %d, %g: got %v", by, v, err)
			}
		}
	}
}

func TestImpossibleSurroundingsOfAFlowAreRefused(t *testing.T) {
	rate := flow.Rate{By: flow.ByVolume, Value: 1}
	for _, v := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		_, err := flow.StateOf(rate, v, 1)
		wantError(t, err, calc.ErrDomain, "flow_area")
		_, err = flow.StateOf(rate, 1, v)
		wantError(t, err, calc.ErrDomain, "density")
	}
	for _, by := range []flow.Measure{0, 4} {
		_, err := flow.StateOf(flow.Rate{By: by, Value: 1}, 1, 1)
		wantError(t, err, calc.ErrDomain, "flow")
	}
	_, err := flow.StateOf(rate, 5e-324, 1)
	wantError(t, err, calc.ErrNonFinite, "velocity")
}

func TestNamesAreThoseOfTheContract(t *testing.T) {
	for got, want := range map[string]string{
		flow.AtRest.String(): "at_rest", flow.Laminar.String(): "laminar", flow.Transitional.String(): "transitional", flow.Turbulent.String(): "turbulent",
		flow.Ordinary.String(): "ordinary", flow.Disturbed.String(): "disturbed", flow.Calm.String(): "calm",
		flow.Name(9).String(): "", flow.Approach(9).String(): "unknown",
	} {
		if got != want {
			t.Errorf("got %q, want %q", got, want)
		}
	}
}

func TestFlowAllocatesNothing(t *testing.T) {
	if n := testing.AllocsPerRun(100, func() {
		s, _ := flow.StateOf(flow.Rate{By: flow.ByMass, Value: 3}, 0.01, 1000)
		_, _ = flow.RegimeOf(flow.RegimeInput{Velocity: s.Velocity, HydraulicDiameter: 0.01, KinematicViscosity: 1e-6})
	}); n != 0 {
		t.Errorf("%g allocations", n)
	}
}
