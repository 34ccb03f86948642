package flow_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/flow"

	"pgregory.net/rapid"
)

// at is the regime of a round pipe with diameter and viscosity 1, where the
// velocity is the Reynolds number.
func at(t rapid.TB, reynolds float64, criteria flow.Criteria) flow.Regime {
	t.Helper()
	r, err := flow.RegimeOf(flow.RegimeInput{Velocity: reynolds, HydraulicDiameter: 1, KinematicViscosity: 1, Round: true, Criteria: criteria})
	if err != nil {
		t.Fatalf("Re %g: %v", reynolds, err)
	}
	return r
}

func TestRegimeAndWhatIsPossible(t *testing.T) {
	below := func(v float64) float64 { return math.Nextafter(v, 0) }
	above := func(v float64) float64 { return math.Nextafter(v, math.Inf(1)) }
	ordinary, disturbed := flow.Criteria{}, flow.Criteria{Approach: flow.Disturbed}
	calm := flow.Criteria{Approach: flow.Calm, CalmTo: 20000}
	own := flow.Criteria{Lower: calc.Some(1000), Upper: calc.Some(1000)}
	const laminar, turbulent = true, true
	for _, c := range []struct {
		when      string
		criteria  flow.Criteria
		reynolds  float64
		name      string
		laminar   bool
		turbulent bool
	}{
		{"at rest", ordinary, 0, "at_rest", false, false},
		{"at rest, negative zero", ordinary, math.Copysign(0, -1), "at_rest", false, false},
		{"creeping", ordinary, 1e-99, "laminar", laminar, false},
		{"just below the lower limit", ordinary, below(2300), "laminar", laminar, false},
		{"at the lower limit", ordinary, 2300, "transitional", laminar, turbulent},
		{"just above the lower limit", ordinary, above(2300), "transitional", laminar, turbulent},
		{"just below the upper limit", ordinary, below(4000), "transitional", laminar, turbulent},
		{"at the upper limit", ordinary, 4000, "transitional", laminar, turbulent},
		{"just above the upper limit", ordinary, above(4000), "turbulent", false, turbulent},
		{"disturbed, just below its lower limit", disturbed, below(2040), "laminar", laminar, false},
		{"disturbed, at its lower limit", disturbed, 2040, "transitional", laminar, turbulent},
		{"disturbed, above the band", disturbed, above(4000), "turbulent", false, turbulent},
		{"disturbed with a lower limit of its own", flow.Criteria{Approach: flow.Disturbed, Lower: calc.Some(1800)}, 1800, "transitional", laminar, turbulent},
		{"calm, below the band", calm, below(2300), "laminar", laminar, false},
		{"calm, in the band", calm, 3000, "transitional", laminar, turbulent},
		{"calm, above the band", calm, 9000, "turbulent", laminar, turbulent},
		{"calm, at its end", calm, 20000, "turbulent", laminar, turbulent},
		{"calm, just above its end", calm, above(20000), "turbulent", false, turbulent},
		{"calm with an end inside the band", flow.Criteria{Approach: flow.Calm, CalmTo: 2500}, 3000, "transitional", laminar, turbulent},
		{"limits that coincide, below", own, below(1000), "laminar", laminar, false},
		{"limits that coincide, at them", own, 1000, "transitional", laminar, turbulent},
		{"limits that coincide, above", own, above(1000), "turbulent", false, turbulent},
	} {
		t.Run(c.when, func(t *testing.T) {
			r := at(t, c.reynolds, c.criteria)
			if r.Name.String() != c.name || r.CanBeLaminar != c.laminar || r.CanBeTurbulent != c.turbulent {
				t.Errorf("Re %.17g: got %v, laminar %v, turbulent %v; want %s, %v, %v", c.reynolds, r.Name, r.CanBeLaminar, r.CanBeTurbulent, c.name, c.laminar, c.turbulent)
			}
			if r.EntryLength.Valid != (c.laminar || c.turbulent) || r.EntryIfLaminar.Valid != (c.laminar && c.turbulent) || r.EntryIfTurbulent.Valid != r.EntryIfLaminar.Valid {
				t.Errorf("entry lengths do not go with the regimes: %+v", r)
			}
		})
	}
}

func TestLimitsUsedAreReported(t *testing.T) {
	for _, c := range []struct {
		criteria     flow.Criteria
		lower, upper float64
	}{
		{flow.Criteria{}, 2300, 4000},
		{flow.Criteria{Approach: flow.Disturbed}, 2040, 4000},
		{flow.Criteria{Approach: flow.Calm, CalmTo: 1e4}, 2300, 4000},
		{flow.Criteria{Lower: calc.Some(1), Upper: calc.Some(1e6)}, 1, 1e6},
	} {
		if r := at(t, 500, c.criteria); r.Lower != c.lower || r.Upper != c.upper {
			t.Errorf("%+v: got %g to %g, want %g to %g", c.criteria, r.Lower, r.Upper, c.lower, c.upper)
		}
	}
}

func TestTheRoundPipeBandIsMarkedAsAssumedForOtherSections(t *testing.T) {
	for _, c := range []struct {
		round    bool
		criteria flow.Criteria
		want     bool
	}{
		{true, flow.Criteria{}, false},
		{false, flow.Criteria{}, true},
		{false, flow.Criteria{Lower: calc.Some(2000)}, true},
		{false, flow.Criteria{Lower: calc.Some(2000), Upper: calc.Some(3000)}, false},
	} {
		r, err := flow.RegimeOf(flow.RegimeInput{Velocity: 1, HydraulicDiameter: 1, KinematicViscosity: 1, Round: c.round, Criteria: c.criteria})
		if err != nil || r.AssumedForSection != c.want {
			t.Errorf("round %v, %+v: got %v, %v; want %v", c.round, c.criteria, r.AssumedForSection, err, c.want)
		}
	}
}

func TestImpossibleCriteriaAreRefused(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		when     string
		criteria flow.Criteria
		quantity string
	}{
		{"lower above upper", flow.Criteria{Lower: calc.Some(math.Nextafter(3000, 4000)), Upper: calc.Some(3000)}, "lower_critical_reynolds"},
		{"lower above the default upper", flow.Criteria{Lower: calc.Some(5000)}, "lower_critical_reynolds"},
		{"upper below the default lower", flow.Criteria{Upper: calc.Some(2000)}, "upper_critical_reynolds"},
		{"lower below its bound", flow.Criteria{Lower: calc.Some(math.Nextafter(1, 0))}, "lower_critical_reynolds"},
		{"upper above its bound", flow.Criteria{Upper: calc.Some(math.Nextafter(1e6, 2e6))}, "upper_critical_reynolds"},
		{"lower not a number", flow.Criteria{Lower: calc.Some(nan)}, "lower_critical_reynolds"},
		{"calm without its end", flow.Criteria{Approach: flow.Calm}, "calm_laminar_to_reynolds"},
		{"end of calm without calm", flow.Criteria{CalmTo: 9000}, "calm_laminar_to_reynolds"},
		{"end of calm with disturbed", flow.Criteria{Approach: flow.Disturbed, CalmTo: 9000}, "calm_laminar_to_reynolds"},
		{"end of calm not a number", flow.Criteria{CalmTo: nan}, "calm_laminar_to_reynolds"},
		{"end of calm above its bound", flow.Criteria{Approach: flow.Calm, CalmTo: math.Nextafter(1e6, 2e6)}, "calm_laminar_to_reynolds"},
		{"unknown approach", flow.Criteria{Approach: 3}, "approach_flow"},
	} {
		t.Run(c.when, func(t *testing.T) {
			_, err := flow.RegimeOf(flow.RegimeInput{Velocity: 1, HydraulicDiameter: 1, KinematicViscosity: 1, Criteria: c.criteria})
			wantError(t, err, calc.ErrDomain, c.quantity)
		})
	}
}

// wantError checks the kind and the quantity of a refusal.
func wantError(t *testing.T, err error, kind error, quantity string) {
	t.Helper()
	var e *calc.Error
	if !errors.As(err, &e) || e.Kind != kind || e.Quantity != quantity {
		t.Errorf("got error %v, want %v of %s", err, kind, quantity)
	}
}

func TestAFlowTooSmallForItsFactorIsRefused(t *testing.T) {
	_, err := flow.RegimeOf(flow.RegimeInput{Velocity: math.Nextafter(1e-100, 0), HydraulicDiameter: 1, KinematicViscosity: 1})
	wantError(t, err, calc.ErrRange, "velocity")
	if r := at(t, 1e-100, flow.Criteria{}); r.Name != flow.Laminar {
		t.Errorf("at the bound: %v", r.Name)
	}
}

// The regime depends on the Reynolds number alone, whatever it is made of.
func TestRegimeDependsOnTheReynoldsNumberAlone(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		re := math.Pow(10, rapid.Float64Range(-3, 9).Draw(t, "log Re"))
		two := math.Pow(2, float64(rapid.IntRange(-20, 20).Draw(t, "diameter")))
		four := math.Pow(2, float64(rapid.IntRange(-20, 20).Draw(t, "viscosity")))
		plain := at(t, re, flow.Criteria{})
		scaled, err := flow.RegimeOf(flow.RegimeInput{Velocity: re * four / two, HydraulicDiameter: two, KinematicViscosity: four, Round: true})
		if err != nil {
			t.Fatal(err)
		}
		if scaled.EntryLength.Value != plain.EntryLength.Value*two {
			t.Errorf("entry length %g, want %g diameters", scaled.EntryLength.Value, plain.EntryLength.Value)
		}
		plain.EntryLength, plain.EntryIfLaminar, plain.EntryIfTurbulent = scaled.EntryLength, scaled.EntryIfLaminar, scaled.EntryIfTurbulent
		if scaled != plain {
			t.Errorf("got %+v, want %+v", scaled, plain)
		}
	})
}
