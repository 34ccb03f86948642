package friction_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/friction"
)

// pipe is water-like flow in a round pipe of 0.1 m at the Reynolds number.
func pipe(t testing.TB, reynolds float64, criteria flow.Criteria) friction.Input {
	t.Helper()
	in := friction.Input{Density: 1000, KinematicViscosity: 1e-6, HydraulicDiameter: 0.1, Roughness: 5e-5,
		LaminarConstant: calc.Some(64), LaminarEquivalent: calc.Some(0.1), Velocity: reynolds * 1e-6 / 0.1}
	regime, err := flow.RegimeOf(flow.RegimeInput{Velocity: in.Velocity, HydraulicDiameter: in.HydraulicDiameter,
		KinematicViscosity: in.KinematicViscosity, Round: true, Criteria: criteria})
	if err != nil {
		t.Fatal(err)
	}
	in.Regime = regime
	return in
}

func of(t testing.TB, in friction.Input) friction.Result {
	t.Helper()
	r, err := friction.Of(in)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func wantClose(t *testing.T, what string, got, want, bound float64) {
	t.Helper()
	if !(math.Abs(got-want) <= bound*math.Abs(want)) {
		t.Errorf("%s: got %.17g, want %.17g, bound %g", what, got, want, bound)
	}
}

func TestLaminarFrictionUsesTheConstantOfTheSection(t *testing.T) {
	in := pipe(t, 1000, flow.Criteria{})
	in.LaminarConstant = calc.Some(96) // parallel plates
	r := of(t, in)
	wantClose(t, "darcy_friction_factor", r.Darcy.Value, 0.096, 1e-15)
	wantClose(t, "fanning_friction_factor", r.Fanning.Value, 0.024, 1e-15)
	if r.Law != friction.LaminarLaw || r.IfLaminar.Valid || r.IfTurbulent.Valid || r.RoughnessRegime != 0 || r.LawBelowRange {
		t.Errorf("a branch that is not possible stands: %+v", r)
	}
}

func TestLaminarFrictionOfAnUnknownSectionIsRefused(t *testing.T) {
	for _, re := range []float64{1000, 3000} {
		in := pipe(t, re, flow.Criteria{})
		in.LaminarConstant = calc.Optional{}
		_, err := friction.Of(in)
		wantError(t, err, calc.ErrUnknown, "laminar_constant")
	}
	in := pipe(t, 5000, flow.Criteria{})
	in.LaminarConstant = calc.Optional{}
	of(t, in) // certainly turbulent: the constant is not needed
}

func TestThePlainFactorIsTheLargerBranch(t *testing.T) {
	r := of(t, pipe(t, 3000, flow.Criteria{}))
	turbulent := colebrook(t, friction.Point{Reynolds: 3000, RelativeRoughness: 5e-4})
	wantClose(t, "if laminar", r.IfLaminar.Value, 64.0/3000, 1e-14)
	wantClose(t, "if turbulent", r.IfTurbulent.Value, turbulent, 1e-14)
	if r.Darcy != r.IfTurbulent || r.Law != friction.ColebrookWhiteLaw || r.RoughnessRegime != friction.HydraulicallySmooth {
		t.Errorf("Re 3000: got %+v", r)
	}
	// A band of the caller's own, where the laminar branch is the larger one.
	r = of(t, pipe(t, 300, flow.Criteria{Lower: calc.Some(200), Upper: calc.Some(400)}))
	wantClose(t, "if laminar", r.IfLaminar.Value, 64.0/300, 1e-14)
	if r.Darcy != r.IfLaminar || r.Law != friction.LaminarLaw || r.RoughnessRegime != 0 || !(r.IfTurbulent.Value < r.IfLaminar.Value) {
		t.Errorf("Re 300: got %+v", r)
	}
}

func TestCalmFlowKeepsBothBranchesAboveTheBand(t *testing.T) {
	r := of(t, pipe(t, 9000, flow.Criteria{Approach: flow.Calm, CalmTo: 20000}))
	if !r.IfLaminar.Valid || !r.IfTurbulent.Valid || r.Darcy != r.IfTurbulent {
		t.Errorf("got %+v", r)
	}
}

func TestColebrookWhiteStandsInBelowTheRangeOfTheLaw(t *testing.T) {
	for _, l := range friction.Laws() {
		in := pipe(t, 3000, flow.Criteria{})
		in.Law = l.Law
		r := of(t, in)
		if r.LawBelowRange != (l.Law != friction.ColebrookWhiteLaw) || r.Law != friction.ColebrookWhiteLaw {
			t.Errorf("%v in the band: got law %v, below range %v", l.Law, r.Law, r.LawBelowRange)
		}
	}
	// Certainly turbulent below the range: nothing stands in.
	in := pipe(t, 3000, flow.Criteria{Lower: calc.Some(1000), Upper: calc.Some(2000)})
	in.Law = friction.HaalandLaw
	_, err := friction.Of(in)
	wantError(t, err, calc.ErrRange, "friction_law")
	// Above the range, and in range.
	in = pipe(t, 2e8, flow.Criteria{})
	in.Law = friction.HaalandLaw
	_, err = friction.Of(in)
	wantError(t, err, calc.ErrRange, "friction_law")
	in = pipe(t, 1e5, flow.Criteria{})
	in.Law = friction.HaalandLaw
	if r := of(t, in); r.Law != friction.HaalandLaw || r.LawBelowRange {
		t.Errorf("in range: %+v", r)
	}
}

func TestTheLaminarEquivalentDiameterActsInsideTheTurbulentLawAlone(t *testing.T) {
	in := pipe(t, 3000, flow.Criteria{})
	in.DiameterRule, in.LaminarEquivalent = friction.LaminarEquivalentDiameter, calc.Some(0.08)
	r := of(t, in)
	wantClose(t, "if laminar", r.IfLaminar.Value, 64.0/3000, 1e-14)
	wantClose(t, "if turbulent", r.IfTurbulent.Value, colebrook(t, friction.Point{Reynolds: 2400, RelativeRoughness: 5e-5 / 0.08}), 1e-14)
	wantClose(t, "relative_roughness", r.RelativeRoughness, 5e-4, 1e-15)
	in.LaminarEquivalent = calc.Optional{}
	_, err := friction.Of(in)
	wantError(t, err, calc.ErrUnknown, "friction_diameter")
	in = pipe(t, 1000, flow.Criteria{})
	in.DiameterRule, in.LaminarEquivalent = friction.LaminarEquivalentDiameter, calc.Optional{}
	of(t, in) // laminar flow does not ask for it
}

func TestWallShearBalancesThePressureOnThePipe(t *testing.T) {
	in := pipe(t, 1e5, flow.Criteria{})
	r := of(t, in)
	drop := r.Darcy.Value / 0.1 * 1000 * in.Velocity * in.Velocity / 2 // of one metre
	wantClose(t, "wall_shear_stress", r.WallShear*math.Pi*0.1, drop*math.Pi*0.1*0.1/4, 1e-14)
	wantClose(t, "friction_velocity", r.FrictionVelocity, math.Sqrt(r.WallShear/1000), 1e-14)
	wantClose(t, "roughness_reynolds", r.RoughnessReynolds, r.FrictionVelocity*5e-5/1e-6, 1e-14)
}

func TestAtRestThereIsNoFriction(t *testing.T) {
	in := pipe(t, 0, flow.Criteria{})
	in.LaminarConstant = calc.Optional{} // nor is anything unknown
	r := of(t, in)
	if r.Darcy.Valid || r.Fanning.Valid || r.WallShear != 0 || r.FrictionVelocity != 0 || r.RoughnessReynolds != 0 || r.RoughnessRegime != 0 {
		t.Errorf("got %+v", r)
	}
	wantClose(t, "relative_roughness", r.RelativeRoughness, 5e-4, 1e-15)
}

func TestATurbulentWallRougherThanTheChartsIsRefusedInMetres(t *testing.T) {
	in := pipe(t, 1e5, flow.Criteria{})
	in.Roughness = 0.05 * 0.1
	of(t, in)
	in.Roughness = math.Nextafter(in.Roughness, 1)
	_, err := friction.Of(in)
	wantError(t, err, calc.ErrRange, "roughness")
	var e *calc.Error
	if errors.As(err, &e) {
		wantClose(t, "roughness refused", e.Value, in.Roughness, 0)
		wantClose(t, "most roughness", e.Max, 0.005, 1e-15)
	}
	in = pipe(t, 1000, flow.Criteria{})
	in.Roughness = 0.02
	of(t, in) // in laminar flow the roughness does not act
}

func TestRoughnessRegimeChangesAtFiveAndSeventy(t *testing.T) {
	const re = 1e6
	for _, c := range []struct {
		plus float64
		want string
	}{
		{5 * (1 - 1e-9), "smooth"}, {5 * (1 + 1e-9), "transitional"}, {70 * (1 - 1e-9), "transitional"}, {70 * (1 + 1e-9), "rough"},
	} {
		in := pipe(t, re, flow.Criteria{})
		for range 60 { // find the roughness by repetition: f depends on it weakly
			in.Roughness *= c.plus / of(t, in).RoughnessReynolds
		}
		if r := of(t, in); r.RoughnessRegime.String() != c.want {
			t.Errorf("roughness Reynolds number %.12g: got %v, want %s", r.RoughnessReynolds, r.RoughnessRegime, c.want)
		}
	}
}

func TestFrictionAllocatesNothing(t *testing.T) {
	for _, re := range []float64{1000, 3000, 1e5} {
		in := pipe(t, re, flow.Criteria{})
		if n := testing.AllocsPerRun(100, func() { _, _ = friction.Of(in) }); n != 0 {
			t.Errorf("Re %g: %g allocations", re, n)
		}
	}
}
