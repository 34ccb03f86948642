package fluid_test

import (
	"errors"
	"fmt"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/fluid"

	"pgregory.net/rapid"
)

func dynamic(density, viscosity float64) fluid.GivenInput {
	return fluid.GivenInput{Density: density, DynamicViscosity: calc.Some(viscosity)}
}

func kinematic(density, viscosity float64) fluid.GivenInput {
	return fluid.GivenInput{Density: density, KinematicViscosity: calc.Some(viscosity)}
}

func TestEitherViscosityGivesTheOther(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		rho := math.Pow(10, rapid.Float64Range(-3, 5).Draw(t, "log density"))
		mu := math.Pow(10, rapid.Float64Range(-9, 3).Draw(t, "log viscosity"))
		in := dynamic(rho, mu)
		in.Phase = fluid.Liquid
		first, err := fluid.Given(in)
		if err != nil {
			t.Fatal(err)
		}
		in = kinematic(rho, first.KinematicViscosity)
		in.Phase = fluid.Liquid
		second, err := fluid.Given(in)
		if err != nil {
			t.Fatal(err)
		}
		if first.DynamicViscosity != mu || math.Abs(second.DynamicViscosity/mu-1) > 5e-16 {
			t.Errorf("viscosity %v comes back as %v", mu, second.DynamicViscosity)
		}
	})
}

func TestPhaseByDensityOrAsSaid(t *testing.T) {
	for name, c := range map[string]struct {
		density float64
		said    fluid.Phase
		want    fluid.Phase // zero: refused
	}{
		"just above 100":   {math.Nextafter(100, 200), 0, fluid.Liquid},
		"100 itself":       {100, 0, 0},
		"between":          {75, 0, 0},
		"50 itself":        {50, 0, 0},
		"just below 50":    {math.Nextafter(50, 0), 0, fluid.Gas},
		"between, liquid":  {75, fluid.Liquid, fluid.Liquid},
		"between, gas":     {75, fluid.Gas, fluid.Gas},
		"a dense gas":      {700, fluid.Gas, fluid.Gas},
		"a light liquid":   {1.2, fluid.Liquid, fluid.Liquid},
		"an unknown phase": {1000, 3, 0},
	} {
		t.Run(name, func(t *testing.T) {
			in := dynamic(c.density, 1e-3)
			in.Phase = c.said
			p, err := fluid.Given(in)
			if c.want != 0 {
				if err != nil || p.Phase != c.want {
					t.Errorf("got %v and %v, want %v", p.Phase, err, c.want)
				}
				return
			}
			var e *calc.Error
			if !errors.As(err, &e) || e.Quantity != "phase" || e.Detail == "" || p != (fluid.Properties{}) {
				t.Errorf("got %+v and %v, want a refusal of the phase", p, err)
			}
		})
	}
}

func TestWhatIsGivenIsKept(t *testing.T) {
	in := kinematic(998.2, 1.004e-6)
	in.VapourPressure = calc.Some(2339)
	p, err := fluid.Given(in)
	if err != nil || p.Density != 998.2 || p.KinematicViscosity != 1.004e-6 || p.VapourPressure != calc.Some(2339) || p.SoundSpeed.Valid || p.Source != "given" {
		t.Errorf("got %+v, %v", p, err)
	}
}

func TestRefusalsPointAtTheirField(t *testing.T) {
	both := dynamic(1000, 1e-3)
	both.KinematicViscosity = calc.Some(1e-6)
	vapour := dynamic(1000, 1e-3)
	vapour.VapourPressure = calc.Some(-1)
	for name, c := range map[string]struct {
		in       fluid.GivenInput
		quantity string
	}{
		"density zero":               {dynamic(0, 1e-3), "density"},
		"density no number":          {dynamic(math.NaN(), 1e-3), "density"},
		"no viscosity":               {fluid.GivenInput{Density: 1000}, "dynamic_viscosity"},
		"both viscosities":           {both, "kinematic_viscosity"},
		"dynamic negative":           {dynamic(1000, -1), "dynamic_viscosity"},
		"kinematic infinite":         {kinematic(1000, math.Inf(1)), "kinematic_viscosity"},
		"kinematic follows too low":  {dynamic(1e6, 1e-12), "dynamic_viscosity"},
		"kinematic follows too high": {dynamic(1e-9, 1e9), "dynamic_viscosity"},
		"vapour pressure negative":   {vapour, "vapour_pressure"},
	} {
		t.Run(name, func(t *testing.T) {
			p, err := fluid.Given(c.in)
			var e *calc.Error
			if !errors.As(err, &e) || e.Quantity != c.quantity || !errors.Is(err, calc.ErrDomain) || p != (fluid.Properties{}) {
				t.Errorf("got %+v and %v, want a refusal at %s", p, err, c.quantity)
			}
		})
	}
}

// Every number is answered with finite properties or refused without any.
func TestGivenAnswersOrRefusesAnyNumber(t *testing.T) {
	values := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, math.Copysign(0, -1), -1, 5e-324, math.MaxFloat64, 1, 1000}
	for _, in := range []calc.Input{calc.Density, calc.DynamicViscosity, calc.KinematicViscosity, calc.VapourPressure} {
		for _, bound := range []float64{in.Bound().Min, in.Bound().Max} {
			values = append(values, math.Nextafter(bound, math.Inf(-1)), bound, math.Nextafter(bound, math.Inf(1)))
		}
	}
	answered := 0
	for _, rho := range values {
		for _, viscosity := range values {
			for _, vapour := range values {
				for _, in := range []fluid.GivenInput{dynamic(rho, viscosity), kinematic(rho, viscosity)} {
					in.VapourPressure, in.Phase = calc.Some(vapour), fluid.Gas
					p, err := fluid.Given(in)
					if err == nil {
						answered++
					}
					var e *calc.Error
					if err != nil && (!errors.As(err, &e) || e.Quantity == "" || p != (fluid.Properties{})) {
						t.Fatalf("%+v: got %+v and %v", in, p, err)
					}
					for _, v := range []float64{p.Density, p.DynamicViscosity, p.KinematicViscosity, p.VapourPressure.Value} {
						if !calc.Finite(v) {
							t.Fatalf("%+v: got %+v", in, p)
						}
					}
				}
			}
		}
	}
	if answered < 500 {
		t.Errorf("only %d fluids were answered", answered)
	}
}

func TestPhaseHasItsNameInTheContract(t *testing.T) {
	for phase, want := range map[fluid.Phase]string{0: "", fluid.Liquid: "liquid", fluid.Gas: "gas", 9: ""} {
		if got := phase.String(); got != want {
			t.Errorf("phase %d is %q, want %q", phase, got, want)
		}
	}
}

func ExampleGiven() {
	p, err := fluid.Given(fluid.GivenInput{Density: 800, DynamicViscosity: calc.Some(0.004)})
	fmt.Println(p.KinematicViscosity, p.Phase, err)
	// Output: 5e-06 liquid <nil>
}
